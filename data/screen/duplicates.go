package screen

import (
	"fmt"

	"phaselag/data"
)

// duplicates finds rows that say the same, number by number. One or two can be
// chance where numbers have three digits; three and more are a copy.
func duplicates(c *data.Campaign) (list []data.Finding) {
	type numbers [6]float64
	for _, t := range c.Tests {
		seen := map[numbers]data.Point{}
		var again, first []data.Point
		for _, r := range t.Runs {
			for _, p := range used(r) {
				key := numbers{known(p.Frequency), known(p.Temperature), known(p.Strain), known(p.Time), p.Storage, known(p.Loss)}
				if before, ok := seen[key]; ok {
					again, first = append(again, p), append(first, before)
					continue
				}
				seen[key] = p
			}
		}
		if len(again) == 0 {
			continue
		}
		f := data.Finding{
			Code: "duplicate-rows", Severity: data.Note, Test: t.Name, Rows: data.Places(again),
			Evidence: fmt.Sprintf("%d rows repeat every number of earlier rows (%s)", len(again), data.Places(first)),
			Cause:    "chance, where numbers have few digits; or a row copied",
			Remedy:   "leave the copy out",
		}
		if len(again) >= 3 {
			f.Severity, f.Cause = data.Doubt, "a block of the table was copied, or one file stands twice in the campaign"
		}
		list = append(list, f)
	}
	return list
}

// known replaces NaN, which equals nothing, by a value that no column holds.
func known(x float64) float64 {
	if x != x {
		return -1
	}
	return x
}
