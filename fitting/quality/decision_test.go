package quality

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

const z975 = 1.9599639845400545

// with gives a value with a standard uncertainty.
func with(y, u float64) Measured { return Measured{Value: y, U95: z975 * u} }

// Examples of JCGM 106 (value from memory, computed again independently in double
// precision).
func TestConformity(t *testing.T) {
	no := NoLimit()
	near(t, "breakdown of a diode", Conformity(with(-5.47, 0.05), Limits{no, -5.40}), .91924, 5e-6)
	near(t, "burst of a vessel", Conformity(with(509.7, 8.6), Limits{490, no}), .98901, 5e-6)
	near(t, "viscosity of an oil", Conformity(with(13.6, 1.8), Limits{12.5, 16.3}), .66263, 5e-6)
	// Speed: the reading at which 100 km/h is exceeded with 99.9 %, u = 2 % of the reading.
	v := 100 / (1 - 0.02*tQuantile(0.999, 0))
	near(t, "speed", v, 106.588, 5e-4)
	near(t, "speed conforms", Conformity(with(v, 0.02*v), Limits{no, 100}), 0.001, 1e-9)
	// t with 1 degree of freedom has a closed form, ½ + atan(x)/π.
	m := Measured{Value: 1, U95: 12.706204736432095, Freedom: 1}
	near(t, "t", Conformity(m, Limits{no, 3}), 0.5+math.Atan(2)/math.Pi, 1e-9)
}

// Shear modulus 0.90 to 1.10 MPa with u = 0.02 MPa (computed independently in double
// precision).
func TestGuardBands(t *testing.T) {
	l := Limits{0.90, 1.10}
	two := Decide(with(1, 0.02), l, Rule{Guard: 2 / z975})
	near(t, "lower", two.Accept.Lower, 0.94, 1e-12)
	near(t, "upper", two.Accept.Upper, 1.06, 1e-12)
	near(t, "p at the edge", Conformity(with(two.Accept.Upper, 0.02), l), .977250, 5e-7)
	one := Decide(with(1, 0.02), l, Rule{Guard: 1.645 / z975})
	near(t, "lower", one.Accept.Lower, .9329, 5e-5)
	near(t, "upper", one.Accept.Upper, 1.0671, 5e-5)
	near(t, "p at the edge", Conformity(with(one.Accept.Upper, 0.02), l), .950015, 5e-7)
	for p, k := range map[float64]float64{.95: 1.644854, .975: 1.959964, .999: 3.090232} {
		near(t, "factor", OneSided(p, 0)*z975, k, 5e-7)
	}
	near(t, "proof of 95 %", OneSided(0.95, 0), 0.8391, 5e-4)
}

func TestVerdicts(t *testing.T) {
	l := Limits{0.90, 1.10}
	no := NoLimit()
	for _, v := range []struct {
		what string
		m    Measured
		l    Limits
		r    Rule
		want Verdict
	}{
		{"inside", with(1, 0.02), l, Rule{Guard: 1}, Accepted},
		{"near", with(1.09, 0.02), l, Rule{Guard: 1}, Undecided},
		{"near, simple", with(1.09, 0.02), l, Rule{}, Accepted},
		{"near, consumer", with(1.09, 0.02), l, Rule{1, Consumer}, Rejected},
		{"near, producer", with(1.09, 0.02), l, Rule{1, Producer}, Accepted},
		{"just outside", with(1.11, 0.02), l, Rule{Guard: 1}, Undecided},
		{"just outside, simple", with(1.11, 0.02), l, Rule{}, Rejected},
		{"just outside, producer", with(1.11, 0.02), l, Rule{1, Producer}, Accepted},
		{"far outside, producer", with(1.2, 0.02), l, Rule{1, Producer}, Rejected},
		{"below, neutral", with(0.8, 0.02), l, Rule{Guard: 1}, Rejected},
		{"on the limit, simple", with(1.10, 0.02), l, Rule{}, Accepted},
		{"one limit", with(5, 0.02), Limits{0.9, no}, Rule{Guard: 1}, Accepted},
		{"bands meet", with(1, 0.2), l, Rule{Guard: 1}, Undecided},
		{"no value", with(no, 0.02), l, Rule{}, NotDecided},
		{"infinite value", with(math.Inf(1), 0.02), l, Rule{}, NotDecided},
		{"no uncertainty", with(1, no), l, Rule{Guard: 1}, NotDecided},
		{"no uncertainty, simple", with(1, no), l, Rule{}, Accepted},
		{"negative uncertainty", with(1, -1), l, Rule{}, NotDecided},
		{"no limits", with(1, 0.1), Limits{no, no}, Rule{}, NotDecided},
		{"limits crossed", with(1, 0.1), Limits{2, 1}, Rule{}, NotDecided},
		{"no factor", with(1, 0.1), l, Rule{Guard: no}, NotDecided},
	} {
		d := Decide(v.m, v.l, v.r)
		if d.Verdict != v.want {
			t.Errorf("%s: %s, want %s", v.what, d.Verdict, v.want)
		}
		if (d.Reason == "") != (d.Verdict == Accepted) {
			t.Errorf("%s: %s for the reason %q", v.what, d.Verdict, d.Reason)
		}
	}
}

var rank = map[Verdict]int{Rejected: 0, Undecided: 1, Accepted: 2}

// The nearer to the middle of the permitted range, the better the verdict; and consumer
// ≤ neutral ≤ producer for one and the same value.
func TestDecisionsAreMonotone(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		half := rapid.Float64Range(0.01, 10).Draw(t, "half")
		mid := rapid.Float64Range(-5, 5).Draw(t, "middle")
		u := rapid.Float64Range(0, 5).Draw(t, "U95")
		r := rapid.Float64Range(0, 3).Draw(t, "r")
		a := rapid.Float64Range(0, 20).Draw(t, "a")
		b := a + rapid.Float64Range(0, 20).Draw(t, "b")
		l := Limits{mid - half, mid + half}
		if rapid.Bool().Draw(t, "one limit") {
			l.Lower = NoLimit()
		}
		at := func(off float64, s Stance) int {
			return rank[Decide(Measured{mid + off, u, 0}, l, Rule{r, s}).Verdict]
		}
		for _, s := range []Stance{Neutral, Consumer, Producer} {
			if at(a, s) < at(b, s) {
				t.Fatalf("worse nearer to the middle, stance %d", s)
			}
		}
		if c, n, p := at(a, Consumer), at(a, Neutral), at(a, Producer); c > n || n > p {
			t.Fatalf("consumer %d, neutral %d, producer %d", c, n, p)
		}
		if Conformity(Measured{mid + a, u, 0}, l)+1e-12 < Conformity(Measured{mid + b, u, 0}, l) {
			t.Fatal("conformity grows away from the middle")
		}
	})
}

func anyFloat() *rapid.Generator[float64] {
	return rapid.OneOf(rapid.Float64(), rapid.SampledFrom([]float64{math.NaN(), math.Inf(1), math.Inf(-1), 0, math.MaxFloat64, -math.MaxFloat64, 5e-324}))
}

func TestDecideTakesAnything(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := anyFloat()
		m := Measured{f.Draw(t, "y"), f.Draw(t, "U"), f.Draw(t, "ν")}
		d := Decide(m, Limits{f.Draw(t, "lower"), f.Draw(t, "upper")}, Rule{f.Draw(t, "r"), Stance(rapid.IntRange(0, 2).Draw(t, "stance"))})
		if _, ok := rank[d.Verdict]; !ok && d.Verdict != NotDecided {
			t.Fatal(d)
		}
		if !finite(m.Value) && d.Verdict != NotDecided {
			t.Fatal("decided without a value")
		}
		if d.Conformity < 0 || d.Conformity > 1 {
			t.Fatal(d.Conformity)
		}
	})
}
