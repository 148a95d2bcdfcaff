package screen

import (
	"fmt"
	"math"
	"strings"

	"phaselag/data"
)

// The least number of points of a run, and of points a decade: our own rule; a
// spectrum is sought with three times a decade, and a run with fewer than six
// points cannot tell its own noise.
const (
	leastPoints       = 6
	leastPointsDecade = 5
)

// fewPoints finds runs with too few points, and with points too far apart over
// frequency, strain or time. Runs with a single point are another finding's
// matter (see onlyOne).
func fewPoints(c *data.Campaign) (list []data.Finding) {
	for _, t := range c.Tests {
		var few, sparse []string
		least, thinnest := math.MaxInt, math.Inf(1)
		for _, r := range t.Runs {
			points := used(r)
			var x []float64
			for _, p := range points {
				switch t.Kind {
				case data.FrequencySweep:
					x = append(x, p.Frequency)
				case data.StrainSweep:
					x = append(x, p.Strain)
				case data.Relaxation:
					x = append(x, p.Time)
				}
			}
			low, high := math.Inf(1), 0.0
			for _, v := range x {
				if v > 0 {
					low, high = math.Min(low, v), math.Max(high, v)
				}
			}
			decades := math.Log10(high / low)
			if len(points) < 2 || t.Kind == data.FrequencySweep && !(decades > 0) {
				continue
			}
			if len(points) < leastPoints {
				few = append(few, r.Name)
				least = min(least, len(points))
				continue
			}
			if density := float64(len(points)-1) / decades; decades > 0 && density < leastPointsDecade-1e-9 {
				sparse = append(sparse, r.Name)
				thinnest = math.Min(thinnest, density)
			}
		}
		if len(few) > 0 {
			list = append(list, data.Finding{
				Code: "few-points", Severity: data.Doubt, Test: t.Name,
				Evidence: fmt.Sprintf("%d of %d runs have fewer than %d points, the shortest %d: %s", len(few), len(t.Runs), leastPoints, least, names(few)),
				Cause:    "a short programme, or points left out",
				Remedy:   "measure more points; noise and shape cannot be told apart",
			})
		}
		if len(sparse) > 0 {
			list = append(list, data.Finding{
				Code: "few-points-a-decade", Severity: data.Note, Test: t.Name,
				Evidence: fmt.Sprintf("%d of %d runs have fewer than %d points a decade, the thinnest %.2g: %s", len(sparse), len(t.Runs), leastPointsDecade, thinnest, names(sparse)),
				Cause:    "a short programme",
				Remedy:   "five to ten points a decade show a wrong one",
			})
		}
	}
	return list
}

// names joins a few names for people.
func names(list []string) string {
	const most = 4
	if len(list) > most {
		return strings.Join(list[:most], "; ") + fmt.Sprintf(" and %d more", len(list)-most)
	}
	return strings.Join(list, "; ")
}
