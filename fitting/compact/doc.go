// Package compact describes a master curve by few constants: the fractional
// models of package linear, and the fewest relaxation times that stay within a
// stated tolerance.
//
// A compact model is for programs that cannot take a whole spectrum. It is fitted to
// points that are already superposed, so its uncertainties are those of the curve
// alone: of the shift factors they know nothing. Where a model misses the points by
// more than their noise, its uncertainties are widened by the misfit, as if the
// misfit were noise, which it is not; the misfit itself is the number to look at.
package compact
