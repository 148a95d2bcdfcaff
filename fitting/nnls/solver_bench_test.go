package nnls

import (
	"math/rand/v2"
	"testing"
)

// The size of an ordinary campaign: 273 points, real and imaginary, 35 branches.
// A time counts only for a right answer and without allocation.
func BenchmarkSolve(b *testing.B) {
	for _, c := range []struct {
		name  string
		warm  bool
		noise float64
	}{{"cold", false, 0.005}, {"warm", true, 0.005}, {"cold exact", false, 0}} {
		b.Run(c.name, func(b *testing.B) {
			p := prony(rand.New(rand.NewPCG(1, 2)), 273, 35, c.noise)
			var s Solver
			x := make([]float64, p.n)
			passive := make([]bool, p.n)
			s.Solve(p.a, p.m, p.n, p.b, x, passive, nil)
			var rnorm float64
			b.ReportAllocs()
			for b.Loop() {
				if !c.warm {
					clear(passive)
				}
				rnorm, _ = s.Solve(p.a, p.m, p.n, p.b, x, passive, nil)
			}
			if v := p.violation(b, x, rnorm); v > kktTol {
				b.Fatalf("optimality violated by %g", v)
			}
			b.ReportMetric(float64(s.Changes()), "changes/op")
		})
	}
}

func TestNoAllocation(t *testing.T) {
	p := prony(rand.New(rand.NewPCG(1, 2)), 273, 35, 0.005)
	var s Solver
	x := make([]float64, p.n)
	passive := make([]bool, p.n)
	solve := func() { s.Solve(p.a, p.m, p.n, p.b, x, passive, nil) }
	solve()
	if n := testing.AllocsPerRun(5, solve); n != 0 {
		t.Errorf("%g allocations in a solution with a warm workspace", n)
	}
}
