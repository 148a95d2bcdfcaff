package amplitude

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"
	"pgregory.net/rapid"
)

// Kraus, J. Appl. Polym. Sci.: Appl. Polym. Symp. 39 (1984) 75 (formula from
// memory): G′ = G∞ + (G0−G∞)K1, G″ = G″∞ + (G″m−G″∞)K2. Values computed
// independently in double precision: G0 8, G∞ 2, G″m 1, G″∞ 0.3 MPa,
// γ_c = 1 %, m = 0.6.
func TestKrausTable(t *testing.T) {
	k := Kraus{Critical: 0.01, Exponent: 0.6}
	for _, c := range []struct{ gamma, storage, loss float64 }{
		{1e-4, 7.976208, 0.387984},
		{1e-3, 7.643894, 0.630793},
		{0.01, 5, 1},
		{0.03, 3.266573, 0.871320},
		{0.1, 2.356106, 0.630793},
		{0.5, 2.054379, 0.432676},
	} {
		k1, k2 := k.Shape(c.gamma)
		if g := 2 + 6*k1; math.Abs(g-c.storage) > 5.1e-7 {
			t.Errorf("G'(%g) = %.6f, want %.6f", c.gamma, g, c.storage)
		}
		if g := 0.3 + 0.7*k2; math.Abs(g-c.loss) > 5.1e-7 {
			t.Errorf("G''(%g) = %.6f, want %.6f", c.gamma, g, c.loss)
		}
	}
}

// Halfway at γ_c with the slope dG′/d ln γ = −(G0−G∞)m/2 there, and the loss
// peak's full width at half height is 1.14390/m decades: K2 = 1/2 where
// r^m = 2 ± √3, so that the width is 2 log10(2+√3)/m. Closed forms.
func TestKrausShape(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		k := Kraus{
			Critical: math.Pow(10, rapid.Float64Range(-4, 0).Draw(t, "log γc")),
			Exponent: rapid.Float64Range(0.2, 1.5).Draw(t, "m"),
		}
		if k1, k2 := k.Shape(k.Critical); k1 != 0.5 || k2 != 1 {
			t.Errorf("at γ_c: %g, %g", k1, k2)
		}
		const h = 1e-5
		up, _ := k.Shape(k.Critical * math.Exp(h))
		down, _ := k.Shape(k.Critical * math.Exp(-h))
		if d := (up - down) / (2 * h); math.Abs(d+k.Exponent/2) > 1e-8 {
			t.Errorf("slope at γ_c: %g, want %g", d, -k.Exponent/2)
		}
		half := 1.14390 / k.Exponent / 2 // decades
		for _, side := range []float64{-half, half} {
			if _, k2 := k.Shape(k.Critical * math.Pow(10, side)); math.Abs(k2-0.5) > 1e-5 {
				t.Errorf("at half width: K2 = %g, want 0.5", k2)
			}
		}
		// The table's symmetry: K1(γ_c r) + K1(γ_c/r) = 1, K2 alike on both sides.
		r := math.Pow(10, rapid.Float64Range(0, 3).Draw(t, "log r"))
		a1, a2 := k.Shape(k.Critical * r)
		b1, b2 := k.Shape(k.Critical / r)
		if math.Abs(a1+b1-1) > 1e-12 || math.Abs(a2-b2) > 1e-12 {
			t.Errorf("not symmetric: %g+%g, %g/%g", a1, b1, a2, b2)
		}
	})
}

func TestKrausLimits(t *testing.T) {
	k := Kraus{Critical: 0.01, Exponent: 0.6}
	for _, c := range []struct{ gamma, k1, k2 float64 }{
		{0, 1, 0}, {5e-324, 1, 0}, {1e300, 0, 0}, {math.MaxFloat64, 0, 0}, {math.Inf(1), 0, 0},
	} {
		k1, k2, a, b, d, e := k.Slopes(c.gamma)
		if math.Abs(k1-c.k1) > 1e-12 || math.Abs(k2-c.k2) > 1e-9 {
			t.Errorf("Shape(%g) = %g, %g, want %g, %g", c.gamma, k1, k2, c.k1, c.k2)
		}
		for _, v := range []float64{a, b, d, e} {
			if math.IsNaN(v) || math.Abs(v) > 1e-6 {
				t.Errorf("slopes at %g: %g %g %g %g, want 0", c.gamma, a, b, d, e)
			}
		}
	}
}

func TestKrausSlopesAgainstDifferences(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		lnc := rapid.Float64Range(-9, 0).Draw(t, "ln γc")
		m := rapid.Float64Range(0.2, 1.5).Draw(t, "m")
		gamma := math.Exp(rapid.Float64Range(-10, 1).Draw(t, "ln γ"))
		shape := func(lnc, m float64) (float64, float64) { return Kraus{math.Exp(lnc), m}.Shape(gamma) }
		k1, k2, k1c, k2c, k1m, k2m := Kraus{math.Exp(lnc), m}.Slopes(gamma)
		if a, b := shape(lnc, m); a != k1 || b != k2 {
			t.Errorf("Slopes gives other values than Shape: %g %g, %g %g", k1, k2, a, b)
		}
		const h = 1e-5
		check := func(what string, got, up, down float64) {
			if d := (up - down) / (2 * h); math.Abs(d-got) > 1e-8*math.Abs(got)+1e-9 {
				t.Errorf("%s: %g, differences %g", what, got, d)
			}
		}
		u1, u2 := shape(lnc+h, m)
		d1, d2 := shape(lnc-h, m)
		check("∂K1/∂ln γc", k1c, u1, d1)
		check("∂K2/∂ln γc", k2c, u2, d2)
		u1, u2 = shape(lnc, m+h)
		d1, d2 = shape(lnc, m-h)
		check("∂K1/∂m", k1m, u1, d1)
		check("∂K2/∂m", k2m, u2, d2)
	})
}

// A loss b that does not depend on frequency has a storage with
// dG′/d ln f = (2/π) b (Booij and Thoone, Rheol. Acta 21 (1982) 15; from
// memory), zero at f0, and none of it where the friction is rate-independent.
func TestFrequencyPart(t *testing.T) {
	if v := FrequencyPart(1, 10, 10); v != 0 {
		t.Errorf("at f0: %g", v)
	}
	if v := FrequencyPart(1, 10*math.E, 10); math.Abs(v-2/math.Pi) > 1e-15 {
		t.Errorf("one unit of ln f above: %g", v)
	}
	if FrequencyPart(0, 1e6, 10) != 0 || RelaxationPart(0, 1e6, 10) != 0 {
		t.Error("rate-independent friction has a part")
	}
}

// RelaxationPart is FrequencyPart in time: the storage modulus of a relaxation
// modulus is G′(ω) = ω∫G(t) sin(ωt) dt. Integrated by parts, and turned to the
// imaginary time axis for a quadrature that converges, G*(ω) at ω = −is is the
// Laplace–Carson transform s∫G(t)e^(−st)dt, which for
// B[ln(iω/ω0)] is B ln(s/ω0). Quadrature over x = st by substitution x = e^y.
func TestRelaxationPartIsTheTransform(t *testing.T) {
	const f0 = 10.0
	for _, s := range []float64{1e-3, 0.5, 2 * math.Pi * f0, 1e4} {
		f := func(y float64) float64 {
			x := math.Exp(y)
			return RelaxationPart(1, x/s, f0) * x * math.Exp(-x)
		}
		var got float64
		for lo := -40.0; lo < 6; lo += 2 {
			got += quad.Fixed(f, lo, lo+2, 20, nil, 0)
		}
		want := FrequencyPart(1, s/(2*math.Pi), f0)
		if math.Abs(got-want) > 1e-11 {
			t.Errorf("s = %g: %.12g, want %.12g", s, got, want)
		}
	}
}
