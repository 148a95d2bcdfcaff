package lsq

import (
	"math"

	"gonum.org/v1/gonum/floats"

	"phaselag/fitting/qr"
)

// bendStep is the fraction of the step at which the second derivative along it
// is measured: r” ≈ (2/h)·[(r(x+hp) − r(x))/h − J·p]. The error is a third of h
// times the third derivative; a tenth was recommended by Transtrum and Sethna.
const bendStep = 0.1

// memory is what an element of D keeps of its last value at least. Without it a
// region opens at once towards a parameter that has lost its influence, and the
// solution runs away along a plateau; with 1, the choice of Moré, a parameter that
// was once far too influential can hardly move any more. Between 0.5 and 0.9 the
// results on the reference problems hardly depend on it.
const memory = 0.7

// linearise evaluates the Jacobian at x and prepares the subproblem: scales, the
// triangle, the bounds of the step, which parameters are held, and the cosine of
// the gradient.
func (s *Solver) linearise(p *Problem, res *Result) error {
	m, n := p.M, p.N
	res.JacobianEvaluations++
	g := &s.g
	clear(g.q)
	if p.Triangle != nil {
		if err := p.Triangle(s.j, g.q, s.x); err != nil {
			return err
		}
		m = n
	} else {
		if err := p.Jacobian(s.j, s.x); err != nil {
			return err
		}
		qr.Factor(s.j, m, n, m, s.tau)
		k := min(m, n)
		copy(s.rh, s.r)
		qr.MulQT(s.j, m, k, m, s.tau, s.rh)
		copy(g.q, s.rh[:k])
	}
	for j := range n {
		c := qr.Norm(s.j[j*m : j*m+min(j+1, m)])
		if math.IsNaN(c) || math.IsInf(c, 0) {
			return ErrNotFinite
		}
		s.scale[j] = c
		s.d[j] = math.Max(memory*s.d[j], c)
	}
	res.Gradient = 0
	for j := range n {
		c := g.r[j*n : (j+1)*n]
		clear(c)
		rows := min(j+1, m)
		d := s.metric(j)
		floats.ScaleTo(c[:rows], 1/d, s.j[j*m:j*m+rows])
		lower, upper := p.bounds(j)
		s.lo[j] = (lower - s.x[j]) * d
		s.up[j] = (upper - s.x[j]) * d
		slope := floats.Dot(c, g.q)
		s.held[j] = lower == upper || s.x[j] <= lower && slope > 0 || s.x[j] >= upper && slope < 0
		if !s.held[j] && slope != 0 {
			res.Gradient = math.Max(res.Gradient, math.Abs(slope)/(s.scale[j]/d)/res.Norm)
		}
	}
	return nil
}

// metric is the element of D for parameter j; one where no point has shown an
// influence.
func (s *Solver) metric(j int) float64 {
	if s.d[j] == 0 {
		return 1
	}
	return s.d[j]
}

// size is ‖D·x‖.
func (s *Solver) size() float64 {
	for j, v := range s.x {
		s.work[j] = s.metric(j) * v
	}
	return qr.Norm(s.work)
}

// place writes x + f·p to trial, bounds that were hit exactly for f = 1.
func (s *Solver) place(p *Problem, f float64) {
	for j, v := range s.x {
		l, u := p.bounds(j)
		s.trial[j] = math.Min(math.Max(v+f*s.g.y[j]/s.metric(j), l), u)
		if f == 1 && s.g.hit[j] < 0 {
			s.trial[j] = l
		} else if f == 1 && s.g.hit[j] > 0 {
			s.trial[j] = u
		}
	}
}

// move evaluates the residual at the end of the step.
func (s *Solver) move(p *Problem, res *Result) error {
	s.place(p, 1)
	res.Evaluations++
	return p.Residual(s.rt, s.trial)
}

// bend adds the second-order correction to the step. It reports false when the
// correction is too large for the step to be tried.
func (s *Solver) bend(p *Problem, res *Result, length float64) (bool, error) {
	limit := res.Used.Acceleration
	if limit < 0 || s.g.bound || p.Triangle != nil {
		return true, nil
	}
	s.place(p, bendStep)
	res.Evaluations++
	if err := p.Residual(s.rh, s.trial); err != nil {
		return false, err
	}
	m, k := p.M, min(p.M, p.N)
	floats.Sub(s.rh, s.r)
	if c := qr.Norm(s.rh); math.IsNaN(c) || math.IsInf(c, 0) {
		return false, nil
	}
	qr.MulQT(s.j, m, k, m, s.tau, s.rh)
	clear(s.work)
	w := s.g.target // R·y, left by step
	for i := range k {
		s.work[i] = 2 / bendStep * (s.rh[i]/bendStep - w[i])
	}
	if !s.g.correct(s.work) {
		return true, nil
	}
	a := s.g.target
	if !(2*qr.Norm(a) <= limit*length) {
		return false, nil
	}
	for j := range a {
		if y := s.g.y[j] + 0.5*a[j]; y < s.lo[j] || y > s.up[j] {
			return true, nil
		}
	}
	floats.AddScaled(s.g.y, 0.5, a)
	return true, nil
}

// finish leaves the triangle of the columns that are not held in the result.
func (s *Solver) finish(res *Result) {
	n := s.g.n
	s.column = s.column[:0]
	for j := range n {
		if !s.held[j] {
			k := len(s.column)
			c := s.tri[k*n : (k+1)*n]
			copy(c, s.g.r[j*n:(j+1)*n])
			// Unit columns for the condition number.
			if f := s.scale[j] / s.metric(j); f > 0 {
				floats.Scale(1/f, c)
			}
			s.column = append(s.column, j)
		}
	}
	k := len(s.column)
	qr.Factor(s.tri, n, k, n, s.tau)
	res.Condition = qr.Condition(s.tri, k, n, s.work)
	for i, j := range s.column {
		floats.Scale(s.scale[j], s.tri[i*n:i*n+i+1])
	}
	res.tri, res.column = s.tri, s.column
	// A region that collapses where the gradient is not small means a residual
	// that is not smooth, a wrong Jacobian or the edge of what floating-point
	// numbers can say. It is as it should be where r is rounding of the model.
	if res.Status == StepConverged && res.Gradient > 1e-3 && res.Norm > 1e-8*s.size() {
		res.Status = Stalled
	}
}
