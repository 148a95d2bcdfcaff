package data

import (
	"fmt"
	"math"
	"path"
	"strings"

	"gopkg.in/yaml.v3"

	"phaselag/data/place"
	"phaselag/data/table"
	"phaselag/data/unit"
)

// openCampaign reads a campaign file and the tables it names. The keys are a
// contract; every one is optional but tests.
func openCampaign(s *source, name string) (*Campaign, error) {
	content, err := s.read(name, path.Base(strings.ReplaceAll(name, "\\", "/")))
	if err != nil {
		return nil, err
	}
	root, err := parseYAML(name, content)
	if err != nil {
		return nil, err
	}
	t := &tree{file: name}
	c := newCampaign()
	m, _ := t.mapping(root, "", "campaign", "laboratory", "operator", "vulcanised", "compound", "specimens", "tests", "analysis", "uncertainty")
	c.Name, c.Laboratory, c.Operator, c.Vulcanised = m.text("campaign"), m.text("laboratory"), m.text("operator"), m.date("vulcanised")
	if c.Name == "" {
		c.Name = stem(name)
	}
	poisson := t.compound(m, c)
	t.specimens(m, c)
	t.analysis(m, c)
	t.uncertainty(m, c)
	plans := t.tests(s, m, c)
	if !m.has("tests") && m.node != nil {
		t.fault(m.node, "tests", "list at least one: tests: [{kind: frequency sweep, file: isotherms.csv}]", "no tests are listed")
	}
	// Faults of the campaign file come before those of its tables; where the
	// tests themselves are faulty the tables are not looked at.
	if err := t.faults.Err(); err != nil {
		return nil, err
	}
	return finish(s, c, plans, poisson, nil)
}

func (t *tree) compound(m mapping, c *Campaign) (poisson float64) {
	k, _ := t.mapping(m.values["compound"], "compound", "name", "polymer", "batch", "hardness", "density", "poisson_ratio", "cellular")
	c.Compound.Name, c.Compound.Polymer, c.Compound.Batch = k.text("name"), k.text("polymer"), k.text("batch")
	if k.has("hardness") {
		k.quantity("hardness", unit.Hardness, positive)
		c.Compound.Hardness = k.text("hardness")
	}
	c.Compound.Density = k.quantity("density", unit.Density, positive)
	c.Compound.Cellular = k.flag("cellular")
	poisson = k.number("poisson_ratio")
	if k.has("poisson_ratio") && !(poisson > -1 && poisson <= 0.5) {
		t.fault(k.at("poisson_ratio"), k.sub("poisson_ratio"), "rubber has 0.5, foams have less", "a Poisson ratio lies above -1 and is at most 0.5")
	}
	return poisson
}

func (t *tree) specimens(m mapping, c *Campaign) {
	all, names := t.mapping(m.values["specimens"], "specimens")
	for _, name := range names {
		k, _ := t.mapping(all.values[name], all.sub(name), "shape", "diameter", "inner_diameter", "width", "length", "thickness", "poisson_ratio", "compression_coefficient", "bulk_modulus", "shear_coefficient", "bending", "uncertainty", "measured")
		c.Specimens = append(c.Specimens, Specimen{
			Uncertainty: t.dimensional(k),
			Name:        name, Shape: k.text("shape"),
			Diameter: k.quantity("diameter", unit.Length, positive), Width: k.quantity("width", unit.Length, positive),
			Length: k.quantity("length", unit.Length, positive), Thickness: k.quantity("thickness", unit.Length, positive),
			InnerDiameter: k.quantity("inner_diameter", unit.Length, positive), Poisson: k.number("poisson_ratio"),
			Coefficient: k.number("compression_coefficient"), Bulk: k.quantity("bulk_modulus", unit.Modulus, positive),
			ShearFactor: k.number("shear_coefficient"), Bending: k.flag("bending"),
			Measured: k.flag("measured"),
		})
	}
}

// dimensional reads the standard uncertainties of a specimen's dimensions: relative
// ones, or lengths beside the dimension itself.
func (t *tree) dimensional(k mapping) map[string]float64 {
	m, names := t.mapping(k.values["uncertainty"], k.sub("uncertainty"), "diameter", "inner_diameter", "width", "length", "thickness", "poisson_ratio", "compression_coefficient", "bulk_modulus", "shear_coefficient")
	var out map[string]float64
	for _, name := range names {
		var u float64
		if rel, err := unit.Parse(m.text(name), unit.Relative); err == nil {
			u = rel
		} else {
			q := unit.Length
			if name == "bulk_modulus" {
				q = unit.Modulus
			}
			u = m.quantity(name, q, notNegative) / k.quantity(name, q, positive)
			if math.IsNaN(u) && k.node != nil && !k.has(name) {
				t.fault(m.at(name), m.sub(name), "state the dimension, or a relative uncertainty such as 0.5 %", "an uncertainty of a dimension that is not stated")
			}
		}
		if u >= 0 {
			if out == nil {
				out = map[string]float64{}
			}
			out[strings.Replace(strings.ReplaceAll(name, "_", " "), "poisson", "Poisson", 1)] = u
		}
	}
	return out
}

func (t *tree) analysis(m mapping, c *Campaign) {
	k, _ := t.mapping(m.values["analysis"], "analysis", "reference_temperature", "shift_law", "vertical_shift", "expansion", "amplitude_law", "amplitude_coupling", "filler_frequency_dependence")
	c.Analysis = Analysis{
		ReferenceTemperature: k.quantity("reference_temperature", unit.Temperature, positive),
		ShiftLaw:             k.choice("shift_law", "auto", "auto", "WLF", "Arrhenius", "WLF+Arrhenius", "none"),
		VerticalShift:        k.choice("vertical_shift", "auto", "auto", "none", "density", "bounded", "free"),
		Expansion:            k.quantity("expansion", unit.Expansion, positive),
		AmplitudeLaw:         k.choice("amplitude_law", "auto", "auto", "kraus", "kraus_extra_loss", "maier_goritz", "none"),
		AmplitudeCoupling:    k.choice("amplitude_coupling", "auto", "auto", "overlay", "scaling"),
		FillerFrequency:      k.choice("filler_frequency_dependence", "auto", "auto", "causal", "rate_independent"),
	}
}

func (t *tree) uncertainty(m mapping, c *Campaign) {
	k, _ := t.mapping(m.values["uncertainty"], "uncertainty", "temperature_scatter", "temperature_common", "geometry", "phase", "force", "displacement")
	c.Uncertainty = Uncertainty{
		TemperatureScatter: k.quantity("temperature_scatter", unit.TemperatureDifference, notNegative),
		TemperatureCommon:  k.quantity("temperature_common", unit.TemperatureDifference, notNegative),
		Geometry:           k.quantity("geometry", unit.Relative, notNegative),
		Phase:              k.quantity("phase", unit.Angle, notNegative),
		Force:              k.quantity("force", unit.Relative, notNegative),
		Displacement:       k.quantity("displacement", unit.Relative, notNegative),
	}
}

// testKeys are the keys of one test.
var testKeys = []string{"name", "kind", "file", "files", "rows", "columns", "reading", "temperature", "frequency", "strain", "amplitude", "strain_source",
	"control", "direction", "static_strain", "static_force", "dwell", "rate", "ramp_time", "conditioning", "deformation", "specimen", "mounting", "tested",
	"apparatus", "leave_out", "values", "signals"}

func (t *tree) tests(s *source, m mapping, c *Campaign) []*plan {
	var plans []*plan
	seen := map[string]bool{}
	for i, n := range m.list("tests") {
		where := fmt.Sprintf("tests[%d]", i+1)
		k, _ := t.mapping(n, where, testKeys...)
		if k.node == nil {
			t.fault(n, where, "", "an empty test")
			continue
		}
		p := t.test(s, k, c)
		p.where = place.Error{File: t.file, Line: k.node.Line, Column: k.node.Column, Path: where}
		if p.Name == "" {
			kind := string(p.Kind)
			if p.signals != nil {
				kind = "waveform"
			}
			p.Name = kind
			for j := 2; seen[p.Name]; j++ {
				p.Name = fmt.Sprintf("%s %d", kind, j)
			}
		}
		if seen[p.Name] {
			t.fault(k.at("name"), k.sub("name"), "give every test a name of its own", "two tests have the name %q", clip(p.Name))
		}
		seen[p.Name] = true
		if p.Specimen == "" {
			p.Specimen = p.Name
			if len(c.Specimens) == 1 {
				p.Specimen = c.Specimens[0].Name
			}
			c.assume("%s: no specimen is stated; %q is taken", p.Name, p.Specimen)
		}
		plans = append(plans, p)
	}
	return plans
}

func (t *tree) test(s *source, k mapping, c *Campaign) *plan {
	p := newPlan()
	p.Name = k.text("name")
	if !k.has("kind") {
		t.fault(k.node, k.sub("kind"), "kind: frequency sweep, strain sweep, temperature sweep, relaxation, waveform or static", "the kind of test is not stated")
	}
	kind := k.choice("kind", "", string(FrequencySweep), string(StrainSweep), string(TemperatureSweep), string(Relaxation), string(Static), "waveform")
	if kind == "waveform" {
		p.signals = t.signalSettings(k)
	} else {
		p.Kind = Kind(kind)
		if k.has("signals") {
			t.fault(k.at("signals"), k.sub("signals"), "kind: waveform", "signals are analysed in a test of kind waveform only")
		}
	}
	for _, key := range []string{"file", "files"} {
		for _, n := range k.list(key) {
			name := t.text(t.follow(n, k.sub(key)), k.sub(key))
			if name == "" {
				t.fault(n, k.sub(key), "", "an empty file name")
				continue
			}
			p.files = append(p.files, tableFile{written: name, resolved: s.resolve(name)})
		}
	}
	t.values(k, p)
	if len(p.files) == 0 && len(p.StaticValues) == 0 {
		t.fault(k.node, k.sub("file"), "name the table relative to the campaign file", "the test names no file")
	}
	t.columns(k, p)
	t.reading(k, p)
	t.filters(k, p)
	t.exclusions(k, p)
	p.temperature = k.quantity("temperature", unit.Temperature, positive)
	p.frequency = k.quantity("frequency", unit.Frequency, positive)
	p.strain = k.quantity("strain", unit.Strain, notNegative)
	p.amplitudeStated = k.has("amplitude")
	p.amplitude = k.choice("amplitude", "zero to peak", "zero to peak", "peak to peak", "rms")
	p.nominalStrain = k.choice("strain_source", "", "measured", "nominal") == "nominal"
	p.Control = k.choice("control", "", "displacement", "force")
	p.Direction = k.choice("direction", "", "ascending", "descending", "both")
	p.StaticStrain = k.quantity("static_strain", unit.Strain, notNegative)
	p.StaticForce = k.quantity("static_force", unit.Force, anySign)
	p.Dwell = k.quantity("dwell", unit.Time, notNegative)
	p.RampTime = k.quantity("ramp_time", unit.Time, notNegative)
	p.Rate = k.quantity("rate", unit.TemperatureRate, anySign)
	if p.Direction == "descending" {
		p.Rate = -math.Abs(p.Rate)
	}
	cond, _ := t.mapping(k.values["conditioning"], k.sub("conditioning"), "cycles", "strain", "rest")
	p.Conditioning = Conditioning{Cycles: cond.count("cycles"), Strain: cond.quantity("strain", unit.Strain, positive), Rest: cond.quantity("rest", unit.Time, notNegative)}
	p.Deformation = Deformation(k.choice("deformation", "", string(SimpleShear), string(Tension), string(Compression), string(Torsion)))
	p.Specimen = k.text("specimen")
	if len(c.Specimens) > 0 && p.Specimen != "" {
		var names []string
		for _, sp := range c.Specimens {
			names = append(names, sp.Name)
		}
		if !contains(names, p.Specimen) {
			t.fault(k.at("specimen"), k.sub("specimen"), "specimens: "+strings.Join(names, ", "), "no specimen has the name %q", clip(p.Specimen))
		}
	}
	if v := k.text("mounting"); v != "" {
		p.Mounting = v
	}
	p.Tested = k.date("tested")
	app, _ := t.mapping(k.values["apparatus"], k.sub("apparatus"), "name", "moving_mass", "frame_stiffness", "corrected")
	p.Apparatus = app.text("name")
	t.machine(app, p)
	return p
}

// machine reads what of the apparatus has to be taken off the measurements; what is
// listed as corrected has been.
func (t *tree) machine(app mapping, p *plan) {
	mass, frame := app.quantity("moving_mass", unit.Mass, notNegative), app.quantity("frame_stiffness", unit.Stiffness, positive)
	done := map[string]bool{}
	for _, n := range app.list("corrected") {
		word := t.text(t.follow(n, app.sub("corrected")), app.sub("corrected"))
		if word != "inertia" && word != "compliance" {
			t.fault(n, app.sub("corrected"), "corrected: [inertia, compliance]", "%q is no correction", clip(word))
		}
		done[word] = true
	}
	if mass > 0 && !done["inertia"] {
		p.machine.MovingMass = mass
	}
	if frame > 0 && !done["compliance"] {
		p.machine.FrameStiffness = complex(frame, 0)
	}
}

// values reads the moduli of a static test that stand in the campaign file.
func (t *tree) values(k mapping, p *plan) {
	for i, n := range k.list("values") {
		where := fmt.Sprintf("%s[%d]", k.sub("values"), i+1)
		if p.Kind != Static && p.Kind != "" {
			t.fault(n, where, "values belong to a static test; a table goes into file", "values in a %s", p.Kind)
			return
		}
		v, _ := t.mapping(n, where, "modulus", "u", "strain", "time", "temperature")
		if v.node == nil {
			continue
		}
		if !v.has("modulus") {
			t.fault(v.node, v.sub("modulus"), "modulus: 0.6 MPa", "the modulus is missing")
		}
		sv := StaticValue{
			File: path.Base(strings.ReplaceAll(t.file, "\\", "/")), Row: v.node.Line,
			Modulus: v.quantity("modulus", unit.Modulus, positive),
			Strain:  v.quantity("strain", unit.Strain, positive), Time: v.quantity("time", unit.Time, positive),
			Temperature: v.quantity("temperature", unit.Temperature, positive), U: math.NaN(),
		}
		if v.has("u") {
			// An uncertainty is relative or a modulus.
			if rel, err := unit.Parse(v.text("u"), unit.Relative); err == nil {
				sv.U = rel * sv.Modulus
			} else {
				sv.U = v.quantity("u", unit.Modulus, notNegative)
			}
		}
		p.StaticValues = append(p.StaticValues, sv)
	}
}

// columns reads the columns that are chosen by hand: a heading, or heading,
// number and unit.
func (t *tree) columns(k mapping, p *plan) {
	all, names := t.mapping(k.values["columns"], k.sub("columns"))
	for _, name := range names {
		where := all.sub(name)
		concept, ok := table.ParseConcept(name)
		if !ok {
			hint := "columns here: " + strings.Join(table.Concepts(), ", ")
			if near := place.Nearest(name, table.Concepts()); near != "" {
				hint = near + " was perhaps meant; " + hint
			}
			t.fault(all.keys[name], where, hint, "%q is no quantity of a table", clip(name))
			continue
		}
		w := table.Want{Concept: concept}
		if n := t.follow(all.values[name], where); n != nil && n.Kind == yaml.ScalarNode {
			w.Heading = n.Value
		} else {
			v, _ := t.mapping(n, where, "heading", "column", "unit")
			w.Heading, w.Number, w.Unit = v.text("heading"), v.count("column"), v.text("unit")
			if q := concept.Quantity(); w.Unit != "" && q != "" {
				if _, ok := unit.Lookup(w.Unit, q); !ok {
					t.fault(v.at("unit"), v.sub("unit"), "units: "+strings.Join(unit.Symbols(q), ", "), "%q is not a unit of the %s", clip(w.Unit), concept)
				}
			}
		}
		p.settings.Wants = append(p.settings.Wants, w)
	}
}

func (t *tree) reading(k mapping, p *plan) {
	r, _ := t.mapping(k.values["reading"], k.sub("reading"), "sheet", "separator", "decimal", "header_row", "units_row")
	p.settings.Sheet = r.text("sheet")
	if n, _ := r.get("separator"); n != nil && n.Kind == yaml.ScalarNode {
		p.settings.Separator = n.Value
	}
	p.settings.Decimal = r.text("decimal")
	if s := r.text("header_row"); strings.EqualFold(s, "none") || s == "0" {
		p.settings.HeaderRow = table.NoHeader
	} else {
		p.settings.HeaderRow = r.count("header_row")
	}
	p.settings.UnitsRow = r.count("units_row")
}
