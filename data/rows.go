package data

import (
	"fmt"
	"math"
	"strings"

	"phaselag/data/place"
	"phaselag/data/table"
	"phaselag/data/unit"
)

// readTable turns one table into points, or static values, and gives the number
// of its blocks.
func (p *plan) readTable(c *Campaign, t *table.Table, written string, firstBlock int) (blocks int, err error) {
	cols, err := p.columnsOf(t)
	if err != nil {
		return 0, err
	}
	p.describeColumns(t, written, cols)
	p.conflictingAmplitudes(c, t, cols, written)
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
	pt.Loss, pt.StatedLossFactor, pt.StatedViscosity, pt.MassShare, pt.FrameShare = math.NaN(), math.NaN(), math.NaN(), math.NaN(), math.NaN()
	var faults place.List
	get := func(column int, constant float64) float64 {
		v, err := p.cell(t, row, column, constant)
		faults.Add(err)
		return v
	}
	pt.Temperature = get(cols.temperature, p.temperature)
	pt.set = get(cols.set, math.NaN())
	pt.Strain = p.single(t, cols.strain) * get(cols.strain, p.strain)
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
		if cols.force >= 0 {
			a = p.single(t, cols.force) * get(cols.force, math.NaN()) / (p.single(t, cols.displacement) * get(cols.displacement, math.NaN()))
		}
		pt.Storage, pt.Loss = cols.pair.complex(a, b)
		pt.Reason = modulusFault(pt.Storage, pt.Loss)
		pt.second = p.secondOf(t, cols, get)
		if pt.Reason == "" {
			p.throughShape(&pt.Point)
		}
		if p.shape != nil && cols.displacement >= 0 && cols.strain < 0 {
			if x := p.single(t, cols.displacement) * get(cols.displacement, math.NaN()); !math.IsNaN(x) && x >= 0 {
				pt.Strain = p.shape.Strain(x)
				p.moved = true
			}
		}
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
		if cols.viscosity >= 0 {
			pt.StatedViscosity = get(cols.viscosity, math.NaN())
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

// toSingle is the factor from each kind of amplitude to the single amplitude.
var toSingle = map[string]float64{"zero to peak": 1, "peak to peak": 0.5, "rms": math.Sqrt2}

// single is the factor to the single amplitude of a column: what the campaign file
// says, else what the heading says.
func (p *plan) single(t *table.Table, column int) float64 {
	kind := p.amplitude
	if column >= 0 && !p.amplitudeStated && t.Columns[column].Amplitude != "" {
		kind = t.Columns[column].Amplitude
		p.amplitudeRead = true
	}
	return toSingle[kind]
}

// conflictingAmplitudes doubts a campaign file that says another kind of amplitude
// than the heading does.
func (p *plan) conflictingAmplitudes(c *Campaign, t *table.Table, cols columnSet, written string) {
	for _, i := range []int{cols.strain, cols.displacement} {
		if i < 0 || !p.amplitudeStated {
			continue
		}
		if said := t.Columns[i].Amplitude; said != "" && said != p.amplitude {
			c.Findings = append(c.Findings, Finding{Code: "amplitude-contradicted", Severity: Severe, Test: p.Name, Rows: fmt.Sprintf("%s:%d", written, t.HeaderLine),
				Evidence: fmt.Sprintf("the campaign file says amplitude: %s, the heading %q says %s", p.amplitude, clip(t.Columns[i].Heading), said),
				Cause:    "one of the two is wrong", Remedy: fmt.Sprintf("if the heading is right, leave amplitude out; strains are wrong by a factor of %.3g otherwise", toSingle[said]/toSingle[p.amplitude])})
		}
	}
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
