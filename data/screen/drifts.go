package screen

import (
	"fmt"
	"math"
	"strings"

	"phaselag/data"
)

// drifts finds moduli that creep while temperature, frequency and strain stay:
// a step of at least six points whose last third lies more than 3 % from its
// first third. Thirds are compared by their medians, so that one bad point is
// no drift; a step whose temperature moves by more than 0.1 K is a ramp.
func drifts(c *data.Campaign) (list []data.Finding) {
	const bar = 0.03
	for _, t := range c.Tests {
		if !oscillatory(t.Kind) || t.Kind == data.StrainSweep {
			continue
		}
		var found []string
		var points []data.Point
		worst := 0.0
		for _, s := range stepsOf(t) {
			if len(s.points) < 6 {
				continue
			}
			m := s.magnitudes()
			third := len(m) / 3
			if strain := s.points[len(m)-1].Strain; !math.IsNaN(strain) && !alike(strain, s.points[0].Strain, 0.05) {
				continue // the strain explains it
			}
			if moved := median(temperaturesOf(s.points[len(m)-third:])) - median(temperaturesOf(s.points[:third])); math.Abs(moved) > 0.1 {
				continue // a ramp
			}
			change := median(m[len(m)-third:])/median(m[:third]) - 1
			if math.Abs(change) > bar {
				found = append(found, fmt.Sprintf("%+.2g %% at %s", 100*change, celsius(s.temperature)))
				points = append(points, s.points...)
				if math.Abs(change) > math.Abs(worst) {
					worst = change
				}
			}
		}
		if len(found) == 0 {
			continue
		}
		f := data.Finding{
			Code: "modulus-drifts", Severity: data.Doubt, Test: t.Name, Rows: data.Places(points),
			Evidence: fmt.Sprintf("the modulus creeps while nothing is changed: %s", listed(found)),
			Cause:    "the specimen had not reached the temperature, or settles, slips or ages",
			Remedy:   "dwell until the modulus stands; leave the first points of such a step out",
		}
		if math.Abs(worst) > 0.1 {
			f.Severity = data.Severe
		}
		list = append(list, f)
	}
	return list
}

func temperaturesOf(points []data.Point) []float64 {
	list := make([]float64, len(points))
	for i, p := range points {
		list[i] = p.Temperature
	}
	return list
}

// listed joins a few results for people.
func listed(list []string) string {
	const most = 6
	if len(list) > most {
		return strings.Join(list[:most], ", ") + fmt.Sprintf(" and %d more", len(list)-most)
	}
	return strings.Join(list, ", ")
}
