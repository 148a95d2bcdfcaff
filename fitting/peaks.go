package fitting

import (
	"fmt"
	"math"

	"phaselag/fitting/peak"
)

// LossPeaks reads how far the peak of the loss factor over temperature of batch b lies
// from that of batch a, at the frequency (Hz) at which both were tested at the most
// temperatures. It needs no compound: two sweeps over temperature at one frequency will
// do. scatter of the temperature from step to step, K, is taken from the results as
// stated; the calibration of the thermometer cancels if it was the same.
func LossPeaks(a, b *Result) (s peak.Shift, frequency float64, err error) {
	count := func(r *Result, f float64) int { return len(lossPoints(r, f)) }
	for _, v := range a.Fixed {
		f := float64(v.Frequency)
		if n := min(count(a, f), count(b, f)); n > 0 && (frequency == 0 || n > min(count(a, frequency), count(b, frequency))) {
			frequency = f
		}
	}
	if frequency == 0 {
		return s, 0, fmt.Errorf("the two batches have no frequency in common at which a loss factor was measured")
	}
	scatter := max(stated(float64(a.Uncertainty.TemperatureScatter)), stated(float64(b.Uncertainty.TemperatureScatter)))
	s, err = peak.Between(lossPoints(a, frequency), lossPoints(b, frequency), scatter)
	return s, frequency, err
}

func stated(x float64) float64 {
	if math.IsNaN(x) {
		return 0
	}
	return x
}

// lossPoints are the mean loss factors at a frequency.
func lossPoints(r *Result, frequency float64) []peak.Point {
	var out []peak.Point
	for _, v := range r.Fixed {
		if math.Abs(float64(v.Frequency)-frequency) <= 0.01*frequency && float64(v.LossFactor) > 0 {
			out = append(out, peak.Point{T: float64(v.TemperatureC), Y: float64(v.LossFactor)})
		}
	}
	return out
}
