package causal

import (
	"math"
	"math/cmplx"
)

// Kind names a way in which an instrument or its correction goes wrong.
type Kind string

// The kinds, in the order of Verdict.Suspicions.
const (
	PhaseOffset Kind = "phase offset" // the phase of every reading is off by the same angle
	LossGain    Kind = "loss gain"    // every loss modulus is off by the same factor
	Inertia     Kind = "inertia"      // a moving mass was not, or twice, taken off
	TimeDelay   Kind = "time delay"   // one channel lags the other by a fixed time
)

// hypothesis is a distortion D_p of a modulus with one parameter p that is zero
// for no distortion. It is real-linear in the modulus but for a shift:
//
//	phase offset  z·e^(ip)                 p in rad
//	loss gain     z' + i(1+p)z''           p relative
//	inertia       z − p·ω²                 p in modulus·s²
//	time delay    z·e^(iωp)                p in s, positive where the phase reads high
type hypothesis struct {
	kind   Kind
	linear func(p, f float64, z complex128) complex128
	shift  func(p, f float64) complex128
	slope  func(p, f float64, z complex128) complex128 // ∂D_p(z)/∂p
}

var hypotheses = [...]hypothesis{
	{PhaseOffset,
		func(p, _ float64, z complex128) complex128 { return z * turn(p) },
		unshifted,
		func(p, _ float64, z complex128) complex128 { return 1i * z * turn(p) }},
	{LossGain,
		func(p, _ float64, z complex128) complex128 { return complex(real(z), (1+p)*imag(z)) },
		unshifted,
		func(_, _ float64, z complex128) complex128 { return complex(0, imag(z)) }},
	{Inertia,
		func(_, _ float64, z complex128) complex128 { return z },
		func(p, f float64) complex128 { return complex(-p*sq(omega(f)), 0) },
		func(_, f float64, _ complex128) complex128 { return complex(-sq(omega(f)), 0) }},
	{TimeDelay,
		func(p, f float64, z complex128) complex128 { return z * turn(omega(f)*p) },
		unshifted,
		func(p, f float64, z complex128) complex128 { return complex(0, omega(f)) * z * turn(omega(f)*p) }},
}

func unshifted(_, _ float64) complex128 { return 0 }

func turn(angle float64) complex128 { return cmplx.Exp(complex(0, angle)) }

func omega(f float64) float64 { return 2 * math.Pi * f }
