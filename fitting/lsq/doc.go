// Package lsq solves nonlinear least-squares problems with simple bounds,
//
//	minimise ½‖r(x)‖₂² subject to lower ≤ x ≤ upper,
//
// r having M elements and x having N, by a trust-region method of the
// Levenberg-Marquardt family with analytic Jacobian. It stands on orthogonal
// factorizations throughout: the normal matrix JᵀJ, whose condition number is
// the square of that of J, is never formed, neither for steps nor for
// covariances.
//
// [Solve] is the front door. A [Solver] keeps its workspace between problems and
// does not allocate once it has seen the shape. [Method] lets the solver take
// part in gonum's optimize package, and [Start] finds a starting point in a box
// by a global search where none is known.
//
// Conventions: the Jacobian J, J_ij = ∂r_i/∂x_j, is a flat column-major slice,
// element (i, j) at j·M + i. Covariances are N×N and symmetric. A number that
// was not determined is NaN. Nothing here prints, reads a clock or draws a random
// number of its own; the same input gives the same bits.
package lsq
