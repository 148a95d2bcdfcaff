package mount

import "math"

// Bush is a rubber tube bonded to an inner and an outer sleeve and moved along
// its axis,
//
//	K* = 2πG*·L/ln(b/a),
//
// exact for a long tube with free ends neglected. The shear strain
// x/(r·ln(b/a)) falls from the inner to the outer sleeve; the strain at which a
// modulus that falls with strain is taken is the energy-weighted one
//
//	γ = ∫γ(r)²dV / ∫γ(r)dV = x/(b−a),
//
// which stores the right energy for a modulus that falls like 1/γ (derived, our
// own rule).
type Bush struct {
	Inner  float64 // a, m, radius of the inner sleeve
	Outer  float64 // b, m, radius inside the outer sleeve
	Length float64 // L, m
}

// Axial returns the stiffness along the axis in N/m at the shear modulus g.
func (b Bush) Axial(g complex128) complex128 {
	return g * complex(2*math.Pi*b.Length/math.Log(b.Outer/b.Inner), 0)
}

// Torsion returns the stiffness in torsion about the axis in N·m/rad at the
// shear modulus g, 4πGL/(1/a² − 1/b²), exact for a long tube.
func (b Bush) Torsion(g complex128) complex128 {
	return g * complex(4*math.Pi*b.Length/(1/(b.Inner*b.Inner)-1/(b.Outer*b.Outer)), 0)
}

// Radial returns the bounds of the radial stiffness in N/m at the shear modulus
// g of an incompressible rubber: of a tube so short that its ends move freely
// (plane stress), and of one so long that nothing moves along it (plane
// strain),
//
//	short: K = GL·80π(a²+b²)/[25(a²+b²)ln(b/a) − 9(b²−a²)]
//	long:  K = GL· 4π(a²+b²)/[  (a²+b²)ln(b/a) −  (b²−a²)]
//
// after Adkins and Gent (1954); value from memory, confirmed by solving both
// plane problems. A real bush lies between; it should be entered as measured.
func (b Bush) Radial(g complex128) (short, long complex128) {
	sum, difference := b.Inner*b.Inner+b.Outer*b.Outer, b.Outer*b.Outer-b.Inner*b.Inner
	l := math.Log(b.Outer / b.Inner)
	gl := g * complex(b.Length, 0)
	return gl * complex(80*math.Pi*sum/(25*sum*l-9*difference), 0), gl * complex(4*math.Pi*sum/(sum*l-difference), 0)
}
