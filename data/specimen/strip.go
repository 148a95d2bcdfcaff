package specimen

import "math"

// Strip is a strip of rectangular section pulled along its length.
//
//	K* = E*·wh/L,   E* = 2(1+ν)G*,   γ_eq = √(2(1+ν))·x/L
type Strip struct {
	Length    float64 // m, free length between the clamps
	Width     float64 // m
	Thickness float64 // m
	Poisson   float64 // ν, 0.5 for rubber; the zero value is 0
}

var _ Shape = Strip{}

// Name returns "tension strip".
func (s Strip) Name() string { return "tension strip" }

// Validate refuses impossible dimensions.
func (s Strip) Validate() error {
	f := faults{shape: s.Name()}
	f.length(length, s.Length)
	f.length(width, s.Width)
	f.length(thickness, s.Thickness)
	f.poisson(s.Poisson)
	l := s.linear()
	return f.scale(l.c, l.strain)
}

func (s Strip) linear() linear {
	e := 2 * (1 + s.Poisson)
	return linear{e * s.Width * s.Thickness / s.Length, math.Sqrt(e) / s.Length}
}

// Rotates returns false.
func (s Strip) Rotates() bool { return false }

// Stiffness returns K* in N/m.
func (s Strip) Stiffness(g complex128) complex128 { return s.linear().stiffness(g) }

// Modulus returns G* in Pa.
func (s Strip) Modulus(k complex128) complex128 { return s.linear().modulus(k) }

// Strain returns the energy-equivalent shear strain.
func (s Strip) Strain(displacement float64) float64 { return displacement * s.linear().strain }

// Displacement returns the displacement of the clamp in m.
func (s Strip) Displacement(strain float64) float64 { return strain / s.linear().strain }

// Sensitivity lists the three lengths and Poisson's ratio.
func (s Strip) Sensitivity(complex128) []Dimension {
	return []Dimension{
		{length, s.Length, "m", 1}, {width, s.Width, "m", -1}, {thickness, s.Thickness, "m", -1},
		{poisson, s.Poisson, "1", -s.Poisson / (1 + s.Poisson)},
	}
}

// Checks wants a strip that the clamps do not stiffen.
func (s Strip) Checks() []Check {
	list := append(metres(s.Sensitivity(0)), compressible(s.Poisson)...)
	if r := s.Length / math.Max(s.Width, s.Thickness); r < 4 {
		list = append(list, Check{"length over width", r, "at least 4, or the clamps hold the width and stiffen the strip", commonPractice, Doubt})
	}
	return list
}
