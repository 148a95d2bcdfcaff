package demo

import (
	"math"
	"math/cmplx"
	"testing"
)

func near(t *testing.T, what string, got, want, relative float64) {
	t.Helper()
	if !(math.Abs(got-want) <= relative*math.Abs(want)) {
		t.Errorf("%s: got %.12g, want %.12g", what, got, want)
	}
}

// Values of closed forms, computed independently in double precision; ω in rad/s.
func TestProcessAgainstClosedForms(t *testing.T) {
	zener := Truth{Equilibrium: 1, Processes: []Process{{Strength: 999, Time: 1e-6, Alpha: 0.5}}}
	cole := Truth{Equilibrium: 1, Processes: []Process{{Strength: 999, Time: 1e-6, Alpha: 0.6}}}
	havriliak := Truth{Equilibrium: 1, Processes: []Process{{Strength: 999, Time: 1e-6, Alpha: 0.6, Beta: 0.4}}}
	series := Truth{Equilibrium: 1, Processes: []Process{
		{Strength: 0.5, Time: 0.01, Alpha: 1}, {Strength: 0.3, Time: 1, Alpha: 1}, {Strength: 0.2, Time: 100, Alpha: 1},
	}}
	for _, c := range []struct {
		name  string
		truth Truth
		omega float64
		want  complex128
	}{
		{"fractional Zener", zener, 0.01, 1.0706399667 + 0.0706299781i},
		{"fractional Zener", zener, 1, 1.7063989690 + 0.7054013808i},
		{"fractional Zener", zener, 100, 8.0633002637 + 6.9648030741i},
		{"fractional Zener", zener, 1e4, 71.0264651 + 61.3502321i},
		{"fractional Zener, α 0.6", cole, 0.01, 1.0093065302 + 0.0128089946i},
		{"fractional Zener, α 0.6", cole, 1e4, 39.0527503 + 47.2979274i},
		{"Havriliak-Negami", havriliak, 0.01, 1.0037226028 + 0.0051236265i},
		{"Havriliak-Negami", havriliak, 1, 1.0590043845 + 0.0811882819i},
		{"Havriliak-Negami", havriliak, 100, 1.9364266527 + 1.2828016715i},
		{"Havriliak-Negami", havriliak, 1e4, 16.1129518 + 19.3576879i},
		{"Maxwell elements", series, 0.01, 1.1000300020 + 0.1030497000i},
		{"Maxwell elements", series, 1, 1.3500299970 + 0.1569993001i},
		{"Maxwell elements", series, 1e4, 1.9999500020 + 0.0050297000i},
	} {
		got := c.truth.Modulus(c.omega/(2*math.Pi), 300, 0)
		near(t, c.name+" storage", real(got), real(c.want), 2e-9)
		near(t, c.name+" loss", imag(got), imag(c.want), 2e-8)
	}
	// The same Maxwell elements in time; computed independently in double precision.
	for _, c := range []struct{ s, want float64 }{{0, 2}, {0.01, 1.6809346717}, {1, 1.3083737991}, {100, 1.0735758882}} {
		near(t, "Maxwell relaxation", series.Relaxation(c.s, 300, 0), c.want, 1e-10)
	}
	// The loss maximum of a fractional Zener process is (G∞−G0)/2·tan(πα/4) at ωτ = 1, where the
	// storage modulus is half way; computed independently in double precision.
	top := zener.Modulus(1e6/(2*math.Pi), 300, 0)
	near(t, "loss maximum", imag(top), 206.8996744, 1e-9)
	near(t, "storage at the loss maximum", real(top), 500.5, 1e-12)
}

// For α = 1/2, β = 1 the relaxation is Δ·exp(x)·erfc(√x): the Mittag-Leffler
// function of order one half (Abramowitz and Stegun 7.1.3 and 7.1.8).
func TestRelaxationOfOrderOneHalf(t *testing.T) {
	p := Process{Strength: 3, Time: 0.02, Alpha: 0.5}
	for _, x := range []float64{1e-8, 1e-3, 0.1, 1, 5, 20} {
		want := 3 * math.Exp(x) * math.Erfc(math.Sqrt(x))
		near(t, "G(t)", p.relaxation(x*0.02), want, 1e-12)
	}
	// Far out, exp(x)·erfc(√x) ~ 1/√(πx)·(1 − 1/(2x)).
	near(t, "tail", p.relaxation(1e8*0.02), 3/math.Sqrt(math.Pi*1e8), 1e-7)
}

// The relaxation modulus and the complex modulus are two faces of one function,
// G* = iω∫G e^(−iωt)dt. The Laplace transform on the positive real axis needs
// no oscillating integral: s∫G(t)e^(−st)dt = G* at iω = s, for each process
// Δ[1 − (1+(sτ)^α)^(−β)].
func TestRelaxationIsTheTransformOfTheModulus(t *testing.T) {
	for _, p := range []Process{
		{Strength: 2, Time: 0.7, Alpha: 0.34},
		{Strength: 2, Time: 0.7, Alpha: 0.52},
		{Strength: 2, Time: 0.7, Alpha: 0.9},
		{Strength: 2, Time: 0.7, Alpha: 0.6, Beta: 0.4},
		{Strength: 2, Time: 0.7, Alpha: 1, Beta: 0.24},
		{Strength: 2, Time: 0.7, Alpha: 1},
	} {
		for _, s := range []float64{0.01, 1, 300} {
			// With t = e^v/s: ∫G(e^v/s)·exp(v − e^v)dv, by the trapezoidal rule.
			const h = 0.05
			sum := 0.0
			for k := -800; k <= 80; k++ {
				v := float64(k) * h
				sum += p.relaxation(math.Exp(v)/s) * math.Exp(v-math.Exp(v)) * h
			}
			want := p.Strength * (1 - math.Pow(1+math.Pow(s*p.Time, p.Alpha), -p.beta()))
			near(t, "transform", sum, want, 1e-11)
		}
	}
}

// The network's pair: s∫g(t)e^(−st)dt of its relaxation is its modulus at
// iω = s, (2/π)·ΔG”·K2·ln(s/ω0) beside ΔG'·K1.
func TestCausalNetworkIsATransformPair(t *testing.T) {
	truth := HM60()
	truth.Equilibrium, truth.Processes = 0, nil
	const kelvin, strain, s = 260., 0.02, 4.
	sum := 0.0
	const h = 0.02
	for k := -2000; k <= 200; k++ {
		v := float64(k) * h
		sum += truth.Relaxation(math.Exp(v)/s, kelvin, strain) * math.Exp(v-math.Exp(v)) * h
	}
	f := truth.Filler
	rm := math.Pow(strain/f.Strain, f.Exponent)
	want := math.Exp(f.Energy/8.314462618*(1/kelvin-1/296.15)) *
		(f.Storage/(1+rm*rm) + f.Loss*2*rm/(1+rm*rm)*2/math.Pi*math.Log(s/(2*math.Pi*f.Frequency)))
	near(t, "network", sum, want, 1e-9)
	// A frequency-independent loss with dG'/d ln f = (2/π)G”.
	a, b := truth.Modulus(3, kelvin, strain), truth.Modulus(30, kelvin, strain)
	near(t, "loss", imag(b), imag(a), 1e-14)
	near(t, "slope", (real(b)-real(a))/math.Log(10), 2/math.Pi*imag(a), 1e-12)
	if g := RateIndependent().Filler; g.Causal != 0 {
		t.Error("the rate-independent compound has a causal network")
	}
}

// Kraus's law, MPa: G0 8, G∞ 2, loss maximum 1 above 0.3, γ_c 1 %, m 0.6;
// computed independently in double precision. The loss far from the maximum,
// 0.3 here, is the polymer's.
func TestKraus(t *testing.T) {
	f := Filler{Storage: 6, Loss: 0.7, Strain: 0.01, Exponent: 0.6, Frequency: 1}
	for _, c := range []struct{ strain, storage, loss float64 }{
		{1e-4, 7.976208, 0.387984}, {1e-3, 7.643894, 0.630793}, {0.01, 5, 1},
		{0.03, 3.266573, 0.871320}, {0.1, 2.356106, 0.630793}, {0.5, 2.054379, 0.432676},
	} {
		g := Truth{Reference: 300, Equilibrium: 2, Filler: f}.Modulus(1, 300, c.strain)
		near(t, "storage", real(g), c.storage, 1e-6)
		near(t, "loss", imag(g)+0.3, c.loss, 2e-6)
	}
	if g := HM60().Modulus(10, 296.15, 0); real(g) <= real(HM60().Modulus(10, 296.15, 0.001)) {
		t.Error("the modulus at rest is not the greatest")
	}
}

// log10 a_T of natural rubber (T0 248 K, 8.86, 101.6 K: Ferry, Viscoelastic
// Properties of Polymers, 3rd ed., ch. 11; value from memory) referred to 23 °C;
// the factors computed independently in double precision. 248 K is −25.15 °C.
func TestShiftLaws(t *testing.T) {
	rubber := WLF{C1: 8.86, C2: 101.6, Reference: 248}
	vogel := VFT{B: math.Ln10 * 8.86 * 101.6, Infinity: 146.4, Reference: 248}
	for _, c := range []struct{ celsius, want float64 }{
		{-40, 4.36548}, {-30, 3.29295}, {-20, 2.42137}, {-10, 1.69909}, {0, 1.09079}, {10, 0.57145},
		{40, -0.61284}, {60, -1.19097}, {80, -1.65726}, {100, -2.04129},
	} {
		k := c.celsius + 273.15
		near(t, "WLF", rubber.Log10(k)-rubber.Log10(296.15), c.want, 1e-5)
		near(t, "VFT", vogel.Log10(k), rubber.Log10(k), 1e-11)
	}
	// 80 kJ/mol from 23 to 60 °C; computed independently in double precision.
	near(t, "Arrhenius", Arrhenius{Energy: 80e3, Reference: 296.15}.Log10(333.15), -1.567077, 1e-6)
	if !math.IsInf(rubber.Log10(146.4), 1) || !math.IsInf(vogel.Log10(140), 1) {
		t.Error("below the pole the factor is not infinite")
	}
	// Colder than the reference: slower, so a_T > 1.
	if HM60().ShiftFactor(263.15) <= 1 || (Truth{}).ShiftFactor(200) != 1 {
		t.Error("wrong sense of the shift factor")
	}
}

// At 60 °C, 23 °C the reference, expansion 6.6e-4 /K: the factor that reduces a
// modulus is 0.910647 (computed independently in double precision); the truth
// multiplies by its inverse.
func TestDensityLaw(t *testing.T) {
	truth := Truth{Reference: 296.15, Equilibrium: 1, Density: true, Expansion: 6.6e-4}
	near(t, "b_T", 1/real(truth.Modulus(1, 333.15, 0)), 0.910647, 1e-6)
	near(t, "b_T in time", 1/truth.Relaxation(1, 333.15, 0), 0.910647, 1e-6)
}

// What the demonstration promises its readers.
func TestHM60IsAPlausibleRubber(t *testing.T) {
	g := HM60().Modulus(10, 296.15, 0.002)
	if real(g) < 1.5e6 || real(g) > 2.5e6 {
		t.Errorf("storage modulus %g Pa", real(g))
	}
	if l := imag(g) / real(g); l < 0.09 || l > 0.15 {
		t.Errorf("loss factor %g", l)
	}
	for _, truth := range []Truth{HM60(), RateIndependent(), Gum(), Narrow(), Liquid(), Complex()} {
		for _, celsius := range Steps(-10, 60, 10) {
			for _, f := range Decades(0.5, 50, 5) {
				g := truth.Modulus(f, celsius+273.15, 0.002)
				if !(real(g) > 0 && imag(g) > 0) || cmplx.IsInf(g) {
					t.Errorf("%s: G* = %v at %g Hz and %g °C", truth.Name, g, f, celsius)
				}
			}
		}
	}
	// No process sits on the lattice τ = 10^(k/3) s on which a spectrum might be sought.
	for _, truth := range []Truth{HM60(), Narrow(), Liquid(), Complex()} {
		for _, p := range truth.Processes {
			if x := 3 * math.Log10(p.Time); math.Abs(x-math.Round(x)) < 0.05 {
				t.Errorf("%s: τ = %g s sits on the lattice", truth.Name, p.Time)
			}
		}
	}
	// A liquid's phase angle approaches 90°.
	hot := Liquid().Modulus(0.05, 343.15, 0.001)
	if d := cmplx.Phase(hot) * 180 / math.Pi; d < 85 {
		t.Errorf("the liquid's phase angle is only %g°", d)
	}
}
