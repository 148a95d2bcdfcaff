package qr

// Rows that regularise or carry prior knowledge, appended to a triangle
//
//	min ‖[R; D]·x − [c; d]‖,   D = diag(δ_0, …, δ_{n-1})
//
// is the subproblem of a trust region (D = √λ·I). The reflector of column j acts
// on the rows j of R and 0…j of what D has become, nothing else, so the work is a
// third of that for a full 2n×n matrix. Reference: J. J. Moré, The
// Levenberg-Marquardt algorithm: implementation and theory, Lecture Notes in
// Mathematics 630, Springer 1978, section 3, where rotations are used.

// AppendDiagonal replaces the n×n upper triangle r, of leading dimension ldr, by
// the triangle of [R; diag(delta)] and the right-hand side (c, d), each of length n,
// by the first and last n elements of Qᵀ·(c, d). work needs length n·n.
func AppendDiagonal(r []float64, n, ldr int, delta, c, d, work []float64) {
	checkShape(r, n, n, ldr)
	if len(delta) < n || len(c) < n || len(d) < n || len(work) < n*n {
		panic(badLen)
	}
	work = work[:n*n]
	clear(work)
	for j := range n {
		work[j+j*n] = delta[j]
	}
	for j := range n {
		tail := work[j*n : j*n+j+1]
		beta, tau := reflect(r[j+j*ldr], tail)
		if tau == 0 {
			continue
		}
		r[j+j*ldr] = beta
		for k := j + 1; k < n; k++ {
			r[j+k*ldr] += applyTail(tail, tau, r[j+k*ldr], work[k*n:k*n+j+1])
		}
		c[j] += applyTail(tail, tau, c[j], d[:j+1])
	}
}
