package fitting

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"phaselag/data"
	"phaselag/fitting/doubt"
	"phaselag/fitting/superpose"
)

// distrust gives points far from everything else less weight. They are looked for
// with shift factors free of any law, so that a law that does not hold makes no
// outliers.
func (a *answer) distrust(s *superpose.Solution, noise []superpose.GroupNoise) (*superpose.Solution, []superpose.GroupNoise, error) {
	far := false
	for _, z := range s.Distances() {
		far = far || z > superpose.Far
	}
	if !far {
		return s, noise, nil
	}
	judge := s
	if !a.oneTemperature() && s.Form.Law != superpose.Factors {
		free := a.freely(s)
		if free == nil {
			return s, noise, nil
		}
		free, _, err := free.Refine(4)
		if err != nil {
			return s, noise, nil
		}
		judge = free
	}
	judge, _, err := judge.Distrust(5)
	if err != nil || judge.Form.Weights == nil {
		return s, noise, nil
	}
	return s.Weighted(judge.Form.Weights)
}

// worstNamed is how many distrusted points a finding tells in numbers.
const worstNamed = 5

// nameOutliers tells the points of little weight, and why.
func (a *answer) nameOutliers() {
	w := a.final.Form.Weights
	if w == nil {
		return
	}
	byTest := map[int][]int{}
	for i := range a.problem.Rows {
		if w[i] < 1 {
			byTest[a.origin[i].test] = append(byTest[a.origin[i].test], i)
		}
	}
	for t := range a.campaign.Tests {
		rows := byTest[t]
		if len(rows) == 0 {
			continue
		}
		var points []data.Point
		magnitude, phase := 0, 0
		for _, i := range rows {
			points = append(points, a.point(i))
			m, d := a.standardised(i)
			if math.Abs(m) > superpose.Far {
				magnitude++
			}
			if math.Abs(d) > superpose.Far {
				phase++
			}
		}
		sort.SliceStable(rows, func(i, j int) bool { return w[rows[i]] < w[rows[j]] })
		var worst []string
		for _, i := range rows[:min(len(rows), worstNamed)] {
			r, p := a.final.Misfit(i), a.point(i)
			m, d := a.standardised(i)
			text := fmt.Sprintf("%s:%d magnitude %+.2g %%", p.File, p.Row, 100*real(r))
			if !a.problem.Rows[i].Relaxation {
				text += fmt.Sprintf(", phase %+.2g°", deg(imag(r)))
			}
			worst = append(worst, text+fmt.Sprintf(" (%.0f times the noise)", math.Hypot(m, d)))
		}
		kind := "single readings that went wrong: a disturbance, a wrong digit"
		switch {
		case magnitude > 0 && phase == 0:
			kind = "the magnitude alone: range of the load cell, a wrong digit, slip in one step"
		case phase > 0 && magnitude == 0:
			kind = "the phase alone: few cycles, filter, resonance of the frame at that frequency"
		}
		count := fmt.Sprintf("%d points lie", len(rows))
		if len(rows) == 1 {
			count = "1 point lies"
		}
		a.found = append(a.found, data.Finding{
			Code: "outlying-points", Severity: data.Doubt, Test: a.campaign.Tests[t].Name, Rows: data.Places(points),
			Evidence: fmt.Sprintf("%s more than %.1f times the noise from the curve: %s", count, superpose.Far, strings.Join(worst, "; ")),
			Cause:    kind, Remedy: "measure them again, or leave them out with the reason; they are used with the weight in tables/points.csv",
		})
	}
}

func (a *answer) point(i int) data.Point {
	o := a.origin[i]
	return a.campaign.Tests[o.test].Runs[o.run].Points[o.point]
}

// standardised is the misfit of row i over the noise of its kind of test.
func (a *answer) standardised(i int) (magnitude, phase float64) {
	r, n := a.final.Misfit(i), a.noise[a.problem.Rows[i].Group]
	magnitude = real(r) / n.Magnitude
	if !a.problem.Rows[i].Relaxation {
		phase = imag(r) / n.Phase
	}
	return magnitude, phase
}

// doubtIsotherms asks whether an isotherm's temperature or frequency is wrong, and
// reports whether one is. The shift factors that the isotherms ask for say whether
// something is wrong at all; then every fault that could be is put right in turn
// and everything is fitted again, since a wrong temperature or frequency has its
// part in the filler term, too.
func (a *answer) doubtIsotherms(s *superpose.Solution) bool {
	p := a.problem
	if len(p.Knots) < 6 {
		return false
	}
	overlap := a.overlapShifts()
	isotherms := a.isothermRuns()
	if !a.offTheLaw(s, isotherms, overlap.Log) {
		return false
	}
	form := s.Form
	form.Law, form.Weights = superpose.WLF, nil
	start := superpose.Start{Filler: superpose.FillerStart{Activation: 6, Critical: math.Sqrt(a.amp.range_[0] * a.amp.range_[1]), Exponent: 0.6}}
	objective := func(logA []float64, change func(q *superpose.Problem)) float64 {
		q := *p
		q.Rows, q.Runs = append([]superpose.Row(nil), p.Rows...), append([]superpose.Run(nil), p.Runs...)
		change(&q)
		start.WLF = superpose.BestWLF(q.Knots, logA, q.Reference)
		fit, err := superpose.Fit(&q, form, start)
		if err != nil {
			return math.Inf(1)
		}
		return fit.Objective
	}
	rowsOf := func(q *superpose.Problem, i int, f func(r *superpose.Row)) {
		for k := range q.Rows {
			for _, j := range isotherms[i] {
				if q.Rows[k].Run == j {
					f(&q.Rows[k])
				}
			}
		}
	}
	shifted := func(i int, d float64) []float64 {
		y := append([]float64(nil), overlap.Log...)
		y[i] += d
		return y
	}
	none := objective(overlap.Log, func(*superpose.Problem) {})
	best := suspicion{Kind: doubt.None, objective: none}
	better := func(v suspicion) {
		if v.objective < best.objective {
			best = v
		}
	}
	for i := range p.Knots {
		if i+1 < len(p.Knots) {
			y := append([]float64(nil), overlap.Log...)
			y[i], y[i+1] = y[i+1], y[i]
			better(suspicion{doubt.Exchanged, i, 0, objective(y, func(q *superpose.Problem) {
				rowsOf(q, i, func(r *superpose.Row) { r.T += p.Knots[i+1] - p.Knots[i] })
				rowsOf(q, i+1, func(r *superpose.Row) { r.T -= p.Knots[i+1] - p.Knots[i] })
			})})
		}
		for _, f := range []float64{2 * math.Pi, 1 / (2 * math.Pi)} {
			better(suspicion{doubt.Unit, i, f, objective(shifted(i, math.Log10(f)), func(q *superpose.Problem) {
				rowsOf(q, i, func(r *superpose.Row) { r.Omega /= f })
			})})
		}
	}
	exact := best
	best = suspicion{objective: math.Inf(1)}
	for i := range p.Knots {
		y := append([]float64(nil), overlap.Log...)
		y[i] = math.NaN()
		better(suspicion{doubt.Off, i, 0, objective(y, func(q *superpose.Problem) {
			for _, j := range isotherms[i] {
				q.Runs[j] = superpose.Run{U: 1, Decades: true}
			}
		})})
	}
	// In units of the noise that the fault leaves.
	unit := func(v suspicion) float64 { return v.objective / float64(2*len(p.Rows)) }
	if exact.Kind != doubt.None && exact.objective <= best.objective+doubt.Parsimony*unit(best) {
		best = exact
	}
	if none-best.objective < doubt.Fall*unit(best) {
		return false
	}
	a.nameIsotherm(best, none)
	return true
}

// suspicion is a fault of isotherm i with the objective that is left when it is put
// right.
type suspicion struct {
	Kind      doubt.Kind
	i         int
	factor    float64
	objective float64
}

// isothermRuns lists the runs of every tested temperature.
func (a *answer) isothermRuns() [][]int {
	out := make([][]int, len(a.problem.Knots))
	for j, ref := range a.runs {
		for i := range out {
			for _, r := range a.knots[a.component[0]+i].runs {
				if r == ref {
					out[i] = append(out[i], j)
				}
			}
		}
	}
	return out
}

// offTheLaw says whether the factors that the isotherms ask for miss every law.
func (a *answer) offTheLaw(s *superpose.Solution, isotherms [][]int, overlap []float64) bool {
	n, knots := len(a.runs), a.problem.Knots
	chosen, T, logA := make([]bool, n), make([]float64, n), make([]float64, n)
	for i, runs := range isotherms {
		for _, j := range runs {
			chosen[j], T[j], logA[j] = true, knots[i], overlap[i]
		}
	}
	factors, err := s.Loose(chosen, T, logA)
	if err != nil {
		return false
	}
	law := superpose.BestWLF(knots, overlap, a.reference)
	y, u := make([]float64, len(knots)), make([]float64, len(knots))
	for i, runs := range isotherms {
		u[i] = math.NaN()
		if len(runs) > 0 {
			y[i] = factors.Log[runs[0]]
			u[i] = math.Hypot(factors.U[runs[0]], law.Slope(knots[i])*max(a.scatter, startScatter))
		}
	}
	f := doubt.Isotherms(knots, y, u)
	return f.Wrong
}

// nameIsotherm makes the finding.
func (a *answer) nameIsotherm(v suspicion, none float64) {
	T := a.problem.Knots[v.i]
	evidence := fmt.Sprintf("the squared misfit of the joint fit falls to %.2g of what it is", v.objective/none)
	switch v.Kind {
	case doubt.Exchanged:
		a.find("temperatures-exchanged", data.Severe, "",
			fmt.Sprintf("the isotherms of %s and %s superpose as if each were the other: %s", celsius(T), celsius(a.problem.Knots[v.i+1]), evidence),
			"the two temperatures were exchanged in the table or in the order of the runs", "look at the records of both runs; nothing was exchanged here")
	case doubt.Unit:
		what := "2π times too high (rad/s read as Hz)"
		if v.factor < 1 {
			what = "2π times too low (Hz read as rad/s)"
		}
		a.find("isotherm-frequency-unit", data.Severe, "",
			fmt.Sprintf("the isotherm of %s superposes as if its frequencies were %s: put right, %s", celsius(T), what, evidence),
			"the unit of the frequency column of this isotherm", "correct the unit of this isotherm; nothing was changed here")
	case doubt.Off:
		a.find("isotherm-off-the-law", data.Severe, "",
			fmt.Sprintf("the isotherm of %s lies off the law of the others: with a shift factor of its own, %s", celsius(T), evidence),
			"temperature not settled or not read right, or a frequency column scaled wrongly", "measure this isotherm again, or leave it out with the reason")
	}
}
