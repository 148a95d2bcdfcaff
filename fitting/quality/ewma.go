package quality

import (
	"fmt"
	"math"
)

// Problem: a small lasting shift of the mean, which no single point shows.
//
// The exponentially weighted moving average (Roberts 1959) of the batches' means x_i with
// standard deviations σ_i,
//
//	z_i = λ x_i + (1−λ) z_{i−1},              z_0 = centre,
//	v_i = λ² σ_i² + (1−λ)² v_{i−1},           v_0 = 0,
//	limits: centre ± L √v_i.
//
// For equal σ_i this is v_i = σ² λ/(2−λ) [1 − (1−λ)^2i]: the exact limits, narrow at the
// beginning. σ_i = σ̂/√n_i within batches, or σ̂ of the moving range of the means. A batch
// that was not measured leaves z and v as they are.
//
// Means of the ranges and moving ranges are those of AveragesRanges and Individuals.

// EWMA returns the chart of the exponentially weighted moving average.
func EWMA(batches []Batch, s Settings) (*Chart, error) {
	base, err := s.base(len(batches))
	if err != nil {
		return nil, err
	}
	lambda, reach := s.Lambda, s.Reach
	if lambda == 0 {
		lambda = 0.2
	}
	if reach == 0 {
		reach = 2.86
	}
	if !(lambda > 0 && lambda <= 1) {
		return nil, fmt.Errorf("a weight of %g; it lies above 0 and is 1 at most", lambda)
	}
	if !(reach > 0) || !finite(reach) {
		return nil, fmt.Errorf("limits at %g sigmas; the distance is above zero", reach)
	}
	c := &Chart{Kind: "EWMA"}
	sigma, err := c.ewmaSigma(batches, s, base)
	if err != nil {
		return nil, err
	}
	z, v := c.Centre, 0.0
	for i, b := range batches {
		x, n := b.mean()
		l := Line{Name: b.Name, Value: math.NaN(), U95: math.NaN(), Centre: c.Centre, Base: c.Base > 0 && i < base}
		if own := sigma(n); n > 0 && finite(x) && finite(own) {
			z = lambda*x + (1-lambda)*z
			v = lambda*lambda*own*own + (1-lambda)*(1-lambda)*v
			l.Value = z
		} else {
			l.Base = false
		}
		half := reach * math.Sqrt(v)
		if l.Lower, l.Upper = c.Centre-half, c.Centre+half; v == 0 {
			l.Lower, l.Upper = math.NaN(), math.NaN() // nothing measured yet, or no scatter at all
			if finite(l.Value) {
				l.Lower, l.Upper = c.Centre, c.Centre
			}
		}
		c.Lines = append(c.Lines, l)
	}
	c.call(s.patterns(false))
	c.doubtBase()
	return c, nil
}

// ewmaSigma sets centre, sigma and their origin, and returns the standard deviation of the
// mean of n values.
func (c *Chart) ewmaSigma(batches []Batch, s Settings, base int) (func(n int) float64, error) {
	within := func(n int) float64 { return c.Sigma / math.Sqrt(float64(n)) }
	centre, sigma, known, err := s.known()
	if err != nil {
		return nil, err
	}
	if known {
		c.Centre, c.Sigma, c.From = centre, sigma, "given"
		return within, nil
	}
	from := s.Scatter
	if from == "" {
		from = Within
		for _, b := range batches[:base] {
			if _, n := b.mean(); n == 1 {
				from = MovingRange
			}
		}
	}
	var set *Chart
	switch from {
	case Within:
		set, _, err = AveragesRanges(batches[:base], Settings{Patterns: []Pattern{}})
	case MovingRange:
		set, _, err = Individuals(batches[:base], Settings{Patterns: []Pattern{}})
	default:
		return nil, fmt.Errorf("no scatter is called %q; %q and %q are", string(from), string(Within), string(MovingRange))
	}
	if err != nil {
		return nil, err
	}
	c.Centre, c.Sigma, c.Base, c.From = set.Centre, set.Sigma, set.Base, string(from)
	if from == MovingRange {
		return func(int) float64 { return c.Sigma }, nil
	}
	return within, nil
}
