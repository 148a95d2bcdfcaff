package screen

import (
	"fmt"
	"math"
	"slices"

	"phaselag/data"
)

// isotherm gathers everything measured over frequency at one temperature.
type isotherm struct {
	temperature float64
	points      []data.Point
}

// overlap finds neighbouring isotherms of the campaign that share no modulus:
// neither G' nor |G*| nor, where it is monotonic in both, G” has values in
// common, so that nothing but a law joins them. A gap below 5 % is a doubt, for
// flat isotherms of a rubber shift against each other by density alone; a
// wider one is severe. Where all that two isotherms share is less than a tenth
// of the narrower one's range, they barely overlap.
func overlap(c *data.Campaign) (list []data.Finding) {
	all := isotherms(c)
	for i := 1; i < len(all); i++ {
		a, b := all[i-1], all[i]
		share, gap := math.Inf(-1), math.Inf(1)
		for _, part := range []struct {
			of            func(data.Point) float64
			monotonicOnly bool
		}{
			{func(p data.Point) float64 { return p.Storage }, false},
			{magnitude, false},
			{func(p data.Point) float64 { return p.Loss }, true},
		} {
			la, ha, ma := rangeOf(a.points, part.of)
			lb, hb, mb := rangeOf(b.points, part.of)
			common := math.Min(ha, hb) - math.Max(la, lb)
			narrower := math.Min(ha-la, hb-lb)
			if part.monotonicOnly && !(ma && mb) || !(narrower > 0) || math.IsInf(narrower, 1) {
				continue
			}
			share = math.Max(share, common/narrower)
			gap = math.Min(gap, math.Max(0, -common))
		}
		f := data.Finding{
			Rows:   data.Places(append(slices.Clone(a.points), b.points...)),
			Cause:  "temperatures too far apart for the range of frequencies",
			Remedy: "measure an isotherm between them, or over a wider range of frequencies",
		}
		switch {
		case gap > 0 && !math.IsInf(gap, 1):
			f.Code, f.Severity = "isotherms-do-not-overlap", data.Severe
			f.Evidence = fmt.Sprintf("%s and %s have no modulus in common; the narrowest gap is %s", celsius(a.temperature), celsius(b.temperature), percent(math.Expm1(gap)))
			if gap < math.Log(1.05) {
				f.Severity = data.Doubt
			}
		case share < 0.1 && !math.IsInf(gap, 1):
			f.Code, f.Severity = "isotherms-barely-overlap", data.Doubt
			f.Evidence = fmt.Sprintf("%s and %s share %s of the narrower one's range of moduli", celsius(a.temperature), celsius(b.temperature), percent(share))
		default:
			continue
		}
		list = append(list, f)
	}
	return list
}

// isotherms returns the campaign's isotherms from cold to warm. Runs within one
// kelvin are one; runs over less than a tenth of a decade are none.
func isotherms(c *data.Campaign) []isotherm {
	var all []isotherm
	for _, t := range c.Tests {
		if t.Kind != data.FrequencySweep {
			continue
		}
		for _, r := range t.Runs {
			points := used(r)
			var x []float64
			for _, p := range points {
				x = append(x, math.Log10(p.Frequency))
			}
			if len(points) < 2 || span(x) < 0.1 {
				continue
			}
			all = append(all, isotherm{r.Temperature, points})
		}
	}
	slices.SortStableFunc(all, func(a, b isotherm) int {
		switch {
		case a.temperature < b.temperature:
			return -1
		case a.temperature > b.temperature:
			return 1
		}
		return 0
	})
	var merged []isotherm
	for _, i := range all {
		if n := len(merged); n > 0 && i.temperature-merged[n-1].temperature <= 1 {
			merged[n-1].points = append(slices.Clone(merged[n-1].points), i.points...)
			continue
		}
		merged = append(merged, i)
	}
	return merged
}

// rangeOf returns the logarithms of the least and the greatest value of a part
// of the modulus, and whether it is monotonic over frequency, small scatter
// apart.
func rangeOf(points []data.Point, part func(data.Point) float64) (low, high float64, monotonic bool) {
	low, high = math.Inf(1), math.Inf(-1)
	sorted := slices.Clone(points)
	slices.SortStableFunc(sorted, func(a, b data.Point) int {
		switch {
		case a.Frequency < b.Frequency:
			return -1
		case a.Frequency > b.Frequency:
			return 1
		}
		return 0
	})
	var up, down float64
	for i, p := range sorted {
		v := math.Log(part(p))
		low, high = math.Min(low, v), math.Max(high, v)
		if i > 0 {
			if d := v - math.Log(part(sorted[i-1])); d > 0 {
				up += d
			} else {
				down -= d
			}
		}
	}
	return low, high, math.Min(up, down) <= 0.1*math.Max(up, down)
}
