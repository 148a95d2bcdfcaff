// Package specimen turns the complex stiffness of a test piece into the complex
// shear modulus of its compound and back, and displacement amplitudes into
// energy-equivalent shear strains and back.
//
// # Conventions
//
// Everything is SI: m, m², N/m, Pa, kg, rad/s. A shape that is sheared, pressed,
// pulled or bent has a stiffness K* = K' + iK” in N/m and a displacement in m; a
// shape that is twisted has a stiffness in N·m/rad and an angle in rad
// ([Shape.Rotates]). Displacements and strains are amplitudes of the same kind:
// a single amplitude (zero to peak) gives a single amplitude.
//
// The relations are those of linear elasticity with G replaced by G*
// (correspondence principle); Poisson's ratio and the bulk modulus are real and
// do not depend on frequency. E = 2(1+ν)G.
//
// [Shape.Validate] is the door: it says which dimension is impossible and what
// would be right. The other methods do not check; on an impossible shape they
// return numbers without meaning, mostly NaN.
//
// # Energy-equivalent shear strain
//
// A modulus that depends on the amplitude is taken at one strain per test piece.
// Where the strain is uniform it is the shear strain that stores as much:
//
//	½Gγ_eq² = stored energy density:    shear                   γ_eq = γ
//	                                    tension, lubricated     γ_eq = √(2(1+ν))·ε   (√3·ε)
//	                                    bonded compression      γ_eq = √(E_c/G)·ε    (no bulk part)
//
// Where it is not uniform (torsion, bending), the logarithm of the local strain
// γ, ½Gγ² = local energy density, is averaged over the volume with the energy as
// weight,
//
//	ln γ_eq = ∫γ² ln γ dV / ∫γ² dV.
//
// The piece shows the energy-weighted mean of the local modulus; a modulus that
// is a straight line over ln γ has exactly that mean at γ_eq. This is
// e^(−1/4) = 0.779 of the strain at the rim of a twisted solid cylinder (the
// trade's ¾ is the mean of 1/γ in place of ln γ) and e^(−2/3) = 0.513 of the
// greatest strain of a slender bent bar. For Kraus' law with exponents m of 0.4
// to 0.7 and a ΔG up to the rest of the modulus, the worst error over all
// amplitudes is 0.5 % of G' and 1.1 % of G” in torsion, 1.5 % and 3.4 % in
// bending; the mean of 1/γ would give 1.0, 1.8, 3.8 and 6.5 %. Derived, this
// program's own rule: to be printed as an assumption wherever the deformation is
// not shear.
//
// # Standards
//
// ISO 4664-1 and ISO 6721 (dynamic properties), ISO 7743 (compression), ISO 1827
// (quadruple shear), ASTM D5992 (dynamic testing of rubber) use these
// relations; their texts were not at hand, and no wording or table of theirs is
// quoted. Each limit in [Shape.Checks] names its own source.
package specimen
