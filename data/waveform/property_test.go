package waveform

import (
	"math"
	"math/cmplx"
	"reflect"
	"testing"

	"pgregory.net/rapid"
)

// Scaling the force scales K; shifting time and swapping the sign of both channels
// leave δ; delaying the force's columns alone does not.
func TestInvariances(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := usual()
		s.rate = 200
		s.f = rapid.Float64Range(2, 18).Draw(t, "frequency")
		s.delta = rapid.Float64Range(-3, 3).Draw(t, "delta")
		s.seed = rapid.Uint64().Draw(t, "seed")
		set := &Settings{
			Trend:    Trend(rapid.IntRange(0, 3).Draw(t, "trend")),
			LeaveOut: -1,
		}
		if rapid.Bool().Draw(t, "known") {
			set.Known, set.Frequency = true, s.f
		}
		base, err := Analyse(s.record(), set)
		if err != nil {
			t.Fatal(err)
		}
		if d := math.Remainder(base.LossAngle-s.delta, 2*math.Pi); math.Abs(d) > 6*base.ULossAngle {
			t.Fatalf("δ = %g ± %g, want %g", base.LossAngle, base.ULossAngle, s.delta)
		}
		k := math.Exp(rapid.Float64Range(-20, 20).Draw(t, "scale"))
		shift := rapid.Float64Range(-1000, 1000).Draw(t, "shift")
		scaled, err := Analyse(change(s.record(), func(_ int, at, f, _ *float64) {
			*f *= k
			*at += shift
		}), set)
		if err != nil {
			t.Fatal(err)
		}
		if d := cmplx.Abs(scaled.Stiffness/complex(k, 0)-base.Stiffness) / base.Magnitude; d > 1e-7 {
			t.Fatalf("K off by %g", d)
		}
		if math.Abs(scaled.LossAngle-base.LossAngle) > 1e-7 || math.Abs(scaled.ULossAngle/base.ULossAngle-1) > 1e-5 {
			t.Fatalf("δ = %g ± %g, was %g ± %g", scaled.LossAngle, scaled.ULossAngle, base.LossAngle, base.ULossAngle)
		}
		if math.Abs(math.Remainder(scaled.Force.Phase-base.Force.Phase, 2*math.Pi)) > 1e-6 {
			t.Fatalf("the phase at the first sample moved")
		}
		again, _ := Analyse(s.record(), set)
		if !reflect.DeepEqual(bits(again), bits(base)) {
			t.Fatal("two runs differ")
		}
	})
}

// bits makes NaN comparable.
func bits(r Result) []uint64 {
	var b []uint64
	for _, v := range []float64{r.Frequency, real(r.Stiffness), imag(r.Stiffness), r.ULossAngle, r.Nonlinearity, r.LoopEnergy, r.Force.Drift, r.Correlation} {
		b = append(b, math.Float64bits(v))
	}
	return b
}

// Carrying a factor to another origin and scale is exact: the fit made from blocks
// is that made from the samples, without noise as with it.
func TestCarryIsExact(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		l := layout{harmonics: rapid.IntRange(1, 5).Draw(t, "harmonics"), trend: rapid.IntRange(0, 2).Draw(t, "trend"), times: true, channels: 1}
		omega := rapid.Float64Range(0.1, 10).Draw(t, "omega")
		from := frame{omega, rapid.Float64Range(-50, 50).Draw(t, "from"), rapid.Float64Range(0.5, 20).Draw(t, "scale")}
		to := frame{omega, rapid.Float64Range(-50, 50).Draw(t, "to"), rapid.Float64Range(0.5, 20).Draw(t, "new scale")}
		at := rapid.Float64Range(-60, 60).Draw(t, "t")
		a, b := make([]float64, l.columns()), make([]float64, l.columns())
		l.fill(a, from, at)
		l.fill(b, to, at)
		l.carry(a, from, to)
		for i := range a {
			if math.Abs(a[i]-b[i]) > 1e-9*(1+math.Abs(b[i])) {
				t.Fatalf("column %d: %g, want %g", i, a[i], b[i])
			}
		}
	})
}

// What is held does not grow with the record.
func TestHeldIsConstant(t *testing.T) {
	short, a := held(100_000)
	long, b := held(400_000)
	if a.Finish()[0].Err != nil || b.Finish()[0].Err != nil {
		t.Fatal("not fitted")
	}
	if short > 3<<20 || long > 3<<20 {
		t.Errorf("%d bytes after 100 000 samples, %d after 400 000", short, long)
	}
}
