// Package thermal holds the temperature dependence of a compound: shift
// factors a_T, vertical factors b_T and Arrhenius factors.
//
// Temperatures are in kelvin, shift factors are log base 10. A temperature
// colder than the reference has a_T > 1, and reduced frequency is f·a_T.
//
// WLF (Williams, Landel, Ferry 1955): log a_T = −C1 (T−T0)/(C2 + T−T0), pole
// at T0 − C2. Arrhenius: log a_T = E_a/(R ln 10) (1/T − 1/T0).
package thermal

import "math"

// GasConstant is R in J/(mol·K), exact since the SI of 2019.
const GasConstant = 8.31446261815324

// Ln10 is the natural logarithm of ten.
const Ln10 = math.Ln10

// Law gives log10 a_T and its slope in T. A Law is a pure function of T; its
// constants are its fields.
type Law interface {
	// LogShift returns log10 a_T at T in kelvin; NaN or +Inf where the law
	// does not hold.
	LogShift(T float64) float64
	// Slope returns d log10 a_T/dT, 1/K.
	Slope(T float64) float64
	// Gradient writes d log10 a_T/d constant for every constant into g, whose
	// length is the number of constants of the law, in the order of its fields.
	Gradient(T float64, g []float64)
}

// WLF is the law of Williams, Landel and Ferry; its constants are C1, C2.
type WLF struct {
	C1        float64 // dimensionless
	C2        float64 // K
	Reference float64 // T0, K
}

// LogShift is −C1 (T−T0)/(C2+T−T0); +Inf at and below the pole.
func (w WLF) LogShift(T float64) float64 {
	d := T - w.Reference
	if w.C2+d <= 0 {
		return math.Inf(1)
	}
	return -w.C1 * d / (w.C2 + d)
}

// Slope is −C1 C2/(C2+T−T0)².
func (w WLF) Slope(T float64) float64 {
	q := w.C2 + T - w.Reference
	return -w.C1 * w.C2 / (q * q)
}

// Gradient writes the derivatives by C1 and C2.
func (w WLF) Gradient(T float64, g []float64) {
	d := T - w.Reference
	q := w.C2 + d
	g[0] = -d / q
	g[1] = w.C1 * d / (q * q)
}

// At re-expresses the law at another reference temperature T1 (K):
// C2' = C2 + T1 − T0, C1' = C1 C2/C2'. The products C1C2 and T0 − C2 stay.
func (w WLF) At(T1 float64) WLF {
	c2 := w.C2 + T1 - w.Reference
	return WLF{C1: w.C1 * w.C2 / c2, C2: c2, Reference: T1}
}

// AtJacobian gives the derivatives of (C1', C2') of At with respect to
// (C1, C2), row by row.
func (w WLF) AtJacobian(T1 float64) [2][2]float64 {
	d := T1 - w.Reference
	c2 := w.C2 + d
	return [2][2]float64{{w.C2 / c2, w.C1 * d / (c2 * c2)}, {0, 1}}
}

// VFT gives the constants of the identical Vogel–Fulcher–Tammann form
// ln a_T = B[1/(T−T∞) − 1/(T0−T∞)], both in K.
func (w WLF) VFT() (B, Tinf float64) {
	return Ln10 * w.C1 * w.C2, w.Reference - w.C2
}

// Apparent is the apparent activation energy, J/mol, of a law at T:
// −R T² ln10 · d log a_T/dT. For WLF it is R ln10 C1C2 T²/(C2+T−T0)².
func Apparent(l Law, T float64) float64 { return -GasConstant * Ln10 * T * T * l.Slope(T) }

// Arrhenius is the law of Arrhenius; its constant is the activation energy.
type Arrhenius struct {
	Activation float64 // E_a, J/mol
	Reference  float64 // T0, K
}

// LogShift is E_a/(R ln10) (1/T − 1/T0).
func (a Arrhenius) LogShift(T float64) float64 {
	return a.Activation / (GasConstant * Ln10) * (1/T - 1/a.Reference)
}

// Slope is −E_a/(R ln10 T²).
func (a Arrhenius) Slope(T float64) float64 {
	return -a.Activation / (GasConstant * Ln10 * T * T)
}

// Gradient writes the derivative by E_a.
func (a Arrhenius) Gradient(T float64, g []float64) {
	g[0] = (1/T - 1/a.Reference) / (GasConstant * Ln10)
}

// Factor is exp[(E_a/R)(1/T − 1/T0)], the Arrhenius factor of a modulus.
func (a Arrhenius) Factor(T float64) float64 {
	return math.Exp(a.Activation / GasConstant * (1/T - 1/a.Reference))
}
