package mount

import "math"

// Bush is a rubber tube bonded to an inner and an outer sleeve. It is moved along
// its axis (axial), turned about it (torsional), moved across it (radial) or
// tilted about its middle (conical). Stiffness is in N/m, of a turned or tilted
// bush in N·m/rad.
//
// Axial and torsional stiffness are exact for a long tube, with what the free ends
// do left out:
//
//	axial      K = 2πGL/ln(b/a),              γ(r) = x/(r·ln(b/a))
//	torsional  K = 4πGL/(1/a² − 1/b²),        γ(r) = 2θ/(r²(1/a² − 1/b²))
//
// and the strains at which the modulus is taken (equivalent.go) are closed forms,
//
//	axial      γ_eq = x/(√(ab)·ln(b/a))
//	torsional  ln γ_eq = ln[2θ/(1/a²−1/b²)] − 2·(ln a/a² − ln b/b²)/(1/a² − 1/b²) − 1.
//
// Radial and conical stiffness: radial.go.
type Bush struct {
	Inner  float64 // a, m, radius of the inner sleeve
	Outer  float64 // b, m, radius inside the outer sleeve
	Length float64 // L, m
	Way    Way     // how it is moved
}

// Way is how a bush is moved.
type Way int

// The ways; [Torsional] and [Conical] are rotations.
const (
	Axial Way = iota
	Torsional
	Radial
	Conical
)

// ways are their names in mount files.
var ways = []string{"axial", "torsional", "radial", "conical"}

// String returns the name in mount files.
func (w Way) String() string {
	if w < 0 || int(w) >= len(ways) {
		return "unknown"
	}
	return ways[w]
}

// Rotates says whether the stiffness is in N·m/rad.
func (w Way) Rotates() bool { return w == Torsional || w == Conical }

// Axial returns the stiffness along the axis in N/m at the shear modulus g.
func (b Bush) Axial(g complex128) complex128 {
	return g * complex(2*math.Pi*b.Length/math.Log(b.Outer/b.Inner), 0)
}

// Torsion returns the stiffness in torsion about the axis in N·m/rad at the
// shear modulus g.
func (b Bush) Torsion(g complex128) complex128 {
	return g * complex(4*math.Pi*b.Length/b.inverseSquares(), 0)
}

// inverseSquares returns 1/a² − 1/b².
func (b Bush) inverseSquares() float64 { return 1/(b.Inner*b.Inner) - 1/(b.Outer*b.Outer) }

// Stiffness returns the stiffness in the bush's way of moving at the shear modulus g;
// that of a radial or conical bush is between the bounds (radial.go).
func (b Bush) Stiffness(g complex128) complex128 {
	switch b.Way {
	case Torsional:
		return b.Torsion(g)
	case Radial:
		return b.RadialBetween(g)
	case Conical:
		return b.ConicalBetween(g)
	}
	return b.Axial(g)
}

// strainPer returns γ_eq for a displacement of 1 m or an angle of 1 rad.
func (b Bush) strainPer() float64 {
	switch b.Way {
	case Torsional:
		// In units of a, for the sake of extreme dimensions.
		r := b.Outer / b.Inner
		d := 1 - 1/(r*r)
		return math.Exp(math.Log(2/d) + 2*math.Log(r)/(r*r)/d - 1)
	case Radial:
		return b.acrossStrain(b.pressure())
	case Conical:
		// γ = z·θ·(that across), z² the weight along the axis: ln z has the mean
		// ln(L/2) − 1/3.
		return b.acrossStrain(b.tiltPressure()) * b.Length / 2 * math.Exp(-1.0/3)
	}
	return 1 / (math.Sqrt(b.Inner*b.Outer) * math.Log(b.Outer/b.Inner))
}
