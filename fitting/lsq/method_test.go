package lsq

import (
	"errors"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"gonum.org/v1/gonum/optimize"
)

func never() *optimize.Settings {
	return &optimize.Settings{Converger: optimize.NeverTerminate{}}
}

// The method arrives where Solve does, bit for bit, and reports every step.
func TestMethod(t *testing.T) {
	t.Parallel()
	start := []float64{-1.2, 1}
	want, _ := Solve(rosenbrock, start, nil)
	m := &Method{Problem: rosenbrock}
	for range 2 {
		got, err := optimize.Minimize(optimize.Problem{Func: rosenbrock.Objective()}, start, never(), m)
		if err != nil || got.Status != optimize.MethodConverge {
			t.Fatalf("%v, %v", got.Status, err)
		}
		res, err := m.Result()
		if err != nil || res.Evaluations != want.Evaluations || res.Used.Recorder != nil {
			t.Errorf("evaluations %d, want %d; %v", res.Evaluations, want.Evaluations, err)
		}
		if got.MajorIterations != want.Iterations+1 {
			t.Errorf("%d major iterations, want %d and the start", got.MajorIterations, want.Iterations)
		}
		for i := range want.X {
			if got.X[i] != want.X[i] || res.X[i] != want.X[i] {
				t.Errorf("x = %v, want %v", got.X, want.X)
			}
		}
	}
}

func TestMethodEnds(t *testing.T) {
	t.Parallel()
	start := []float64{-1.2, 1}
	problem := optimize.Problem{Func: rosenbrock.Objective()}
	s := never()
	s.MajorIterations = 3
	m := &Method{Problem: rosenbrock}
	got, err := optimize.Minimize(problem, start, s, m)
	if err != nil || got.Status != optimize.IterationLimit || got.MajorIterations != 3 {
		t.Errorf("limit of optimize: %v, %d, %v", got.Status, got.MajorIterations, err)
	}
	m.Settings = &Settings{MaxEvaluations: 5}
	if got, err = optimize.Minimize(problem, start, never(), m); err != nil || got.Status != optimize.FunctionEvaluationLimit {
		t.Errorf("own limit: %v, %v", got.Status, err)
	}
	enough := errors.New("enough")
	m.Settings = &Settings{Recorder: recorder(func(Iteration) error { return enough })}
	if _, err = optimize.Minimize(problem, start, never(), m); !errors.Is(err, enough) {
		t.Errorf("own recorder: %v", err)
	}
	m.Settings = nil
	m.Problem.Residual = func(r, x []float64) error { panic("broken model") }
	if _, err = optimize.Minimize(problem, start, never(), m); err == nil || !strings.Contains(err.Error(), "broken model") {
		t.Errorf("panic of the residual: %v", err)
	}
	m.Problem.Residual = func(r, x []float64) error { r[0] = math.NaN(); return nil }
	if _, err = optimize.Minimize(problem, start, never(), m); !errors.Is(err, ErrNotFinite) {
		t.Errorf("start without a value: %v", err)
	}
}

func TestObjective(t *testing.T) {
	t.Parallel()
	p := rosenbrock
	p.Upper = []float64{2, 2}
	f := p.Objective()
	if v := f([]float64{-1.2, 1}); math.Abs(v-12.1) > 1e-13 { // ½·(4.4² + 2.2²)
		t.Errorf("value %.17g, want 12.1", v)
	}
	if v := f([]float64{0, 3}); !math.IsInf(v, 1) {
		t.Errorf("outside: %g", v)
	}
	if v := f([]float64{0, math.NaN()}); !math.IsInf(v, 1) {
		t.Errorf("not a number: %g", v)
	}
}

// Reference problems without a start, in boxes that are wide compared with what is
// known beforehand: certified parameters to 6 digits (origin as in nist_test.go).
func TestSearch(t *testing.T) {
	t.Parallel()
	boxes := map[string][2][]float64{
		"BoxBOD":   {{1, 1e-3}, {1e4, 100}},
		"Misra1a":  {{1, 1e-6}, {1e4, 1}},
		"Eckerle4": {{0.1, 0.1, 400}, {100, 100, 500}},
		"MGH17":    {{-10, 0, -10, 1e-3, 1e-3}, {10, 10, 0, 1, 1}},
		"Rat43":    {{10, -10, 1e-3, 0.1}, {1e4, 10, 10, 10}},
		"MGH10":    {{1e-6, 1, 1}, {10, 1e5, 1e4}},
	}
	for _, p := range readNIST(t) {
		box, ok := boxes[p.name]
		if !ok {
			continue
		}
		p.lower, p.upper = box[0], box[1]
		res, err := Start(p.problem(), nil, rand.NewPCG(1, 1))
		if err != nil {
			t.Errorf("%s: %v", p.name, err)
			continue
		}
		for i := range res.X {
			if digits(res.X[i], p.certified[i]) < 6 {
				t.Errorf("%s: x = %v, want %v", p.name, res.X, p.certified)
			}
		}
		again, _ := Start(p.problem(), nil, rand.NewPCG(1, 1))
		for i := range res.X {
			if again.X[i] != res.X[i] {
				t.Errorf("%s: the same source gave %v and %v", p.name, res.X, again.X)
			}
		}
		t.Logf("%s: %d evaluations of the residual for two searches", p.name, p.residualCalls)
	}
}

func TestSearchEnds(t *testing.T) {
	t.Parallel()
	src := rand.NewPCG(1, 1)
	if _, err := Start(rosenbrock, nil, src); !errors.Is(err, ErrBox) {
		t.Errorf("no box: %v", err)
	}
	p := rosenbrock
	p.Lower, p.Upper = []float64{-2, -2}, []float64{2, 2}
	p.Residual = func(r, x []float64) error { return errors.New("never") }
	if _, err := Start(p, nil, src); !errors.Is(err, ErrNoStart) {
		t.Errorf("no value anywhere: %v", err)
	}
	p.Residual = func(r, x []float64) error { panic("broken model") }
	defer func() {
		if v := recover(); v != "broken model" {
			t.Errorf("panic does not reach the caller: %v", v)
		}
	}()
	_, _ = Start(p, nil, src)
}
