package superpose

import (
	"math"
	"sort"
)

// Robust reweighting
//
// A point whose residual is far beyond the noise of its kind of test counts less:
// with z² = (Re r/σ_m)² + (Im r/σ_δ)²,
//
//	w = 1 for z ≤ Far,  (Far/z)² beyond,
//
// so that its pull on the fit falls with its distance (redescending; Huber, Robust
// Statistics, Wiley 1981, ch. 7, for iterated reweighting; from memory). The σ are
// medians of the absolute residuals, which outliers do not move:
// σ = (1 + 4/n) median|r|/0.6745 for n points, since the median of few, and of
// residuals that a fit has made small, is easily too small. For sound points z² is χ² with two degrees of freedom, so
// that a point is beyond Far = 4.5 by chance once in 25 000.
//
// A whole run that misses is no outlier but another temperature, frequency or
// material: where more than a third of a run is far, all its points keep their
// weight.

// Far is the standardised distance from which on a point is distrusted.
const Far = 4.5

// few widens the noise of groups of few points.
const few = 4

// tooMany is the share of a run's points beyond Far from which on it is the run
// that is wrong.
const tooMany = 1.0 / 3

// weight is the weight of row i.
func (f *Form) weight(i int) float64 {
	if f.Weights == nil {
		return 1
	}
	return f.Weights[i]
}

// Distances gives z of every row against robust estimates of the noise of its
// group.
func (s *Solution) Distances() []float64 {
	p := s.Problem
	magnitude, phase := make([][]float64, p.Groups), make([][]float64, p.Groups)
	for i, r := range p.Rows {
		m := s.Misfit(i)
		magnitude[r.Group] = append(magnitude[r.Group], math.Abs(real(m)))
		if !r.Relaxation {
			phase[r.Group] = append(phase[r.Group], math.Abs(imag(m))*s.Form.Sigma[r.Group].Phase/s.phaseSigma(i))
		}
	}
	scale := func(v []float64) float64 {
		if len(v) == 0 {
			return math.NaN()
		}
		sort.Float64s(v)
		return max(sigmaFloor, v[len(v)/2]/0.6745*(1+few/float64(len(v))))
	}
	sm, sd := make([]float64, p.Groups), make([]float64, p.Groups)
	for g := range p.Groups {
		sm[g], sd[g] = scale(magnitude[g]), scale(phase[g])
	}
	z := make([]float64, len(p.Rows))
	for i, r := range p.Rows {
		m := s.Misfit(i)
		z[i] = math.Abs(real(m)) / sm[r.Group]
		if !r.Relaxation {
			z[i] = math.Hypot(z[i], imag(m)/sd[r.Group]*s.Form.Sigma[r.Group].Phase/s.phaseSigma(i))
		}
	}
	return z
}

// phaseSigma is the standard deviation of the phase of row i.
func (s *Solution) phaseSigma(i int) float64 {
	return math.Sqrt(s.Form.weight(i)) / s.e.wIm[i]
}

// Distrust fits again with robust weights until no weight changes by more than
// a tenth, at most rounds times. It returns the solution itself when no point is
// far.
func (s *Solution) Distrust(rounds int) (*Solution, []GroupNoise, error) {
	noise := s.Noise()
	for range rounds {
		z := s.Distances()
		far, all := make([]int, len(s.Problem.Runs)), make([]int, len(s.Problem.Runs))
		for i, r := range s.Problem.Rows {
			all[r.Run]++
			if z[i] > Far {
				far[r.Run]++
			}
		}
		weights := make([]float64, len(z))
		moved, any := 0.0, false
		for i, r := range s.Problem.Rows {
			weights[i] = 1
			if z[i] > Far && float64(far[r.Run]) <= tooMany*float64(all[r.Run]) {
				weights[i] = Far * Far / (z[i] * z[i])
				any = true
			}
			moved = max(moved, math.Abs(weights[i]-s.Form.weight(i)))
		}
		if !any {
			weights = nil
		}
		if moved < 0.1 {
			break
		}
		next, own, err := s.Weighted(weights)
		if err != nil {
			return nil, nil, err
		}
		s, noise = next, own
	}
	return s, noise, nil
}

// Weighted fits the same form again with the given weights of the rows.
func (s *Solution) Weighted(weights []float64) (*Solution, []GroupNoise, error) {
	f := s.Form
	f.Weights = weights
	e := newEngine(s.Problem, &f)
	copy(e.denom, s.e.denom)
	e.setSigma(f.Sigma)
	next, err := e.run(s.Theta)
	if err != nil {
		return nil, nil, err
	}
	return next.Refine(4)
}
