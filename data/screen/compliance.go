package screen

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"phaselag/data"
)

// Was the softness of the frame left uncorrected?
//
// Frame, grips and force transducer give way beside a stiff specimen. In series,
//
//	1/G*_meas = 1/G* + 1/G_f,     G_f = K_f/k,     k = stiffness for a modulus of 1 Pa,
//
// so that the compliance J* = 1/G* has a constant added to its storage part and
// its loss part left alone: the modulus runs against a plateau G_f that is no glass.
// The relations of Kramers and Kronig do not see it. Near any plateau J' and J”
// fall together, on a power law J' − 1/G_p ∝ J”, so that the straight line through
// the stiff end of J' over J” meets J” = 0 at 1/G_p. It is believed where
//
//   - the stiffest modulus is at least 0.4·G_p and has a tan δ below 0.1, so that G_p
//     is seen, not guessed;
//   - the modulus has risen to at least ten times the softest: not the rubber's own
//     plateau;
//   - two stiff temperatures agree in G_p within a fifth.
//
// The glass of a rubber has a shear modulus near 1 GPa (common practice, no source);
// a plateau below 0.15 GPa (0.45 GPa of E) is a doubt. One specimen cannot tell
// a soft glass from a soft frame. Two can: where another specimen of the same
// material, at least half as stiff again, runs against another G_p and the two
// agree in K_f = k/(1/G_p − 1/(1 GPa)) within 15 %, it is the frame, and severe.
const (
	lowestGlass  = 0.15e9
	glass        = 1e9
	seen         = 0.4
	sameFrame    = 0.15
	otherPieces  = 1.5
	risen        = 10
	samePlateaus = 0.2
)

// plateau is what a test's stiff end runs against.
type plateau struct {
	test   data.Test
	points []data.Point
	height float64 // G_p, Pa
	top    float64 // the stiffest |G*|, Pa
	loss   float64 // its tan δ
	k      float64 // m; NaN where the specimen is not described
}

func frameNotCorrected(c *data.Campaign) (list []data.Finding) {
	limit, whole := lowestGlass, glass
	if c.Modulus == data.Young {
		limit, whole = 3*limit, 3*whole
	}
	if c.Compound.Cellular {
		return nil // the cells' own softness
	}
	var all []plateau
	for _, t := range c.Tests {
		if t.Kind != data.FrequencySweep && t.Kind != data.TemperatureSweep {
			continue
		}
		if p, ok := plateauOf(t); ok {
			p.k = math.NaN()
			if k, ok := stiffnessOf(c, t); ok {
				p.k = k
			}
			all = append(all, p)
		}
	}
	for i, p := range all {
		if p.height > limit {
			continue
		}
		f := data.Finding{
			Code: "frame-not-corrected", Severity: data.Doubt, Test: p.test.Name, Rows: data.Places(p.points),
			Evidence: fmt.Sprintf("at its stiff end the modulus runs against %s (reached: %s at tan δ %.2g); a rubber's glass has about %s", modulus(p.height), modulus(p.top), p.loss, modulus(whole)),
			Cause:    "the frame, the grips or the force transducer gave way beside a stiff specimen, and that was not taken off",
			Remedy:   "measure the frame's stiffness with a steel dummy and state apparatus: {frame_stiffness: …}; use a softer or smaller specimen for the glass; leave the stiff end out until then",
		}
		if corrected(p.test, func(q data.Point) float64 { return q.FrameShare }) {
			f.Cause = "the stated frame stiffness is too large, or a clamp slips"
		}
		frame := func(p plateau) float64 { return p.k / (1/p.height - 1/whole) }
		if !math.IsNaN(p.k) {
			f.Evidence += fmt.Sprintf("; on specimen %s that is a frame of %.3g N/mm in series with the glass", p.test.Specimen, frame(p)/1000)
		}
		for j, q := range all {
			ratio := math.Max(q.k/p.k, p.k/q.k)
			if i != j && q.test.Specimen != p.test.Specimen && ratio >= otherPieces && q.height < limit && alike(frame(p), frame(q), sameFrame) {
				f.Severity = data.Severe
				f.Evidence += fmt.Sprintf("; specimen %s, %.2g times as stiff, runs against %s: the same %.3g N/mm", q.test.Specimen, q.k/p.k, modulus(q.height), frame(q)/1000)
			}
		}
		list = append(list, f)
	}
	return list
}

// plateauOf finds the plateau at the stiff end of a test.
func plateauOf(t data.Test) (plateau, bool) {
	var all []data.Point
	for _, r := range t.Runs {
		for _, p := range used(r) {
			if p.Loss > 0 {
				all = append(all, p)
			}
		}
	}
	if len(all) < 10 {
		return plateau{}, false
	}
	slices.SortStableFunc(all, func(a, b data.Point) int { return cmp.Compare(magnitude(b), magnitude(a)) })
	top := magnitude(all[0])
	if top < risen*magnitude(all[len(all)-1]) {
		return plateau{}, false
	}
	// The stiff end: down to half of the stiffest.
	n := 0
	for n < len(all) && magnitude(all[n]) > top/2 {
		n++
	}
	stiff := all[:n]
	if n < 5 {
		return plateau{}, false
	}
	height := interceptOf(stiff)
	if !(height > 0) || top < seen*height || all[0].Loss > 0.1*all[0].Storage {
		return plateau{}, false
	}
	// Two temperatures, each for itself.
	cold, warm := math.Inf(1), math.Inf(-1)
	for _, p := range stiff {
		cold, warm = math.Min(cold, p.Temperature), math.Max(warm, p.Temperature)
	}
	if warm-cold < 2 {
		return plateau{}, false
	}
	var halves [2][]data.Point
	for _, p := range stiff {
		if p.Temperature < (cold+warm)/2 {
			halves[0] = append(halves[0], p)
		} else {
			halves[1] = append(halves[1], p)
		}
	}
	for _, h := range halves {
		if len(h) >= 5 && !alike(interceptOf(h), height, samePlateaus) {
			return plateau{}, false
		}
	}
	return plateau{test: t, points: stiff, height: height, top: top, loss: all[0].Loss / all[0].Storage}, true
}

// interceptOf returns 1/J' where the line of J' over J” meets J” = 0.
func interceptOf(points []data.Point) float64 {
	var storage, loss []float64
	for _, p := range points {
		m := magnitude(p)
		storage, loss = append(storage, p.Storage/(m*m)), append(loss, p.Loss/(m*m))
	}
	l, ok := regress(storage, ones(len(points)), loss)
	if !ok {
		return math.NaN()
	}
	return 1 / l.b[0]
}
