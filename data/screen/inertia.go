package screen

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/stat/distuv"

	"phaselag/data"
)

// Was a moving mass left uncorrected?
//
// Between the specimen and the force transducer moves a mass m. Uncorrected it takes
// from the stiffness K' a share that grows with the square of the frequency, and
// nothing from K”:
//
//	G'_meas = G' − c·f²,     c = 4π²m/k,     k = stiffness for a modulus of 1 Pa.
//
// c belongs to the machine and is the same at every temperature; a material that
// falls with f² there does not exist. The relations of Kramers and Kronig do not
// see it, but the storage modulus that the loss asks for does: by
// Booij and Thoone (Rheol. Acta 21 (1982) 15; value from memory)
// dG'/d ln f ≈ (2/π)G”, so that
//
//	D(x) = G' − (2/π)∫G” dx,     x = ln f,
//
// hardly depends on x. Isotherm by isotherm D/|G*| is fitted by
// (b0 + b1·x + b2·x² − c·f²)/|G*|. What the approximation leaves is smooth and grows
// with the loss; what it may do to c, all isotherms alike, is taken as
// (0.005 + 0.4·tan δ)·|G*| at the highest frequency, some times what it does to a
// broad process. The mean of all c is believed where it
//
//   - exceeds that, and by more than five of its standard deviations,
//   - takes 3 % or more of the softest isotherm at its upper end,
//   - fits all isotherms: χ² about the mean, with both in the deviations, has a
//     p above 0.001.
//
// Isotherms of at least eight points over at least a decade take part. Beyond 10 %
// the finding is severe. The rules are our own.
const (
	massSignificance = 5.0
	massShare        = 0.03
	massSevere       = 0.1
)

// inertia is the coefficient of f² of one isotherm.
type inertia struct {
	run    data.Run
	points []data.Point
	c, u   float64 // Pa·s²
	bias   float64 // what the approximation may do to c, Pa·s²
	share  float64 // f² over |G*| at the upper end
}

func massNotCorrected(c *data.Campaign) (list []data.Finding) {
	for _, t := range c.Tests {
		if t.Kind != data.FrequencySweep {
			continue
		}
		var all []inertia
		for _, r := range t.Runs {
			if one, ok := inertiaOf(r); ok {
				all = append(all, one)
			}
		}
		if len(all) == 0 {
			continue
		}
		var weights, sum, bias, spread float64
		for _, i := range all {
			w := 1 / (i.u*i.u + i.bias*i.bias)
			weights += w
			sum += w * i.c
			bias += w * i.bias
			spread += w * w * i.u * i.u
		}
		mean, u := sum/weights, math.Sqrt(spread)/weights
		bias /= weights
		chi := 0.0
		worst := all[0]
		for _, i := range all {
			chi += (i.c - mean) * (i.c - mean) / (i.u*i.u + i.bias*i.bias)
			if i.share > worst.share {
				worst = i
			}
		}
		taken := mean * worst.share
		if !(mean >= bias+massSignificance*u) || !(taken >= massShare) || !consistent(chi, len(all)-1) {
			continue
		}
		var points []data.Point
		for _, i := range all {
			for _, p := range i.points {
				if mean*p.Frequency*p.Frequency > massShare*magnitude(p) {
					points = append(points, p)
				}
			}
		}
		f := data.Finding{
			Code: "inertia-not-corrected", Severity: data.Doubt, Test: t.Name, Rows: data.Places(points),
			Evidence: fmt.Sprintf("in %d isotherms %s' falls short by one and the same coefficient times f², (%.3g ± %.2g) Pa·s²; at %s it takes %s of the modulus",
				len(all), symbol(c), mean, 2*u+bias, worst.run.Name, percent(taken)),
			Cause:  "the force on a mass that moves between specimen and force transducer was not taken off",
			Remedy: "state apparatus: {moving_mass: …} with the weighed mass and the specimen's shape, or correct it in the machine; until then leave out the upper frequencies of the soft isotherms",
		}
		if k, ok := stiffnessOf(c, t); ok {
			f.Evidence += fmt.Sprintf("; on specimen %s that is a mass of (%.3g ± %.2g) kg", t.Specimen, mean*k/(4*math.Pi*math.Pi), (2*u+bias)*k/(4*math.Pi*math.Pi))
		}
		if corrected(t, func(p data.Point) float64 { return p.MassShare }) {
			f.Cause = "the stated moving mass is too small, or was meant for another grip"
			f.Remedy = "weigh everything that moves between specimen and force transducer"
		}
		if taken > massSevere {
			f.Severity = data.Severe
		}
		list = append(list, f)
	}
	return list
}

// inertiaOf fits one isotherm.
func inertiaOf(r data.Run) (inertia, bool) {
	points := byFrequency(used(r))
	n := len(points)
	if n < 8 || !(points[n-1].Frequency >= 9.99*points[0].Frequency) {
		return inertia{}, false
	}
	y, w, x, square := make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)
	integral := 0.0
	top := points[n-1].Frequency
	for i, p := range points {
		x[i] = math.Log(p.Frequency / top)
		if i > 0 {
			integral += (p.Loss + points[i-1].Loss) / 2 * (x[i] - x[i-1])
		}
		w[i] = 1 / magnitude(p)
		y[i] = (p.Storage - 2/math.Pi*integral) * w[i]
		square[i] = -p.Frequency * p.Frequency * w[i]
	}
	l, ok := regress(y, w, times(w, x), times(w, times(x, x)), square)
	if !ok || math.IsNaN(l.b[3]) || math.IsNaN(l.u[3]) {
		return inertia{}, false
	}
	var loss []float64
	for _, p := range points {
		loss = append(loss, p.Loss/p.Storage)
	}
	share := top * top * w[n-1]
	return inertia{run: r, points: points, c: l.b[3], u: l.u[3], bias: (0.005 + 0.4*median(loss)) / share, share: share}, true
}

// consistent reports whether a χ² is what chance gives, p > 0.001.
func consistent(chi float64, freedom int) bool {
	return freedom < 1 || 1-distuv.ChiSquared{K: float64(freedom)}.CDF(chi) > 0.001
}

// corrected reports whether a share of the machine was taken off.
func corrected(t data.Test, share func(data.Point) float64) bool {
	for _, r := range t.Runs {
		for _, p := range used(r) {
			if share(p) > 0 {
				return true
			}
		}
	}
	return false
}
