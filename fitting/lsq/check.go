package lsq

import (
	"math"

	"phaselag/fitting/qr"
)

// Deviation is the largest difference between a Jacobian and differences of the
// residual.
type Deviation struct {
	Worst          float64 // relative to the norm of the column; absolute where that is zero
	Row, Parameter int
}

// Central differences
//
//	∂r/∂x ≈ [8·(r(x+h) − r(x−h)) − (r(x+2h) − r(x−2h))]/(12·h)
//
// have an error of h⁴·r⁽⁵⁾/30 and a rounding error of about 1.5·ε·|r|/h. The best
// h is not known beforehand, so several are tried for each column and the one
// counts that comes nearest: a wrong derivative agrees with none.

// CheckJacobian compares the Jacobian of p at x with central differences. It is
// meant for tests; it calls Residual about 28 times a parameter. x must lie
// inside the bounds by a part in a thousand.
func CheckJacobian(p Problem, x []float64) (Deviation, error) {
	if err := p.check(x); err != nil {
		return Deviation{}, err
	}
	if p.Jacobian == nil {
		panic("lsq: CheckJacobian needs a Jacobian")
	}
	m, n := p.M, p.N
	r := make([]float64, m)
	if err := p.Residual(r, x); err != nil {
		return Deviation{}, err
	}
	j := make([]float64, m*n)
	if err := p.Jacobian(j, x); err != nil {
		return Deviation{}, err
	}
	y := append([]float64(nil), x...)
	d := make([]float64, m)
	var worst Deviation
	for k := range n {
		c := j[k*m : (k+1)*m]
		norm := qr.Norm(c)
		if norm == 0 {
			norm = 1
		}
		best := Deviation{Worst: math.Inf(1), Parameter: k}
		for e := -2; e >= -8; e-- {
			h := math.Abs(x[k]) * math.Pow(10, float64(e))
			if h == 0 {
				h = math.Pow(10, float64(e))
			}
			clear(d)
			// Steps that are exact in binary.
			h = (x[k] + h) - x[k]
			for _, s := range [4][2]float64{{1, 8}, {-1, -8}, {2, -1}, {-2, 1}} {
				y[k] = x[k] + s[0]*h
				if err := p.Residual(r, y); err != nil {
					return Deviation{}, err
				}
				for i, v := range r {
					d[i] += s[1] * v / (12 * h)
				}
			}
			this := Deviation{Parameter: k}
			for i, v := range d {
				if a := math.Abs(v-c[i]) / norm; a > this.Worst || math.IsNaN(a) {
					this.Worst, this.Row = a, i
				}
			}
			if this.Worst < best.Worst {
				best = this
			}
		}
		y[k] = x[k]
		if best.Worst > worst.Worst {
			worst = best
		}
	}
	return worst, nil
}
