package linear

import (
	"math"
	"math/cmplx"
	"testing"

	"pgregory.net/rapid"
)

// Values computed independently in double precision from the formulas as printed
// in the papers (from memory).
func TestCompactValues(t *testing.T) {
	for _, v := range []struct {
		name  string
		m     Compact
		omega float64
		want  complex128
	}{
		{"fractional Zener", FractionalZener{1, 1000, 1e-6, 0.5}, 0.01, 1.0706399667 + 0.0706299781i},
		{"fractional Zener", FractionalZener{1, 1000, 1e-6, 0.5}, 1, 1.7063989690 + 0.7054013808i},
		{"fractional Zener", FractionalZener{1, 1000, 1e-6, 0.5}, 100, 8.0633002637 + 6.9648030741i},
		{"fractional Zener", FractionalZener{1, 1000, 1e-6, 0.5}, 1e4, 71.0264651 + 61.3502321i},
		{"five parameters", FiveParameter{1, 999, 1e-6, 0.6, 0.55}, 0.01, 1.0093065998 + 0.0128086203i},
		{"five parameters", FiveParameter{1, 999, 1e-6, 0.6, 0.55}, 1, 1.1475266385 + 0.2028904021i},
		{"five parameters", FiveParameter{1, 999, 1e-6, 0.6, 0.55}, 100, 3.3433930873 + 3.1932057647i},
		{"five parameters", FiveParameter{1, 999, 1e-6, 0.6, 0.55}, 1e4, 38.8924440 + 46.3163812i},
		{"Havriliak–Negami", HavriliakNegami{1, 1000, 1e-6, 0.6, 0.4}, 0.01, 1.0037226028 + 0.0051236265i},
		{"Havriliak–Negami", HavriliakNegami{1, 1000, 1e-6, 0.6, 0.4}, 1, 1.0590043845 + 0.0811882819i},
		{"Havriliak–Negami", HavriliakNegami{1, 1000, 1e-6, 0.6, 0.4}, 100, 1.9364266527 + 1.2828016715i},
		{"Havriliak–Negami", HavriliakNegami{1, 1000, 1e-6, 0.6, 0.4}, 1e4, 16.1129518 + 19.3576879i},
		{"Cole–Cole", HavriliakNegami{1, 1000, 1e-6, 0.6, 1}, 1, 1.1475167981 + 0.2029527225i},
		{"Cole–Cole", HavriliakNegami{1, 1000, 1e-6, 0.6, 1}, 1e4, 39.0527503 + 47.2979274i},
	} {
		if got := v.m.Modulus(v.omega); cmplx.Abs(got-v.want) > 2e-9*cmplx.Abs(v.want)+5e-11 {
			t.Errorf("%s at %g rad/s: %.12g, should be %.12g", v.name, v.omega, got, v.want)
		}
	}
}

// Closed forms of the fractional Zener model: for 1, 1000, α = 0.5 the greatest
// loss modulus is 206.8996744, the greatest loss factor 0.9161416574 at ωτ = 1e-3.
func TestFractionalZenerClosedForms(t *testing.T) {
	m := FractionalZener{1, 1000, 1e-6, 0.5}
	g := m.Modulus(1e6)
	if math.Abs(imag(g)-206.8996744) > 1e-6 || math.Abs(real(g)-500.5) > 1e-9 {
		t.Errorf("at ωτ = 1: %v", g)
	}
	g = m.Modulus(1e3)
	if math.Abs(imag(g)/real(g)-0.9161416574) > 1e-9 {
		t.Errorf("tan δ at ωτ = 1e-3: %.10f", imag(g)/real(g))
	}
	for _, f := range []float64{0.9, 1.1} {
		near := m.Modulus(1e3 * f)
		if imag(near)/real(near) > imag(g)/real(g) {
			t.Error("no greatest loss factor there")
		}
	}
}

// Limits, gradients against differences, and no overflow anywhere.
func TestCompactProperties(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		num := func(lo, hi float64, name string) float64 { return rapid.Float64Range(lo, hi).Draw(r, name) }
		g0, ginf := math.Exp(num(-3, 3, "ln G0")), math.Exp(num(4, 9, "ln Ginf"))
		tau, alpha := math.Exp(num(-15, 3, "ln τ")), num(0.1, 1, "α")
		beta := alpha * num(0.3, 1, "β/α")
		build := []func(p []float64) Compact{
			func(p []float64) Compact { return FractionalZener{p[0], p[1], math.Exp(p[2]), p[3]} },
			func(p []float64) Compact { return FiveParameter{p[0], p[1], math.Exp(p[2]), p[3], p[4]} },
			func(p []float64) Compact { return HavriliakNegami{p[0], p[1], math.Exp(p[2]), p[3], p[4]} },
		}
		omega := math.Exp(num(-10, 20, "ln ω"))
		for n, b := range build {
			p := []float64{g0, ginf, math.Log(tau), alpha, beta}
			var g [5]complex128
			m := b(p)
			value := m.Gradient(omega, g[:])
			if d := cmplx.Abs(value - m.Modulus(omega)); d > 1e-12*cmplx.Abs(value) {
				r.Fatalf("model %d: value of the gradient off by %g", n, d)
			}
			count := 5
			if n == 0 {
				count = 4
			}
			for k := range count {
				h := 1e-5 * math.Max(math.Abs(p[k]), 0.1)
				q := append([]float64{}, p...)
				q[k] += h
				up := b(q).Modulus(omega)
				q[k] -= 2 * h
				want := (up - b(q).Modulus(omega)) / complex(2*h, 0)
				if cmplx.Abs(g[k]-want) > 1e-5*(cmplx.Abs(want)+cmplx.Abs(value)/math.Max(math.Abs(p[k]), 0.1)) {
					r.Fatalf("model %d, constant %d: %v, by differences %v", n, k, g[k], want)
				}
			}
			low := m.Modulus(1e-290)
			if cmplx.Abs(low-complex(g0, 0)) > 1e-6*g0 && alpha > 0.2 {
				r.Fatalf("model %d at low frequency: %v", n, low)
			}
			if high := m.Modulus(1e290); cmplx.IsNaN(high) || cmplx.IsInf(high) {
				r.Fatalf("model %d at high frequency: %v", n, high)
			}
		}
	})
}
