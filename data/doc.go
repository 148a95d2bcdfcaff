// Package data holds what the laboratory measured: the campaign file, the
// sweeps, and the doubts that the tables alone raise.
//
// [Open] reads a campaign file, or bare tables, and returns a [Campaign] in SI
// units in which every assumption that was made on the way is listed.
// Amplitudes are single amplitudes (zero to peak); temperatures are in kelvin;
// "not measured" is NaN, never a plausible zero.
//
// Moduli of a Campaign are those of its [Modulus]: shear moduli, unless the
// material is cellular or its Poisson ratio is far from one half, in which case
// Young's moduli stay what they are. Strain amplitudes are then the
// energy-equivalent shear strains of the deformation (see [Deformation]).
package data
