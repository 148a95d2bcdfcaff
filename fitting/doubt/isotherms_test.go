package doubt

import (
	"math"
	"math/rand/v2"
	"testing"
)

// natural rubber's constants at 248 K: Ferry, Viscoelastic Properties of
// Polymers, 3rd ed., ch. 11; value from memory.
func rubber(T float64) float64 { return -8.86 * (T - 248) / (101.6 + T - 248) }

func draw(rnd *rand.Rand) (T, y, u []float64) {
	for i := range 13 {
		t := 233.15 + 10*float64(i)
		slope := math.Abs(rubber(t+0.5) - rubber(t-0.5))
		s := math.Hypot(0.3*slope, 0.01)
		T, y, u = append(T, t), append(y, rubber(t)+s*rnd.NormFloat64()), append(u, s)
	}
	return T, y, u
}

func TestSound(t *testing.T) {
	rnd := rand.New(rand.NewPCG(1, 2))
	for range 2000 {
		if f := Isotherms(draw(rnd)); f.Kind != None {
			t.Fatalf("a fault in sound isotherms: %+v", f)
		}
	}
}

func TestFaults(t *testing.T) {
	rnd := rand.New(rand.NewPCG(3, 4))
	right := map[Kind]int{}
	const n = 300
	for range n {
		T, y, u := draw(rnd)
		i := rnd.IntN(12)
		y[i], y[i+1] = y[i+1], y[i]
		if f := Isotherms(T, y, u); f.Kind == Exchanged && f.I == i && f.J == i+1 {
			right[Exchanged]++
		}
		T, y, u = draw(rnd)
		i = rnd.IntN(13)
		s := 1.0
		if rnd.IntN(2) == 0 {
			s = -1
		}
		// f too large by 2π: log a_T too small by log 2π.
		y[i] -= s * math.Log10(2*math.Pi)
		if f := Isotherms(T, y, u); f.Kind == Unit && f.I == i && math.Abs(math.Log(f.Factor)-s*math.Log(2*math.Pi)) < 1e-12 {
			right[Unit]++
		}
		T, y, u = draw(rnd)
		i = rnd.IntN(13)
		y[i] += 8 * -rubberSlope(T[i])
		if f := Isotherms(T, y, u); f.Kind == Off && f.I == i && math.Abs(f.Kelvin+8) < 3 {
			right[Off]++
		}
	}
	for k, least := range map[Kind]float64{Exchanged: 0.97, Unit: 0.97, Off: 0.9} {
		if share := float64(right[k]) / n; share < least {
			t.Errorf("kind %d is named in %.3f", k, share)
		}
	}
}

func rubberSlope(T float64) float64 { return (rubber(T+0.5) - rubber(T-0.5)) }

func TestTooFew(t *testing.T) {
	if f := Isotherms([]float64{1, 2}, []float64{1, 2}, []float64{1, 1}); f.Kind != None {
		t.Error(f)
	}
	nan := math.NaN()
	if f := Isotherms([]float64{1, 2, 3, 4, 5, 6, 7}, []float64{1, nan, 3, 4, nan, 6, 7}, []float64{1, 1, nan, 0, 1, 1, 1}); f.Kind != None {
		t.Error(f)
	}
}
