package causal

import (
	"math"
	"math/cmplx"
	"sort"

	"gonum.org/v1/gonum/stat/distuv"
)

// Suspicion is one hypothesis on what went wrong, tried on the isotherm.
//
// Its parameter p is found together with the non-negative spectrum by
// minimising the profile S(p) = min_{g ≥ 0} S(g, p): the change of p comes from
// the problem linearised at p, with the column ∂D_p(M)/∂p free in sign, and is
// halved until S(p) falls. It ends when the change is below 1e-6 of its
// uncertainty, or after 30 steps.
//
// Its standard uncertainty is half the width of the interval where
// S(p) < S(p̂) + 1, found by doubling and halving: the bounds g ≥ 0 make kinks
// in the profile, at which its curvature says nothing.
type Suspicion struct {
	Kind        Kind
	Estimate    float64 // rad, relative, modulus·s² or s: see Unit
	Uncertainty float64 // standard; NaN when not determined
	Unit        string  // "rad", "1", "modulus s2" or "s"

	// What the distortion does to the modulus at the highest frequency: change
	// of storage and loss modulus in % of the undistorted ones, and of the
	// phase in degrees.
	StoragePercent, LossPercent, PhaseDegrees float64

	Reduction float64 // of the weighted sum of squares S of the non-negative fit
	Share     float64 // Reduction/S
	P         float64 // of such a reduction by chance, corrected for four hypotheses
}

var units = map[Kind]string{PhaseOffset: "rad", LossGain: "1", Inertia: "modulus s2", TimeDelay: "s"}

// suspect tries h against a non-negative fit with the sum of squares sum. dof
// are the degrees of freedom of the noise, +Inf for a noise that was given.
func (s *system) suspect(h *hypothesis, sum, dof float64) Suspicion {
	out := Suspicion{Kind: h.kind, Unit: units[h.kind], Uncertainty: math.NaN(), P: 1}
	p, best, first := 0.0, sum, math.NaN()
	for range 30 {
		d, u, ok := s.step(h, p)
		if !ok || math.IsNaN(d) || math.IsInf(d, 0) {
			break
		}
		first = u
		accepted := false
		for range 12 {
			if sol, ok := s.nonNegative(h, p+d); ok && h.admits(p+d) && sol.sum < best {
				p, best, accepted = p+d, sol.sum, true
				break
			}
			d /= 2
		}
		if !accepted || math.Abs(d) < 1e-6*u {
			break
		}
	}
	out.Uncertainty = (s.reach(h, p, first, best+1) + s.reach(h, p, -first, best+1)) / 2
	n := len(s.frequency)
	top := s.frequency[n-1]
	model := s.undistorted(h, p)
	z := model[n-1]
	w := h.linear(p, top, z) + h.shift(p, top)
	out.StoragePercent = 100 * (real(w)/real(z) - 1)
	out.LossPercent = 100 * (imag(w)/imag(z) - 1)
	out.PhaseDegrees = cmplx.Phase(w/z) * 180 / math.Pi
	out.Estimate = p
	out.Reduction = max(sum-best, 0)
	if sum > 0 {
		out.Share = out.Reduction / sum
	}
	chance := distuv.ChiSquared{K: 1}.Survival(out.Reduction)
	if !math.IsInf(dof, 1) {
		chance = distuv.F{D1: 1, D2: dof}.Survival(out.Reduction)
	}
	out.P = min(1, float64(len(hypotheses))*chance)
	return out
}

// reach is the distance from p, on the side of d, at which S rises to the given
// level, to 1 %; NaN when there is none within 1000·d.
func (s *system) reach(h *hypothesis, p, d, level float64) float64 {
	if !(d != 0) || math.IsNaN(d) || math.IsInf(d, 0) {
		return math.NaN()
	}
	above := func(d float64) bool {
		sol, ok := s.nonNegative(h, p+d)
		return !h.admits(p+d) || !ok || sol.sum >= level
	}
	inside, outside := 0.0, d
	for range 10 {
		if above(outside) {
			break
		}
		inside, outside = outside, 2*outside
	}
	if !above(outside) {
		return math.NaN()
	}
	for math.Abs(outside-inside) > 0.01*math.Abs(outside) && math.Abs(outside) > 1e-9*math.Abs(d) {
		if middle := (inside + outside) / 2; above(middle) {
			outside = middle
		} else {
			inside = middle
		}
	}
	return math.Abs(inside+outside) / 2
}

// admits keeps the loss gain away from the sign change of the loss modulus.
func (h *hypothesis) admits(p float64) bool { return h.kind != LossGain || p > -0.9 }

// undistorted is the modulus behind the fit with parameter p.
func (s *system) undistorted(h *hypothesis, p float64) []complex128 {
	if _, ok := s.nonNegative(h, p); !ok {
		return make([]complex128, len(s.frequency))
	}
	return s.combine()
}

// likely names the hypothesis with the greatest reduction, when it is
// significant, and the others that are less than four worse: such a difference
// in S, a likelihood ratio of e², does not tell two hypotheses apart.
func likely(all []Suspicion) (Kind, []Kind) {
	order := append([]Suspicion(nil), all...)
	sort.SliceStable(order, func(i, j int) bool { return order[i].Reduction > order[j].Reduction })
	if len(order) == 0 || !(order[0].P < significance) {
		return "", nil
	}
	var others []Kind
	for _, o := range order[1:] {
		if order[0].Reduction-o.Reduction < 4 {
			others = append(others, o.Kind)
		}
	}
	return order[0].Kind, others
}
