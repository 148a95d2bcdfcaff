package screen

import (
	"fmt"
	"math"
	"strings"

	"phaselag/data"
)

// The greatest modulus of a polymer's glass, with room to spare: about 1 GPa in
// shear and 3 GPa in tension (common practice, no source). The least modulus of
// a solid rubber; guidance on dynamic tests of rubber speaks of 100 kPa to
// 100 MPa (ASTM D5992-96, scope).
const (
	highestModulus = 10e9
	lowestModulus  = 10e3
)

// What a rubber shows from its softest to its glass, E or G (common practice, no
// source).
const (
	leastExpected    = 0.1e6
	greatestExpected = 3000e6
)

// rightUnit names the units in which all of a test's numbers would lie within what a
// rubber shows, for the end of a remedy.
func rightUnit(t data.Test) string {
	stated := ""
	for _, c := range t.Columns {
		if strings.Contains(c.Quantity, "modulus") && stated == "" {
			stated = c.Unit
		}
	}
	size, ok := pressures[stated]
	if !ok {
		stated, size = "Pa", 1
	}
	low, high := math.Inf(1), 0.0
	for _, r := range t.Runs {
		for _, p := range used(r) {
			low, high = math.Min(low, magnitude(p)), math.Max(high, magnitude(p))
		}
	}
	var right []string
	for _, u := range []string{"Pa", "kPa", "MPa", "GPa", "psi", "dyn/cm²", "kgf/cm²"} {
		f := pressures[u] / size
		if u != stated && low*f >= leastExpected && high*f <= greatestExpected {
			right = append(right, fmt.Sprintf("read as %s the moduli would be %s to %s", u, modulus(low*f), modulus(high*f)))
		}
	}
	if len(right) == 0 {
		return "; no usual unit makes all of them moduli of a rubber"
	}
	return "; " + strings.Join(right, ", ")
}

// pressures are the usual units in Pa.
var pressures = map[string]float64{
	"Pa": 1, "kPa": 1e3, "MPa": 1e6, "N/mm²": 1e6, "N/mm2": 1e6, "GPa": 1e9, "psi": 6894.757293168, "dyn/cm²": 0.1, "dyn/cm2": 0.1,
	"kgf/cm²": 98066.5, "kgf/cm2": 98066.5,
}

// unitChanges finds isotherms that stand alone in another unit: whose moduli lie three
// or six decades (within a factor of two) off what their neighbours in temperature
// have between them on a logarithmic scale.
func unitChanges(c *data.Campaign) (list []data.Finding) {
	for _, t := range c.Tests {
		if t.Kind != data.FrequencySweep {
			continue
		}
		var runs []step
		for _, r := range t.Runs {
			if points := used(r); len(points) > 0 && !math.IsNaN(r.Temperature) {
				runs = append(runs, step{temperature: r.Temperature, points: points})
			}
		}
		byTemperature(runs)
		level := func(i int) float64 { return math.Log10(median(runs[i].magnitudes())) }
		for i := 1; i+1 < len(runs); i++ {
			a, b := runs[i-1].temperature, runs[i+1].temperature
			if !(b-a > 1) {
				continue
			}
			w := (runs[i].temperature - a) / (b - a)
			off := level(i) - (1-w)*level(i-1) - w*level(i+1)
			decades := 3 * math.Round(off/3)
			if decades == 0 || math.Abs(off-decades) > math.Log10(2) || math.Abs(level(i-1)-level(i+1)) > 2 {
				continue
			}
			list = append(list, data.Finding{
				Code: "unit-changes-within-test", Severity: data.Severe, Test: t.Name, Rows: data.Places(runs[i].points),
				Evidence: fmt.Sprintf("at %s the moduli are %.3g times what lies between those at %s and %s", celsius(runs[i].temperature), math.Pow(10, off), celsius(a), celsius(b)),
				Cause:    "this isotherm is in another unit than the others, kPa among MPa for example",
				Remedy:   "give the isotherm a test of its own, with its unit in columns",
			})
		}
	}
	return list
}

// units finds numbers that a wrong unit explains best.
func units(c *data.Campaign) (list []data.Finding) {
	for _, t := range c.Tests {
		var high, large []data.Point
		top, n, strain := 0.0, 0, 0.0
		for _, r := range t.Runs {
			for _, p := range used(r) {
				m := magnitude(p)
				n++
				top = math.Max(top, m)
				if m > highestModulus {
					high = append(high, p)
				}
				if p.Strain > strain {
					strain = p.Strain
				}
				if p.Strain > 1 {
					large = append(large, p)
				}
			}
		}
		if len(high) > 0 {
			list = append(list, data.Finding{
				Code: "modulus-too-high", Severity: data.Severe, Test: t.Name, Rows: data.Places(high),
				Evidence: fmt.Sprintf("moduli up to %s; no polymer's glass is stiffer than a few GPa", modulus(top)),
				Cause:    "a wrong unit, Pa read as kPa or MPa for example",
				Remedy:   "look at the column's unit; state it in columns" + rightUnit(t),
			})
		}
		if n > 0 && top < lowestModulus {
			list = append(list, data.Finding{
				Code: "modulus-too-low", Severity: data.Note, Test: t.Name,
				Evidence: fmt.Sprintf("no modulus of the test is above %s; solid rubber begins near 0.1 MPa", modulus(top)),
				Cause:    "a liquid or a gel, or a wrong unit, MPa read as Pa for example",
				Remedy:   "look at the column's unit if it is a rubber" + rightUnit(t),
			})
		}
		if strain > 0 && strain < 1e-6 {
			list = append(list, data.Finding{
				Code: "strain-too-low", Severity: data.Note, Test: t.Name,
				Evidence: fmt.Sprintf("no strain amplitude of the test is above %.2g %%", 100*strain),
				Cause:    "m/m read as percent, or a displacement in the column of the strain",
				Remedy:   "look at the column's unit; state it in columns",
			})
		}
		if len(large) > 0 {
			list = append(list, data.Finding{
				Code: "strain-too-high", Severity: data.Doubt, Test: t.Name, Rows: data.Places(large),
				Evidence: fmt.Sprintf("strain amplitudes above 100 %% in %d rows", len(large)),
				Cause:    "percent read as m/m, or a static strain in the column of the amplitude",
				Remedy:   "look at the column's unit; state it in columns",
			})
		}
	}
	return list
}
