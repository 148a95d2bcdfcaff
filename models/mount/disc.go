package mount

import (
	"math"

	"phaselag/data/unit"
)

// Disc is a disc or a ring of rubber between two plates, twisted about its normal,
//
//	K* = πG*(R⁴ − r⁴)/(2t),     γ(ρ) = ρθ/t,
//
// exact, and the strain at which its modulus is taken (equivalent.go)
//
//	ln γ_eq = ln(θ/t) + (R⁴ ln R − r⁴ ln r)/(R⁴ − r⁴) − 1/4,
//
// e^(−1/4) = 0.779 of that at the rim of a solid disc.
type Disc struct {
	Outer     float64 // R, m
	Inner     float64 // r, m; 0 for a solid disc
	Thickness float64 // t, m
}

// Torsion returns the stiffness in N·m/rad at the shear modulus g.
func (d Disc) Torsion(g complex128) complex128 {
	r2, q2 := d.Outer*d.Outer, d.Inner*d.Inner
	return g * complex(math.Pi*(r2+q2)*(d.Outer+d.Inner)*(d.Outer-d.Inner)/(2*d.Thickness), 0)
}

// strainPer returns γ_eq for 1 rad.
func (d Disc) strainPer() float64 {
	q := d.Inner / d.Outer // in units of R
	mean := -0.25
	if q > 0 {
		q4 := math.Pow(q, 4)
		mean -= q4 * math.Log(q) / (1 - q4)
	}
	return d.Outer / d.Thickness * math.Exp(mean)
}

// disc reads a twisted disc or ring.
func (r *reader) disc(e entry, keys map[string]entry) *Disc {
	d := &Disc{Thickness: r.amount(keys, "thickness", unit.Length, false)}
	if _, ok := keys["thickness"]; !ok {
		r.fault(e.value, join(e.path, "thickness"), "missing", "the thickness of the rubber, for example 12 mm")
	}
	_, solid := keys["diameter"]
	_, outer := keys["outer_diameter"]
	_, inner := keys["inner_diameter"]
	switch {
	case solid && (outer || inner):
		r.fault(keys["diameter"].key, keys["diameter"].path, "beside outer_diameter and inner_diameter of a ring", "diameter: 50 mm, or outer_diameter: 60 mm and inner_diameter: 20 mm")
	case solid:
		d.Outer = r.amount(keys, "diameter", unit.Length, false) / 2
	case outer && inner:
		d.Outer = r.amount(keys, "outer_diameter", unit.Length, false) / 2
		if d.Inner = r.amount(keys, "inner_diameter", unit.Length, false) / 2; d.Inner >= d.Outer {
			r.fault(keys["outer_diameter"].value, keys["outer_diameter"].path, "must be greater than inner_diameter", "")
		}
	default:
		r.fault(e.value, join(e.path, "diameter"), "missing", "diameter: 50 mm, or outer_diameter: 60 mm and inner_diameter: 20 mm")
	}
	return d
}
