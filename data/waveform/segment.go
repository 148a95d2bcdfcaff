package waveform

import (
	"errors"
	"fmt"
	"math"

	"phaselag/data/place"
)

// Plan of a segment. The first probeSize samples give the usual step of time. All
// samples pass the clock and the rails, then the averaging, and collect in the
// head. If the head is never filled, the fit is made on it. Otherwise its frequency
// and onset are found when it is full, it is poured into a stream, and what follows
// goes there directly. A full head that holds fewer than leastCycles cycles is
// averaged two by two and filled again. A cycle then has s = Buffer/32 samples or
// more; averaging loses the part (hπ/s)²/3 of the information on harmonic h, which
// with the least buffer moves the fundamental by 0.02 of its uncertainty, with the
// default one by less than 0.001.

const (
	probeSize   = 256
	leastCycles = 16
)

type segment struct {
	set         *Settings
	limit       int // of the head, 0: none
	counts      Counts
	clock       clock
	rails       [2]rail
	probe       [][3]float64
	t, f, x     []float64 // the head
	group       int       // samples averaged into one
	sum         [3]float64
	summed      int
	stream      *stream
	onset       onset
	start       float64 // first sample used
	restLeftOut int
	fF, fx      float64 // each channel's own frequency, from the head
	headTime    float64 // length of the record they come from
}

func newSegment(set *Settings, limit int) *segment {
	return &segment{set: set, limit: limit, group: 1}
}

// add takes one sample.
func (s *segment) add(t, force, displacement float64) {
	s.counts.Given++
	if s.clock.dt > 0 {
		s.pass(t, force, displacement)
		return
	}
	s.probe = append(s.probe, [3]float64{t, force, displacement})
	if len(s.probe) >= probeSize {
		s.drain()
	}
}

// drain fixes the usual step and passes the probe on, except while the time stands
// still: then the probe is forgotten.
func (s *segment) drain() {
	if len(s.probe) == 0 {
		return
	}
	// A step back must not spoil the step: the longest forward part counts.
	var forward, best []float64
	for _, p := range s.probe {
		if !finite(p[0]) {
			forward = nil
			continue
		}
		if len(forward) > 0 && p[0] < forward[len(forward)-1] {
			forward = nil
		}
		forward = append(forward, p[0])
		if len(forward) > len(best) {
			best = forward
		}
	}
	s.clock.dt = usualStep(best)
	if s.clock.dt == 0 {
		for _, p := range s.probe {
			if finite(p[0]) {
				s.counts.LeftOut++
			} else {
				s.counts.Missing++
			}
		}
		s.probe = s.probe[:0]
		return
	}
	probe := s.probe
	s.probe = nil
	for _, p := range probe {
		s.pass(p[0], p[1], p[2])
	}
}

func (s *segment) pass(t, force, displacement float64) {
	if !finite(t) {
		s.counts.Missing++
		s.clock.untold++
		return
	}
	if s.clock.any && t < s.clock.last {
		s.counts.Backward++
		s.clock.untold++
		return
	}
	gap := s.clock.step(t)
	if !finite(force) || !finite(displacement) {
		s.counts.Missing++
		gap = true
	}
	if gap {
		s.rails[0].gap()
		s.rails[1].gap()
		s.drop()
	}
	if !finite(force) || !finite(displacement) {
		return
	}
	s.rails[0].add(force)
	s.rails[1].add(displacement)
	if s.group == 1 {
		s.take(t, force, displacement)
		return
	}
	s.sum[0] += t
	s.sum[1] += force
	s.sum[2] += displacement
	s.summed++
	if s.summed == s.group {
		g := float64(s.group)
		t, force, displacement = s.sum[0]/g, s.sum[1]/g, s.sum[2]/g
		s.sum, s.summed = [3]float64{}, 0
		s.take(t, force, displacement)
	}
}

// drop forgets a group that is not complete.
func (s *segment) drop() {
	s.counts.LeftOut += s.summed
	s.sum, s.summed = [3]float64{}, 0
}

func (s *segment) take(t, force, displacement float64) {
	if s.stream != nil {
		s.stream.add(t, force, displacement)
		return
	}
	s.t, s.f, s.x = append(s.t, t), append(s.f, force), append(s.x, displacement)
	if s.limit > 0 && len(s.t) >= s.limit {
		s.pour()
	}
}

// step is the usual step of the samples in the head.
func (s *segment) step() float64 { return s.clock.dt * float64(s.group) }

// ahead is how far a group's first sample lies before its mean.
func (s *segment) ahead() float64 { return float64(s.group-1) / 2 * s.clock.dt }

// perCycle is how many samples of the head a cycle has.
func (s *segment) perCycle(omega float64) float64 { return 2 * math.Pi / omega / s.step() }

// leaveOut removes the leading cycles from the head.
func (s *segment) leaveOut(sol *solution) bool {
	omega := sol.frame.omega
	period := 2 * math.Pi / omega
	end := s.t[0]
	switch k := s.set.LeaveOut; {
	case k > 0:
		s.onset = onset{cycles: k}
		end = s.t[0] + float64(k)*period
	case k == 0:
		s.onset = findOnset(s.t, s.f, s.x, omega, sol.layout, s.perCycle(omega))
		if 3*s.onset.cycles <= s.onset.compared && s.onset.cycles > 0 {
			end = s.onset.end
		}
	}
	i := 0
	for i < len(s.t) && s.t[i] < end-s.step()/2 {
		i++
	}
	s.counts.LeftOut += i * s.group
	s.t, s.f, s.x = s.t[i:], s.f[i:], s.x[i:]
	return i > 0
}

// pour empties a full head.
func (s *segment) pour() {
	sol, err := s.fit()
	if err != nil {
		if per := 1 / (s.fx * s.step()); per > 80 && (errors.Is(err, ErrTooShort) || errors.Is(err, ErrFit)) {
			s.pair()
			return
		}
		// At rest yet, it seems: the older half goes.
		n := len(s.t) / 2
		s.counts.LeftOut += n * s.group
		s.restLeftOut += n * s.group
		s.keep(n)
		return
	}
	per := s.perCycle(sol.frame.omega)
	if c := float64(len(s.t)) / per; c < leastCycles && per > 80 {
		s.pair()
		return
	}
	if n := restBefore(s.t, s.x, sol.frame.omega); n > 0 {
		s.counts.LeftOut += n * s.group
		s.restLeftOut += n * s.group
		s.keep(n)
		return
	}
	t, f, x := s.t, s.f, s.x
	s.leaveOut(sol)
	if len(s.t) == 0 {
		s.t, s.f, s.x = t[:0], f[:0], x[:0]
		return
	}
	period := 2 * math.Pi / sol.frame.omega
	cycles := math.Ceil(math.Max(1, 200/per))
	st := newStream(sol.layout, sol.frame.omega, s.t[0], cycles*period, !s.set.Known)
	s.start = s.t[0] - s.ahead()
	for i := range s.t {
		st.add(s.t[i], s.f[i], s.x[i])
	}
	s.t, s.f, s.x = nil, nil, nil
	s.stream = st
}

// keep drops the first n samples of the head.
func (s *segment) keep(n int) {
	s.t = append(s.t[:0], s.t[n:]...)
	s.f = append(s.f[:0], s.f[n:]...)
	s.x = append(s.x[:0], s.x[n:]...)
}

// pair averages the head two by two. A sample whose neighbour is missing goes.
func (s *segment) pair() {
	step := s.step()
	k := 0
	for i := 0; i < len(s.t); {
		if i+1 == len(s.t) || s.t[i+1]-s.t[i] > 1.5*step {
			s.counts.LeftOut += s.group
			i++
			continue
		}
		s.t[k], s.f[k], s.x[k] = (s.t[i]+s.t[i+1])/2, (s.f[i]+s.f[i+1])/2, (s.x[i]+s.x[i+1])/2
		k++
		i += 2
	}
	s.t, s.f, s.x = s.t[:k], s.f[:k], s.x[:k]
	s.group *= 2
}

// finish fits what was collected.
func (s *segment) finish() (Result, error) {
	s.drain()
	if s.clock.dt == 0 && s.counts.Given-s.counts.Missing > 1 {
		return Result{}, refuse(ErrTime, fmt.Sprintf("%d samples", s.counts.Given), "the time column may be the wrong one")
	}
	s.drop()
	r := Result{}
	var sol *solution
	if s.stream == nil {
		var err error
		if sol, err = s.fit(); err != nil {
			return Result{}, err
		}
		rest := restBefore(s.t, s.x, sol.frame.omega)
		if rest > 0 {
			s.counts.LeftOut += rest * s.group
			s.restLeftOut += rest * s.group
			s.keep(rest)
			if sol, err = s.fit(); err != nil {
				return Result{}, err
			}
		}
		if s.leaveOut(sol) {
			if sol, err = s.fit(); err != nil {
				return Result{}, err
			}
		}
		s.start = s.t[0] - s.ahead()
		// Blocks for the judgement alone.
		period := 2 * math.Pi / sol.frame.omega
		length := s.t[len(s.t)-1] - s.t[0] + s.step()
		cycles := math.Max(math.Ceil(length/period/(maxBlocks/2)), 1)
		for cycles*s.perCycle(sol.frame.omega) < float64(sol.layout.columns()+8) {
			cycles++
		}
		s.stream = newStream(sol.layout, sol.frame.omega, s.t[0], cycles*period, false)
		for i := range s.t {
			s.stream.add(s.t[i], s.f[i], s.x[i])
		}
		s.stream.close()
	} else {
		s.stream.close()
		r.Streamed = true
		if sol = s.stream.solve(); sol == nil {
			return Result{}, refuse(ErrFit, fmt.Sprintf("no single sine near %.4g Hz fits the segment", s.stream.omega/(2*math.Pi)), "split the record where the frequency changes")
		}
	}
	d := &derivation{s: sol, start: s.start, mean: s.group, gain: math.Sqrt(float64(s.group)), dt: s.clock.dt}
	r.derive(d)
	bl := s.stream.blocks
	r.Start, r.End = s.start, bl[len(bl)-1].last+s.ahead()
	r.Cycles = r.Frequency * (r.End - r.Start + s.clock.dt)
	r.PerCycle = 1 / (r.Frequency * s.clock.dt)
	r.Counts = s.counts
	r.Counts.Lost = s.clock.lost
	r.Counts.Used = sol.n * s.group
	r.Counts.Averaged = s.group
	s.judge(&r, sol)
	return r, nil
}

// refuse makes an error of a sentinel, the numbers and a hint.
func refuse(err error, what, hint string) error {
	return &place.Error{Err: fmt.Errorf("%w: %s", err, what), Hint: hint}
}
