package screen

import (
	"fmt"
	"math"

	"phaselag/data"
)

// statedLossFactor compares the file's own tan δ with loss by storage modulus.
// Allowed are half a unit of the last decimal that the column uses, and 1 % for
// moduli of three digits.
func statedLossFactor(c *data.Campaign) (list []data.Finding) {
	for _, t := range c.Tests {
		var points []data.Point
		for _, r := range t.Runs {
			for _, p := range used(r) {
				if !math.IsNaN(p.StatedLossFactor) && p.Loss > 0 && p.Storage > 0 {
					points = append(points, p)
				}
			}
		}
		unit := lastDecimal(points)
		var wrong []data.Point
		var ratios, inverse []float64
		worst := 0.0
		for _, p := range points {
			own := p.Loss / p.Storage
			if math.Abs(p.StatedLossFactor-own) > 0.51*unit+0.01*own {
				wrong = append(wrong, p)
				worst = math.Max(worst, math.Abs(p.StatedLossFactor/own-1))
			}
			ratios = append(ratios, p.StatedLossFactor/own)
			inverse = append(inverse, p.StatedLossFactor*own)
		}
		if len(wrong) == 0 {
			continue
		}
		f := data.Finding{
			Code: "stated-loss-factor-differs", Severity: data.Doubt, Test: t.Name, Rows: data.Places(wrong),
			Evidence: fmt.Sprintf("tan δ of the file and loss by storage modulus differ by up to %s in %d of %d rows", percent(worst), len(wrong), len(points)),
			Cause:    "columns that do not belong together, or one of them changed after the test",
			Remedy:   "compare the file with the apparatus's own record",
		}
		middle := median(ratios)
		if math.Abs(median(inverse)-1) < 0.02 && math.Abs(middle-1) > 0.05 {
			f.Severity = data.Severe
			f.Cause = "storage and loss modulus changed places: tan δ is storage by loss"
			f.Remedy = "name the columns in columns the other way round"
		} else if math.Abs(middle-1) > 0.05 {
			f.Severity = data.Severe
			f.Evidence += fmt.Sprintf(", by a factor %.3g in the middle", middle)
		}
		list = append(list, f)
	}
	return list
}

// lastDecimal returns the unit of the last decimal in which the stated loss
// factors were written, 1e-6 at the finest: 0.01 for 0.12, 0.3 and 0.05.
func lastDecimal(points []data.Point) float64 {
	unit := 0.1
	for unit > 1.5e-6 {
		fits := true
		for _, p := range points {
			x := p.StatedLossFactor / unit
			fits = fits && math.Abs(x-math.Round(x)) < 1e-6
		}
		if fits {
			break
		}
		unit /= 10
	}
	return unit
}
