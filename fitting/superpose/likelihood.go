package superpose

import "math"

// Marginal is −2 ln of the marginal likelihood of the measurements, without
// the constant that forms with the same rows and noise share. The temperature
// offsets d are integrated out with their priors, linearised (Laplace):
//
//	−2 ln L = S_min + ln det(I + Λ JᵀJ Λ),  Λ = diag(u_j), J = ∂residual/∂d
//
// and S_min includes the prior rows.
func (s *Solution) Marginal() float64 {
	e := s.e
	out := s.Objective
	e.derivatives()
	// A row belongs to one run, so JᵀJ is diagonal.
	squares := make([]float64, e.l.n)
	for k, c := range e.slope.column {
		v := e.slope.value[k]
		squares[c] += real(v)*real(v) + imag(v)*imag(v)
	}
	for j, o := range e.l.offset {
		if u := s.Problem.Runs[j].U; o >= 0 {
			out += math.Log1p(u * u * squares[o])
		}
	}
	return out
}

// AICc is Marginal with Akaike's penalty for the constants of the shift law,
// the vertical law and the filler term, corrected for a finite number of
// residuals. The spectrum counts for none, since rivals share its lattice.
func (s *Solution) AICc() float64 {
	k := float64(s.Constants())
	n := float64(s.e.m)
	out := s.Marginal() + 2*k
	if n > k+1 {
		out += 2 * k * (k + 1) / (n - k - 1)
	}
	return out
}

// Constants counts the constants of shift law, vertical law and filler term.
func (s *Solution) Constants() int {
	k := s.e.l.nLaw + s.e.l.nVer
	if s.e.l.activation >= 0 {
		k++
	}
	if s.e.l.critical >= 0 {
		k += 3 // γ_c and the two moduli, or α and β
	}
	if s.e.l.exponent >= 0 {
		k++
	}
	if s.e.l.extra >= 0 {
		k += 2 // γ_2 and the modulus
	}
	return k
}

// Scatter estimates the run-to-run standard deviation of temperature, K, by
// restricted maximum likelihood from a solution; shared marks the runs that
// have it in common. With
// Z the Jacobian of the offsets and r the residual without offsets, both
// projected off all other parameters, and ZᵀZ = VΛVᵀ, g = VᵀZᵀr,
//
//	−2 ln L(u) = Σ ln(1 + u²λ_k) − Σ u² g_k²/(1 + u²λ_k) + const
//
// (Patterson and Thompson, Biometrika 58 (1971) 545, for this linear case). It
// is zero where the data ask for none, and at most limit.
func (s *Solution) Scatter(shared []bool, limit float64) float64 {
	lambda, g := s.restricted(shared)
	f := func(u float64) float64 {
		var v float64
		for k, l := range lambda {
			v += math.Log1p(u*u*l) - u*u*g[k]*g[k]/(1+u*u*l)
		}
		return v
	}
	best, bestF := 0.0, 0.0
	const steps = 400
	for i := 1; i <= steps; i++ {
		u := limit * math.Pow(1e-3, 1-float64(i)/steps)
		if v := f(u); v < bestF {
			best, bestF = u, v
		}
	}
	return best
}
