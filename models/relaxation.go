package models

import (
	"fmt"
	"math"

	"phaselag/models/amplitude"
)

// Relaxation is the relaxation modulus G(t; T, γ) in Pa at the time t in s
// after a step of strain gamma (NaN: the isotherms' own amplitude):
//
//	G(t; T, γ) = b_T[G_e + Σ G_k exp(−t/(a_Tτ_k))]
//	           + φ(T){ΔG' K1(γ) − κ(2/π) ΔG″ K2(γ)[ln(2πf0 t) + 0.5772…]}
//
// A time belongs to the frequency 1/(2πt); where that lies outside the domain,
// or temperature or strain do, it returns an *OutsideError and no number.
func (c *Compound) Relaxation(t, T, gamma float64) (float64, error) {
	if !(t > 0) || math.IsInf(t, 0) {
		return 0, fmt.Errorf("time %g s: must be positive and finite", t)
	}
	if err := c.Inside(Condition{Frequency: 1 / (2 * math.Pi * t), Temperature: T, Strain: gamma}); err != nil {
		out, isOutside := err.(*OutsideError)
		if !isOutside {
			return 0, err
		}
		return 0, c.inTime(out, t)
	}
	return c.relaxation(t, T, gamma), nil
}

func (c *Compound) relaxation(t, T, gamma float64) float64 {
	d := &c.derived
	b, _ := d.verticalAt(T)
	g := b * d.spectrum.Relaxation(t/c.shift(T))
	if f := d.filler; f != nil {
		k1, k2, k3 := f.law.Shares(c.strain(Condition{Strain: gamma}))
		term := f.arrhenius.Factor(T) * (f.storage*k1 + (f.loss*k2+f.extra*k3)*amplitude.RelaxationPart(f.kappa, t, f.f0))
		g = real(f.with(complex(g, 0), complex(term, 0)))
	}
	return g
}
