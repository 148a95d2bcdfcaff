package linear

import (
	"fmt"
	"math"
	"math/cmplx"
	"testing"

	"pgregory.net/rapid"
)

// near fails unless got is want to the relative tolerance rel.
func near(t rapid.TB, what string, got, want, rel float64) {
	t.Helper()
	if !(math.Abs(got-want) <= rel*math.Abs(want)) {
		t.Errorf("%s: got %.12g, want %.12g", what, got, want)
	}
}

// three is the material of the table below: G_e = 1, three branches.
var three = Spectrum{Equilibrium: 1, Times: []float64{0.01, 1, 100}, Moduli: []float64{0.5, 0.3, 0.2}}

// Generalised Maxwell model, formulas as in Ferry, Viscoelastic Properties of
// Polymers, 3rd ed., ch. 3 (from memory); values computed independently in
// double precision, printed to ten decimals.
func TestModulusTable(t *testing.T) {
	for _, c := range []struct{ omega, storage, loss float64 }{
		{0.01, 1.1000300020, 0.1030497000},
		{1, 1.3500299970, 0.1569993001},
		{100, 1.7499700010, 0.2530197000},
		{1e4, 1.9999500020, 0.0050297000},
	} {
		g := three.Modulus(c.omega)
		if math.Abs(real(g)-c.storage) > 5.1e-11 || math.Abs(imag(g)-c.loss) > 5.1e-11 {
			t.Errorf("G*(%g) = %.10f, want %.10f%+.10fi", c.omega, g, c.storage, c.loss)
		}
	}
}

// The same material in time; values computed independently in double precision.
func TestRelaxationTable(t *testing.T) {
	for _, c := range []struct{ time, want float64 }{
		{0, 2}, {0.01, 1.6809346717}, {1, 1.3083737991}, {100, 1.0735758882}, {math.Inf(1), 1},
	} {
		if g := three.Relaxation(c.time); math.Abs(g-c.want) > 5.1e-11 {
			t.Errorf("G(%g) = %.10f, want %.10f", c.time, g, c.want)
		}
	}
}

// One Maxwell element: G′ = G″ = G/2 at ωτ = 1, G′ = G − G″ /(ωτ), and the
// limits 0 and G. Closed forms.
func TestMaxwell(t *testing.T) {
	s := Spectrum{Times: []float64{0.2}, Moduli: []float64{3}}
	if g := s.Modulus(5); g != complex(1.5, 1.5) {
		t.Errorf("at ωτ = 1: %v", g)
	}
	if g := s.Modulus(0); g != 0 {
		t.Errorf("at rest: %v", g)
	}
	g := s.Modulus(1e300)
	if real(g) != 3 || !(imag(g) >= 0 && imag(g) < 1e-290) {
		t.Errorf("glassy: %v", g)
	}
	near(t, "viscosity at low frequency", imag(s.Modulus(1e-6))/1e-6, 3*0.2, 1e-10)
}

// Standard linear solid: G_e at rest, G_e+G_1 in the glass, the loss has its
// peak G_1/2 at ωτ = 1, and the loss factor its peak G_1/(2√(G_e(G_e+G_1))) at
// ωτ = √(G_e/(G_e+G_1)), the geometric mean of relaxation and retardation time
// τ(G_e+G_1)/G_e. Closed forms.
func TestStandardLinearSolid(t *testing.T) {
	s := Spectrum{Equilibrium: 2, Times: []float64{0.5}, Moduli: []float64{6}}
	near(t, "rest", real(s.Modulus(0)), 2, 1e-15)
	near(t, "glass", real(s.Modulus(1e200)), 8, 1e-15)
	near(t, "loss peak", imag(s.Modulus(2)), 3, 1e-15)
	peak := math.Sqrt(2.0/8) / 0.5
	g := s.Modulus(peak)
	near(t, "peak of the loss factor", imag(g)/real(g), 6/(2*math.Sqrt(2.0*8)), 1e-14)
	if d := s.Slope(2); math.Abs(imag(d)) > 1e-15 {
		t.Errorf("the loss is not level at its peak: %g", imag(d))
	}
	near(t, "slope of the storage at ωτ = 1", real(s.Slope(2)), 3, 1e-15)
}

// A fractional Zener material, (G0 + G∞ s)/(1+s) with s = (iωτ)^α, as a dense
// spectrum: h(ln τ') = (G∞−G0) sin(πα)/(2π[cosh(α ln(τ'/τ)) + cos(πα)]) is its
// continuous spectrum (Cole and Cole 1941; from memory), and a trapezoidal sum
// over it has to give the closed form. Values of the closed form computed
// independently in double precision.
func TestFractionalZener(t *testing.T) {
	const g0, gInf, tau, alpha = 1, 1000, 1e-6, 0.5
	s := Spectrum{Equilibrium: g0}
	const step = 0.05
	for y := -90.0; y <= 90; y += step {
		s.Times = append(s.Times, tau*math.Exp(y))
		s.Moduli = append(s.Moduli, step*(gInf-g0)*math.Sin(math.Pi*alpha)/(2*math.Pi*(math.Cosh(alpha*y)+math.Cos(math.Pi*alpha))))
	}
	for _, c := range []struct{ omega, storage, loss float64 }{
		{0.01, 1.0706399667, 0.0706299781},
		{1, 1.7063989690, 0.7054013808},
		{100, 8.0633002637, 6.9648030741},
		{1e4, 71.0264651, 61.3502321},
		{1e6, (g0 + gInf) / 2.0, 206.8996744}, // the peak (G∞−G0)/2·tan(πα/4)
	} {
		g := s.Modulus(c.omega)
		near(t, fmt.Sprintf("storage at %g", c.omega), real(g), c.storage, 2e-9)
		near(t, fmt.Sprintf("loss at %g", c.omega), imag(g), c.loss, 2e-9)
	}
	// tan δ max = (G∞−G0) sin(πα/2)/[2√(G0G∞) + (G0+G∞) cos(πα/2)] at
	// (ωτ)^α = √(G0/G∞), that is at ωτ = 1e-3.
	g := s.Modulus(1e3)
	near(t, "largest loss factor", imag(g)/real(g), 0.9161416574, 2e-9)
}

func TestBranchSlopeAgainstDifferences(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := math.Pow(10, rapid.Float64Range(-8, 8).Draw(t, "log10 x"))
		const h = 1e-5
		up1, up2 := Branch(x * math.Exp(h))
		dn1, dn2 := Branch(x * math.Exp(-h))
		storage, loss := BranchSlope(x)
		// The difference of two numbers near 1 is known to 1e-16/h at best.
		if d := (up1 - dn1) / (2 * h); math.Abs(d-storage) > 1e-9*math.Abs(storage)+2e-11 {
			t.Errorf("storage slope at %g: %g, differences %g", x, storage, d)
		}
		if d := (up2 - dn2) / (2 * h); math.Abs(d-loss) > 1e-9*math.Abs(loss)+2e-11 {
			t.Errorf("loss slope at %g: %g, differences %g", x, loss, d)
		}
	})
}

// Far ends: no overflow, no NaN, monotonic storage, the loss not negative.
func TestBranchEnds(t *testing.T) {
	last := -1.0
	for _, x := range []float64{0, 5e-324, 1e-200, 1e-100, 1, 1e74, 1e76, 1e149, 1e151, 1e300, math.MaxFloat64, math.Inf(1)} {
		a, b := Branch(x)
		if !(a >= last-2e-16 && a <= 1) || !(b >= 0 && b <= 0.5) {
			t.Errorf("Branch(%g) = %g, %g", x, a, b)
		}
		last = a
		c, d := BranchSlope(x)
		if math.IsNaN(c) || math.IsNaN(d) || c < 0 || c > 0.5 || math.Abs(d) > 0.5 {
			t.Errorf("BranchSlope(%g) = %g, %g", x, c, d)
		}
	}
}

// Slope is the derivative of Modulus by ln ω for any spectrum.
func TestSpectrumSlope(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := Spectrum{Equilibrium: rapid.Float64Range(0, 5).Draw(t, "Ge")}
		n := rapid.IntRange(1, 12).Draw(t, "branches")
		for range n {
			s.Times = append(s.Times, math.Pow(10, rapid.Float64Range(-6, 4).Draw(t, "log τ")))
			s.Moduli = append(s.Moduli, rapid.Float64Range(0.01, 5).Draw(t, "G"))
		}
		w := math.Pow(10, rapid.Float64Range(-4, 6).Draw(t, "log ω"))
		const h = 1e-5
		d := (s.Modulus(w*math.Exp(h)) - s.Modulus(w*math.Exp(-h))) / complex(2*h, 0)
		if e := cmplx.Abs(d - s.Slope(w)); e > 1e-9*cmplx.Abs(s.Modulus(w)) {
			t.Errorf("slope %v, differences %v", s.Slope(w), d)
		}
	})
}
