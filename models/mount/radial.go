package mount

import "math"

// A bush moved across its axis, or tilted
//
// Bounds. A bush so short that its ends move freely is in plane stress, one so
// long that nothing moves along it in plane strain; ν = ½:
//
//	short: K = GL·80π(a²+b²)/[25(a²+b²)ln(b/a) − 9(b²−a²)]
//	long:  K = GL· 4π(a²+b²)/[  (a²+b²)ln(b/a) −  (b²−a²)]
//
// after Adkins and Gent (1954); value from memory, confirmed by solving both plane
// problems. With complex potentials both are one (derived): with κ = 1 for plane
// strain, κ = 5/3 for plane stress, lengths in a, ρ = b/a,
//
//	u_r = (P+Q)cos θ,   u_θ = (Q−P)sin θ,
//	P = 2κA ln r − 2Br² + D,   Q = κBr² − A − C/r²,
//	B = −x/(2[κ²(1+ρ²)ln ρ − (ρ²−1)]),  C = −κBρ²,  A = κB(1+ρ²),  D = x + 2B,
//
// from which the strain at every point follows, and its mean (equivalent.go).
//
// Between them: a convention. What makes the long bush stiffer is the pressure that
// the rubber cannot get rid of over its ends. For a thin wall, w = b−a ≪ R =
// (a+b)/2, the pressure p of a bonded incompressible layer obeys
//
//	∇²p = −12G·u(φ)/w³,     p = 0 at z = ±L/2,
//
// with u = x cos φ moved across, u = θz cos φ tilted, so that of the pressure's share
// of the infinite length there remains (derived, exact for a thin wall)
//
//	radial   1 − tanh ξ/ξ,          conical   1 − 3(ξ coth ξ − 1)/ξ²,     ξ = L/(a+b).
//
// We use K = K_short + (K_long − K_short) times that at every wall. It has the
// right ends, and no other merit for thick walls: both bounds are given beside it,
// and a bush whose radial stiffness matters should be measured.
//
// Conical: every strip of the length dz resists with its radial stiffness at the
// arm z, so that K = K_radial·L²/12 with the bounds above (approximate: the axial
// shear of the tilted sleeve, about πGLa²(b²+a²)/(b²−a²), is left out; 12 % at
// a : b : L = 1 : 2 : 4, less for a longer bush).

// Radial returns the bounds of the radial stiffness in N/m at the shear modulus
// g of an incompressible rubber, of a short and of a long bush.
func (b Bush) Radial(g complex128) (short, long complex128) {
	sum, difference := b.Inner*b.Inner+b.Outer*b.Outer, b.Outer*b.Outer-b.Inner*b.Inner
	l := math.Log(b.Outer / b.Inner)
	gl := g * complex(b.Length, 0)
	return gl * complex(80*math.Pi*sum/(25*sum*l-9*difference), 0), gl * complex(4*math.Pi*sum/(sum*l-difference), 0)
}

// RadialBetween returns the radial stiffness in N/m of the bush's own length.
func (b Bush) RadialBetween(g complex128) complex128 {
	short, long := b.Radial(g)
	return short + complex(b.pressure(), 0)*(long-short)
}

// Conical returns the bounds of the stiffness in N·m/rad against tilting.
func (b Bush) Conical(g complex128) (short, long complex128) {
	short, long = b.Radial(g)
	arm := complex(b.Length*b.Length/12, 0)
	return short * arm, long * arm
}

// ConicalBetween returns the stiffness in N·m/rad against tilting of the bush's own
// length.
func (b Bush) ConicalBetween(g complex128) complex128 {
	short, long := b.Conical(g)
	return short + complex(b.tiltPressure(), 0)*(long-short)
}

// pressure returns 1 − tanh ξ/ξ.
func (b Bush) pressure() float64 {
	x := b.Length / (b.Inner + b.Outer)
	if x < 1e-3 {
		return x * x / 3
	}
	return 1 - math.Tanh(x)/x
}

// tiltPressure returns 1 − 3(ξ coth ξ − 1)/ξ².
func (b Bush) tiltPressure() float64 {
	x := b.Length / (b.Inner + b.Outer)
	if x < 0.03 { // the next term is below 1e-9 of this
		return x * x / 15 * (1 - x*x*2/21)
	}
	return 1 - 3*(x/math.Tanh(x)-1)/(x*x)
}

// plane is one of the two plane problems, lengths in a and x = a.
type plane struct{ kappa, a, b, c float64 }

func (b Bush) plane(kappa float64) plane {
	r2 := b.Outer / b.Inner * b.Outer / b.Inner
	scale := -1 / (kappa*kappa*(1+r2)*math.Log(r2) - 2*(r2-1))
	return plane{kappa, kappa * scale * (1 + r2), scale, -kappa * scale * r2}
}

// strain returns the amplitudes of γ over the angle: γ² = normal²cos²θ + shear²sin²θ.
func (p plane) strain(r float64) (normal, shear float64) {
	dP := 2*p.kappa*p.a/r - 4*p.b*r
	dQ := 2*p.kappa*p.b*r + 2*p.c/(r*r*r)
	q := p.kappa*p.b*r*r - p.a - p.c/(r*r)
	rr, tt := dP+dQ, 2*q/r
	zz := -rr - tt // 0 in plane strain
	return math.Sqrt(2 * (rr*rr + tt*tt + zz*zz)), math.Abs(dQ - dP - 2*q/r)
}

// acrossStrain returns γ_eq for x = 1 m where long is the part of the long bush's
// stiffness beyond the short one's: the mean of both logarithms, by their energies.
func (b Bush) acrossStrain(long float64) float64 {
	rho := b.Outer / b.Inner
	mean := func(kappa float64) float64 {
		p := b.plane(kappa)
		return equivalent(func(u, v float64) (float64, float64) {
			r := 1 + (rho-1)*v
			n, s := p.strain(r)
			sin, cos := math.Sincos(u * math.Pi / 2)
			return math.Hypot(n*cos, s*sin), r
		})
	}
	ks, kl := b.Radial(1)
	es, el := (1-long)*real(ks), long*real(kl)
	return math.Exp((es*math.Log(mean(5.0/3))+el*math.Log(mean(1)))/(es+el)) / b.Inner
}
