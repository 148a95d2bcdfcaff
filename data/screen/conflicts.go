package screen

import (
	"fmt"
	"math"
	"strings"

	"phaselag/data"
)

// Some faults of reading show in no table alone: E taken for G is a factor of 3, a
// peak-to-peak amplitude taken for a single one a factor of 2 in strain, and both are
// as smooth as the truth. They are claimed only from a second source in the
// campaign, which the evidence names. Our own rules.

// conflictingModuli compares two oscillatory tests at common conditions: temperature within 1 K, frequency within
// 2 %, strain within a tenth. Where the median ratio of at least three lies within
// 12 % of 3, of 1000 or of a million, the ratios scatter by less than a tenth, and the
// loss angles agree within 2°, the two tests were read in different moduli or units.
// One decade or more below the glass geometry never does that: specimens differ by
// percents.
func conflictingModuli(c *data.Campaign) (list []data.Finding) {
	for i, b := range c.Tests {
		for _, a := range c.Tests[:i] {
			ratios, turns, points := commonConditions(a, b)
			if len(ratios) < 3 {
				continue
			}
			middle := median(ratios)
			var spread []float64
			for _, r := range ratios {
				spread = append(spread, math.Abs(math.Log(r/middle)))
			}
			if median(spread) > 0.1 || math.Abs(median(turns)) > 2 {
				continue
			}
			for _, v := range []struct {
				factor        float64
				cause, remedy string
			}{
				{3, "E was taken for G in the stiffer test, or G for E in the softer one (G = E/3 for rubber)", "state deformation and the modulus's heading in both tests"},
				{1000, "the units of one of the two tests are wrong, kPa for Pa or MPa for kPa", "state the unit in columns"},
				{1e6, "the units of one of the two tests are wrong, MPa for Pa", "state the unit in columns"},
			} {
				if larger := math.Max(middle, 1/middle); math.Abs(math.Log(larger/v.factor)) > 0.12 {
					continue
				}
				list = append(list, data.Finding{
					Code: "tests-contradict-in-modulus", Severity: data.Severe, Test: b.Name, Rows: data.Places(points),
					Evidence: fmt.Sprintf("at %d common conditions |%s*| of %s (%s) is %.4g times that of %s (%s), and the loss angles agree within %.2g°", len(ratios), symbol(c), b.Name, stated(b), middle, a.Name, stated(a), math.Abs(median(turns))),
					Cause:    v.cause, Remedy: v.remedy + "; until then only one of the two can be right",
				})
			}
		}
	}
	return list
}

// stated tells how a test's deformation is understood.
func stated(t data.Test) string {
	if t.Deformation == "" {
		return "deformation not stated"
	}
	return string(t.Deformation)
}

// commonConditions returns the ratios b/a of |G*| and the differences of the loss
// angles at the conditions that two tests have in common.
func commonConditions(a, b data.Test) (ratios, turns []float64, points []data.Point) {
	if !oscillatory(a.Kind) || !oscillatory(b.Kind) {
		return nil, nil, nil
	}
	for _, rb := range b.Runs {
		for _, ra := range a.Runs {
			if math.Abs(ra.Temperature-rb.Temperature) > 1 {
				continue // not known in a temperature sweep
			}
			for _, q := range used(rb) {
				for _, p := range used(ra) {
					if math.Abs(p.Temperature-q.Temperature) <= 1 && alike(p.Frequency, q.Frequency, 0.02) && (alike(p.Strain, q.Strain, 0.1) || math.IsNaN(p.Strain) != math.IsNaN(q.Strain)) {
						ratios, turns, points = append(ratios, magnitude(q)/magnitude(p)), append(turns, angle(q)-angle(p)), append(points, q)
						break
					}
				}
			}
		}
	}
	return ratios, turns, points
}

// headingAgainstDeformation finds columns whose heading names one modulus while the
// test's deformation measures the other: E' in shear, G' in tension.
func headingAgainstDeformation(c *data.Campaign) (list []data.Finding) {
	for _, t := range c.Tests {
		for _, k := range t.Columns {
			letter := modulusLetter(k.Heading)
			var other string
			switch {
			case letter == "E" && (t.Deformation == data.SimpleShear || t.Deformation == data.Torsion):
				other = "G"
			case letter == "G" && t.Deformation == data.Tension:
				other = "E"
			default:
				continue
			}
			list = append(list, data.Finding{
				Code: "heading-against-deformation", Severity: data.Doubt, Test: t.Name, Rows: k.File,
				Evidence: fmt.Sprintf("the heading %q names %s, and the deformation is %s, which measures %s", k.Heading, letter, t.Deformation, other),
				Cause:    "a wrong deformation, or a heading of another test; E is about 3 G, so that one of the readings is wrong by that",
				Remedy:   fmt.Sprintf("correct deformation if %s is right; else give the column in columns: {storage modulus: …} of the right modulus", letter),
			})
			break
		}
	}
	return list
}

// modulusLetter returns E or G where a heading begins with the symbol of a modulus:
// E', E”, |E*|, G' and so on.
func modulusLetter(heading string) string {
	h := strings.TrimLeft(strings.TrimSpace(heading), "|")
	for _, letter := range []string{"E", "G"} {
		rest, ok := strings.CutPrefix(h, letter)
		for _, mark := range []string{"'", "′", "″", "’", "”", "*"} {
			if ok && strings.HasPrefix(rest, mark) {
				return letter
			}
		}
	}
	return ""
}

// deformationUnstated notes tests of which neither heading nor campaign file says how
// they were strained, with what each reading would mean.
func deformationUnstated(c *data.Campaign) (list []data.Finding) {
	for _, t := range c.Tests {
		assumed := ""
		for _, a := range c.Assumptions {
			if said, ok := strings.CutPrefix(a, t.Name+": deformation not stated, taken as "); ok {
				assumed = said
			}
		}
		if assumed == "" || !oscillatory(t.Kind) {
			continue
		}
		letter := ""
		for _, k := range t.Columns {
			if l := modulusLetter(k.Heading); l != "" {
				letter = l
			}
		}
		if letter != "" {
			continue // the heading says it
		}
		var sizes []float64
		for _, r := range t.Runs {
			for _, p := range used(r) {
				sizes = append(sizes, magnitude(p))
			}
		}
		m := median(sizes)
		other := "if it was tension, the file's moduli are E and G is a third of what is taken: " + modulus(m/3) + " in the middle, not " + modulus(m)
		if assumed != string(data.SimpleShear) {
			other = "if it was shear, the file's moduli are G and G is three times what is taken: " + modulus(3*m) + " in the middle, not " + modulus(m)
		}
		list = append(list, data.Finding{
			Code: "deformation-not-stated", Severity: data.Note, Test: t.Name,
			Evidence: "deformation is taken as " + assumed + "; " + other + "; strains would be √3 apart",
			Cause:    "neither headings nor campaign file say it, and the numbers cannot show it",
			Remedy:   "state deformation: shear, tension, compression or torsion",
		})
	}
	return list
}
