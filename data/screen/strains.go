package screen

import (
	"fmt"
	"math"

	"phaselag/data"
)

// strains finds isotherms, temperature sweeps and relaxations whose strain
// varies by more than a fifth. Below 0.1 % hardly any filled rubber depends on
// its strain (common practice, no source), and there it is a note only.
func strains(c *data.Campaign) (list []data.Finding) {
	for _, t := range c.Tests {
		if t.Kind == data.StrainSweep {
			continue
		}
		var points []data.Point
		worst, runs, top := 1.0, 0, 0.0
		for _, r := range t.Runs {
			low, high := math.Inf(1), 0.0
			for _, p := range used(r) {
				if p.Strain > 0 {
					low, high = math.Min(low, p.Strain), math.Max(high, p.Strain)
				}
			}
			if high > 1.2*low*(1+1e-9) {
				runs++
				points = append(points, used(r)...)
				worst, top = math.Max(worst, high/low), math.Max(top, high)
			}
		}
		if runs == 0 {
			continue
		}
		f := data.Finding{
			Code: "strain-not-constant", Severity: data.Doubt, Test: t.Name, Rows: data.Places(points),
			Evidence: fmt.Sprintf("within %d of %d runs the strain amplitude varies, up to a factor %.3g", runs, len(t.Runs), worst),
			Cause:    "the apparatus held the force, or reached the limit of its force",
			Remedy:   "hold the displacement; a filled rubber's modulus depends on it",
		}
		if top <= 0.001*(1+1e-9) {
			f.Severity = data.Note
		}
		list = append(list, f)
	}
	return list
}
