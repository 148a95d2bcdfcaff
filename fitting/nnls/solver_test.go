package nnls

import (
	"math"
	"math/rand/v2"
	"testing"

	"pgregory.net/rapid"

	"phaselag/fitting/qr"
)

// problem is one system with everything a test needs.
type problem struct {
	a    []float64
	m, n int
	b    []float64
	free []bool
}

func (p problem) multiply(x []float64) []float64 {
	y := make([]float64, p.m)
	for j := range p.n {
		for i := range p.m {
			y[i] += p.a[i+j*p.m] * x[j]
		}
	}
	return y
}

// violation checks the conditions of Karush, Kuhn and Tucker from the original
// matrix alone. The result is the worst of |w_j| (passive or free) and w_j (at
// zero) over ‖a_j‖·(‖b‖ + Σ‖a_k‖·x_k), which a backward stable solution keeps at a
// small multiple of ε, or +Inf for a negative coefficient. The norm that the
// solver reported must be that of the residual.
func (p problem) violation(t interface{ Fatalf(string, ...any) }, x []float64, rnorm float64) float64 {
	r := p.multiply(x)
	for i := range r {
		r[i] = p.b[i] - r[i]
	}
	size := qr.Norm(p.b)
	for j := range p.n {
		size += qr.Norm(p.a[j*p.m:(j+1)*p.m]) * math.Abs(x[j])
	}
	if d := math.Abs(qr.Norm(r) - rnorm); d > 1e-13*size {
		t.Fatalf("reported norm %g, residual norm %g", rnorm, qr.Norm(r))
	}
	var worst float64
	for j := range p.n {
		c := p.a[j*p.m : (j+1)*p.m]
		w := dot(c, r)
		isFree := p.free != nil && p.free[j]
		if !isFree && x[j] < 0 || math.IsNaN(x[j]) {
			return math.Inf(1)
		}
		if isFree || x[j] > 0 {
			w = math.Abs(w)
		}
		if norm := qr.Norm(c) * size; norm > 0 {
			worst = math.Max(worst, w/norm)
		}
	}
	return worst
}

const kktTol = 1e-12

// prony is the matrix that fits a relaxation spectrum: real and imaginary parts
// of iωτ/(1+iωτ), divided by |G*|, over several decades, with branches three a
// decade. Its condition number is beyond 1/ε.
func prony(rnd *rand.Rand, points, branches int, noise float64) problem {
	m := 2 * points
	p := problem{a: make([]float64, m*branches), m: m, n: branches, b: make([]float64, m)}
	decades := float64(branches) / 3
	for i := range points {
		omega := math.Pow(10, decades*(float64(i)/float64(points)-0.5))
		// A power law of exponent 0.3: G* = (iω)^0.3.
		abs := math.Pow(omega, 0.3)
		for k := range branches {
			y := omega * math.Pow(10, (float64(k)-float64(branches)/2)/3)
			p.a[i+k*m] = y * y / (1 + y*y) / abs
			p.a[i+points+k*m] = y / (1 + y*y) / abs
		}
		p.b[i] = math.Cos(0.15*math.Pi) + noise*rnd.NormFloat64()
		p.b[i+points] = math.Sin(0.15*math.Pi) + noise*rnd.NormFloat64()
	}
	return p
}

func drawProblem(t *rapid.T) problem {
	rnd := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 7))
	kind := rapid.SampledFrom([]string{"random", "dependent", "scaled", "prony", "positive", "exact"}).Draw(t, "kind")
	n := rapid.IntRange(0, 14).Draw(t, "n")
	m := rapid.IntRange(0, 40).Draw(t, "m")
	if kind == "prony" {
		p := prony(rnd, 5+2*m, 1+2*n, math.Pow(10, rapid.Float64Range(-15, -1).Draw(t, "noise")))
		if rapid.Bool().Draw(t, "with free") {
			p.free = make([]bool, p.n)
			p.free[rnd.IntN(p.n)] = true
		}
		return p
	}
	p := problem{a: make([]float64, m*n), m: m, n: n, b: make([]float64, m)}
	for i := range p.a {
		p.a[i] = rnd.NormFloat64()
		if kind == "positive" {
			p.a[i] = math.Abs(p.a[i])
		}
	}
	for i := range p.b {
		p.b[i] = rnd.NormFloat64()
	}
	switch kind {
	case "dependent":
		// Equal, opposite, zero and combined columns.
		for j := 1; j < n; j++ {
			f := float64(rnd.IntN(4) - 1)
			g := float64(rnd.IntN(2))
			if rnd.IntN(2) == 0 {
				for i := range m {
					p.a[i+j*m] = f*p.a[i+(j-1)*m] + g*p.a[i]
				}
			}
		}
	case "scaled":
		for j := range n {
			f := math.Pow(10, 300*rnd.Float64()-150)
			for i := range m {
				p.a[i+j*m] *= f
			}
		}
		f := math.Pow(10, 100*rnd.Float64()-50)
		for i := range m {
			p.b[i] *= f
		}
	case "exact":
		// b in the cone: the residual is rounding.
		x := make([]float64, n)
		for j := range x {
			x[j] = math.Max(0, rnd.NormFloat64())
		}
		p.b = p.multiply(x)
	}
	if rapid.Bool().Draw(t, "with free") {
		p.free = make([]bool, n)
		for j := range p.free {
			p.free[j] = rnd.IntN(3) == 0
		}
	}
	return p
}

// The optimality conditions hold, whatever the matrix; a start from any passive
// set leads to the same residual and the same fitted values (those are unique
// even where x is not); the inputs stay as they are; a second run gives the same
// bits.
func TestOptimality(t *testing.T) {
	t.Parallel()
	var s Solver // one workspace for all shapes
	rapid.Check(t, func(t *rapid.T) {
		p := drawProblem(t)
		x := make([]float64, p.n)
		passive := make([]bool, p.n)
		a := append([]float64(nil), p.a...)
		b := append([]float64(nil), p.b...)
		rnorm, status := s.Solve(a, p.m, p.n, b, x, passive, p.free)
		if status != Optimal {
			t.Fatalf("status %v", status)
		}
		for i := range a {
			if a[i] != p.a[i] {
				t.Fatal("the matrix was changed")
			}
		}
		for i := range b {
			if b[i] != p.b[i] {
				t.Fatal("the right-hand side was changed")
			}
		}
		if v := p.violation(t, x, rnorm); v > kktTol {
			t.Fatalf("optimality violated by %g", v)
		}
		slopes := make([]float64, p.n)
		s.Slopes(slopes)
		for j := range p.n {
			if passive[j] && slopes[j] != 0 {
				t.Fatalf("slope %g at passive column %d", slopes[j], j)
			}
			if !passive[j] && x[j] != 0 {
				t.Fatalf("coefficient %g outside the passive set", x[j])
			}
		}
		again := make([]float64, p.n)
		var fresh Solver
		fresh.Solve(p.a, p.m, p.n, p.b, again, nil, p.free)
		for j := range again {
			if again[j] != x[j] {
				t.Fatalf("second run differs: %g, %g", again[j], x[j])
			}
		}

		start := make([]bool, p.n)
		if rapid.Bool().Draw(t, "start from the answer") {
			copy(start, passive)
		} else {
			for j := range start {
				start[j] = rapid.Bool().Draw(t, "passive")
			}
		}
		warm := make([]float64, p.n)
		wnorm, status := s.Solve(p.a, p.m, p.n, p.b, warm, start, p.free)
		if status != Optimal {
			t.Fatalf("warm start: status %v", status)
		}
		if v := p.violation(t, warm, wnorm); v > kktTol {
			t.Fatalf("warm start: optimality violated by %g", v)
		}
		size := qr.Norm(p.b)
		if math.Abs(wnorm-rnorm) > 1e-12*size {
			t.Fatalf("warm start: norm %g, cold %g", wnorm, rnorm)
		}
		// Strong convexity bounds the distance by the square root of the
		// violation only.
		y, z := p.multiply(x), p.multiply(warm)
		for i := range y {
			y[i] -= z[i]
		}
		if d := qr.Norm(y); d > 1e-6*size {
			t.Fatalf("warm start: fitted values differ by %g (norm of b %g)", d, size)
		}
	})
}

// Slow exact reference: of all subsets of columns whose unconstrained solution
// is positive, one has the smallest residual.
func TestAgainstEnumeration(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 6).Draw(t, "n")
		m := n + rapid.IntRange(0, 6).Draw(t, "extra")
		rnd := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 3))
		p := problem{a: make([]float64, m*n), m: m, n: n, b: make([]float64, m)}
		for i := range p.a {
			p.a[i] = rnd.NormFloat64()
		}
		for i := range p.b {
			p.b[i] = rnd.NormFloat64()
		}
		best := math.Inf(1)
		var want []float64
		for set := range 1 << n {
			var cols []int
			var f []float64
			for j := range n {
				if set>>j&1 == 1 {
					cols = append(cols, j)
					f = append(f, p.a[j*m:(j+1)*m]...)
				}
			}
			k := len(cols)
			tau := make([]float64, k)
			qr.Factor(f, m, k, m, tau)
			b := append([]float64(nil), p.b...)
			qr.MulQT(f, m, k, m, tau, b)
			norm := qr.Norm(b[k:])
			qr.SolveR(f, k, m, b)
			x := make([]float64, n)
			ok := true
			for i, j := range cols {
				x[j] = b[i]
				ok = ok && b[i] >= 0
			}
			if ok && norm < best {
				best, want = norm, x
			}
		}
		x := make([]float64, n)
		var s Solver
		rnorm, _ := s.Solve(p.a, m, n, p.b, x, nil, nil)
		if math.Abs(rnorm-best) > 1e-13*qr.Norm(p.b) {
			t.Fatalf("norm %.17g, by enumeration %.17g", rnorm, best)
		}
		for j := range x {
			if math.Abs(x[j]-want[j]) > 1e-7*(1+math.Abs(want[j])) {
				t.Fatalf("x = %v, by enumeration %v", x, want)
			}
		}
	})
}

// Monotone regression is a non-negative least-squares problem with one free
// column: y_i = x_0 + … + x_i. Its closed form is the pooling of adjacent
// violators (Ayer et al., Ann. Math. Statist. 26 (1955) 641; citation from memory).
func TestMonotoneRegression(t *testing.T) {
	t.Parallel()
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 30).Draw(t, "n")
		b := rapid.SliceOfN(rapid.Float64Range(-1, 1), n, n).Draw(t, "b")
		a := make([]float64, n*n)
		for j := range n {
			for i := j; i < n; i++ {
				a[i+j*n] = 1
			}
		}
		free := make([]bool, n)
		free[0] = true
		x := make([]float64, n)
		var s Solver
		if _, status := s.Solve(a, n, n, b, x, nil, free); status != Optimal {
			t.Fatalf("status %v", status)
		}
		var mean []float64
		var size []int
		for _, v := range b {
			mean, size = append(mean, v), append(size, 1)
			for k := len(mean) - 1; k > 0 && mean[k-1] > mean[k]; k-- {
				total := size[k-1] + size[k]
				mean[k-1] = (mean[k-1]*float64(size[k-1]) + mean[k]*float64(size[k])) / float64(total)
				size[k-1] = total
				mean, size = mean[:k], size[:k]
			}
		}
		var y float64
		i := 0
		for k, v := range mean {
			for range size[k] {
				y += x[i]
				if math.Abs(y-v) > 1e-7 {
					t.Fatalf("fitted value %d is %g, pooling gives %g", i, y, v)
				}
				i++
			}
		}
	})
}

func TestByHand(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		name  string
		a     []float64
		m, n  int
		b, x  []float64
		free  []bool
		rnorm float64
	}{
		{"identity keeps the positive part", []float64{1, 0, 0, 0, 1, 0, 0, 0, 1}, 3, 3, []float64{2, -3, 1}, []float64{2, 0, 1}, nil, 3},
		{"free column", []float64{1, 0, 0, 0, 1, 0, 0, 0, 1}, 3, 3, []float64{2, -3, -1}, []float64{2, -3, 0}, []bool{false, true, false}, 1},
		// Unconstrained (−1, 2); on x_2 alone 3·1/(1+1) = 3/2 with residual (−1/2, 1/2).
		{"one at zero", []float64{1, 0, 1, 1}, 2, 2, []float64{1, 2}, []float64{0, 1.5}, nil, math.Sqrt(0.5)},
		{"all at zero", []float64{1, 1, 1, 2}, 2, 2, []float64{-1, -1}, []float64{0, 0}, nil, math.Sqrt2},
		{"more columns than rows", []float64{1, 2, 4}, 1, 3, []float64{8}, nil, nil, 0},
		{"no columns", nil, 2, 0, []float64{3, 4}, []float64{}, nil, 5},
		{"no rows", nil, 0, 2, nil, []float64{0, 0}, nil, 0},
		{"zero matrix", make([]float64, 4), 2, 2, []float64{3, 4}, []float64{0, 0}, nil, 5},
		{"zero right-hand side", []float64{1, 2, 3, 4}, 2, 2, []float64{0, 0}, []float64{0, 0}, nil, 0},
		{"huge and tiny", []float64{1e300, 0, 0, 1e-300}, 2, 2, []float64{1, 1}, []float64{1e-300, 1e300}, nil, 0},
	} {
		var s Solver
		x := make([]float64, c.n)
		rnorm, status := s.Solve(c.a, c.m, c.n, c.b, x, nil, c.free)
		if status != Optimal || math.Abs(rnorm-c.rnorm) > 1e-14*(1+c.rnorm) {
			t.Errorf("%s: norm %g, status %v; want %g, optimal", c.name, rnorm, status, c.rnorm)
		}
		for j := range c.x {
			if math.Abs(x[j]-c.x[j]) > 1e-14*math.Abs(c.x[j]) {
				t.Errorf("%s: x = %v, want %v", c.name, x, c.x)
			}
		}
	}
}

func TestHostile(t *testing.T) {
	t.Parallel()
	for _, v := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
		for i := range 6 {
			a := []float64{1, 2, 3, 4, 5, 7, 1, 1, 1}
			a[i] = v
			x := []float64{9, 9}
			passive := []bool{true, true}
			var s Solver
			rnorm, status := s.Solve(a[:6], 3, 2, a[6:], x, passive, nil)
			if status != NotFinite || !math.IsNaN(rnorm) || !math.IsNaN(x[0]) || !math.IsNaN(x[1]) || status.Usable() {
				t.Errorf("%g at %d: status %v, norm %g, x %v", v, i, status, rnorm, x)
			}
		}
	}
	var s Solver
	x := []float64{0}
	if _, status := s.Solve([]float64{1e-300}, 1, 1, []float64{1e300}, x, nil, nil); status != NotFinite {
		t.Errorf("coefficient beyond the range: status %v, x %v", status, x)
	}
	for name, f := range map[string]func(){
		"matrix":  func() { s.Solve(make([]float64, 3), 2, 2, make([]float64, 2), make([]float64, 2), nil, nil) },
		"b":       func() { s.Solve(make([]float64, 4), 2, 2, make([]float64, 3), make([]float64, 2), nil, nil) },
		"passive": func() { s.Solve(make([]float64, 4), 2, 2, make([]float64, 2), make([]float64, 2), []bool{true}, nil) },
		"slopes":  func() { s.Slopes(nil) },
	} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("%s of wrong length: no panic", name)
				}
			}()
			f()
		}()
	}
}
