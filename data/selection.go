package data

import (
	"fmt"
	"math"
	"path"

	"phaselag/data/table"
)

// filter keeps the rows whose cell in a column matches: the same text, or a
// pattern with * and ?.
type filter struct {
	heading, pattern string
	line, column     int // in the campaign file
}

// exclusion leaves out the rows in which all conditions hold.
type exclusion struct {
	where   []condition
	because string
}

type condition struct {
	concept table.Concept // "" for a line of the file
	value   float64       // SI; the line
}

func (t *tree) filters(k mapping, p *plan) {
	all, names := t.mapping(k.values["rows"], k.sub("rows"))
	for _, name := range names {
		n := all.keys[name]
		f := filter{heading: name, pattern: all.text(name), line: n.Line, column: n.Column}
		if _, err := path.Match(f.pattern, ""); err != nil {
			t.fault(n, all.sub(name), "", "%q is no pattern", clip(f.pattern))
			continue
		}
		p.rows = append(p.rows, f)
	}
}

func (t *tree) exclusions(k mapping, p *plan) {
	for i, n := range k.list("leave_out") {
		where := fmt.Sprintf("%s[%d]", k.sub("leave_out"), i+1)
		m, _ := t.mapping(n, where, "where", "because")
		if m.node == nil {
			continue
		}
		x := exclusion{because: m.text("because")}
		if x.because == "" {
			t.fault(m.node, m.sub("because"), "because: slipped", "the reason is missing")
		}
		w, names := t.mapping(m.values["where"], m.sub("where"), "frequency", "temperature", "strain", "time", "row")
		for _, name := range names {
			if name == "row" {
				x.where = append(x.where, condition{value: float64(w.count("row"))})
				continue
			}
			concept, _ := table.ParseConcept(name)
			x.where = append(x.where, condition{concept, w.quantity(name, concept.Quantity(), anySign)})
		}
		if len(x.where) == 0 {
			t.fault(m.node, m.sub("where"), "where: {temperature: -40 °C}", "nothing says which rows to leave out")
		}
		p.leaveOut = append(p.leaveOut, x)
	}
}

// holds reports whether a point meets all conditions: temperatures within half
// a kelvin, other quantities within one percent.
func (x exclusion) holds(pt Point) bool {
	for _, c := range x.where {
		var v, tolerance float64
		switch c.concept {
		case table.Temperature:
			v, tolerance = pt.Temperature, 0.5
		case table.Frequency:
			v, tolerance = pt.Frequency, 0.01*c.value
		case table.Strain:
			v, tolerance = pt.Strain, 0.01*c.value
		case table.Time:
			v, tolerance = pt.Time, 0.01*c.value
		default:
			v = float64(pt.Row)
		}
		if !(math.Abs(v-c.value) <= tolerance) {
			return false
		}
	}
	return true
}

// leftOutPrefix begins the reason of rows that the campaign file leaves out.
const leftOutPrefix = "left out: "

func (p *plan) wanted(t *table.Table, row table.Row, cols columnSet) bool {
	for i, f := range p.rows {
		text := t.Text(row, cols.filters[i])
		if ok, _ := path.Match(f.pattern, text); !ok && text != f.pattern {
			return false
		}
	}
	return true
}
