package data

import (
	"fmt"
	"math"
	"strings"

	"phaselag/data/place"
	"phaselag/data/table"
)

// columnSet is the columns of a table that a test uses; -1: none.
type columnSet struct {
	frequency, temperature, strain, time int
	a, b                                 int // of the pair of moduli or stiffnesses, or the modulus
	force, displacement                  int // amplitudes that make the modulus
	checkForce, checkDisplacement        int // amplitudes beside moduli
	stiff                                bool
	pair                                 *pair
	lossFactor, phase, viscosity         int // stated beside the pair
	set                                  int // temperature as it was set
	segments                             []int
	filters                              []int
}

// columnsOf finds the columns that the kind of test needs.
func (p *plan) columnsOf(t *table.Table) (cols columnSet, err error) {
	cols = columnSet{frequency: -1, temperature: -1, strain: -1, time: -1, a: -1, b: -1, force: -1, displacement: -1, lossFactor: -1, phase: -1, viscosity: -1, set: -1, checkForce: -1, checkDisplacement: -1}
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
	if i, err := t.Find(table.SetTemperature); err == nil && cols.temperature >= 0 {
		cols.set = i
	}
	if i, err := t.Find(table.ComplexViscosity); err == nil {
		cols.viscosity = i
	}
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
		if err = p.oscillatoryColumns(t, &cols); err == nil {
			p.checkColumns(t, &cols)
		}
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
	case f == 0 && p.ranges(t, table.Temperature) > 5:
		return TemperatureSweep
	case f >= max(s, T) && f > 0:
		return FrequencySweep
	case s > T && s > 0.5:
		return StrainSweep
	case T > 0.5:
		return TemperatureSweep
	}
	return FrequencySweep
}

// ranges is how far a column reaches, in SI; 0 where it cannot be told.
func (p *plan) ranges(t *table.Table, c table.Concept) float64 {
	i, err := t.Find(c)
	if err != nil || i < 0 {
		return 0
	}
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, row := range t.Rows {
		if v, err := t.Value(row, i); err == nil && !math.IsNaN(v) {
			lo, hi = min(lo, v), max(hi, v)
		}
	}
	return max(0, hi-lo)
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
		if err := p.stiffnessColumns(t, cols, at); err != nil || cols.pair != nil {
			return err
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
		for _, j := range []int{cols.frequency, cols.temperature, cols.strain, cols.time, cols.a, cols.b, cols.force, cols.displacement, cols.lossFactor, cols.phase, cols.viscosity, cols.set, cols.checkForce, cols.checkDisplacement} {
			usedHere = usedHere || i == j
		}
		if usedHere {
			p.Columns = append(p.Columns, Column{File: written, Heading: col.Heading, Quantity: string(col.Concept), Unit: col.Unit.Symbol})
		}
	}
}
