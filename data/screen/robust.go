package screen

import (
	"math"
	"slices"
)

// median returns the median, NaN of nothing. It sorts a copy.
func median(x []float64) float64 {
	if len(x) == 0 {
		return math.NaN()
	}
	s := slices.Clone(x)
	slices.Sort(s)
	n := len(s)
	if n%2 == 1 {
		return s[n/2]
	}
	return (s[n/2-1] + s[n/2]) / 2
}

// noise estimates the standard deviation of what scatters about a smooth curve
// from its second differences,
//
//	σ ≈ 1.4826·median|y_(i−1) − 2y_i + y_(i+1)| / √6,
//
// which is exact for equally spaced points on a parabola of little curvature
// and normal noise; 1.4826 makes the median deviation a standard deviation. It
// is 0 for fewer than five points, where it would mean nothing.
func noise(y []float64) float64 {
	if len(y) < 5 {
		return 0
	}
	d := make([]float64, 0, len(y)-2)
	for i := 1; i+1 < len(y); i++ {
		d = append(d, y[i-1]-2*y[i]+y[i+1])
	}
	centre := median(d) // the curve's own curvature
	for i := range d {
		d[i] = math.Abs(d[i] - centre)
	}
	return 1.4826 * median(d) / math.Sqrt(6)
}

// slope returns the least-squares slope of y over x, NaN where x does not vary.
func slope(x, y []float64) float64 {
	var mx, my, xx, xy float64
	for i := range x {
		mx += x[i] / float64(len(x))
		my += y[i] / float64(len(x))
	}
	for i := range x {
		xx += (x[i] - mx) * (x[i] - mx)
		xy += (x[i] - mx) * (y[i] - my)
	}
	if xx == 0 {
		return math.NaN()
	}
	return xy / xx
}
