package qr

import (
	"math"

	"gonum.org/v1/gonum/floats"
)

// One Householder reflector
//
//	H = I − τ·v·vᵀ,  v_0 = 1,  H·x = (β, 0, …, 0)ᵀ,
//	β = −sign(x_0)·‖x‖,  τ = (β − x_0)/β,  v_i = x_i/(x_0 − β).
//
// The sign makes x_0 − β a sum of two numbers of the same sign, so nothing
// cancels. Reference: G. H. Golub, C. F. Van Loan, Matrix Computations, 4th ed.,
// Johns Hopkins 2013, section 5.1 (section from memory).

// Reflector overwrites x by (β, v_1, …) and returns τ in [1, 2], or 0 for
// H = I, when everything below x[0] is zero already.
func Reflector(x []float64) (tau float64) {
	if len(x) < 2 {
		return 0
	}
	x[0], tau = reflect(x[0], x[1:])
	return tau
}

// reflect is Reflector for a vector whose first element is kept apart.
func reflect(alpha float64, tail []float64) (beta, tau float64) {
	t := Norm(tail)
	if t == 0 {
		return alpha, 0
	}
	beta = -math.Copysign(math.Hypot(alpha, t), alpha)
	d := alpha - beta
	tau = -d / beta
	if math.Abs(d) > smallest && !math.IsInf(d, 0) {
		floats.Scale(1/d, tail)
	} else {
		// The reciprocal would overflow.
		for i, v := range tail {
			tail[i] = v / d
		}
	}
	return beta, tau
}

// Apply replaces c by H·c, for the reflector with vector (1, v[1:]) and factor
// tau; v[0] is not read (R is stored there). c has the length of v.
func Apply(v []float64, tau float64, c []float64) {
	if tau == 0 {
		return
	}
	c[0] += applyTail(v[1:], tau, c[0], c[1:])
}

// applyTail applies H to the vector (first, tail) with the elements below the
// first of v in w; it returns what the first element changes by.
func applyTail(w []float64, tau, first float64, tail []float64) float64 {
	s := -tau * (first + dot(w, tail))
	if s != 0 && len(w) > 0 {
		floats.AddScaled(tail, s, w)
	}
	return s
}

const (
	smallest = 1e-290
	largest  = 1e290
)

// Norm returns the Euclidean norm of x, also where the sum of the squares would
// overflow or underflow. It is NaN or +Inf when x has such elements.
func Norm(x []float64) float64 {
	s := dot(x, x)
	if s > smallest && s < largest {
		return math.Sqrt(s)
	}
	var m float64
	for _, v := range x {
		if math.IsNaN(v) {
			return math.NaN()
		}
		m = math.Max(m, math.Abs(v))
	}
	if m == 0 || math.IsInf(m, 0) {
		return m
	}
	s = 0
	for _, v := range x {
		s += (v / m) * (v / m)
	}
	return m * math.Sqrt(s)
}
