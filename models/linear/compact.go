package linear

import (
	"math"
	"math/cmplx"
)

// Compact models
//
// A few constants that describe a linear viscoelastic modulus over many decades,
// with L = ln(iωτ) = ln ωτ + iπ/2:
//
//	fractional Zener    G0 + (G∞ − G0) s/(1 + s),        s = e^{αL},  0 < α ≤ 1
//	five parameters     G0 + G1 p/(1 + q),   p = e^{αL}, q = e^{βL},  0 < β ≤ α ≤ 1
//	Havriliak–Negami    G∞ + (G0 − G∞)/(1 + s)^b,        s = e^{aL},  0 < a, b ≤ 1
//
// (Pritz, J. Sound Vib. 195 (1996) 103 and 265 (2003) 935; Hartmann, Lee and Lee,
// J. Acoust. Soc. Am. 95 (1994) 226; all from memory.) The five-parameter model
// with β > α would let the storage modulus fall at high frequency; its constant d
// of the literature is 1 + G1/G0, its loss factor at high frequency
// tan((α−β)π/2).
//
// Closed forms of the fractional Zener model: G″ has its greatest value
// (G∞−G0)/2·tan(πα/4) at ωτ = 1, where G' = (G0+G∞)/2; tan δ its greatest value
// (G∞−G0) sin(πα/2)/[2√(G0G∞) + (G0+G∞) cos(πα/2)] at (ωτ)^α = √(G0/G∞).

// Compact is a model of few constants.
type Compact interface {
	// Modulus is G*(ω), Pa, at ω in rad/s > 0.
	Modulus(omega float64) complex128
	// Gradient writes ∂G*/∂constant into g in the order of the fields, that by Tau
	// as ∂G*/∂ ln τ, and returns G*.
	Gradient(omega float64, g []complex128) complex128
}

// FractionalZener has four constants.
type FractionalZener struct {
	G0, Ginf float64 // Pa, at low and high frequency
	Tau      float64 // s
	Alpha    float64
}

// FiveParameter has five constants; its modulus grows as ω^(α−β) without bound.
type FiveParameter struct {
	G0, G1      float64 // Pa
	Tau         float64 // s
	Alpha, Beta float64 // Alpha ≥ Beta
}

// HavriliakNegami has five constants.
type HavriliakNegami struct {
	G0, Ginf float64 // Pa, at low and high frequency
	Tau      float64 // s
	A, B     float64
}

// share is z/(1+z), for z = e^w without overflow.
func share(w complex128) complex128 {
	if real(w) > 0 {
		return 1 / (1 + cmplx.Exp(-w))
	}
	z := cmplx.Exp(w)
	return z / (1 + z)
}

// logOnePlus is ln(1 + e^w) without overflow.
func logOnePlus(w complex128) complex128 {
	if real(w) > 0 {
		return w + cmplx.Log(1+cmplx.Exp(-w))
	}
	return cmplx.Log(1 + cmplx.Exp(w))
}

func logITau(omega, tau float64) complex128 {
	return complex(math.Log(omega)+math.Log(tau), math.Pi/2)
}

// Modulus is G*(ω).
func (m FractionalZener) Modulus(omega float64) complex128 {
	return complex(m.G0, 0) + complex(m.Ginf-m.G0, 0)*share(complex(m.Alpha, 0)*logITau(omega, m.Tau))
}

// Gradient is by G0, G∞, ln τ, α.
func (m FractionalZener) Gradient(omega float64, g []complex128) complex128 {
	l := logITau(omega, m.Tau)
	w := share(complex(m.Alpha, 0) * l)
	d := complex(m.Ginf-m.G0, 0)
	slope := d * w * (1 - w) // by αL
	g[0], g[1], g[2], g[3] = 1-w, w, slope*complex(m.Alpha, 0), slope*l
	return complex(m.G0, 0) + d*w
}

func (m FiveParameter) term(omega float64) (t, l, q complex128) {
	l = logITau(omega, m.Tau)
	q = share(complex(m.Beta, 0) * l)
	// p/(1+q) = e^{(α−β)L}·q/(1+q).
	return cmplx.Exp(complex(m.Alpha-m.Beta, 0)*l) * q, l, q
}

// Modulus is G*(ω).
func (m FiveParameter) Modulus(omega float64) complex128 {
	t, _, _ := m.term(omega)
	return complex(m.G0, 0) + complex(m.G1, 0)*t
}

// Gradient is by G0, G1, ln τ, α, β.
func (m FiveParameter) Gradient(omega float64, g []complex128) complex128 {
	t, l, q := m.term(omega)
	v := complex(m.G1, 0) * t
	g[0], g[1] = 1, t
	g[2] = v * (complex(m.Alpha, 0) - complex(m.Beta, 0)*q)
	g[3], g[4] = v*l, -v*l*q
	return complex(m.G0, 0) + v
}

// Modulus is G*(ω).
func (m HavriliakNegami) Modulus(omega float64) complex128 {
	u := cmplx.Exp(complex(-m.B, 0) * logOnePlus(complex(m.A, 0)*logITau(omega, m.Tau)))
	return complex(m.Ginf, 0) + complex(m.G0-m.Ginf, 0)*u
}

// Gradient is by G0, G∞, ln τ, a, b.
func (m HavriliakNegami) Gradient(omega float64, g []complex128) complex128 {
	l := logITau(omega, m.Tau)
	w := complex(m.A, 0) * l
	ln := logOnePlus(w)
	u := cmplx.Exp(complex(-m.B, 0) * ln)
	v := complex(m.G0-m.Ginf, 0) * u
	slope := complex(-m.B, 0) * share(w) * v // by aL
	g[0], g[1], g[2], g[3], g[4] = u, 1-u, slope*complex(m.A, 0), slope*l, -ln*v
	return complex(m.Ginf, 0) + v
}
