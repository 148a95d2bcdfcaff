// Package changes says what changed between a tested batch and an approved compound, in
// the few words in which a mixing room thinks, each with its interval and whether it is
// real.
//
// # The changes
//
// With P the polymer's and F the filler's term of the approved compound,
//
//	H(f,T,γ) = s·[P(f, T−ΔT) + a·F(f, T, γ/c)],
//	|G*_batch| = |H|,    tan δ_batch = λ·tan arg H:
//
// a shift ΔT of the glass transition in K (the batch at T is where the approved compound
// is at T−ΔT), a factor s on the whole stiffness (crosslinks, amount of filler), a factor
// λ on the loss factor at the same magnitude, a factor a on the filler's network, and a
// factor c on its critical strain. The network softens with the temperature itself, not
// with the distance from the glass transition, so ΔT moves the polymer alone. Where the
// filler's term scales with the polymer's it goes with it.
//
// # The estimator
//
// Residuals are ln(G*_measured/G*_batch), real part over σ_m, imaginary part over σ_δ.
// Beside the changes are estimated, each with a prior: an error of temperature for every
// run, one for the calibration, a factor for every specimen and mounting, a common error
// of the phase, and the parameters of the approved compound p = p̂ + Lz, z ~ N(0, 1), L
// the root of their covariance as the compound file has it. What both batches share
// cancels: with one thermometer the calibration is in neither, with one calibration of the
// phase its error is not. The least-squares problem is solved by Gauss and Newton's
// method with Householder QR; σ_m and σ_δ are found with it, from residuals over their
// degrees of freedom n − tr(hat matrix).
//
// A compound in the place of a batch gives G* on a grid of conditions inside both domains
// (project.go).
//
// # Real, and what could have been seen
//
// p by Student's t, two-sided; Holm's correction (1979) over all changes that can be told:
// the family errs in 5 % of unchanged batches. The smallest change that would have been
// seen in nine of ten cases is (t_{1−0.025/m} + t_0.9)·u of m changes, its first step.
// Whether these changes describe the difference at all is an F test of σ against that of
// the approved compound.
package changes
