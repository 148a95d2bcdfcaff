package screen

import (
	"math"

	"gonum.org/v1/gonum/mat"
)

// line is a linear least-squares fit y ≈ X·b.
type line struct {
	b, u    []float64 // coefficients and their standard deviations
	scatter float64   // standard deviation of the residuals
	freedom int
}

// regress fits y by the columns of X by QR, with u from the residuals' scatter. ok is
// false where there is no freedom left or the columns depend on each other.
func regress(y []float64, columns ...[]float64) (l line, ok bool) {
	n, k := len(y), len(columns)
	if n <= k {
		return line{}, false
	}
	x := mat.NewDense(n, k, nil)
	size := make([]float64, k) // columns are scaled to length 1
	for j, c := range columns {
		for _, v := range c {
			size[j] = math.Hypot(size[j], v)
		}
		if !(size[j] > 0) || math.IsInf(size[j], 0) {
			return line{}, false
		}
		for i, v := range c {
			x.Set(i, j, v/size[j])
		}
	}
	var qr mat.QR
	qr.Factorize(x)
	if !(qr.Cond() < 1e10) {
		return line{}, false
	}
	var b, inverse mat.Dense
	if qr.SolveTo(&b, false, mat.NewDense(n, 1, y)) != nil {
		return line{}, false
	}
	var r mat.Dense
	r.Mul(x, &b)
	sum := 0.0
	for i, v := range y {
		d := v - r.At(i, 0)
		sum += d * d
	}
	l.freedom = n - k
	l.scatter = math.Sqrt(sum / float64(l.freedom))
	var q mat.Dense
	q.Mul(x.T(), x)
	if inverse.Inverse(&q) != nil {
		return line{}, false
	}
	for j := range columns {
		l.b = append(l.b, b.At(j, 0)/size[j])
		l.u = append(l.u, l.scatter*math.Sqrt(inverse.At(j, j))/size[j])
	}
	return l, true
}

// ones and times make columns.
func ones(n int) []float64 {
	c := make([]float64, n)
	for i := range c {
		c[i] = 1
	}
	return c
}

func times(a, b []float64) []float64 {
	c := make([]float64, len(a))
	for i := range a {
		c[i] = a[i] * b[i]
	}
	return c
}
