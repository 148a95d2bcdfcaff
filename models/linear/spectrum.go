// Package linear holds the linear viscoelastic spectrum of a compound.
//
// A discrete relaxation spectrum (generalised Maxwell model) with equilibrium
// modulus G_e and branches (τ_k, G_k) has
//
//	G*(ω) = G_e + Σ G_k iωτ_k/(1 + iωτ_k)
//	G(t)  = G_e + Σ G_k exp(−t/τ_k)
//
// (Ferry, Viscoelastic Properties of Polymers, 3rd ed., ch. 3; from memory).
// The kernels below give the response of one branch of unit modulus, so that a
// fit can use them as columns and a compound can sum them.
package linear

import "math"

// Branch is iωτ/(1+iωτ) for x = ωτ ≥ 0: storage x²/(1+x²), loss x/(1+x²).
// It is exact at x = 0 and does not overflow for large x.
func Branch(x float64) (storage, loss float64) {
	if x > 1e150 {
		return 1, 1 / x
	}
	d := 1 / (1 + x*x)
	return x * x * d, x * d
}

// BranchSlope is the derivative of Branch with respect to ln x:
// d storage/d ln x = 2x²/(1+x²)², d loss/d ln x = x(1−x²)/(1+x²)².
func BranchSlope(x float64) (storage, loss float64) {
	if x > 1e75 {
		return 0, -1 / x
	}
	d := 1 / (1 + x*x)
	return 2 * x * x * d * d, x * (1 - x*x) * d * d
}

// Spectrum is a discrete relaxation spectrum in SI units.
type Spectrum struct {
	Equilibrium float64   // G_e, Pa
	Times       []float64 // τ_k, s
	Moduli      []float64 // G_k, Pa, as many as Times
}

// Modulus is G*(ω), Pa, at the angular frequency omega in rad/s ≥ 0.
func (s Spectrum) Modulus(omega float64) complex128 {
	re, im := s.Equilibrium, 0.0
	for k, tau := range s.Times {
		a, b := Branch(omega * tau)
		re += s.Moduli[k] * a
		im += s.Moduli[k] * b
	}
	return complex(re, im)
}

// Slope is dG*/d ln ω, Pa.
func (s Spectrum) Slope(omega float64) complex128 {
	var re, im float64
	for k, tau := range s.Times {
		a, b := BranchSlope(omega * tau)
		re += s.Moduli[k] * a
		im += s.Moduli[k] * b
	}
	return complex(re, im)
}

// Relaxation is G(t), Pa, for t ≥ 0 in s.
func (s Spectrum) Relaxation(t float64) float64 {
	g := s.Equilibrium
	for k, tau := range s.Times {
		g += s.Moduli[k] * math.Exp(-t/tau)
	}
	return g
}
