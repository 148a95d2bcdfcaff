// Package superpose finds one compound in everything that was measured: it
// shifts isotherms and fits spectrum, shift law, filler term, temperature
// offsets and specimen factors in one joint fit.
//
// # The problem
//
// Row i of the measurements has the complex modulus G_i at (f_i, T_i, γ_i), run
// j and specimen p. The model is
//
//	M_i = s_p { b_T [G_e + Σ G_k iω_i a_T τ_k/(1+iω_i a_T τ_k)] + φ(T) F*(γ_i,f_i) },  T = T_i + d_j
//
// and the residual of an oscillatory row is the real part of ln(G_i/M_i) over
// σ_m and its imaginary part over σ_δ, because an instrument measures an
// amplitude ratio and a phase. A relaxation row has ln(G_i/M_i)/σ alone. Prior
// rows d_j/u_j and ln s_p/u_g stand below.
//
// Where the standard uncertainty u_φ of the apparatus' phase is stated, M_i is
// turned by a common angle φ with the prior row φ/u_φ. Left out, it would not
// only turn the answers: G” tells by causality how fast G' rises with
// frequency, so a phase error of 0.05° at a loss angle of 3° is an error of 2 %
// in the slope of log a_T near the rubber plateau.
//
// With D_i near M_i, ln(G_i/M_i) = ln(G_i/D_i) + 1 − M_i/D_i up to the square
// of M_i/D_i − 1. That is linear in the moduli. D_i is the measured modulus
// first and the fitted one from the second round of the noise iteration on, so
// that at the end the residual is the logarithm itself.
//
// # Variable projection
//
// For given nonlinear parameters θ the moduli c ≥ 0 solve a non-negative least
// squares problem ‖y − A(θ)c‖; what remains is a least squares problem in θ
// alone (Golub and Pereyra, SIAM J. Numer. Anal. 10 (1973) 413). Its Jacobian
// is taken in Kaufman's form (BIT 15 (1975) 49) on the passive columns P:
// −(I − QQᵀ) (∂A_P/∂θ) c_P, with A_P = QR. The gradient is exact, since the
// squared distance to a cone is differentiable.
//
// # Gauge
//
// A common factor of all specimens is the same as a factor of all moduli. The
// specimen factors are therefore held to Σ ln s_p = 0; with equal priors the
// common factor is independent of everything else, has the standard
// uncertainty u_g/√n and is kept apart as such.
package superpose
