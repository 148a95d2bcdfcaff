package screen

import (
	"fmt"

	"phaselag/data"
)

// copies finds moduli that stand twice under different conditions: five and more rows
// next to each other whose storage and loss modulus equal, digit by digit, those of
// other rows next to each other, at another temperature, frequency or strain. One is
// a coincidence of few digits; five in a row are a copy.
func copies(c *data.Campaign) (list []data.Finding) {
	const least = 5
	type numbers struct{ storage, loss float64 }
	type place struct{ test, run, row int }
	seen := map[numbers][]place{}
	points := make([][][]data.Point, len(c.Tests))
	var second, first []data.Point
	test := ""
	for i, t := range c.Tests {
		points[i] = make([][]data.Point, len(t.Runs))
		for j, r := range t.Runs {
			points[i][j] = used(r)
			for k, p := range points[i][j] {
				here := numbers{p.Storage, known(p.Loss)}
				for _, was := range seen[here] {
					// Only where the run of equal rows begins, and only if it is long.
					if was.row > 0 && k > 0 && same(points[was.test][was.run][was.row-1], points[i][j][k-1]) {
						continue
					}
					n := 0
					a, b := points[was.test][was.run][was.row:], points[i][j][k:]
					for n < len(a) && n < len(b) && same(a[n], b[n]) {
						n++
					}
					if n < least || sameCondition(a[0], b[0]) || !varies(a[:n]) {
						continue
					}
					first, second = append(first, a[:n]...), append(second, b[:n]...)
					if test == "" {
						test = t.Name
					}
				}
			}
			for k, p := range points[i][j] {
				here := numbers{p.Storage, known(p.Loss)}
				seen[here] = append(seen[here], place{i, j, k})
			}
		}
	}
	if len(second) == 0 {
		return nil
	}
	return []data.Finding{{
		Code: "moduli-copied", Severity: data.Severe, Test: test, Rows: data.Places(second),
		Evidence: fmt.Sprintf("%d rows next to each other have, digit by digit, the moduli of other rows at another condition (%s)", len(second), data.Places(first)),
		Cause:    "a block of the table was copied under another temperature, frequency or strain",
		Remedy:   "take the rows from the apparatus's own record; leave them out until then",
	}}
}

func same(a, b data.Point) bool { return a.Storage == b.Storage && known(a.Loss) == known(b.Loss) }

func sameCondition(a, b data.Point) bool {
	return known(a.Frequency) == known(b.Frequency) && known(a.Temperature) == known(b.Temperature) && known(a.Strain) == known(b.Strain) && known(a.Time) == known(b.Time)
}

// varies reports whether the moduli of a block differ from each other.
func varies(points []data.Point) bool {
	distinct := map[float64]bool{}
	for _, p := range points {
		distinct[p.Storage] = true
	}
	return len(distinct) >= 4
}
