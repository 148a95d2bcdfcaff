package screen

import (
	"fmt"
	"math"

	"phaselag/data"
)

// repeats finds runs of one kind at one condition that disagree: by more than
// 3 % of the modulus or 1° of the loss angle, in the median over what they have
// in common. Two runs repeat each other when they are runs of the same kind,
// their temperatures are within half a kelvin and their strains within 5 %; the
// points compared agree in frequency (1 %), or in time, or in the strain of a
// strain sweep. Of a temperature sweep nothing repeats.
//
// What two specimens of 1.5 % uncertainty of geometry differ by stays below.
func repeats(c *data.Campaign) (list []data.Finding) {
	type run struct {
		test string
		kind data.Kind
		data.Run
		points []data.Point
	}
	var runs []run
	for _, t := range c.Tests {
		if t.Kind == data.TemperatureSweep || t.Kind == data.Static {
			continue
		}
		for _, r := range t.Runs {
			runs = append(runs, run{t.Name, t.Kind, r, used(r)})
		}
	}
	for i, a := range runs {
		for _, b := range runs[i+1:] {
			if a.kind != b.kind || !(math.Abs(a.Temperature-b.Temperature) <= 0.5) ||
				!alike(a.Frequency, b.Frequency, 0.01) || !alike(a.Strain, b.Strain, 0.05) {
				continue
			}
			ratios, turns, common := compare(a.kind, a.points, b.points)
			if len(ratios) == 0 {
				continue
			}
			ratio, turn := median(ratios)-1, median(turns)
			if math.Abs(ratio) <= 0.03 && !(math.Abs(turn) > 1) {
				continue
			}
			f := data.Finding{
				Code: "repeats-disagree", Severity: data.Doubt, Test: b.test, Rows: rows(common),
				Evidence: fmt.Sprintf("%s and %s: |%s*| differs by %+.2g %%", a.Name, b.Name, symbol(c), 100*ratio),
				Cause:    "conditioning, mounting or geometry of the specimens, or another batch",
				Remedy:   "say which specimen and mounting each run belongs to; measure once more",
			}
			if !math.IsNaN(turn) {
				f.Evidence += fmt.Sprintf(", the loss angle by %+.2g°", turn)
			}
			f.Evidence += fmt.Sprintf(" (median of %d points)", len(ratios))
			if math.Abs(ratio) > 0.15 || math.Abs(turn) > 5 {
				f.Severity = data.Severe
			}
			list = append(list, f)
		}
	}
	return list
}

// compare returns the ratios b/a of the moduli and the differences b−a of the
// loss angles over the points that two runs have in common, and those of b.
func compare(kind data.Kind, a, b []data.Point) (ratios, turns []float64, common []data.Point) {
	for _, q := range b {
		for _, p := range a {
			var same bool
			switch kind {
			case data.FrequencySweep:
				same = alike(p.Frequency, q.Frequency, 0.01)
			case data.StrainSweep:
				same = alike(p.Strain, q.Strain, 0.01)
			case data.Relaxation:
				same = alike(p.Time, q.Time, 0.01)
			}
			if !same {
				continue
			}
			ratios = append(ratios, magnitude(q)/magnitude(p))
			if !math.IsNaN(p.Loss) && !math.IsNaN(q.Loss) {
				turns = append(turns, angle(q)-angle(p))
			}
			common = append(common, q)
			break
		}
	}
	return ratios, turns, common
}
