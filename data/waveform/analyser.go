package waveform

import (
	"errors"
	"fmt"
	"math"
)

// Segment is one piece of a long record.
type Segment struct {
	Step        float64 // as given; NaN without a step
	First, Last int     // its samples, counted from 0 over all samples added
	Unsteady    int     // samples before it that belong to no segment, with Detect
	Result      Result  // zero with an Err
	Err         error   // as Analyse returns them
}

// Analyser takes a long record sample by sample and holds a bounded number of
// samples, whatever the record's length: at most Buffer, twice that with Detect.
// What it keeps for good is one Segment per segment.
//
// Segments are the runs of equal steps ([Analyser.AddStep]), or with Detect what a
// [Splitter] finds in the displacement; there what is too short for a fit is no
// segment, but counts as unsteady.
type Analyser struct {
	set      Settings
	cur      *segment // nil: none open
	step     float64
	first    int
	n        int // samples added
	done     []Segment
	split    *Splitter
	ring     []sample // with Detect: samples not yet given to a segment
	head     int      // of the ring: the oldest
	held     int
	unsteady int
	late     int // samples of this segment that went to the one before
	finished bool
}

type sample struct{ t, force, displacement float64 }

// NewAnalyser returns an analyser; the error says what is wrong with the settings.
// Nil settings work.
func NewAnalyser(settings *Settings) (*Analyser, error) {
	set, err := settings.filled()
	if err != nil {
		return nil, err
	}
	a := &Analyser{set: set, step: math.NaN()}
	if set.Detect {
		a.split = NewSplitter(set.Change)
		a.ring = make([]sample, set.Buffer)
	}
	return a, nil
}

// Add takes the next sample: time in s, force in N (or N·m), displacement in m (or
// rad). It panics after Finish.
func (a *Analyser) Add(t, force, displacement float64) { a.AddStep(math.NaN(), t, force, displacement) }

// AddBlock takes the next samples; it panics if the slices differ in length.
func (a *Analyser) AddBlock(r Record) {
	if n := len(r.Time); len(r.Force) != n || len(r.Displacement) != n {
		panic(fmt.Sprintf("waveform: %d times, %d forces and %d displacements", n, len(r.Force), len(r.Displacement)))
	}
	for i, t := range r.Time {
		a.Add(t, r.Force[i], r.Displacement[i])
	}
}

// AddStep takes the next sample of a step. Another step than the one before, NaN
// being one, begins a new segment.
func (a *Analyser) AddStep(step, t, force, displacement float64) {
	if a.finished {
		panic("waveform: sample added after Finish")
	}
	if a.n > 0 && step != a.step && !(math.IsNaN(step) && math.IsNaN(a.step)) {
		a.flush()
		if a.split != nil {
			a.split = NewSplitter(a.set.Change)
			a.split.index = a.n
		}
	}
	a.step = step
	if a.split == nil {
		if a.cur == nil {
			a.begin(a.n)
		}
		a.cur.add(t, force, displacement)
		a.n++
		return
	}
	if a.held == len(a.ring) {
		a.release(1)
	}
	a.ring[(a.head+a.held)%len(a.ring)] = sample{t, force, displacement}
	a.held++
	a.n++
	b, found := a.split.Add(t, displacement)
	if !found {
		return
	}
	oldest := a.n - a.held
	a.late = max(oldest-b.Index, 0)
	a.release(max(b.Index-oldest, 0))
	a.end()
	if b.Steady {
		a.begin(a.n - a.held)
	}
}

// release gives the n oldest samples of the ring to the open segment.
func (a *Analyser) release(n int) {
	for range n {
		v := a.ring[a.head]
		a.head = (a.head + 1) % len(a.ring)
		a.held--
		if a.cur != nil {
			a.cur.add(v.t, v.force, v.displacement)
		} else {
			a.unsteady++
		}
	}
}

func (a *Analyser) begin(first int) {
	a.cur = newSegment(&a.set, a.set.Buffer)
	a.first = first
}

// end closes the open segment.
func (a *Analyser) end() {
	if a.cur == nil {
		return
	}
	s := Segment{Step: a.step, First: a.first, Last: a.n - a.held - 1, Unsteady: a.unsteady}
	s.Result, s.Err = a.cur.finish()
	if a.split != nil && (errors.Is(s.Err, ErrTooFew) || errors.Is(s.Err, ErrTooShort) || errors.Is(s.Err, ErrNoMotion)) {
		// A steady moment, not a piece that anybody meant.
		a.unsteady += s.Last - s.First + 1
		a.late, a.cur = 0, nil
		return
	}
	if a.late > 0 && s.Err == nil {
		s.Result.Doubts = append(s.Result.Doubts, Doubt{Code: ChangeFoundLate, Severity: Suspect, Value: float64(a.late),
			Evidence: fmt.Sprintf("the last %d samples belong to what follows", a.late),
			Cause:    "a cycle is long against the buffer", Remedy: "give a larger buffer, or a step with the samples"})
	}
	a.late, a.unsteady = 0, 0
	a.done = append(a.done, s)
	a.cur = nil
}

// flush ends what is open and counts the rest of the ring.
func (a *Analyser) flush() {
	a.release(a.held)
	a.end()
	a.unsteady, a.late = 0, 0
}

// Finish ends the record and returns its segments in their order.
func (a *Analyser) Finish() []Segment {
	if !a.finished {
		a.flush()
		a.finished = true
	}
	return a.done
}
