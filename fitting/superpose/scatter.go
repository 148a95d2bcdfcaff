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
	ld := e.m + e.priors
	d := make([]float64, ld*e.l.n)
	e.derivatives(d, ld)
	// Everything but the offsets, on the data rows, scaled by column.
	isOffset := make([]bool, e.l.n)
	for _, o := range offsets {
		isOffset[o] = true
	}
	var others []float64
	n := 0
	take := func(col []float64) {
		if v := qr.Norm(col); v > 0 {
			for _, x := range col {
				others = append(others, x/v)
			}
			n++
		}
	}
	for _, k := range e.idx {
		take(e.a[k*e.m : (k+1)*e.m])
	}
	for j := range e.l.n {
		if !isOffset[j] {
			take(d[j*ld : j*ld+e.m])
		}
	}
	tau := make([]float64, n)
	qr.Factor(others, e.m, n, e.m, tau)
	// Residual with the offsets taken out: y − A c + J d.
	r := make([]float64, e.m)
	copy(r, e.y)
	for k, ck := range e.c {
		if ck != 0 {
			axpy(r, -ck, e.a[k*e.m:(k+1)*e.m])
		}
	}
	q := len(offsets)
	z := make([]float64, e.m*q)
	for k, o := range offsets {
		col := z[k*e.m : (k+1)*e.m]
		copy(col, d[o*ld:o*ld+e.m])
		axpy(r, s.Theta[o], col)
		qr.Project(others, e.m, n, e.m, tau, col, true)
	}
	qr.Project(others, e.m, n, e.m, tau, r, true)
	zz := mat.NewSymDense(q, nil)
	zr := make([]float64, q)
	for i := range q {
		zi := z[i*e.m : (i+1)*e.m]
		for j := i; j < q; j++ {
			zz.SetSym(i, j, dot(zi, z[j*e.m:(j+1)*e.m]))
		}
		zr[i] = dot(zi, r)
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

func dot(a, b []float64) float64 {
	var s float64
	for i, v := range a {
		s += v * b[i]
	}
	return s
}
