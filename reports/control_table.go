package reports

import (
	"math"
	"strings"

	"phaselag/fitting/quality"
	"phaselag/reports/table"
)

// ControlTable lists a control chart: a row a batch, with its limits and the patterns that
// it completes. The keys carry the unit.
func ControlTable(property, unit string, c *quality.Chart) table.Table {
	tail := keyUnit(unit)
	number := func(key, heading, interval string) table.Column {
		return table.Column{Key: key + tail, Heading: heading, Unit: unit, Interval: interval}
	}
	t := table.Table{Name: "control-chart 1", Columns: []table.Column{
		{Key: "batch"}, number("value", property, "U95"+tail), number("U95", "U95", ""),
		number("lower_limit", "lower limit", ""), number("centre", "centre", ""), number("upper_limit", "upper limit", ""),
		{Key: "base", Heading: "base"}, {Key: "called_out", Heading: "called out"},
	}}
	t.Columns[2].Digits = 2
	t.Assumptions = append(t.Assumptions, "chart of "+c.Kind+", sigma of a single value "+table.Significant(c.Sigma, 4)+withUnit(unit)+" ("+c.From+")")
	for _, d := range c.Doubts {
		t.Assumptions = append(t.Assumptions, "to be doubted: "+d)
	}
	for _, l := range c.Lines {
		base := ""
		if l.Base {
			base = "yes"
		}
		if !isNumber(l.Value) {
			l.U95 = math.NaN()
		}
		t.Rows = append(t.Rows, []table.Cell{
			table.Text(l.Name), finiteCell(l.Value), finiteCell(l.U95),
			finiteCell(l.Lower), finiteCell(l.Centre), finiteCell(l.Upper),
			table.Text(base), table.Text(calledOut(l)),
		})
	}
	return t
}

func calledOut(l quality.Line) string {
	var out []string
	for _, v := range l.Violations {
		s := v.String()
		if v == quality.Beyond && l.Doubtful {
			s += " by less than U95"
		}
		out = append(out, s)
	}
	return strings.Join(out, "; ")
}

func withUnit(unit string) string {
	if unit == "" {
		return ""
	}
	return " " + unit
}

// finiteCell leaves a place empty that has no number: a table has no room for infinity.
func finiteCell(v float64) table.Cell {
	if !isNumber(v) {
		return table.Number(math.NaN())
	}
	return table.Number(v)
}

// keyUnit is a unit as the end of a key: "_MPa", "_percent", "" for none.
func keyUnit(unit string) string {
	unit = strings.NewReplacer("%", "percent", "°", "", "·", "_", "/", "_per_", "²", "2", "³", "3", " ", "_").Replace(unit)
	if unit == "" {
		return ""
	}
	return "_" + unit
}
