package data

import (
	"fmt"
	"math"
	"path"
	"strings"

	"phaselag/data/place"
	"phaselag/data/table"
	"phaselag/data/unit"
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

// columnSet is the columns of a table that a test uses; -1: none.
type columnSet struct {
	frequency, temperature, strain, time int
	a, b                                 int // of the pair of moduli, or the modulus
	pair                                 *pair
	lossFactor, phase                    int // stated beside the pair
	segments                             []int
	filters                              []int
}

// readTable turns one table into points, or static values, and gives the number
// of its blocks.
func (p *plan) readTable(c *Campaign, t *table.Table, written string, firstBlock int) (blocks int, err error) {
	cols, err := p.columnsOf(t)
	if err != nil {
		return 0, err
	}
	p.describeColumns(t, written, cols)
	var faults place.List
	kept := 0
	for _, row := range t.Rows {
		blocks = max(blocks, row.Block+1)
		if !p.wanted(t, row, cols) {
			continue
		}
		kept++
		if len(faults) >= 20 {
			break
		}
		if p.Kind == Static {
			faults.Add(p.addStatic(t, row, cols, written))
			continue
		}
		faults.Add(p.addPoint(t, row, cols, written, firstBlock))
	}
	if err := faults.Err(); err != nil {
		return blocks, err
	}
	if kept == 0 {
		f := p.rows[0]
		return blocks, &place.Error{File: p.where.File, Line: f.line, Column: f.column, Path: p.where.Path + ".rows",
			What: fmt.Sprintf("no row of %s has %q in the column %q", written, clip(f.pattern), clip(f.heading)), Hint: "patterns may have * and ?"}
	}
	if p.Kind == Static {
		return blocks, nil
	}
	return blocks, p.screenPoints(c, written)
}

// screenPoints names the rows that cannot be used, and refuses a table of which
// none can.
func (p *plan) screenPoints(c *Campaign, written string) error {
	bad, all := 0, 0
	var lines []string
	reason := ""
	for _, pt := range p.points {
		if pt.File != written {
			continue
		}
		all++
		if pt.Used || strings.HasPrefix(pt.Reason, leftOutPrefix) {
			continue
		}
		bad++
		if reason == "" {
			reason = pt.Reason
		}
		if len(lines) < 8 {
			lines = append(lines, fmt.Sprint(pt.Row))
		}
	}
	if bad == 0 {
		return nil
	}
	rows := written + ":" + strings.Join(lines, ", ")
	if bad > len(lines) {
		rows += ", …"
	}
	if bad == all {
		return &place.Error{File: written, What: fmt.Sprintf("no row can be used: %s", reason), Hint: "check units, signs and columns"}
	}
	c.Findings = append(c.Findings, Finding{
		Code: "rows-not-usable", Severity: Doubt, Test: p.Name, Rows: rows,
		Evidence: fmt.Sprintf("%d of %d rows cannot be used: %s", bad, all, reason),
		Cause:    "an empty or meaningless cell, or a point taken before the deformation was there", Remedy: "look at these rows; they are left out",
	})
	return nil
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

// columnsOf finds the columns that the kind of test needs.
func (p *plan) columnsOf(t *table.Table) (cols columnSet, err error) {
	cols = columnSet{-1, -1, -1, -1, -1, -1, nil, -1, -1, nil, nil}
	for _, f := range p.rows {
		i := headingColumn(t, f.heading)
		if i < 0 {
			return cols, &place.Error{File: p.where.File, Line: f.line, Column: f.column, Path: p.where.Path + ".rows",
				What: fmt.Sprintf("no column of %s has the heading %q", t.File, clip(f.heading)), Hint: "headings: " + strings.Join(t.Headings(), ", ")}
		}
		cols.filters = append(cols.filters, i)
	}
	for _, v := range []struct {
		at      *int
		concept table.Concept
	}{{&cols.frequency, table.Frequency}, {&cols.temperature, table.Temperature}, {&cols.strain, table.Strain}, {&cols.time, table.Time}} {
		if v.concept == table.Frequency && (p.Kind == Relaxation || p.Kind == Static) {
			continue
		}
		if *v.at, err = t.Find(v.concept); err != nil {
			// A time column beside an oscillatory test is not used.
			if v.concept == table.Time && p.Kind != Relaxation {
				*v.at = -1
				continue
			}
			return cols, err
		}
	}
	cols.segments = t.FindAll(table.Segment)
	if p.Kind == "" {
		p.Kind = p.kindOf(t)
	}
	switch p.Kind {
	case Relaxation:
		err = p.relaxationColumns(t, &cols)
	case Static:
		if cols.a, err = t.Find(table.StaticModulus); err == nil && cols.a < 0 {
			err = p.lack(t, "modulus", table.StaticModulus)
		}
	default:
		err = p.oscillatoryColumns(t, &cols)
	}
	return cols, err
}

// headingColumn finds a column by its heading, capitals not counted.
func headingColumn(t *table.Table, heading string) int {
	for i, h := range t.Headings() {
		if h == heading {
			return i
		}
	}
	for i, h := range t.Headings() {
		if strings.EqualFold(strings.TrimSpace(h), strings.TrimSpace(heading)) {
			return i
		}
	}
	return -1
}

// kindOf tells the kind of a bare table by what varies.
func (p *plan) kindOf(t *table.Table) Kind {
	if i, _ := t.Find(table.RelaxationModulus); i >= 0 {
		return Relaxation
	}
	// The share of steps from row to row in which a column changes.
	changes := func(c table.Concept, relative float64) float64 {
		i, err := t.Find(c)
		if err != nil || i < 0 || len(t.Rows) < 2 {
			return 0
		}
		n := 0
		last := math.NaN()
		for k, row := range t.Rows {
			v, err := t.Value(row, i)
			if err != nil {
				return 0
			}
			if k > 0 && math.Abs(v-last) > relative*math.Abs(last) {
				n++
			}
			last = v
		}
		return float64(n) / float64(len(t.Rows)-1)
	}
	f, s, T := changes(table.Frequency, 0.01), changes(table.Strain, 0.05), changes(table.Temperature, 0.002)
	switch {
	case f >= max(s, T) && f > 0:
		return FrequencySweep
	case s > T && s > 0.5:
		return StrainSweep
	case T > 0.5:
		return TemperatureSweep
	}
	return FrequencySweep
}

func (p *plan) lack(t *table.Table, what string, concepts ...table.Concept) error {
	return &place.Error{File: t.File, Line: t.HeaderLine, What: fmt.Sprintf("no column for the %s; %s", what, describe(t)), Hint: "say in the campaign file " + snippet(concepts...)}
}

func (p *plan) relaxationColumns(t *table.Table, cols *columnSet) (err error) {
	if cols.time < 0 {
		return p.lack(t, "time", table.Time)
	}
	for _, c := range []table.Concept{table.RelaxationModulus, table.StaticModulus, table.Storage} {
		if cols.a, err = t.Find(c); err != nil || cols.a >= 0 {
			break
		}
	}
	if err == nil && cols.a < 0 {
		err = p.lack(t, "relaxation modulus", table.RelaxationModulus)
	}
	if err == nil {
		err = p.constants(t, cols, false)
	}
	if err == nil {
		err = p.modulusOf(t, cols.a)
	}
	return err
}

func (p *plan) oscillatoryColumns(t *table.Table, cols *columnSet) error {
	at := map[table.Concept]int{}
	var trouble error
	for _, c := range []table.Concept{table.Storage, table.Loss, table.Magnitude, table.LossFactor, table.Phase} {
		i, err := t.Find(c)
		if err != nil {
			if len(t.FindAll(c)) > 1 {
				return err
			}
			if trouble == nil {
				trouble = err
			}
			i = -1
		}
		at[c] = i
	}
	for k := range pairs {
		v := &pairs[k]
		if at[v.a] >= 0 && at[v.b] >= 0 {
			cols.pair, cols.a, cols.b = v, at[v.a], at[v.b]
			break
		}
	}
	if cols.pair == nil {
		if trouble != nil {
			return trouble
		}
		return p.lack(t, "complex modulus: two of storage modulus, loss modulus, complex modulus, loss factor and phase angle are needed", table.Storage, table.Loss)
	}
	if cols.pair.a != table.LossFactor && cols.pair.b != table.LossFactor {
		cols.lossFactor = at[table.LossFactor]
	}
	if cols.lossFactor < 0 && cols.pair.b != table.Phase && cols.pair.b != table.LossFactor {
		cols.phase = at[table.Phase]
	}
	for _, i := range []int{cols.a, cols.b} {
		if err := p.modulusOf(t, i); err != nil {
			return err
		}
	}
	return p.constants(t, cols, true)
}

// constants checks that what has no column is stated.
func (p *plan) constants(t *table.Table, cols *columnSet, frequency bool) error {
	if frequency && cols.frequency < 0 && math.IsNaN(p.frequency) {
		e := p.lack(t, "frequency", table.Frequency).(*place.Error)
		e.Hint += ", or frequency: 10 Hz for the whole test"
		return e
	}
	if cols.temperature < 0 && math.IsNaN(p.temperature) {
		e := p.lack(t, "temperature", table.Temperature).(*place.Error)
		e.Hint += ", or temperature: 23 °C for the whole test"
		return e
	}
	return nil
}

// modulusOf notes whether a column's heading speaks of shear or of Young's
// modulus, and refuses a table that has both.
func (p *plan) modulusOf(t *table.Table, i int) error {
	col := t.Columns[i]
	switch {
	case col.Modulus == "" || p.modulus == col.Modulus:
	case p.modulus == "":
		p.modulus = col.Modulus
	default:
		return &place.Error{File: t.File, Line: col.Line, Column: col.Place, What: fmt.Sprintf("%q beside a modulus of the other kind: G and E in one test", clip(col.Heading)), Hint: "choose the columns in the campaign file, or make two tests of it"}
	}
	return nil
}

// describeColumns records how each used column was understood.
func (p *plan) describeColumns(t *table.Table, written string, cols columnSet) {
	for i, col := range t.Columns {
		usedHere := false
		for _, j := range []int{cols.frequency, cols.temperature, cols.strain, cols.time, cols.a, cols.b, cols.lossFactor, cols.phase} {
			usedHere = usedHere || i == j
		}
		if usedHere {
			p.Columns = append(p.Columns, Column{File: written, Heading: col.Heading, Quantity: string(col.Concept), Unit: col.Unit.Symbol})
		}
	}
}

// cell reads a number, or the constant where there is no column.
func (p *plan) cell(t *table.Table, row table.Row, column int, constant float64) (float64, error) {
	if column < 0 {
		return constant, nil
	}
	return t.Value(row, column)
}

func (p *plan) addPoint(t *table.Table, row table.Row, cols columnSet, written string, firstBlock int) error {
	pt := raw{block: firstBlock + row.Block}
	pt.File, pt.Row = written, row.Line
	pt.Frequency, pt.Temperature, pt.Strain, pt.Time = math.NaN(), math.NaN(), math.NaN(), math.NaN()
	pt.Loss, pt.StatedLossFactor = math.NaN(), math.NaN()
	var faults place.List
	get := func(column int, constant float64) float64 {
		v, err := p.cell(t, row, column, constant)
		faults.Add(err)
		return v
	}
	pt.Temperature = get(cols.temperature, p.temperature)
	pt.Strain = p.amplitude * get(cols.strain, p.strain)
	if p.Kind == Relaxation {
		pt.Strain = get(cols.strain, p.strain)
		pt.Time = get(cols.time, math.NaN())
		pt.Storage = get(cols.a, math.NaN())
		pt.Reason = relaxationFault(pt.Time, pt.Storage)
	} else {
		pt.Frequency = get(cols.frequency, p.frequency)
		if cols.frequency >= 0 && pt.Frequency <= 0 {
			line, column := t.At(row, cols.frequency)
			faults.Add(&place.Error{File: t.File, Line: line, Column: column, What: fmt.Sprintf("the frequency %q is not greater than zero", clip(t.Text(row, cols.frequency))), Hint: "correct the row, or leave it out"})
		}
		a, b := get(cols.a, math.NaN()), get(cols.b, math.NaN())
		pt.Storage, pt.Loss = cols.pair.complex(a, b)
		pt.Reason = modulusFault(pt.Storage, pt.Loss)
		switch {
		case pt.Reason != "":
		case math.IsNaN(pt.Frequency) || math.IsInf(pt.Frequency, 0):
			pt.Reason = "frequency not measured"
		}
		if cols.lossFactor >= 0 {
			pt.StatedLossFactor = get(cols.lossFactor, math.NaN())
		} else if cols.phase >= 0 {
			pt.StatedLossFactor = tangent(get(cols.phase, math.NaN()))
		}
	}
	if pt.Reason == "" && (math.IsNaN(pt.Temperature) || math.IsInf(pt.Temperature, 0)) {
		pt.Reason = "temperature not measured"
	}
	if pt.Reason == "" && (pt.Strain < 0 || math.IsInf(pt.Strain, 0)) {
		pt.Reason = "strain negative or infinite"
	}
	for _, i := range cols.segments {
		pt.segment += t.Text(row, i) + "\x00"
	}
	if err := faults.Err(); err != nil {
		return err
	}
	for _, x := range p.leaveOut {
		if pt.Reason == "" && x.holds(pt.Point) {
			pt.Reason = leftOutPrefix + x.because
		}
	}
	pt.Used = pt.Reason == ""
	p.points = append(p.points, pt)
	return nil
}

func relaxationFault(t, g float64) string {
	switch {
	case math.IsNaN(t) || math.IsNaN(g):
		return "time or modulus not measured"
	case math.IsInf(t, 0) || math.IsInf(g, 0):
		return "time or modulus infinite"
	case t <= 0:
		return "time not positive"
	case g <= 0:
		return "relaxation modulus not positive"
	}
	return ""
}

func (p *plan) addStatic(t *table.Table, row table.Row, cols columnSet, written string) error {
	var faults place.List
	get := func(column int, constant float64) float64 {
		v, err := p.cell(t, row, column, constant)
		faults.Add(err)
		return v
	}
	v := StaticValue{File: written, Row: row.Line, Modulus: get(cols.a, math.NaN()), Strain: get(cols.strain, p.strain), Time: get(cols.time, math.NaN()), Temperature: get(cols.temperature, p.temperature), U: math.NaN()}
	if len(faults) == 0 && !(v.Modulus > 0 && !math.IsInf(v.Modulus, 0)) {
		line, column := t.At(row, cols.a)
		faults.Add(&place.Error{File: t.File, Line: line, Column: column, What: "the modulus is not positive"})
	}
	if len(faults) == 0 {
		p.StaticValues = append(p.StaticValues, v)
		if err := p.modulusOf(t, cols.a); err != nil {
			return err
		}
	}
	return faults.Err()
}

// celsius prints a temperature for people.
func celsius(T float64) string {
	return strings.Replace(fmt.Sprintf("%g °C", math.Round(unit.Celsius(T)*10)/10+0), "-", "−", 1)
}
