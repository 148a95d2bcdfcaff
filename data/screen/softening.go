package screen

import (
	"fmt"
	"math"
	"slices"

	"phaselag/data"
)

// firstRunSoftening finds pieces that are softer when a condition is repeated later:
// a filled rubber that was not conditioned loses stiffness in its first cycles, the
// more the larger they are (the effect that bears Mullins' name). One piece in one
// mounting is compared with itself, so that geometry drops out: frequency sweeps and
// strain sweeps, in the order of their dates and of the table, at equal frequency
// (1 %), temperature (0.5 K) and strain (5 %). The median of the ratios later/earlier
// must lie below one by more than
//
//	2 %, and four times √(s² + (√2·u_T·d ln|G*|/dT)²),
//
// s being the scatter of the ratios over the root of their number, u_T the stated
// scatter of temperature from run to run (0.3 K where none is), and the slope over
// temperature that between the piece's runs. Where at least three conditions agree
// and no conditioning is stated the finding is a doubt, beyond 15 % severe; with a
// conditioning it is a note up to 5 % (see repeats-disagree for both directions).
func firstRunSoftening(c *data.Campaign) (list []data.Finding) {
	type piece struct{ specimen, mounting string }
	var pieces []piece
	byPiece := map[piece][]pass{}
	for i, t := range c.Tests {
		if t.Kind != data.FrequencySweep && t.Kind != data.StrainSweep {
			continue
		}
		key := piece{t.Specimen, t.Mounting}
		if byPiece[key] == nil {
			pieces = append(pieces, key)
		}
		for j, r := range t.Runs {
			byPiece[key] = append(byPiece[key], pass{t, i, j, r, used(r)})
		}
	}
	for _, key := range pieces {
		passes := byPiece[key]
		slices.SortStableFunc(passes, func(a, b pass) int {
			if a.test.Tested != "" && b.test.Tested != "" && a.test.Tested != b.test.Tested {
				if a.test.Tested < b.test.Tested {
					return -1
				}
				return 1
			}
			return 0
		})
		var worst softened
		for i, b := range passes {
			for _, a := range passes[:i] {
				if s, ok := compareSoftening(c, passes, a, b); ok && s.fall > worst.fall {
					worst = s
				}
			}
		}
		if worst.fall == 0 {
			continue
		}
		stated := worst.earlier.test.Conditioning.Cycles > 0
		f := data.Finding{
			Code: "softens-from-first-run", Severity: data.Doubt, Test: worst.later.test.Name, Rows: data.Places(worst.points),
			Evidence: fmt.Sprintf("specimen %s, one mounting: %s is softer than %s was at the same %d conditions by %s (± %.1g %%)",
				key.specimen, worst.later.run.Name, worst.earlier.run.Name, len(worst.points), percent(worst.fall), 200*worst.u),
			Cause:  "the first run conditioned the specimen: a filled rubber loses stiffness in its first cycles; no conditioning is stated",
			Remedy: "condition every specimen before its first run, at the largest strain that is to come, with a rest after it, and state it; do not mix the first run with later ones",
		}
		switch {
		case stated && worst.fall < 0.05:
			f.Severity = data.Note
			fallthrough
		case stated:
			f.Cause = "the stated conditioning was not enough for the strains that came after it, or the rest was shorter; or the piece was warmer"
		case worst.fall > 0.15:
			f.Severity = data.Severe
		}
		list = append(list, f)
	}
	return list
}

// pass is one run of one test.
type pass struct {
	test     data.Test
	at, nth  int
	run      data.Run
	relevant []data.Point
}

// softened is a later pass that is softer than an earlier one.
type softened struct {
	earlier, later pass
	fall, u        float64
	points         []data.Point
}

func compareSoftening(c *data.Campaign, all []pass, a, b pass) (softened, bool) {
	if !(math.Abs(a.run.Temperature-b.run.Temperature) <= 0.5) {
		return softened{}, false
	}
	var ratios []float64
	var points []data.Point
	for _, q := range b.relevant {
		for _, p := range a.relevant {
			if alike(p.Frequency, q.Frequency, 0.01) && alike(p.Strain, q.Strain, 0.05) {
				ratios = append(ratios, math.Log(magnitude(q)/magnitude(p)))
				points = append(points, q)
				break
			}
		}
	}
	if len(ratios) < 3 {
		return softened{}, false
	}
	fall := -math.Expm1(median(ratios))
	var spread []float64
	for _, r := range ratios {
		spread = append(spread, math.Abs(r-median(ratios)))
	}
	s := 1.4826 * median(spread) / math.Sqrt(float64(len(ratios)))
	slope, _ := temperatureSlope(all, a)
	u := math.Hypot(s, math.Sqrt2*temperatureScatter(c)*slope)
	if fall < 0.02 || fall < 4*u {
		return softened{}, false
	}
	return softened{a, b, fall, u, points}, true
}

// temperatureSlope returns the greatest |d ln|G*|/dT| in 1/K and |dδ/dT| in degrees/K
// from a pass to its neighbours of the same test in temperature; 0.01/K and 0.1°/K
// where there are none.
func temperatureSlope(all []pass, a pass) (size, turn float64) {
	found := false
	for _, b := range all {
		d := b.run.Temperature - a.run.Temperature
		if b.at != a.at || !(math.Abs(d) > 0.5) || math.Abs(d) > 40 {
			continue
		}
		ratios, turns, _ := compare(a.test.Kind, a.relevant, b.relevant)
		if len(ratios) == 0 {
			continue
		}
		found = true
		size = math.Max(size, math.Abs(math.Log(median(ratios))/d))
		if t := math.Abs(median(turns) / d); t > turn {
			turn = t
		}
	}
	if !found {
		return 0.01, 0.1
	}
	return size, turn
}

// temperatureScatter returns the stated scatter of temperature from run to run in K,
// 0.3 K where none is.
func temperatureScatter(c *data.Campaign) float64 {
	if s := c.Uncertainty.TemperatureScatter; s > 0 {
		return s
	}
	return 0.3
}
