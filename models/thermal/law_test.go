package thermal

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

const zeroC = 273.15

func near(t rapid.TB, what string, got, want, abs float64) {
	t.Helper()
	if !(math.Abs(got-want) <= abs) {
		t.Errorf("%s: got %.10g, want %.10g", what, got, want)
	}
}

// hevea is natural rubber at 248 K. Ferry, Viscoelastic Properties of
// Polymers, 3rd ed., ch. 11; values from memory.
var hevea = WLF{C1: 8.86, C2: 101.6, Reference: 248}

// The universal pair 17.44, 51.6 K at T_g (Williams, Landel, Ferry 1955; value
// from memory) becomes 8.857, 101.6 K at T_g + 50 K, the other pair of the
// handbooks (8.86, 101.6).
func TestUniversalPair(t *testing.T) {
	w := WLF{C1: 17.44, C2: 51.6, Reference: 200}.At(250)
	near(t, "C1", w.C1, 8.857, 5e-4)
	near(t, "C2", w.C2, 101.6, 1e-12)
}

// The handbook lists T0 and T_g constants of the same polymers separately:
// each pair must give the other to the digits printed. Ferry, ch. 11, table of
// WLF constants; values from memory.
func TestTwoReferences(t *testing.T) {
	for _, p := range []struct {
		name                     string
		t0, c1, c2, tg, c1g, c2g float64
		c1at, c2at               float64 // at 23 °C, computed independently in double precision
	}{
		{"natural rubber", 248, 8.86, 101.6, 200, 16.8, 53.6, 6.0112, 149.75},
		{"polyisobutylene", 298, 8.61, 200.4, 202, 16.5, 104.4, 8.6902, 198.55},
		{"butyl", 298, 9.03, 201.6, 205, 16.8, 108.6, 9.1136, 199.75},
		{"styrene butadiene", 298, 4.57, 113.6, 210, 20.3, 25.6, 4.6457, 111.75},
		{"dimethyl siloxane", 303, 1.90, 222, 150, 6.1, 69, 1.9605, 215.15},
	} {
		w := WLF{C1: p.c1, C2: p.c2, Reference: p.t0}
		g := w.At(p.tg)
		// C1g is printed to three digits and C2g comes from rounded constants.
		near(t, p.name+": C2 at Tg", g.C2, p.c2g, 0.06)
		near(t, p.name+": C1 at Tg", g.C1, p.c1g, 0.006*p.c1g)
		r := w.At(23 + zeroC)
		near(t, p.name+": C1 at 23 °C", r.C1, p.c1at, 5.1e-5)
		near(t, p.name+": C2 at 23 °C", r.C2, p.c2at, 1e-9)
	}
}

// Shift factors of natural rubber at the reference 23 °C, from the constants
// above; computed independently in double precision.
func TestNaturalRubberTable(t *testing.T) {
	w := hevea.At(23 + zeroC)
	for _, c := range []struct{ celsius, want float64 }{
		{-40, 4.36548}, {-30, 3.29295}, {-20, 2.42137}, {-10, 1.69909}, {0, 1.09079}, {10, 0.57145},
		{40, -0.61284}, {60, -1.19097}, {80, -1.65726}, {100, -2.04129},
	} {
		near(t, "log a_T", w.LogShift(c.celsius+zeroC), c.want, 5.1e-6)
	}
	B, inf := hevea.VFT()
	near(t, "B", B, 2072.73, 5.1e-3)
	near(t, "pole", inf, 146.4, 1e-12)
	// 10 Hz at −20 °C reads 2638.6 Hz at 23 °C, 10 Hz at 60 °C reads 0.64421 Hz;
	// computed independently in double precision.
	near(t, "reduced frequency, cold", 10*math.Pow(10, w.LogShift(-20+zeroC)), 2638.6, 0.051)
	near(t, "reduced frequency, warm", 10*math.Pow(10, w.LogShift(60+zeroC)), 0.64421, 5.1e-6)
}

// Styrene butadiene rubber at 298 K (Ferry, ch. 11; constants from memory);
// shifts computed independently in double precision.
func TestStyreneButadiene(t *testing.T) {
	w := WLF{C1: 4.57, C2: 113.6, Reference: 298}
	near(t, "−10 °C", w.LogShift(-10+zeroC), 2.022406, 5.1e-7)
	near(t, "50 °C", w.LogShift(50+zeroC), -0.828364, 5.1e-7)
}

// A published filled compound: C1 = 4.41, C2 = 137.64 K at 70 °C and 0.2 %
// strain (Sci. Rep. 2021, doi 10.1038/s41598-021-97921-0); moved to 20 °C,
// computed independently in double precision.
func TestPublishedCompound(t *testing.T) {
	w := WLF{C1: 4.41, C2: 137.64, Reference: 70 + zeroC}
	r := w.At(20 + zeroC)
	near(t, "C1", r.C1, 6.92597, 5.1e-6)
	near(t, "C2", r.C2, 87.64, 1e-9)
	near(t, "shift at 20 °C", w.LogShift(20+zeroC), 2.515974, 5.1e-7)
}

// E_a = 80 kJ/mol from 23 to 60 °C; computed independently in double precision.
func TestArrheniusValue(t *testing.T) {
	a := Arrhenius{Activation: 80e3, Reference: 23 + zeroC}
	near(t, "log a", a.LogShift(60+zeroC), -1.567077, 5.1e-7)
	near(t, "factor", math.Log10(a.Factor(60+zeroC)), -1.567077, 5.1e-7)
}

// Ferry's reduction factor ρ0T0/(ρT) with the volume expansion 6.6e-4 /K of gum
// rubber is 0.910647 from 23 to 60 °C (computed independently in double
// precision); b_T here multiplies the modulus of the reference and is its
// reciprocal.
func TestDensity(t *testing.T) {
	d := Density{Expansion: 6.6e-4, Reference: 23 + zeroC}
	near(t, "b_T", 1/d.Factor(60+zeroC), 0.910647, 5.1e-7)
	near(t, "b_T at the reference", d.Factor(23+zeroC), 1, 0)
	rapid.Check(t, func(t *rapid.T) {
		d := Density{Expansion: rapid.Float64Range(0, 2e-3).Draw(t, "α"), Reference: rapid.Float64Range(220, 370).Draw(t, "T0")}
		T := rapid.Float64Range(200, 400).Draw(t, "T")
		const h = 1e-3
		near(t, "slope", d.Slope(T), (d.Factor(T+h)-d.Factor(T-h))/(2*h), 1e-9)
	})
}

// anyWLF draws constants like those of rubbers.
func anyWLF(t *rapid.T) WLF {
	return WLF{
		C1:        rapid.Float64Range(1, 20).Draw(t, "C1"),
		C2:        rapid.Float64Range(40, 250).Draw(t, "C2"),
		Reference: rapid.Float64Range(220, 370).Draw(t, "T0"),
	}
}

// Another reference is the same law: C1C2 and the pole stay, the shifts differ
// by a constant, and going back gives what was. VFT is the same law as well,
// and its apparent activation energy is R ln10 C1C2 T²/(C2+T−T0)². Identities.
func TestWLFIdentities(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		w := anyWLF(t)
		above := func(name string) float64 {
			return w.Reference - w.C2 + rapid.Float64Range(10, 300).Draw(t, name)
		}
		T1, T := above("T1"), above("T")
		r := w.At(T1)
		near(t, "C1C2", r.C1*r.C2/(w.C1*w.C2), 1, 1e-12)
		near(t, "pole", r.Reference-r.C2, w.Reference-w.C2, 1e-9)
		scale := 1e-10 * (1 + math.Abs(w.LogShift(T)) + math.Abs(w.LogShift(T1)))
		near(t, "shift by a constant", w.LogShift(T), r.LogShift(T)+w.LogShift(T1), scale)
		back := r.At(w.Reference)
		near(t, "back", back.C1/w.C1, 1, 1e-11)
		B, inf := w.VFT()
		near(t, "VFT", w.LogShift(T), B/Ln10*(1/(T-inf)-1/(w.Reference-inf)), scale)
		q := w.C2 + T - w.Reference
		near(t, "apparent energy", Apparent(w, T)/(GasConstant*Ln10*w.C1*w.C2*T*T/(q*q)), 1, 1e-12)
		near(t, "at the reference", w.LogShift(w.Reference), 0, 0)
	})
}

// Colder than the reference means a_T > 1, warmer a_T < 1, for every law.
func TestSign(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		w := anyWLF(t)
		laws := []Law{w, Arrhenius{Activation: rapid.Float64Range(1e3, 4e5).Draw(t, "E"), Reference: w.Reference}}
		cold := max(20, w.Reference-w.C2*rapid.Float64Range(0.001, 0.95).Draw(t, "cold"))
		warm := w.Reference + rapid.Float64Range(0.1, 200).Draw(t, "warm")
		for _, l := range laws {
			if !(l.LogShift(cold) > 0) || !(l.LogShift(warm) < 0) {
				t.Errorf("%T: log a is %g when colder, %g when warmer", l, l.LogShift(cold), l.LogShift(warm))
			}
			if !(l.Slope(cold) < 0) || !(l.Slope(warm) < 0) {
				t.Errorf("%T: the shift does not fall with temperature", l)
			}
		}
	})
	w := WLF{C1: 6, C2: 150, Reference: 296}
	if v := w.LogShift(146); !math.IsInf(v, 1) {
		t.Errorf("at the pole: %g, want +Inf", v)
	}
	if v := w.LogShift(100); !math.IsInf(v, 1) {
		t.Errorf("below the pole: %g, want +Inf", v)
	}
}

func TestLawDerivatives(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		w := anyWLF(t)
		T := w.Reference - w.C2 + rapid.Float64Range(15, 300).Draw(t, "T")
		central := func(what string, got, x, h float64, f func(float64) float64) {
			d := (f(x+h) - f(x-h)) / (2 * h)
			near(t, what, got, d, 1e-6*math.Abs(d)+1e-9)
		}
		g := make([]float64, 2)
		w.Gradient(T, g)
		central("∂/∂C1", g[0], w.C1, 1e-4*w.C1, func(x float64) float64 { return WLF{x, w.C2, w.Reference}.LogShift(T) })
		central("∂/∂C2", g[1], w.C2, 1e-3, func(x float64) float64 { return WLF{w.C1, x, w.Reference}.LogShift(T) })
		central("∂/∂T", w.Slope(T), T, 1e-3, w.LogShift)
		T1 := w.Reference - w.C2 + rapid.Float64Range(15, 300).Draw(t, "T1")
		j := w.AtJacobian(T1)
		central("∂C1'/∂C1", j[0][0], w.C1, 1e-4*w.C1, func(x float64) float64 { return WLF{x, w.C2, w.Reference}.At(T1).C1 })
		central("∂C1'/∂C2", j[0][1], w.C2, 1e-3, func(x float64) float64 { return WLF{w.C1, x, w.Reference}.At(T1).C1 })
		central("∂C2'/∂C1", j[1][0], w.C1, 1e-4, func(x float64) float64 { return WLF{x, w.C2, w.Reference}.At(T1).C2 })
		central("∂C2'/∂C2", j[1][1], w.C2, 1e-3, func(x float64) float64 { return WLF{w.C1, x, w.Reference}.At(T1).C2 })

		a := Arrhenius{Activation: rapid.Float64Range(1e3, 4e5).Draw(t, "E"), Reference: w.Reference}
		Ta := rapid.Float64Range(200, 450).Draw(t, "Ta")
		a.Gradient(Ta, g[:1])
		central("∂/∂E", g[0]*1e5, a.Activation/1e5, 1e-4, func(x float64) float64 { return Arrhenius{x * 1e5, a.Reference}.LogShift(Ta) })
		central("∂/∂T", a.Slope(Ta), Ta, 1e-2, a.LogShift)
		near(t, "factor", math.Log(a.Factor(Ta)), Ln10*a.LogShift(Ta), 1e-10*(1+math.Abs(a.LogShift(Ta))))
	})
}

// On exact factors the straight line gives the constants themselves.
func TestLinearStart(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		w := anyWLF(t)
		var T, l []float64
		for _, x := range []float64{0.3, 0.5, 0.8, 1, 1.3, 1.7} {
			T = append(T, w.Reference-w.C2+x*w.C2)
			l = append(l, w.LogShift(T[len(T)-1]))
		}
		T, l = append(T, 400), append(l, math.NaN())
		got, ok := LinearStart(T, l, w.Reference)
		if !ok {
			t.Fatal("no start on exact factors")
		}
		near(t, "C1", got.C1/w.C1, 1, 1e-9)
		near(t, "C2", got.C2/w.C2, 1, 1e-9)
	})
	for _, c := range []struct{ T, l []float64 }{
		{nil, nil},
		{[]float64{300}, []float64{0}},
		{[]float64{280, 300}, []float64{1, 0}},
		{[]float64{280, 280, 300}, []float64{1, 1.1, 0}},
		{[]float64{280, 300, 320}, []float64{-1, 0, 3}}, // rises
	} {
		if w, ok := LinearStart(c.T, c.l, 300); ok {
			t.Errorf("a start %+v from %v %v", w, c.T, c.l)
		}
	}
}
