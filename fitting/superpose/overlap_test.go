package superpose

import (
	"math"
	"math/cmplx"
	"testing"

	"pgregory.net/rapid"
)

// zener is (G0 + G∞ s)/(1+s), s = (iωτ)^α, with G0 = 1, G∞ = 1000, τ = 1 µs at
// 23 °C, α = 0.5 (Pritz, J. Sound Vib. 195 (1996) 103; formula from memory),
// and the shift factors of natural rubber (Ferry, Viscoelastic Properties of
// Polymers, 3rd ed., ch. 11; constants at 248 K from memory).
func zener(f, celsius float64) complex128 {
	a := math.Pow(10, zenerShift(celsius))
	s := cmplx.Sqrt(complex(0, 2*math.Pi*f*a*1e-6))
	return (1 + 1000*s) / (1 + s)
}

func zenerShift(celsius float64) float64 {
	const c2 = 101.6 + 296.15 - 248
	return -8.86 * 101.6 / c2 * (celsius - 23) / (c2 + celsius - 23)
}

func zenerIsotherm(celsius, from, to float64, n int) Isotherm {
	s := Isotherm{T: celsius + 273.15}
	for i := range n {
		f := from * math.Pow(to/from, float64(i)/float64(n-1))
		s.Frequency = append(s.Frequency, f)
		s.Modulus = append(s.Modulus, zener(f, celsius))
	}
	return s
}

// Closed-form shifting of six isotherms with 16 frequencies from 0.1 to 100 Hz.
// Shifts, windows and exact values computed independently in double precision.
func TestOverlapOfFractionalZener(t *testing.T) {
	temperatures := []float64{-40, -20, 0, 23, 40, 60}
	want := []struct{ shift, window, exact float64 }{
		{-1.944115, 0.4864, -1.944107},
		{-1.330584, 0.7935, -1.330582},
		{-1.090784, 0.7996, -1.090788},
		{-0.612832, 0.7956, -0.612835},
		{-0.578138, 0.6339, -0.578137},
	}
	var s []Isotherm
	for _, T := range temperatures {
		s = append(s, zenerIsotherm(T, 0.1, 100, 16))
	}
	pairs := Neighbours(s)
	if len(pairs) != len(want) {
		t.Fatalf("%d pairs", len(pairs))
	}
	for i, p := range pairs {
		w := want[i]
		if math.Abs(p.LogA-w.shift) > 5.1e-7 || math.Abs(p.Window-w.window) > 5.1e-5 || p.Quantity != "G'" {
			t.Errorf("%g to %g °C: %+v, want %+v", temperatures[i], temperatures[i+1], p, w)
		}
		if exact := zenerShift(temperatures[i+1]) - zenerShift(temperatures[i]); math.Abs(exact-w.exact) > 5.1e-7 {
			t.Errorf("the exact shift is %.6f, want %.6f", exact, w.exact)
		}
	}
}

// A power law G' = 5 f^0.2 slowed by 1.3 decades: the inverse functions are
// straight lines, and the shift is exactly −1.3. Closed form.
func TestOverlapOfPowerLaw(t *testing.T) {
	var cold, warm Segment
	for i := range 11 {
		x := 0.2 * float64(i)
		cold.X, cold.Y = append(cold.X, x), append(cold.Y, math.Log10(5)+0.2*x)
		warm.X, warm.Y = append(warm.X, x), append(warm.Y, math.Log10(5)+0.2*(x-1.3))
	}
	logA, window, ok := Overlap(cold, warm)
	if !ok || math.Abs(logA+1.3) > 1e-12 || math.Abs(window-0.2*0.7) > 1e-12 {
		t.Errorf("log a = %.15g, window %.15g, %v; want −1.3, 0.14", logA, window, ok)
	}
}

// A loss modulus with its peak in the window is no function to invert. The
// rising branch alone has to give the shift as well as the storage modulus
// does; the whole curve would be off by half a decade.
func TestOverlapOfLossWithPeak(t *testing.T) {
	// At −40 °C the peak of G'' lies at 1/(2π·1e-6·10^4.37) = 6.9 Hz.
	cold, warm := zenerIsotherm(-40, 0.1, 100, 61), zenerIsotherm(-30, 0.1, 100, 61)
	exact := zenerShift(-30) - zenerShift(-40)
	for _, q := range []struct {
		name string
		f    func(complex128) float64
	}{
		{"storage", func(g complex128) float64 { return real(g) }},
		{"magnitude", func(g complex128) float64 { return cmplx.Abs(g) }},
		{"loss", func(g complex128) float64 { return imag(g) }},
	} {
		logA, _, ok := Overlap(cold.segment(q.f), warm.segment(q.f))
		if !ok || math.Abs(logA-exact) > 5e-3 {
			t.Errorf("%s: %.4f (%v), exact %.4f", q.name, logA, ok, exact)
		}
	}
}

// No common window: refused, nothing extrapolated, and the gap is told.
func TestNoOverlap(t *testing.T) {
	s := []Isotherm{zenerIsotherm(-60, 1, 10, 8), zenerIsotherm(80, 1, 10, 8)}
	p := Neighbours(s)[0]
	if !math.IsNaN(p.LogA) || p.Quantity != "" || !(p.Window < 0) {
		t.Errorf("got %+v", p)
	}
	for _, c := range []Segment{{}, {X: []float64{1}, Y: []float64{1}}, {X: []float64{1, 2, 3}, Y: []float64{3, 2, 1}}} {
		logA, _, ok := Overlap(c, Segment{X: []float64{0, 1}, Y: []float64{0, 5}})
		if ok || !math.IsNaN(logA) {
			t.Errorf("%v overlaps: %g", c, logA)
		}
	}
}

// Properties: the shift of a curve against itself moved by d is −d, whatever
// the curve; the order reversed changes the sign; and a warmer isotherm of a
// sound material lies at log a < 0, because colder means a_T > 1.
func TestOverlapProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(3, 30).Draw(t, "points")
		d := rapid.Float64Range(-0.5, 0.5).Draw(t, "moved by")
		var a Segment
		x, y := 0.0, 0.0
		for range n {
			a.X, a.Y = append(a.X, x), append(a.Y, y)
			x += rapid.Float64Range(0.1, 0.5).Draw(t, "dx")
			y += rapid.Float64Range(0.01, 0.5).Draw(t, "dy")
		}
		var b Segment
		for i := range a.X {
			b.X, b.Y = append(b.X, a.X[i]+d), append(b.Y, a.Y[i])
		}
		ab, w1, ok1 := Overlap(a, b)
		ba, w2, ok2 := Overlap(b, a)
		if !ok1 || !ok2 || math.Abs(ab+d) > 1e-9 || math.Abs(ab+ba) > 1e-9 || w1 != w2 {
			t.Errorf("moved by %g: %g and %g", d, ab, ba)
		}

		cold := rapid.Float64Range(-45, 75).Draw(t, "cold")
		warm := cold + rapid.Float64Range(1, 10).Draw(t, "warmer by")
		if p := Neighbours([]Isotherm{zenerIsotherm(cold, 0.1, 100, 31), zenerIsotherm(warm, 0.1, 100, 31)})[0]; !(p.LogA < 0) {
			t.Errorf("warmer, yet log a = %g", p.LogA)
		}
	})
}

// Noise that makes a curve dip does not break it: violators are pooled and the
// curve that is left rises.
func TestRisingPoolsNoise(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		var s Segment
		n := rapid.IntRange(2, 40).Draw(t, "points")
		for i := range n {
			s.X = append(s.X, float64(i))
			s.Y = append(s.Y, rapid.Float64Range(-1, 1).Draw(t, "y"))
		}
		r := s.rising()
		for i := 1; i < len(r.X); i++ {
			if !(r.X[i] > r.X[i-1]) || !(r.Y[i] > r.Y[i-1]) {
				t.Fatalf("does not rise: %v", r)
			}
		}
		if len(r.X) != len(r.Y) || len(r.X) == 0 {
			t.Fatalf("lost: %v", r)
		}
	})
}
