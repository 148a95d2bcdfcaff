package reports

import (
	"fmt"
	"math"

	"phaselag/fitting"
	"phaselag/reports/figure"
	"phaselag/reports/table"
)

// CompactTable lists the compact models, one constant a row.
func CompactTable(r *fitting.Result) table.Table {
	t := table.Table{Name: "compact-models 1", Columns: []table.Column{
		{Key: "model"}, {Key: "constant"}, {Key: "value"}, {Key: "u"}, {Key: "unit"},
		{Key: "rms_percent"}, {Key: "rms_deg"}, {Key: "worst_percent"}, {Key: "worst_deg"}, {Key: "AICc"}, {Key: "difference"}, {Key: "note"},
	}}
	for _, m := range r.Compact {
		for _, c := range m.Constants {
			t.Rows = append(t.Rows, []table.Cell{table.Text(m.Name), table.Text(c.Name), num(c.Value), num(c.U), table.Text(c.Unit),
				num(m.Percent), num(m.Deg), num(m.WorstPercent), num(m.WorstDeg), num(m.AICc), num(m.Delta), table.Text(m.Note)})
		}
	}
	return t
}

// FewBranchesTable lists the fewest branches; the equilibrium modulus stands with
// an empty time.
func FewBranchesTable(r *fitting.Result) table.Table {
	t := table.Table{Name: "few-branches 1", Columns: []table.Column{{Key: "relaxation_time_s"}, {Key: "modulus_MPa"}}}
	if r.Few == nil || len(r.Few.Branches) == 0 {
		return t
	}
	t.Rows = append(t.Rows, []table.Cell{table.Text(""), num(r.Few.Equilibrium)})
	for _, b := range r.Few.Branches {
		t.Rows = append(t.Rows, []table.Cell{num(b.Time), num(b.Modulus)})
	}
	return t
}

// compactBlocks show the compact models on the datasheet.
func compactBlocks(r *fitting.Result) []figure.Block {
	var out []figure.Block
	if len(r.Compact) > 0 {
		g := figure.Grid{Caption: "Compact models of the polymer’s master curve at the reference temperature, with half-widths of 95 % intervals for given shift factors and their misfit (rms and largest)",
			Columns: []figure.GridColumn{{Heading: "Model"}, {Heading: "Constants"}, {Heading: "Magnitude", Unit: "%", Number: true}, {Heading: "Phase", Unit: "°", Number: true}}}
		for _, m := range r.Compact {
			text := m.Note
			for i, c := range m.Constants {
				if i == 0 {
					text = ""
				} else {
					text += "; "
				}
				if u := float64(c.U); !(u < math.Abs(float64(c.Value))/2) {
					text += c.Name + " not determined"
					continue
				}
				text += c.Name + " = " + plusMinusShort(float64(c.Value), 1.96*float64(c.U))
				if c.Unit != "" {
					text += " " + c.Unit
				}
			}
			if m.Note != "" && len(m.Constants) > 0 {
				text += " (" + m.Note + ")"
			}
			g.Rows = append(g.Rows, []string{m.Name, text,
				fmt.Sprintf("%s (%s)", optional(roundTo(float64(m.Percent), 2)), optional(roundTo(float64(m.WorstPercent), 2))),
				fmt.Sprintf("%s (%s)", optional(roundTo(float64(m.Deg), 2)), optional(roundTo(float64(m.WorstDeg), 2)))})
		}
		out = append(out, g)
	}
	if f := r.Few; f != nil && len(f.Branches) > 0 {
		out = append(out, figure.Paragraph{Small: true, Text: fmt.Sprintf("The fewest relaxation times that stay within %.2g %% and %.2g° of the compound’s polymer term over its window are %d; they stand in tables/few-branches.csv.",
			float64(f.TolerancePercent), float64(f.ToleranceDeg), len(f.Branches))})
	}
	return out
}

// plusMinusShort is plusMinus, with powers of ten where the value asks for them.
func plusMinusShort(v, half float64) string {
	if a := max(v, -v); a >= 1e-3 && a < 1e5 || !(half > 0) {
		return plusMinus(v, half)
	}
	return figure.Readable(fmt.Sprintf("%.2e", v)) + " ± " + figure.Readable(fmt.Sprintf("%.1e", half))
}
