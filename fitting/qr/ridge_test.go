package qr

import (
	"math"
	"math/rand/v2"
	"testing"

	"pgregory.net/rapid"
)

// The structured elimination solves the same problem as the factorization of
// the full 2n×n matrix.
func TestAppendDiagonal(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 10).Draw(t, "n")
		rnd := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 5))
		r := make([]float64, n*n)
		full := make([]float64, 2*n*n)
		delta := random(rnd, n)
		for j := range n {
			for i := 0; i <= j; i++ {
				r[i+j*n] = rnd.NormFloat64()
				full[i+j*2*n] = r[i+j*n]
			}
			full[n+j+j*2*n] = delta[j]
		}
		if rapid.Bool().Draw(t, "singular") {
			r[0], full[0] = 0, 0
		}
		b := random(rnd, 2*n)
		c := append([]float64(nil), b[:n]...)
		d := append([]float64(nil), b[n:]...)
		AppendDiagonal(r, n, n, delta, c, d, make([]float64, n*n))
		SolveR(r, n, n, c)
		tau := make([]float64, n)
		Factor(full, 2*n, n, 2*n, tau)
		cond := Condition(full, n, 2*n, make([]float64, n))
		MulQT(full, 2*n, n, 2*n, tau, b)
		if got, want := Norm(d), Norm(b[n:]); math.Abs(got-want) > 1e-12 {
			t.Fatalf("residual norm %g, want %g", got, want)
		}
		SolveR(full, n, 2*n, b)
		for j := range n {
			if math.Abs(c[j]-b[j]) > 1e-14*cond*(1+Norm(b[:n])) {
				t.Fatalf("x = %v, want %v", c, b[:n])
			}
		}
	})
}
