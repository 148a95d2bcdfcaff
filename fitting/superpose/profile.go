package superpose

import "math"

// Profile likelihood
//
// The interval of a nonlinear parameter x_i is where the objective, minimised over
// everything else, lies no more than rise above its minimum (t² of the wished
// coverage). With d(x) = √(S(x) − S_min), which is linear in x where the
// linearised interval is right, the ends d = √rise are found by
//
//	x ← x̂ + (x − x̂)·√rise/d(x)
//
// from both sides, until d is right to half a percent.

// profileSteps bounds the refits for each end.
const profileSteps = 12

// Profile gives the interval of nonlinear parameter i with standard uncertainty u.
// An end that does not exist within 30 u or the bounds is infinite.
func (s *Solution) Profile(i int, u, rise float64) (low, high float64) {
	return s.profileEnd(i, u, rise, -1), s.profileEnd(i, u, rise, 1)
}

func (s *Solution) profileEnd(i int, u, rise, side float64) float64 {
	root := math.Sqrt(rise)
	lower, upper := s.Problem.bounds(&s.Form, &s.e.l)
	x, theta := s.Theta[i]+side*root*u, s.Theta
	for range profileSteps {
		if x < lower[i] || x > upper[i] || math.Abs(x-s.Theta[i]) > 30*u {
			break
		}
		e := newEngine(s.Problem, &s.Form)
		copy(e.denom, s.e.denom)
		e.setSigma(s.Form.Sigma)
		e.held, e.heldAt = i, x
		at := append([]float64(nil), theta...)
		at[i] = x
		fit, err := e.run(at)
		if err != nil {
			break
		}
		d := math.Sqrt(max(0, fit.Objective-s.Objective))
		if math.Abs(d-root) < 0.005*root {
			return x
		}
		// A flat objective may not throw the search away.
		x, theta = s.Theta[i]+(x-s.Theta[i])*min(3, max(0.3, root/max(d, 1e-12))), fit.Theta
	}
	return side * math.Inf(1)
}
