package waveform

import (
	"fmt"
	"math"
)

// fit finds the frequency in the head and fits it. It returns nil where there is
// no oscillation.
func (s *segment) fit() (*solution, error) {
	n := len(s.t)
	if n < 8 {
		return nil, refuse(ErrTooFew, fmt.Sprintf("%d samples can be used of %d given", n, s.counts.Given), "a cycle needs ten samples, a record three cycles")
	}
	length := s.t[n-1] - s.t[0]
	low, high := 0.0, math.Inf(1)
	nominal := s.set.Frequency
	if nominal > 0 {
		low, high = nominal/1.2, nominal*1.2
	}
	trend := s.set.Trend.degree()
	s.fx = startFrequency(s.t, s.x, s.step(), trend, low, high)
	s.fF = startFrequency(s.t, s.f, s.step(), trend, low, high)
	s.headTime = length
	f := s.fx
	if s.set.Known {
		f = nominal
	}
	if _, moves := detrended(s.t, s.x); f == 0 || !moves {
		return nil, refuse(ErrNoMotion, fmt.Sprintf("%d samples over %g s", n, length), "the columns may be the wrong ones, or the actuator stood still")
	}
	if _, pulls := detrended(s.t, s.f); !pulls {
		return nil, refuse(ErrNoForce, fmt.Sprintf("%d samples over %g s", n, length), "the columns may be the wrong ones, or the load cell was not connected")
	}
	if per := 1 / (f * s.step()); per < 4 {
		return nil, refuse(ErrTooSlow, fmt.Sprintf("%.3g samples a cycle at %.4g Hz", per, f), "sample at least ten times a cycle")
	}
	if c := f * (length + s.step()); c < 0.99 {
		return nil, refuse(ErrTooShort, fmt.Sprintf("%.3g cycles of %.4g Hz in %.4g s", c, f, length), "record three cycles or more")
	}
	sol := s.progressive(2 * math.Pi * f)
	if sol == nil {
		return nil, refuse(ErrFit, fmt.Sprintf("no sine near %.4g Hz fits %d samples", f, n), "give the nominal frequency, or split the record where it changes")
	}
	// The largest of 30 000 lines of noise is 4.6 u on average.
	d := derivation{s: sol}
	if a, u := d.amplitude(1, 1); !(a > 6*u) {
		return nil, refuse(ErrNoMotion, fmt.Sprintf("an amplitude of %.3g with a standard uncertainty of %.3g near %.4g Hz", a, u, f), "the columns may be the wrong ones, or the actuator stood still")
	}
	if per := s.perCycle(sol.frame.omega); per < 3.99 {
		return nil, refuse(ErrTooSlow, fmt.Sprintf("%.3g samples a cycle", per), "sample at least ten times a cycle")
	}
	if c := sol.frame.omega / (2 * math.Pi) * (length + s.step()); c < 0.99 {
		return nil, refuse(ErrTooShort, fmt.Sprintf("%.3g cycles in %.4g s", c, length), "record three cycles or more")
	}
	return sol, nil
}

// progressive fits ever longer parts of the head, so that the start is always
// within a fraction of a cycle over the part.
func (s *segment) progressive(omega float64) *solution {
	n := len(s.t)
	l := s.set.layout(n, s.perCycle(omega))
	ys := func(n int) [][]float64 { return [][]float64{s.f[:n], s.x[:n]} }
	if !s.set.Known {
		for m := maxStart; m < n; m *= 8 {
			if omega*(s.t[m-1]-s.t[0]) < 2*math.Pi*6 {
				continue
			}
			sol := fitSamples(s.t[:m], ys(m), l, omega, true)
			if sol == nil {
				return nil
			}
			omega = sol.frame.omega
		}
	}
	return fitSamples(s.t, ys(n), l, omega, !s.set.Known)
}
