package quality

import (
	"errors"
	"fmt"
	"math"
)

// Problem: do two sets of values have the same mean, their scatters not being supposed
// equal? Welch (1947), with v = s²/n of each set,
//
//	t = (x̄_a − x̄_b)/√(v_a + v_b),   ν = (v_a + v_b)²/(v_a²/(n_a−1) + v_b²/(n_b−1)),
//
// p two-sided from Student's t with ν degrees of freedom, which need not be whole.

// Comparison is the difference of two means.
type Comparison struct {
	Difference float64 // mean of the first less mean of the second
	U95        float64 // half its 95 % interval
	T, Freedom float64
	P          float64 // two-sided
}

// Welch compares two sets of at least two values each. Values that are not finite are
// passed over. Two sets without any scatter are an error.
func Welch(a, b []float64) (Comparison, error) {
	a, b = measured(a), measured(b)
	if len(a) < 2 || len(b) < 2 {
		return Comparison{}, fmt.Errorf("sets of %d and %d values; each needs two", len(a), len(b))
	}
	ma, sa := moments(a)
	mb, sb := moments(b)
	ea, eb := sa/math.Sqrt(float64(len(a))), sb/math.Sqrt(float64(len(b)))
	se := math.Hypot(ea, eb)
	c := Comparison{Difference: ma - mb}
	if !(se > 0) || !finite(se) || !finite(c.Difference) {
		return Comparison{}, errors.New("the values do not scatter, or too widely for a number")
	}
	// Shares instead of squares, which could overflow.
	qa, qb := ea/se, eb/se
	c.Freedom = 1 / (math.Pow(qa, 4)/float64(len(a)-1) + math.Pow(qb, 4)/float64(len(b)-1))
	c.T = c.Difference / se
	c.P = math.Min(1, 2*tBelow(-math.Abs(c.T), c.Freedom))
	c.U95 = tQuantile(0.975, c.Freedom) * se
	return c, nil
}
