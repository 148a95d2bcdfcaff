package superpose

import (
	"math"

	"phaselag/fitting/qr"
)

type lmResult struct {
	x           []float64
	s           float64
	iter, evals int
}

func (e *engine) minimise(x0 []float64) (lmResult, bool) {
	n, m := e.l.n, e.m+e.priors
	lower, upper := e.p.bounds(e.f, &e.l)
	x := append([]float64(nil), x0...)
	r := make([]float64, m)
	if !e.residual(r, x) {
		return lmResult{}, false
	}
	s := squares(r)
	j := make([]float64, m*n)
	out := lmResult{evals: 1}
	mu := 1e-3
	aug := make([]float64, (m+n)*n)
	rhs := make([]float64, m+n)
	tau := make([]float64, n)
	diag := make([]float64, n)
	xt, rt := make([]float64, n), make([]float64, m)
	for out.iter = 0; out.iter < 60; out.iter++ {
		if !e.jacobian(j, x) {
			return out, false
		}
		for k := range n {
			diag[k] = max(qr.Norm(j[k*m:(k+1)*m]), 1e-12)
		}
		improved := false
		for try := 0; try < 12; try++ {
			clear(aug)
			for k := range n {
				copy(aug[k*(m+n):], j[k*m:(k+1)*m])
				aug[k*(m+n)+m+k] = math.Sqrt(mu) * diag[k]
			}
			clear(rhs)
			for i, v := range r {
				rhs[i] = -v
			}
			qr.Factor(aug, m+n, n, m+n, tau)
			qr.MulQT(aug, m+n, n, m+n, tau, rhs)
			qr.SolveR(aug, n, m+n, rhs)
			for k := range n {
				xt[k] = max(lower[k], min(upper[k], x[k]+rhs[k]))
			}
			out.evals++
			if e.residual(rt, xt) {
				if st := squares(rt); st < s {
					improved = s-st > 1e-9*s+1e-12
					copy(x, xt)
					copy(r, rt)
					s = st
					mu = max(mu/9, 1e-12)
					break
				}
			}
			mu *= 6
		}
		if !improved {
			break
		}
	}
	out.x, out.s = x, s
	return out, true
}
