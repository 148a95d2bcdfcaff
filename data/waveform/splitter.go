package waveform

import "math"

// Problem: where in a long record do frequency or amplitude change?
//
// Turning points of the displacement are confirmed when the signal has come back
// from them by a hysteresis
//
//	h = max(0.3 S 2^-(e-1.5), 8σ),
//
// S being the last swing, e the time since the last turning point over the last
// half period (the power only where e > 1.5, so that a smaller motion is found
// after a larger one), and σ the noise, from the mean square of fourth differences
// over 70. A cycle runs from one upward crossing of the mid-level to the next and
// has a period and a swing. While both stay within Change of their running means
// the motion is steady; two deviating cycles in a row end it, and two cycles in a
// row that agree with each other begin the next steady piece. A rest of 2.5 periods,
// a gap of three periods in time, and time running backward end it as well.
//
// A change can come so near the end of a cycle that it moves the cycle by less than
// Change. Therefore a steady piece begins with the second of the agreeing cycles and
// ends before the last one that agreed: it loses up to three cycles at its beginning
// and two at its end.
//
// It needs five samples a cycle and noise below a thirtieth of the amplitude. It
// does not see a piece that is both below a third of the swing before it and over
// within 1.5 of the half periods before it.

// Boundary is where a piece of a record begins.
type Boundary struct {
	Index  int  // of its first sample, counted from 0 over all samples added
	Steady bool // whether frequency and amplitude are steady from there on
}

// Splitter finds the steady pieces of a record, sample by sample, in constant
// memory. A record begins with an unsteady piece at index 0.
type Splitter struct {
	change float64
	index  int // of the next sample

	last, lastT float64
	any         bool
	d           [4]float64 // last samples, for the fourth difference
	seen        int
	noise2      float64

	dir     int // +1 rising towards a maximum, -1 falling, 0 not known
	ext     float64
	extT    float64
	turns   int
	turn    float64 // the last confirmed turning point
	turnT   float64
	half    float64 // last half period
	swing   float64
	low     float64 // the last minimum and maximum
	high    float64
	crossed bool // the mid-level, since the last minimum

	have       bool // an upward crossing
	crossT     float64
	crossIndex int
	cycle      cycle // the last one
	cycles     int
	steady     bool
	mean       cycle // of the steady piece
	odd        int   // deviating cycles in a row
	good       int   // index where the last agreeing cycle began
}

type cycle struct {
	index         int
	period, swing float64
}

// NewSplitter returns a splitter. change is the relative change of period or swing
// that ends a piece; it panics unless that is between 0 and 1.
func NewSplitter(change float64) *Splitter {
	if !(change > 0 && change < 1) {
		panic("waveform: the change is not between 0 and 1")
	}
	return &Splitter{change: change}
}

// Add takes the next sample and returns a boundary found with it, at its index or
// before. A sample that is not a number only counts.
func (s *Splitter) Add(t, displacement float64) (b Boundary, found bool) {
	i := s.index
	s.index++
	if !finite(t) || !finite(displacement) {
		return b, false
	}
	if s.any && (t < s.lastT || s.cycles > 0 && t-s.lastT > 3*s.cycle.period) {
		b, found = s.restart(i)
	} else if s.steady && t-s.crossT > 2.5*s.mean.period {
		b, found = s.restart(s.good)
	}
	s.follow(t, displacement)
	if s.cross(displacement) {
		when := t
		if mid := (s.low + s.high) / 2; s.any && displacement > s.last && mid > s.last && t > s.lastT {
			when = s.lastT + (t-s.lastT)*(mid-s.last)/(displacement-s.last)
		}
		if s.have && !found {
			b, found = s.judge(cycle{s.crossIndex, when - s.crossT, s.high - s.low})
		}
		s.have, s.crossT, s.crossIndex = true, when, i
	}
	s.last, s.lastT, s.any = displacement, t, true
	return b, found
}

// restart forgets the motion; what was learnt of the noise stays.
func (s *Splitter) restart(index int) (Boundary, bool) {
	was := s.steady
	*s = Splitter{change: s.change, index: s.index, d: s.d, seen: s.seen, noise2: s.noise2, last: s.last, lastT: s.lastT}
	return Boundary{Index: index}, was
}

// follow finds the turning points.
func (s *Splitter) follow(t, x float64) {
	if s.seen >= 4 {
		d := x - 4*s.d[3] + 6*s.d[2] - 4*s.d[1] + s.d[0]
		w := math.Max(1.0/64, 1/float64(s.seen-3))
		s.noise2 += w * (d*d/70 - s.noise2)
	}
	copy(s.d[:], s.d[1:])
	s.d[3] = x
	s.seen++
	if !s.any {
		s.ext, s.extT, s.turn, s.turnT = x, t, x, t
		s.low, s.high = x, x
		return
	}
	h := 0.3 * s.swing
	if e := (t - s.turnT) / s.half; e > 1.5 {
		h *= math.Exp2(1.5 - e)
	}
	h = math.Max(h, 8*math.Sqrt(s.noise2))
	switch {
	case s.dir == 0:
		s.low, s.high = math.Min(s.low, x), math.Max(s.high, x)
		if s.seen < 8 || s.high-s.low <= h {
			return
		}
		s.dir = 1
		if x < s.turn {
			s.dir = -1
		}
		s.ext, s.extT = x, t
	case float64(s.dir)*(x-s.ext) > 0:
		s.ext, s.extT = x, t
	case float64(s.dir)*(s.ext-x) > h:
		s.swing = math.Abs(s.ext - s.turn)
		s.half = s.extT - s.turnT
		s.turn, s.turnT = s.ext, s.extT
		if s.dir > 0 {
			s.high = s.ext
		} else {
			s.low = s.ext
			s.crossed = false
		}
		s.dir = -s.dir
		s.ext, s.extT = x, t
		s.turns++
	}
}

// cross reports the first sample above the mid-level after each minimum.
func (s *Splitter) cross(x float64) bool {
	if s.turns < 2 || s.dir < 0 || s.crossed || x < (s.low+s.high)/2 {
		return false
	}
	s.crossed = true
	return true
}

func (s *Splitter) judge(c cycle) (Boundary, bool) {
	last := s.cycle
	s.cycle = c
	s.cycles++
	agrees := func(a cycle) bool {
		return math.Abs(c.period-a.period) <= s.change*a.period && math.Abs(c.swing-a.swing) <= s.change*a.swing
	}
	if !s.steady {
		if s.cycles > 1 && agrees(last) {
			s.steady, s.odd = true, 0
			s.mean = cycle{period: (c.period + last.period) / 2, swing: (c.swing + last.swing) / 2}
			s.good = c.index
			return Boundary{c.index, true}, true
		}
		return Boundary{}, false
	}
	if agrees(s.mean) {
		s.odd, s.good = 0, c.index
		s.mean.period += (c.period - s.mean.period) / 8
		s.mean.swing += (c.swing - s.mean.swing) / 8
		return Boundary{}, false
	}
	s.odd++
	if s.odd == 1 {
		return Boundary{}, false
	}
	s.steady = false
	return Boundary{s.good, false}, true
}
