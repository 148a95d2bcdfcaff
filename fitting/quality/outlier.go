package quality

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// Problem: does the one value that lies farthest out belong to the others, and does the
// one laboratory or batch that scatters most scatter as the others do?
//
// Grubbs (1950): G = max|x − x̄|/s of n values. Critical value at the level α, with t the
// quantile of Student's t at 1 − α/(2n), one-sided at 1 − α/n, and n − 2 degrees of
// freedom,
//
//	G_α = (n−1)/√n · √(t²/(n−2+t²)).
//
// The same turned round gives p, an upper bound (Bonferroni) that is exact where G is
// too large for two values to reach it together.
//
// Cochran (1941): C = max s²/Σ s² of p variances of n values each. With F the upper
// quantile at α/p and n−1, (p−1)(n−1) degrees of freedom, C_α = 1/(1 + (p−1)/F).
//
// Practice (ISO 5725-2, value from memory): beyond the 5 % value a straggler, which is
// kept and looked at; beyond the 1 % value an outlier. Both tests suppose normal values
// and are made for one outlier; two on one side can hide each other.

// Outlier is the answer of a test for one outlier.
type Outlier struct {
	Statistic float64 // G or C
	Index     int     // of the value or variance that was tested; −1 for none
	At5, At1  float64 // critical values at 5 % and 1 %
	P         float64 // an upper bound, at most 1
}

// Straggler says that the 5 % value is exceeded and the 1 % value is not.
func (o Outlier) Straggler() bool { return o.Statistic > o.At5 && !o.Beyond() }

// Beyond says that the 1 % value is exceeded.
func (o Outlier) Beyond() bool { return o.Statistic > o.At1 }

// Side says on which side an outlier is looked for.
type Side int

// The sides.
const (
	Both Side = iota
	High
	Low
)

// GrubbsCritical is G_α for n ≥ 3 values; NaN for fewer, or for α outside 0…1.
func GrubbsCritical(n int, alpha float64, side Side) float64 {
	if n < 3 || !(alpha > 0 && alpha < 1) {
		return math.NaN()
	}
	N := float64(n)
	share := alpha / N
	if side == Both {
		share /= 2
	}
	// The lower quantile keeps the digits of a small share.
	t := tQuantile(share, N-2)
	return (N - 1) / math.Sqrt(N) * math.Sqrt(t*t/(N-2+t*t))
}

// Grubbs tests the value farthest out. Values that are not finite are passed over, but
// keep their index. An error says why there is no answer: fewer than three values, or
// all of them equal.
func Grubbs(values []float64, side Side) (Outlier, error) {
	kept := measured(values)
	n := len(kept)
	if n < 3 {
		return Outlier{Index: -1}, fmt.Errorf("%d values; Grubbs' test needs 3", n)
	}
	mean, sd := moments(kept)
	if !(sd > 0) || !finite(sd) {
		return Outlier{Index: -1}, errors.New("the values do not scatter, or too widely for a number")
	}
	o := Outlier{Index: -1, Statistic: math.Inf(-1), At5: GrubbsCritical(n, 0.05, side), At1: GrubbsCritical(n, 0.01, side)}
	for i, v := range values {
		g := (v - mean) / sd
		switch side {
		case Both:
			g = math.Abs(g)
		case Low:
			g = -g
		}
		if finite(v) && g > o.Statistic {
			o.Statistic, o.Index = g, i
		}
	}
	N := float64(n)
	sides := 2.0
	if side != Both {
		sides = 1
	}
	// At the largest possible G the others are all equal and t has no end.
	if room := (N-1)*(N-1) - N*o.Statistic*o.Statistic; room > 0 {
		t := o.Statistic * math.Sqrt(N*(N-2)/room)
		o.P = math.Min(1, sides*N*tBelow(-t, N-2))
	}
	return o, nil
}

// CochranCritical is C_α for p ≥ 2 variances of n ≥ 2 values each; NaN otherwise.
func CochranCritical(p, n int, alpha float64) float64 {
	if p < 2 || n < 2 || !(alpha > 0 && alpha < 1) {
		return math.NaN()
	}
	P, N := float64(p), float64(n)
	// F of the degrees of freedom exchanged, taken at the lower end, is 1/F.
	inverse := distuv.F{D1: (P - 1) * (N - 1), D2: N - 1}.Quantile(alpha / P)
	return 1 / (1 + (P-1)*inverse)
}

// Cochran tests the largest of the variances, each of n values. One that is not finite or
// is negative is passed over, but keeps its index. An error says why there is no answer.
func Cochran(variances []float64, n int) (Outlier, error) {
	o := Outlier{Index: -1}
	if n < 2 {
		return o, fmt.Errorf("variances of %d values; two or more have one", n)
	}
	p, largest := 0, 0.0
	for i, v := range variances {
		if finite(v) && v >= 0 {
			p++
			if v > largest {
				o.Index, largest = i, v
			}
		}
	}
	switch {
	case p < 2:
		o.Index = -1
		return o, fmt.Errorf("%d variances; Cochran's test needs two", p)
	case largest == 0:
		return o, errors.New("no variance is above zero")
	}
	sum := 0.0
	for _, v := range variances {
		if finite(v) && v >= 0 {
			sum += v / largest
		}
	}
	o.Statistic = 1 / sum
	o.At5, o.At1 = CochranCritical(p, n, 0.05), CochranCritical(p, n, 0.01)
	P, N := float64(p), float64(n)
	if o.Statistic < 1 {
		f := (P - 1) * o.Statistic / (1 - o.Statistic)
		o.P = math.Min(1, P*distuv.F{D1: (P - 1) * (N - 1), D2: N - 1}.CDF(1/f))
	}
	return o, nil
}
