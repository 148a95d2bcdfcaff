package specimen

import "math"

// Plates is a disc that sticks to two parallel plates, one of which oscillates
// about the axis.
//
//	K* = πG*R⁴/(2h),      γ_eq = e^(−1/4)·θR/h
//
// in N·m/rad. Rotational instruments mostly state the strain at the rim, θR/h: 28 %
// more than this one.
type Plates struct {
	Diameter  float64 // m, of the disc
	Thickness float64 // m, h: the gap between the plates
}

var _ Shape = Plates{}

// Name returns "parallel plates".
func (p Plates) Name() string { return "parallel plates" }

// Validate refuses impossible dimensions.
func (p Plates) Validate() error {
	f := faults{shape: p.Name()}
	f.length(diameter, p.Diameter)
	f.length(thickness, p.Thickness)
	l := p.linear()
	return f.scale(l.c, l.strain)
}

func (p Plates) linear() linear {
	radius := p.Diameter / 2
	return linear{math.Pi / 2 * radius * radius * radius * radius / p.Thickness, math.Exp(-0.25) * radius / p.Thickness}
}

// Rotates returns true.
func (p Plates) Rotates() bool { return true }

// Stiffness returns K* in N·m/rad.
func (p Plates) Stiffness(g complex128) complex128 { return p.linear().stiffness(g) }

// Modulus returns G* in Pa.
func (p Plates) Modulus(k complex128) complex128 { return p.linear().modulus(k) }

// Strain returns the energy-equivalent shear strain at an angle in rad.
func (p Plates) Strain(displacement float64) float64 { return displacement * p.linear().strain }

// Displacement returns the angle in rad.
func (p Plates) Displacement(strain float64) float64 { return strain / p.linear().strain }

// Sensitivity lists diameter and gap.
func (p Plates) Sensitivity(complex128) []Dimension {
	return []Dimension{{diameter, p.Diameter, "m", -4}, {thickness, p.Thickness, "m", 1}}
}

// Checks wants a flat disc.
func (p Plates) Checks() []Check {
	list := metres(p.Sensitivity(0))
	if r := p.Diameter / p.Thickness; r < 4 {
		list = append(list, Check{"diameter over thickness", r, "at least 4, or a thick disc tilts and bulges under its clamping force", commonPractice, Note})
	}
	return list
}
