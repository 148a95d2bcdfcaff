package mount

import "math"

// The load curve of a pressed pad
//
// A network of Gaussian chains stores W = (G/2)(λ1² + λ2² + λ3² − 3) a volume.
// Pressed without friction to λ times its height, at constant volume λ1 = λ2 =
// λ^(−1/2), so that the engineering stress is
//
//	σ = −dW/dλ = G(1/λ² − λ) = (E/3)(1/λ² − λ),     dσ/dε = E at λ = 1, ε = 1 − λ.
//
// Bonded plates raise E to E_c = E0(1 + 2κS²) (pad.go). The loaded area of a bonded
// pad stays and its free area shrinks with the height, so that the shape factor
// under load is S/λ, and
//
//	σ(λ) = (E0/3)(1 + q/λ²)(1/λ² − λ),     q = 2κS².
//
// A small vibration about the static strain meets the slope of this curve,
//
//	E_t = dσ/dε = (E0/3)[(1 + q/λ²)(2/λ³ + 1) + (2q/λ³)(1/λ² − λ)],
//
// which is E_c at λ = 1. Derived; that the change of shape factor belongs in the
// derivative is confirmed at high S by the thin layer: with parabolas of shear between
// the plates a layer of Gaussian rubber has σ ∝ 1/λ³ − 1/λ², which agrees with
// the form above to the second order of ε (and to 1 % of the slope at 10 %).
//
// The factor E_t/E_c multiplies the dynamic stiffness, real and imaginary part
// alike: it is a matter of geometry. The bulk stays in series, 1/E_t' = 1/E_t +
// 1/B, and takes its σ/B of the static compression. The shear stiffness of a pair's
// pressed pads is left as it is.

// mostCompression is the greatest static compression, of the unloaded height, that
// is answered for: beyond, pads bulge, and buckle or tear at their edges (common
// practice, no source).
const mostCompression = 0.20

// The curve goes on straight beyond these stretches, so that no search for the
// static balance can leave its domain; no answer lies there.
const (
	curveLow  = 0.6
	curveHigh = 1.2
)

// stiffening returns E_t/G of the incompressible pad at a stretch λ: E_c/G at 1.
func (p Pad) stiffening(stretch float64) float64 {
	_, slope := p.stress(1 - stretch)
	return slope
}

// stress returns σ/G and dσ/dε/G at a compression ε, without the bulk. 1/λ² − λ is
// taken as ε(1+λ+λ²)/λ², which keeps its digits at small ε.
func (p Pad) stress(strain float64) (stress, slope float64) {
	lead, q := p.pressing()
	e := math.Max(1-curveHigh, math.Min(1-curveLow, strain))
	l := 1 - e
	l2, l3 := l*l, l*l*l
	shape, chains := 1+q/l2, e*(1+l+l2)/l2
	stress = lead / 3 * shape * chains
	slope = lead / 3 * (shape*(2/l3+1) + 2*q/l3*chains)
	return stress + slope*(strain-e), slope
}

// squeeze returns the force on a pad of the static shear modulus g that is pressed
// by y, its tangent in N/m, and the stretch of the rubber's shape: the root λ of
// (1−λ)t + σ(λ)t/B = y, which rises with 1−λ; Newton's steps inside a bracket that
// shrinks, to 1e-15 of itself.
func (p Pad) squeeze(g, y float64) (force, tangent, stretch float64) {
	strain := y / p.Thickness
	bulk := 0.0
	if !math.IsNaN(p.Bulk) {
		bulk = g / p.Bulk
		lo, hi := math.Min(0, strain), math.Max(0, strain)
		target := strain
		for range 100 {
			s, slope := p.stress(strain)
			h := strain + bulk*s - target
			if h > 0 {
				hi = strain
			} else {
				lo = strain
			}
			next := strain - h/(1+bulk*slope)
			if !(next >= lo && next <= hi) {
				next = (lo + hi) / 2
			}
			done := math.Abs(next-strain) <= 1e-15*math.Abs(next)
			strain = next
			if done {
				break
			}
		}
	}
	s, slope := p.stress(strain)
	return g * s * p.Area, g * slope / (1 + bulk*slope) * p.Area / p.Thickness, 1 - strain
}
