package causal

import (
	"math"

	"phaselag/fitting/nnls"
	"phaselag/fitting/qr"
)

// # Problem
//
// With c_k(ω) the basis, g the parameters and D_p the distortion that a
// hypothesis with parameter p makes of a modulus (the identity for none), the
// model of the measured G_i is M_i = D_p(Σ_k g_k c_k)_i and the residual is
//
//	r_i = 1 − M_i/G_i ≈ ln(G_i/M_i)
//
// whose real part is the relative error of the magnitude and whose imaginary
// part is the error of the phase in rad. Both are linear in g:
//
//	minimise S = Σ_i (Re r_i/σ_m)² + (Im r_i/σ_δ)²
//
// with g free in sign (Householder QR), or g ≥ 0 (Lawson and Hanson).
//
// Source: Boukamp, J. Electrochem. Soc. 142 (1995) 1885, for the linear
// Kramers–Kronig test; the residual is the one that suits an instrument that
// measures a magnitude and a phase.

// rankTolerance is the share of a column, in units of the column, that must be
// independent of the columns before it for the column to count.
const rankTolerance = 1e-11

// system is the weighted linear problem of one isotherm under one noise.
type system struct {
	frequency  []float64
	modulus    []complex128
	basis      []complex128 // n × (modes+1)
	columns    int
	sm, sd     float64 // noise used: relative magnitude, phase in rad
	solver     *nnls.Solver
	matrix     []float64 // 2n × (columns+1), the rows of magnitude first
	right      []float64
	parameters []float64
	passive    []bool
	free       []bool
}

func newSystem(frequency []float64, modulus, basis []complex128, sm, sd float64) *system {
	n := len(frequency)
	q := len(basis) / n
	s := &system{frequency: frequency, modulus: modulus, basis: basis, columns: q, sm: sm, sd: sd,
		solver: new(nnls.Solver), matrix: make([]float64, 2*n*(q+1)), right: make([]float64, 2*n),
		parameters: make([]float64, q+1), passive: make([]bool, q+1), free: make([]bool, q+1)}
	s.free[q] = true
	return s
}

// rows writes the complex vector z, relative to G, as weighted real rows.
func (s *system) rows(dst []float64, z func(i int) complex128) {
	n := len(s.frequency)
	for i, g := range s.modulus {
		x := z(i) / g
		dst[i], dst[n+i] = real(x)/s.sm, imag(x)/s.sd
	}
}

// solution is one fit.
type solution struct {
	model    []complex128 // M
	residual []float64    // unweighted: n of magnitude, then n of phase in rad
	leverage []float64    // of the 2n rows, nil for the non-negative fit
	sum      float64      // S
	rank     int          // parameters that were solved for
}

// finish computes what follows from the model.
func (s *system) finish(model []complex128, rank int) solution {
	n := len(s.frequency)
	out := solution{model: model, residual: make([]float64, 2*n), rank: rank}
	for i, m := range model {
		r := 1 - m/s.modulus[i]
		out.residual[i], out.residual[n+i] = real(r), imag(r)
		out.sum += sq(real(r)/s.sm) + sq(imag(r)/s.sd)
	}
	return out
}

// linear solves the problem with signs free.
func (s *system) linear() solution {
	n, m := len(s.frequency), 2*len(s.frequency)
	keep := make([]int, s.columns)
	for k := range keep {
		keep[k] = k
	}
	a := make([]float64, m*s.columns)
	scale := make([]float64, s.columns)
	tau := make([]float64, s.columns)
	for {
		for j, k := range keep {
			col := a[j*m : (j+1)*m]
			s.rows(col, func(i int) complex128 { return s.basis[i+k*n] })
			scale[j] = qr.Norm(col)
			for i := range col {
				col[i] /= scale[j]
			}
		}
		qr.Factor(a, m, len(keep), m, tau)
		weak := -1
		for j := range keep {
			if math.Abs(a[j+j*m]) < rankTolerance {
				weak = j
				break
			}
		}
		if weak < 0 {
			break
		}
		keep = append(keep[:weak], keep[weak+1:]...)
	}
	q := len(keep)
	x := make([]float64, m)
	s.rows(x, func(i int) complex128 { return s.modulus[i] })
	qr.MulQT(a, m, q, m, tau, x)
	qr.SolveR(a, q, m, x[:q])
	model := make([]complex128, n)
	for j, k := range keep {
		g := complex(x[j]/scale[j], 0)
		for i := range model {
			model[i] += g * s.basis[i+k*n]
		}
	}
	out := s.finish(model, q)
	thin := make([]float64, m*q)
	qr.ThinQ(thin, m, a, m, q, m, tau)
	out.leverage = make([]float64, m)
	for j := range q {
		for i := range m {
			out.leverage[i] += sq(thin[i+j*m])
		}
	}
	return out
}

// nonNegative solves the problem with g ≥ 0 under the distortion h with its
// parameter at p; h nil stands for no distortion.
func (s *system) nonNegative(h *hypothesis, p float64) (solution, bool) {
	sol, _, ok := s.solve(h, p, false)
	return sol, ok
}

// step solves the problem linearised at p together with the change of p. model
// is the undistorted modulus at p.
func (s *system) step(h *hypothesis, p float64) (change, uncertainty float64, ok bool) {
	_, d, ok := s.solve(h, p, true)
	if !ok {
		return 0, math.NaN(), false
	}
	return d, s.uncertainty(), true
}

func (s *system) solve(h *hypothesis, p float64, joint bool) (sol solution, change float64, ok bool) {
	n, m := len(s.frequency), 2*len(s.frequency)
	distort := func(i int, z complex128) complex128 {
		if h == nil {
			return z
		}
		return h.linear(p, s.frequency[i], z)
	}
	for k := range s.columns {
		s.rows(s.matrix[k*m:(k+1)*m], func(i int) complex128 { return distort(i, s.basis[i+k*n]) })
	}
	shift := func(i int) complex128 {
		if h == nil {
			return 0
		}
		return h.shift(p, s.frequency[i])
	}
	s.rows(s.right, func(i int) complex128 { return s.modulus[i] - shift(i) })
	_, status := s.solver.Solve(s.matrix[:m*s.columns], m, s.columns, s.right,
		s.parameters[:s.columns], s.passive[:s.columns], nil)
	if !status.Usable() {
		return sol, 0, false
	}
	z := s.combine()
	if joint {
		s.rows(s.matrix[m*s.columns:], func(i int) complex128 { return h.slope(p, s.frequency[i], z[i]) })
		s.passive[s.columns] = true
		_, status = s.solver.Solve(s.matrix, m, s.columns+1, s.right, s.parameters, s.passive, s.free)
		return sol, s.parameters[s.columns], status.Usable()
	}
	model := make([]complex128, n)
	for i := range model {
		model[i] = distort(i, z[i]) + shift(i)
	}
	rank := 0
	for _, in := range s.passive[:s.columns] {
		if in {
			rank++
		}
	}
	return s.finish(model, rank), 0, true
}

// combine is Σ g_k c_k for the parameters of the last non-negative fit.
func (s *system) combine() []complex128 {
	n := len(s.frequency)
	z := make([]complex128, n)
	for k := range s.columns {
		g := complex(s.parameters[k], 0)
		for i := range z {
			z[i] += g * s.basis[i+k*n]
		}
	}
	return z
}

// uncertainty is the standard uncertainty of the last column of the joint
// problem just solved: 1/‖(I − P)·h‖, with P the projection on the columns in
// use.
func (s *system) uncertainty() float64 {
	m := 2 * len(s.frequency)
	a := make([]float64, 0, m*s.columns)
	q := 0
	for k := range s.columns {
		if s.passive[k] {
			a = append(a, s.matrix[k*m:(k+1)*m]...)
			q++
		}
	}
	h := append([]float64(nil), s.matrix[m*s.columns:m*(s.columns+1)]...)
	if q > 0 {
		tau := make([]float64, q)
		qr.Factor(a, m, q, m, tau)
		qr.Project(a, m, q, m, tau, h, true)
	}
	return 1 / qr.Norm(h)
}

func sq(x float64) float64 { return x * x }
