package specimen

import "gonum.org/v1/gonum/integrate/quad"

// nodes of the quadrature along each of two directions. The strains are smooth
// but for points where they vanish; 32 nodes leave errors below 1e-5.
const nodes = 32

// gauss returns Gauss-Legendre nodes and weights on (0, 1).
func gauss() (x, w []float64) {
	x, w = make([]float64, nodes), make([]float64, nodes)
	quad.Legendre{}.FixedLocations(x, w, 0, 1)
	return x, w
}

// equivalent returns the energy-equivalent strain of a strain field,
//
//	γ_eq = ∫γ² dV / ∫γ dV,
//
// over the unit square: strain returns γ ≥ 0 and the weight dV/(du·dv), in any
// unit, at a point.
func equivalent(strain func(u, v float64) (gamma, weight float64)) float64 {
	x, w := gauss()
	var first, second float64
	for i, u := range x {
		for j, v := range x {
			g, dv := strain(u, v)
			dv *= w[i] * w[j]
			first += g * dv
			second += g * g * dv
		}
	}
	return second / first
}
