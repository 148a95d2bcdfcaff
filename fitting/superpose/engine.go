package superpose

import (
	"math"
	"math/cmplx"

	"phaselag/fitting/nnls"
	"phaselag/fitting/qr"
	"phaselag/models/amplitude"
	"phaselag/models/linear"
	"phaselag/models/thermal"
)

// engine evaluates residual and Jacobian of one Problem in one Form. The rows
// of its matrices are: real parts of all oscillatory rows, imaginary parts of
// the same, relaxation rows; below them the prior rows, which do not depend on
// the moduli. Matrices are column-major. An engine is not for two goroutines.
type engine struct {
	p *Problem
	f *Form
	l layout

	osc, rel []int   // indices into p.Rows
	place    []int   // per row of p.Rows: its place in osc, or that of its row of the matrices
	rowsOf   [][]int // per run: its rows
	priorOf  []int   // per run: its prior row
	m        int     // rows of the linear problem, 2·len(osc)+len(rel) and those of the spectrum's prior
	priors   int
	nc       int // columns: equilibrium, lattice, filler storage, filler loss

	denom []complex128 // D_i per row of p.Rows
	wRe   []float64    // 1/σ_m per row
	wIm   []float64    // 1/σ_δ per row
	scale float64      // modulus in which the columns are counted, Pa

	// At the latest θ:
	theta   []float64
	state   []rowState
	law     thermal.Law
	factors []float64 // s_p
	a, y    []float64 // m×nc, m
	c       []float64 // nc, in units of scale
	passive []bool
	known   bool

	solver nnls.Solver
	idx    []int // passive columns
	slope  slopes
	held   int     // a nonlinear parameter that does not move; −1: none
	heldAt float64 // where it is
	front  qr.Front
}

// rowState is what a row needs at θ.
type rowState struct {
	T                    float64 // with offset
	a                    float64 // a_T
	slope                float64 // d log a_T/dT
	b, bSlope            float64
	phi, phiByEa, phiByT float64 // φ, ∂φ/∂E_a (per kJ/mol), ∂φ/∂T
	terms                amplitude.Terms
	q                    complex128
	polyRe, polyIm       float64 // filled by the Jacobian: Σ c_k …, in units of scale
	polySlRe, polySlIm   float64
	fill, fillCrit       complex128 // F* and its derivatives by ln γ_c,
	fillExp, fillExtra   complex128 // m and ln γ_2; of a term that scales per unit of the polymer term
	h                    complex128 // factor of the polymer term
	dir                  complex128 // what stands with the loss moduli: part + i, or part alone in a relaxation
}

func newEngine(p *Problem, f *Form) *engine {
	e := &engine{p: p, f: f, l: p.layout(f), held: -1}
	e.place, e.rowsOf = make([]int, len(p.Rows)), make([][]int, len(p.Runs))
	for i, r := range p.Rows {
		if r.Relaxation {
			e.rel = append(e.rel, i)
		} else {
			e.place[i] = len(e.osc)
			e.osc = append(e.osc, i)
		}
		e.rowsOf[r.Run] = append(e.rowsOf[r.Run], i)
	}
	for j, i := range e.rel {
		e.place[i] = 2*len(e.osc) + j
	}
	e.m = 2*len(e.osc) + len(e.rel) + f.Prior.rows(len(f.Lattice))
	e.priorOf = make([]int, len(p.Runs))
	for j, o := range e.l.offset {
		if o >= 0 {
			e.priorOf[j] = e.priors
			e.priors++
		}
	}
	if e.l.nFactor > 0 {
		e.priors += p.Factors
	}
	if e.l.phase >= 0 {
		e.priors++
	}
	e.nc = 1 + len(f.Lattice)
	e.nc += f.fillerColumns()
	n := len(p.Rows)
	e.denom = make([]complex128, n)
	e.wRe, e.wIm = make([]float64, n), make([]float64, n)
	var logs float64
	for i, r := range p.Rows {
		e.denom[i] = r.G
		logs += math.Log(cmplx.Abs(r.G))
	}
	e.scale = math.Exp(logs / float64(max(n, 1)))
	e.setSigma(f.Sigma)
	e.theta = make([]float64, e.l.n)
	e.state = make([]rowState, n)
	e.factors = make([]float64, p.Factors)
	e.a, e.y = make([]float64, e.m*e.nc), make([]float64, e.m)
	e.c, e.passive = make([]float64, e.nc), make([]bool, e.nc)
	return e
}

func (e *engine) setSigma(s []Sigma) {
	for i, r := range e.p.Rows {
		w := math.Sqrt(e.f.weight(i))
		e.wRe[i] = w / s[r.Group].Magnitude
		e.wIm[i] = w / s[r.Group].PhaseAt(cmplx.Phase(e.denom[i]))
	}
	e.known = false
}

// prepare computes everything about the rows that θ decides.
func (e *engine) prepare(theta []float64) {
	copy(e.theta, theta)
	p, f, l := e.p, e.f, &e.l
	e.law = p.law(f, l, theta)
	for i := range e.factors {
		e.factors[i] = 1
	}
	if l.nFactor > 0 {
		var sum float64
		for i := range l.nFactor {
			v := theta[l.factor+i]
			e.factors[i] = math.Exp(v)
			sum += v
		}
		e.factors[l.nFactor] = math.Exp(-sum)
	}
	var law amplitude.Law
	var ea float64
	if f.Filler {
		law = f.amplitude(l, theta)
		if l.activation >= 0 {
			ea = theta[l.activation]
		}
	}
	turn := complex(1, 0)
	if l.phase >= 0 {
		turn = cmplx.Rect(1, theta[l.phase])
	}
	density := thermal.Density{Expansion: f.Expansion, Reference: p.Reference}
	var vertical *anchored
	if l.nVer > 0 {
		vertical = p.anchored(theta[l.vertical : l.vertical+l.nVer])
	}
	for i := range p.Rows {
		r, s := &p.Rows[i], &e.state[i]
		s.T = r.T
		decades := 0.0
		if o := l.offset[r.Run]; o >= 0 {
			if p.Runs[r.Run].Decades {
				decades = theta[o]
			} else {
				s.T += theta[o]
			}
		}
		s.a, s.slope = 1, 0
		if e.law != nil {
			s.a = math.Exp(thermal.Ln10 * (e.law.LogShift(s.T) + decades))
			s.slope = e.law.Slope(s.T)
		}
		s.b, s.bSlope = 1, 0
		switch {
		case f.Vertical == Density:
			s.b, s.bSlope = density.Factor(s.T), density.Slope(s.T)
		case vertical != nil:
			s.b = math.Exp(vertical.LogShift(s.T))
			s.bSlope = s.b * vertical.Slope(s.T)
		}
		s.q = complex(e.factors[r.Factor], 0) / e.denom[i]
		if !r.Relaxation {
			s.q *= turn
		}
		s.h = 1
		if !f.Filler {
			continue
		}
		g := 1e3 / thermal.GasConstant * (1/s.T - 1/p.Reference)
		s.phi = math.Exp(ea * g)
		s.phiByEa = s.phi * g
		s.phiByT = -s.phi * ea * 1e3 / (thermal.GasConstant * s.T * s.T)
		s.terms = law.Terms(r.Strain)
		if r.Relaxation {
			s.dir = complex(amplitude.RelaxationPart(f.Kappa, r.Time, p.F0), 0)
		} else {
			s.dir = complex(amplitude.FrequencyPart(f.Kappa, r.Omega/(2*math.Pi), p.F0), 1)
		}
		if f.Scaling {
			s.scaling(theta[l.alpha], theta[l.beta])
			s.h = 1 + complex(s.phi, 0)*s.fill
		}
	}
}

// fill builds A(θ) and y.
func (e *engine) fill() {
	p, n := e.p, len(e.osc)
	re := func(col int) []float64 { return e.a[col*e.m : col*e.m+n] }
	im := func(col int) []float64 { return e.a[col*e.m+n : col*e.m+2*n] }
	rel := func(col int) []float64 { return e.a[col*e.m+2*n : (col+1)*e.m] }
	nl := len(e.f.Lattice)

	for j, i := range e.osc {
		ln := cmplx.Log(p.Rows[i].G / e.denom[i])
		e.y[j], e.y[n+j] = e.wRe[i]*(real(ln)+1), e.wIm[i]*imag(ln)
		s := &e.state[i]
		q := s.q * s.h * complex(s.b*e.scale, 0)
		re(0)[j], im(0)[j] = e.wRe[i]*real(q), e.wIm[i]*imag(q)
	}
	for j, i := range e.rel {
		d := real(e.denom[i])
		e.y[2*n+j] = e.wRe[i] * (math.Log(real(p.Rows[i].G)/d) + 1)
		s := &e.state[i]
		rel(0)[j] = e.wRe[i] * real(s.q*s.h) * s.b * e.scale
	}
	re0, im0 := re(0), im(0)
	for k, tau := range e.f.Lattice {
		rk, ik := re(1+k), im(1+k)
		for j, i := range e.osc {
			x := p.Rows[i].Omega * e.state[i].a * tau
			d := 1 / (1 + x*x)
			st, lo := x*x*d, x*d
			if x > 1e100 {
				st, lo = 1, 0
			}
			// (re0/w + i im0/w)·(st + i lo), weighted again.
			w := e.wIm[i] / e.wRe[i]
			rk[j] = re0[j]*st - im0[j]/w*lo
			ik[j] = im0[j]*st + re0[j]*w*lo
		}
		if len(e.rel) > 0 {
			lk, l0 := rel(1+k), rel(0)
			for j, i := range e.rel {
				lk[j] = l0[j] * math.Exp(-p.Rows[i].Time/(e.state[i].a*tau))
			}
		}
	}
	e.fillPrior()
	for c := range e.f.fillerColumns() {
		// Storage, loss and extra loss term.
		share := func(s *rowState) complex128 {
			switch c {
			case 0:
				return complex(s.terms.K1, 0)
			case 1:
				return complex(s.terms.K2, 0) * s.dir
			}
			return complex(s.terms.K3, 0) * s.dir
		}
		col := 1 + nl + c
		for j, i := range e.osc {
			s := &e.state[i]
			v := s.q * complex(s.phi*e.scale, 0) * share(s)
			re(col)[j], im(col)[j] = e.wRe[i]*real(v), e.wIm[i]*imag(v)
		}
		for j, i := range e.rel {
			s := &e.state[i]
			rel(col)[j] = e.wRe[i] * real(s.q*share(s)) * s.phi * e.scale
		}
	}
}

// scaling writes the term that multiplies the polymer term and its derivatives.
func (s *rowState) scaling(alpha, beta float64) {
	t := &s.terms
	mix := func(a, b float64) complex128 { return complex(alpha*a, 0) + complex(beta*b, 0)*s.dir }
	s.fill, s.fillCrit, s.fillExp = mix(t.K1, t.K2), mix(t.K1Critical, t.K2Critical), mix(t.K1Exponent, t.K2Exponent)
}

// residual solves for the moduli at θ and writes the residual of all rows,
// priors last, into r. It reports false where the model is not finite.
func (e *engine) residual(r, theta []float64) bool {
	e.prepare(theta)
	e.fill()
	e.known = false
	for _, v := range e.a {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return false
		}
	}
	if !e.solve() {
		return false
	}
	copy(r, e.y)
	for k, ck := range e.c {
		if ck != 0 {
			axpy(r[:e.m], -ck, e.a[k*e.m:(k+1)*e.m])
		}
	}
	for k, p := range e.priorRows(theta) {
		r[e.m+k] = p.residual
	}
	e.known = true
	return true
}

// solve finds the moduli; the passive set of the last θ is its warm start.
func (e *engine) solve() bool {
	_, status := e.solver.Solve(e.a, e.m, e.nc, e.y, e.c, e.passive, nil)
	if !status.Usable() {
		return false
	}
	e.idx = e.idx[:0]
	for k := range e.c {
		if e.passive[k] && e.c[k] > 0 {
			e.idx = append(e.idx, k)
		}
	}
	return true
}

// sums computes the fitted model and its slopes for every row, in units of
// scale, from the moduli of the latest solve.
func (e *engine) sums() {
	nl := len(e.f.Lattice)
	for i := range e.state {
		s := &e.state[i]
		s.polyRe, s.polyIm, s.polySlRe, s.polySlIm = e.c[0], 0, 0, 0
		if !e.f.Scaling {
			s.fill, s.fillCrit, s.fillExp, s.fillExtra = 0, 0, 0, 0
		}
	}
	for k, tau := range e.f.Lattice {
		c := e.c[1+k]
		if c == 0 {
			continue
		}
		for i := range e.state {
			r, s := &e.p.Rows[i], &e.state[i]
			if r.Relaxation {
				// d/d ln a of exp(−t/(aτ)) = (t/(aτ)) exp(−t/(aτ)).
				x := r.Time / (s.a * tau)
				v := c * math.Exp(-x)
				s.polyRe += v
				if v > 0 {
					s.polySlRe += v * x
				}
				continue
			}
			x := r.Omega * s.a * tau
			st, lo := linear.Branch(x)
			st1, lo1 := linear.BranchSlope(x)
			s.polyRe += c * st
			s.polyIm += c * lo
			s.polySlRe += c * st1
			s.polySlIm += c * lo1
		}
	}
	n := e.f.fillerColumns()
	if n == 0 {
		return
	}
	var c [3]complex128
	for k := range n {
		c[k] = complex(e.c[1+nl+k], 0)
	}
	for i := range e.state {
		s := &e.state[i]
		t := &s.terms
		mix := func(a, b, x float64) complex128 {
			return c[0]*complex(a, 0) + (c[1]*complex(b, 0)+c[2]*complex(x, 0))*s.dir
		}
		s.fill, s.fillCrit = mix(t.K1, t.K2, t.K3), mix(t.K1Critical, t.K2Critical, 0)
		s.fillExp, s.fillExtra = mix(t.K1Exponent, t.K2Exponent, 0), mix(0, 0, t.K3Extra)
	}
}

// model is the fitted modulus of row i, Pa, after sums, with everything that
// the measurement has: specimen factor, temperature offset, common phase.
func (e *engine) model(i int) complex128 {
	s := &e.state[i]
	turn := complex(1, 0)
	if e.l.phase >= 0 && !e.p.Rows[i].Relaxation {
		turn = cmplx.Rect(1, e.theta[e.l.phase])
	}
	poly := complex(s.b*s.polyRe, s.b*s.polyIm) * s.h
	if !e.f.Scaling {
		poly += complex(s.phi, 0) * s.fill
	}
	if e.p.Rows[i].Relaxation {
		poly = complex(real(poly), 0)
	}
	return turn * complex(e.factors[e.p.Rows[i].Factor]*e.scale, 0) * poly
}
