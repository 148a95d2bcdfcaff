package screen

import (
	"fmt"
	"math"
	"slices"

	"phaselag/data"
)

// contactLost finds sweeps in which the modulus falls suddenly and does not come
// back: a clamp that slips, a bond that gives way. With y = ln|G*| in the order of
// the table and x the logarithm of frequency or strain, or the temperature, the
// fall between rows i and i+1 is
//
//	s = y_(i+1) − y_i − m·(x_(i+1) − x_i),
//
// m being the median slope of the two steps before and the two after, three where
// there are. It is a fall where s is below
//
//   - −4 %, and minus eight times the scatter of a point (see noise),
//   - minus three times what the steps around deviate from m,
//
// and all rows after it lie below the line of those before by half of it. A single
// bad point, which comes back at once, is none. Beyond 15 % it is severe; the turn
// of the loss angle at that place is told, for a slipping contact rubs. Our own rule.
func contactLost(c *data.Campaign) (list []data.Finding) {
	const least, severe = 0.04, 0.15
	for _, t := range c.Tests {
		if !oscillatory(t.Kind) {
			continue
		}
		for _, r := range t.Runs {
			points := used(r)
			i, fall := suddenFall(t.Kind, points, least)
			if fall == 0 {
				continue
			}
			f := data.Finding{
				Code: "contact-lost", Severity: data.Doubt, Test: t.Name, Rows: data.Places(points[i+1:]),
				Evidence: fmt.Sprintf("%s: |%s*| falls by %s between %s and does not come back; the loss angle turns by %+.2g° there",
					r.Name, symbol(c), percent(-math.Expm1(-fall)), data.Places(points[i:i+2]), angle(points[i+1])-angle(points[i])),
				Cause:  "the specimen slipped in its clamps or on its plates, or a bond gave way",
				Remedy: "look at the specimen; leave out what was measured after it; bond or clamp it anew and repeat",
			}
			if fall > severe {
				f.Severity = data.Severe
			}
			list = append(list, f)
		}
	}
	return list
}

// abscissa returns what a kind of test sweeps, on the scale on which moduli are
// smooth: logarithms of frequency and strain, temperature in K.
func abscissa(kind data.Kind, p data.Point) float64 {
	switch kind {
	case data.FrequencySweep:
		return math.Log(p.Frequency)
	case data.StrainSweep:
		return math.Log(p.Strain)
	}
	return p.Temperature
}

// suddenFall returns the row before the largest fall and its size, 0 for none.
func suddenFall(kind data.Kind, points []data.Point, least float64) (at int, size float64) {
	n := len(points)
	if n < 8 {
		return 0, 0
	}
	x, y := make([]float64, n), make([]float64, n)
	for i, p := range points {
		x[i], y[i] = abscissa(kind, p), math.Log(magnitude(p))
	}
	for i := 1; i < n; i++ {
		if !((x[i]-x[i-1])*(x[1]-x[0]) > 0) {
			return 0, 0 // not swept in one direction, or not known
		}
	}
	bar := math.Max(least, 8*noise(y))
	for i := 2; i+3 < n; i++ {
		var slopes []float64
		for _, j := range []int{i - 3, i - 2, i - 1, i + 1, i + 2, i + 3} {
			if j >= 0 && j+1 < n {
				slopes = append(slopes, (y[j+1]-y[j])/(x[j+1]-x[j]))
			}
		}
		m := median(slopes)
		step := x[i+1] - x[i]
		spread := 0.0
		for _, s := range slopes {
			spread = math.Max(spread, math.Abs((s-m)*step))
		}
		s := y[i+1] - y[i] - m*step
		if s > -math.Max(bar, 3*spread) || -s <= size {
			continue
		}
		// A straight line through what is before, three rows at the least.
		lost := true
		for j := i + 1; j <= min(i+3, n-1); j++ {
			lost = lost && y[j] < y[i]+m*(x[j]-x[i])+s/2
		}
		// From three rows on the curve bends; its mean level must not return.
		if after, before := y[i+1:], y[:i+1]; lost && !returns(before, after, s) {
			at, size = i, -s
		}
	}
	return at, size
}

// returns reports whether a later rise undoes the fall s < 0 at once: a step up of
// more than half of it, in one row, where steps before were far smaller.
func returns(before, after []float64, s float64) bool {
	var usual []float64
	for i := 1; i < len(before); i++ {
		usual = append(usual, math.Abs(before[i]-before[i-1]))
	}
	for i := 1; i < len(after); i++ {
		if d := after[i] - after[i-1]; d > -s/2 && d > 4*slices.Max(usual) {
			return true
		}
	}
	return false
}
