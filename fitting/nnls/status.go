package nnls

import "fmt"

// Status says how a solution ended.
type Status int

const (
	// Optimal: the conditions of Karush, Kuhn and Tucker hold to rounding.
	Optimal Status = iota
	// IterationLimit: the limit on changes of the set of positive coefficients
	// was reached. The result is feasible, but not shown to be the best.
	IterationLimit
	// NotFinite: the matrix or the right-hand side holds NaN or infinity, or a
	// coefficient left the range of floating-point numbers. Coefficients and
	// norm are NaN.
	NotFinite
)

// String returns the status in words.
func (s Status) String() string {
	switch s {
	case Optimal:
		return "optimal"
	case IterationLimit:
		return "iteration limit"
	case NotFinite:
		return "not finite"
	}
	return fmt.Sprintf("Status(%d)", int(s))
}

// Usable reports whether the coefficients are the solution.
func (s Status) Usable() bool { return s == Optimal }
