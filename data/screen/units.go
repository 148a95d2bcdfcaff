package screen

import (
	"fmt"
	"math"

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

// units finds numbers that a wrong unit explains best.
func units(c *data.Campaign) (list []data.Finding) {
	for _, t := range c.Tests {
		var high, large []data.Point
		top, n := 0.0, 0
		for _, r := range t.Runs {
			for _, p := range used(r) {
				m := magnitude(p)
				n++
				top = math.Max(top, m)
				if m > highestModulus {
					high = append(high, p)
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
				Remedy:   "look at the column's unit; state it in columns",
			})
		}
		if n > 0 && top < lowestModulus {
			list = append(list, data.Finding{
				Code: "modulus-too-low", Severity: data.Note, Test: t.Name,
				Evidence: fmt.Sprintf("no modulus of the test is above %s; solid rubber begins near 0.1 MPa", modulus(top)),
				Cause:    "a liquid or a gel, or a wrong unit, MPa read as Pa for example",
				Remedy:   "look at the column's unit if it is a rubber",
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
