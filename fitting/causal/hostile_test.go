package causal

import (
	"math"
	"math/cmplx"
	"strings"
	"testing"
)

func TestBadInput(t *testing.T) {
	f := spread(0.5, 50, 12)
	g := measure(f, rubber)
	change := func(i int, z complex128) []complex128 {
		c := append([]complex128(nil), g...)
		c[i] = z
		return c
	}
	move := func(i int, x float64) []float64 {
		c := append([]float64(nil), f...)
		c[i] = x
		return c
	}
	nan, inf := math.NaN(), math.Inf(1)
	for _, c := range []struct {
		name string
		s    Isotherm
		want string
	}{
		{"empty", Isotherm{}, "no frequency"},
		{"lengths", Isotherm{Frequency: f, Modulus: g[:11]}, "12 frequencies but 11 moduli"},
		{"zero frequency", Isotherm{Frequency: move(0, 0), Modulus: g}, "row 1: frequency 0"},
		{"NaN frequency", Isotherm{Frequency: move(3, nan), Modulus: g}, "row 4: frequency NaN"},
		{"infinite frequency", Isotherm{Frequency: move(11, inf), Modulus: g}, "row 12: frequency +Inf"},
		{"unsorted", Isotherm{Frequency: move(4, 0.6), Modulus: g}, "row 5: frequency 0.6 Hz does not rise"},
		{"repeat", Isotherm{Frequency: move(4, f[3]), Modulus: g}, "row 5"},
		{"zero modulus", Isotherm{Frequency: f, Modulus: change(2, 0)}, "row 3"},
		{"negative loss", Isotherm{Frequency: f, Modulus: change(2, complex(1, -1))}, "row 3"},
		{"NaN modulus", Isotherm{Frequency: f, Modulus: change(5, cmplx.NaN())}, "row 6"},
		{"NaN loss", Isotherm{Frequency: f, Modulus: change(5, complex(1, nan))}, "row 6"},
		{"infinite modulus", Isotherm{Frequency: f, Modulus: change(5, cmplx.Inf())}, "row 6"},
		{"negative noise", Isotherm{Frequency: f, Modulus: g, Magnitude: -1, Phase: 1}, "noise of the magnitude"},
		{"infinite noise", Isotherm{Frequency: f, Modulus: g, Magnitude: 1, Phase: inf}, "noise of the phase"},
	} {
		v, err := Judge(c.s)
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: error %v, want %q", c.name, err, c.want)
		}
		if v.Outcome != "" {
			t.Errorf("%s: a verdict beside an error", c.name)
		}
	}
}

// Too little to judge is an answer, not an error.
func TestUndecided(t *testing.T) {
	for _, c := range []struct {
		name string
		f    []float64
		want string
	}{
		{"one", []float64{1}, "1 frequencies"},
		{"five", spread(0.5, 50, 5), "5 frequencies"},
		{"narrow", spread(1, 9, 20), "0.95 decades"},
		{"wide and thin", spread(0.01, 100, 7), "measure more frequencies"},
	} {
		v, err := Judge(Isotherm{Frequency: c.f, Modulus: measure(c.f, rubber), Magnitude: 0.005, Phase: 0.005})
		if err != nil || v.Outcome != Undecided || !strings.Contains(v.Reason, c.want) || v.CausalFree || v.CausalNonNegative || v.Likely != "" {
			t.Errorf("%s: %v, %s: %q", c.name, err, v.Outcome, v.Reason)
		}
	}
	// A decade of rounded frequencies is a decade.
	f := []float64{1, 1.26, 1.58, 2, 2.51, 3.16, 3.98, 5.01, 6.31, 7.94, 10}
	if v, err := Judge(Isotherm{Frequency: f, Modulus: measure(f, rubber), Magnitude: 0.005, Phase: 0.005}); err != nil || v.Outcome != Consistent {
		t.Errorf("a decade: %v, %s %s", err, v.Outcome, v.Reason)
	}
}

// Extreme but possible numbers: an answer without NaN where one is promised,
// and no panic.
func TestExtremes(t *testing.T) {
	f := spread(0.5, 50, 15)
	wild := make([]complex128, len(f))
	for i := range wild {
		wild[i] = complex(math.Pow(10, float64(20*(i%2))), math.Pow(10, float64(-20*(i%3))))
	}
	flat := make([]complex128, len(f))
	for i := range flat {
		flat[i] = complex(1, 1e-300)
	}
	scaled := func(k float64) []complex128 {
		g := measure(f, rubber)
		for i := range g {
			g[i] *= complex(k, 0)
		}
		return g
	}
	for _, g := range [][]complex128{wild, flat, scaled(1e-150), scaled(1e150), scaled(1)} {
		for _, u := range []float64{0, 1e-12, 0.005, 1e6} {
			v, err := Judge(Isotherm{Frequency: f, Modulus: g, Magnitude: u, Phase: u})
			if err != nil {
				t.Fatal(err)
			}
			if v.Outcome == "" || v.Outcome == Undecided && v.Reason == "" {
				t.Errorf("no outcome or no reason: %+v", v)
			}
			for _, s := range v.Suspicions {
				if math.IsNaN(s.Reduction) || math.IsNaN(s.P) || math.IsNaN(s.Estimate) {
					t.Errorf("%s is not a number: %+v", s.Kind, s)
				}
			}
		}
	}
}

// The unit of the modulus does not matter, but for the unit of the inertia.
func TestScale(t *testing.T) {
	f := spread(0.5, 50, 21)
	g := noisy(measure(f, rubber), 0.005, 0.3*degree, 9)
	big := make([]complex128, len(g))
	for i := range g {
		big[i] = g[i] * 1e6
	}
	a, _ := Judge(Isotherm{Frequency: f, Modulus: g, Magnitude: 0.005, Phase: 0.3 * degree})
	b, _ := Judge(Isotherm{Frequency: f, Modulus: big, Magnitude: 0.005, Phase: 0.3 * degree})
	if math.Abs(a.Free.ChiSquare/b.Free.ChiSquare-1) > 1e-8 || math.Abs(a.NonNegative.ChiSquare/b.NonNegative.ChiSquare-1) > 1e-8 {
		t.Errorf("S %g and %g, %g and %g", a.Free.ChiSquare, b.Free.ChiSquare, a.NonNegative.ChiSquare, b.NonNegative.ChiSquare)
	}
	for i := range a.Suspicions {
		x, y := a.Suspicions[i], b.Suspicions[i]
		if math.Abs(x.Reduction-y.Reduction) > 1e-5 {
			t.Errorf("%s: reduction %g and %g", x.Kind, x.Reduction, y.Reduction)
		}
	}
}
