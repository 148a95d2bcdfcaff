package quality

import (
	"errors"
	"fmt"
	"math"
)

// Problem: n repeats a batch; are mean and scatter where they were?
//
// With range R_i or standard deviation s_i of a batch of n_i values, m batches in the base,
//
//	σ̂ = (1/m) Σ R_i/d2(n_i)   or   σ̂ = (1/m) Σ s_i/c4(n_i),
//	centre = Σ n_i x̄_i/Σ n_i,   limits ± 3σ̂/√n_i,
//	ranges: d2 σ̂ with D3·d2 σ̂ and D4·d2 σ̂,   standard deviations: c4 σ̂ with B3, B4.
//
// For batches of one size these are x̿ ± A2·R̄ and x̿ ± A3·s̄. The limits of averages
// suppose that nothing but the scatter inside a batch moves a batch's mean; where batches
// differ by more, Individuals is the right chart.

// errHuge is the answer to values whose mean or scatter is no number.
var errHuge = errors.New("the values are too large, or scatter too widely, for a number")

// AveragesRanges returns the chart of averages with limits from the ranges, and that of the
// ranges. Every batch has 2 to MaxSample values; one that has fewer is passed over.
func AveragesRanges(batches []Batch, s Settings) (averages, ranges *Chart, err error) {
	return averagesWith(batches, s, true)
}

// AveragesDeviations is the same with standard deviations instead of ranges, better from
// about ten values a batch.
func AveragesDeviations(batches []Batch, s Settings) (averages, deviations *Chart, err error) {
	return averagesWith(batches, s, false)
}

// sample is a batch with its scatter.
type sample struct {
	mean, scatter float64 // range or standard deviation; NaN for less than two values
	n             int
	factors       Constants
	ranges        bool
}

// unit is the mean of the scatter over σ.
func (b sample) unit() float64 {
	if b.ranges {
		return b.factors.RangeMean
	}
	return b.factors.C4
}

func (b sample) usable() bool { return b.n >= 2 && finite(b.mean) && finite(b.scatter) }

func samples(batches []Batch, ranges bool) ([]sample, error) {
	out := make([]sample, len(batches))
	var known [MaxSample + 1]Constants
	for i, b := range batches {
		v := measured(b.Values)
		s := sample{n: len(v), scatter: math.NaN(), ranges: ranges}
		s.mean, s.scatter = moments(v)
		if s.n < 2 {
			out[i] = s
			continue
		}
		if s.n > MaxSample {
			return nil, fmt.Errorf("batch %d (%s) has %d values; a chart of averages takes up to %d", i+1, b.Name, s.n, MaxSample)
		}
		if known[s.n].N == 0 {
			c, err := Factors(s.n)
			if err != nil {
				return nil, err
			}
			known[s.n] = c
		}
		s.factors = known[s.n]
		if ranges {
			lo, hi := v[0], v[0]
			for _, w := range v {
				lo, hi = math.Min(lo, w), math.Max(hi, w)
			}
			s.scatter = hi - lo
		}
		out[i] = s
	}
	return out, nil
}

// within is the grand mean and σ̂ of the samples, and the number that were used.
func within(list []sample) (centre, sigma float64, used int) {
	var values, total float64
	for _, b := range list {
		if b.usable() {
			total += float64(b.n)
			used++
		}
	}
	for _, b := range list {
		if b.usable() {
			values += b.mean * (float64(b.n) / total)
			sigma += b.scatter / b.unit() / float64(used)
		}
	}
	return values, sigma, used
}

func averagesWith(batches []Batch, s Settings, byRange bool) (averages, scatter *Chart, err error) {
	base, err := s.base(len(batches))
	if err != nil {
		return nil, nil, err
	}
	list, err := samples(batches, byRange)
	if err != nil {
		return nil, nil, err
	}
	averages, scatter = &Chart{Kind: "averages"}, &Chart{Kind: "standard deviations"}
	averages.From, scatter.From = "standard deviations within batches", "standard deviations within batches"
	if byRange {
		scatter.Kind = "ranges"
		averages.From, scatter.From = "ranges within batches", "ranges within batches"
	}
	centre, sigma, used := within(list[:base])
	switch {
	case used == 0:
		return nil, nil, fmt.Errorf("no batch among the first %d has two values", base)
	case !finite(math.Abs(centre) + 20*sigma):
		return nil, nil, errHuge
	}
	averages.Base, scatter.Base = used, used
	averages.Centre, averages.Sigma, scatter.Sigma, scatter.Centre = centre, sigma, sigma, math.NaN()
	for i, b := range batches {
		q := list[i]
		inBase := i < base && q.usable()
		a := Line{Name: b.Name, Value: q.mean, U95: b.U95, Lower: math.NaN(), Centre: centre, Upper: math.NaN(), Base: inBase}
		r := Line{Name: b.Name, Value: q.scatter, U95: math.NaN(), Lower: math.NaN(), Centre: math.NaN(), Upper: math.NaN(), Base: inBase}
		if !q.usable() {
			a.Value, r.Value = math.NaN(), math.NaN()
		} else {
			half := 3 * sigma / math.Sqrt(float64(q.n))
			a.Lower, a.Upper = centre-half, centre+half
			lo, hi := q.factors.B3, q.factors.B4
			if byRange {
				lo, hi = q.factors.D3, q.factors.D4
			}
			r.Centre = q.unit() * sigma
			r.Upper = hi * r.Centre
			if lo > 0 {
				r.Lower = lo * r.Centre
			}
			if math.IsNaN(scatter.Centre) {
				scatter.Centre = r.Centre
			}
		}
		averages.Lines, scatter.Lines = append(averages.Lines, a), append(scatter.Lines, r)
	}
	averages.call(s.patterns(true))
	scatter.call(s.patterns(false))
	averages.doubtBase()
	return averages, scatter, nil
}
