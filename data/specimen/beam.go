package specimen

import "math"

// Support is how a beam is held and moved.
type Support int

// The supports. All clamps and supports stay parallel.
const (
	// Cantilever: one end clamped, the other clamped and guided.
	Cantilever Support = 1 + iota
	// DualCantilever: both ends clamped, the middle clamped and guided.
	DualCantilever
	// ThreePoint: resting on two supports, moved in the middle.
	ThreePoint
)

// ParabolicShear is the shear coefficient of a rectangular section by the energy
// of the parabolic shear stress, 5/6; closed form.
const ParabolicShear = 5.0 / 6

// CowperShear returns the shear coefficient of a rectangular section after
// Cowper (1966), 10(1+ν)/(12+11ν); from memory.
func CowperShear(nu float64) float64 { return 10 * (1 + nu) / (12 + 11*nu) }

// Beam is a bar of rectangular section bent across its thickness, with the
// deflection by shear (Timoshenko).
//
//	cantilever        1/K = L³/(12EI) + L/(κGA)
//	dual cantilever   1/K = L³/(24EI) + L/(2κGA)
//	three points      1/K = L³/(48EI) + L/(4κGA)
//
// E = 2(1+ν)G, I = wh³/12, A = wh. In all of them an arm carries the force P
// (F, F/2, F/2) and the moment P·z, z from 0 to L/2, so that the local strain is
//
//	γ² = [P·z·y/(√(2(1+ν))·GI)]² + [3P/(2GA)·(1 − 4y²/h²)]²
//
// of which γ_eq is taken over arm and section. A slender beam has γ_eq =
// e^(−2/3)·√(2(1+ν))·ε_max, ε_max = 3hx/L², 3hx/L² and 6hx/L².
//
// Clamps are taken as perfect, and the width as free to contract.
type Beam struct {
	Support   Support
	Length    float64 // m; of one free arm between clamps; of the span of three points
	Width     float64 // m, across the bending
	Thickness float64 // m, in the plane of bending
	Poisson   float64 // ν, 0.5 for rubber; the zero value is 0
	Shear     float64 // κ; [ParabolicShear], [CowperShear]; +Inf: no deflection by shear
}

var _ Shape = Beam{}

// arms returns how many arms carry the force, and the compliances' factors.
func (b Beam) arms() (n, bending, shear float64) {
	switch b.Support {
	case Cantilever:
		return 1, 1.0 / 12, 1
	case DualCantilever:
		return 2, 1.0 / 24, 1.0 / 2
	case ThreePoint:
		return 2, 1.0 / 48, 1.0 / 4
	}
	return math.NaN(), math.NaN(), math.NaN()
}

// Name returns "cantilever", "dual cantilever" or "three-point bending".
func (b Beam) Name() string {
	switch b.Support {
	case Cantilever:
		return "cantilever"
	case DualCantilever:
		return "dual cantilever"
	case ThreePoint:
		return "three-point bending"
	}
	return "bending"
}

// Validate refuses an unknown support, impossible dimensions and coefficients.
func (b Beam) Validate() error {
	f := faults{shape: b.Name()}
	if n, _, _ := b.arms(); math.IsNaN(n) {
		f.add("Cantilever, DualCantilever or ThreePoint", "%d is no known support", int(b.Support))
	}
	f.length(length, b.Length)
	f.length(width, b.Width)
	f.length(thickness, b.Thickness)
	f.poisson(b.Poisson)
	if !(b.Shear > 0 && b.Shear <= 1 || math.IsInf(b.Shear, 1)) {
		f.add("5/6 for a rectangle; +Inf leaves shear out", "shear coefficient must lie above 0 and be at most 1, not %g", b.Shear)
	}
	if f.err != nil {
		return f.err
	}
	return f.scale(b.linear().c, b.strain())
}

// compliances returns G/K of bending and of shear, 1/m.
func (b Beam) compliances() (bending, shear float64) {
	_, cb, cs := b.arms()
	slender := b.Length / b.Thickness
	bending = cb * 12 / (2 * (1 + b.Poisson)) * slender * slender * slender / b.Width
	return bending, cs * slender / b.Width / b.Shear
}

// share returns the part of shear in the deflection.
func (b Beam) share() float64 {
	bending, shear := b.compliances()
	return shear / (bending + shear)
}

func (b Beam) linear() linear {
	bending, shear := b.compliances()
	return linear{c: 1 / (bending + shear)}
}

// strain returns γ_eq/x in 1/m: P/G is c/n a metre of deflection.
func (b Beam) strain() float64 {
	n, _, _ := b.arms()
	area := b.Width * b.Thickness
	inertia := area * b.Thickness * b.Thickness / 12
	normal := b.Length / 2 * b.Thickness / 2 / (math.Sqrt(2*(1+b.Poisson)) * inertia)
	shear := 1.5 / area
	if math.IsInf(b.Shear, 1) {
		shear = 0
	}
	return b.linear().c / n * equivalent(func(u, v float64) (float64, float64) {
		return math.Hypot(normal*u*v, shear*(1-v*v)), 1
	})
}

// Rotates returns false.
func (b Beam) Rotates() bool { return false }

// Stiffness returns K* in N/m.
func (b Beam) Stiffness(g complex128) complex128 { return b.linear().stiffness(g) }

// Modulus returns G* in Pa.
func (b Beam) Modulus(k complex128) complex128 { return b.linear().modulus(k) }

// Strain returns the energy-equivalent shear strain.
func (b Beam) Strain(displacement float64) float64 { return displacement * b.strain() }

// Displacement returns the deflection in m.
func (b Beam) Displacement(strain float64) float64 { return strain / b.strain() }

// Sensitivity lists the lengths, Poisson's ratio and the shear coefficient.
func (b Beam) Sensitivity(complex128) []Dimension {
	s := b.share()
	list := []Dimension{
		{length, b.Length, "m", 3 - 2*s}, {width, b.Width, "m", -1}, {thickness, b.Thickness, "m", -3 + 2*s},
		{poisson, b.Poisson, "1", -(1 - s) * b.Poisson / (1 + b.Poisson)},
	}
	if !math.IsInf(b.Shear, 1) {
		list = append(list, Dimension{shearFactor, b.Shear, "1", -s})
	}
	return list
}

// Checks wants a slender and narrow beam.
func (b Beam) Checks() []Check {
	list := append(metres(b.Sensitivity(0)), compressible(b.Poisson)...)
	with := b
	if math.IsInf(b.Shear, 1) {
		with.Shear = ParabolicShear
	}
	switch s := with.share(); {
	case s > 0.25 || with != b && s > 0.02:
		list = append(list, Check{"share of shear in the deflection", s, "at most 0.25, and taken off above 0.02: a longer or thinner beam", commonPractice, Doubt})
	case s > 0.1:
		list = append(list, Check{"share of shear in the deflection", s, "at most 0.1, or the shear coefficient matters", commonPractice, Note})
	}
	if r := b.Width / b.Length; r > 0.5 {
		list = append(list, Check{"width over length", r, "at most 0.5; a wide beam is stiffer, by up to 1/(1−ν²)", commonPractice, Doubt})
	}
	return list
}
