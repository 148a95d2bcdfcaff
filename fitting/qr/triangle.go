package qr

import (
	"math"

	"gonum.org/v1/gonum/floats"
)

// SolveR replaces x, of length n, by R⁻¹·x, where R is the upper triangle of
// the first n columns of a. It reports false, and leaves x in an undefined
// state, when a diagonal element of R is zero.
//
// Back substitution is backward stable row by row, so it is accurate even for
// triangles that are badly scaled by rows or columns.
func SolveR(a []float64, n, ld int, x []float64) bool {
	checkShape(a, n, n, ld)
	if len(x) < n {
		panic(badLen)
	}
	for j := n - 1; j >= 0; j-- {
		c := a[j*ld : j*ld+j+1]
		if c[j] == 0 {
			return false
		}
		x[j] /= c[j]
		if j > 0 {
			floats.AddScaled(x[:j], -x[j], c[:j])
		}
	}
	return true
}

// SolveRT replaces x, of length n, by R⁻ᵀ·x. It reports false when a diagonal
// element of R is zero.
func SolveRT(a []float64, n, ld int, x []float64) bool {
	checkShape(a, n, n, ld)
	if len(x) < n {
		panic(badLen)
	}
	for j := range n {
		c := a[j*ld : j*ld+j+1]
		if c[j] == 0 {
			return false
		}
		x[j] = (x[j] - dot(c[:j], x[:j])) / c[j]
	}
	return true
}

// InvertR writes R⁻¹, an upper triangle with zeros below, to the n×n matrix r of
// leading dimension ldr, which must not overlap a. It reports false when a
// diagonal element of R is zero.
func InvertR(r []float64, ldr int, a []float64, n, ld int) bool {
	checkShape(r, n, n, ldr)
	for j := range n {
		c := r[j*ldr : j*ldr+n]
		clear(c)
		c[j] = 1
		if !SolveR(a, j+1, ld, c[:j+1]) {
			return false
		}
	}
	return true
}

// Covariance writes the symmetric n×n matrix (AᵀA)⁻¹ = R⁻¹·R⁻ᵀ to c, of leading
// dimension ldc; work needs length n·n. It reports false when a diagonal
// element of R is zero. AᵀA itself, whose condition is the square of that of A,
// is never formed.
func Covariance(c []float64, ldc int, a []float64, n, ld int, work []float64) bool {
	checkShape(c, n, n, ldc)
	if len(work) < n*n {
		panic(badLen)
	}
	// Rows of R⁻¹ as contiguous slices: work[i*n+j] = (R⁻¹)_ij.
	if !InvertR(c, ldc, a, n, ld) {
		return false
	}
	for i := range n {
		for j := range n {
			work[i*n+j] = c[i+j*ldc]
		}
	}
	for i := range n {
		for j := i; j < n; j++ {
			s := dot(work[i*n+j:i*n+n], work[j*n+j:j*n+n])
			c[i+j*ldc], c[j+i*ldc] = s, s
		}
	}
	return true
}

// Condition returns the condition number ‖R‖₁·‖R⁻¹‖₁ of the n×n triangle in a,
// +Inf when it is singular, NaN when n is zero; work needs length n. It differs
// from the 2-norm condition number of the factored matrix by a factor n at most.
func Condition(a []float64, n, ld int, work []float64) float64 {
	checkShape(a, n, n, ld)
	if len(work) < n {
		panic(badLen)
	}
	if n == 0 {
		return math.NaN()
	}
	var norm, inverse float64
	for j := range n {
		c := a[j*ld : j*ld+j+1]
		norm = math.Max(norm, floats.Norm(c, 1))
		x := work[:j+1]
		clear(x)
		x[j] = 1
		if !SolveR(a, j+1, ld, x) {
			return math.Inf(1)
		}
		inverse = math.Max(inverse, floats.Norm(x, 1))
	}
	return norm * inverse
}
