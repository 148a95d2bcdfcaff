package reports

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"time"

	"phaselag/data"
	"phaselag/fitting"
	"phaselag/models"
	"phaselag/reports/figure"
)

// Caution stands on every datasheet.
const Caution = "The numbers hold for the tested batch, in the state and at the conditions named, and within the domain named. They are no specification of other batches or parts. Design of supports that people depend on stays with a qualified engineer and the codes in force."

// Datasheet writes the datasheet as a document, for PDF and HTML. The date of
// the document is date, or where that is zero the last day of testing. A nil set is
// the program's own choice of sections, units and paper.
func Datasheet(r *fitting.Result, date time.Time, set *data.Sheet) figure.Document {
	if set == nil {
		set = &data.Sheet{}
	}
	h := r.Campaign
	name := h.Compound.Name
	if name == "" {
		name = h.Name
	}
	if date.IsZero() {
		date, _ = time.Parse("2006-01-02", h.Compound.Tested)
	}
	d := figure.Document{
		Title:    name + ": dynamic properties",
		Subtitle: h.Name,
		Running:  strings.Trim(name+", batch "+h.Compound.Batch, ", "),
		Author:   h.Laboratory, Subject: "Dynamic properties of a vulcanised compound", Date: date, Logo: flat(set.Logo),
	}
	if h.Compound.Batch == "" {
		d.Running = name
	}
	if set.Title != "" {
		d.Title = set.Title
	}
	if set.Laboratory != "" {
		d.Author, _, _ = strings.Cut(set.Laboratory, "\n")
	}
	if set.Letter {
		d.Paper = figure.Letter
	}
	d.Lead = lead(r)
	sections := sheetSections(r, set)
	order := set.Sections
	if order == nil {
		order = data.SheetSections
	}
	for _, key := range order {
		if s, ok := sections[key]; ok && len(s.Blocks) > 0 {
			d.Sections = append(d.Sections, s)
		}
	}
	return d
}

// sheetSections makes every section that the result has something for, by the names
// of data.SheetSections.
func sheetSections(r *fitting.Result, set *data.Sheet) map[string]figure.Section {
	figs := map[string]figure.Picture{}
	for _, f := range figures(r) {
		figs[f.name] = figure.Picture{Figure: f.figure, Caption: f.caption}
	}
	pictures := func(names ...string) []figure.Block {
		var out []figure.Block
		for _, name := range names {
			if p, ok := figs[name]; ok {
				out = append(out, p)
			}
		}
		return out
	}
	out := map[string]figure.Section{
		"identity":          {Heading: "Identity, state and conditions", Blocks: identity(r, set)},
		"figures":           {Heading: "Figures", Blocks: pictures("isotherms", "master-curve", "nomogram", "wicket", "phase-against-modulus", "relaxation")},
		"strain dependence": {Heading: "Strain dependence", Blocks: pictures("strain-dependence")},
		"method":            {Heading: "Method", Blocks: method(r, set)},
		"typical values":    typical(r, set),
		"findings":          {Heading: "Findings", Blocks: findingBlocks(r.Findings)},
		"assumptions":       {Heading: "Assumptions", Blocks: assumptionBlocks(r)},
		"provenance":        {Heading: "Provenance", Blocks: provenance(r)},
		"signatures":        {Heading: "Signatures", Blocks: signatures(set)},
	}
	if r.Compound != nil {
		out["properties"], out["constants"] = properties(r, set), constants(r)
	}
	if blocks := append(pictures("temperature-dependence", "temperature-curves"), transitionBlocks(r.Compound)...); len(blocks) > 0 || len(r.Fixed) > 0 {
		if r.Compound == nil {
			blocks = append(blocks, figure.GridOf(FixedFrequency(r), "Means at one temperature and frequency, as measured"))
		}
		out["temperature dependence"] = figure.Section{Heading: "Temperature dependence", Blocks: blocks}
	}
	if len(r.Shifts) > 0 {
		out["shift factors"] = figure.Section{Heading: "Shift factors", Blocks: append(pictures("shift-factors"), shiftBlocks(r)...)}
	}
	if list := NotDetermined(r); len(list) > 0 {
		out["not told"] = figure.Section{Heading: "What the measurements do not tell", Blocks: []figure.Block{figure.List{Items: list}}}
	}
	return out
}

// lead says in front what matters most.
func lead(r *fitting.Result) []figure.Block {
	blocks := []figure.Block{figure.Callout{Grade: figure.Note, Title: "Caution", Text: Caution}}
	if r.Compound == nil {
		return append(blocks, figure.Callout{Grade: figure.Severe, Title: "No compound model", Text: "The measurements do not support a compound model; what they do support is reported below, and the findings say why."})
	}
	switch r.Compound.Fit.Superposition.Holds {
	case models.HoldsNo:
		blocks = append(blocks, figure.Callout{Grade: figure.Severe, Title: "Time–temperature superposition does not hold", Text: verdictText(r)})
	case models.HoldsYes:
		blocks = append(blocks, figure.Paragraph{Lead: "Superposition holds.", Text: verdictText(r)})
	default:
		if len(r.Isotherms) > 0 {
			blocks = append(blocks, figure.Paragraph{Lead: "Superposition.", Text: verdictText(r)})
		}
	}
	if lead, text := causalityText(r); lead != "" {
		blocks = append(blocks, figure.Paragraph{Lead: lead, Text: text})
	}
	return blocks
}

// verdictText says how well one curve serves, in degrees and percent.
func verdictText(r *fitting.Result) string {
	m := r.Common
	p := "p " + probability(m)
	return fmt.Sprintf("The common curve misses the phase by %.2g° and the magnitude by %.2g %% rms; curves of their own by %.2g° and %.2g %% (%s).",
		float64(m.PhaseDeg), float64(m.Percent), float64(m.PhaseFloorDeg), float64(m.PercentFloor), p)
}

// probability prints p, or the bound where no draw reached the measurement.
func probability(m fitting.Misfit) string {
	if least := 1 / float64(m.Replicates+1); m.Replicates > 0 && float64(m.P) <= least*1.0001 {
		return fmt.Sprintf("≤ %.2g", least)
	}
	return fmt.Sprintf("= %.2g", float64(m.P))
}

func stated(s string) string {
	if s == "" {
		return "not stated"
	}
	return s
}

func statedNumber(x float64, format string) string {
	if math.IsNaN(x) {
		return "not stated"
	}
	return fmt.Sprintf(format, x)
}

func identity(r *fitting.Result, set *data.Sheet) []figure.Block {
	h, c := r.Campaign, r.Campaign.Compound
	laboratory := stated(h.Laboratory)
	if set.Laboratory != "" {
		laboratory = strings.Join(strings.Fields(strings.ReplaceAll(strings.TrimSpace(set.Laboratory), "\n", ", ")), " ")
	}
	facts := []figure.Fact{
		{Name: "Compound", Value: stated(c.Name)}, {Name: "Polymer (ISO 1629)", Value: stated(c.Polymer)}, {Name: "Batch", Value: stated(c.Batch)},
		{Name: "Hardness", Value: stated(c.Hardness)}, {Name: "Density", Value: statedNumber(float64(c.Density), "%.4g g/cm³")},
		{Name: "Laboratory", Value: laboratory}, {Name: "Operator", Value: stated(h.Operator)},
		{Name: "Vulcanised", Value: stated(h.Vulcanised)}, {Name: "Tested", Value: stated(c.Tested)},
	}
	for _, v := range []figure.Fact{{Name: "Customer", Value: set.Customer}, {Name: "Order", Value: set.Order}} {
		if v.Value != "" {
			facts = append(facts, v)
		}
	}
	modulus := "shear modulus G"
	if h.Modulus == string(data.Young) {
		modulus = "Young’s modulus E"
	}
	facts = append(facts, figure.Fact{Name: "Modulus", Value: modulus + "; strains are single amplitudes (zero to peak)"})
	if k := r.Compound; k != nil {
		facts = append(facts,
			figure.Fact{Name: "Deformation", Value: stated(k.State.Deformation)}, figure.Fact{Name: "Conditioning", Value: stated(k.State.Conditioning)},
			figure.Fact{Name: "Static strain", Value: statedNumber(float64(k.State.StaticPercent), "%.3g %%")},
			figure.Fact{Name: "Domain", Value: domainText(k)})
	}
	grid := figure.Grid{Caption: "Tests", Columns: []figure.GridColumn{
		{Heading: "Test"}, {Heading: "Kind"}, {Heading: "Specimen"}, {Heading: "Temperature", Unit: "°C"}, {Heading: "Frequency", Unit: "Hz"}, {Heading: "Strain", Unit: "%"}, {Heading: "Points used"},
	}}
	for _, t := range r.Tests {
		specimen := t.Specimen
		if t.Mounting != "" && t.Mounting != "1" {
			specimen += ", mounting " + t.Mounting
		}
		grid.Rows = append(grid.Rows, []string{t.Name, t.Kind, specimen, rangeText(t.Temperature[0], t.Temperature[1]), rangeText(t.Frequency[0], t.Frequency[1]), rangeText(t.Strain[0], t.Strain[1]), fmt.Sprintf("%d of %d", t.Used, t.Points)})
	}
	return []figure.Block{figure.Facts{Items: facts}, grid}
}

func rangeText[T ~float64](a, b T) string {
	if math.IsNaN(float64(a)) {
		return "–"
	}
	lo, hi := short(float64(a)), short(float64(b))
	if lo == hi {
		return lo
	}
	return lo + " to " + hi
}

// short is a number with at most four significant digits for running text.
func short(x float64) string {
	return figure.Readable(strconv.FormatFloat(roundTo(x, 4), 'g', -1, 64))
}

func roundTo(x float64, digits int) float64 {
	v, err := strconv.ParseFloat(strconv.FormatFloat(x, 'g', digits, 64), 64)
	if err != nil {
		return x
	}
	return v
}

func domainText(c *models.Compound) string {
	d := c.Domain
	text := fmt.Sprintf("%s to %s °C; %s to %s Hz reduced to %s °C", short(d.Temperature[0]), short(d.Temperature[1]), short(d.ReducedFrequency[0]), short(d.ReducedFrequency[1]), short(c.ReferenceTempC))
	if d.Strain == nil {
		return text + "; strain amplitude not stated"
	}
	text += fmt.Sprintf("; strain amplitude %s to %s %%", short(d.Strain[0]), short(d.Strain[1]))
	if m := d.AmplitudeMeasuredAt; m != nil {
		text += fmt.Sprintf(" (above %s %% between %s and %s °C only)", short(float64(d.OwnStrain)), short(m.Temperature[0]-10), short(m.Temperature[1]+10))
	}
	return text
}

func properties(r *fitting.Result, set *data.Sheet) figure.Section {
	t := propertiesAt(r, sheetFrequencies)
	caption := "Dynamic properties at standard temperatures (ISO 23529, ASTM D1349) inside the domain, with half-widths of 95 % intervals"
	// The modulus, the strain and the domain are the same in every row.
	drop := map[string]bool{"modulus": true, "strain_amplitude_percent": true, "domain": true}
	var outside []string
	if len(set.Conditions) > 0 {
		t, outside = atConditions(r.Compound, set.Conditions)
		caption = "Dynamic properties at the laboratory’s standard conditions, with half-widths of 95 % intervals"
		delete(drop, "strain_amplitude_percent")
	}
	if set.InchPound {
		t = inchPound(t)
	}
	var keep []int
	for j, c := range t.Columns {
		if !drop[c.Key] {
			keep = append(keep, j)
		}
	}
	g := figure.GridOf(t, caption)
	var grid figure.Grid
	grid.Caption = g.Caption
	for _, j := range keep {
		col := g.Columns[j]
		col.Heading = typographic(col.Heading)
		grid.Columns = append(grid.Columns, col)
	}
	for _, row := range g.Rows {
		var out []string
		for _, j := range keep {
			out = append(out, row[j])
		}
		grid.Rows = append(grid.Rows, out)
	}
	text := "No strain amplitude was stated with the measurements."
	if own := float64(r.Compound.Domain.OwnStrain); len(set.Conditions) > 0 {
		text = strings.Join(outside, " ")
	} else if !math.IsNaN(own) {
		text = fmt.Sprintf("At the isotherms’ own strain amplitude of %.3g %%.", own)
	}
	if !finite(r.Uncertainty.Phase) {
		text += " The common uncertainty of the phase was not stated: the intervals of loss modulus and loss factor are those of repeatability."
	}
	text += " More frequencies stand in tables/properties.csv; phaselag modulus answers at any condition inside the domain."
	if set.InchPound {
		text += " Figures, constants and the compound file are in SI units."
	}
	blocks := []figure.Block{grid, figure.Paragraph{Text: strings.TrimSpace(text), Small: true}}
	if len(r.Compound.Static) > 0 {
		s := figure.Grid{Caption: "Static moduli, from static and relaxation tests only", Columns: []figure.GridColumn{{Heading: "Source"}, {Heading: "T", Unit: "°C"}, {Heading: "Strain", Unit: "%"}, {Heading: "Time", Unit: "s"}, {Heading: "Modulus", Unit: "MPa"}, {Heading: "± 95 %", Unit: "MPa"}}}
		k := 1.0
		degrees := func(c float64) float64 { return c }
		if set.InchPound {
			k, degrees = 1e6/psi, fahrenheit
			s.Columns[1].Unit, s.Columns[4].Unit, s.Columns[5].Unit = "°F", "psi", "psi"
		}
		for _, v := range r.Compound.Static {
			s.Rows = append(s.Rows, []string{v.Source, optional(degrees(float64(v.TemperatureC))), optional(float64(v.Strain)), optional(float64(v.Time)), short(k * v.Modulus), optional(roundTo(k*float64(v.U95), 2))})
		}
		blocks = append(blocks, s)
	}
	return figure.Section{Heading: "Properties", Blocks: blocks}
}

func optional(x float64) string {
	if math.IsNaN(x) {
		return "–"
	}
	return short(x)
}

// typographic gives ASCII primes their shape.
func typographic(s string) string {
	return strings.ReplaceAll(strings.ReplaceAll(s, "''", "″"), "'", "′")
}

func constants(r *fitting.Result) figure.Section {
	var blocks []figure.Block
	if len(r.Parameters) > 0 {
		g := figure.Grid{Caption: "Constants of the compound model at the reference temperature", Columns: []figure.GridColumn{{Heading: "Constant"}, {Heading: "Value"}, {Heading: "± 95 %"}, {Heading: "95 % by profile likelihood", Number: true}, {Heading: "Unit"}}}
		values := Parameters(r).Strings()
		for i, p := range r.Parameters {
			row := []string{p.Name, figure.Readable(values[i][1]), figure.Readable(values[i][2]), intervalText(p), p.Unit}
			if !p.Determined {
				row[2] = "not determined"
			}
			g.Rows = append(g.Rows, row)
		}
		blocks = append(blocks, g)
	}
	blocks = append(blocks, intervalBlocks(r)...)
	if len(r.Constants) > 0 {
		g := figure.Grid{Caption: "Constants of WLF re-expressed at other reference temperatures", Columns: []figure.GridColumn{{Heading: "Reference", Unit: "°C", Number: true}, {Heading: "C_{1}"}, {Heading: "C_{2}", Unit: "K"}, {Heading: "Correlation", Number: true}}}
		for _, c := range r.Constants {
			g.Rows = append(g.Rows, []string{short(c.ReferenceC), plusMinus(float64(c.C1), 1.96*float64(c.C1U)), plusMinus(float64(c.C2), 1.96*float64(c.C2U)), figure.Readable(fmt.Sprintf("%.3f", float64(c.Correlation)))})
		}
		blocks = append(blocks, g)
	}
	rivals := Candidates(r)
	if len(rivals.Rows) > 0 {
		g := figure.GridOf(rivals, "Rival forms on the same data, noise and relaxation times; differences below 2 are no difference")
		for _, row := range g.Rows {
			row[0] = strings.TrimSuffix(row[0], " law")
		}
		for j := range g.Columns {
			g.Columns[j].Heading = []string{"Part", "Form", "Constants", "AICc", "Difference", "Used", "Note"}[j]
		}
		blocks = append(blocks, g)
	}
	blocks = append(blocks, compactBlocks(r)...)
	noise := figure.Grid{Caption: "Noise found in the measurements", Columns: []figure.GridColumn{{Heading: "Tests"}, {Heading: "Magnitude", Unit: "%"}, {Heading: "Phase", Unit: "°"}}}
	for _, n := range r.Noise {
		noise.Rows = append(noise.Rows, []string{n.Kind, optional(roundTo(float64(n.Magnitude), 2)), optional(roundTo(float64(n.Phase), 2))})
	}
	blocks = append(blocks, noise)
	if len(r.Specimens) > 1 {
		g := figure.Grid{Caption: "Factors of the specimens against their mean", Columns: []figure.GridColumn{{Heading: "Specimen"}, {Heading: "Mounting"}, {Heading: "Factor"}}}
		for _, s := range r.Specimens {
			g.Rows = append(g.Rows, []string{s.Specimen, s.Mounting, plusMinus(float64(s.Factor), 1.96*float64(s.U))})
		}
		blocks = append(blocks, g)
	}
	return figure.Section{Heading: "Model", Blocks: blocks}
}

// plusMinus rounds a value to the second digit of its half-width.
func plusMinus(v, half float64) string {
	if math.IsNaN(half) || half <= 0 {
		return short(v)
	}
	places := max(0, 1-int(math.Floor(math.Log10(half))))
	return minusSign(fmt.Sprintf("%.*f ± %.*f", places, v, places, half))
}

func shiftBlocks(r *fitting.Result) []figure.Block {
	return []figure.Block{figure.GridOf(ShiftFactors(r), "Shift factors of the tested temperatures; u is the standard uncertainty of the factor free of any law, the offset is the fitted error of the isotherm’s temperature")}
}

func findingBlocks(list []data.Finding) []figure.Block {
	if len(list) == 0 {
		return []figure.Block{figure.Paragraph{Text: "None."}}
	}
	var out []figure.Block
	for _, f := range list {
		c := figure.Callout{Grade: figure.Grade(f.Severity), Title: strings.ReplaceAll(f.Code, "-", " "), Text: sentence(plain(f.Evidence))}
		add := func(name, value string) {
			if value != "" {
				c.Facts = append(c.Facts, figure.Fact{Name: name, Value: plain(value)})
			}
		}
		add("Test", f.Test)
		add("Rows", f.Rows)
		add("Likely cause", f.Cause)
		add("Remedy", f.Remedy)
		out = append(out, c)
	}
	return out
}

// plain takes off the marks of code, which a sheet does not set.
func plain(s string) string { return strings.ReplaceAll(s, "`", "") }

// sentence begins with a capital and ends with a stop.
func sentence(s string) string {
	if s == "" {
		return ""
	}
	if !strings.HasSuffix(s, ".") {
		s += "."
	}
	first := []rune(s)
	if len(first) > 1 && first[0] >= 'a' && first[0] <= 'z' && (first[1] >= 'a' && first[1] <= 'z' || first[1] == ' ') {
		first[0] -= 'a' - 'A'
	}
	return string(first)
}

func assumptionBlocks(r *fitting.Result) []figure.Block {
	if len(r.Assumptions) == 0 {
		return []figure.Block{figure.Paragraph{Text: "None beyond what the campaign states."}}
	}
	return []figure.Block{figure.List{Items: r.Assumptions}}
}

func provenance(r *fitting.Result) []figure.Block {
	g := figure.Grid{Caption: "Inputs", Columns: []figure.GridColumn{{Heading: "File"}, {Heading: "SHA-256"}}}
	for _, f := range r.Inputs {
		g.Rows = append(g.Rows, []string{f.File, f.SHA256})
	}
	u := r.Uncertainty
	facts := []figure.Fact{
		{Name: "Program", Value: r.Version},
		{Name: "Points in the fit", Value: strconv.Itoa(r.Fit.Rows)},
		{Name: "Temperature scatter", Value: statedNumber(float64(u.TemperatureScatter), "%.2g K")},
		{Name: "Temperature calibration", Value: statedNumber(float64(u.TemperatureCommon), "%.2g K")},
		{Name: "Geometry", Value: statedNumber(float64(u.Geometry), "%.2g %%")},
		{Name: "Common phase", Value: statedNumber(float64(u.Phase), "%.2g°")},
	}
	if r.Compound != nil {
		facts = append(facts, figure.Fact{Name: "Result SHA-256", Value: r.Compound.Provenance.ResultSHA256})
	}
	return []figure.Block{g, figure.Paragraph{Text: "Standard uncertainties as stated by the campaign, and the size of the fit:", Small: true}, figure.Facts{Items: facts}}
}
