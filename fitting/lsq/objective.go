package lsq

import (
	"math"

	"phaselag/fitting/qr"
)

// Objective returns x ↦ ½‖r(x)‖², +Inf outside the bounds and where the model has
// no finite value. The function has a workspace of its own and must not be
// called by two goroutines at once.
func (p Problem) Objective() func(x []float64) float64 {
	r := make([]float64, p.M)
	return func(x []float64) float64 {
		for i, v := range x {
			if l, u := p.bounds(i); !(l <= v && v <= u) {
				return math.Inf(1)
			}
		}
		if err := p.Residual(r, x); err != nil {
			return math.Inf(1)
		}
		n := qr.Norm(r)
		if math.IsNaN(n) {
			return math.Inf(1)
		}
		return 0.5 * n * n
	}
}
