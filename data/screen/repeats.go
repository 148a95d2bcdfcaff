package screen

import (
	"fmt"
	"math"

	"phaselag/data"
)

// What repeats may differ by: 3 % of the modulus and 1° of the loss angle, or what
// temperature and geometry explain if that is more; five times 3 % or 1° is severe.
const (
	repeatModulus = 0.03
	repeatAngle   = 1.0
)

// repeats finds runs of one kind at one condition that disagree: by more than
// 3 % of the modulus or 1° of the loss angle, in the median over what they have
// in common, and more than
//
//	√2·√((3·u_g)² + (4·u_T·d ln|G*|/dT)²),     √2·4·u_T·dδ/dT,
//
// with the stated scatter of temperature u_T (0.3 K where none is), and between
// different specimens or mountings the stated uncertainty of geometry u_g (1.5 %). Two
// runs repeat each other when they are runs of the same kind,
// their temperatures are within half a kelvin and their strains within 5 %; the
// points compared agree in frequency (1 %), or in time, or in the strain of a
// strain sweep. Of a temperature sweep nothing repeats.
func repeats(c *data.Campaign) (list []data.Finding) {
	var runs []pass
	for i, t := range c.Tests {
		if t.Kind == data.TemperatureSweep || t.Kind == data.Static {
			continue
		}
		for j, r := range t.Runs {
			runs = append(runs, pass{t, i, j, r, used(r)})
		}
	}
	type disagreement struct {
		ratio, turn float64
		text        string
	}
	var tests []string // by their later run, in the order found
	found := map[string][]disagreement{}
	points := map[string][]data.Point{}
	pairs := map[string]int{}
	for i, b := range runs {
		for _, a := range runs[:i] {
			test := b.test.Name
			if a.test.Kind != b.test.Kind || !(math.Abs(a.run.Temperature-b.run.Temperature) <= 0.5) ||
				!alike(a.run.Frequency, b.run.Frequency, 0.01) || !alike(a.run.Strain, b.run.Strain, 0.05) {
				continue
			}
			ratios, turns, common := compare(a.test.Kind, a.relevant, b.relevant)
			if len(ratios) == 0 {
				continue
			}
			pairs[test]++
			d := disagreement{ratio: median(ratios) - 1, turn: median(turns)}
			size, turn := temperatureSlope(runs, a)
			geometry := 0.0
			if a.test.Specimen != b.test.Specimen || a.test.Mounting != b.test.Mounting {
				geometry = geometryUncertainty(c)
			}
			kelvin := 4 * temperatureScatter(c)
			modulusBar := math.Max(repeatModulus, math.Sqrt2*math.Hypot(3*geometry, kelvin*size))
			angleBar := math.Max(repeatAngle, math.Sqrt2*kelvin*turn)
			if math.Abs(d.ratio) <= modulusBar && !(math.Abs(d.turn) > angleBar) {
				continue
			}
			d.text = fmt.Sprintf("%s against %s: |%s*| %+.2g %%", b.run.Name, a.run.Name, symbol(c), 100*d.ratio)
			if !math.IsNaN(d.turn) {
				d.text += fmt.Sprintf(", loss angle %+.2g°", d.turn)
			}
			if len(found[test]) == 0 {
				tests = append(tests, test)
			}
			found[test] = append(found[test], d)
			points[test] = append(points[test], common...)
		}
	}
	for _, test := range tests {
		worst, size := disagreement{}, 0.0
		for _, d := range found[test] {
			s := math.Abs(d.ratio) / repeatModulus
			if !math.IsNaN(d.turn) {
				s = math.Max(s, math.Abs(d.turn)/repeatAngle)
			}
			if s > size {
				worst, size = d, s
			}
		}
		f := data.Finding{
			Code: "repeats-disagree", Severity: data.Doubt, Test: test, Rows: data.Places(points[test]),
			Evidence: fmt.Sprintf("%d of %d pairs of repeated runs disagree; worst: %s", len(found[test]), pairs[test], worst.text),
			Cause:    "conditioning, mounting or geometry of the specimens, the temperature, or another batch",
			Remedy:   "say which specimen and mounting each run belongs to; measure once more",
		}
		if size > 5 {
			f.Severity = data.Severe
		}
		list = append(list, f)
	}
	return list
}

// compare returns the ratios b/a of the moduli and the differences b−a of the
// loss angles over the points that two runs have in common, and those of b.
func compare(kind data.Kind, a, b []data.Point) (ratios, turns []float64, common []data.Point) {
	for _, q := range b {
		for _, p := range a {
			var same bool
			switch kind {
			case data.FrequencySweep:
				same = alike(p.Frequency, q.Frequency, 0.01)
			case data.StrainSweep:
				same = alike(p.Strain, q.Strain, 0.01)
			case data.Relaxation:
				same = alike(p.Time, q.Time, 0.01)
			}
			if !same {
				continue
			}
			ratios = append(ratios, magnitude(q)/magnitude(p))
			if !math.IsNaN(p.Loss) && !math.IsNaN(q.Loss) {
				turns = append(turns, angle(q)-angle(p))
			}
			common = append(common, q)
			break
		}
	}
	return ratios, turns, common
}

// geometryUncertainty returns the stated relative standard uncertainty of a specimen's
// geometry, 1.5 % where none is.
func geometryUncertainty(c *data.Campaign) float64 {
	if u := c.Uncertainty.Geometry; u > 0 {
		return u
	}
	return 0.015
}
