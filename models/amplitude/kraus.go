// Package amplitude holds the dependence of a filled compound's modulus on
// the strain amplitude.
//
// Kraus (J. Appl. Polym. Sci.: Appl. Polym. Symp. 39 (1984) 75; from memory)
// balances breakdown and re-forming of filler contacts. With r = γ/γ_c
//
//	K1(γ) = 1/(1 + r^2m)          share of the storage term left at γ
//	K2(γ) = 2 r^m/(1 + r^2m)      share of the loss term, 1 at r = 1
//
// and the filler's part of the modulus is
//
//	F*(γ, f) = ΔG' K1 + ΔG″ K2 [i + κ (2/π) ln(f/f0)]
//
// A loss that does not depend on frequency has, in a linear causal material, a
// storage that rises by (2/π)ΔG″K2 per unit of ln f (Booij and Thoone, Rheol.
// Acta 21 (1982) 15, there exact for a constant loss); κ = 1 takes it along,
// κ = 0 is rate-independent friction.
package amplitude

import "math"

// Kraus is the pair of shape functions.
type Kraus struct {
	Critical float64 // γ_c, m/m, single amplitude
	Exponent float64 // m, dimensionless
}

// Shape returns K1 and K2 at the single strain amplitude gamma ≥ 0, m/m. It is
// exact in both limits (1, 0) and (0, 0).
func (k Kraus) Shape(gamma float64) (k1, k2 float64) {
	k1, k2, _ = k.shape(gamma)
	return k1, k2
}

func (k Kraus) shape(gamma float64) (k1, k2, lnr float64) {
	if gamma <= 0 {
		return 1, 0, math.Inf(-1)
	}
	lnr = math.Log(gamma / k.Critical)
	// With q = r^m: K1 = 1/(1+q²), K2 = 2/(q + 1/q) = sech(m ln r).
	q := math.Exp(k.Exponent * lnr)
	if math.IsInf(q, 1) {
		return 0, 0, lnr
	}
	d := 1 / (1 + q*q)
	return d, 2 * q * d, lnr
}

// Slopes returns K1, K2 and their derivatives with respect to ln γ_c and m.
func (k Kraus) Slopes(gamma float64) (k1, k2, k1c, k2c, k1m, k2m float64) {
	var lnr float64
	k1, k2, lnr = k.shape(gamma)
	if math.IsInf(lnr, 0) {
		return k1, k2, 0, 0, 0, 0 // both ends are level
	}
	// dK1/d(m ln r) = −2K1(1−K1), dK2/d(m ln r) = K2(2K1−1).
	d1 := -2 * k1 * (1 - k1)
	d2 := k2 * (2*k1 - 1)
	return k1, k2, -k.Exponent * d1, -k.Exponent * d2, lnr * d1, lnr * d2
}

// FrequencyPart is κ(2/π) ln(f/f0), the causal partner of the loss term per
// unit of ΔG″K2.
func FrequencyPart(kappa, f, f0 float64) float64 {
	if kappa == 0 {
		return 0
	}
	return kappa * 2 / math.Pi * math.Log(f/f0)
}

// RelaxationPart is what multiplies ΔG″K2 in the relaxation modulus of the
// filler part: −κ(2/π)[ln(2π f0 t) + C], C = 0.5772… Euler's constant. It is
// the time-domain form of FrequencyPart: the relaxation modulus of
// G*(ω) = A + B[ln(ω/ω0) + iπ/2] is A − B[ln(ω0 t) + C].
func RelaxationPart(kappa, t, f0 float64) float64 {
	if kappa == 0 {
		return 0
	}
	const euler = 0.57721566490153286
	return -kappa * 2 / math.Pi * (math.Log(2*math.Pi*f0*t) + euler)
}
