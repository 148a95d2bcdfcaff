package lsq

import (
	"errors"
	"fmt"
	"math"
)

// Problem is a sum of squares to be minimised.
type Problem struct {
	// M is the number of residuals, N the number of parameters, both at least
	// one. M < N is allowed; such a problem has no unique minimum and no
	// covariance.
	M, N int

	// Residual writes the M residuals at x to r. An error, or an element that is
	// not finite, means that the model has no value at x: a trial step is then
	// rejected and the region shrinks. An error that is ErrStop (errors.Is) ends
	// the solution.
	Residual func(r, x []float64) error

	// Jacobian writes the M×N matrix ∂r_i/∂x_j, column-major, to j. It is only
	// called with the x of the latest call of Residual, so intermediate results
	// can be kept. j arrives with undefined content.
	Jacobian func(j, x []float64) error

	// Triangle is for callers who know the structure of their Jacobian; it takes
	// the place of Jacobian. It writes a triangle of the Jacobian at x to r, an N×N
	// column-major matrix of which only the upper triangle is read, and the first N
	// elements of Qᵀ times the residual to q: JᵀJ = RᵀR, Jᵀ·residual = Rᵀq. It is
	// called as Jacobian is. The second-order correction of the step, which needs
	// all of J, is then not made.
	Triangle func(r, q, x []float64) error

	// Lower and Upper are bounds, nil for none or of length N with infinities
	// where there is none. Equal bounds hold a parameter. The functions above are
	// never called outside.
	Lower, Upper []float64
}

// ErrStop, returned by Residual or by a Recorder (wrapped or not), ends the
// solution with status Stopped and the best point so far.
var ErrStop = errors.New("lsq: stopped on request")

// StartError says that a solution could not begin.
type StartError struct {
	Parameter int // index of the parameter at fault, -1 for the whole start
	Cause     error
}

func (e *StartError) Error() string {
	if e.Parameter >= 0 {
		return fmt.Sprintf("least squares cannot start: parameter %d: %v", e.Parameter, e.Cause)
	}
	return fmt.Sprintf("least squares cannot start: %v", e.Cause)
}

// Unwrap returns the cause.
func (e *StartError) Unwrap() error { return e.Cause }

// Causes of a StartError.
var (
	ErrBounds    = errors.New("lower bound above upper bound, or bound not a number")
	ErrNotFinite = errors.New("value not finite")
)

// check panics for what only a programmer can do wrong and returns an error for
// what data can.
func (p *Problem) check(x0 []float64) error {
	switch {
	case p.M < 1 || p.N < 1:
		panic("lsq: problem without residuals or without parameters")
	case p.Residual == nil || (p.Jacobian == nil) == (p.Triangle == nil):
		panic("lsq: problem without Residual, or not with one of Jacobian and Triangle")
	case p.Lower != nil && len(p.Lower) != p.N || p.Upper != nil && len(p.Upper) != p.N:
		panic("lsq: length of bounds is not N")
	case len(x0) != p.N:
		panic("lsq: length of the start is not N")
	}
	for i, v := range x0 {
		lo, up := p.bounds(i)
		if !(lo <= up) || math.IsInf(lo, 1) || math.IsInf(up, -1) {
			return &StartError{Parameter: i, Cause: ErrBounds}
		}
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return &StartError{Parameter: i, Cause: ErrNotFinite}
		}
	}
	return nil
}

// bounds returns the bounds of parameter i.
func (p *Problem) bounds(i int) (lower, upper float64) {
	lower, upper = math.Inf(-1), math.Inf(1)
	if p.Lower != nil {
		lower = p.Lower[i]
	}
	if p.Upper != nil {
		upper = p.Upper[i]
	}
	return lower, upper
}
