package demo

import "math"

// gas is the molar gas constant, J/(mol·K), exact in the SI since 2019.
const gas = 8.31446261815324

// Shift is the temperature dependence of a relaxation time.
type Shift interface {
	// Log10 returns log10 a_T at the temperature kelvin; +Inf where the law
	// has no finite value.
	Log10(kelvin float64) float64
}

// WLF is the law of Williams, Landel and Ferry,
// log10 a_T = −C1·(T−T0)/(C2+T−T0).
type WLF struct {
	C1        float64
	C2        float64 // K
	Reference float64 // T0, K
}

// Log10 implements Shift; +Inf at and below the pole T0 − C2.
func (w WLF) Log10(kelvin float64) float64 {
	d := kelvin - w.Reference
	if w.C2+d <= 0 {
		return math.Inf(1)
	}
	return -w.C1 * d / (w.C2 + d)
}

// Arrhenius is log10 a_T = E/(R·ln 10)·(1/T − 1/T0).
type Arrhenius struct {
	Energy    float64 // E, J/mol
	Reference float64 // T0, K
}

// Log10 implements Shift.
func (a Arrhenius) Log10(kelvin float64) float64 {
	return a.Energy / (gas * math.Ln10) * (1/kelvin - 1/a.Reference)
}

// VFT is the law of Vogel, Fulcher and Tammann,
// ln a_T = B·[1/(T−T∞) − 1/(T0−T∞)].
type VFT struct {
	B         float64 // K
	Infinity  float64 // T∞, K
	Reference float64 // T0, K
}

// Log10 implements Shift; +Inf at and below T∞.
func (v VFT) Log10(kelvin float64) float64 {
	if kelvin <= v.Infinity {
		return math.Inf(1)
	}
	return v.B / math.Ln10 * (1/(kelvin-v.Infinity) - 1/(v.Reference-v.Infinity))
}
