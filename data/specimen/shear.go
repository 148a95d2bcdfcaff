package specimen

import "math"

// Arrangement is how the rubber layers of a shear test piece are joined.
type Arrangement int

// The arrangements. In a double shear piece two layers carry the force side by
// side. In a quadruple shear piece (ISO 1827) two such pairs follow one another,
// so that a layer carries half the force and moves by half the displacement.
const (
	Single    Arrangement = 1
	Double    Arrangement = 2
	Quadruple Arrangement = 4
)

// layers returns how many layers stand side by side, and how many such groups
// follow one another.
func (a Arrangement) layers() (parallel, series float64) {
	switch a {
	case Single:
		return 1, 1
	case Double:
		return 2, 1
	case Quadruple:
		return 2, 2
	}
	return math.NaN(), math.NaN()
}

// Shear is one, two or four equal rubber layers between rigid plates that stay
// parallel, moved along the plates.
//
//	K* = G*·(A/t)·(p/s)·1/(1+q),      q = t²/(36 k²)  with Bending, else 0
//
// with p layers side by side and s such groups in a row; k is the radius of
// gyration of the section (d/4, or length/√12). The factor is that of a beam of
// E = 3G guided at both ends, t/(GA) + t³/(12·3G·A·k²); it holds for q well
// below 1.
//
// The strain of a layer without bending is x/(s·t). With bending it is
//
//	γ(z, y) = x/(s·t·(1+q))·√(1 + z²y²/(3k⁴))
//
// at z from mid-thickness and y from the middle of the section, since the normal
// strain Fzy/(3GAk²) counts √3 times; its mean square is (x/st)²/(1+q).
type Shear struct {
	Arrangement Arrangement // Single, Double or Quadruple
	Section     Section     // of one layer
	Thickness   float64     // m, of one layer
	Bending     bool        // take the bending of thick layers off
}

var _ Shape = Shear{}

// Name returns "single shear", "double shear" or "quadruple shear".
func (s Shear) Name() string {
	switch s.Arrangement {
	case Single:
		return "single shear"
	case Double:
		return "double shear"
	case Quadruple:
		return "quadruple shear"
	}
	return "shear"
}

// Validate refuses an unknown arrangement and impossible dimensions.
func (s Shear) Validate() error {
	f := faults{shape: s.Name()}
	if p, _ := s.Arrangement.layers(); math.IsNaN(p) {
		f.add("Single, Double or Quadruple", "%d layers are no known arrangement", int(s.Arrangement))
	}
	f.section(s.Section)
	f.length(thickness, s.Thickness)
	if f.err != nil {
		return f.err
	}
	l := s.linear()
	return f.scale(l.c, l.strain)
}

// softening returns q.
func (s Shear) softening() float64 {
	if !s.Bending {
		return 0
	}
	return s.Thickness * s.Thickness / (36 * s.Section.gyration())
}

func (s Shear) linear() linear {
	parallel, series := s.Arrangement.layers()
	q := s.softening()
	l := linear{
		c:      s.Section.area() / s.Thickness * parallel / series / (1 + q),
		strain: 1 / (series * s.Thickness * (1 + q)),
	}
	if s.Bending {
		k2 := s.Section.gyration()
		l.strain *= equivalent(func(u, v float64) (float64, float64) {
			y, weight := s.Section.across(v)
			zy := u * s.Thickness / 2 * y / k2
			return math.Sqrt(1 + zy*zy/3), weight
		})
	}
	return l
}

// Rotates returns false.
func (s Shear) Rotates() bool { return false }

// Stiffness returns K* in N/m.
func (s Shear) Stiffness(g complex128) complex128 { return s.linear().stiffness(g) }

// Modulus returns G* in Pa.
func (s Shear) Modulus(k complex128) complex128 { return s.linear().modulus(k) }

// Strain returns the shear strain of a layer.
func (s Shear) Strain(displacement float64) float64 { return displacement * s.linear().strain }

// Displacement returns the displacement of the whole piece in m.
func (s Shear) Displacement(strain float64) float64 { return strain / s.linear().strain }

// Sensitivity lists the thickness and the section's sides.
func (s Shear) Sensitivity(complex128) []Dimension {
	q := s.softening()
	b := q / (1 + q)
	list := []Dimension{{thickness, s.Thickness, "m", 1 + 2*b}}
	for _, d := range s.Section.sides() {
		list = append(list, Dimension{d.name, d.value, "m", -d.area - b*d.gyration})
	}
	return list
}

// Checks wants thin layers.
func (s Shear) Checks() []Check {
	list := metres(s.Sensitivity(0))
	name, side := s.Section.side()
	if side/s.Thickness < 4 {
		severity := Doubt
		if s.Bending {
			severity = Note
		}
		list = append(list, Check{name + " over thickness", side / s.Thickness, "at least 4, or the bending taken off", "ISO 4664-1", severity})
	}
	if q := s.softening(); q > 0.25 {
		list = append(list, Check{"share of bending in the softness", q / (1 + q), "at most 0.2, since the pad is hardly a beam", commonPractice, Doubt})
	}
	return list
}
