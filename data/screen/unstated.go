package screen

import (
	"fmt"
	"math"
	"slices"

	"phaselag/data"
)

// onlyOne finds campaigns whose oscillatory tests know one frequency, or one
// temperature.
func onlyOne(c *data.Campaign) (list []data.Finding) {
	var frequencies, temperatures []float64
	for _, t := range c.Tests {
		if !oscillatory(t.Kind) {
			continue
		}
		for _, r := range t.Runs {
			for _, p := range used(r) {
				frequencies, temperatures = append(frequencies, p.Frequency), append(temperatures, p.Temperature)
			}
		}
	}
	if len(frequencies) == 0 {
		return nil
	}
	if low, high := slices.Min(frequencies), slices.Max(frequencies); alike(low, high, 0.01) {
		list = append(list, data.Finding{
			Code: "one-frequency-only", Severity: data.Doubt,
			Evidence: fmt.Sprintf("every oscillatory test was made at %.4g Hz", high),
			Cause:    "a programme for one frequency",
			Remedy:   "measure isotherms: without a second frequency no time-temperature shift can be known",
		})
	}
	low, high := math.Inf(1), math.Inf(-1)
	for _, k := range temperatures {
		if !math.IsNaN(k) {
			low, high = math.Min(low, k), math.Max(high, k)
		}
	}
	if high-low <= 1 {
		list = append(list, data.Finding{
			Code: "one-temperature-only", Severity: data.Doubt,
			Evidence: fmt.Sprintf("every oscillatory test was made at %s", celsius((low+high)/2)),
			Cause:    "a programme for one temperature",
			Remedy:   "measure isotherms at the temperatures of use: nothing is known beside this one",
		})
	}
	return list
}

// unstated finds what the campaign file does not say and nothing can show.
func unstated(c *data.Campaign) (list []data.Finding) {
	complexModulus, points, strained := false, 0, false
	for _, t := range c.Tests {
		for _, r := range t.Runs {
			for _, p := range used(r) {
				points++
				complexModulus = complexModulus || oscillatory(t.Kind) && !math.IsNaN(p.Loss)
				strained = strained || !math.IsNaN(p.Strain)
			}
		}
	}
	if points > 0 && !strained {
		list = append(list, data.Finding{
			Code: "strain-never-stated", Severity: data.Doubt,
			Evidence: "no row and no test states a strain amplitude",
			Cause:    "it was left out of the table",
			Remedy:   "state strain in the tests; a filled rubber's modulus depends on it, and no question about an amplitude can be answered",
		})
	}
	if complexModulus && math.IsNaN(c.Uncertainty.Phase) {
		list = append(list, data.Finding{
			Code: "phase-uncertainty-not-stated", Severity: data.Note,
			Evidence: "uncertainty.phase is not stated",
			Cause:    "an error of phase that all measurements share shows in no repeat and in no superposition",
			Remedy:   "state it from the calibration, for example phase: 0.05 deg; every loss factor's interval lacks it until then",
		})
	}
	return list
}
