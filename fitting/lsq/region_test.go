package lsq

import (
	"math"
	"testing"
)

// R = I and q = (−3, −4): the undamped step is (3, 4), of length 5. Under damping
// the step is (3, 4)/(1 + λ), so Δ = 1 means λ = 4 and Δ = 2.5 means λ = 1; the
// length may be off by a tenth.
func TestRegionByHand(t *testing.T) {
	t.Parallel()
	infinite := math.Inf(1)
	for _, c := range []struct {
		name      string
		radius    float64
		l, u      []float64
		held      []bool
		y         []float64
		lambda    float64
		tolerance float64
	}{
		{"inside", 6, []float64{-infinite, -infinite}, []float64{infinite, infinite}, []bool{false, false}, []float64{3, 4}, 0, 1e-15},
		{"on the edge", 1, []float64{-infinite, -infinite}, []float64{infinite, infinite}, []bool{false, false}, []float64{0.6, 0.8}, 4, 0.1},
		{"half way", 2.5, []float64{-infinite, -infinite}, []float64{infinite, infinite}, []bool{false, false}, []float64{1.5, 2}, 1, 0.1},
		{"held", 6, []float64{-infinite, -infinite}, []float64{infinite, infinite}, []bool{true, false}, []float64{0, 4}, 0, 1e-15},
		{"bound", 6, []float64{-infinite, 0}, []float64{1, infinite}, []bool{false, false}, []float64{1, 4}, 0, 1e-15},
		{"both bounds", 6, []float64{0, 0}, []float64{1, 2}, []bool{false, false}, []float64{1, 2}, 0, 1e-15},
		{"bound at the point", 6, []float64{0, 0}, []float64{0, 9}, []bool{false, false}, []float64{0, 4}, 0, 1e-15},
	} {
		var g region
		g.resize(2)
		copy(g.r, []float64{1, 0, 0, 1})
		copy(g.q, []float64{-3, -4})
		predicted, length := g.step(c.radius, c.l, c.u, c.held)
		var want, norm float64
		for i, y := range c.y {
			q := g.q[i]
			norm = math.Hypot(norm, g.y[i])
			want -= q*g.y[i] + 0.5*g.y[i]*g.y[i]
			if math.Abs(g.y[i]-y) > c.tolerance*math.Abs(y) {
				t.Errorf("%s: step %v, want %v", c.name, g.y, c.y)
			}
		}
		if math.Abs(g.lambda-c.lambda) > 2*c.tolerance*(1+c.lambda) && !g.bound {
			t.Errorf("%s: λ = %g, want %g", c.name, g.lambda, c.lambda)
		}
		if math.Abs(predicted-want) > 1e-14*want || math.Abs(length-norm) > 1e-14 {
			t.Errorf("%s: predicted %g, length %g; want %g, %g", c.name, predicted, length, want, norm)
		}
	}
}
