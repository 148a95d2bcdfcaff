package causal

import (
	"math"
	"math/cmplx"
)

// The relaxation times of both fits are fixed: evenly spaced in log τ from one
// decade below 1/ω_max to one decade above 1/ω_min, two a decade, with an
// equilibrium modulus as one more parameter.
//
// A window without the extra decades, as is usual for impedances, leaves more
// than 10 % of residual on exact data of a rubber, whose spectrum does not end
// where the measurement does.
//
// The number of parameters must not exceed a third of the rows (two rows a
// frequency), or a fit would follow the noise and any mistake with it. Short
// sweeps therefore get fewer times. Spread over the whole range these would
// stand too far apart, so the range may shrink with them: of the extensions
// below that is taken which describes the power law of the data's own mean
// slope best. What it leaves there is the floor of the method,
//
//	floor = max |r_i|  of the non-negative fit to (iω)^α,  α = (2/π)·mean δ,
//
// for magnitude and phase apart. It is added to the noise in quadrature, so
// that the method's own error is never read as the instrument's. The power law
// as the measure and the largest residual instead of the rms are this package's
// own rule.
const perDecade = 2.0

var beyond = []float64{1, 0.75, 0.5, 0.25} // decades beyond the window, either side

// lattice is a set of relaxation times and what it cannot describe.
type lattice struct {
	tau              []float64 // s, rising
	basis            []complex128
	magnitude, phase float64 // floor: relative, rad
}

// newLattice chooses the times for moduli with noise sm and sd.
func newLattice(frequency []float64, modulus []complex128, sm, sd float64) (lattice, bool) {
	n := len(frequency)
	delta := 0.0
	for _, g := range modulus {
		delta += cmplx.Phase(g) / float64(n)
	}
	middle := math.Sqrt(frequency[0] * frequency[n-1])
	law := make([]complex128, n)
	for i, f := range frequency {
		law[i] = cmplx.Pow(complex(0, f/middle), complex(2/math.Pi*delta, 0))
	}
	var best lattice
	least := math.Inf(1)
	for _, b := range beyond {
		tau, full := times(frequency, b)
		c := lattice{tau: tau, basis: basis(frequency, tau)}
		sol, ok := newSystem(frequency, law, c.basis, sm, sd).nonNegative(nil, 0)
		if ok && sol.sum < least {
			least, best = sol.sum, c
			best.magnitude, best.phase = worst(sol.residual[:n]), worst(sol.residual[n:])
		}
		if full {
			break // enough parameters: the widest range stands
		}
	}
	return best, len(best.tau) > 0
}

// times returns the relaxation times for an extension of b decades, and
// whether there are two a decade.
func times(frequency []float64, b float64) (tau []float64, full bool) {
	n := len(frequency)
	slow := math.Log10(1/omega(frequency[0])) + b
	fast := math.Log10(1/omega(frequency[n-1])) - b
	modes := int(math.Round(perDecade*(slow-fast))) + 1
	most := 2*n/3 - 1
	full = modes <= most
	modes = min(modes, most)
	tau = make([]float64, modes)
	for k := range tau {
		tau[k] = math.Pow(10, fast+(slow-fast)*float64(k)/float64(modes-1))
	}
	return tau, full
}

// basis returns what a unit of each parameter adds to G*: first the
// equilibrium modulus, then a mode for each relaxation time. Element (i, k) is
// at i+k·n.
func basis(frequency, tau []float64) []complex128 {
	n := len(frequency)
	c := make([]complex128, n*(len(tau)+1))
	for i := range n {
		c[i] = 1
	}
	for k, t := range tau {
		for i, f := range frequency {
			x := omega(f) * t
			c[i+(k+1)*n] = complex(x*x/(1+x*x), x/(1+x*x))
		}
	}
	return c
}
