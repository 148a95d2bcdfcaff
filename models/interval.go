package models

import (
	"math"
	"math/cmplx"

	"gonum.org/v1/gonum/stat/distuv"
)

// interval evaluates with half-widths.
func (c *Compound) interval(q Condition) Modulus {
	n := len(c.derived.params)
	g := make([]complex128, n)
	value := c.Gradient(q, g)
	storage, loss := real(value), imag(value)
	mag := cmplx.Abs(value)
	eta := loss / storage
	t := c.Quantile()
	part := make([]float64, n)
	half := func(f func(complex128) float64) float64 {
		for i, v := range g {
			part[i] = f(v)
		}
		return t * c.Deviation(part)
	}
	return Modulus{
		Storage: storage, Loss: loss, Magnitude: mag, LossFactor: eta,
		StorageU95:       half(func(v complex128) float64 { return real(v) }),
		LossU95:          half(func(v complex128) float64 { return imag(v) }),
		MagnitudeU95:     half(func(v complex128) float64 { return (storage*real(v) + loss*imag(v)) / mag }),
		LossFactorU95:    half(func(v complex128) float64 { return (imag(v) - eta*real(v)) / storage }),
		ReducedFrequency: q.Frequency * c.shift(q.Temperature),
	}
}

// Deviation is the standard uncertainty √(gᵀCg) = ‖Lᵀg‖ of an answer whose
// gradient by Uncertainty.Parameters is g.
func (c *Compound) Deviation(g []float64) float64 {
	var room [64]float64
	v := room[:] // Lᵀg, gathered row by row as L is stored
	if len(g) > len(v) {
		v = make([]float64, len(g))
	}
	for i, gi := range g {
		for j, l := range c.Uncertainty.Cholesky[i] {
			v[j] += l * gi
		}
	}
	var s float64
	for _, x := range v[:len(g)] {
		s += x * x
	}
	return math.Sqrt(s)
}

// Quantile is t(0.975, ν), the factor between a standard uncertainty and the
// half-width of a 95 % interval; 1.96 where the degrees of freedom are null.
func (c *Compound) Quantile() float64 { return c.derived.quantile }

// Quantile is t(0.975, dof); the normal quantile where dof is NaN or infinite.
func Quantile(dof float64) float64 {
	if math.IsNaN(dof) || dof > 1e6 {
		return distuv.UnitNormal.Quantile(0.975)
	}
	return distuv.StudentsT{Mu: 0, Sigma: 1, Nu: max(dof, 1)}.Quantile(0.975)
}

// Ratio is G*(q)/G*(ref) with the half-widths of the 95 % intervals of its
// magnitude and of the difference of the loss angles, from the joint
// covariance, so that what both have in common cancels. With
// w_i = ∂G*(q)/∂p_i /G*(q) − ∂G*(ref)/∂p_i /G*(ref), d ln|ratio| = Re w and the
// angle's change is Im w.
func (c *Compound) Ratio(q, ref Condition) (ratio complex128, magnitudeU95, angleU95 float64) {
	n := len(c.derived.params)
	g, g0 := make([]complex128, n), make([]complex128, n)
	v, v0 := c.Gradient(q, g), c.Gradient(ref, g0)
	ratio = v / v0
	re, im := make([]float64, n), make([]float64, n)
	for i := range g {
		if c.derived.params[i].kind == pSpecimen {
			continue // the factor of both; rounding would leave 1e-22 of it
		}
		w := g[i]/v - g0[i]/v0
		re[i], im[i] = real(w), imag(w)
	}
	t := c.Quantile()
	return ratio, t * c.Deviation(re) * cmplx.Abs(ratio), t * c.Deviation(im)
}
