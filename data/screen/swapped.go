package screen

import (
	"fmt"
	"math"

	"phaselag/data"
)

// swapped finds storage and loss modulus in each other's columns. A large loss
// angle alone says nothing: a liquid has 85° and more. But loss comes with
// dispersion, in any linear material about (Booij and Thoone, Rheol. Acta 21
// (1982) 15; value from memory)
//
//	δ ≈ (π/2)·d ln|G*|/d ln f.
//
// A rubber's modulus hardly depends on frequency, so its angle is small; read
// the other way round it has an angle near 90° without the dispersion that
// belongs to it. Over isotherms of at least five points and half a decade, the
// mean misfit of the relation must exceed 20° as the file stands, and must fall
// to less than half of that with the columns exchanged.
//
// With one frequency only, dispersion is taken from temperature: a test in
// which loss exceeds storage everywhere, although over 20 K and more the
// modulus changes by less than a factor of three.
func swapped(c *data.Campaign) (list []data.Finding) {
	for _, t := range c.Tests {
		if !oscillatory(t.Kind) {
			continue
		}
		var asIs, exchanged []float64
		var all []data.Point
		for _, r := range t.Runs {
			points := used(r)
			all = append(all, points...)
			if t.Kind != data.FrequencySweep || len(points) < 5 {
				continue
			}
			var x, y, delta []float64
			for _, p := range points {
				x, y = append(x, math.Log(p.Frequency)), append(y, math.Log(magnitude(p)))
				delta = append(delta, angle(p))
			}
			if span(x) < math.Log(10)/2 {
				continue
			}
			due := 90 * slope(x, y)
			middle := median(delta)
			asIs = append(asIs, math.Abs(middle-due))
			exchanged = append(exchanged, math.Abs(90-middle-due))
		}
		f := data.Finding{
			Code: "storage-and-loss-swapped", Severity: data.Severe, Test: t.Name, Rows: data.Places(all),
			Cause:  "storage and loss modulus stand in each other's columns",
			Remedy: "name the columns in columns the other way round, if the apparatus's record agrees",
		}
		if a, b := mean(asIs), mean(exchanged); len(asIs) > 0 && a > 20 && b < a/2 {
			f.Evidence = fmt.Sprintf("loss angles miss what the slope of the modulus over frequency asks for by %.0f° on average; exchanged, by %.0f°", a, b)
			list = append(list, f)
			continue
		}
		if len(asIs) > 0 || len(all) < 3 {
			continue
		}
		var temperature, size []float64
		lossy := true
		for _, p := range all {
			temperature, size = append(temperature, p.Temperature), append(size, math.Log(magnitude(p)))
			lossy = lossy && p.Loss > p.Storage
		}
		if lossy && span(temperature) >= 20 && span(size) < math.Log(3) {
			f.Severity = data.Doubt
			f.Evidence = fmt.Sprintf("loss exceeds storage in every row, but over %.0f K the modulus changes only by a factor %.2g", span(temperature), math.Exp(span(size)))
			list = append(list, f)
		}
	}
	return list
}

// span returns the greatest minus the least value.
func span(x []float64) float64 {
	low, high := math.Inf(1), math.Inf(-1)
	for _, v := range x {
		low, high = math.Min(low, v), math.Max(high, v)
	}
	return high - low
}

func mean(x []float64) float64 {
	sum := 0.0
	for _, v := range x {
		sum += v
	}
	return sum / float64(len(x))
}
