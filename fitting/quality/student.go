package quality

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// manyFreedom is where Student's t is taken for normal: the two differ by less than
// 1e-6 of the quantile there.
const manyFreedom = 1e6

func many(freedom float64) bool { return !(freedom > 0) || freedom > manyFreedom }

// few is where Student's t says nothing any more and its inverse is not to be had.
func few(freedom float64) bool { return freedom > 0 && freedom < 0.5 }

// tQuantile is the quantile of Student's t; of the normal distribution for many degrees
// of freedom; NaN for less than half a degree.
func tQuantile(p, freedom float64) float64 {
	switch {
	case many(freedom):
		return distuv.UnitNormal.Quantile(p)
	case few(freedom):
		return math.NaN()
	}
	return distuv.StudentsT{Sigma: 1, Nu: freedom}.Quantile(p)
}

// tBelow is the share of Student's t below x, x infinite allowed.
func tBelow(x, freedom float64) float64 {
	switch {
	case math.IsInf(x, 1):
		return 1
	case math.IsInf(x, -1):
		return 0
	case few(freedom):
		return math.NaN()
	case many(freedom):
		return 0.5 * math.Erfc(-x/math.Sqrt2)
	}
	return distuv.StudentsT{Sigma: 1, Nu: freedom}.CDF(x)
}

func finite(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }

// measured keeps the finite numbers.
func measured(values []float64) []float64 {
	var out []float64
	for _, v := range values {
		if finite(v) {
			out = append(out, v)
		}
	}
	return out
}

// moments returns mean and standard deviation (divisor n − 1) by the shifted two-pass
// sum, so that a large mean costs no digits. sd is NaN for one value, both for none.
func moments(values []float64) (mean, sd float64) {
	n := float64(len(values))
	if n == 0 {
		return math.NaN(), math.NaN()
	}
	// Divided first: the sum of values near the largest double would overflow.
	for _, v := range values {
		mean += v / n
	}
	var d1, d2 float64
	for _, v := range values {
		d1 += (v - mean) / n
	}
	mean += d1
	for _, v := range values {
		d2 = math.Hypot(d2, v-mean)
	}
	if n < 2 {
		return mean, math.NaN()
	}
	return mean, d2 / math.Sqrt(n-1)
}
