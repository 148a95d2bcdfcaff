package lsq

import (
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"pgregory.net/rapid"

	"phaselag/fitting/nnls"
	"phaselag/fitting/qr"
)

// linear is the problem ‖A·x − b‖ with column-major A.
func linear(a []float64, m, n int, b []float64) Problem {
	return Problem{
		M: m, N: n,
		Residual: func(r, x []float64) error {
			for i := range r {
				r[i] = -b[i]
				for j, v := range x {
					r[i] += a[i+j*m] * v
				}
			}
			return nil
		},
		Jacobian: func(j, x []float64) error {
			copy(j, a)
			return nil
		},
	}
}

func inf(n int) []float64 {
	v := make([]float64, n)
	for i := range v {
		v[i] = math.Inf(1)
	}
	return v
}

// Rosenbrock's function, r = (10·(y − x²), 1 − x): minimum 0 at (1, 1).
var rosenbrock = Problem{
	M: 2, N: 2,
	Residual: func(r, x []float64) error {
		r[0], r[1] = 10*(x[1]-x[0]*x[0]), 1-x[0]
		return nil
	},
	Jacobian: func(j, x []float64) error {
		j[0], j[1], j[2], j[3] = -20*x[0], -1, 10, 0
		return nil
	},
}

// Minima that can be written down. In all bounded cases the other parameter
// follows from the one at its bound.
func TestByHand(t *testing.T) {
	t.Parallel()
	bounded := func(lower, upper []float64) Problem {
		p := rosenbrock
		p.Lower, p.Upper = lower, upper
		return p
	}
	ninf := math.Inf(-1)
	pinf := math.Inf(1)
	for _, c := range []struct {
		name     string
		p        Problem
		start, x []float64
		held     []bool
		norm     float64
	}{
		{"Rosenbrock", rosenbrock, []float64{-1.2, 1}, []float64{1, 1}, []bool{false, false}, 0},
		{"x ≤ 1/2", bounded(nil, []float64{0.5, pinf}), []float64{-1.2, 1}, []float64{0.5, 0.25}, []bool{true, false}, 0.5},
		{"x ≥ 3/2", bounded([]float64{1.5, ninf}, nil), []float64{8, 1}, []float64{1.5, 2.25}, []bool{true, false}, 0.5},
		{"start outside", bounded([]float64{1.5, ninf}, nil), []float64{-8, 1}, []float64{1.5, 2.25}, []bool{true, false}, 0.5},
		{"bounds that do not matter", bounded([]float64{-9, -9}, []float64{9, 9}), []float64{-1.2, 1}, []float64{1, 1}, []bool{false, false}, 0},
		{"bound through the minimum", bounded(nil, []float64{1, 1}), []float64{-1.2, 1}, []float64{1, 1}, nil, 0},
		{"x held at 2", bounded([]float64{2, ninf}, []float64{2, pinf}), []float64{0, 0}, []float64{2, 4}, []bool{true, false}, 1},
		{"all held", bounded([]float64{2, 4}, []float64{2, 4}), []float64{0, 0}, []float64{2, 4}, []bool{true, true}, 1},
		{"start at the wrong bounds", bounded([]float64{-1, -1}, []float64{2, 3}), []float64{-1, 3}, []float64{1, 1}, []bool{false, false}, 0},
	} {
		res, err := Solve(c.p, c.start, nil)
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		if !res.Usable() {
			t.Errorf("%s: %v", c.name, res.Status)
		}
		if math.Abs(res.Norm-c.norm) > 1e-11 {
			t.Errorf("%s: norm %g, want %g", c.name, res.Norm, c.norm)
		}
		for i := range c.x {
			if math.Abs(res.X[i]-c.x[i]) > 1e-9 {
				t.Errorf("%s: x = %v, want %v (%v)", c.name, res.X, c.x, res.Status)
			}
			if c.held != nil && res.Held[i] != c.held[i] {
				t.Errorf("%s: held %v, want %v", c.name, res.Held, c.held)
			}
		}
	}
}

// Powell's singular function (J. J. Moré, B. S. Garbow, K. E. Hillstrom, ACM
// Trans. Math. Softw. 7 (1981) 17, problem 13; number from memory): the Jacobian is
// singular at the minimum 0, so convergence is linear and no covariance exists.
func TestSingularAtMinimum(t *testing.T) {
	t.Parallel()
	p := Problem{
		M: 4, N: 4,
		Residual: func(r, x []float64) error {
			u, v := x[1]-2*x[2], x[0]-x[3]
			r[0], r[1] = x[0]+10*x[1], math.Sqrt(5)*(x[2]-x[3])
			r[2], r[3] = u*u, math.Sqrt(10)*v*v
			return nil
		},
		Jacobian: func(j, x []float64) error {
			u, v := x[1]-2*x[2], x[0]-x[3]
			clear(j)
			j[0], j[4] = 1, 10
			j[9], j[13] = math.Sqrt(5), -math.Sqrt(5)
			j[6], j[10] = 2*u, -4*u
			j[3], j[15] = 2*math.Sqrt(10)*v, -2*math.Sqrt(10)*v
			return nil
		},
	}
	if d, err := CheckJacobian(p, []float64{3, -1, 0.5, 1}); err != nil || d.Worst > 1e-9 {
		t.Fatalf("jacobian: %v, %v", d, err)
	}
	res, err := Solve(p, []float64{3, -1, 0, 1}, nil)
	if err != nil || !res.Usable() || res.Norm > 1e-12 {
		t.Errorf("norm %g, %v, %v", res.Norm, res.Status, err)
	}
}

// Fewer residuals than parameters: a minimum is found, and what is not
// determined is said.
func TestUnderdetermined(t *testing.T) {
	t.Parallel()
	res, err := Solve(linear([]float64{1, 1, 1}, 1, 3, []float64{6}), []float64{0, 1, -3}, nil)
	if err != nil || !res.Usable() || res.Norm > 1e-11 {
		t.Errorf("norm %g, %v, %v", res.Norm, res.Status, err)
	}
	if _, err := res.StandardErrors(); !errors.Is(err, ErrSingular) {
		t.Errorf("standard errors: %v", err)
	}
	if !math.IsNaN(res.Variance()) || !math.IsInf(res.Condition, 1) {
		t.Errorf("variance %g, condition %g", res.Variance(), res.Condition)
	}
	// A parameter without influence.
	res, err = Solve(linear([]float64{1, 2, 0, 0}, 2, 2, []float64{1, 2}), []float64{0, 5}, nil)
	if err != nil || !res.Usable() || math.Abs(res.X[0]-1) > 1e-14 || res.X[1] != 5 {
		t.Errorf("x = %v, %v, %v", res.X, res.Status, err)
	}
	if _, err := res.UnitCovariance(); !errors.Is(err, ErrSingular) {
		t.Errorf("covariance: %v", err)
	}
}

// A straight line through four points has textbook errors: for x = 0, 1, 2, 3,
// var(slope) = s²/Σ(x−x̄)² = s²/5, var(intercept) = s²·(1/4 + x̄²/5) = 0.7·s²,
// covariance −x̄·s²/5 = −0.3·s².
func TestCovarianceOfLine(t *testing.T) {
	t.Parallel()
	a := []float64{1, 1, 1, 1, 0, 1, 2, 3}
	b := []float64{1, 2, 4, 4} // slope 1.1, intercept 1.1, sum of squares 0.7
	res, err := Solve(linear(a, 4, 2, b), []float64{0, 0}, nil)
	if err != nil {
		t.Fatal(err)
	}
	c, err := res.Covariance()
	if err != nil {
		t.Fatal(err)
	}
	const s2 = 0.7 / 2
	for i, want := range []float64{0.7 * s2, -0.3 * s2, -0.3 * s2, 0.2 * s2} {
		if math.Abs(c[i]-want) > 1e-14 {
			t.Errorf("covariance %v, element %d want %g", c, i, want)
		}
	}
	if math.Abs(res.X[0]-1.1)+math.Abs(res.X[1]-1.1) > 1e-14 || math.Abs(res.Variance()-s2) > 1e-14 {
		t.Errorf("x = %v, variance %g", res.X, res.Variance())
	}
	// With the slope held, the intercept is a mean: s²/4.
	p := linear(a, 4, 2, b)
	p.Lower, p.Upper = []float64{-9, 1}, []float64{9, 1}
	held, _ := Solve(p, []float64{0, 0}, nil)
	se, err := held.StandardErrors()
	if err != nil || se[1] != 0 || math.Abs(se[0]-math.Sqrt(held.Variance()/4)) > 1e-14 || held.DegreesOfFreedom() != 3 {
		t.Errorf("held slope: standard errors %v, %v", se, err)
	}
	p.Upper[1] = 9
	p.Lower[1] = 2 // presses against its bound
	held, _ = Solve(p, []float64{0, 5}, nil)
	se, err = held.StandardErrors()
	if err != nil || !math.IsNaN(se[1]) || !held.Held[1] || held.X[1] != 2 {
		t.Errorf("slope at its bound: x %v, standard errors %v, %v", held.X, se, err)
	}
}

// On linear problems with x ≥ 0 the solver must find what the active-set method
// of another package finds.
func TestAgainstNonNegative(t *testing.T) {
	t.Parallel()
	var solver Solver
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 10).Draw(t, "n")
		m := n + rapid.IntRange(0, 10).Draw(t, "extra")
		rnd := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 9))
		a, b := make([]float64, m*n), make([]float64, m)
		for j := range n {
			scale := math.Pow(10, float64(rnd.IntN(9)-4))
			for i := range m {
				a[i+j*m] = scale * (rnd.NormFloat64() + 0.5)
			}
		}
		for i := range b {
			b[i] = rnd.NormFloat64()
		}
		p := linear(a, m, n, b)
		p.Lower, p.Upper = make([]float64, n), inf(n)
		start := make([]float64, n)
		for i := range start {
			start[i] = math.Max(0, rnd.NormFloat64())
		}
		res, err := solver.Solve(p, start, nil)
		if err != nil {
			t.Fatal(err)
		}
		x := make([]float64, n)
		want, _ := new(nnls.Solver).Solve(a, m, n, b, x, nil, nil)
		if !res.Usable() || math.Abs(res.Norm-want) > 1e-10*qr.Norm(b) {
			t.Fatalf("norm %.15g, want %.15g; %v after %d evaluations; x %v, want %v", res.Norm, want, res.Status, res.Evaluations, res.X, x)
		}
	})
}

// Random nonlinear problems in random boxes: the result is never outside, never
// worse than the start, satisfies the first-order conditions, and comes out the
// same, bit for bit, from a used workspace.
func TestBoxes(t *testing.T) {
	t.Parallel()
	var used Solver
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 6).Draw(t, "n")
		m := n + rapid.IntRange(1, 20).Draw(t, "extra")
		rnd := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 11))
		a, b := make([]float64, m*n), make([]float64, m)
		for i := range a {
			a[i] = rnd.NormFloat64()
		}
		for i := range b {
			b[i] = 3 * rnd.NormFloat64()
		}
		// r = sinh(Ax) − b: curved, with an exact Jacobian.
		p := linear(a, m, n, make([]float64, m))
		ax := p.Residual
		p.Lower, p.Upper = make([]float64, n), make([]float64, n)
		start := make([]float64, n)
		for i := range n {
			p.Lower[i] = -rnd.Float64()
			p.Upper[i] = rnd.Float64()
			switch rnd.IntN(6) {
			case 0:
				p.Lower[i] = math.Inf(-1)
			case 1:
				p.Upper[i] = math.Inf(1)
			case 2:
				p.Upper[i] = p.Lower[i]
			}
			start[i] = 2 * rnd.NormFloat64()
		}
		inside := func(x []float64) {
			for i, v := range x {
				if !(p.Lower[i] <= v && v <= p.Upper[i]) {
					t.Fatalf("called outside the bounds: %v", x)
				}
			}
		}
		var latest [6]float64
		y := make([]float64, m)
		p.Residual = func(r, x []float64) error {
			inside(x)
			copy(latest[:], x)
			_ = ax(r, x)
			for i, v := range r {
				r[i] = math.Sinh(v) - b[i]
			}
			return nil
		}
		p.Jacobian = func(j, x []float64) error {
			for i, v := range x {
				if latest[i] != v {
					t.Fatal("jacobian asked for another point than the latest residual")
				}
			}
			_ = ax(y, x)
			for i, v := range y {
				for k := range n {
					j[i+k*m] = a[i+k*m] * math.Cosh(v)
				}
			}
			return nil
		}
		res, err := Solve(p, start, nil)
		if err != nil {
			t.Fatal(err)
		}
		if !res.Usable() {
			t.Fatalf("%v, gradient %g, %d evaluations", res.Status, res.Gradient, res.Evaluations)
		}
		if res.Gradient > 1e-7 {
			t.Fatalf("gradient %g: %v", res.Gradient, res.Status)
		}
		inside(res.X)
		first := make([]float64, m)
		_ = p.Residual(first, res.Start)
		if res.Norm > qr.Norm(first) {
			t.Fatal("worse than the start")
		}
		again, _ := used.Solve(p, start, nil)
		for i := range res.X {
			if again.X[i] != res.X[i] {
				t.Fatalf("second run differs: %v, %v", again.X, res.X)
			}
		}
	})
}

// The model has no value left of zero: such steps are rejected.
func TestUndefinedRegion(t *testing.T) {
	t.Parallel()
	for _, asError := range []bool{false, true} {
		p := Problem{
			M: 1, N: 1,
			Residual: func(r, x []float64) error {
				if asError && x[0] <= 0 {
					return errors.New("no value")
				}
				r[0] = math.Log(x[0]) + 5
				return nil
			},
			Jacobian: func(j, x []float64) error { j[0] = 1 / x[0]; return nil },
		}
		res, err := Solve(p, []float64{10}, nil)
		if err != nil || !res.Usable() || math.Abs(res.X[0]/math.Exp(-5)-1) > 1e-12 {
			t.Errorf("x = %v, %v, %v", res.X, res.Status, err)
		}
	}
}

func TestStart(t *testing.T) {
	t.Parallel()
	nan := math.NaN()
	p := rosenbrock
	p.Lower, p.Upper = []float64{0, 2}, []float64{1, 1}
	_, err := Solve(p, []float64{0, 0}, nil)
	if e := (*StartError)(nil); !errors.As(err, &e) || e.Parameter != 1 || !errors.Is(err, ErrBounds) {
		t.Errorf("crossed bounds: %v", err)
	}
	if _, err = Solve(rosenbrock, []float64{nan, 0}, nil); !errors.Is(err, ErrNotFinite) {
		t.Errorf("start not a number: %v", err)
	}
	p = rosenbrock
	p.Residual = func(r, x []float64) error { r[0], r[1] = nan, 0; return nil }
	if _, err = Solve(p, []float64{0, 0}, nil); !errors.Is(err, ErrNotFinite) {
		t.Errorf("residual not a number: %v", err)
	}
	cause := errors.New("no model")
	p.Residual = func(r, x []float64) error { return cause }
	if _, err = Solve(p, []float64{0, 0}, nil); !errors.Is(err, cause) {
		t.Errorf("residual with an error: %v", err)
	}
}

type recorder func(Iteration) error

func (r recorder) Record(it Iteration) error { return r(it) }

func TestEnds(t *testing.T) {
	t.Parallel()
	start := []float64{-1.2, 1}
	res, err := Solve(rosenbrock, start, &Settings{MaxEvaluations: 5})
	if err != nil || res.Status != EvaluationLimit || res.Usable() || res.Evaluations > 6 {
		t.Errorf("limit: %v, %d evaluations, %v", res.Status, res.Evaluations, err)
	}
	if res.Given.MaxEvaluations != 5 || res.Given.StepTol != 0 || res.Used.StepTol != 1e-12 {
		t.Errorf("given %+v, used %+v", res.Given, res.Used)
	}
	var norms []float64
	enough := errors.New("enough")
	res, _ = Solve(rosenbrock, start, &Settings{Recorder: recorder(func(it Iteration) error {
		norms = append(norms, it.Norm)
		if it.Number == 3 {
			return enough
		}
		return nil
	})})
	if res.Status != Stopped || !errors.Is(res.Cause, enough) || len(norms) != 4 || res.Iterations != 3 {
		t.Errorf("recorder: %v, %v, norms %v", res.Status, res.Cause, norms)
	}
	for i := 1; i < len(norms); i++ {
		if norms[i] >= norms[i-1] {
			t.Errorf("norms do not fall: %v", norms)
		}
	}
	p := rosenbrock
	calls := 0
	p.Residual = func(r, x []float64) error {
		if calls++; calls > 4 {
			return fmt.Errorf("user: %w", ErrStop)
		}
		return rosenbrock.Residual(r, x)
	}
	if res, _ = Solve(p, start, nil); res.Status != Stopped || !errors.Is(res.Cause, ErrStop) {
		t.Errorf("stop by the residual: %v", res.Status)
	}
	p = rosenbrock
	p.Jacobian = func(j, x []float64) error { clear(j); j[0] = math.Inf(1); return nil }
	if res, err = Solve(p, start, nil); err != nil || res.Status != JacobianFailed || !math.IsNaN(res.Condition) || res.Usable() {
		t.Errorf("jacobian: %v, %v", res.Status, err)
	}
	if _, err := res.StandardErrors(); !errors.Is(err, ErrNoJacobian) {
		t.Error("standard errors without a jacobian")
	}
	// A wrong sign in the Jacobian is told from convergence.
	p.Jacobian = func(j, x []float64) error { j[0], j[1], j[2], j[3] = 20*x[0], 1, -10, 0; return nil }
	if res, _ = Solve(p, start, nil); res.Status != Stalled || res.Usable() {
		t.Errorf("wrong jacobian: %v", res.Status)
	}
	if d, _ := CheckJacobian(p, start); d.Worst < 1 {
		t.Errorf("wrong jacobian: deviation %v", d)
	}
}

func TestClone(t *testing.T) {
	t.Parallel()
	var s Solver
	res, _ := s.Solve(linear([]float64{1, 1, 1, 0, 1, 2}, 3, 2, []float64{1, 2, 4}), []float64{0, 0}, nil)
	kept := res.Clone()
	before, _ := kept.StandardErrors()
	x := append([]float64(nil), kept.X...)
	_, _ = s.Solve(linear([]float64{3, 1, 2, 0, 7, 2}, 3, 2, []float64{1, -2, 4}), []float64{5, 5}, nil)
	after, _ := kept.StandardErrors()
	for i := range x {
		if kept.X[i] != x[i] || before[i] != after[i] {
			t.Error("the copy changed with the solver")
		}
	}
}

func TestPanics(t *testing.T) {
	t.Parallel()
	for name, f := range map[string]func(){
		"no residual":     func() { _, _ = Solve(Problem{M: 1, N: 1, Jacobian: rosenbrock.Jacobian}, []float64{0}, nil) },
		"length of start": func() { _, _ = Solve(rosenbrock, []float64{0}, nil) },
		"settings":        func() { _, _ = Solve(rosenbrock, []float64{0, 0}, &Settings{StepTol: math.NaN()}) },
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
}

func TestNoAllocation(t *testing.T) {
	var s Solver
	start := []float64{-1.2, 1}
	solve := func() { _, _ = s.Solve(rosenbrock, start, nil) }
	solve()
	if n := testing.AllocsPerRun(5, solve); n != 0 {
		t.Errorf("%g allocations in a solution with a warm workspace", n)
	}
}
