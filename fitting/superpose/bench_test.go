package superpose

import (
	"math"
	"testing"

	"phaselag/data/demo"
)

// BenchmarkJointFit is the joint fit of 13 isotherms × 21 frequencies from the
// closed-form overlap; it fails where the answer is not that of the simulated
// compound.
func BenchmarkJointFit(b *testing.B) {
	truth := demo.Gum()
	l := laboratory{truth: truth, sigmaM: 0.005, sigmaD: 0.3 * math.Pi / 180, scatter: 0.3, factor: 0.015}
	p := l.problem(3)
	f := Form{Law: WLF, Sigma: []Sigma{{Magnitude: 0.005, Phase: 0.005}}}
	for k := -25; k <= 8; k++ {
		f.Lattice = append(f.Lattice, math.Pow(10, float64(k)/3))
	}
	var logA []float64
	for _, T := range p.Knots {
		logA = append(logA, math.Log10(truth.ShiftFactor(T))*1.1)
	}
	start := Start{WLF: BestWLF(p.Knots, logA, p.Reference)}
	for b.Loop() {
		s, err := Fit(p, f, start)
		if err != nil {
			b.Fatal(err)
		}
		for _, T := range p.Knots {
			if d := s.LogShift(T) - math.Log10(truth.ShiftFactor(T)); math.Abs(d) > 0.1 {
				b.Fatalf("log a_T at %g K is off by %g", T, d)
			}
		}
	}
}
