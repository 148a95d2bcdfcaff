package lsq

import (
	"errors"
	"math"

	"phaselag/fitting/qr"
)

// Trust-region method for nonlinear least squares
//
//	p ≈ argmin ½‖r + J·p‖²,  ‖D·p‖ ≤ Δ,  lower ≤ x + p ≤ upper
//	ρ = (½‖r(x)‖² − ½‖r(x+p)‖²) / predicted reduction
//	ρ ≥ 10⁻⁴: accept;  ρ ≤ 1/4: shrink Δ;  ρ ≥ 3/4: Δ = 2·‖D·p‖
//
// D holds the norms of the columns of J, which may fall only gradually from one
// step to the next (memory, in linearise.go). Reference: J. J. Moré,
// The Levenberg-Marquardt algorithm: implementation and theory, Lecture Notes in
// Mathematics 630, Springer 1978. See region.go for the step.
//
// Second-order correction: along a curved valley the step is bent by half the
// "geodesic acceleration" a, the solution of the same damped system with the
// second derivative of r along p in the place of r, which one more evaluation of r
// yields. A step with 2‖D·a‖ > Acceleration·‖D·p‖ is refused: the model is trusted
// no further than it is nearly straight, which also keeps the first steps from
// leaping onto plateaus. Reference: M. K. Transtrum, J. P. Sethna, Improvements to
// the Levenberg-Marquardt algorithm for nonlinear least-squares minimization,
// arXiv:1201.5885 (2012) (citation from memory).
//
// The observed reduction is summed as ½Σ(r_i − r'_i)(r_i + r'_i), not as the
// difference of two sums, so that it keeps its sign down to changes of
// about ε·‖r‖·‖r − r'‖.

// noise is the reduction, relative to ½‖r‖², below which rounding in r may
// decide whether an observed reduction is positive.
const noise = 1e-10

// floor is the predicted reduction, relative to ½‖r‖², at which a step that does not
// bring the next one down has nothing more to find.
const floor = 1e-15

// Solver holds the workspace. The zero value is ready for use. A Solver must not
// be used by two goroutines at once.
type Solver struct {
	g         region
	x, trial  []float64 // N
	d, scale  []float64 // N: D of the region, norms of the columns at x
	lo, up    []float64 // N: bounds of y
	start     []float64
	r, rt, rh []float64 // M
	j         []float64 // M×N
	tau       []float64
	held      []bool
	fixed     []bool
	tri       []float64
	column    []int
	work      []float64
	polish    float64 // predicted reduction of the last step that rounding hid
}

// Solve minimises p from x0, which is moved into the bounds first, with a
// workspace of its own. settings may be nil.
//
// The error is a *StartError when there is nothing to return: bounds that
// exclude one another, or a model without a value at the start. Everything else
// is told by Result.Status. Solve panics when p is incomplete.
func Solve(p Problem, x0 []float64, settings *Settings) (Result, error) {
	return new(Solver).Solve(p, x0, settings)
}

// Solve is as the function Solve; it allocates only when the shape of the
// problem grows, and the slices of the result are overwritten by the next call.
func (s *Solver) Solve(p Problem, x0 []float64, settings *Settings) (Result, error) {
	if err := p.check(x0); err != nil {
		return Result{}, err
	}
	s.resize(p.M, p.N, p.Triangle != nil)
	res := Result{
		X: s.x, Residual: s.r, Held: s.held, Start: s.start,
		Gradient: math.NaN(), Condition: math.NaN(),
		Used: settings.used(p.N), m: p.M, fixedSet: s.fixed,
	}
	if settings != nil {
		res.Given = *settings
	}
	for i, v := range x0 {
		l, u := p.bounds(i)
		s.x[i] = math.Min(math.Max(v, l), u)
		s.start[i] = s.x[i]
		s.fixed[i] = l == u
		s.held[i] = l == u
	}
	res.Evaluations = 1
	if err := p.Residual(s.r, s.x); err != nil {
		return Result{}, &StartError{Parameter: -1, Cause: err}
	}
	res.Norm = qr.Norm(s.r)
	if math.IsNaN(res.Norm) || math.IsInf(res.Norm, 0) {
		return Result{}, &StartError{Parameter: -1, Cause: ErrNotFinite}
	}
	s.run(&p, &res)
	return res, nil
}

func (s *Solver) resize(m, n int, triangle bool) {
	s.g.resize(n)
	for _, p := range []*[]float64{&s.x, &s.trial, &s.d, &s.scale, &s.lo, &s.up, &s.start, &s.tau, &s.work} {
		*p = grow(*p, n)
	}
	for _, p := range []*[]float64{&s.r, &s.rt, &s.rh} {
		*p = grow(*p, m)
	}
	if triangle {
		s.j = grow(s.j, n*n)
	} else {
		s.j = grow(s.j, m*n)
	}
	s.tri = grow(s.tri, n*n)
	s.held = grow(s.held, n)
	s.fixed = grow(s.fixed, n)
	s.column = grow(s.column, n)
	clear(s.d)
	s.polish = math.Inf(1)
}

// run iterates until a status is reached. The Jacobian in hand at the end is
// that of the last point.
func (s *Solver) run(p *Problem, res *Result) {
	set := &res.Used
	radius := 0.0
	for {
		if err := s.linearise(p, res); err != nil {
			res.Status, res.Cause = JacobianFailed, err
			if errors.Is(err, ErrStop) {
				res.Status = Stopped
			}
			return
		}
		if res.Status != NotStarted {
			break
		}
		size := s.size()
		if res.Iterations == 0 {
			radius = set.FirstRadius * size
			if radius == 0 {
				radius = set.FirstRadius
			}
		}
		if set.Recorder != nil {
			it := Iteration{res.Iterations, s.x, res.Norm, radius, s.g.lambda, res.Evaluations}
			if err := set.Recorder.Record(it); err != nil {
				res.Status, res.Cause = Stopped, err
				break
			}
		}
		if res.Gradient <= set.GradientTol {
			res.Status = GradientConverged
			break
		}
		// Without an accepted step there is nothing to linearise anew.
		if !s.search(p, res, &radius, size) {
			break
		}
	}
	s.finish(res)
}

// search tries steps until one is accepted (true) or the solution ends at the
// present point (false). A status may be set in both cases.
func (s *Solver) search(p *Problem, res *Result, radius *float64, size float64) bool {
	set := &res.Used
	half := 0.5 * res.Norm * res.Norm
	for {
		if res.Evaluations >= set.MaxEvaluations {
			res.Status = EvaluationLimit
			return false
		}
		predicted, length := s.g.step(*radius, s.lo, s.up, s.held)
		if !(predicted > 0) {
			// A minimum of the model, to rounding.
			res.Status = FunctionConverged
			return false
		}
		before, fine := *radius, predicted <= noise*half && s.g.lambda == 0
		observed := math.Inf(-1)
		bent := true
		var err error
		if !fine {
			bent, err = s.bend(p, res, length)
		}
		if err == nil && bent {
			err = s.move(p, res)
			if err == nil {
				observed = reduction(s.r, s.rt)
			}
		}
		if err != nil && errors.Is(err, ErrStop) {
			res.Status, res.Cause = Stopped, err
			return false
		}
		ratio := observed / predicted
		switch {
		case !(ratio > 0.25):
			f := 0.5
			if observed < 0 {
				// Minimum of the parabola through both values and the slope at x.
				f = math.Max(0.1, 0.5*s.g.slope/(s.g.slope-observed))
			}
			if !bent {
				f = 0.25
			}
			*radius = f * math.Min(*radius, length)
			s.g.lambda /= f
		case ratio >= 0.75 || s.g.lambda == 0:
			if s.g.bound {
				*radius = math.Max(*radius, 2*length)
			} else {
				*radius = 2 * length
			}
			s.g.lambda *= 0.5
		}
		accepted := ratio >= 1e-4
		if fine && math.Abs(observed) <= noise*half {
			// Rounding may decide on ρ; the prediction, which comes from the gradient,
			// is still exact. Full steps go on while it falls. Where it does not, they
			// overshoot and need damping, or all is rounding.
			falling := predicted < 0.8*s.polish
			s.polish = predicted
			if falling {
				*radius = math.Max(before, 2*length)
				accepted = true
			} else if predicted <= floor*half {
				res.Status = StepConverged
				return false
			}
		}
		switch {
		case bent && math.Abs(observed) <= set.FunctionTol*half && predicted <= set.FunctionTol*half && ratio <= 2:
			res.Status = FunctionConverged
		case *radius <= set.StepTol*size || length <= set.StepTol*size:
			res.Status = StepConverged
		}
		if accepted {
			s.x, s.trial = s.trial, s.x
			s.r, s.rt = s.rt, s.r
			res.X, res.Residual = s.x, s.r
			res.Norm = qr.Norm(s.r)
			res.Iterations++
			return true
		}
		if res.Status != NotStarted {
			return false
		}
	}
}

// reduction is ½‖r‖² − ½‖t‖², −Inf where that is not finite.
func reduction(r, t []float64) float64 {
	var s float64
	for i, v := range r {
		s += (v - t[i]) * (v + t[i])
	}
	if math.IsNaN(s) || math.IsInf(s, 0) {
		return math.Inf(-1)
	}
	return 0.5 * s
}
