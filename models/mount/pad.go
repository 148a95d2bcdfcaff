package mount

import "math"

// Pad is one layer of rubber between two rigid plates that stay parallel.
//
// Its stiffness in shear is that of simple shear, and with the bending of the
// pad as a beam guided at both ends, E = 3G,
//
//	K* = G*·(A/t)/(1 + t²/(36 k²)),     k² = I/A,
//
// from t/K = t/(GA) + t³/(12·3G·A·k²). Its stiffness when pressed is
//
//	K_c* = E_c·A/t,     E_c = 3G·(1 + 2κS²),     1/E_c' = 1/E_c + 1/B
//
// with the shape factor S (loaded by force-free area), the coefficient κ (1 for
// unfilled rubber, less for filled) and the bulk modulus B; after Gent and
// Lindley (1959), value from memory; other books write β for 2κ. A long strip, and a ring, which is a strip
// bent round, cannot give way along its length:
//
//	E_c = (4/3)·3G·(1 + κS²),     S = b/(2t), of a ring (D − d)/(4t)
//
// (Gent and Lindley, value from memory; at S near 0 the 4/3 is that of plane
// strain). Under a static load the tangent of loadcurve.go takes the place of
// E_c. A thick pad in shear leans under load: that softening is left out. The
// real and the imaginary part are shaped by the same factors.
type Pad struct {
	Area      float64 // m²
	Thickness float64 // m
	Length    float64 // m, along the shear; NaN if not stated
	Width     float64 // m; NaN if not stated
	Diameter  float64 // m; NaN if not stated; of a ring the outer one
	Inner     float64 // m, inner diameter of a ring; 0 for a disc
	Strip     bool    // a long strip Width wide; a ring need not say so
	Bending   bool    // subtract bending; needs Length or Diameter
	// Compression is the coefficient κ of E_c; NaN if not stated.
	Compression float64
	Bulk        float64 // Pa; NaN: incompressible
	Pressed     bool    // moved along its normal instead of along its faces
}

// Shear returns the stiffness in shear in N/m at the shear modulus g in Pa.
func (p Pad) Shear(g complex128) complex128 {
	return g * complex(p.Area/p.Thickness*p.bending(), 0)
}

// bending returns the factor of bending, 1 where it is not asked for.
func (p Pad) bending() float64 {
	if !p.Bending {
		return 1
	}
	return 1 / (1 + p.Thickness*p.Thickness/(36*p.gyration()))
}

// gyration returns k², the square of the radius of gyration of the section
// about the axis across the shear; NaN if the section is not stated.
func (p Pad) gyration() float64 {
	if !math.IsNaN(p.Diameter) {
		return (p.Diameter*p.Diameter + p.Inner*p.Inner) / 16
	}
	return p.Length * p.Length / 12
}

// ShapeFactor returns loaded by force-free area of the unloaded pad; NaN if the
// section is not stated.
func (p Pad) ShapeFactor() float64 {
	switch {
	case !math.IsNaN(p.Diameter):
		return (p.Diameter - p.Inner) / (4 * p.Thickness)
	case p.Strip:
		return p.Width / (2 * p.Thickness)
	}
	return p.Length * p.Width / (2 * p.Thickness * (p.Length + p.Width))
}

// pressing returns lead and q of E_c = lead·G·(1 + q/λ²), λ the height over the
// unloaded one: the shape factor is that of the loaded height, S/λ.
func (p Pad) pressing() (lead, q float64) {
	s := p.ShapeFactor()
	if p.Strip || p.Inner > 0 {
		return 4, p.Compression * s * s
	}
	return 3, 2 * p.Compression * s * s
}

// Press returns the stiffness of the unloaded pad when pressed in N/m at the
// shear modulus g in Pa, and its derivative by g in m.
func (p Pad) Press(g complex128) (k, derivative complex128) { return p.PressAt(g, 1) }

// PressAt is Press of a pad that a static load holds at stretch times its
// unloaded height: the tangent there.
func (p Pad) PressAt(g complex128, stretch float64) (k, derivative complex128) {
	shape := complex(p.Area/p.Thickness, 0)
	c := complex(p.stiffening(stretch), 0)
	if math.IsNaN(p.Bulk) {
		return c * g * shape, c * shape
	}
	q := 1 / (1 + c*g/complex(p.Bulk, 0))
	return c * g * q * shape, c * q * q * shape
}
