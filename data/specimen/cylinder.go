package specimen

import "math"

// Cylinder is a solid or hollow cylinder twisted about its axis between ends
// that turn as rigid plates.
//
//	K* = πG*(R⁴−r⁴)/(2L),      γ_eq = (θ/L)·R·e^(−1/4)·q^(−q⁴/(1−q⁴)),   q = r/R
//
// in N·m/rad; exact for any length, since a circular section does not warp. The
// strain is that at 0.779 of the radius of a solid cylinder.
type Cylinder struct {
	Length        float64 // m, between the ends
	Diameter      float64 // m
	InnerDiameter float64 // m; 0: solid
}

var _ Shape = Cylinder{}

// Name returns "torsion cylinder".
func (c Cylinder) Name() string { return "torsion cylinder" }

// Validate refuses impossible dimensions.
func (c Cylinder) Validate() error {
	f := faults{shape: c.Name()}
	f.length(length, c.Length)
	f.length(diameter, c.Diameter)
	if !(c.InnerDiameter >= 0 && c.InnerDiameter < c.Diameter) {
		f.add("0 for a solid cylinder", "inner diameter must lie between 0 and the diameter %g, in m, not be %g", c.Diameter, c.InnerDiameter)
	}
	l := c.linear()
	return f.scale(l.c, l.strain)
}

// linear writes 1−q⁴ as (1−q)(1+q)(1+q²), so that thin walls lose no digits.
func (c Cylinder) linear() linear {
	radius, q := c.Diameter/2, c.InnerDiameter/c.Diameter
	rest := (1 - q) * (1 + q) * (1 + q*q)
	mean := -0.25 // of ln(r/R), weighted by r³
	if q > 0 {
		mean -= q * q * q * q * math.Log(q) / rest
	}
	return linear{
		math.Pi / 2 * radius * radius * radius * radius * rest / c.Length,
		radius * math.Exp(mean) / c.Length,
	}
}

// Rotates returns true.
func (c Cylinder) Rotates() bool { return true }

// Stiffness returns K* in N·m/rad.
func (c Cylinder) Stiffness(g complex128) complex128 { return c.linear().stiffness(g) }

// Modulus returns G* in Pa.
func (c Cylinder) Modulus(k complex128) complex128 { return c.linear().modulus(k) }

// Strain returns the energy-equivalent shear strain at an angle in rad.
func (c Cylinder) Strain(displacement float64) float64 { return displacement * c.linear().strain }

// Displacement returns the angle in rad.
func (c Cylinder) Displacement(strain float64) float64 { return strain / c.linear().strain }

// Sensitivity lists length, diameter and, of a hollow one, the inner diameter.
func (c Cylinder) Sensitivity(complex128) []Dimension {
	q := c.InnerDiameter / c.Diameter
	rest := (1 - q) * (1 + q) * (1 + q*q)
	list := []Dimension{{length, c.Length, "m", 1}, {diameter, c.Diameter, "m", -4 / rest}}
	if q > 0 {
		list = append(list, Dimension{innerDiameter, c.InnerDiameter, "m", 4 * q * q * q * q / rest})
	}
	return list
}

// Checks doubts thin walls.
func (c Cylinder) Checks() []Check {
	list := metres(c.Sensitivity(0))
	if q := c.InnerDiameter / c.Diameter; q > 0.9 {
		list = append(list, Check{"inner over outer diameter", q, "at most 0.9, or the wall wrinkles and its thickness decides", commonPractice, Doubt})
	}
	return list
}
