package thermal

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// anyFactors draws knots; falling says that the factors fall.
func anyFactors(t *rapid.T, falling bool) Factors {
	n := rapid.IntRange(1, 8).Draw(t, "knots")
	f := Factors{T: []float64{230}, Log: []float64{4}}
	for range n - 1 {
		low := -2.0
		if falling {
			low = 1e-4
		}
		f.T = append(f.T, f.T[len(f.T)-1]+rapid.Float64Range(2, 30).Draw(t, "step"))
		f.Log = append(f.Log, f.Log[len(f.Log)-1]-rapid.Float64Range(low, 2).Draw(t, "fall"))
	}
	return f
}

// Where the factors fall, their interpolation falls, between the knots and
// beyond; it passes through the knots and has no jump in value or slope there.
func TestFactorsMonotone(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := anyFactors(t, true)
		if !f.Monotone() {
			t.Fatal("Monotone says no")
		}
		first, last := f.T[0]-5, f.T[len(f.T)-1]+5
		before := math.Inf(1)
		for i := range 301 {
			T := first + (last-first)*float64(i)/300
			v := f.LogShift(T)
			if v > before+1e-12 {
				t.Fatalf("rises at %g K: from %g to %g", T, before, v)
			}
			if s := f.Slope(T); s > 1e-12 {
				t.Fatalf("slope %g at %g K", s, T)
			}
			before = v
		}
		for i, T := range f.T {
			near(t, "knot", f.LogShift(T), f.Log[i], 1e-12)
			near(t, "value, left and right", f.LogShift(T-1e-9), f.LogShift(T+1e-9), 1e-8)
			near(t, "slope, left and right", f.Slope(T-1e-9), f.Slope(T+1e-9), 1e-6)
		}
	})
	if (Factors{T: []float64{1, 2, 3}, Log: []float64{2, 1, 1}}).Monotone() {
		t.Error("level factors called monotone")
	}
	if (Factors{T: []float64{1, 2}, Log: []float64{2, math.NaN()}}).Monotone() {
		t.Error("NaN called monotone")
	}
}

// No value leaves the range of the two knots beside it (any factors).
func TestFactorsDoNotOvershoot(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := anyFactors(t, false)
		for i := 1; i < len(f.T); i++ {
			T := f.T[i-1] + (f.T[i]-f.T[i-1])*rapid.Float64Range(0, 1).Draw(t, "place")
			lo, hi := min(f.Log[i-1], f.Log[i]), max(f.Log[i-1], f.Log[i])
			if v := f.LogShift(T); v < lo-1e-12 || v > hi+1e-12 {
				t.Errorf("%g at %g K leaves %g to %g", v, T, lo, hi)
			}
		}
	})
}

// Fritsch and Butland (SIAM J. Sci. Stat. Comput. 5 (1984) 300): for equal
// steps the slope at a knot is the harmonic mean of the secants. Closed form.
func TestFactorsHarmonicMean(t *testing.T) {
	f := Factors{T: []float64{250, 260, 270}, Log: []float64{3, 2, 1.5}}
	near(t, "slope at the knot", f.Slope(260), -2*0.1*0.05/(0.1+0.05), 1e-15)
	// A straight line stays one.
	f.Log[2] = 1
	for _, T := range []float64{240, 252, 260, 267.5, 280} {
		near(t, "line", f.LogShift(T), 3-(T-250)/10, 1e-12)
	}
	one := Factors{T: []float64{290}, Log: []float64{0.25}}
	if one.LogShift(200) != 0.25 || one.Slope(200) != 0 {
		t.Error("one factor is not a constant")
	}
}

// Gradient and Slope against central differences, at random places and on the
// knots themselves and beyond the ends.
func TestFactorsDerivatives(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := anyFactors(t, rapid.Bool().Draw(t, "falling"))
		n := len(f.T)
		T := rapid.Float64Range(f.T[0]-8, f.T[n-1]+8).Draw(t, "T")
		if rapid.Bool().Draw(t, "on a knot") {
			T = f.T[rapid.IntRange(0, n-1).Draw(t, "knot")]
		}
		g := make([]float64, n)
		for i := range g {
			g[i] = math.NaN() // whatever stood there must go
		}
		f.Gradient(T, g)
		const h = 1e-6
		for k := range g {
			// The slopes change form where secants change sign: keep away.
			if kink(f, 3*h) {
				return
			}
			up, down := clone(f), clone(f)
			up.Log[k] += h
			down.Log[k] -= h
			near(t, "∂log a/∂factor", g[k], (up.LogShift(T)-down.LogShift(T))/(2*h), 2e-5)
		}
		const dT = 1e-6
		near(t, "slope", f.Slope(T), (f.LogShift(T+dT)-f.LogShift(T-dT))/(2*dT), 1e-6)
		// A constant added to all factors is added to the shift.
		var sum float64
		for _, v := range g {
			sum += v
		}
		near(t, "sum of the gradient", sum, 1, 1e-12)
	})
}

func clone(f Factors) Factors {
	return Factors{T: f.T, Log: append([]float64(nil), f.Log...)}
}

// kink reports a secant whose sign may change when a factor moves by h.
func kink(f Factors, h float64) bool {
	for i := 1; i < len(f.Log); i++ {
		if math.Abs(f.Log[i]-f.Log[i-1]) < 100*h {
			return true
		}
	}
	return false
}
