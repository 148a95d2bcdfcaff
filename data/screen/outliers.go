package screen

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/stat/distuv"

	"phaselag/data"
)

// Grubbs and Cochran, as ISO 5725-2 uses them on repeats.
//
// Grubbs: of n values with mean m and standard deviation s the one farthest off has
//
//	G = max|x_i − m|/s,    G_crit = (n−1)/√n · √(t²/(n−2+t²)),  t = t(1−α/2n; n−2)
//
// (two-sided at α). Cochran: of p variances with ν degrees of freedom each, the
// greatest has
//
//	C = s²_max/Σs²,        C_crit = 1/(1 + (p−1)/F),            F = F(1−α/p; ν, (p−1)ν).
//
// Student's t and Fisher's F are from gonum's distributions.

// grubbs returns the critical value of G for n values at the level alpha, two-sided.
func grubbs(n int, alpha float64) float64 {
	m := float64(n)
	t := distuv.StudentsT{Sigma: 1, Nu: m - 2}.Quantile(1 - alpha/(2*m))
	return (m - 1) / math.Sqrt(m) * math.Sqrt(t*t/(m-2+t*t))
}

// cochran returns the critical value of C for p variances with nu degrees of freedom
// each at the level alpha.
func cochran(p, nu int, alpha float64) float64 {
	f := fisher(1-alpha/float64(p), float64(nu), float64((p-1)*nu))
	return 1 / (1 + float64(p-1)/f)
}

// fisher returns the quantile of Fisher's distribution, by bisection on the logarithm
// down to the last digits that its distribution function has.
func fisher(q, d1, d2 float64) float64 {
	f := distuv.F{D1: d1, D2: d2}
	low, high := -30.0, 30.0
	for range 200 {
		middle := (low + high) / 2
		if f.CDF(math.Exp(middle)) < q {
			low = middle
		} else {
			high = middle
		}
	}
	return math.Exp((low + high) / 2)
}

// outlierLevel is the level of Grubbs' and Cochran's tests over a whole test, shared
// out over the groups.
const outlierLevel = 0.01

// outlyingRepeats applies Grubbs' test to three and more runs that repeat each other
// (as in repeats), by the median of ln|G*| and of the loss angle over their common
// points; and Cochran's to the rows that repeat a condition within the runs of a test,
// equally often. Besides being significant at 1 % a run must lie 1 % or 0.3° off the
// others' mean. An outlier is a doubt and never severe: it may be the one right run.
func outlyingRepeats(c *data.Campaign) (list []data.Finding) {
	groups := repeatGroups(c)
	for _, g := range groups {
		n := len(g.runs)
		first := g.runs[0]
		var sizes, angles []float64
		complete := true
		for _, r := range g.runs {
			ratios, turns, _ := compare(g.kind, first.relevant, r.relevant)
			complete = complete && len(ratios) > 0
			var logs []float64
			for _, x := range ratios {
				logs = append(logs, math.Log(x))
			}
			sizes, angles = append(sizes, median(logs)), append(angles, median(turns))
		}
		if !complete {
			continue
		}
		for _, v := range []struct {
			what, unit  string
			x           []float64
			least, size float64
		}{
			{"|" + symbol(c) + "*|", " %", sizes, 0.01, 100},
			{"loss angle", "°", angles, 0.3, 1},
		} {
			i, ratio := farthest(v.x)
			others := 0.0
			for j, x := range v.x {
				if j != i {
					others += x / float64(n-1)
				}
			}
			critical := grubbs(n, outlierLevel/float64(2*len(groups)))
			if !(ratio > critical) || math.Abs(v.x[i]-others) < v.least {
				continue
			}
			r := g.runs[i]
			list = append(list, data.Finding{
				Code: "repeat-outlying", Severity: data.Doubt, Test: r.test.Name, Rows: data.Places(r.relevant),
				Evidence: fmt.Sprintf("of %d repeats %s lies %+.2g%s off the others' mean in %s: Grubbs' G = %.4g, critical at 1 %% over all groups %.4g", n, r.run.Name, v.size*(v.x[i]-others), v.unit, v.what, ratio, critical),
				Cause:    "one piece, mounting or temperature that differs; or the only right one",
				Remedy:   "look for a reason in the record; leave the run out only with one",
			})
		}
	}
	for _, t := range c.Tests {
		if f, ok := unequalScatter(c, t); ok {
			list = append(list, f)
		}
	}
	return list
}

// farthest returns the value farthest off the mean and its distance in standard
// deviations; NaN where nothing scatters.
func farthest(x []float64) (at int, ratio float64) {
	m := mean(x)
	sum := 0.0
	for i, v := range x {
		sum += (v - m) * (v - m)
		if math.Abs(v-m) > math.Abs(x[at]-m) {
			at = i
		}
	}
	return at, math.Abs(x[at]-m) / math.Sqrt(sum/float64(len(x)-1))
}

// group is three and more runs of one kind at one condition.
type group struct {
	kind data.Kind
	runs []pass
}

func repeatGroups(c *data.Campaign) (groups []group) {
	var all []group
	for i, t := range c.Tests {
		if t.Kind == data.TemperatureSweep || t.Kind == data.Static {
			continue
		}
		for j, r := range t.Runs {
			one := pass{t, i, j, r, used(r)}
			joined := false
			for k := range all {
				first := all[k].runs[0]
				if all[k].kind == t.Kind && math.Abs(first.run.Temperature-r.Temperature) <= 0.5 &&
					alike(first.run.Frequency, r.Frequency, 0.01) && alike(first.run.Strain, r.Strain, 0.05) {
					all[k].runs = append(all[k].runs, one)
					joined = true
					break
				}
			}
			if !joined {
				all = append(all, group{t.Kind, []pass{one}})
			}
		}
	}
	for _, g := range all {
		if len(g.runs) >= 3 {
			groups = append(groups, g)
		}
	}
	return groups
}

// unequalScatter applies Cochran's test to the repeated rows of a test's runs.
func unequalScatter(c *data.Campaign, t data.Test) (data.Finding, bool) {
	type cell struct {
		name   string
		points []data.Point
	}
	var cells []cell
	for _, r := range t.Runs {
		if !oscillatory(t.Kind) || t.Kind == data.TemperatureSweep {
			continue
		}
		var mine []cell
		for _, p := range used(r) {
			joined := false
			for k := range mine {
				q := mine[k].points[0]
				if alike(p.Frequency, q.Frequency, 1e-3) && alike(p.Strain, q.Strain, 0.02) {
					mine[k].points = append(mine[k].points, p)
					joined = true
					break
				}
			}
			if !joined {
				mine = append(mine, cell{fmt.Sprintf("%s, %.4g Hz", r.Name, p.Frequency), []data.Point{p}})
			}
		}
		cells = append(cells, mine...)
	}
	// The number of repeats that most cells have.
	count := map[int]int{}
	usual := 0
	for _, k := range cells {
		if n := len(k.points); n >= 2 {
			count[n]++
			if count[n] > count[usual] || count[n] == count[usual] && n > usual {
				usual = n
			}
		}
	}
	if count[usual] < 3 {
		return data.Finding{}, false
	}
	sum, greatest := 0.0, 0.0
	var worst cell
	for _, k := range cells {
		if len(k.points) != usual {
			continue
		}
		var y []float64
		for _, p := range k.points {
			y = append(y, math.Log(magnitude(p)))
		}
		m, v := mean(y), 0.0
		for _, x := range y {
			v += (x - m) * (x - m) / float64(usual-1)
		}
		sum += v
		if v > greatest {
			greatest, worst = v, k
		}
	}
	critical := cochran(count[usual], usual-1, outlierLevel)
	if !(greatest/sum > critical) || math.Sqrt(greatest) < 0.01 {
		return data.Finding{}, false
	}
	return data.Finding{
		Code: "repeats-scatter-unequally", Severity: data.Doubt, Test: t.Name, Rows: data.Places(worst.points),
		Evidence: fmt.Sprintf("%s: %d repeats scatter by %s in |%s*|, the others by %s: Cochran's C = %.4g, critical at 1 %% for %d groups %.4g",
			worst.name, usual, percent(math.Sqrt(greatest)), symbol(c), percent(math.Sqrt((sum-greatest)/float64(count[usual]-1))), greatest/sum, count[usual], critical),
		Cause:  "one bad row among the repeats, or a resonance at this frequency",
		Remedy: "look at these rows; leave one out only with a reason",
	}, true
}
