// Package models holds what a compound is: a complex modulus G*(f, T, γ) with
// its domain and its covariance, and the file that carries it.
//
//	compound, err := models.Open("compound.yaml")                  // YAML or JSON
//	q := models.Condition{Frequency: 15, Temperature: 273.15 + 40, Strain: 0.01}
//	m, err := compound.Modulus(q)                                  // with 95 % intervals, or *OutsideError
//	g := compound.Value(q)                                         // the complex number alone, fast
//	r, err := compound.Relaxation(60, 273.15+23, 0.1)              // G(t; T, γ)
//
// # Conventions
//
// Inside, everything is SI: Pa, s, Hz, K, strain as m/m. Amplitudes of strain
// are single amplitudes (zero to peak) of the energy-equivalent shear strain.
// G* = G' + iG″ with a positive loss angle δ and loss factor tan δ = G″/G'.
// log is base 10. The reduced frequency is f·a_T; colder than the reference
// temperature means a_T > 1. "Not measured" and "not determined" are NaN in
// memory and null in files.
//
// # The model
//
//	G*(f,T,γ) = b_T·[G_e + Σ G_k iωa_Tτ_k/(1+iωa_Tτ_k)] + φ(T)·F*(γ,f)
//	F*        = ΔG'·K1(γ) + ΔG″·K2(γ)·[i + κ(2/π) ln(f/f0)]
//	φ(T)      = exp[(E_a/R)(1/T − 1/T_ref)]
//
// with the kernels of packages linear, thermal and amplitude.
//
// # The domain
//
// A Compound answers where its measurements reach: within the tested
// temperatures, within the reduced frequencies measured, and within the strain
// amplitudes measured; above the isotherms' own amplitude only within 10 K of
// the strain sweeps. Elsewhere Modulus refuses and names the nearest condition
// that is inside; Extrapolate answers and says so.
//
// # The file
//
// A Compound's exported fields are the compound file, its keys and its units;
// Schema describes it. Numbers come back bit for bit, so that a file read back
// gives the very same answers.
//
// # Intervals
//
// A Compound carries the covariance C of its parameters p as a Cholesky factor
// L, C = LLᵀ. An answer y(p) with gradient g = ∂y/∂p has the half-width
//
//	U95 = t(0.975, ν)·‖Lᵀg‖
//
// with ν degrees of freedom. The gradients are closed forms: G* is linear in
// the moduli; ∂G*/∂ log a_T = ln10 · b_T Σ G_k d/d ln x [ix/(1+ix)] carries the
// shift constants; a common factor of the specimens multiplies everything, a
// common error of temperature acts as −∂G*/∂T. The common phase error of the
// apparatus was fitted and taken out, with its prior: it has a row of the
// covariance, because the moduli depend on it, and the gradient zero.
// For the derived numbers, with G* = G'+iG″ and dG* given,
// d|G*| = (G'dG' + G″dG″)/|G*| and dη = (dG″ − η dG')/G'.
package models
