package quality

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// Computed independently in double precision; the printed tables agree in three decimals.
func TestCriticalValues(t *testing.T) {
	for n, v := range map[int][2]float64{3: {1.1543, 1.1547}, 4: {1.4812, 1.4962}, 5: {1.7150, 1.7637}, 6: {1.8871, 1.9728}, 7: {2.0200, 2.1391}, 8: {2.1266, 2.2744}, 9: {2.2150, 2.3868}, 10: {2.2900, 2.4821}} {
		near(t, "Grubbs 5 %", GrubbsCritical(n, 0.05, Both), v[0], 6e-5)
		near(t, "Grubbs 1 %", GrubbsCritical(n, 0.01, Both), v[1], 6e-5)
		// One side at half the level is two sides.
		near(t, "one-sided", GrubbsCritical(n, 0.025, High), GrubbsCritical(n, 0.05, Both), 1e-12)
	}
	for p, v := range map[int][2]float64{3: {.9669, .9933}, 4: {.9065, .9676}, 5: {.8413, .9279}, 6: {.7807, .8828}, 10: {.6020, .7175}} {
		near(t, "Cochran 5 %", CochranCritical(p, 2, 0.05), v[0], 6e-5)
		near(t, "Cochran 1 %", CochranCritical(p, 2, 0.01), v[1], 6e-5)
	}
	// One-sided 5 % for ten values is 2.176 (value from memory).
	near(t, "one-sided 5 %", GrubbsCritical(10, 0.05, Low), 2.176, 6e-4)
}

func TestGrubbs(t *testing.T) {
	values := []float64{1.01, 0.99, math.NaN(), 1.00, 1.02, 0.98, 1.00, 1.30}
	o, err := Grubbs(values, Both)
	if err != nil || o.Index != 7 || !o.Beyond() || o.P > 0.01 {
		t.Errorf("%+v, %v", o, err)
	}
	if o, _ := Grubbs(values, Low); o.Index != 5 || o.Beyond() || o.Straggler() {
		t.Errorf("low side: %+v", o)
	}
	// p meets the level where the statistic meets its critical value: three values
	// 0, 1, x with G chosen by bisection.
	lo, hi := 1.0, 1000.0
	for range 100 {
		x := (lo + hi) / 2
		if o, _ := Grubbs([]float64{0, 1, 0.5, 0.2, x}, High); o.Statistic > o.At5 {
			hi = x
		} else {
			lo = x
		}
	}
	o, _ = Grubbs([]float64{0, 1, 0.5, 0.2, hi}, High)
	near(t, "p at the critical value", o.P, 0.05, 1e-9)
	for _, v := range [][]float64{nil, {1, 2}, {1, 1, 1}, {math.NaN(), math.Inf(1), 2, 3}} {
		if o, err := Grubbs(v, Both); err == nil {
			t.Errorf("%v: %+v", v, o)
		}
	}
}

func TestCochran(t *testing.T) {
	o, err := Cochran([]float64{1, 2, math.NaN(), 97}, 2)
	if err != nil || o.Index != 3 || !o.Straggler() {
		t.Errorf("%+v, %v", o, err)
	}
	near(t, "C", o.Statistic, 0.97, 1e-12)
	if !(o.P < 0.05 && o.P > 0.01) {
		t.Errorf("p = %g between the levels", o.P)
	}
	for _, v := range [][]float64{nil, {1}, {0, 0}, {math.NaN(), 1}} {
		if o, err := Cochran(v, 2); err == nil {
			t.Errorf("%v: %+v", v, o)
		}
	}
}

// Computed independently in double precision.
func TestWelch(t *testing.T) {
	a, b := []float64{1.02, .98, 1.01, 1, .99}, []float64{1.06, 1.03, 1.05, 1.07, 1.04}
	c, err := Welch(a, b)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "t", c.T, -5, 1e-9)
	near(t, "df", c.Freedom, 8, 1e-9)
	near(t, "p", c.P, .00105283, 5e-9)
	near(t, "U95", c.U95, 0.01*2.306004, 1e-6) // t(97.5 %, 8) from printed tables: 2.306
	if _, err := Welch(a, b[:1]); err == nil {
		t.Error("one value was compared")
	}
	if _, err := Welch([]float64{1, 1}, []float64{2, 2}); err == nil {
		t.Error("values without scatter were compared")
	}
}

// The order of the values says nothing to any of these, and no number makes them panic.
func TestOrderIsNothing(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		values := rapid.SliceOfN(rapid.Float64Range(-100, 100), 3, 20).Draw(t, "values")
		other := rapid.Permutation(values).Draw(t, "permuted")
		a, errA := Grubbs(values, Both)
		b, errB := Grubbs(other, Both)
		if (errA == nil) != (errB == nil) || errA == nil && math.Abs(a.Statistic-b.Statistic) > 1e-9 {
			t.Fatal(a, b)
		}
		c, errC := Welch(values, []float64{0, 1, 5})
		d, errD := Welch(other, []float64{0, 1, 5})
		if errC != nil || errD != nil || math.Abs(c.T-d.T) > 1e-9*(1+math.Abs(c.T)) {
			t.Fatal(c, d)
		}
	})
	rapid.Check(t, func(t *rapid.T) {
		values := rapid.SliceOf(anyFloat()).Draw(t, "values")
		side := Side(rapid.IntRange(0, 2).Draw(t, "side"))
		if o, err := Grubbs(values, side); err == nil && (o.Index < 0 || !(o.P >= 0 && o.P <= 1)) {
			t.Fatal(o)
		}
		if o, err := Cochran(values, rapid.IntRange(-1, 30).Draw(t, "n")); err == nil && !(o.P >= 0 && o.P <= 1) {
			t.Fatal(o)
		}
		if c, err := Welch(values, values); err == nil && c.P < 0.999 {
			t.Fatal(c)
		}
	})
}
