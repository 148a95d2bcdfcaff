package superpose

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"sort"
	"testing"

	"phaselag/data/demo"
)

// laboratory makes a Problem from a simulated compound: isotherms from −40 to
// 80 °C at 21 frequencies and, with sweeps, three strain sweeps on a second
// specimen.
type laboratory struct {
	truth           demo.Truth
	sweeps          bool
	sigmaM, sigmaD  float64
	scatter, factor float64
}

const c0 = 273.15

func (l laboratory) problem(seed uint64) *Problem {
	rnd := rand.New(rand.NewPCG(seed, 1))
	p := &Problem{Reference: 23 + c0, Factors: 1, UGeometry: 0.015, Groups: 1, F0: 10}
	add := func(run, group, factor int, f, T, strain, offset, s float64) {
		g := l.truth.Modulus(f, T+offset, strain) * complex(s, 0)
		g *= cmplx.Exp(complex(l.sigmaM*rnd.NormFloat64(), l.sigmaD*rnd.NormFloat64()))
		p.Rows = append(p.Rows, Row{Group: group, Run: run, Factor: factor, T: T, Omega: 2 * math.Pi * f, Strain: strain, G: g})
	}
	knots := map[float64]bool{}
	s1 := math.Exp(l.factor * rnd.NormFloat64())
	for _, tc := range []float64{-40, -30, -20, -10, 0, 10, 23, 30, 40, 50, 60, 70, 80} {
		T := tc + c0
		knots[T] = true
		off := l.scatter * rnd.NormFloat64()
		p.Runs = append(p.Runs, Run{U: 0.3})
		for i := range 21 {
			add(len(p.Runs)-1, 0, 0, 0.5*math.Pow(100, float64(i)/20), T, 0.002, off, s1)
		}
	}
	if l.sweeps {
		p.Factors, p.Groups = 2, 2
		s2 := math.Exp(l.factor * rnd.NormFloat64())
		for _, tc := range []float64{-10, 23, 60} {
			T := tc + c0
			off := l.scatter * rnd.NormFloat64()
			p.Runs = append(p.Runs, Run{U: 0.3})
			for i := range 15 {
				add(len(p.Runs)-1, 1, 1, 10, T, 0.001*math.Pow(200, float64(i)/14), off, s2)
			}
		}
	}
	for T := range knots {
		p.Knots = append(p.Knots, T)
	}
	sort.Float64s(p.Knots)
	return p
}

func TestDebugFit(t *testing.T) {
	for _, l := range []laboratory{
		{truth: demo.Gum()},
		{truth: demo.Gum(), sigmaM: 0.005, sigmaD: 0.3 * math.Pi / 180, scatter: 0.3, factor: 0.015},
		{truth: demo.HM60(), sweeps: true},
		{truth: demo.HM60(), sweeps: true, sigmaM: 0.005, sigmaD: 0.3 * math.Pi / 180, scatter: 0.3, factor: 0.015},
	} {
		p := l.problem(7)
		f := Form{Law: WLF, Filler: l.sweeps, Activation: true, Kappa: 1, Sigma: []Sigma{{0.01, 0.01}, {0.01, 0.01}}[:p.Groups]}
		for k := -24; k <= 3; k++ {
			f.Lattice = append(f.Lattice, math.Pow(10, float64(k)/3))
		}
		st := Start{Filler: FillerStart{5, 0.01, 0.6}}
		st.WLF.C1, st.WLF.C2, st.WLF.Reference = 8, 120, p.Reference
		s, err := Fit(p, f, st)
		if err != nil {
			t.Fatal(err)
		}
		t.Log("WLF", s.Iterations, s.Evaluations, s.Objective, s.Theta[:2], s.Activation())
		s2, noise, err := s.Refine(5)
		if err != nil {
			t.Fatal(err)
		}
		t.Log("refined", s2.Iterations, s2.Objective, s2.Theta[:2], s2.Activation(), noise)
		f2 := s2.Form
		f2.Law = Factors
		s3, err := Fit(p, f2, s2.Start())
		if err != nil {
			t.Fatal(err)
		}
		t.Log("factors", s3.Iterations, s3.Objective, s3.AICc(), s2.AICc())
		cov := s3.Covariance()
		for _, T := range p.Knots {
			t.Logf("%6.1f %9.4f ± %.4f true %9.4f", T-c0, s3.LogShift(T), cov.LogShift(T).Deviation(), math.Log10(l.truth.ShiftFactor(T)))
		}
	}
}
