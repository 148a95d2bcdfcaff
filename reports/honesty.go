package reports

import (
	"fmt"
	"math"
	"strings"

	"phaselag/fitting"
	"phaselag/models"
	"phaselag/reports/figure"
	"phaselag/reports/table"
)

// CausalityTable lists the verdict of Kramers and Kronig on every isotherm.
func CausalityTable(r *fitting.Result) table.Table {
	t := table.Table{Name: "causality 1", Columns: []table.Column{
		{Key: "test"}, {Key: "temperature_C"}, {Key: "points"}, {Key: "outcome"},
		{Key: "free_percent"}, {Key: "free_deg"}, {Key: "non_negative_percent"}, {Key: "non_negative_deg"}, {Key: "p"},
		{Key: "likely"}, {Key: "others"}, {Key: "estimate"}, {Key: "u_estimate"}, {Key: "estimate_unit"}, {Key: "reason"},
	}}
	for _, v := range r.Causality {
		t.Rows = append(t.Rows, []table.Cell{
			table.Text(v.Test), num(v.TemperatureC), table.Number(float64(v.Points)), table.Text(v.Outcome),
			num(v.FreePercent), num(v.FreeDeg), num(v.NonNegativePercent), num(v.NonNegativeDeg), num(v.P),
			table.Text(v.Likely), table.Text(strings.Join(v.Others, ", ")), num(v.Estimate), num(v.U), table.Text(v.Unit), table.Text(v.Reason),
		})
	}
	return t
}

// BootstrapTable compares stated uncertainties with the scatter of drawn
// campaigns.
func BootstrapTable(r *fitting.Result) table.Table {
	t := table.Table{Name: "bootstrap 1", Columns: []table.Column{
		{Key: "quantity"}, {Key: "value"}, {Key: "u", Digits: 2}, {Key: "u_bootstrap", Digits: 2}, {Key: "bias"}, {Key: "low_95"}, {Key: "high_95"}, {Key: "unit"},
	}}
	for _, v := range r.Bootstrap.Rows {
		t.Rows = append(t.Rows, []table.Cell{table.Text(v.Quantity), num(v.Value), num(v.U), num(v.Scatter), num(v.Bias), num(v.Low), num(v.High), table.Text(v.Unit)})
	}
	return t
}

// NotDetermined lists what the measurements do not tell, each with the reason.
func NotDetermined(r *fitting.Result) []string {
	var out []string
	add := func(format string, a ...any) { out = append(out, minusSign(fmt.Sprintf(format, a...))) }
	if r.Compound == nil {
		return append(out, "a compound model, and with it every modulus at a condition that was not tested: "+firstReason(r))
	}
	c := r.Compound
	for _, p := range r.Parameters {
		if !p.Determined {
			add("%s: its 95 %% half-width, %.2g %s, is as large as the value itself or larger", p.Name, float64(p.U95), p.Unit)
		}
	}
	for _, s := range r.Shifts {
		if !s.Determined {
			add("the shift factor at %g °C alone, without a law: the isotherm hardly depends on frequency", float64(s.TemperatureC))
		}
	}
	if len(r.Shifts) < 2 {
		add("the dependence on temperature: one temperature was tested")
	}
	switch {
	case c.Domain.Strain == nil:
		add("the strain at which the moduli hold: no amplitude was stated")
	case c.Amplitude.Law == models.AmplitudeNone:
		add("the dependence on the strain amplitude beyond %.3g to %.3g %%", c.Domain.Strain[0], c.Domain.Strain[1])
	}
	if len(c.Static) == 0 {
		add("the static modulus: there is no static and no relaxation test; no dynamic test can give it")
	}
	if !finite(r.Uncertainty.Phase) {
		add("the part of the loss factor's uncertainty that all measurements share: the uncertainty of the phase was not stated")
	}
	if !finite(r.Uncertainty.TemperatureCommon) {
		add("the part of the uncertainty that comes from the calibration of temperature: it was not stated")
	}
	for _, k := range r.Causality {
		if k.Outcome == "undecided" {
			add("whether the isotherm at %g °C is causal: %s", float64(k.TemperatureC), k.Reason)
		}
	}
	return out
}

// causalityText says in plain words whether the isotherms can be causal.
func causalityText(r *fitting.Result) (lead, text string) {
	inconsistent, decided := 0, 0
	worst := 1.0
	for _, v := range r.Causality {
		if v.Outcome != "undecided" {
			decided++
			worst = min(worst, float64(v.P))
		}
	}
	for _, f := range r.Findings {
		if f.Code == "isotherm-not-causal" {
			inconsistent++
		}
	}
	switch {
	case len(r.Causality) == 0:
		return "", ""
	case decided == 0:
		return "Causality: not decided.", "No isotherm has enough frequencies for the test of Kramers and Kronig."
	case inconsistent > 0:
		return "Causality: some isotherms fail.", "Storage and loss modulus of some isotherms cannot come from one relaxation spectrum; the findings say which and what it looks like."
	}
	return "Causality: nothing speaks against it.", fmt.Sprintf("Storage and loss modulus belong together in all %d isotherms that can be tested (Kramers and Kronig; smallest p %.2g for one isotherm). The test does not see a wrong size of the specimen, and inertia or delay only where they are large.", decided, worst)
}

// intervalBlocks show how the stated uncertainties compare with drawn campaigns.
func intervalBlocks(r *fitting.Result) []figure.Block {
	b := r.Bootstrap
	if len(b.Rows) == 0 {
		return nil
	}
	g := figure.Grid{Caption: fmt.Sprintf("Standard uncertainties as stated, and the scatter of %d campaigns drawn from the compound with everything that the uncertainties contain", b.Replicates-b.Failed),
		Columns: []figure.GridColumn{{Heading: "Quantity"}, {Heading: "Value", Number: true}, {Heading: "u", Number: true}, {Heading: "u, drawn", Number: true}, {Heading: "95 % interval, drawn", Number: true}, {Heading: "Unit"}}}
	for _, v := range b.Rows {
		half := (float64(v.High) - float64(v.Low)) / 2
		g.Rows = append(g.Rows, []string{v.Quantity, rounded(float64(v.Value), half), optional(roundTo(float64(v.U), 2)), optional(roundTo(float64(v.Scatter), 2)),
			rounded(float64(v.Low), half) + " to " + rounded(float64(v.High), half), v.Unit})
	}
	return []figure.Block{g}
}

// rounded prints a value to the second digit of a half-width.
func rounded(v, half float64) string {
	if math.IsNaN(v) {
		return "–"
	}
	if !(half > 0) {
		return short(v)
	}
	return minusSign(fmt.Sprintf("%.*f", max(0, 1-int(math.Floor(math.Log10(half)))), v))
}

// intervalText is the 95 % interval by profile likelihood.
func intervalText(p fitting.Parameter) string {
	half := float64(p.U95)
	end := func(x float64) string {
		if math.IsNaN(x) {
			return "open"
		}
		return rounded(x, half)
	}
	if !finite(p.Low) && !finite(p.High) {
		return "–"
	}
	return end(float64(p.Low)) + " to " + end(float64(p.High))
}
