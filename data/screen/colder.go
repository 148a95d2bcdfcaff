package screen

import (
	"fmt"
	"math"
	"slices"

	"phaselag/data"
)

// softerWhenColder finds temperatures at which a test's material is softer than
// at a warmer one, at the same frequency.
//
// In the glass and in the transition the modulus only rises with cooling. On
// the rubber plateau the elasticity of the network is entropic, so that a
// colder rubber may be softer, but not by more than the ratio of the absolute
// temperatures. With T_c < T_w the finding is raised where
//
//	|G*|(T_c) < |G*|(T_w)·a·(1 − bar),     a = T_c/T_w on the plateau, else 1,
//
// the plateau being moduli less than ten times the least one of the test at that
// frequency, and bar the greater of 2 % and four standard deviations of the
// comparison. A colder point that was strained more than a fifth further is
// left out: its strain may explain it.
func softerWhenColder(c *data.Campaign) (list []data.Finding) {
	for _, t := range c.Tests {
		if t.Kind != data.FrequencySweep && t.Kind != data.TemperatureSweep {
			continue
		}
		var cold []softer
		steps := stepsOf(t)
		for len(steps) > 0 {
			var same, rest []step
			for _, s := range steps {
				if alike(s.frequency, steps[0].frequency, 0.01) {
					same = append(same, s)
				} else {
					rest = append(rest, s)
				}
			}
			cold = append(cold, colder(same)...)
			steps = rest
		}
		if len(cold) == 0 {
			continue
		}
		slices.SortStableFunc(cold, func(a, b softer) int {
			switch {
			case a.cold.temperature < b.cold.temperature:
				return -1
			case a.cold.temperature > b.cold.temperature:
				return 1
			}
			return 0
		})
		var points []data.Point
		var temperatures []string
		worst := cold[0]
		for _, s := range cold {
			points = append(points, s.cold.points...)
			if name := celsius(s.cold.temperature); len(temperatures) == 0 || temperatures[len(temperatures)-1] != name {
				temperatures = append(temperatures, name)
			}
			if s.deficit > worst.deficit {
				worst = s
			}
		}
		f := data.Finding{
			Code: "softer-when-colder", Severity: data.Doubt, Test: t.Name, Rows: data.Places(points),
			Evidence: fmt.Sprintf("at %s the material is softer than at a warmer temperature; worst %s against %s at %s, %s less, %.3g Hz",
				listed(temperatures), celsius(worst.cold.temperature), modulus(median(worst.cold.magnitudes())),
				celsius(worst.warm.temperature), percent(worst.deficit), worst.cold.frequency),
			Cause:  "slip in the clamps or on the plates, the compliance of the apparatus beside a stiff specimen, or a temperature not reached",
			Remedy: "leave these temperatures out; correct for the frame's stiffness; use a thinner or longer specimen for the glass",
		}
		if worst.deficit > 0.1 {
			f.Severity = data.Severe
		}
		list = append(list, f)
	}
	return list
}

// softer is a cold step that is softer than a warm one by the fraction deficit.
type softer struct {
	cold, warm step
	deficit    float64
}

// colder compares steps of one frequency, each with the stiffest warmer one.
func colder(steps []step) (list []softer) {
	byTemperature(steps)
	n := len(steps)
	level, scatter := make([]float64, n), make([]float64, n)
	least := math.Inf(1)
	logs := make([]float64, n)
	for i, s := range steps {
		level[i] = median(s.magnitudes())
		logs[i] = math.Log(level[i])
		least = math.Min(least, level[i])
		// Of a median: about 1.25 of a mean's.
		scatter[i] = 1.25 * noise(logarithms(s.magnitudes())) / math.Sqrt(float64(len(s.points)))
	}
	if single := noise(logs); n > 0 {
		for i := range scatter {
			if len(steps[i].points) < 5 {
				scatter[i] = single
			}
		}
	}
	for i := n - 2; i >= 0; i-- {
		warm, deficit := -1, 0.0
		for j := i + 1; j < n; j++ {
			if steps[j].temperature-steps[i].temperature <= 0.5 || steps[i].strain > 1.2*steps[j].strain {
				continue
			}
			allowed := 1.0
			if level[j] < 10*least {
				allowed = steps[i].temperature / steps[j].temperature
			}
			bar := math.Max(0.02, 4*math.Hypot(scatter[i], scatter[j]))
			if d := 1 - level[i]/level[j]; level[i] < level[j]*allowed*(1-bar) && d > deficit {
				warm, deficit = j, d
			}
		}
		if warm >= 0 {
			list = append(list, softer{steps[i], steps[warm], deficit})
		}
	}
	return list
}

func logarithms(x []float64) []float64 {
	list := make([]float64, len(x))
	for i, v := range x {
		list[i] = math.Log(v)
	}
	return list
}
