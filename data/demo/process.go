package demo

import (
	"math"
	"math/cmplx"

	"gonum.org/v1/gonum/mathext"
)

// Process is one relaxation process. With s = iωτ its complex modulus is that
// of Havriliak and Negami (Polymer 8 (1967) 161; value from memory),
//
//	G*(ω) = Δ·[1 − (1 + s^α)^(−β)],     0 < α ≤ 1, 0 < β ≤ 1,
//
// zero at low and Δ at high frequency. β = 1 is the fractional Zener process
// Δ·s^α/(1+s^α); α = 1 flows at low frequency (G' ~ ω², G” ~ ω); α = β = 1 is a
// single relaxation time.
//
// Its relaxation modulus is exact, too. For α = 1 the spectrum of rates is a
// gamma distribution's image and
//
//	G(t) = Δ·Q(β, t/τ),     Q the regularised upper incomplete gamma function.
//
// For α < 1 the spectrum over u = ln(relaxation time/τ) is
//
//	Y(u) = sin(βθ)/π · [1 + 2e^(−αu)cos πα + e^(−2αu)]^(−β/2),
//	θ    = arg(1 + e^(−αu)·e^(iπα))
//
// (the jump of the modulus across the negative axis of iω, divided by 2πi), and
//
//	G(t) = Δ·∫ Y(u)·exp(−(t/τ)e^(−u)) du .
//
// The integrand is analytic in the strip |Im u| < d, d = min(π/2, π(1−α)/α), so
// the trapezoidal rule errs by about exp(−2πd/h); h = 2πd/36 leaves 2e-16. The
// tails fall like e^(−αu) to the right, where Y falls, and faster than
// exponentially to the left.
type Process struct {
	Strength float64 // Δ, Pa
	Time     float64 // τ at the reference temperature, s
	Alpha    float64 // α
	Beta     float64 // β; 0 means 1
	// Shift is the process's own temperature dependence; nil: the compound's.
	// A compound whose processes differ in it does not obey superposition.
	Shift Shift
}

func (p Process) beta() float64 {
	if p.Beta == 0 {
		return 1
	}
	return p.Beta
}

// modulus returns G* at the reduced angular frequency omega in rad/s.
func (p Process) modulus(omega float64) complex128 {
	s := cmplx.Pow(complex(0, omega*p.Time), complex(p.Alpha, 0))
	if p.beta() == 1 {
		return complex(p.Strength, 0) * s / (1 + s)
	}
	if cmplx.Abs(s) < 1e-4 {
		// 1 − (1+s)^(−β) by its series: the difference would lose digits.
		b := complex(p.beta(), 0)
		return complex(p.Strength, 0) * b * s * (1 - (b+1)/2*s*(1-(b+2)/3*s))
	}
	return complex(p.Strength, 0) * (1 - cmplx.Pow(1+s, complex(-p.beta(), 0)))
}

// relaxation returns G(t) at the reduced time t in s, t ≥ 0.
func (p Process) relaxation(t float64) float64 {
	x := t / p.Time
	if x == 0 {
		return p.Strength
	}
	if p.Alpha == 1 {
		return p.Strength * mathext.GammaIncRegComp(p.beta(), x)
	}
	d := math.Min(math.Pi/2, math.Pi*(1-p.Alpha)/p.Alpha)
	h := 2 * math.Pi * d / 36
	// exp(−x·e^(−u)) is below 1e-17 left of ln x − ln 40; Y is below
	// 1e-17 of its sum right of 40/α.
	from, to := math.Log(x)-math.Log(40), 40/p.Alpha
	sum := 0.0
	for k := math.Floor(from / h); k*h <= to; k++ {
		u := k * h
		sum += p.spectrum(u) * math.Exp(-x*math.Exp(-u))
	}
	return p.Strength * sum * h
}

// spectrum returns Y(u).
func (p Process) spectrum(u float64) float64 {
	q := math.Exp(-p.Alpha * u)
	sin, cos := math.Sincos(math.Pi * p.Alpha)
	theta := math.Atan2(q*sin, 1+q*cos)
	return math.Sin(p.beta()*theta) / math.Pi * math.Pow(1+2*q*cos+q*q, -p.beta()/2)
}
