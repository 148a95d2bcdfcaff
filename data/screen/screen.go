package screen

import (
	"fmt"
	"math"

	"phaselag/data"
)

// Check returns what is doubtful about the campaign's measurements, check by
// check in a fixed order and test by test in the campaign's order. Points that
// are not used are passed over.
func Check(c *data.Campaign) []data.Finding {
	var list []data.Finding
	for _, check := range []func(*data.Campaign) []data.Finding{
		units, unitChanges, statedLossFactor, viscosities, swapped, duplicates, copies, outOfOrder,
		conflictingModuli, conflictingAmplitudes, headingAgainstDeformation,
		temperatures, strains, beyondLinear, falling, fewPoints,
		drifts, trends, contactLost, selfHeating, firstRunSoftening, repeats, outlyingRepeats,
		softerWhenColder, overlap, massNotCorrected, frameNotCorrected,
		onlyOne, unstated, deformationUnstated,
	} {
		list = append(list, check(c)...)
	}
	return list
}

// oscillatory reports whether a kind of test gives a complex modulus.
func oscillatory(k data.Kind) bool {
	return k == data.FrequencySweep || k == data.StrainSweep || k == data.TemperatureSweep
}

// used returns the points of a run that are used and that have numbers with which one
// can reckon, as all that the reader uses have.
func used(r data.Run) []data.Point {
	list := make([]data.Point, 0, len(r.Points))
	for _, p := range r.Points {
		if p.Used && sane(p) {
			list = append(list, p)
		}
	}
	return list
}

func sane(p data.Point) bool {
	positive := func(x float64) bool { return x > 0 && !math.IsInf(x, 0) }
	swept := positive(p.Frequency) || math.IsNaN(p.Frequency) && positive(p.Time)
	return swept && positive(p.Storage) && positive(p.Temperature) &&
		(math.IsNaN(p.Loss) || p.Loss >= 0 && !math.IsInf(p.Loss, 0)) && (math.IsNaN(p.Strain) || p.Strain >= 0 && !math.IsInf(p.Strain, 0))
}

// magnitude returns |G*|, or the storage modulus where no loss was measured.
func magnitude(p data.Point) float64 {
	if math.IsNaN(p.Loss) {
		return p.Storage
	}
	return math.Hypot(p.Storage, p.Loss)
}

// angle returns the loss angle in degrees.
func angle(p data.Point) float64 { return math.Atan2(p.Loss, p.Storage) * 180 / math.Pi }

// celsius formats a temperature for people, to 0.1 K.
func celsius(kelvin float64) string {
	c := math.Round((kelvin-273.15)*10) / 10
	if c < 0 {
		return fmt.Sprintf("−%g °C", -c)
	}
	return fmt.Sprintf("%g °C", math.Abs(c))
}

// percent formats a relative number for people.
func percent(x float64) string {
	if x >= 0.995 {
		return fmt.Sprintf("%.0f %%", 100*x)
	}
	return fmt.Sprintf("%.2g %%", 100*x)
}

// modulus formats a modulus for people.
func modulus(pascal float64) string {
	switch {
	case pascal >= 1e9:
		return fmt.Sprintf("%.4g GPa", pascal/1e9)
	case pascal >= 1e4:
		return fmt.Sprintf("%.4g MPa", pascal/1e6)
	}
	return fmt.Sprintf("%.4g Pa", pascal)
}

// symbol returns the letter of the campaign's modulus.
func symbol(c *data.Campaign) string {
	if c.Modulus == data.Young {
		return "E"
	}
	return "G"
}
