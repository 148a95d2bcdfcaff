// Package qr holds the orthogonal kernels that every least-squares solver of
// this project stands on: the Householder factorization of a dense matrix, its
// products with Q, and the solutions with R.
//
// A matrix is a flat slice in column-major order: element (i, j) of an m×n
// matrix with leading dimension ld ≥ m is a[i+j*ld]. Columns are then
// contiguous, which is what the vector kernels below need, and a sub-matrix is a
// slice. Nothing is allocated; every workspace is the caller's.
//
// A factored matrix holds R in its upper triangle and below the diagonal the
// Householder vectors; with the n numbers of tau they stand for the m×m
// orthogonal Q. No pivoting is done: the order of the columns is the caller's
// decision, and so is the judgement of a small diagonal element.
//
// Functions of this package panic with "qr: …" when a slice is too short for
// the stated shape. They never panic because of the numbers in it; NaN and
// infinity pass through.
package qr
