package screen

import (
	"math"
	"slices"

	"phaselag/data"
)

// step is a group of points of one test at one temperature and one frequency
// (and, with strainMatters, one strain), in the order of the table.
type step struct {
	temperature float64 // K, mean
	frequency   float64 // Hz
	strain      float64 // median; NaN if not known
	points      []data.Point
}

// stepsOf gathers a test's used points into steps. Successive points belong
// together as long as their temperature stays within half a kelvin of the
// step's first and their frequency within one percent.
func stepsOf(t data.Test) []step {
	var list []step
	for _, r := range t.Runs {
		var open *step
		for _, p := range used(r) {
			if open != nil && math.Abs(p.Temperature-open.points[0].Temperature) <= 0.5 && alike(p.Frequency, open.points[0].Frequency, 0.01) {
				open.points = append(open.points, p)
				continue
			}
			list = append(list, step{frequency: p.Frequency, points: []data.Point{p}})
			open = &list[len(list)-1]
		}
	}
	for i := range list {
		var temperature, strain []float64
		for _, p := range list[i].points {
			temperature = append(temperature, p.Temperature)
			if !math.IsNaN(p.Strain) {
				strain = append(strain, p.Strain)
			}
		}
		list[i].temperature, list[i].strain = mean(temperature), median(strain)
	}
	return list
}

// magnitudes returns |G*| of a step's points in their order.
func (s step) magnitudes() []float64 {
	list := make([]float64, len(s.points))
	for i, p := range s.points {
		list[i] = magnitude(p)
	}
	return list
}

// alike reports whether two positive numbers differ by at most the given
// fraction; two NaN are alike.
func alike(a, b, fraction float64) bool {
	if math.IsNaN(a) || math.IsNaN(b) {
		return math.IsNaN(a) && math.IsNaN(b)
	}
	return a == b || math.Abs(a-b) <= fraction*math.Max(math.Abs(a), math.Abs(b))
}

// byTemperature sorts steps from cold to warm, keeping the order of equals.
func byTemperature(list []step) {
	slices.SortStableFunc(list, func(a, b step) int {
		switch {
		case a.temperature < b.temperature:
			return -1
		case a.temperature > b.temperature:
			return 1
		}
		return 0
	})
}
