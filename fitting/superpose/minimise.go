package superpose

import (
	"errors"

	"phaselag/fitting/lsq"
)

// found is where a minimisation ended.
type found struct {
	x           []float64
	objective   float64
	iterations  int
	evaluations int
}

// errOutside says that the model has no value at a trial point.
var errOutside = errors.New("the model has no value there")

// settings of the outer solver. Kaufman's Jacobian leaves out a part that is
// small with the residual, so the approach to the minimum is linear at its end;
// a relative change of the objective of 1e-10 is a hundredth of a standard
// error or less.
var settings = lsq.Settings{FunctionTol: 1e-10, StepTol: 1e-9, MaxEvaluations: 400, Acceleration: -1}

// minimise runs the trust-region solver over θ from x0.
func (e *engine) minimise(x0 []float64) (found, error) {
	lower, upper := e.p.bounds(e.f, &e.l)
	if e.held >= 0 {
		lower[e.held], upper[e.held] = e.heldAt, e.heldAt
	}
	call := func(ok bool) error {
		if !ok {
			return errOutside
		}
		return nil
	}
	s := settings
	res, err := lsq.Solve(lsq.Problem{
		M: e.m + e.priors, N: e.l.n, Lower: lower, Upper: upper,
		Residual: func(r, x []float64) error { return call(e.residual(r, x)) },
		Triangle: func(r, q, x []float64) error { return call(e.triangle(r, q, x)) },
	}, x0, &s)
	if err != nil {
		return found{}, err
	}
	// A solution that is refined may stand on a kink, where a modulus of the spectrum is
	// about to leave zero and no step lowers the sum: it is as good as it was.
	if !res.Usable() && res.Iterations == 0 && res.Status != lsq.Stalled {
		return found{}, ErrNoFit
	}
	return found{res.X, res.Norm * res.Norm, res.Iterations, res.Evaluations}, nil
}
