package waveform

import (
	"math"
	"slices"
)

// clock watches the steps of time once the usual step is known.
type clock struct {
	dt     float64 // s; 0: not known yet
	last   float64
	any    bool
	steps  int
	uneven int     // steps that are more than 10 % off, gaps apart
	worst  float64 // the largest such difference, over dt
	gaps   int
	lost   int
	untold int // samples since last whose time is not known
}

// usualStep is the median step, or the mean one where the times were rounded so
// coarsely that a fifth of the steps differ from the median. It returns 0 if time stands
// still.
func usualStep(t []float64) float64 {
	if len(t) < 2 {
		return 0
	}
	steps := make([]float64, len(t)-1)
	for i := range steps {
		steps[i] = t[i+1] - t[i]
	}
	slices.Sort(steps)
	m := steps[len(steps)/2]
	near := 0
	for _, s := range steps {
		if math.Abs(s-m) < 0.1*m {
			near++
		}
	}
	if 5*near < 4*len(steps) {
		m = (t[len(t)-1] - t[0]) / float64(len(t)-1)
	}
	if !(m > 0) || math.IsInf(m, 0) {
		return 0
	}
	return m
}

// step takes the next time and reports whether there is a gap before it.
func (c *clock) step(t float64) (gap bool) {
	if !c.any {
		c.last, c.any, c.untold = t, true, 0
		return false
	}
	d := t - c.last
	c.last = t
	c.steps++
	n := math.Round(d / c.dt)
	if d > 1.5*c.dt {
		if more := n - 1 - float64(c.untold); more > 0 {
			c.gaps++
			c.lost = int(math.Min(float64(c.lost)+more, math.MaxInt32))
		}
		c.untold = 0
		return true
	}
	c.untold = 0
	if off := math.Abs(d-c.dt) / c.dt; off > 0.1 {
		c.uneven++
		c.worst = math.Max(c.worst, off)
	}
	return false
}
