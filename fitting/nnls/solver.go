package nnls

import (
	"math"

	"phaselag/fitting/qr"
)

// Non-negative least squares, active-set method
//
//	min ‖Ax − b‖,  x ≥ 0;   w = Aᵀ(b − Ax)
//	optimal  ⇔  w_j ≤ 0 where x_j = 0,  w_j = 0 where x_j > 0
//
// Reference: C. L. Lawson, R. J. Hanson, Solving Least Squares Problems,
// Prentice-Hall 1974 (SIAM 1995), chapter 23, algorithm NNLS.
//
//  1. Scale every column and b by a power of two to a norm in [1/2, 1). This
//     is exact, and x is scaled back at the end.
//  2. For m > n+1 replace [A b] by its triangle: one orthogonal factorization,
//     after which m does not matter. The last diagonal element is the distance
//     of b from the range of A, so the residual norm never suffers from
//     cancellation.
//  3. Keep [A b] transformed so that the columns of the passive set P (those
//     that may be positive) are triangular: reflectors bring a column in,
//     rotations take one out. Then w_j is the product of the rows of a_j and b
//     that lie below the triangle, again without cancellation, and a solution
//     on P is one back substitution. The normal matrix is never formed.
//  4. Start from the set the caller gives: solve on it, drop what is not
//     positive, repeat until all is positive. The result is the least-squares
//     solution on its own positive set, a state from which the proof of
//     termination (each further round lowers the residual, no set comes twice)
//     holds as from x = 0.
//  5. Until no column outside P has w_j > tol: bring in the one with the
//     largest; solve on P; while a coefficient is not positive, step back to the
//     boundary along x + α(z − x) and drop what has become zero.
//
// Rounding: tol = 64·ε, relative to ‖a_j‖·‖b‖. A column whose part outside P
// is smaller than 1024·ε of its norm is dependent and stays out; a column that
// comes in with a coefficient that is not positive has a w_j that was rounding,
// and stays out until x changes (the test of Lawson and Hanson that prevents
// cycling). A limit of 10·n + 30 changes ends what remains.
//
// Known failure: none in the residual, but for columns that are equal to rounding
// the choice among them, and so x, is arbitrary (deterministic all the same).

const (
	epsilon   = 0x1p-52
	dualTol   = 64 * epsilon
	dependent = 1024 * epsilon
)

// Solver holds the workspace. The zero value is ready for use. A Solver must not
// be used by two goroutines at once.
type Solver struct {
	n, rows int       // columns of A; rows of the reduced system
	work    []float64 // m×(n+1): scaled copy of [A b], factored
	t       []float64 // rows×(n+1): the transformed system, leading dimension rows
	tau     []float64
	scale   []int // exponents: column j was multiplied by 2^-scale[j]; b is the last
	z       []float64
	xs      []float64 // scaled coefficients
	w       []float64 // dual vector of the scaled system
	order   []int     // passive columns in the order of the triangle
	in      []bool    // column is in the passive set
	barred  []bool    // column was rejected since x last changed
	changes int
}

// Solve minimises ‖A·x − b‖ with x[j] ≥ 0 for all j for which free is not true.
//
// a is the m×n matrix, column-major, unchanged; b has length m, unchanged. x, of
// length n, receives the coefficients. passive, nil or of length n, gives on
// entry the columns that are probably positive (all false: cold start) and
// receives the columns whose coefficients were solved for; it never changes the
// answer beyond rounding where the answer is unique. free, nil or of length n,
// marks columns without sign constraint; of free columns that depend on one
// another the later ones get zero.
//
// rnorm is ‖A·x − b‖. Solve panics when a slice has the wrong length and
// allocates only when the shape grows.
func (s *Solver) Solve(a []float64, m, n int, b, x []float64, passive, free []bool) (rnorm float64, status Status) {
	if m < 0 || n < 0 || len(a) != m*n {
		panic("nnls: matrix does not have m·n elements")
	}
	if len(b) != m || len(x) != n {
		panic("nnls: length of b is not m or length of x is not n")
	}
	if passive != nil && len(passive) != n || free != nil && len(free) != n {
		panic("nnls: length of passive or free is not n")
	}
	if !s.reduce(a, m, n, b) {
		for j := range x {
			x[j] = math.NaN()
		}
		clear(passive)
		return math.NaN(), NotFinite
	}
	s.warm(passive, free)
	status = s.iterate(free)
	for j := range x {
		x[j] = math.Ldexp(s.xs[j], s.scale[n]-s.scale[j])
		if math.IsInf(x[j], 0) {
			status = NotFinite
		}
	}
	if passive != nil {
		copy(passive, s.in[:n])
	}
	k := len(s.order)
	rnorm = math.Ldexp(qr.Norm(s.column(n)[k:]), s.scale[n])
	if status == NotFinite {
		for j := range x {
			x[j] = math.NaN()
		}
		rnorm = math.NaN()
	}
	return rnorm, status
}

// Changes returns how many columns entered or left the passive set in the last
// call of Solve after its start.
func (s *Solver) Changes() int { return s.changes }

// Slopes writes w = Aᵀ(b − A·x) of the last solution to dst, of length n: minus
// the derivative of half the squared residual norm by each coefficient. It is
// zero for passive columns.
func (s *Solver) Slopes(dst []float64) {
	if len(dst) != s.n {
		panic("nnls: length of the destination is not n")
	}
	s.dual()
	for j := range dst {
		dst[j] = math.Ldexp(s.w[j], s.scale[j]+s.scale[s.n])
	}
}

// column is column j of the transformed system; column n is the right-hand side.
func (s *Solver) column(j int) []float64 { return s.t[j*s.rows : (j+1)*s.rows] }

// warm brings in the free columns first, then the given ones, and drops what is
// not positive until everything is.
func (s *Solver) warm(passive, free []bool) {
	for j := range s.n {
		if free != nil && free[j] {
			s.enter(j)
		}
	}
	for j := range s.n {
		if passive != nil && passive[j] && !s.in[j] {
			s.enter(j)
		}
	}
	for {
		s.solve()
		ok := true
		for k := len(s.order) - 1; k >= 0; k-- {
			j := s.order[k]
			if !(s.z[k] > 0) && !(free != nil && free[j]) {
				s.leave(k)
				ok = false
			}
		}
		if ok {
			break
		}
	}
	s.accept()
	s.changes = 0
}

// iterate is step 5.
func (s *Solver) iterate(free []bool) Status {
	clear(s.barred)
	limit := 10*s.n + 30
	bnorm := qr.Norm(s.column(s.n))
	for {
		s.dual()
		t, best := -1, dualTol*bnorm
		for j := range s.n {
			if !s.in[j] && !s.barred[j] && s.w[j] > best {
				t, best = j, s.w[j]
			}
		}
		if t < 0 {
			return Optimal
		}
		if s.changes >= limit {
			return IterationLimit
		}
		if !s.enter(t) {
			s.barred[t] = true
			continue
		}
		s.solve()
		if last := len(s.order) - 1; !(s.z[last] > 0) && !(free != nil && free[t]) {
			s.leave(last)
			s.barred[t] = true
			continue
		}
		clear(s.barred)
		for s.retreat(free) {
			s.solve()
		}
		s.accept()
	}
}

// retreat goes from x towards z until the first coefficient is zero and drops
// the columns that are. It reports false when z is feasible already.
func (s *Solver) retreat(free []bool) bool {
	alpha, first := 2.0, -1
	for k, j := range s.order {
		if s.z[k] > 0 || free != nil && free[j] {
			continue
		}
		// x ≥ 0 ≥ z. Both zero: no way to go.
		r := 0.0
		if x := s.xs[j]; x > 0 {
			r = x / (x - s.z[k])
		}
		if r < alpha {
			alpha, first = r, j
		}
	}
	if first < 0 {
		return false
	}
	for k, j := range s.order {
		s.xs[j] += alpha * (s.z[k] - s.xs[j])
	}
	s.xs[first] = 0
	for k := len(s.order) - 1; k >= 0; k-- {
		j := s.order[k]
		if !(s.xs[j] > 0) && !(free != nil && free[j]) {
			s.leave(k)
		}
	}
	return true
}

// solve writes the least-squares solution on the passive set to z, in the order
// of the triangle.
func (s *Solver) solve() {
	b := s.column(s.n)
	k := len(s.order)
	copy(s.z, b[:k])
	for i := k - 1; i >= 0; i-- {
		c := s.column(s.order[i])
		s.z[i] /= c[i]
		axpy(s.z[:i], -s.z[i], c[:i])
	}
}

// accept makes z the current point.
func (s *Solver) accept() {
	clear(s.xs)
	for k, j := range s.order {
		s.xs[j] = s.z[k]
	}
}

// dual computes w_j = a_jᵀ(b − Ax) for the columns outside the passive set.
func (s *Solver) dual() {
	k := len(s.order)
	b := s.column(s.n)[k:]
	for j := range s.n {
		s.w[j] = 0
		if !s.in[j] {
			s.w[j] = dot(s.column(j)[k:], b)
		}
	}
}
