package superpose

import (
	"gonum.org/v1/gonum/mat"

	"phaselag/fitting/qr"
)

// restricted gives the eigenvalues of ZᵀZ and the components g of Zᵀr along
// its eigenvectors, for Scatter.
func (s *Solution) restricted(shared []bool) (lambda, g []float64) {
	e := s.e
	var offsets []int
	for j, o := range e.l.offset {
		if o >= 0 && shared[j] {
			offsets = append(offsets, o)
		}
	}
	if len(offsets) == 0 {
		return nil, nil
	}
	// Everything but the offsets first: below its rows the triangle has the
	// offsets and the residual projected off it.
	e.derivatives()
	columns := e.passiveColumns()
	z := e.arrow(columns, false, true)
	isOffset := make([]bool, e.l.n)
	for _, o := range offsets {
		isOffset[o] = true
	}
	var order []int
	for c := range z.n {
		if c < len(columns) || !isOffset[c-len(columns)] {
			order = append(order, c)
		}
	}
	n, q := len(order), len(offsets)
	for _, o := range offsets {
		order = append(order, len(columns)+o)
	}
	a, rows := z.dense(order)
	// The residual with the offsets taken out.
	rhs := a[len(order)*rows:]
	for k, o := range offsets {
		axpy(rhs, -s.Theta[o], a[(n+k)*rows:(n+k+1)*rows])
	}
	tau := make([]float64, min(rows, n))
	qr.Factor(a, rows, n, rows, tau)
	for k := range q + 1 {
		qr.MulQT(a, rows, min(rows, n), rows, tau, a[(n+k)*rows:(n+k+1)*rows])
	}
	below := func(k int) []float64 {
		if n >= rows {
			return nil
		}
		// The Jacobian of the residual has the opposite sign of that of the model.
		return a[(n+k)*rows+n : (n+k+1)*rows]
	}
	zz := mat.NewSymDense(q, nil)
	zr := make([]float64, q)
	for i := range q {
		for j := i; j < q; j++ {
			zz.SetSym(i, j, dot(below(i), below(j)))
		}
		zr[i] = -dot(below(i), below(q))
	}
	var eig mat.EigenSym
	if !eig.Factorize(zz, true) {
		return nil, nil
	}
	var v mat.Dense
	eig.VectorsTo(&v)
	lambda = eig.Values(nil)
	g = make([]float64, q)
	for k := range q {
		lambda[k] = max(lambda[k], 0)
		for i := range q {
			g[k] += v.At(i, k) * zr[i]
		}
	}
	return lambda, g
}
