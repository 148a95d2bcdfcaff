package screen

import (
	"fmt"
	"math"

	"phaselag/data"
)

// Tolerances of a test temperature, K: ±2 in general and ±1 where a closer one
// is asked for (ISO 23529; numbers as quoted in public text).
const (
	closeTolerance    = 1.0
	standardTolerance = 2.0
)

// temperatures finds runs whose measured temperature is not the nominal one, or
// moves on the way: beyond the closer tolerance a doubt, beyond the general one
// severe. A temperature sweep has no nominal temperature.
func temperatures(c *data.Campaign) (list []data.Finding) {
	const rounding = 1e-9
	for _, t := range c.Tests {
		if t.Kind == data.TemperatureSweep {
			continue
		}
		for _, r := range t.Runs {
			points := used(r)
			var off []data.Point
			var measured []float64
			worst := 0.0
			for _, p := range points {
				measured = append(measured, p.Temperature)
				if d := math.Abs(p.Temperature - r.Temperature); d > closeTolerance+rounding {
					off = append(off, p)
					worst = math.Max(worst, d)
				}
			}
			if len(off) > 0 {
				f := data.Finding{
					Code: "temperature-off-nominal", Severity: data.Doubt, Test: t.Name, Rows: data.Places(off),
					Evidence: fmt.Sprintf("%s: measured up to %.2g K off the nominal temperature", r.Name, worst),
					Cause:    "the chamber had not settled, or the nominal temperature is a wish",
					Remedy:   "dwell longer (±1 K; ±2 K at the most), or leave the run out",
				}
				if worst > standardTolerance+rounding {
					f.Severity = data.Severe
				}
				list = append(list, f)
				continue
			}
			if n := len(measured) / 3; n > 0 {
				drift := median(measured[len(measured)-n:]) - median(measured[:n])
				if math.Abs(drift) > closeTolerance+rounding {
					list = append(list, data.Finding{
						Code: "temperature-drifts", Severity: data.Doubt, Test: t.Name, Rows: data.Places(points),
						Evidence: fmt.Sprintf("%s: the temperature moves by %+.2g K from the first to the last third", r.Name, drift),
						Cause:    "the specimen warmed up by its own loss, or had not reached the temperature",
						Remedy:   "dwell longer, or strain less",
					})
				}
			}
		}
	}
	return list
}
