package specimen

import "math"

// Lubricated is a cylinder or a block pressed between plates on which it slides
// without friction (ISO 7743, method A): a homogeneous uniaxial compression.
//
//	K* = E*·A/t,   E* = 2(1+ν)G*,   γ_eq = √(2(1+ν))·x/t
type Lubricated struct {
	Section   Section
	Thickness float64 // m, between the plates
	Poisson   float64 // ν, 0.5 for rubber; the zero value is 0
}

var _ Shape = Lubricated{}

// Name returns "lubricated compression".
func (p Lubricated) Name() string { return "lubricated compression" }

// Validate refuses impossible dimensions.
func (p Lubricated) Validate() error {
	f := faults{shape: p.Name()}
	f.section(p.Section)
	f.length(thickness, p.Thickness)
	f.poisson(p.Poisson)
	if f.err != nil {
		return f.err
	}
	l := p.linear()
	return f.scale(l.c, l.strain)
}

func (p Lubricated) linear() linear {
	e := 2 * (1 + p.Poisson)
	return linear{e * p.Section.area() / p.Thickness, math.Sqrt(e) / p.Thickness}
}

// Rotates returns false.
func (p Lubricated) Rotates() bool { return false }

// Stiffness returns K* in N/m.
func (p Lubricated) Stiffness(g complex128) complex128 { return p.linear().stiffness(g) }

// Modulus returns G* in Pa.
func (p Lubricated) Modulus(k complex128) complex128 { return p.linear().modulus(k) }

// Strain returns the energy-equivalent shear strain.
func (p Lubricated) Strain(displacement float64) float64 { return displacement * p.linear().strain }

// Displacement returns the displacement of the plates in m.
func (p Lubricated) Displacement(strain float64) float64 { return strain / p.linear().strain }

// Sensitivity lists thickness, sides and Poisson's ratio.
func (p Lubricated) Sensitivity(complex128) []Dimension {
	list := []Dimension{{thickness, p.Thickness, "m", 1}}
	for _, d := range p.Section.sides() {
		list = append(list, Dimension{d.name, d.value, "m", -d.area})
	}
	return append(list, Dimension{poisson, p.Poisson, "1", -p.Poisson / (1 + p.Poisson)})
}

// Checks says what friction would do, and looks at the slenderness.
func (p Lubricated) Checks() []Check {
	list := append(metres(p.Sensitivity(0)), compressible(p.Poisson)...)
	s := p.Section.shapeFactor(p.Thickness)
	if s < 0.25 {
		list = append(list, Check{"shape factor", s, "at least 0.25, or the piece buckles", commonPractice, Doubt})
	}
	if up := 1 + 2*UnfilledCoefficient*s*s; up > 1.02 {
		list = append(list, Check{"stiffening if the faces stuck", up, "1, by lubricant that lasts through the test", derived, Note})
	}
	return list
}
