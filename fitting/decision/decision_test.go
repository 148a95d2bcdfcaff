package decision

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

var nan = math.NaN()

func many(y, u float64) Value { return Value{y, u, 1.959963985 * u, nan} }

// Examples of JCGM 106:2012 (values from memory, recomputed): a diode with an upper limit,
// a vessel with a lower one, an oil between two; the radar's acceptance limit at 99.9 %.
func TestPublished(t *testing.T) {
	for _, v := range []struct {
		what string
		v    Value
		l    Limits
		want float64
	}{
		{"breakdown voltage, at most −5.40 V", many(-5.47, 0.05), Limits{nan, -5.40}, 0.91924},
		{"vessel, at least 490 kPa", many(509.7, 8.6), Limits{490, nan}, 0.98901},
		{"oil, 12.5 to 16.3 mm²/s", many(13.6, 1.8), Limits{12.5, 16.3}, 0.66263},
		// G between 0.90 and 1.10 MPa, u 0.02, at the edge of a guard band of 2u and of
		// 1.645u (computed independently in double precision).
		{"2u inside", many(0.94, 0.02), Limits{0.90, nan}, 0.977250},
		{"1.645u inside", many(0.9329, 0.02), Limits{0.90, nan}, 0.950015},
	} {
		if p := Conformity(v.v, v.l); math.Abs(p-v.want) > 2e-6+0.5e-5 {
			t.Errorf("%s: %.6f, should be %.5f", v.what, p, v.want)
		}
	}
	// Radar: limit 100 km/h, u 2 %, 99.9 % sure to be too fast from y with
	// (y − 100)/(0.02 y) = 3.0902 on, which is 106.588 km/h.
	y := 106.588
	if p := Conformity(many(y, 0.02*y), Limits{nan, 100}); math.Abs(p-0.001) > 1e-5 {
		t.Errorf("at %g km/h %.6f", y, p)
	}
	a := Decide(Value{1, 0.02, 0.04, nan}, Limits{0.90, 1.10}, 1)
	if a.Verdict != Accept || math.Abs(a.Acceptance.Lower-0.94) > 1e-12 || math.Abs(a.Acceptance.Upper-1.06) > 1e-12 {
		t.Errorf("%+v", a)
	}
}

func TestVerdicts(t *testing.T) {
	l := Limits{0.9, 1.1}
	for _, v := range []struct {
		y     float64
		guard float64
		want  Verdict
	}{{0.95, 1, Accept}, {0.93, 1, Undecided}, {0.89, 1, Undecided}, {0.85, 1, Reject}, {1.2, 1, Reject}, {0.91, 0, Accept}, {0.89, 0, Reject}, {0.9, 0, Accept}, {nan, 1, NoVerdict}} {
		if got := Decide(Value{v.y, 0.02, 0.04, 30}, l, v.guard).Verdict; got != v.want {
			t.Errorf("%g with guard %g: %d, should be %d", v.y, v.guard, got, v.want)
		}
	}
	// Bands that meet accept nothing.
	if got := Decide(Value{1, 0.2, 0.4, nan}, l, 1).Verdict; got != Undecided {
		t.Errorf("wider than the limits: %d", got)
	}
	for _, v := range []Answer{Decide(many(1, nan), l, 1), Decide(many(1, 0.1), Limits{nan, nan}, 1), Decide(many(1, 0.1), Limits{2, 1}, 1), Decide(many(1, 0.1), l, nan), Decide(many(math.Inf(1), 0.1), l, 1)} {
		if v.Verdict != NoVerdict {
			t.Errorf("nonsense is %+v", v)
		}
	}
}

// A value nearer to the middle is never judged worse, a greater uncertainty never makes an
// undecided case a decided one, and probabilities are probabilities.
func TestMonotone(t *testing.T) {
	rank := map[Verdict]int{Reject: 0, Undecided: 1, Accept: 2}
	rapid.Check(t, func(t *rapid.T) {
		l := Limits{rapid.Float64Range(-2, 0).Draw(t, "lower"), rapid.Float64Range(0.1, 2).Draw(t, "upper")}
		m := (l.Lower + l.Upper) / 2
		y, u := rapid.Float64Range(-5, 5).Draw(t, "y"), rapid.Float64Range(0, 1).Draw(t, "u")
		f, guard := rapid.Float64Range(2, 100).Draw(t, "freedom"), rapid.Float64Range(0, 2).Draw(t, "guard")
		at := func(y, u float64) Answer { return Decide(Value{y, u, 2 * u, f}, l, guard) }
		a, near := at(y, u), at(m+(y-m)/2, u)
		if rank[near.Verdict] < rank[a.Verdict] || near.Conformity < a.Conformity-1e-12 {
			t.Fatalf("%+v at %g, %+v nearer", a, y, near)
		}
		if a.Conformity < 0 || a.Conformity > 1 {
			t.Fatalf("%+v", a)
		}
		if wide := at(y, 2*u); a.Verdict == Undecided && wide.Verdict != Undecided {
			t.Fatalf("%+v, with twice the uncertainty %+v", a, wide)
		}
	})
}
