package waveform

import "math"

// Problem: has a channel met the end of its range?
//
// A clipped channel stands still at its largest or smallest value. So does an
// unclipped one that is read in steps of q, near the crest of a sine of amplitude
// a: a(1 - cos θ) < q holds for about 2√(2q/a) of the 2π of a cycle. A run at the
// extreme is taken for clipping if it is at least three samples and three more
// than twice that natural run, and comes in two runs or more (one is enough in a
// record of fewer than 2.5 cycles). q is the smallest difference seen between
// neighbours; a channel in which no neighbours are equal but at the extremes is
// not read in steps, and three samples are a run.

// extreme follows the largest value of v (or of -v) and its runs.
type extreme struct {
	value         float64
	run, longest  int
	runs, samples int // runs of three and more; samples at the value
	any           bool
}

func (e *extreme) add(v float64) {
	switch {
	case !e.any || v > e.value:
		*e = extreme{value: v, run: 1, longest: 1, samples: 1, any: true}
	case v == e.value:
		e.run++
		e.samples++
		e.longest = max(e.longest, e.run)
		if e.run == 3 {
			e.runs++
		}
	default:
		e.run = 0
	}
}

// rail follows one channel.
type rail struct {
	top, bottom extreme
	last        float64
	quantum     float64 // smallest difference of neighbours, 0: none yet
	equal       int     // neighbours equal, away from the extremes
	n           int
}

func (r *rail) add(v float64) {
	r.top.add(v)
	r.bottom.add(-v)
	if d := math.Abs(v - r.last); r.n > 0 && d > 0 && (r.quantum == 0 || d < r.quantum) {
		r.quantum = d
	}
	if r.n > 0 && v == r.last && v < r.top.value && -v < r.bottom.value {
		r.equal++
	}
	r.last = v
	r.n++
}

// gap ends the runs: what follows does not join what was before.
func (r *rail) gap() { r.top.run, r.bottom.run = 0, 0 }

// clipped returns the end that shows clipping, its longest run and the run from
// which on it counts.
func (r *rail) clipped(perCycle, cycles float64) (e extreme, value float64, limit int, yes bool) {
	a := (r.top.value + r.bottom.value) / 2
	if !(a > 0) {
		return e, 0, 0, false
	}
	natural := math.Sqrt(2*r.quantum/a) / math.Pi * perCycle
	if r.equal > 0 && natural > float64(r.n) {
		return e, 0, 0, false
	}
	limit = 3
	if r.equal > 0 && natural > 0.5 {
		limit += int(math.Ceil(2 * natural))
	}
	e, value = r.top, r.top.value
	if r.bottom.longest > e.longest {
		e, value = r.bottom, -r.bottom.value
	}
	return e, value, limit, e.longest >= limit && (e.runs >= 2 || cycles < 2.5)
}
