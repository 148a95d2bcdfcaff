package changes

import (
	"math"
	"math/cmplx"

	"phaselag/models"
)

// value of a change among theta; 0, no change, where it is not active.
func (c *Comparison) value(theta []float64, k Kind) float64 {
	for i, v := range c.active {
		if v == k {
			return theta[i]
		}
	}
	return 0
}

// moved is the approved compound's condition that answers for the polymer of the batch
// at q.
func (c *Comparison) moved(q models.Condition) models.Condition {
	q.Temperature -= c.value(c.theta, Temperature)
	return q
}

// own replaces a strain that is not stated by the isotherms' own.
func own(c *models.Compound, q models.Condition) models.Condition {
	if math.IsNaN(q.Strain) {
		q.Strain = float64(c.Domain.OwnStrain) / 100
	}
	return q
}

// batch is G* of the batch at q for changes theta, at the approved compound's p̂.
func (c *Comparison) batch(q models.Condition, theta []float64) complex128 {
	q = own(c.approved, q)
	cold := q
	cold.Temperature -= c.value(theta, Temperature)
	polymer, _ := c.approved.Parts(cold)
	// The rubber's elasticity is that of its own temperature.
	polymer *= complex(c.approved.VerticalShift(q.Temperature)/c.approved.VerticalShift(cold.Temperature), 0)
	soft := q
	if !math.IsNaN(soft.Strain) {
		soft.Strain /= math.Exp(c.value(theta, Critical))
	}
	own, term := c.approved.Parts(soft)
	if c.approved.Amplitude.Coupling == models.Scaling && own != 0 {
		term *= polymer / own
	}
	h := polymer + complex(math.Exp(c.value(theta, Filler)), 0)*term
	magnitude := cmplx.Abs(h) * math.Exp(c.value(theta, Stiffness))
	delta := math.Atan(math.Exp(c.value(theta, Loss)) * imag(h) / real(h))
	return cmplx.Rect(magnitude, delta)
}

// predict is batch with the approved compound's parameters at p̂ + Lz, to first order.
func (c *Comparison) predict(q models.Condition, theta, z []float64) complex128 {
	v := c.batch(q, theta)
	if len(z) == 0 {
		return v
	}
	w := whitened(c.approved, c.lower, c.moved(q))
	var d complex128
	for i, x := range z {
		d += w[i] * complex(x, 0)
	}
	return v * cmplx.Exp(d)
}

// slope is ∂ln G*/∂θ_i by central differences.
func (c *Comparison) slope(q models.Condition, i int) complex128 {
	h := 1e-4
	if c.active[i] == Temperature {
		h = 1e-2
	}
	up, down := append([]float64{}, c.theta...), append([]float64{}, c.theta...)
	up[i] += h
	down[i] -= h
	return cmplx.Log(c.batch(q, up)/c.batch(q, down)) / complex(2*h, 0)
}

// warmer is ∂ln G*/∂T.
func (c *Comparison) warmer(q models.Condition) complex128 {
	const h = 1e-2
	up, down := q, q
	up.Temperature += h
	down.Temperature -= h
	return cmplx.Log(c.batch(up, c.theta)/c.batch(down, c.theta)) / complex(2*h, 0)
}

// whitened is Lᵀ∂ln G*/∂p of a compound at a condition.
func whitened(c *models.Compound, lower [][]float64, q models.Condition) []complex128 {
	n := len(lower)
	out := make([]complex128, n)
	if n == 0 {
		return out
	}
	g := make([]complex128, n)
	v := c.Gradient(q, g)
	for i, gi := range g {
		if gi == 0 {
			continue
		}
		for k, l := range lower[i] {
			out[k] += gi / v * complex(l, 0)
		}
	}
	return out
}

func scaledBy(w []complex128, v complex128) []complex128 {
	out := make([]complex128, len(w))
	for i, x := range w {
		out[i] = x * v
	}
	return out
}

// root is the compound's covariance root without the rows of the named parameters, which
// cancel.
func root(c *models.Compound, cancelled map[string]bool) [][]float64 {
	out := make([][]float64, len(c.Uncertainty.Parameters))
	for i, name := range c.Uncertainty.Parameters {
		if !cancelled[name] {
			out[i] = c.Uncertainty.Cholesky[i]
		}
	}
	return out
}
