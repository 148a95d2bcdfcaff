package nnls

import (
	"math"

	"gonum.org/v1/gonum/floats"

	"phaselag/fitting/qr"
)

// reduce scales [A b], replaces it by its triangle where that is smaller, and
// empties the passive set. It reports false when an element is not finite.
func (s *Solver) reduce(a []float64, m, n int, b []float64) bool {
	s.n = n
	s.rows = min(m, n+1)
	s.work = grow(s.work, m*(n+1))
	s.t = grow(s.t, s.rows*(n+1))
	s.tau = grow(s.tau, n+1)
	s.scale = grow(s.scale, n+1)
	s.z = grow(s.z, n)
	s.xs = grow(s.xs, n)
	s.w = grow(s.w, n)
	s.in = grow(s.in, n)
	s.barred = grow(s.barred, n)
	s.order = grow(s.order, n)[:0]
	clear(s.in)
	clear(s.xs)
	for j := range n + 1 {
		c := b
		if j < n {
			c = a[j*m : (j+1)*m]
		}
		norm := qr.Norm(c)
		if math.IsNaN(norm) || math.IsInf(norm, 0) {
			return false
		}
		_, s.scale[j] = math.Frexp(norm)
		d := s.work[j*m : (j+1)*m]
		if f := math.Ldexp(1, -s.scale[j]); f != 0 && !math.IsInf(f, 0) && len(d) > 0 {
			floats.ScaleTo(d, f, c)
			continue
		}
		for i, v := range c {
			d[i] = math.Ldexp(v, -s.scale[j])
		}
	}
	if m > n+1 {
		qr.Factor(s.work, m, n+1, m, s.tau)
	}
	for j := range n + 1 {
		c := s.column(j)
		copy(c, s.work[j*m:])
		if m > n+1 {
			clear(c[j+1:])
		}
	}
	return true
}

// enter brings column j into the triangle, unless it depends on the columns that
// are there.
func (s *Solver) enter(j int) bool {
	k := len(s.order)
	c := s.column(j)
	if k >= s.rows || qr.Norm(c[k:]) <= dependent*qr.Norm(c) {
		return false
	}
	tau := qr.Reflector(c[k:])
	for i := range s.n + 1 {
		if i != j && (i == s.n || !s.in[i]) {
			qr.Apply(c[k:], tau, s.column(i)[k:])
		}
	}
	clear(c[k+1:])
	s.order = append(s.order, j)
	s.in[j] = true
	s.changes++
	return true
}

// leave takes the column at place k out of the triangle. The columns behind it
// move up by one place; rotations of neighbouring rows make them triangular
// again. The column itself has become zero in x by then.
func (s *Solver) leave(k int) {
	j := s.order[k]
	s.in[j] = false
	s.xs[j] = 0
	s.order = append(s.order[:k], s.order[k+1:]...)
	for i := k; i < len(s.order); i++ {
		c := s.column(s.order[i])
		r := math.Hypot(c[i], c[i+1])
		if r == 0 {
			continue
		}
		cs, sn := c[i]/r, c[i+1]/r
		for l := range s.n + 1 {
			d := s.column(l)
			d[i], d[i+1] = cs*d[i]+sn*d[i+1], cs*d[i+1]-sn*d[i]
		}
		c[i], c[i+1] = r, 0
	}
	s.changes++
}

func dot(x, y []float64) float64 {
	if len(x) == 0 {
		return 0
	}
	return floats.Dot(x, y)
}

func axpy(dst []float64, alpha float64, x []float64) {
	if len(x) > 0 {
		floats.AddScaled(dst, alpha, x)
	}
}

// grow returns a slice of length n with undefined elements, the old one where
// it is large enough.
func grow[T any](x []T, n int) []T {
	if cap(x) < n {
		return make([]T, n)
	}
	return x[:n]
}
