package specimen

import "math"

// Section is the cross-section of a pad between plates, a [Circle] or a
// [Rectangle].
type Section interface {
	area() float64
	// gyration is k², the square of the radius of gyration about the axis across
	// the shear.
	gyration() float64
	// side is what ISO 4664-1 compares with the thickness.
	side() (name string, value float64)
	// shapeFactor is the loaded by the force-free area of a pad of thickness t.
	shapeFactor(t float64) float64
	// sides lists the dimensions with ∂ln/∂ln of area, k² and shape factor.
	sides() []slope
	// across maps u in (0, 1) to a distance y > 0 from the axis across the shear
	// and a weight proportional to the area there times dy/du.
	across(u float64) (y, weight float64)
}

// slope is how a section's properties follow one of its dimensions.
type slope struct {
	name                        string
	value                       float64
	area, gyration, shapeFactor float64
}

// Circle is a circular section.
type Circle struct {
	Diameter float64 // m
}

// Rectangle is a rectangular section.
type Rectangle struct {
	Length float64 // m, along the shear where the pad is sheared
	Width  float64 // m
}

var (
	_ Section = Circle{}
	_ Section = Rectangle{}
)

func (c Circle) area() float64                 { return math.Pi / 4 * c.Diameter * c.Diameter }
func (c Circle) gyration() float64             { return c.Diameter * c.Diameter / 16 }
func (c Circle) side() (string, float64)       { return diameter, c.Diameter }
func (c Circle) shapeFactor(t float64) float64 { return c.Diameter / (4 * t) }
func (c Circle) sides() []slope                { return []slope{{diameter, c.Diameter, 2, 2, 1}} }

// across puts y = R sin θ, where the chord times dy is 2R²cos²θ dθ.
func (c Circle) across(u float64) (y, weight float64) {
	sin, cos := math.Sincos(u * math.Pi / 2)
	return c.Diameter / 2 * sin, cos * cos
}

func (r Rectangle) area() float64     { return r.Length * r.Width }
func (r Rectangle) gyration() float64 { return r.Length * r.Length / 12 }

func (r Rectangle) side() (string, float64) {
	if r.Width < r.Length {
		return width, r.Width
	}
	return length, r.Length
}

func (r Rectangle) shapeFactor(t float64) float64 {
	return r.Length * r.Width / (2 * t * (r.Length + r.Width))
}

func (r Rectangle) sides() []slope {
	sum := r.Length + r.Width
	return []slope{
		{length, r.Length, 1, 2, r.Width / sum},
		{width, r.Width, 1, 0, r.Length / sum},
	}
}

func (r Rectangle) across(u float64) (y, weight float64) { return u * r.Length / 2, 1 }
