package superpose

import (
	"fmt"
	"math"
	"testing"

	"phaselag/data/demo"
)

// joint is a gum compound's isotherms, the form of the joint fit and the start that
// the closed-form overlap would give.
func joint(isotherms, frequencies int, law Law) (*Problem, Form, Start, demo.Truth) {
	truth := demo.Gum()
	l := laboratory{truth: truth, sigmaM: 0.005, sigmaD: 0.3 * math.Pi / 180, scatter: 0.3, factor: 0.015, isotherms: isotherms, frequencies: frequencies}
	p := l.problem(3)
	f := Form{Law: law, Sigma: []Sigma{{Magnitude: 0.005, Phase: 0.005}}}
	for k := -25; k <= 8; k++ {
		f.Lattice = append(f.Lattice, math.Pow(10, float64(k)/3))
	}
	var logA []float64
	for _, T := range p.Knots {
		logA = append(logA, math.Log10(truth.ShiftFactor(T))*1.1)
	}
	return p, f, Start{WLF: BestWLF(p.Knots, logA, p.Reference), LogShift: logA}, truth
}

// check fails where the answer is not that of the simulated compound.
func check(b *testing.B, s *Solution, truth demo.Truth) {
	b.Helper()
	for _, T := range s.Problem.Knots {
		if d := s.LogShift(T) - math.Log10(truth.ShiftFactor(T)); math.Abs(d) > 0.2 {
			b.Fatalf("log a_T at %g K is off by %g", T, d)
		}
	}
}

// BenchmarkJointFit is the joint fit of 13 isotherms × 21 frequencies from the
// closed-form overlap.
func BenchmarkJointFit(b *testing.B) {
	p, f, start, truth := joint(0, 0, WLF)
	for b.Loop() {
		s, err := Fit(p, f, start)
		if err != nil {
			b.Fatal(err)
		}
		check(b, s, truth)
	}
}

// BenchmarkSize shows that the cost of a fit grows with the number of points:
// the time of one evaluation with its Jacobian, for each point.
func BenchmarkSize(b *testing.B) {
	for _, law := range []Law{WLF, Factors} {
		for _, n := range [][2]int{{13, 21}, {50, 50}, {100, 100}, {200, 200}} {
			b.Run(fmt.Sprintf("%v/%dx%d", law, n[0], n[1]), func(b *testing.B) {
				p, f, start, truth := joint(n[0], n[1], law)
				b.ReportAllocs()
				evaluations := 0
				for b.Loop() {
					s, err := Fit(p, f, start)
					if err != nil {
						b.Fatal(err)
					}
					check(b, s, truth)
					evaluations += s.Evaluations
				}
				b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(evaluations*len(p.Rows)), "ns/point/evaluation")
				b.ReportMetric(float64(evaluations)/float64(b.N), "evaluations")
			})
		}
	}
}

// BenchmarkReplicates is a bootstrap of 1000 drawn campaigns of 13 × 21 points on
// two workers; it fails where their scatter is not that of the covariance.
func BenchmarkReplicates(b *testing.B) {
	p, f, start, _ := joint(0, 0, WLF)
	s, err := Fit(p, f, start)
	if err != nil {
		b.Fatal(err)
	}
	if s, _, err = s.Refine(4); err != nil {
		b.Fatal(err)
	}
	if s, err = s.Smooth(1e-3, 1e6); err != nil {
		b.Fatal(err)
	}
	u := s.Covariance().Theta(s.e.l.law).Deviation()
	for b.Loop() {
		var sum, squares, n float64
		for _, v := range s.Replicates(1000, Common{}, 1, 2, func(s *Solution) []float64 { return s.Theta[:1] }, nil) {
			if v != nil {
				n++
				sum += v[0]
				squares += v[0] * v[0]
			}
		}
		sd := math.Sqrt(squares/n - sum*sum/(n*n))
		if n < 990 || sd < 0.9*u || sd > 1.1*u {
			b.Fatalf("%g of 1000 fitted; C1 scatters by %g, the covariance says %g", n, sd, u)
		}
	}
}
