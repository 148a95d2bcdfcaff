package figure

import "math"

// scale maps values of one axis to millimetres.
//
// A value v stands at t = v, or t = log10 v on a logarithmic axis, and
//
//	place = p0 + (t − lo)/(hi − lo) · (p1 − p0)
//
// The range [lo, hi] follows the data, rounded outwards: to whole decades where
// the data span 2.5 decades or more, to 1-2-5 numbers below that, and to the
// minor ticks of a linear axis.
type scale struct {
	log    bool
	lo, hi float64
	p0, p1 float64 // mm
	major  []tick
	minor  []float64 // t of ticks without a label
}

// tick is a labelled tick at t.
type tick struct {
	t     float64
	label string
}

// farthest keeps differences of coordinates finite.
const farthest = 1e300

// usable says whether v has a place on the axis.
func (a Axis) usable(v float64) bool {
	if math.IsNaN(v) || math.Abs(v) > farthest {
		return false
	}
	return !a.Log || v > 0
}

func (s scale) value(v float64) float64 {
	if s.log {
		return math.Log10(v)
	}
	return v
}

// place returns the position of v, which must be usable.
func (s scale) place(v float64) float64 { return s.at(s.value(v)) }

func (s scale) at(t float64) float64 {
	// far outside the frame every distance is the same to the clipping, and a
	// bound keeps its products finite
	x := (t - s.lo) / (s.hi - s.lo)
	return s.p0 + math.Max(-1e6, math.Min(1e6, x))*(s.p1-s.p0)
}

// newScale fixes the range of an axis from p0 to p1 (mm) for values, of which
// it reads those that are usable; spacing is the least distance of labels.
func newScale(a Axis, values []float64, p0, p1, spacing float64) scale {
	s := scale{log: a.Log, p0: p0, p1: p1}
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, v := range values {
		if a.usable(v) {
			t := s.value(v)
			lo, hi = math.Min(lo, t), math.Max(hi, t)
		}
	}
	fixedLo, fixedHi := a.usable(a.Min), a.usable(a.Max)
	if a.Min == 0 && a.Max == 0 {
		fixedLo, fixedHi = false, false
	}
	if fixedLo && fixedHi && a.Min >= a.Max {
		fixedLo, fixedHi = false, false
	}
	if fixedLo {
		lo = s.value(a.Min)
	}
	if fixedHi {
		hi = s.value(a.Max)
	}
	switch { // no data, or one end only
	case math.IsInf(lo, 1) && math.IsInf(hi, -1):
		lo, hi = 0, 1
	case math.IsInf(lo, 1):
		lo = hi - 1
	case math.IsInf(hi, -1) || hi < lo:
		hi = lo + 1
	}
	count := math.Max(2, math.Floor(math.Abs(p1-p0)/spacing))
	if a.Log { // powers of ten and short numbers need less room
		count = math.Max(2, math.Floor(1.45*math.Abs(p1-p0)/spacing))
		s.lo, s.hi = logRange(lo, hi, fixedLo, fixedHi)
		s.logTicks(count)
	} else {
		s.lo, s.hi = linearRange(lo, hi, fixedLo, fixedHi, count)
		s.linearTicks(count)
	}
	return s
}

// eps absorbs rounding where data sit exactly on a tick.
const eps = 1e-9

func logRange(lo, hi float64, fixedLo, fixedHi bool) (float64, float64) {
	down, up := math.Floor(lo+eps), math.Ceil(hi-eps)
	if hi-lo < 2.5 {
		down, up = logStep(lo, -1), logStep(hi, 1)
	}
	if fixedLo {
		down = lo
	}
	if fixedHi {
		up = hi
	}
	if up-down < 0.02 { // constant data
		if !fixedLo {
			down = logStep(lo-0.1, -1)
		}
		if !fixedHi {
			up = logStep(hi+0.1, 1)
		}
		if up-down < 1e-6 {
			up = down + 1
		}
	}
	return down, up
}

// logStep returns the next of … 1 2 5 10 … at or beyond 10^t.
func logStep(t float64, direction int) float64 {
	steps := [...]float64{0, math.Log10(2), math.Log10(5), 1}
	decade := math.Floor(t + eps)
	part := t - decade
	if direction < 0 {
		for i := len(steps) - 1; i >= 0; i-- {
			if steps[i] <= part+eps {
				return decade + steps[i]
			}
		}
		return decade
	}
	for _, s := range steps {
		if s >= part-eps {
			return decade + s
		}
	}
	return decade + 1
}

func linearRange(lo, hi float64, fixedLo, fixedHi bool, count float64) (float64, float64) {
	if !(hi-lo > 1e-12*math.Max(math.Abs(hi), math.Abs(lo))) { // constant data
		d := math.Max(0.1*math.Abs(lo), 1e-300)
		if lo == 0 {
			d = 1
		}
		if !fixedLo {
			lo -= d
		}
		if !fixedHi || fixedLo {
			hi += d
		}
	}
	pad := 0.03 * (hi - lo)
	down, up := lo-pad, hi+pad
	if lo >= 0 && down < 0.1*hi {
		down = 0 // moduli and loss factors start at nothing
	}
	if hi <= 0 && up > 0.1*lo {
		up = 0
	}
	step, parts := niceStep(up-down, count)
	minor := step / float64(parts)
	down, up = math.Floor(down/minor+eps)*minor, math.Ceil(up/minor-eps)*minor
	if fixedLo {
		down = lo
	}
	if fixedHi {
		up = hi
	}
	return down, up
}

// niceStep returns the least of 1, 2, 5 times a power of ten that divides the
// span into at most count parts, and into how many parts minor ticks cut it.
func niceStep(span, count float64) (step float64, parts int) {
	power := math.Floor(math.Log10(span / count))
	for {
		base := math.Pow(10, power)
		for _, c := range [...]struct {
			f     float64
			parts int
		}{{1, 5}, {2, 4}, {5, 5}} {
			if span/(c.f*base) <= count+eps {
				return c.f * base, c.parts
			}
		}
		power++
	}
}
