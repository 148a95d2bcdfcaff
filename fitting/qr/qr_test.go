package qr

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"pgregory.net/rapid"
)

func random(rnd *rand.Rand, n int) []float64 {
	a := make([]float64, n)
	for i := range a {
		a[i] = rnd.NormFloat64()
	}
	return a
}

// Identities on random matrices of any shape, with columns scaled over many
// decades: QᵀQ = I, A = QR column by column, Q·Qᵀb = b, leverages sum to the
// rank, the projection is idempotent.
func TestIdentities(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 12).Draw(t, "n")
		m := n + rapid.IntRange(0, 30).Draw(t, "extra rows")
		ld := m + rapid.IntRange(0, 3).Draw(t, "gap")
		rnd := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 1))
		a := random(rnd, ld*n)
		scale := make([]float64, n)
		for j := range n {
			scale[j] = math.Pow(10, rapid.Float64Range(-160, 160).Draw(t, "decade"))
			for i := range m {
				a[i+j*ld] *= scale[j]
			}
		}
		f := append([]float64(nil), a...)
		tau := make([]float64, n)
		Factor(f, m, n, ld, tau)
		q := make([]float64, m*n)
		ThinQ(q, m, f, m, n, ld, tau)
		const tol = 1e-13
		var leverage float64
		for i := range n {
			for j := range n {
				want := 0.0
				if i == j {
					want = 1
				}
				if d := dot(q[i*m:i*m+m], q[j*m:j*m+m]) - want; math.Abs(d) > tol {
					t.Fatalf("QᵀQ differs from I by %g at %d, %d", d, i, j)
				}
			}
			leverage += dot(q[i*m:i*m+m], q[i*m:i*m+m])
		}
		if math.Abs(leverage-float64(n)) > tol*float64(n) {
			t.Fatalf("leverages sum to %g, want %d", leverage, n)
		}
		for j := range n {
			norm := Norm(a[j*ld : j*ld+m])
			for i := range m {
				var s float64
				for k := 0; k <= j; k++ {
					s += q[i+k*m] * f[k+j*ld]
				}
				if math.Abs(s-a[i+j*ld]) > tol*norm {
					t.Fatalf("A − QR = %g at %d, %d (column norm %g)", s-a[i+j*ld], i, j, norm)
				}
			}
		}
		b := random(rnd, m)
		c := append([]float64(nil), b...)
		MulQT(f, m, n, ld, tau, c)
		MulQ(f, m, n, ld, tau, c)
		inside := append([]float64(nil), b...)
		outside := append([]float64(nil), b...)
		Project(f, m, n, ld, tau, inside, false)
		Project(f, m, n, ld, tau, outside, true)
		for i := range b {
			if math.Abs(c[i]-b[i]) > tol*10 {
				t.Fatalf("QQᵀb differs from b by %g", c[i]-b[i])
			}
			if math.Abs(inside[i]+outside[i]-b[i]) > tol*10 {
				t.Fatal("the two projections do not sum to b")
			}
		}
		for j := range n {
			if s := dot(outside, a[j*ld:j*ld+m]); math.Abs(s) > 10*tol*Norm(b)*Norm(a[j*ld:j*ld+m]) {
				t.Fatalf("outside component not orthogonal to column %d: %g", j, s)
			}
		}
	})
}

// The inverse of the Hilbert matrix has the closed form (Choi, Am. Math. Monthly
// 90 (1983) 301)
//
//	(H⁻¹)_ij = (−1)^(i+j)·(i+j−1)·C(n+i−1, n−j)·C(n+j−1, n−i)·C(i+j−2, i−1)².
//
// H is symmetric, so (HᵀH)⁻¹ = (H⁻¹)², and the condition number is known too.
func TestHilbert(t *testing.T) {
	t.Parallel()
	const n = 6
	h := make([]float64, n*n)
	inv := make([]float64, n*n)
	for i := 1; i <= n; i++ {
		for j := 1; j <= n; j++ {
			h[i-1+(j-1)*n] = 1 / float64(i+j-1)
			b := binomial(i+j-2, i-1)
			v := float64(i+j-1) * binomial(n+i-1, n-j) * binomial(n+j-1, n-i) * b * b
			if (i+j)%2 != 0 {
				v = -v
			}
			inv[i-1+(j-1)*n] = v
		}
	}
	norm1 := func(a []float64) float64 {
		var m float64
		for j := range n {
			var s float64
			for i := range n {
				s += math.Abs(a[i+j*n])
			}
			m = math.Max(m, s)
		}
		return m
	}
	f := append([]float64(nil), h...)
	tau := make([]float64, n)
	Factor(f, n, n, n, tau)
	// R has the 2-norm condition of H; in the 1-norm they agree within a factor n.
	cond := Condition(f, n, n, make([]float64, n))
	if exact := norm1(h) * norm1(inv); cond < exact/n || cond > exact*n {
		t.Errorf("condition %g, that of the matrix is %g", cond, exact)
	}
	cov := make([]float64, n*n)
	if !Covariance(cov, n, f, n, n, make([]float64, n*n)) {
		t.Fatal("singular")
	}
	// Condition 3e7: eight digits are left.
	for i := range n {
		for j := range n {
			var want float64
			for k := range n {
				want += inv[i+k*n] * inv[k+j*n]
			}
			if got := cov[i+j*n]; math.Abs(got-want) > 1e-8*math.Abs(want) {
				t.Errorf("covariance %d, %d: %.12g, want %.12g", i, j, got, want)
			}
		}
	}
}

func binomial(n, k int) float64 {
	v := 1.0
	for i := 1; i <= k; i++ {
		v = v * float64(n-k+i) / float64(i)
	}
	return math.Round(v)
}

// A 2×2 triangle by hand: R = [2 1; 0 4].
func TestTriangleByHand(t *testing.T) {
	t.Parallel()
	r := []float64{2, math.NaN(), 1, 4} // the element below the diagonal is not read
	x := []float64{4, 8}
	if !SolveR(r, 2, 2, x) || x[0] != 1 || x[1] != 2 {
		t.Errorf("R⁻¹(4, 8) = %v, want (1, 2)", x)
	}
	x = []float64{2, 9}
	if !SolveRT(r, 2, 2, x) || x[0] != 1 || x[1] != 2 {
		t.Errorf("R⁻ᵀ(2, 9) = %v, want (1, 2)", x)
	}
	// R⁻¹ = [1/2 −1/8; 0 1/4]; ‖R‖₁ = 5, ‖R⁻¹‖₁ = 1/2.
	if c := Condition(r, 2, 2, make([]float64, 2)); c != 2.5 {
		t.Errorf("condition %g, want 2.5", c)
	}
	r[3] = 0
	if SolveR(r, 2, 2, x) || SolveRT(r, 2, 2, x) {
		t.Error("a singular triangle was solved")
	}
	if c := Condition(r, 2, 2, make([]float64, 2)); !math.IsInf(c, 1) {
		t.Errorf("condition of a singular triangle: %g", c)
	}
}

func TestNorm(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		x    []float64
		want float64
	}{
		{nil, 0},
		{[]float64{0, 0}, 0},
		{[]float64{3, 4}, 5},
		{[]float64{3e200, 4e200}, 5e200},
		{[]float64{3e-200, 4e-200}, 5e-200},
		{[]float64{1, math.Inf(-1)}, math.Inf(1)},
	} {
		if got := Norm(c.x); math.Abs(got-c.want) > 1e-15*c.want && got != c.want {
			t.Errorf("Norm(%v) = %g, want %g", c.x, got, c.want)
		}
	}
	if !math.IsNaN(Norm([]float64{1, math.NaN(), math.Inf(1)})) {
		t.Error("norm of NaN is not NaN")
	}
}

func TestHostile(t *testing.T) {
	t.Parallel()
	for name, f := range map[string]func(){
		"short matrix": func() { Factor(make([]float64, 5), 3, 2, 3, make([]float64, 2)) },
		"short tau":    func() { Factor(make([]float64, 6), 3, 2, 3, make([]float64, 1)) },
		"short ld":     func() { Factor(make([]float64, 6), 3, 2, 2, make([]float64, 2)) },
		"short vector": func() { MulQT(make([]float64, 6), 3, 2, 3, make([]float64, 2), make([]float64, 2)) },
	} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("%s: no panic", name)
				}
			}()
			f()
		}()
	}
	// Numbers never panic.
	a := []float64{math.NaN(), 1, math.Inf(1), 0, 0, 0}
	Factor(a, 3, 2, 3, make([]float64, 2))
}

func BenchmarkFactor(b *testing.B) {
	for _, s := range [][2]int{{546, 36}, {36, 36}} {
		b.Run(fmt.Sprintf("%dx%d", s[0], s[1]), func(b *testing.B) {
			m, n := s[0], s[1]
			a := random(rand.New(rand.NewPCG(1, 2)), m*n)
			f := make([]float64, m*n)
			tau := make([]float64, n)
			b.ReportAllocs()
			for b.Loop() {
				copy(f, a)
				Factor(f, m, n, m, tau)
			}
		})
	}
}
