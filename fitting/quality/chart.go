package quality

import (
	"fmt"
	"math"
)

// Batch is one point of a series: the results of one batch in the order of testing of the
// batches.
type Batch struct {
	Name   string
	Values []float64 // one result, or the repeats; NaN: not measured
	U95    float64   // of the mean of Values, for the picture and for Line.Doubtful; NaN: not known
}

// mean and number of the measured values.
func (b Batch) mean() (mean float64, n int) {
	v := measured(b.Values)
	mean, _ = moments(v)
	return mean, len(v)
}

// Settings of a chart. The zero value works.
type Settings struct {
	// Base is the number of batches at the beginning that set centre line and limits; all
	// later ones are held against them. 0, or more than there are: all.
	Base int
	// Patterns that call out points; nil: StandardSet. An empty list: none. The charts of
	// scatter and the EWMA know Beyond alone: their values are not symmetric, or not
	// independent of each other.
	Patterns []Pattern
	// Known takes centre line and sigma of a single value from elsewhere; nil: from the
	// base. Individuals and EWMA heed it.
	Known *Known
	// Lambda is the weight of the newest batch in the EWMA, above 0 and up to 1; 0: 0.2.
	Lambda float64
	// Reach is L, the distance of the EWMA's limits in sigmas; 0: 2.86, which gives the
	// Lambda of 0.2 about the run length of Individuals.
	Reach float64
	// Scatter says from what the EWMA takes sigma; "": Within where every batch of the
	// base has two values or more, MovingRange otherwise.
	Scatter Scatter
}

// Known is a process whose centre and sigma are given.
type Known struct{ Centre, Sigma float64 }

// Scatter is a source of sigma.
type Scatter string

// The sources of sigma: the ranges within batches, or the moving range of their means.
// Batches of rubber differ by more than repeats of one do; the moving range holds that
// difference, the scatter within does not.
const (
	Within      Scatter = "within batches"
	MovingRange Scatter = "moving range"
)

// Line is one point of a chart with its limits.
type Line struct {
	Name                 string
	Value, U95           float64 // NaN: not measured, not known
	Lower, Centre, Upper float64 // Lower is NaN where the chart has no lower limit
	Base                 bool    // it helped to set the limits
	Violations           []Pattern
	// Doubtful says that the point lies beyond a limit by less than its U95.
	Doubtful bool
}

// Chart is a control chart.
type Chart struct {
	Kind   string  // "individuals", "moving range", "averages", "ranges", "standard deviations", "EWMA"
	Centre float64 // of the first line
	Sigma  float64 // of a single value, as the chart takes it
	From   string  // where sigma comes from
	Base   int     // measured points that set the limits; 0: given
	Lines  []Line
	Doubts []string // nil for none
}

// Called is the number of points that a pattern calls out.
func (c *Chart) Called() int {
	n := 0
	for _, l := range c.Lines {
		if len(l.Violations) > 0 {
			n++
		}
	}
	return n
}

// FewBatches is the number below which limits and capability are doubted (common practice,
// no source: 20 to 25 batches).
const FewBatches = 25

func (c *Chart) doubtBase() {
	if c.Base > 0 && c.Base < FewBatches {
		c.Doubts = append(c.Doubts, fmt.Sprintf("the limits rest on %d points; %d are wanted", c.Base, FewBatches))
	}
	if c.Sigma == 0 {
		c.Doubts = append(c.Doubts, "the base shows no scatter: the resolution of the test is too coarse, or the values are copies")
	}
}

// base is the number of points of the first stretch.
func (s Settings) base(n int) (int, error) {
	if s.Base < 0 {
		return 0, fmt.Errorf("a base of %d batches", s.Base)
	}
	if s.Base == 0 || s.Base > n {
		return n, nil
	}
	return s.Base, nil
}

func (s Settings) patterns(location bool) []Pattern {
	set := s.Patterns
	if set == nil {
		set = StandardSet()
	}
	if location {
		return set
	}
	for _, p := range set {
		if p == Beyond {
			return []Pattern{Beyond}
		}
	}
	return nil
}

func (s Settings) known() (centre, sigma float64, ok bool, err error) {
	if s.Known == nil {
		return 0, 0, false, nil
	}
	k := *s.Known
	if !finite(k.Centre) || !finite(k.Sigma) || k.Sigma <= 0 {
		return 0, 0, false, fmt.Errorf("a known process with centre %g and sigma %g; sigma is above zero", k.Centre, k.Sigma)
	}
	return k.Centre, k.Sigma, true, nil
}

// call finds the violations. The limits lie three units of z from the centre, whatever
// their distance: upper and lower side have a unit of their own.
func (c *Chart) call(patterns []Pattern) {
	z := make([]float64, len(c.Lines))
	for i := range c.Lines {
		z[i] = c.Lines[i].sigmas()
	}
	for i, v := range Violations(z, patterns) {
		l := &c.Lines[i]
		l.Violations = v
		beyond := math.Max(l.Value-l.Upper, l.Lower-l.Value)
		if math.IsNaN(l.Lower) {
			beyond = l.Value - l.Upper
		}
		l.Doubtful = beyond > 0 && beyond < l.U95
	}
}

// sigmas is the place of a point between centre (0) and limits (±3). A point that rests on
// its limit by arithmetic is not beyond it: rounding is given 1e-12 of the value.
func (l Line) sigmas() float64 {
	if !finite(l.Value) {
		return math.NaN()
	}
	off, room := l.Value-l.Centre, l.Upper-l.Centre
	if off < 0 {
		room = l.Centre - l.Lower
		if math.IsNaN(l.Lower) {
			room = l.Upper - l.Centre
			off = math.Max(off, -room) // below the centre there is no limit to be beyond
		}
	}
	tiny := 1e-12 * (math.Abs(l.Value) + math.Abs(l.Centre))
	if math.Abs(off) <= tiny {
		return 0
	}
	if math.Abs(off) > room && math.Abs(off) <= room+tiny {
		return math.Copysign(3, off)
	}
	return 3 * off / room
}
