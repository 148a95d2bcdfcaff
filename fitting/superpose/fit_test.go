package superpose

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"sort"
	"testing"

	"phaselag/data/demo"
	"phaselag/models/amplitude"
)

// laboratory makes a Problem from a simulated compound: isotherms from −40 to
// 80 °C at 21 frequencies and, with sweeps, three strain sweeps on a second
// specimen.
type laboratory struct {
	truth                  demo.Truth
	sweeps                 bool
	sigmaM, sigmaD         float64
	scatter, factor        float64
	isotherms, frequencies int // 0: those of above
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
	temperatures, frequencies := []float64{-40, -30, -20, -10, 0, 10, 23, 30, 40, 50, 60, 70, 80}, 21
	if l.isotherms > 0 {
		temperatures = nil
		for i := range l.isotherms {
			temperatures = append(temperatures, -40+max(120, float64(l.isotherms-1))*float64(i)/float64(l.isotherms-1))
		}
		frequencies = l.frequencies
	}
	for _, tc := range temperatures {
		T := tc + c0
		knots[T] = true
		off := l.scatter * rnd.NormFloat64()
		p.Runs = append(p.Runs, Run{U: 0.3})
		for i := range frequencies {
			add(len(p.Runs)-1, 0, 0, 0.5*math.Pow(100, float64(i)/float64(frequencies-1)), T, 0.002, off, s1)
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

// TestExact: without noise the joint fit finds the simulated shift factors, as
// the law's and as free factors, to 0.002 decade.
func TestExact(t *testing.T) {
	for _, l := range []laboratory{{truth: demo.Gum()}, {truth: demo.HM60(), sweeps: true}} {
		p := l.problem(7)
		for i := range p.Runs {
			p.Runs[i].U = 0
		}
		f := l.form(p)
		st := Start{Filler: FillerStart{Activation: 5, Critical: 0.01, Exponent: 0.6}}
		st.WLF.C1, st.WLF.C2, st.WLF.Reference = 8, 120, p.Reference
		law, err := Fit(p, f, st)
		if err != nil {
			t.Fatal(err)
		}
		f.Law = Factors
		free, err := Fit(p, f, law.Start())
		if err != nil {
			t.Fatal(err)
		}
		for _, T := range p.Knots {
			want := math.Log10(l.truth.ShiftFactor(T))
			for _, s := range []*Solution{law, free} {
				if got := s.LogShift(T); math.Abs(got-want) > 0.002 {
					t.Errorf("%s, %s, %.1f °C: log a_T %.5f, simulated %.5f", l.truth.Name, s.Form.Law, T-c0, got, want)
				}
			}
		}
	}
}

// form is the right model for the laboratory's compound.
func (l laboratory) form(p *Problem) Form {
	f := Form{Law: WLF, Filler: l.sweeps, Activation: true, Kappa: 1}
	for range p.Groups {
		f.Sigma = append(f.Sigma, Sigma{Magnitude: 0.005, Phase: 0.005})
	}
	for k := -25; k <= 8; k++ {
		f.Lattice = append(f.Lattice, math.Pow(10, float64(k)/3))
	}
	return f
}

// TestJacobian compares the triangle of Kaufman's Jacobian with differences in the one quantity
// that it gives exactly, the gradient of the objective.
func TestJacobian(t *testing.T) {
	l := laboratory{truth: demo.HM60(), sweeps: true, sigmaM: 0.02, sigmaD: 0.02, scatter: 0.3, factor: 0.015}
	p := l.problem(3)
	p.UPhase = 0.001
	for _, law := range []Law{WLF, Factors, Arrhenius, Crossover} {
		for n, v := range []Vertical{NoVertical, Density, Free, NoVertical, Density} {
			f := l.form(p)
			f.Law, f.Vertical, f.Expansion = law, v, 6.6e-4
			f.Amplitude, f.Scaling = amplitude.Kind(n%3), n >= 3
			if n == 2 {
				f.Prior = Prior{Level: make([]float64, len(f.Lattice)), Spread: 0.1}
				for k := range f.Lattice {
					f.Prior.Level[k] = 1e5
				}
			}
			e := newEngine(p, &f)
			s := Start{Activation: 90e3, Filler: FillerStart{Activation: 5, Critical: 0.02, Exponent: 0.6}}
			s.WLF.C1, s.WLF.C2, s.WLF.Reference = 6, 150, p.Reference
			s.Cross = 250
			for _, T := range p.Knots {
				s.LogShift = append(s.LogShift, s.WLF.LogShift(T))
			}
			x := p.theta(&f, &e.l, s)
			for i := range x {
				x[i] += 0.001 * float64(i%5)
			}
			r := make([]float64, e.m+e.priors)
			if !e.residual(r, x) {
				t.Fatal("no residual")
			}
			n := e.l.n
			tri, q := make([]float64, n*n), make([]float64, n)
			if !e.triangle(tri, q, x) {
				t.Fatal("no Jacobian")
			}
			for k := range x {
				got := 2 * dot(tri[k*n:k*n+k+1], q)
				h := 1e-5 * max(1, math.Abs(x[k]))
				side := func(d float64) float64 {
					y := append([]float64(nil), x...)
					y[k] += d
					q := make([]float64, len(r))
					e.residual(q, y)
					return squares(q)
				}
				want := (side(h) - side(-h)) / (2 * h)
				if math.Abs(got-want) > 1e-4*(math.Abs(want)+1e-3*squares(r)) {
					t.Errorf("%v, %v, %v, parameter %d: gradient %g, by differences %g", law, v, f.Amplitude, k, got, want)
				}
			}
		}
	}
}
