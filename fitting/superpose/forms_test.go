package superpose

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"

	"phaselag/data/demo"
	"phaselag/models/amplitude"
)

// filled makes isotherms and three strain sweeps of gum with a filler term that
// the caller writes down: term gets the polymer modulus, frequency, temperature
// and strain.
func filled(seed uint64, term func(poly complex128, f, T, strain float64) complex128) *Problem {
	rnd := rand.New(rand.NewPCG(seed, 9))
	gum := demo.Gum()
	p := &Problem{Reference: 23 + c0, Factors: 1, Groups: 1, F0: 10}
	add := func(T float64, f, strain float64) {
		g := term(gum.Modulus(f, T, 0.001), f, T, strain)
		g *= cmplx.Exp(complex(0.005*rnd.NormFloat64(), 0.3*math.Pi/180*rnd.NormFloat64()))
		p.Rows = append(p.Rows, Row{Run: len(p.Runs) - 1, T: T, Omega: 2 * math.Pi * f, Strain: strain, G: g})
	}
	for _, tc := range []float64{-30, -15, 0, 10, 23, 40, 60, 80} {
		p.Knots = append(p.Knots, tc+c0)
		p.Runs = append(p.Runs, Run{U: 0.3})
		for i := range 15 {
			add(tc+c0, 0.5*math.Pow(100, float64(i)/14), 0.002)
		}
	}
	for _, tc := range []float64{0, 23, 60} {
		p.Runs = append(p.Runs, Run{U: 0.3})
		for i := range 18 {
			add(tc+c0, 10, 0.0002*math.Pow(1000, float64(i)/17))
		}
	}
	return p
}

// TestAmplitudeForms: for filler terms of every form, written down here from their
// formulas (sources in package amplitude), the right form has the least AICc and its
// constants come out within four standard uncertainties.
func TestAmplitudeForms(t *testing.T) {
	phi := func(T float64) float64 { return math.Exp(6000 / 8.31446261815324 * (1/T - 1/(23+c0))) }
	dir := func(f float64) complex128 { return complex(2/math.Pi*math.Log(f/10), 1) }
	type want struct {
		name string
		of   func(s *Solution) (value, u float64)
		is   float64
	}
	theta := func(s *Solution, i int) (float64, float64) { return s.Theta[i], s.Covariance().Theta(i).Deviation() }
	critical := want{"ln γ_c", func(s *Solution) (float64, float64) { return theta(s, s.Indices().Critical) }, math.Log(0.011)}
	exponent := want{"m", func(s *Solution) (float64, float64) { return theta(s, s.Indices().Exponent) }, 0.57}
	cases := []struct {
		form  Form
		term  func(poly complex128, f, T, strain float64) complex128
		wants []want
	}{
		{Form{Amplitude: amplitude.OfKraus}, func(poly complex128, f, T, strain float64) complex128 {
			q := math.Pow(strain/0.011, 0.57)
			return poly + complex(phi(T)*0.9e6/(1+q*q), 0) + complex(phi(T)*0.12e6*2*q/(1+q*q), 0)*dir(f)
		}, []want{critical, exponent}},
		{Form{Amplitude: amplitude.ExtraLoss}, func(poly complex128, f, T, strain float64) complex128 {
			q := math.Pow(strain/0.011, 0.57)
			return poly + complex(phi(T)*0.9e6/(1+q*q), 0) + complex(phi(T)*(0.12e6*2*q/(1+q*q)+0.08e6*math.Exp(-strain/0.003)), 0)*dir(f)
		}, []want{critical, exponent, {"ln γ_2", func(s *Solution) (float64, float64) { return theta(s, s.Indices().Extra) }, math.Log(0.003)}}},
		{Form{Amplitude: amplitude.MaierGoritz}, func(poly complex128, f, T, strain float64) complex128 {
			x := strain / 0.011
			return poly + complex(phi(T)*0.9e6/(1+x), 0) + complex(phi(T)*0.5e6*x/((1+x)*(1+x)), 0)*dir(f)
		}, []want{critical}},
		{Form{Amplitude: amplitude.OfKraus, Scaling: true}, func(poly complex128, f, T, strain float64) complex128 {
			q := math.Pow(strain/0.011, 0.57)
			return poly * (1 + complex(phi(T)*0.6/(1+q*q), 0) + complex(phi(T)*0.08*2*q/(1+q*q), 0)*dir(f))
		}, []want{critical, exponent, {"α", func(s *Solution) (float64, float64) { return theta(s, s.Indices().Alpha) }, 0.6}}},
	}
	for n, c := range cases {
		p := filled(uint64(40+n), c.term)
		base := Form{Law: WLF, Filler: true, Activation: true, Kappa: 1, Sigma: []Sigma{{Magnitude: 0.005, Phase: 0.3 * math.Pi / 180}}}
		for k := -25; k <= 8; k++ {
			base.Lattice = append(base.Lattice, math.Pow(10, float64(k)/3))
		}
		st := Start{Filler: FillerStart{Activation: 5, Critical: 0.02, Exponent: 0.6}}
		st.WLF.C1, st.WLF.C2, st.WLF.Reference = 6, 150, p.Reference
		least, name := math.Inf(1), ""
		var right *Solution
		for _, o := range cases {
			f := base
			f.Amplitude, f.Scaling = o.form.Amplitude, o.form.Scaling
			s, err := Fit(p, f, st)
			if err != nil {
				t.Fatal(err)
			}
			if v := s.AICc(); v < least {
				least, name = v, f.Amplitude.String()
			}
			if o.form.Amplitude == c.form.Amplitude && o.form.Scaling == c.form.Scaling {
				right = s
			}
		}
		if v := right.AICc(); v > least+2 {
			t.Errorf("%v, scaling %t: %s is better by %.1f", c.form.Amplitude, c.form.Scaling, name, v-least)
		}
		for _, w := range c.wants {
			if v, u := w.of(right); math.Abs(v-w.is) > 4*u || u > 0.3 {
				t.Errorf("%v, scaling %t: %s is %.4f ± %.4f, should be %.4f", c.form.Amplitude, c.form.Scaling, w.name, v, u, w.is)
			}
		}
	}
}

// frozen is gum whose shift factor goes on with Arrhenius below −15 °C.
type frozen struct{}

func (frozen) Log10(T float64) float64 {
	const cross = -15 + c0
	w := func(T float64) float64 { return -6.12 * (T - 296.15) / (151.3 + T - 296.15) }
	if T >= cross {
		return w(T)
	}
	q := 151.3 + cross - 296.15
	return w(cross) + cross*cross*6.12*151.3/(q*q)*(1/T-1/cross)
}

// TestCrossover: the law that is WLF above and Arrhenius below is found where it is
// the truth, with its temperature, and is not preferred where WLF is.
func TestCrossoverLaw(t *testing.T) {
	gum := demo.Gum()
	for _, isFrozen := range []bool{true, false} {
		p := filled(50, func(poly complex128, f, T, strain float64) complex128 {
			if !isFrozen {
				return poly
			}
			// The same spectrum at the frequency that gives the wished reduced one.
			own := math.Log10(gum.ShiftFactor(T))
			return gum.Modulus(f*math.Pow(10, frozen{}.Log10(T)-own), T, 0.001)
		})
		for _, tc := range []float64{-40, -35, -25, -20} {
			rnd := rand.New(rand.NewPCG(uint64(-tc), 3))
			p.Runs = append(p.Runs, Run{U: 0.3})
			p.Knots = append([]float64{tc + c0}, p.Knots...)
			for i := range 15 {
				f := 0.5 * math.Pow(100, float64(i)/14)
				d := 0.0
				if isFrozen {
					d = frozen{}.Log10(tc+c0) - math.Log10(gum.ShiftFactor(tc+c0))
				}
				g := gum.Modulus(f*math.Pow(10, d), tc+c0, 0.001) * cmplx.Exp(complex(0.005*rnd.NormFloat64(), 0.005*rnd.NormFloat64()))
				p.Rows = append(p.Rows, Row{Run: len(p.Runs) - 1, T: tc + c0, Omega: 2 * math.Pi * f, Strain: 0.002, G: g})
			}
		}
		p.Knots = []float64{-40 + c0, -35 + c0, -30 + c0, -25 + c0, -20 + c0, -15 + c0, c0, 10 + c0, 23 + c0, 40 + c0, 60 + c0, 80 + c0}
		f := Form{Law: WLF, Sigma: []Sigma{{Magnitude: 0.005, Phase: 0.3 * math.Pi / 180}}}
		for k := -25; k <= 8; k++ {
			f.Lattice = append(f.Lattice, math.Pow(10, float64(k)/3))
		}
		st := Start{Cross: -20 + c0}
		st.WLF.C1, st.WLF.C2, st.WLF.Reference = 6, 150, p.Reference
		w, err := Fit(p, f, st)
		if err != nil {
			t.Fatal(err)
		}
		f.Law = Crossover
		x, err := Fit(p, f, st)
		if err != nil {
			t.Fatal(err)
		}
		gain := w.AICc() - x.AICc()
		if !isFrozen {
			if gain > 5 {
				t.Errorf("the crossover is preferred by %.1f where there is none", gain)
			}
			continue
		}
		i := x.Indices().Law + 2
		u := x.Covariance().Theta(i).Deviation()
		if gain < 5 || math.Abs(x.Theta[i]-(-15+c0)) > 4*u || u > 4 {
			t.Errorf("crossover at %.1f ± %.1f °C, should be −15; preferred by %.1f", x.Theta[i]-c0, u, gain)
		}
	}
}
