// Package nnls solves linear least squares with non-negative coefficients,
//
//	minimise ‖A·x − b‖₂ subject to x_j ≥ 0 for every j that is not free,
//
// by the active-set method of Lawson and Hanson, for the small, dense, severely
// ill-conditioned systems that relaxation spectra lead to.
//
// A [Solver] keeps its workspace and is meant to be used many times; the set of
// positive coefficients of the last solution is a good start of the next one.
// Matrices are flat and column-major as in package qr: element (i, j) of the m×n
// matrix is a[i+j*m].
package nnls
