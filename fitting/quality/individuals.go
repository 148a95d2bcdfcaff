package quality

import (
	"fmt"
	"math"
)

// Problem: one value a batch, x_i; is the process where it was?
//
// With the mean moving range of the base, MR_i = |x_i − x_{i−1}| of neighbours that were
// measured, d2 = 2/√π for two,
//
//	σ̂ = MR̄/d2,   limits x̄ ± 3σ̂ = x̄ ± 2.6587 MR̄,   and D4·MR̄ for the moving range.
//
// Batches that have repeats enter with their means, so that σ̂ holds what differs from
// batch to batch. Without a lower limit the moving range has D3 = 0.

// Individuals returns the chart of single values and the chart of their moving range. Two
// neighbours of the base must have been measured, unless the process is known.
func Individuals(batches []Batch, s Settings) (values, moving *Chart, err error) {
	base, err := s.base(len(batches))
	if err != nil {
		return nil, nil, err
	}
	centre, sigma, known, err := s.known()
	if err != nil {
		return nil, nil, err
	}
	c, err := Factors(2)
	if err != nil {
		return nil, nil, err
	}
	x := make([]float64, len(batches))
	for i, b := range batches {
		x[i], _ = b.mean()
	}
	ranges, mean, used := movingRanges(x, base)
	values = &Chart{Kind: "individuals", From: "given"}
	moving = &Chart{Kind: "moving range", From: "given"}
	if !known {
		kept := measured(x[:base])
		if used == 0 {
			return nil, nil, fmt.Errorf("%d measured batches in a base of %d; a moving range needs two", len(kept), base)
		}
		centre, _ = moments(kept)
		sigma = mean / c.RangeMean
		values.Base, moving.Base = len(kept), used
		values.From, moving.From = string(MovingRange), string(MovingRange)
	}
	if !finite(math.Abs(centre) + 4*sigma) {
		return nil, nil, errHuge
	}
	values.Centre, values.Sigma = centre, sigma
	moving.Centre, moving.Sigma = c.RangeMean*sigma, sigma
	for i, b := range batches {
		values.Lines = append(values.Lines, Line{Name: b.Name, Value: x[i], U95: b.U95, Lower: centre - 3*sigma, Centre: centre, Upper: centre + 3*sigma, Base: !known && i < base && finite(x[i])})
		moving.Lines = append(moving.Lines, Line{Name: b.Name, Value: ranges[i], U95: math.NaN(), Lower: math.NaN(), Centre: moving.Centre, Upper: c.D4 * moving.Centre, Base: !known && i < base && finite(ranges[i])})
	}
	values.call(s.patterns(true))
	moving.call(s.patterns(false))
	values.doubtBase()
	return values, moving, nil
}

// movingRanges returns the moving range at each value that has a measured one before it,
// NaN elsewhere, and the mean and number of those inside the base.
func movingRanges(x []float64, base int) (ranges []float64, mean float64, used int) {
	ranges = make([]float64, len(x))
	last := math.NaN()
	var inside []float64
	for i, v := range x {
		ranges[i] = math.Abs(v - last)
		if finite(v) {
			last = v
		}
		if !finite(ranges[i]) {
			ranges[i] = math.NaN()
		} else if i < base {
			inside = append(inside, ranges[i])
		}
	}
	mean, _ = moments(inside)
	return ranges, mean, len(inside)
}
