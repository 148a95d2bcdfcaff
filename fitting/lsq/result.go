package lsq

import (
	"errors"
	"math"
	"slices"

	"phaselag/fitting/qr"
)

// Result is the best point found and how it was found. The slices of a result
// of [Solve] are its own; those of [Solver.Solve] belong to the solver until its
// next call (see [Result.Clone]).
type Result struct {
	X        []float64 // parameters, length N
	Residual []float64 // r(X), length M
	Norm     float64   // ‖r(X)‖₂
	Held     []bool    // parameter rests at a bound that the gradient pushes it against, or has equal bounds

	Status Status
	Cause  error // why Status is Stopped or JacobianFailed; nil otherwise

	Iterations          int // accepted steps
	Evaluations         int // calls of Residual, the start included
	JacobianEvaluations int // calls of Jacobian

	// Gradient is the largest cosine between the residual and a column of J that
	// is not held; 0 where the residual is zero, NaN without a Jacobian.
	Gradient float64
	// Condition is the condition number (1-norm) of J at X, without held columns
	// and with the others scaled to unit length; +Inf when singular; NaN without a
	// Jacobian or where all is held.
	Condition float64

	Start       []float64 // the start that was used: the given one moved into the bounds
	Given, Used Settings  // settings as given; with defaults filled in

	m        int
	tri      []float64 // triangle of J, N×N, held columns left out and the others moved up
	column   []int     // column k of tri belongs to parameter column[k]
	fixedSet []bool    // equal bounds
}

// ErrSingular says that the data do not determine all parameters together.
var ErrSingular = errors.New("jacobian singular to working precision: the data do not determine all parameters together")

// ErrNoJacobian says that the Jacobian at the best point could not be had.
var ErrNoJacobian = errors.New("no jacobian at the best point")

// Usable reports whether X may be taken for a minimum: a test of convergence
// was passed and the residual is finite. It says nothing about how well the
// parameters are determined; see Condition and StandardErrors.
func (r *Result) Usable() bool {
	return r.Status.Converged() && !math.IsNaN(r.Norm) && !math.IsInf(r.Norm, 0)
}

// DegreesOfFreedom is M less the number of parameters that are not held.
func (r *Result) DegreesOfFreedom() int { return r.m - len(r.column) }

// Variance is ‖r‖²/DegreesOfFreedom, the estimated variance of one residual, NaN
// without degrees of freedom.
func (r *Result) Variance() float64 {
	d := r.DegreesOfFreedom()
	if d <= 0 {
		return math.NaN()
	}
	return r.Norm * r.Norm / float64(d)
}

// UnitCovariance returns (JᵀJ)⁻¹, the covariance of the parameters for residuals
// of unit variance, N×N. Rows and columns of held parameters are zero: the
// covariance is conditional on the bounds they rest at. It is linearised and
// assumes independent residuals. The error is ErrSingular or ErrNoJacobian.
func (r *Result) UnitCovariance() ([]float64, error) {
	n, k := len(r.X), len(r.column)
	c := make([]float64, n*n)
	if r.tri == nil {
		return nil, ErrNoJacobian
	}
	if k == 0 {
		return c, nil
	}
	if !(r.Condition < 1/epsilon) {
		return nil, ErrSingular
	}
	free := make([]float64, k*k)
	if !qr.Covariance(free, k, r.tri, k, n, make([]float64, k*k)) {
		return nil, ErrSingular
	}
	for b, j := range r.column {
		for a, i := range r.column {
			c[i+j*n] = free[a+b*k]
		}
	}
	return c, nil
}

// Covariance returns Variance·(JᵀJ)⁻¹, N×N, as UnitCovariance does.
func (r *Result) Covariance() ([]float64, error) {
	c, err := r.UnitCovariance()
	v := r.Variance()
	for i := range c {
		c[i] *= v
	}
	return c, err
}

// StandardErrors returns the square roots of the diagonal of Covariance. They
// are NaN for parameters held at one of two different bounds, 0 for parameters
// with equal bounds.
func (r *Result) StandardErrors() ([]float64, error) {
	c, err := r.Covariance()
	if err != nil {
		return nil, err
	}
	n := len(r.X)
	e := make([]float64, n)
	for j := range e {
		e[j] = math.Sqrt(c[j+j*n])
		if r.Held[j] && !r.fixedSet[j] {
			e[j] = math.NaN()
		}
	}
	return e, nil
}

// Clone returns a copy that shares nothing with the solver.
func (r *Result) Clone() Result {
	c := *r
	c.X = slices.Clone(r.X)
	c.Residual = slices.Clone(r.Residual)
	c.Held = slices.Clone(r.Held)
	c.Start = slices.Clone(r.Start)
	c.tri = slices.Clone(r.tri)
	c.column = slices.Clone(r.column)
	c.fixedSet = slices.Clone(r.fixedSet)
	return c
}
