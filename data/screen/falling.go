package screen

import (
	"fmt"
	"math"
	"slices"

	"phaselag/data"
)

// usualPhase is the scatter of a loss angle in rad that good apparatus has, 0.3°
// (common practice, no source).
const usualPhase = 0.3 * math.Pi / 180

// falling finds isotherms whose storage modulus falls with frequency, which no
// linear material does: G' is a sum of terms that only rise. To tell it from
// noise, means of three neighbours are compared: one must lie below an earlier
// one by more than 1 % and more than four times the scatter of a single point,
// which is five standard deviations of such a difference. The scatter is that
// seen in the run, but never less than what 0.3° of phase does to G',
//
//	dG'/G' = tan δ·dδ,
//
// which for a liquid is everything.
func falling(c *data.Campaign) (list []data.Finding) {
	for _, t := range c.Tests {
		if t.Kind != data.FrequencySweep {
			continue
		}
		for _, r := range t.Runs {
			points := used(r)
			slices.SortStableFunc(points, func(a, b data.Point) int {
				switch {
				case a.Frequency < b.Frequency:
					return -1
				case a.Frequency > b.Frequency:
					return 1
				}
				return 0
			})
			// At one frequency nothing falls with it.
			if len(points) < 5 || points[len(points)-1].Frequency < 1.2*points[0].Frequency {
				continue
			}
			y, turn := make([]float64, len(points)), make([]float64, len(points))
			for i, p := range points {
				y[i], turn[i] = math.Log(p.Storage), p.Loss/p.Storage*usualPhase
			}
			bar := math.Max(0.01, 4*noise(y))
			top, worst, from, to := math.Inf(-1), 0.0, 0, 0
			topAt := 0
			for i := 1; i+1 < len(y); i++ {
				m := (y[i-1] + y[i] + y[i+1]) / 3
				if m > top {
					top, topAt = m, i
				}
				if top-m > math.Max(worst, math.Max(bar, 4*math.Max(turn[i], turn[topAt]))) {
					worst, from, to = top-m, topAt, i
				}
			}
			if worst == 0 {
				continue
			}
			f := data.Finding{
				Code: "storage-modulus-falls", Severity: data.Doubt, Test: t.Name, Rows: data.Places(points[from:]),
				Evidence: fmt.Sprintf("%s: %s' falls by %s from %.3g to %.3g Hz, its scatter is %s",
					r.Name, symbol(c), percent(1-math.Exp(-worst)), points[from].Frequency, points[to].Frequency, percent(noise(y))),
				Cause:  "inertia or resonance of the apparatus near its upper end; slip or damage elsewhere",
				Remedy: "correct for the moving mass, or leave the frequencies out",
			}
			if worst > 0.1 {
				f.Severity = data.Severe
			}
			list = append(list, f)
		}
	}
	return list
}
