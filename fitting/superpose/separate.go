package superpose

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"sync"
	"sync/atomic"

	"gonum.org/v1/gonum/stat/distuv"

	"phaselag/fitting/nnls"
)

// Does superposition hold?
//
// Under superposition all isotherms share one spectrum. The joint fit is
// compared with spectra of their own for every tested temperature, on the same
// lattice at the same shifts (which nests the joint fit), by
//
//	F = (S_joint − S_separate)/S_separate
//
// over the weighted residuals of the isotherms. Non-negativity leaves no
// degrees of freedom to count, so the distribution of F comes from parametric
// bootstrap: measurements are drawn from the joint fit with its noise, fitted
// again both ways, and p is the share of draws with F at least as large, the
// measurement itself counted.

// Separate is the comparison for one solution of the law Factors.
type Separate struct {
	F        float64
	P        float64 // NaN if the comparison could not be made
	Draws    int     // replicates behind P; 0: P is that of the F test on passive sets
	Phase    Misfits // rad
	Relative Misfits // of the magnitude
	Knots    []KnotMisfit
}

// Misfits are rms values over all isotherms.
type Misfits struct {
	Joint float64 // of the common curve
	Floor float64 // of spectra of their own, over their degrees of freedom
}

// Beyond is the misfit of the common curve beyond the floor.
func (m Misfits) Beyond() float64 {
	return math.Sqrt(max(0, m.Joint*m.Joint-m.Floor*m.Floor))
}

// KnotMisfit is the misfit of the common curve at one tested temperature.
type KnotMisfit struct {
	T               float64 // K
	Points          int
	Phase, Relative float64 // rms, rad and relative
	BeyondPhase     float64 // beyond the floor of all isotherms
	BeyondRelative  float64
	F, P            float64 // as those of Separate, for this isotherm alone; P is NaN without draws
}

// separator fits isotherms one by one; knots[j] lists the rows of a knot.
type separator struct {
	solver nnls.Solver
	knots  [][]int
	rows   []int
}

// newSeparator groups the isotherm rows (isotherm[i] true) by their knot.
func newSeparator(p *Problem, isotherm []bool) *separator {
	z := &separator{knots: make([][]int, len(p.Knots))}
	for i, r := range p.Rows {
		if !isotherm[i] || r.Relaxation {
			continue
		}
		best := 0
		for k, T := range p.Knots {
			if math.Abs(T-r.T) < math.Abs(p.Knots[best]-r.T) {
				best = k
			}
		}
		z.knots[best] = append(z.knots[best], i)
		z.rows = append(z.rows, i)
	}
	return z
}

type separateSums struct {
	joint, separate   float64   // weighted
	jointK, separateK []float64 // the same per knot
	jointM, jointD    []float64
	sepM, sepD        []float64
	parameters        int // passive columns of all knots
	total             int
}

// statistics are F and that of every knot; rounding may not make them negative.
func (s separateSums) statistics() []float64 {
	out := []float64{max(0, (s.joint-s.separate)/s.separate)}
	for k, v := range s.separateK {
		f := 0.0
		if v > 0 {
			f = max(0, (s.jointK[k]-v)/v)
		}
		out = append(out, f)
	}
	return out
}

// sums compares one solution; the engine must be settled at it.
func (z *separator) sums(s *Solution) (out separateSums, ok bool) {
	e := s.e
	n := len(e.osc)
	at := make([]int, len(s.Problem.Rows))
	for j, i := range e.osc {
		at[i] = j
	}
	nl := len(s.Form.Lattice)
	nk := len(z.knots)
	out.jointM, out.jointD = make([]float64, nk), make([]float64, nk)
	out.sepM, out.sepD = make([]float64, nk), make([]float64, nk)
	out.jointK, out.separateK = make([]float64, nk), make([]float64, nk)
	for k, rows := range z.knots {
		m := 2 * len(rows)
		if m == 0 {
			continue
		}
		a, b := make([]float64, m*(nl+1)), make([]float64, m)
		for q, i := range rows {
			j := at[i]
			for c := 0; c <= nl; c++ {
				a[c*m+q], a[c*m+len(rows)+q] = e.a[c*e.m+j], e.a[c*e.m+n+j]
			}
			b[q], b[len(rows)+q] = e.y[j], e.y[n+j]
			// The filler stays as the joint fit has it.
			for c := nl + 1; c < e.nc; c++ {
				b[q] -= e.c[c] * e.a[c*e.m+j]
				b[len(rows)+q] -= e.c[c] * e.a[c*e.m+n+j]
			}
		}
		x := make([]float64, nl+1)
		passive := append([]bool(nil), e.passive[:nl+1]...)
		if _, status := z.solver.Solve(a, m, nl+1, b, x, passive, nil); !status.Usable() {
			return out, false
		}
		for c, v := range x {
			if v > 0 {
				out.parameters++
				axpy(b, -v, a[c*m:(c+1)*m])
			}
		}
		for q, i := range rows {
			r, m, w := s.Misfit(i), 1/e.wRe[i], 1/e.wIm[i]
			out.jointM[k] += real(r) * real(r)
			out.jointD[k] += imag(r) * imag(r)
			u, v := b[q]*m, b[len(rows)+q]*w
			out.sepM[k] += u * u
			out.sepD[k] += v * v
			out.separateK[k] += b[q]*b[q] + b[len(rows)+q]*b[len(rows)+q]
			out.jointK[k] += real(r)*real(r)/(m*m) + imag(r)*imag(r)/(w*w)
		}
		out.separate += out.separateK[k]
		out.joint += out.jointK[k]
		out.total += m
	}
	return out, out.separate > 0
}

// Superposition compares a solution of the law Factors with spectra of their
// own. Draws are made only when the F test on the passive sets gives p ≤ 0.2;
// replicate r is drawn from seed and r, so that the answer does not depend on
// workers.
func (s *Solution) Superposition(isotherm []bool, draws int, seed uint64, workers int) Separate {
	z := newSeparator(s.Problem, isotherm)
	out := Separate{P: math.NaN(), F: math.NaN()}
	// The comparison is made in the linearisation about the fitted moduli, so
	// that joint and separate residuals are the same logarithms.
	s.about()
	sums, ok := z.sums(s)
	if !ok || len(z.knots) < 2 {
		return out
	}
	statistics := sums.statistics()
	out.F = statistics[0]
	free := float64(sums.total - sums.parameters)
	var pts, jm, jd, sm, sd float64
	for k, rows := range z.knots {
		pts += float64(len(rows))
		jm, jd = jm+sums.jointM[k], jd+sums.jointD[k]
		sm, sd = sm+sums.sepM[k], sd+sums.sepD[k]
	}
	share := max(free/float64(sums.total), 0.2)
	out.Relative = Misfits{math.Sqrt(jm / pts), math.Sqrt(sm / (pts * share))}
	out.Phase = Misfits{math.Sqrt(jd / pts), math.Sqrt(sd / (pts * share))}
	for k, rows := range z.knots {
		n := float64(len(rows))
		if n == 0 {
			continue
		}
		km := KnotMisfit{T: s.Problem.Knots[k], Points: len(rows), Phase: math.Sqrt(sums.jointD[k] / n), Relative: math.Sqrt(sums.jointM[k] / n)}
		km.F, km.P = statistics[1+k], math.NaN()
		km.BeyondPhase = Misfits{km.Phase, out.Phase.Floor}.Beyond()
		km.BeyondRelative = Misfits{km.Relative, out.Relative.Floor}.Beyond()
		out.Knots = append(out.Knots, km)
	}
	var joint float64 // effective parameters of the joint fit
	for _, h := range s.linearise(s.e.passiveColumns()).leverage()[:2*len(s.e.osc)] {
		joint += h
	}
	extra := float64(sums.parameters) - joint
	if extra < 1 || free < 1 {
		out.P = 1
		return out
	}
	out.P = 1 - distuv.F{D1: extra, D2: free}.CDF(out.F*free/extra)
	if out.P > 0.2 || draws <= 0 {
		return out
	}
	out.Draws = draws
	p := s.bootstrap(z, statistics, draws, seed, workers)
	out.P = p[0]
	for i := range out.Knots {
		for k, T := range s.Problem.Knots {
			if T == out.Knots[i].T {
				out.Knots[i].P = p[1+k]
			}
		}
	}
	return out
}

// about makes the fitted moduli the denominators, without fitting again.
func (s *Solution) about() {
	e := s.e
	for i := range e.denom {
		e.denom[i] = e.model(i)
	}
	e.setSigma(e.f.Sigma)
	e.residual(make([]float64, e.m+e.priors), s.Theta)
	e.sums()
}

// bootstrap gives p of every statistic: the share of draws in which it is at least
// as large, the measurement itself counted.
func (s *Solution) bootstrap(z *separator, statistics []float64, draws int, seed uint64, workers int) []float64 {
	model := make([]complex128, len(s.Problem.Rows))
	for i := range model {
		model[i] = s.Model(i)
	}
	drawn := make([][]float64, draws)
	parallel(draws, workers, func() func(r int) {
		own := separator{knots: z.knots, rows: z.rows}
		return func(r int) { drawn[r] = s.replicate(&own, model, seed, uint64(r)) }
	})
	p := make([]float64, len(statistics))
	for k, f := range statistics {
		count := 1
		for _, d := range drawn {
			if d != nil && d[k] >= f {
				count++
			}
		}
		p[k] = float64(count) / float64(draws+1)
	}
	return p
}

// parallel calls a function of each worker's own for 0, 1, …, n−1.
func parallel(n, workers int, worker func() func(i int)) {
	var wg sync.WaitGroup
	var next atomic.Int64
	for range max(1, min(workers, n)) {
		wg.Add(1)
		go func() {
			defer wg.Done()
			do := worker()
			for i := int(next.Add(1)) - 1; i < n; i = int(next.Add(1)) - 1 {
				do(i)
			}
		}()
	}
	wg.Wait()
}

// replicate draws measurements from the model, fits them both ways and returns
// the statistics; nil where the fit failed.
func (s *Solution) replicate(z *separator, model []complex128, seed, r uint64) []float64 {
	rnd := rand.New(rand.NewPCG(seed, r))
	p := *s.Problem
	p.Rows = append([]Row(nil), s.Problem.Rows...)
	for i := range p.Rows {
		w := s.Form.Sigma[p.Rows[i].Group]
		x, y := rnd.NormFloat64(), rnd.NormFloat64()
		if p.Rows[i].Relaxation {
			y = 0
		}
		p.Rows[i].G = model[i] * cmplx.Exp(complex(w.Magnitude*x, w.PhaseAt(cmplx.Phase(model[i]))*y))
	}
	form := s.Form
	e := newEngine(&p, &form)
	copy(e.denom, model)
	e.setSigma(form.Sigma)
	copy(e.passive, s.e.passive)
	fit, err := e.run(s.Theta)
	if err != nil {
		return nil
	}
	sums, ok := z.sums(fit)
	if !ok {
		return nil
	}
	return sums.statistics()
}
