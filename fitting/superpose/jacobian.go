package superpose

import (
	"phaselag/fitting/qr"
	"phaselag/models/thermal"
)

// derivatives writes ∂(A c)/∂θ, weighted, m×n column-major with leading
// dimension ld, at the latest θ, after sums.
func (e *engine) derivatives(d []float64, ld int) {
	l, n := &e.l, len(e.osc)
	for j := range l.n {
		clear(d[j*ld : j*ld+e.m])
	}
	var lawG, verG []float64
	if l.nLaw > 0 {
		lawG = make([]float64, l.nLaw)
	}
	var vertical *anchored
	if l.nVer > 0 {
		verG = make([]float64, l.nVer)
		vertical = e.p.anchored(e.theta[l.vertical : l.vertical+l.nVer])
	}
	row := func(i, at int, relaxation bool) {
		s, r := &e.state[i], &e.p.Rows[i]
		q := s.q * complex(e.scale, 0)
		add := func(col int, v complex128) {
			v *= q
			if relaxation {
				d[col*ld+at] += e.wRe[i] * real(v)
				return
			}
			d[col*ld+at] += e.wRe[i] * real(v)
			d[col*ld+n+at] += e.wIm[i] * imag(v)
		}
		poly, slope := complex(s.polyRe, s.polyIm), complex(s.polySlRe, s.polySlIm)
		byLog := complex(thermal.Ln10*s.b, 0) * slope
		if l.nLaw > 0 {
			e.law.Gradient(s.T, lawG)
			for k, g := range lawG {
				if e.f.Law == Arrhenius {
					g *= 1e3
				}
				if g != 0 {
					add(l.law+k, byLog*complex(g, 0))
				}
			}
		}
		if vertical != nil {
			vertical.Gradient(s.T, verG)
			for k, g := range verG {
				if g != 0 {
					add(l.vertical+k, complex(s.b*g, 0)*poly)
				}
			}
		}
		fill := complex(s.fillRe, s.fillIm)
		if o := l.offset[r.Run]; o >= 0 {
			add(o, byLog*complex(s.slope, 0)+complex(s.bSlope, 0)*poly+complex(s.phiByT, 0)*fill)
		}
		whole := complex(s.b, 0)*poly + complex(s.phi, 0)*fill
		if l.phase >= 0 && !relaxation {
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
			add(l.critical, complex(s.phi*s.fillCritRe, s.phi*s.fillCritIm))
			add(l.exponent, complex(s.phi*s.fillExpRe, s.phi*s.fillExpIm))
		}
	}
	for j, i := range e.osc {
		row(i, j, false)
	}
	for j, i := range e.rel {
		row(i, 2*n+j, true)
	}
}

// priorJacobian writes the derivatives of the prior rows below row e.m.
func (e *engine) priorJacobian(d []float64, ld int) {
	l := &e.l
	for j := range l.n {
		clear(d[j*ld+e.m : j*ld+e.m+e.priors])
	}
	k := e.m
	for j, o := range l.offset {
		if o >= 0 {
			d[o*ld+k] = 1 / e.p.Runs[j].U
			k++
		}
	}
	if l.nFactor > 0 {
		for i := range e.factors {
			for j := range l.nFactor {
				switch {
				case i == j:
					d[(l.factor+j)*ld+k] = 1 / e.p.UGeometry
				case i == l.nFactor:
					d[(l.factor+j)*ld+k] = -1 / e.p.UGeometry
				}
			}
			k++
		}
	}
	if l.phase >= 0 {
		d[l.phase*ld+k] = 1 / e.p.UPhase
	}
}

// jacobian writes Kaufman's Jacobian of residual at θ, (m+priors)×n.
func (e *engine) jacobian(j, theta []float64) bool {
	if !e.known || !same(theta, e.theta) {
		r := make([]float64, e.m+e.priors)
		if !e.residual(r, theta) {
			return false
		}
	}
	ld := e.m + e.priors
	e.sums()
	e.derivatives(j, ld)
	for k := range e.l.n {
		col := j[k*ld : k*ld+e.m]
		for i := range col {
			col[i] = -col[i]
		}
		qr.Project(e.ap, e.m, len(e.idx), e.m, e.tau, col, true)
	}
	e.priorJacobian(j, ld)
	return true
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
