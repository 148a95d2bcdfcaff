package reports

import (
	"fmt"
	"io"
	"math"
	"slices"
	"strings"

	"phaselag/data"
	"phaselag/fitting"
	"phaselag/models"
)

// Summary writes what a result says, on one screen of 80 columns.
func Summary(w io.Writer, r *fitting.Result) error {
	var b strings.Builder
	line := func(format string, a ...any) { fmt.Fprintf(&b, format+"\n", a...) }
	h := r.Campaign
	title := strings.TrimSpace(h.Compound.Name + " " + h.Compound.Batch)
	if title == "" {
		title = h.Name
	}
	points, runs := 0, 0
	for _, t := range r.Tests {
		points += t.Used
		runs += t.Runs
	}
	line("%s: %d points of %d tests in %d runs", title, points, len(r.Tests), runs)
	if r.Compound == nil {
		for _, l := range wrap("no compound model: "+firstReason(r), 80) {
			line("%s", l)
		}
	} else {
		compoundLines(line, r)
	}
	findingLines(&b, r.Findings)
	_, err := io.WriteString(w, b.String())
	return err
}

// reasons are the findings that leave a result without a compound.
var reasons = []string{"superposition-impossible", "no-isotherm", "no-dynamic-test", "too-few-points", "no-fit"}

// firstReason says why there is no compound.
func firstReason(r *fitting.Result) string {
	for _, f := range r.Findings {
		if slices.Contains(reasons, f.Code) {
			return f.Evidence
		}
	}
	return "the measurements do not support one"
}

func compoundLines(line func(string, ...any), r *fitting.Result) {
	c := r.Compound
	s := symbol(c)
	d := c.Domain
	line("domain      %.4g to %.4g °C, %.3g to %.3g Hz reduced to %.4g °C%s", d.Temperature[0], d.Temperature[1], d.ReducedFrequency[0], d.ReducedFrequency[1], c.ReferenceTempC, strainText(d))
	switch c.Shift.Law {
	case models.LawWLF:
		for _, k := range r.Constants {
			if k.ReferenceC == c.ReferenceTempC {
				line("shift       WLF at %.4g °C: C1 = %s, C2 = %s K", k.ReferenceC, plusMinusASCII(float64(k.C1), 1.96*float64(k.C1U)), plusMinusASCII(float64(k.C2), 1.96*float64(k.C2U)))
			}
		}
	case models.LawCrossover:
		line("shift       WLF at %.4g °C: C1 = %s, C2 = %s K; Arrhenius below %s °C", c.ReferenceTempC, parameterText(r, "C1"), parameterText(r, "C2"), parameterText(r, "crossover temperature"))
	case models.LawArrhenius:
		line("shift       Arrhenius: E_a = %s kJ/mol", parameterText(r, "activation energy of the shift"))
	default:
		if len(r.Shifts) > 1 {
			line("shift       no law: the factors of %d temperatures, interpolated", len(r.Shifts))
		} else {
			line("shift       one temperature: none")
		}
	}
	if n := len(r.Isotherms); n > 0 {
		m := r.Common
		line("one curve   superposition %s (p %s): rms misfit of the common curve",
			map[string]string{models.HoldsYes: "holds", models.HoldsNo: "DOES NOT HOLD", models.HoldsUndecided: "is undecided"}[c.Fit.Superposition.Holds], probability(m))
		line("            %.2g° and %.2g %%, of curves of their own %.2g° and %.2g %%", float64(m.PhaseDeg), float64(m.Percent), float64(m.PhaseFloorDeg), float64(m.PercentFloor))
	}
	if c.Vertical.Law != models.VerticalNone {
		line("vertical    %s", c.Vertical.Law)
	}
	if c.Amplitude.Law != models.AmplitudeNone {
		name := "filler"
		for _, k := range r.Amplitude {
			if k.Chosen {
				name = k.Name
			}
		}
		if c.Amplitude.Coupling == models.Scaling {
			line("strain      %s: α %s, β %s,", name, parameterText(r, "filler storage ratio α"), parameterText(r, "filler loss ratio β"))
		} else {
			line("strain      %s: ΔG' %s, ΔG'' %s MPa,", name, parameterText(r, "filler storage ΔG′"), parameterText(r, "filler loss ΔG″"))
		}
		exponent := ""
		if m := parameterText(r, "Kraus exponent m"); m != "–" {
			exponent = ", m " + m
		}
		line("            critical strain %s %%%s, E_a %s kJ/mol", parameterText(r, "critical strain"), exponent, parameterText(r, "filler activation energy"))
		if x := parameterText(r, "extra loss modulus"); x != "–" {
			line("            extra loss %s MPa, falling with strain over %s %%", x, parameterText(r, "extra loss strain"))
		}
	}
	line("")
	line("%10s%10s%18s%18s%18s", "T / °C", "f / Hz", s+"' / MPa", s+"'' / MPa", "tan δ")
	for _, q := range summaryConditions(c) {
		m, err := c.Modulus(q)
		if err != nil {
			continue
		}
		line("%10.4g%10.4g%18s%18s%18s", celsius(q.Temperature), q.Frequency,
			plusMinusASCII(m.Storage/1e6, m.StorageU95/1e6), plusMinusASCII(m.Loss/1e6, m.LossU95/1e6), plusMinusASCII(m.LossFactor, m.LossFactorU95))
	}
	line("")
}

func strainText(d models.Domain) string {
	if d.Strain == nil {
		return ", strain not stated"
	}
	return fmt.Sprintf(",\n            strain %.3g to %.3g %%", d.Strain[0], d.Strain[1])
}

func parameterText(r *fitting.Result, name string) string {
	for _, p := range r.Parameters {
		if p.Name == name {
			if !p.Determined {
				return "not determined"
			}
			return plusMinusASCII(float64(p.Value), float64(p.U95))
		}
	}
	return "–"
}

// plusMinusASCII is plusMinus with a plain hyphen, for terminals and copying.
func plusMinusASCII(v, half float64) string {
	return strings.ReplaceAll(plusMinus(v, half), "−", "-")
}

// summaryConditions are a cold, a reference and a warm condition at 10 Hz, or
// the middle of the window where 10 Hz is not inside.
func summaryConditions(c *models.Compound) []models.Condition {
	d := c.Domain.Temperature
	temps := []float64{d[0]}
	if c.ReferenceTempC > d[0] && c.ReferenceTempC < d[1] {
		temps = append(temps, c.ReferenceTempC)
	}
	if d[1] > d[0] {
		temps = append(temps, d[1])
	}
	var out []models.Condition
	for _, T := range temps {
		q := models.Condition{Frequency: 10, Temperature: T + zeroC, Strain: math.NaN()}
		if c.Inside(q) != nil {
			a := math.Pow(10, c.LogShift(q.Temperature))
			q.Frequency = roundTo(math.Sqrt(c.Domain.ReducedFrequency[0]*c.Domain.ReducedFrequency[1])/a, 2)
		}
		out = append(out, q)
	}
	return out
}

// maxFindings is how many findings a screen shows.
const maxFindings = 6

func findingLines(b *strings.Builder, list []data.Finding) {
	if len(list) == 0 {
		fmt.Fprintln(b, "no findings")
		return
	}
	notes := 0
	shown := 0
	for _, f := range list {
		if f.Severity == data.Note || shown == maxFindings {
			notes++
			continue
		}
		shown++
		for i, l := range wrap(string(f.Severity)+": "+f.Evidence, 78) {
			if i > 0 {
				l = "  " + l
			}
			fmt.Fprintln(b, l)
		}
	}
	if notes > 0 {
		fmt.Fprintf(b, "%d more findings in tables/findings.csv\n", notes)
	}
}

// wrap breaks a text into lines of at most width runes, at blanks.
func wrap(s string, width int) []string {
	var out []string
	line, n := "", 0
	for _, word := range strings.Fields(s) {
		k := len([]rune(word))
		if n > 0 && n+1+k > width {
			out = append(out, line)
			line, n = "", 0
		}
		if n > 0 {
			line += " "
			n++
		}
		line += word
		n += k
	}
	return append(out, line)
}

// FindingsText writes findings for people, with cause and remedy.
func FindingsText(w io.Writer, list []data.Finding) error {
	var b strings.Builder
	for _, f := range list {
		head := fmt.Sprintf("%s: %s", f.Severity, f.Code)
		if f.Test != "" {
			head += " in " + f.Test
		}
		if f.Rows != "" {
			head += " (" + f.Rows + ")"
		}
		fmt.Fprintln(&b, head)
		for _, part := range []struct{ name, text string }{{"", f.Evidence}, {"cause: ", f.Cause}, {"remedy: ", f.Remedy}} {
			if part.text == "" {
				continue
			}
			for _, l := range wrap(part.name+part.text, 76) {
				fmt.Fprintln(&b, "   ", l)
			}
		}
	}
	_, err := io.WriteString(w, b.String())
	return err
}
