package thermal

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

func TestCrossover(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		c := Crossover{WLF{rapid.Float64Range(1, 20).Draw(r, "C1"), rapid.Float64Range(60, 250).Draw(r, "C2"), 296.15}, 0}
		c.Cross = 296.15 - rapid.Float64Range(0, 0.8).Draw(r, "below")*c.C2
		T := c.Cross + rapid.Float64Range(-40, 60).Draw(r, "T")
		near := func(what string, got, want, tol float64) {
			if math.Abs(got-want) > tol*(1+math.Abs(want)) {
				r.Fatalf("%s is %g, should be %g", what, got, want)
			}
		}
		// Value and slope are continuous at the crossover; the apparent energy is
		// constant below it.
		near("value", c.LogShift(c.Cross-1e-7), c.WLF.LogShift(c.Cross), 1e-6)
		near("slope", c.Slope(c.Cross-1e-7), c.WLF.Slope(c.Cross), 1e-6)
		near("apparent energy", Apparent(c, c.Cross-30), Apparent(c.WLF, c.Cross), 1e-9)
		if math.Abs(T-c.Cross) < 0.01 {
			return
		}
		h := 1e-4
		near("slope by differences", c.Slope(T), (c.LogShift(T+h)-c.LogShift(T-h))/(2*h), 1e-6)
		var g [3]float64
		c.Gradient(T, g[:])
		for k, p := range []*float64{&c.C1, &c.C2, &c.Cross} {
			v := *p
			h := 1e-5 * v
			*p = v + h
			up := c.LogShift(T)
			*p = v - h
			down := c.LogShift(T)
			*p = v
			near("gradient", g[k], (up-down)/(2*h), 1e-5)
		}
	})
}
