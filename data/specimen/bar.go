package specimen

import "math"

// Bar is a bar of rectangular section a × b, a ≥ b, twisted about its axis with
// its ends free to warp (Saint-Venant).
//
//	K* = G*·J/L,    J = β(a/b)·a·b³
//	β(ρ) = ⅓·[1 − (192/π⁵ρ)·Σ tanh(nπρ/2)/n⁵],   n = 1, 3, 5, …
//
// The sum is (31/32)ζ(5) − Σ 2/((e^{nπρ}+1)n⁵), whose terms fall by e^{−2πρ} or
// faster; it ends where a term no longer changes it. Timoshenko and Goodier,
// Theory of Elasticity, chapter on torsion; from memory.
//
// The local strain is (θ/L)·|∇φ| with the stress function
//
//	φ = b²/4 − y² − Σ (±)(8b²/n³π³)·cosh(nπx/b)/cosh(nπa/2b)·cos(nπy/b)
//
// and γ_eq follows from a quarter of the section.
type Bar struct {
	Length    float64 // m, free length between the clamps
	Width     float64 // m
	Thickness float64 // m; which of the two is greater does not matter
}

var _ Shape = Bar{}

// zeta5 is Riemann's ζ(5); value from memory.
const zeta5 = 1.0369277551433699263

// bar returns β(ρ) and dlnβ/dlnρ for ρ ≥ 1.
func bar(rho float64) (beta, slope float64) {
	sum, derivative := 31.0/32*zeta5, 0.0
	for n := 1.0; ; n += 2 {
		// 1 − tanh z and the derivative of tanh z, z = nπρ/2, without cancellation.
		e := math.Exp(-n * math.Pi * rho)
		n4 := n * n * n * n
		rest := 2 * e / (1 + e) / (n4 * n)
		sum -= rest
		derivative += math.Pi / 2 * 4 * e / ((1 + e) * (1 + e)) / n4
		if rest < 1e-18 {
			break
		}
	}
	c := 192 / math.Pow(math.Pi, 5)
	beta = (1 - c*sum/rho) / 3
	slope = c * (sum/rho - derivative) / (3 * beta)
	return beta, slope
}

// Name returns "torsion bar".
func (b Bar) Name() string { return "torsion bar" }

// Validate refuses impossible dimensions.
func (b Bar) Validate() error {
	f := faults{shape: b.Name()}
	f.length(length, b.Length)
	f.length(width, b.Width)
	f.length(thickness, b.Thickness)
	if f.err != nil {
		return f.err
	}
	return f.scale(b.linear().c, b.strain())
}

func (b Bar) linear() linear {
	wide, thin := math.Max(b.Width, b.Thickness), math.Min(b.Width, b.Thickness)
	beta, _ := bar(wide / thin)
	return linear{c: beta * wide * thin * thin * thin / b.Length}
}

// strain returns γ_eq/θ.
func (b Bar) strain() float64 {
	const terms = 64
	wide, thin := math.Max(b.Width, b.Thickness), math.Min(b.Width, b.Thickness)
	rho := wide / thin
	// In units of b: x in (0, ρ/2), y in (0, ½). The factors of each term along x
	// and along y are tabled first.
	x, w := gauss()
	var sinh, cosh, sin, cos [nodes][terms]float64
	for i, u := range x {
		for k := range terms {
			n := float64(2*k + 1)
			z := n * math.Pi * rho / 2
			grow, fall := math.Exp(z*(u-1)), math.Exp(-z*(u+1))
			full := 1 + math.Exp(-2*z)
			sinh[i][k], cosh[i][k] = (grow-fall)/full, (grow+fall)/full
			a := 8 / (math.Pi * math.Pi * n * n)
			if k%2 == 1 {
				a = -a
			}
			s, c := math.Sincos(n * math.Pi * u / 2)
			sin[i][k], cos[i][k] = a*s, a*c
		}
	}
	var mean, energy float64
	for i := range x {
		for j, v := range x {
			dx, dy := 0.0, -v // ∇φ/b
			for k := range terms {
				dx -= sinh[i][k] * cos[j][k]
				dy += cosh[i][k] * sin[j][k]
			}
			square := dx*dx + dy*dy
			e := square * w[i] * w[j]
			energy += e
			mean += e * math.Log(square) / 2
		}
	}
	return math.Exp(mean/energy) * thin / b.Length
}

// Rotates returns true.
func (b Bar) Rotates() bool { return true }

// Stiffness returns K* in N·m/rad.
func (b Bar) Stiffness(g complex128) complex128 { return b.linear().stiffness(g) }

// Modulus returns G* in Pa.
func (b Bar) Modulus(k complex128) complex128 { return b.linear().modulus(k) }

// Strain returns the energy-equivalent shear strain at an angle in rad. It takes
// about a fifth of a millisecond: for many angles scale one strain.
func (b Bar) Strain(displacement float64) float64 { return displacement * b.strain() }

// Displacement returns the angle in rad.
func (b Bar) Displacement(strain float64) float64 { return strain / b.strain() }

// Sensitivity lists length, width and thickness.
func (b Bar) Sensitivity(complex128) []Dimension {
	wide, thin := -1.0, -3.0
	w, t := &wide, &thin
	rho := b.Width / b.Thickness
	if rho < 1 {
		rho = 1 / rho
		w, t = t, w
	}
	_, slope := bar(rho)
	wide -= slope
	thin += slope
	return []Dimension{{length, b.Length, "m", 1}, {width, b.Width, "m", *w}, {thickness, b.Thickness, "m", *t}}
}

// Checks wants a bar that the clamps do not stiffen.
func (b Bar) Checks() []Check {
	list := metres(b.Sensitivity(0))
	if r := b.Length / math.Max(b.Width, b.Thickness); r < 4 {
		list = append(list, Check{"length over width", r, "at least 4, or the clamps hinder warping and stiffen the bar", commonPractice, Doubt})
	}
	return list
}
