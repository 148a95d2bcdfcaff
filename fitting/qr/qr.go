package qr

import "gonum.org/v1/gonum/floats"

// Householder factorization
//
//	A = Q·[R; 0],   Q = H_0·H_1·…·H_{k-1},   k = min(m, n).
//
// The work is arranged by columns ("left-looking"): column j first receives all
// earlier reflectors and then yields its own. Each column is so read and
// written while it stays in the nearest cache, and the earlier reflectors are
// only read; the operations are the same as in the right-looking order.
//
// Backward stable: the computed R is the exact triangle of A + E with
// ‖e_j‖ ≤ c·m·n·ε·‖a_j‖ for each column j separately, so badly scaled columns do
// not hurt one another. Reference: N. J. Higham, Accuracy and Stability of
// Numerical Algorithms, 2nd ed., SIAM 2002, theorem 19.4 (number from memory).

// Factor overwrites the m×n matrix a, of leading dimension ld, by its
// Householder factorization. tau must have length at least min(m, n).
func Factor(a []float64, m, n, ld int, tau []float64) {
	checkShape(a, m, n, ld)
	k := min(m, n)
	if len(tau) < k {
		panic(badTau)
	}
	for j := range n {
		c := a[j*ld : j*ld+m]
		p := min(j, k)
		for i := range p {
			Apply(a[i*ld+i:i*ld+m], tau[i], c[i:])
		}
		if j < k {
			tau[j] = Reflector(c[j:])
		}
	}
}

// MulQT replaces b, of length m, by Qᵀ·b, where Q is made of the first k
// reflectors of a factored matrix with m rows.
func MulQT(a []float64, m, k, ld int, tau, b []float64) {
	checkShape(a, m, k, ld)
	checkVector(b, m, tau, k)
	for i := range k {
		Apply(a[i*ld+i:i*ld+m], tau[i], b[i:m])
	}
}

// MulQ replaces b, of length m, by Q·b, where Q is made of the first k
// reflectors of a factored matrix with m rows.
func MulQ(a []float64, m, k, ld int, tau, b []float64) {
	checkShape(a, m, k, ld)
	checkVector(b, m, tau, k)
	for i := k - 1; i >= 0; i-- {
		Apply(a[i*ld+i:i*ld+m], tau[i], b[i:m])
	}
}

// ThinQ writes the first k columns of Q, an m×k matrix with orthonormal
// columns, to q, which has leading dimension ldq and must not overlap a.
//
// The sum of the squares of row i of the result is the leverage of row i: the
// diagonal element of the projection A·A⁺.
func ThinQ(q []float64, ldq int, a []float64, m, k, ld int, tau []float64) {
	checkShape(a, m, k, ld)
	checkShape(q, m, k, ldq)
	if len(tau) < k || k > m {
		panic(badTau)
	}
	for j := range k {
		c := q[j*ldq : j*ldq+m]
		clear(c)
		c[j] = 1
		// The reflectors behind j leave e_j as it is.
		for i := j; i >= 0; i-- {
			Apply(a[i*ld+i:i*ld+m], tau[i], c[i:])
		}
	}
}

// Project replaces b by its component outside the range of the first k columns
// of the factored matrix (outside) or inside it: b ← (I − QQᵀ)·b or QQᵀ·b, with
// Q the thin factor. b has length m.
func Project(a []float64, m, k, ld int, tau, b []float64, outside bool) {
	MulQT(a, m, k, ld, tau, b)
	if outside {
		clear(b[:k])
	} else {
		clear(b[k:m])
	}
	MulQ(a, m, k, ld, tau, b)
}

// MulQTMatrix replaces each of the n columns of the m×n matrix c, of leading
// dimension ldc, by Qᵀ times the column.
func MulQTMatrix(a []float64, m, k, ld int, tau, c []float64, n, ldc int) {
	checkShape(c, m, n, ldc)
	for j := range n {
		MulQT(a, m, k, ld, tau, c[j*ldc:j*ldc+m])
	}
}

const (
	badShape = "qr: slice too short for the stated shape, or leading dimension below the number of rows"
	badTau   = "qr: slice of reflector factors too short"
	badLen   = "qr: vector too short"
)

func checkShape(a []float64, m, n, ld int) {
	if m < 0 || n < 0 || ld < max(1, m) {
		panic(badShape)
	}
	if n > 0 && len(a) < (n-1)*ld+m {
		panic(badShape)
	}
}

func checkVector(b []float64, m int, tau []float64, k int) {
	if len(b) < m {
		panic(badLen)
	}
	if len(tau) < k || k > m {
		panic(badTau)
	}
}

// dot is floats.Dot without the complaint about empty slices.
func dot(x, y []float64) float64 {
	if len(x) == 0 {
		return 0
	}
	return floats.Dot(x, y[:len(x)])
}
