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
// Where it is not uniform (torsion, bending), the local strain γ with
// ½Gγ² = local energy density is averaged over the volume,
//
//	γ_eq = ∫γ² dV / ∫γ dV,
//
// which is 1/γ_eq = the mean of 1/γ weighted by energy. With it the stiffness is
// exact for a modulus that falls like 1/γ (and for one that is constant). It is
// exactly ¾ of the strain at the rim of a twisted solid cylinder, 2/3·2/3 of the
// greatest strain of a slender bent bar. Derived, this program's own rule: to be
// printed as an assumption wherever the deformation is not shear.
//
// # Standards
//
// ISO 4664-1 and ISO 6721 (dynamic properties), ISO 7743 (compression), ISO 1827
// (quadruple shear), ASTM D5992 (dynamic testing of rubber) use these
// relations; their texts were not at hand, and no wording or table of theirs is
// quoted. Each limit in [Shape.Checks] names its own source.
package specimen
