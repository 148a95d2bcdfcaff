package lsq

import (
	"math"
	"testing"

	"phaselag/fitting/qr"
)

// TestTriangle: a caller that factors its Jacobian itself gets the same
// solution, condition and standard errors as one that gives it whole.
func TestTriangle(t *testing.T) {
	const m, n = 12, 3
	model := func(x []float64, t float64) float64 { return x[0] + x[1]*math.Exp(-x[2]*t) }
	truth := []float64{0.3, 2, 0.7}
	whole := Problem{
		M: m, N: n,
		Residual: func(r, x []float64) error {
			for i := range r {
				r[i] = model(x, float64(i)) - model(truth, float64(i)) - 0.01*math.Sin(float64(5*i))
			}
			return nil
		},
		Jacobian: func(j, x []float64) error {
			for i := range m {
				t := float64(i)
				j[i], j[m+i], j[2*m+i] = 1, math.Exp(-x[2]*t), -t*x[1]*math.Exp(-x[2]*t)
			}
			return nil
		},
	}
	parts := whole
	parts.Jacobian = nil
	parts.Triangle = func(r, q, x []float64) error {
		j, res, tau := make([]float64, m*n), make([]float64, m), make([]float64, n)
		if err := whole.Jacobian(j, x); err != nil {
			return err
		}
		if err := whole.Residual(res, x); err != nil {
			return err
		}
		qr.Factor(j, m, n, m, tau)
		qr.MulQT(j, m, n, m, tau, res)
		for k := range n {
			copy(r[k*n:k*n+k+1], j[k*m:])
		}
		copy(q, res[:n])
		return nil
	}
	a, err := Solve(whole, []float64{1, 1, 1}, &Settings{Acceleration: -1})
	if err != nil {
		t.Fatal(err)
	}
	b, err := Solve(parts, []float64{1, 1, 1}, &Settings{Acceleration: -1})
	if err != nil {
		t.Fatal(err)
	}
	if !a.Usable() || !b.Usable() {
		t.Fatalf("%v and %v", a.Status, b.Status)
	}
	sa, err := a.StandardErrors()
	if err != nil {
		t.Fatal(err)
	}
	sb, err := b.StandardErrors()
	if err != nil {
		t.Fatal(err)
	}
	for i := range n {
		if math.Abs(a.X[i]-b.X[i]) > 1e-8 || math.Abs(sa[i]-sb[i]) > 1e-6*sa[i] {
			t.Errorf("parameter %d: %.10g ± %.8g whole, %.10g ± %.8g by its triangle", i, a.X[i], sa[i], b.X[i], sb[i])
		}
	}
	if math.Abs(a.Condition/b.Condition-1) > 1e-6 {
		t.Errorf("condition %g whole, %g by its triangle", a.Condition, b.Condition)
	}
}
