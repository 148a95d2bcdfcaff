package screen

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/stat/distuv"

	"phaselag/data"
)

// trends finds isotherms and strain sweeps in which the modulus creeps with time: by
// the order of the rows, where that order is not the order of the frequencies or
// strains. A run that repeats its first frequencies at the end, goes up and comes
// down, or takes every other frequency on its way back tells the two apart. With
// x the logarithm of frequency or strain and k the number of the row,
//
//	ln|G*| = b0 + b1·x + b2·x² + b3·x³ + d·k
//
// is fitted to runs of eight rows and more; d is a drift where its Student t has a
// p below 1e-6 and d over the whole run is more than 1 %. A run that was parted where
// its frequencies began again is taken as one (see rejoined). Where rows stand in the
// order of x (correlation of the ranks beyond 0.9) nothing can be told. A strain
// sweep that only gets softer on its way was conditioned by it: see
// firstRunSoftening. Beyond 10 % it is severe. Our own rule.
func trends(c *data.Campaign) (list []data.Finding) {
	const least, severe = 0.01, 0.1
	for _, t := range c.Tests {
		if t.Kind != data.FrequencySweep && t.Kind != data.StrainSweep {
			continue
		}
		for _, r := range rejoined(t) {
			points := used(r)
			drift, u, ok := trendOf(t.Kind, points)
			if !ok || math.Abs(drift) < least {
				continue
			}
			f := data.Finding{
				Code: "modulus-drifts-in-run", Severity: data.Doubt, Test: t.Name, Rows: data.Places(points),
				Evidence: fmt.Sprintf("%s: beside what frequency or strain explain, |%s*| changes by %+.2g %% (± %.1g %%) from the first to the last row", r.Name, symbol(c), 100*math.Expm1(drift), 200*u),
				Cause:    "the specimen softens or warms under the test, had not reached its temperature, or slips slowly",
				Remedy:   "condition the specimen, dwell longer, and repeat the first condition at the end of every run",
			}
			if t.Kind == data.StrainSweep && drift < 0 {
				f.Cause = "the sweep's own large strains softened the specimen: it was not conditioned at them before"
				f.Remedy = "condition the specimen at the largest strain of the sweep, rest, and state it; take the falling branch until then"
			}
			if math.Abs(drift) > severe {
				f.Severity = data.Severe
			}
			list = append(list, f)
		}
	}
	return list
}

// rejoined returns a test's runs, those drawn together that follow each other in one
// file at one temperature (0.5 K), at one frequency in a strain sweep, and have at most
// half of the longer one's conditions in common: a run whose first frequencies are
// repeated at its end, or one that takes every other frequency on its way back. Two runs
// with most conditions in common repeat each other (see repeats).
func rejoined(t data.Test) (runs []data.Run) {
	for _, r := range t.Runs {
		points := used(r)
		r.Points = points
		n := len(runs) - 1
		if n < 0 || len(points) == 0 || len(runs[n].Points) == 0 {
			runs = append(runs, r)
			continue
		}
		before := runs[n].Points
		_, _, common := compare(t.Kind, before, points)
		if !(math.Abs(r.Temperature-runs[n].Temperature) <= 0.5) || before[0].File != points[0].File || 2*len(common) > max(len(before), len(points)) ||
			t.Kind == data.StrainSweep && !alike(before[0].Frequency, points[0].Frequency, 0.01) {
			runs = append(runs, r)
			continue
		}
		runs[n].Points = append(slices.Clone(before), points...)
	}
	return runs
}

// trendOf returns the change of ln|G*| with the order of the rows over the run, and
// its standard deviation; ok is false where there is none beyond chance.
func trendOf(kind data.Kind, points []data.Point) (drift, u float64, ok bool) {
	n := len(points)
	if n < 8 {
		return 0, 0, false
	}
	x, y, k := make([]float64, n), make([]float64, n), make([]float64, n)
	for i, p := range points {
		x[i], y[i], k[i] = abscissa(kind, p), math.Log(magnitude(p)), float64(i)/float64(n-1)
		if math.IsNaN(x[i]) || math.IsInf(x[i], 0) {
			return 0, 0, false
		}
	}
	if !(span(x) > 0) || math.Abs(rankCorrelation(x, k)) > 0.9 {
		return 0, 0, false
	}
	middle, width := mean(x), span(x)
	for i := range x {
		x[i] = (x[i] - middle) / width
	}
	l, fits := regress(y, ones(n), x, times(x, x), times(x, times(x, x)), k)
	if !fits || !(l.u[4] > 0) {
		return 0, 0, false
	}
	student := distuv.StudentsT{Sigma: 1, Nu: float64(l.freedom)}
	if p := 2 * student.CDF(-math.Abs(l.b[4]/l.u[4])); p > 1e-6 {
		return 0, 0, false
	}
	return l.b[4], l.u[4], true
}

// rankCorrelation is Spearman's, without regard to ties.
func rankCorrelation(a, b []float64) float64 {
	ra, rb := ranks(a), ranks(b)
	ma, mb := mean(ra), mean(rb)
	var aa, bb, ab float64
	for i := range ra {
		aa += (ra[i] - ma) * (ra[i] - ma)
		bb += (rb[i] - mb) * (rb[i] - mb)
		ab += (ra[i] - ma) * (rb[i] - mb)
	}
	return ab / math.Sqrt(aa*bb)
}

func ranks(x []float64) []float64 {
	order := make([]int, len(x))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int {
		switch {
		case x[a] < x[b]:
			return -1
		case x[a] > x[b]:
			return 1
		}
		return 0
	})
	r := make([]float64, len(x))
	for rank, i := range order {
		r[i] = float64(rank)
	}
	return r
}

// outOfOrder finds runs that go through their frequencies, strains or temperatures
// in order but for a few rows, which then were moved or mistyped; and tests that go
// the other way than the campaign file says. A run that turns once (up and down)
// is in order; one that is out of order in more than one row of five was shuffled
// on purpose.
func outOfOrder(c *data.Campaign) (list []data.Finding) {
	for _, t := range c.Tests {
		if t.Kind == data.Static {
			continue
		}
		var moved []data.Point
		runs, against := 0, 0
		for _, r := range t.Runs {
			points := used(r)
			x := make([]float64, len(points))
			for i, p := range points {
				x[i] = abscissa(t.Kind, p)
				if t.Kind == data.Relaxation {
					x[i] = p.Time
				}
			}
			if len(x) < 5 || math.IsNaN(span(x)) || span(x) == 0 {
				continue
			}
			runs++
			rising := slope(ranks(ones(len(x))), x) > 0
			if t.Direction == "ascending" && !rising || t.Direction == "descending" && rising {
				against++
			}
			strays := strays(x)
			if len(strays) == 0 || 5*len(strays) > len(x) {
				continue
			}
			for _, i := range strays {
				moved = append(moved, points[i])
			}
		}
		if len(moved) > 0 {
			list = append(list, data.Finding{
				Code: "steps-out-of-order", Severity: data.Note, Test: t.Name, Rows: data.Places(moved),
				Evidence: fmt.Sprintf("%d rows stand out of the order that their runs otherwise keep", len(moved)),
				Cause:    "rows moved or measured once more later, or a mistyped frequency, strain or temperature",
				Remedy:   "compare the rows with the apparatus's own record",
			})
		}
		if runs > 0 && against == runs {
			other := map[string]string{"ascending": "descending", "descending": "ascending"}[t.Direction]
			list = append(list, data.Finding{
				Code: "direction-contradicted", Severity: data.Note, Test: t.Name,
				Evidence: fmt.Sprintf("direction: %s is stated, and all %d runs are %s", t.Direction, runs, other),
				Cause:    "a table sorted after the test, or a wrong statement",
				Remedy:   "correct direction, or give the rows in the order of the test",
			})
		}
	}
	return list
}

// strays returns the fewest rows without which the rest rises, falls, or rises and
// falls, or falls and rises, once; nil where nothing strays. Rows that repeat a value
// do not stray, nor do those that step back by less than 0.6 of the usual step, as
// measured temperatures do. A run of more than 200 rows is taken as it is.
func strays(x []float64) []int {
	n := len(x)
	if n > 200 || n < 2 {
		return nil
	}
	var steps []float64
	for i := 1; i < n; i++ {
		steps = append(steps, math.Abs(x[i]-x[i-1]))
	}
	allowed := 0.6 * median(steps)
	var best []int
	found := false
	for turn := range n + 1 {
		for _, sign := range []float64{1, -1} {
			// Up to the turn x·sign does not fall, after it does not rise.
			kept := longest(x[:turn], sign, allowed)
			after := longest(x[turn:], -sign, allowed)
			if len(kept)+len(after) <= n-len(best)-1 && found {
				continue
			}
			keep := make([]bool, n)
			for _, i := range kept {
				keep[i] = true
			}
			for _, i := range after {
				keep[turn+i] = true
			}
			var out []int
			for i := range keep {
				if !keep[i] {
					out = append(out, i)
				}
			}
			if !found || len(out) < len(best) {
				best, found = out, true
			}
			if len(best) == 0 {
				return nil
			}
		}
	}
	return best
}

// longest returns the indices of a longest part of x·sign that does not
// fall by more than is allowed.
func longest(x []float64, sign, allowed float64) []int {
	n := len(x)
	length, from := make([]int, n), make([]int, n)
	last := -1
	for i := range n {
		length[i], from[i] = 1, -1
		for j := range i {
			if x[j]*sign <= x[i]*sign+allowed && length[j]+1 > length[i] {
				length[i], from[i] = length[j]+1, j
			}
		}
		if last < 0 || length[i] > length[last] {
			last = i
		}
	}
	var list []int
	for i := last; i >= 0; i = from[i] {
		list = append(list, i)
	}
	slices.Reverse(list)
	return list
}
