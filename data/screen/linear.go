package screen

import (
	"fmt"
	"math"

	"phaselag/data"
)

// beyondLinear finds isotherms that were measured at a strain at which a strain sweep
// of the same campaign has already lost stiffness: the amplitude then acts in every
// isotherm, and more so in the cold. Of the strain sweep nearest in temperature the
// storage modulus at the isotherms' strain is interpolated over ln γ and compared
// with the mean of its three smallest strains. A loss of 10 % is a note, of 25 % a
// doubt (the first is common practice as the end of the linear range, no source; the
// second our own). Strains below the sweep's smallest are inside; beyond its largest
// the loss is at least that at the largest.
func beyondLinear(c *data.Campaign) (list []data.Finding) {
	const note, doubt = 0.10, 0.25
	for _, t := range c.Tests {
		if t.Kind != data.FrequencySweep && t.Kind != data.TemperatureSweep {
			continue
		}
		worst, at, onset := 0.0, 0.0, math.NaN()
		var points []data.Point
		var against data.Run
		for _, r := range t.Runs {
			strain := median(strainsOf(used(r)))
			sweep, ok := nearestSweep(c, r.Temperature)
			if !(strain > 0) || !ok {
				continue
			}
			lost, begins := lostAt(sweep, strain)
			if lost < note {
				continue
			}
			points = append(points, used(r)...)
			if lost > worst {
				worst, at, onset, against = lost, strain, begins, sweep
			}
		}
		if worst == 0 {
			continue
		}
		f := data.Finding{
			Code: "strain-beyond-linear-range", Severity: data.Note, Test: t.Name, Rows: data.Places(points),
			Evidence: fmt.Sprintf("at the %s of this test the storage modulus of %s has fallen by %s; it has fallen by 10 %% at %s", percent(at), against.Name, percent(worst), percent(onset)),
			Cause:    "an amplitude beyond the linear range of a filled rubber",
			Remedy:   "measure isotherms at a smaller strain, if the apparatus can; else every result holds for this amplitude",
		}
		if worst > doubt {
			f.Severity = data.Doubt
		}
		list = append(list, f)
	}
	return list
}

func strainsOf(points []data.Point) (list []float64) {
	for _, p := range points {
		if !math.IsNaN(p.Strain) {
			list = append(list, p.Strain)
		}
	}
	return list
}

// nearestSweep returns the strain sweep nearest to a temperature, the first one where
// the temperature is not known.
func nearestSweep(c *data.Campaign, kelvin float64) (data.Run, bool) {
	var best data.Run
	found := false
	for _, t := range c.Tests {
		if t.Kind != data.StrainSweep {
			continue
		}
		for _, r := range t.Runs {
			if len(byStrain(used(r))) < 6 {
				continue
			}
			if !found || math.Abs(r.Temperature-kelvin) < math.Abs(best.Temperature-kelvin) {
				best, found = r, true
			}
		}
	}
	return best, found
}

// lostAt returns the share of the storage modulus that a strain sweep has lost at a
// strain, and the strain at which it has lost 10 %, NaN where it never does.
func lostAt(r data.Run, strain float64) (lost, onset float64) {
	points := byStrain(used(r))
	level := (points[0].Storage + points[1].Storage + points[2].Storage) / 3
	onset = math.NaN()
	for i := 1; i < len(points); i++ {
		a, b := points[i-1], points[i]
		part := func(of float64) float64 { return math.Log(of/a.Strain) / math.Log(b.Strain/a.Strain) }
		la, lb := 1-a.Storage/level, 1-b.Storage/level
		if math.IsNaN(onset) && lb >= 0.1 {
			onset = b.Strain
			if lb > la && la < 0.1 {
				onset = a.Strain * math.Pow(b.Strain/a.Strain, (0.1-la)/(lb-la))
			}
		}
		if strain > a.Strain && strain <= b.Strain {
			lost = la + (lb-la)*part(strain)
		}
	}
	if last := points[len(points)-1]; strain > last.Strain {
		lost = 1 - last.Storage/level
	}
	return lost, onset
}
