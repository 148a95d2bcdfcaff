package screen

import (
	"fmt"
	"math"

	"phaselag/data"
)

// conflictingAmplitudes finds two strain sweeps of one campaign whose curves lie a
// factor apart along the strain: one amplitude is peak to peak (a factor of 2), or rms
// (√2), or one of each (2√2), and was taken for a single one. Their curves over ln γ
// are compared for shifts of 0, ±ln √2, ±ln 2, ±ln 2√2; the factor of the specimens on the
// modulus is free, the loss angle is not,
//
//	r_i = ln|G*|_b(x_i) − ln|G*|_a(x_i + s) − mean,     q_i = δ_b(x_i) − δ_a(x_i + s),
//	S   = mean r²/(0.5 %)² + mean q²/(0.3°)²,
//
// with a interpolated and at least six rows in common. The shift that is not
// zero is claimed where S falls by half and more, is below 6 (noise alone gives near 3
// and a kelvin or two between the runs a little more), and the sum of squares over the
// common rows by 40. Both sweeps must change by 8 % at least: a gum's flat ones can be
// moved at will. A factor of √2 shows only in curved sweeps. Runs are compared whose temperatures are within 2 K and whose frequencies
// within a factor of 1.5. Severe: it is the second source that a claim needs. Own rule.
func conflictingAmplitudes(c *data.Campaign) (list []data.Finding) {
	type sweep struct {
		test data.Test
		run  data.Run
	}
	var all []sweep
	for _, t := range c.Tests {
		if t.Kind == data.StrainSweep {
			for _, r := range t.Runs {
				all = append(all, sweep{t, r})
			}
		}
	}
	half := math.Ln2 / 2
	for i, b := range all {
		for _, a := range all[:i] {
			if a.test.Name == b.test.Name || !(math.Abs(a.run.Temperature-b.run.Temperature) <= 2) || !alike(a.run.Frequency, b.run.Frequency, 1.0/3) {
				continue
			}
			pa, pb := byStrain(used(a.run)), byStrain(used(b.run))
			if !curved(pa) || !curved(pb) {
				continue
			}
			none, rows, ok := misfitAtShift(pa, pb, 0)
			if !ok {
				continue
			}
			best, shift := none, 0.0
			for _, k := range []float64{1, -1, 2, -2, 3, -3} {
				if s, n, ok := misfitAtShift(pa, pb, k*half); ok && s < best {
					best, shift, rows = s, k*half, min(n, rows)
				}
			}
			if shift == 0 || best > none/2 || best > 6 || float64(rows)*(none-best) < 40 {
				continue
			}
			// y_b(x) = y_a(x + s): b's strains are too small by e^s, or a's too large.
			large, small := a, b
			if shift < 0 {
				large, small = b, a
			}
			what := map[float64]string{1: "rms and single amplitude, or peak to peak and rms with a stated factor", 2: "peak to peak and single amplitude", 3: "peak to peak and rms"}[math.Round(math.Abs(shift)/half)]
			list = append(list, data.Finding{
				Code: "tests-contradict-in-strain", Severity: data.Severe, Test: b.test.Name, Rows: data.Places(used(b.run)),
				Evidence: fmt.Sprintf("%s and %s are one curve when the strains of the second are divided by %.3g: the misfit falls from %.3g to %.2g (noise alone: about 3)",
					small.run.Name, large.run.Name, math.Exp(math.Abs(shift)), none, best),
				Cause:  "the two were read in different kinds of amplitude: " + what,
				Remedy: "state amplitude: zero to peak, peak to peak or rms in both tests; the numbers cannot say which of them is right",
			})
		}
	}
	return list
}

// misfitAtShift returns S and the number of common rows; ok is false where fewer than six rows of b meet the curve
// of a.
func misfitAtShift(a, b []data.Point, shift float64) (s float64, rows int, ok bool) {
	var r, q []float64
	for _, p := range b {
		x := math.Log(p.Strain) + shift
		for i := 1; i < len(a); i++ {
			x0, x1 := math.Log(a[i-1].Strain), math.Log(a[i].Strain)
			if x < x0 || x > x1 || x0 == x1 {
				continue
			}
			w := (x - x0) / (x1 - x0)
			r = append(r, math.Log(magnitude(p))-(1-w)*math.Log(magnitude(a[i-1]))-w*math.Log(magnitude(a[i])))
			q = append(q, angle(p)-(1-w)*angle(a[i-1])-w*angle(a[i]))
			break
		}
	}
	if len(r) < 6 {
		return 0, 0, false
	}
	m := mean(r)
	for i := range r {
		s += ((r[i]-m)*(r[i]-m)/(0.005*0.005) + q[i]*q[i]/(0.3*0.3)) / float64(len(r))
	}
	return s, len(r), true
}

// curved reports whether |G*| of a strain sweep changes by more than 8 %.
func curved(points []data.Point) bool {
	var y []float64
	for _, p := range points {
		y = append(y, math.Log(magnitude(p)))
	}
	return span(y) > 0.08
}
