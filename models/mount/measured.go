package mount

import (
	"math"
	"math/cmplx"
)

// Measured is a part whose stiffness was measured at one condition c0. At any
// other condition c its stiffness follows the compound,
//
//	K*(c) = K*(c0)·G*(c)/G*(c0),
//
// which needs a part that consists of one rubber only and is strained about
// evenly; where it is not, StrainPerDisplacement is the energy-weighted mean.
type Measured struct {
	Stiffness  float64 // N/m: the magnitude, or the storage part where Storage is set
	Storage    bool
	LossFactor float64 // NaN: the compound's at c0
	// The condition c0.
	Frequency   float64 // Hz
	Temperature float64 // K
	Amplitude   float64 // m, single amplitude
	StaticLoad  float64 // N; NaN if not stated
	U           float64 // relative standard uncertainty of Stiffness; NaN if not stated
	// StrainPerDisplacement is the shear strain amplitude for a displacement
	// amplitude, 1/m.
	StrainPerDisplacement float64
}

// reference returns K*(c0) where the compound has the modulus g0 at c0.
func (m Measured) reference(g0 complex128) complex128 {
	delta := cmplx.Phase(g0)
	if !math.IsNaN(m.LossFactor) {
		delta = math.Atan(m.LossFactor)
	}
	magnitude := m.Stiffness
	if m.Storage {
		magnitude /= math.Cos(delta)
	}
	return cmplx.Rect(magnitude, delta)
}

// slopes returns the derivatives of the stiffness k by the modulus g0 at the
// reference condition and by its conjugate. With the phase stated, k = K0·g/g0
// has the derivative −k/g0. With the phase taken from g0, the magnitude gives
// k = |K|·g/|g0| and the storage part k = K'·g/Re g0: functions of a length, no
// functions of g0 alone.
func (m Measured) slopes(k, g0 complex128) (direct, conjugate complex128) {
	switch {
	case !math.IsNaN(m.LossFactor):
		return -k / g0, 0
	case m.Storage:
		half := -k / complex(2*real(g0), 0)
		return half, half
	}
	return -k / (2 * g0), -k / (2 * cmplx.Conj(g0))
}
