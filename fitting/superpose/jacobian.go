package superpose

import (
	"phaselag/models/thermal"
)

// slopes holds ∂(A c)/∂θ of all rows at the latest θ, weighted: row i has the
// entries start[i] to start[i+1] of column and value. A row knows its own
// temperature offset and specimen and what all share, so most of the matrix is
// empty.
type slopes struct {
	start  []int
	column []int
	value  []complex128
	lawG   []float64
	verG   []float64
}

// derivatives fills e.slope, after sums. The value of an entry has the derivative
// of the real row in its real and that of the imaginary row in its imaginary
// part; relaxation rows have the real part alone.
func (e *engine) derivatives() {
	l, d := &e.l, &e.slope
	d.start, d.column, d.value = d.start[:0], d.column[:0], d.value[:0]
	d.lawG, d.verG = resized(d.lawG, l.nLaw), resized(d.verG, l.nVer)
	var vertical *anchored
	if l.nVer > 0 {
		vertical = e.p.anchored(e.theta[l.vertical : l.vertical+l.nVer])
	}
	for i := range e.p.Rows {
		s, r := &e.state[i], &e.p.Rows[i]
		d.start = append(d.start, len(d.column))
		q, wRe, wIm := s.q*complex(e.scale, 0), e.wRe[i], e.wIm[i]
		if r.Relaxation {
			wIm = 0
		}
		add := func(col int, v complex128) {
			v *= q
			d.column = append(d.column, col)
			d.value = append(d.value, complex(wRe*real(v), wIm*imag(v)))
		}
		bare := complex(s.polyRe, s.polyIm)
		poly, slope := bare*s.h, complex(s.polySlRe, s.polySlIm)*s.h
		byLog := complex(thermal.Ln10*s.b, 0) * slope
		if l.nLaw > 0 {
			e.law.Gradient(s.T, d.lawG)
			for k, g := range d.lawG {
				if e.f.Law == Arrhenius {
					g *= 1e3
				}
				if g != 0 {
					add(l.law+k, byLog*complex(g, 0))
				}
			}
		}
		if vertical != nil {
			vertical.Gradient(s.T, d.verG)
			for k, g := range d.verG {
				if g != 0 {
					add(l.vertical+k, complex(s.b*g, 0)*poly)
				}
			}
		}
		// The filler term, and what its shapes multiply.
		fill, per := s.fill, complex(1, 0)
		if e.f.Scaling {
			per = complex(s.b, 0) * bare
			fill *= per
		}
		if o := l.offset[r.Run]; o >= 0 && e.p.Runs[r.Run].Decades {
			add(o, byLog)
		} else if o >= 0 {
			add(o, byLog*complex(s.slope, 0)+complex(s.bSlope, 0)*poly+complex(s.phiByT, 0)*fill)
		}
		whole := complex(s.b, 0) * poly
		if !e.f.Scaling {
			whole += complex(s.phi, 0) * fill
		}
		if l.phase >= 0 && !r.Relaxation {
			add(l.phase, whole*1i)
		}
		if l.nFactor > 0 {
			if r.Factor < l.nFactor {
				add(l.factor+r.Factor, whole)
			} else {
				for k := range l.nFactor {
					add(l.factor+k, -whole)
				}
			}
		}
		if l.activation >= 0 {
			add(l.activation, complex(s.phiByEa, 0)*fill)
		}
		if l.critical >= 0 {
			phi := complex(s.phi, 0) * per
			add(l.critical, phi*s.fillCrit)
			if l.exponent >= 0 {
				add(l.exponent, phi*s.fillExp)
			}
			if l.extra >= 0 {
				add(l.extra, phi*s.fillExtra)
			}
			if l.alpha >= 0 {
				add(l.alpha, phi*complex(s.terms.K1, 0))
				add(l.beta, phi*complex(s.terms.K2, 0)*s.dir)
			}
		}
	}
	d.start = append(d.start, len(d.column))
}

// prior is a prior row: its residual at θ and its derivatives.
type prior struct {
	run      int // whose offset it holds; −1: of all
	residual float64
	column   []int
	value    []float64
}

// priorRows lists the prior rows at θ.
func (e *engine) priorRows(theta []float64) []prior {
	l, out := &e.l, make([]prior, 0, e.priors)
	for j, o := range l.offset {
		if o >= 0 {
			u := e.p.Runs[j].U
			out = append(out, prior{j, theta[o] / u, []int{o}, []float64{1 / u}})
		}
	}
	if l.nFactor > 0 {
		w := 1 / e.p.UGeometry
		last := prior{run: -1}
		for i := range l.nFactor {
			c := l.factor + i
			out = append(out, prior{-1, theta[c] * w, []int{c}, []float64{w}})
			last.residual -= theta[c] * w
			last.column, last.value = append(last.column, c), append(last.value, -w)
		}
		out = append(out, last)
	}
	if l.phase >= 0 {
		w := 1 / e.p.UPhase
		out = append(out, prior{-1, theta[l.phase] * w, []int{l.phase}, []float64{w}})
	}
	return out
}

func same(a, b []float64) bool {
	for i := range a {
		if a[i] != b[i] {
			return false
		}
	}
	return len(a) == len(b)
}

func axpy(y []float64, alpha float64, x []float64) {
	for i, v := range x {
		y[i] += alpha * v
	}
}

// resized returns a slice of length n with undefined elements.
func resized(x []float64, n int) []float64 {
	if cap(x) < n {
		return make([]float64, n)
	}
	return x[:n]
}

// dot is the scalar product.
func dot(a, b []float64) float64 {
	var s float64
	for i, v := range a {
		s += v * b[i]
	}
	return s
}
