package quality

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/stat/distuv"
)

// Problem: the factors of control charts for samples of n from a normal distribution
// with σ = 1 (ISO 7870-2 style names).
//
// Mean of the standard deviation:
//
//	c4 = √(2/(n−1)) Γ(n/2)/Γ((n−1)/2)
//
// The range R of n values lies below r with the probability
//
//	F(r) = n ∫ φ(x) [Φ(x+r) − Φ(x)]ⁿ⁻¹ dx,
//
// and d2 = ∫₀^∞ (1 − F) dr, d2² + d3² = 2 ∫₀^∞ r (1 − F) dr. The inner integral is
// taken by the trapezoidal rule with the step 1/8 over |x| ≤ 8.5, which converges faster
// than any power for such a bell; the outer one by Gauss and Legendre with 50 nodes on
// 0…13, beyond which 1 − F is below 1e-16. Two and three values meet their
// closed forms to 1e-11.
//
// From these: A2 = 3/(d2√n), A3 = 3/(c4√n), B3, B4 = 1 ∓ 3√(1−c4²)/c4,
// D3, D4 = 1 ∓ 3 d3/d2, not below zero.

// Constants are the factors for samples of N.
type Constants struct {
	N         int
	C4        float64 // mean of the standard deviation over σ
	RangeMean float64 // d2, mean of the range over σ
	RangeSD   float64 // d3, standard deviation of the range over σ
	A2, A3    float64 // 3-sigma limits of averages over the mean range, the mean standard deviation
	B3, B4    float64 // limits of standard deviations over their mean
	D3, D4    float64 // limits of ranges over their mean
}

// MaxSample is the largest sample that Factors serves.
const MaxSample = 25

// Factors returns the constants for samples of n, 2 to MaxSample.
func Factors(n int) (Constants, error) {
	if n < 2 || n > MaxSample {
		return Constants{}, fmt.Errorf("a sample of %d values has no chart constants; 2 to %d have", n, MaxSample)
	}
	c := Constants{N: n, C4: c4(float64(n))}
	c.RangeMean, c.RangeSD = rangeMoments(n)
	root := math.Sqrt(float64(n))
	c.A2, c.A3 = 3/(c.RangeMean*root), 3/(c.C4*root)
	b, d := 3*math.Sqrt(1-c.C4*c.C4)/c.C4, 3*c.RangeSD/c.RangeMean
	c.B3, c.B4 = math.Max(0, 1-b), 1+b
	c.D3, c.D4 = math.Max(0, 1-d), 1+d
	return c, nil
}

// c4 also takes fractions of a value, for effective degrees of freedom.
func c4(n float64) float64 {
	a, _ := math.Lgamma(n / 2)
	b, _ := math.Lgamma((n - 1) / 2)
	return math.Sqrt(2/(n-1)) * math.Exp(a-b)
}

// rangeMoments has the closed form of two values, which every moving range needs, and the
// quadrature for more.
func rangeMoments(n int) (mean, sd float64) {
	if n == 2 {
		return 2 / math.Sqrt(math.Pi), math.Sqrt(2 - 4/math.Pi)
	}
	return rangeQuadrature(n)
}

func rangeQuadrature(n int) (mean, sd float64) {
	const step, half = 0.125, 68
	var below, weight [2*half + 1]float64 // Φ and φ·step on the inner grid
	for k := range below {
		x := float64(k-half) * step
		below[k] = distuv.UnitNormal.CDF(x)
		weight[k] = step * math.Exp(-x*x/2) / math.Sqrt(2*math.Pi)
	}
	above := func(r float64) float64 {
		sum := 0.0
		for k := range below {
			d := distuv.UnitNormal.CDF(float64(k-half)*step+r) - below[k]
			sum += weight[k] * math.Pow(math.Max(0, d), float64(n-1))
		}
		return 1 - float64(n)*sum
	}
	const nodes, reach = 50, 13.0
	x, w := make([]float64, nodes), make([]float64, nodes)
	quad.Legendre{}.FixedLocations(x, w, 0, reach)
	square := 0.0
	for i, r := range x {
		a := above(r)
		mean += w[i] * a
		square += w[i] * 2 * r * a
	}
	return mean, math.Sqrt(square - mean*mean)
}
