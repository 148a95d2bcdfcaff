package quality

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// Problem: how well does a process fit between its limits T_L and T_U?
//
//	C_p = (T_U − T_L)/(6σ̂),   C_pk = min(T_U − x̄, x̄ − T_L)/(3σ̂)   with σ̂ within,
//	P_p, P_pk the same with s overall.
//
// σ̂ within is that of the chart: the moving range of single values, R̄/d2 of repeats.
//
// Intervals. (N−1)s²/σ² is chi-squared, so P_p lies between P_p√(χ²_2.5%/ν) and
// P_p√(χ²_97.5%/ν) with ν = N−1. σ̂ within is taken for a chi with the ν that gives its own
// relative variance V, ν ≈ 1/(2V) + 1/4 to two orders (Patnaik's way):
//
//	k ranges of n values:     V = d3²/(d2² k)
//	m moving ranges of two:   V = (m·v + 2(m−1)·c)/(m² d2²),
//	                          v = 2 − 4/π,  c = (2/π)(√3 + π/6) − 4/π
//
// (c is the covariance of neighbours, which share a value: with ρ = −½ of the differences
// E|UV| = (2/π)·2·(√(1−ρ²) + ρ asin ρ).)
//
// For C_pk and P_pk the normal approximation of Bissell (Appl. Statist. 39 (1990) 331,
// from memory):  C_pk ± z √(1/(9N) + C_pk²/(2ν)). Its coverage is
// simulated in the tests: 93 to 95 % from 15 batches of four or 25 of one upwards.
// All of this supposes normal values and a process that stands still; Doubts say where the
// numbers speak against it.

// Index is a capability index with its 95 % interval.
type Index struct{ Value, Low, High float64 }

// Capability is how a process fits between limits. Indices that do not exist (C_p with one
// limit, anything without scatter) are NaN.
type Capability struct {
	N              int // measured batches, or values where there are repeats
	Mean           float64
	Within         float64 // σ̂
	Overall        float64 // s
	Freedom        float64 // effective, of Within
	From           string  // where Within comes from
	Cp, Cpk        Index
	Pp, Ppk        Index
	Doubts         []string
	BatchesFor10pc int // batches for an interval of Pp of ± 10 %
}

// Capable takes the indices from a series of batches. Scatter within batches is used where
// from says so; "" and MovingRange take the moving range of the batches' means.
func Capable(batches []Batch, l Limits, from Scatter) (Capability, error) {
	c := Capability{BatchesFor10pc: BatchesNeeded(0.1)}
	if fault := l.fault(); fault != "" {
		return c, fmt.Errorf("%s", fault)
	}
	var chart *Chart
	var err error
	var values []float64
	count := 0 // batches
	for _, b := range batches {
		mean, n := b.mean()
		if n == 0 {
			continue
		}
		count++
		if from == Within {
			values = append(values, measured(b.Values)...)
		} else {
			values = append(values, mean)
		}
	}
	switch from {
	case "", MovingRange:
		chart, _, err = Individuals(batches, Settings{})
		if err == nil {
			c.Freedom = freedomOf(movingRangeVariance(count - 1))
		}
	case Within:
		chart, _, err = AveragesRanges(batches, Settings{})
		if err == nil {
			c.Freedom, err = rangesFreedom(batches)
		}
	default:
		err = fmt.Errorf("no scatter is called %q; %q and %q are", string(from), string(Within), string(MovingRange))
	}
	if err != nil {
		return c, err
	}
	c.N, c.Within, c.From = len(values), chart.Sigma, chart.From
	c.Mean, c.Overall = moments(values)
	N := float64(c.N)
	c.Cp, c.Cpk = indices(l, c.Mean, c.Within, N, c.Freedom)
	c.Pp, c.Ppk = indices(l, c.Mean, c.Overall, N, N-1)
	if count < FewBatches {
		c.Doubts = append(c.Doubts, fmt.Sprintf("%d batches; capability wants %d at least, and about %d for an interval of 10 %%", count, FewBatches, c.BatchesFor10pc))
	}
	if !(c.Within > 0) {
		c.Doubts = append(c.Doubts, "the values do not scatter: the resolution of the test is too coarse, or the values are copies")
	}
	if n := chart.Called(); n > 0 {
		c.Doubts = append(c.Doubts, fmt.Sprintf("the chart calls out %d of %d points: the process does not stand still, and its capability is no forecast", n, count))
	}
	return c, nil
}

// indices of a mean and a sigma with ν degrees of freedom.
func indices(l Limits, mean, sigma, n, freedom float64) (both, nearest Index) {
	none := Index{math.NaN(), math.NaN(), math.NaN()}
	if !(sigma > 0) || !finite(sigma) || !finite(mean) || !(freedom > 0) {
		return none, none
	}
	both, nearest = none, none
	if finite(l.Lower) && finite(l.Upper) {
		v := (l.Upper - l.Lower) / (6 * sigma)
		chi := distuv.ChiSquared{K: freedom}
		both = Index{v, v * math.Sqrt(chi.Quantile(0.025)/freedom), v * math.Sqrt(chi.Quantile(0.975)/freedom)}
	}
	v := math.Min(l.above()-mean, mean-l.below()) / (3 * sigma)
	half := tQuantile(0.975, 0) * math.Sqrt(1/(9*n)+v*v/(2*freedom))
	nearest = Index{v, v - half, v + half}
	return both, nearest
}

// movingRangeVariance is the relative variance of the mean of m moving ranges.
func movingRangeVariance(m int) float64 {
	const v, d2squared = 2 - 4/math.Pi, 4 / math.Pi
	c := (2/math.Pi)*(math.Sqrt(3)+math.Pi/6) - 4/math.Pi
	M := float64(m)
	return (M*v + 2*(M-1)*c) / (M * M * d2squared)
}

// rangesFreedom is the effective ν of the mean of R/d2.
func rangesFreedom(batches []Batch) (float64, error) {
	list, err := samples(batches, true)
	if err != nil {
		return 0, err
	}
	var sum, k float64
	for _, b := range list {
		if b.usable() {
			r := b.factors.RangeSD / b.factors.RangeMean
			sum, k = sum+r*r, k+1
		}
	}
	return freedomOf(sum / (k * k)), nil
}

// freedomOf is the ν of a chi with the relative variance V. For a chi
// V = 1/c4² − 1 = 1/(2ν) + 1/(8ν²) + …, turned round to two orders.
func freedomOf(V float64) float64 { return 1/(2*V) + 0.25 }

// BatchesNeeded is the least number of batches for which the lower end of the 95 % interval
// of P_p lies within a share, 0.01 to 0.9, below the value; 0 outside that range.
func BatchesNeeded(share float64) int {
	if !(share >= 0.01 && share <= 0.9) {
		return 0
	}
	enough := func(n int) bool {
		v := float64(n - 1)
		return 1-math.Sqrt(distuv.ChiSquared{K: v}.Quantile(0.025)/v) <= share
	}
	lo, hi := 2, 4
	for !enough(hi) {
		lo, hi = hi, 2*hi
	}
	for hi-lo > 1 {
		if mid := (lo + hi) / 2; enough(mid) {
			hi = mid
		} else {
			lo = mid
		}
	}
	if enough(lo) {
		return lo
	}
	return hi
}
