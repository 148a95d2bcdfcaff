package specimen

import (
	"math"
	"math/cmplx"
)

// UnfilledCoefficient is the k of E_c = E0(1+2kS²) for unfilled rubber and round,
// square or moderately oblong blocks. Filled rubber has less: 0.5 to 0.9 between
// 75 and 30 IRHD. Gent and Lindley (1959); values from memory.
const UnfilledCoefficient = 1.0

// Bonded is a cylinder or a block bonded to two rigid plates and pressed
// (ISO 7743, method B).
//
//	E_c = E0·(1 + 2kS²),  E0 = 3G,   S = loaded / force-free area
//	1/K = 1/K1 + 1/K2,    K1 = E_c·A/t,  K2 = B·A/t
//
// with the bulk modulus B real. S = d/(4t), or ab/(2t(a+b)). Solved for G* in
// complex numbers, G* = t/(3A(1+2kS²))·K*/(1 − K*/K2); a K* whose K1 would not
// have a positive storage part (stiffer than the bulk allows) has no modulus.
//
// The strain is γ_eq = ε·√(E_c/G) with ε = x/t; that the bulk takes the share
// E_c/(E_c+B) of ε is left out, so that thin pads' strains come out too high.
type Bonded struct {
	Section     Section
	Thickness   float64 // m, between the plates
	Coefficient float64 // k; [UnfilledCoefficient] or the compound's own; 0: no stiffening by shape
	Bulk        float64 // B, Pa; +Inf: incompressible
}

var _ Shape = Bonded{}

// Name returns "bonded compression".
func (b Bonded) Name() string { return "bonded compression" }

// Validate refuses impossible dimensions, coefficients and bulk moduli.
func (b Bonded) Validate() error {
	f := faults{shape: b.Name()}
	f.section(b.Section)
	f.length(thickness, b.Thickness)
	if !(b.Coefficient >= 0) || math.IsInf(b.Coefficient, 0) {
		f.add("1 for unfilled rubber, less for filled", "compression coefficient must be a finite number of at least 0, not %g", b.Coefficient)
	}
	if !(b.Bulk > 0) {
		f.add("about 1e9 Pa for rubber, +Inf for incompressible", "bulk modulus must be above zero in Pa, not %g", b.Bulk)
	}
	if f.err != nil {
		return f.err
	}
	l := b.linear()
	return f.scale(l.c, l.strain)
}

// ShapeFactor returns S.
func (b Bonded) ShapeFactor() float64 { return b.Section.shapeFactor(b.Thickness) }

// stiffening returns E_c/G.
func (b Bonded) stiffening() float64 {
	s := b.ShapeFactor()
	return 3 * (1 + 2*b.Coefficient*s*s)
}

// linear is the piece without the bulk part.
func (b Bonded) linear() linear {
	f := b.stiffening()
	return linear{f * b.Section.area() / b.Thickness, math.Sqrt(f) / b.Thickness}
}

// softness returns 1/K2 in m/N.
func (b Bonded) softness() complex128 {
	return complex(b.Thickness/b.Section.area()/b.Bulk, 0)
}

// Rotates returns false.
func (b Bonded) Rotates() bool { return false }

// Stiffness returns K* in N/m.
func (b Bonded) Stiffness(g complex128) complex128 {
	k1 := b.linear().stiffness(g)
	return k1 / (1 + k1*b.softness())
}

// Modulus returns G* in Pa; NaN where k is stiffer than the bulk allows.
func (b Bonded) Modulus(k complex128) complex128 {
	k1 := k / (1 - k*b.softness())
	if real(k) > 0 && !(real(k1) > 0) {
		return cmplx.NaN()
	}
	return b.linear().modulus(k1)
}

// Strain returns the energy-equivalent shear strain.
func (b Bonded) Strain(displacement float64) float64 { return displacement * b.linear().strain }

// Displacement returns the displacement of the plates in m.
func (b Bonded) Displacement(strain float64) float64 { return strain / b.linear().strain }

// Sensitivity lists thickness, sides, coefficient and, if finite, bulk modulus.
// The bulk also turns the phase, by the imaginary part of E_c/B times the error
// of area and thickness; that is left out.
func (b Bonded) Sensitivity(g complex128) []Dimension {
	s := b.ShapeFactor()
	kss := 2 * b.Coefficient * s * s
	part := kss / (1 + kss) // of the stiffening in E_c
	lean := 0.0             // E_c/B
	if !math.IsInf(b.Bulk, 1) {
		lean = b.stiffening() * real(g) / b.Bulk
	}
	list := []Dimension{{thickness, b.Thickness, "m", 1 + lean + 2*part}}
	for _, d := range b.Section.sides() {
		list = append(list, Dimension{d.name, d.value, "m", -(1+lean)*d.area - 2*part*d.shapeFactor})
	}
	if b.Coefficient > 0 {
		list = append(list, Dimension{coefficient, b.Coefficient, "1", -part})
	}
	if !math.IsInf(b.Bulk, 1) {
		list = append(list, Dimension{bulk, b.Bulk, "Pa", -lean})
	}
	return list
}

// Checks looks at the shape factor, the sides and the coefficient.
func (b Bonded) Checks() []Check {
	list := metres(b.Sensitivity(0))
	s := b.ShapeFactor()
	part := 2 * b.Coefficient * s * s
	part /= 1 + part
	if s < 0.25 {
		list = append(list, Check{"shape factor", s, "at least 0.25, or the piece buckles", commonPractice, Doubt})
	}
	if s > 3 && math.IsInf(b.Bulk, 1) {
		list = append(list, Check{"shape factor", s, "at most 3, or a bulk modulus: at G = 1 MPa and B = 1 GPa the bulk softens by over 5 %", derived, Doubt})
	}
	if r, ok := b.Section.(Rectangle); ok {
		if ratio := math.Max(r.Length, r.Width) / math.Min(r.Length, r.Width); ratio > 3 {
			list = append(list, Check{"side over side", ratio, "at most 3; a long strip is stiffer than a block, 4/3 at S near 0", commonPractice, Doubt})
		}
	}
	if b.Coefficient == UnfilledCoefficient && part > 0.1 {
		list = append(list, Check{coefficient, b.Coefficient, "the compound's own: 1 is for unfilled rubber, filled rubber has less", "Gent and Lindley (1959)", Note})
	}
	return list
}
