package lsq

import (
	"math"

	"gonum.org/v1/gonum/floats"

	"phaselag/fitting/qr"
)

// The step of a trust region inside a box, in the scaled parameters y = D·p
//
//	minimise ½‖R·y + q‖²  subject to ‖y‖ ≤ Δ, l ≤ y ≤ u
//
// R is the triangle of J·D⁻¹ (unit columns), q the first N elements of Qᵀr.
//
// Without the box the solution is y(λ), the least-squares solution of
// [R; √λ·I]·y = [−q; 0], with λ = 0 when that lies inside and otherwise the λ ≥ 0
// at which ‖y(λ)‖ = Δ within a tenth. λ is found by Newton's method on
// 1/Δ − 1/‖y(λ)‖, safeguarded. Reference: J. J. Moré, The Levenberg-Marquardt
// algorithm: implementation and theory, Lecture Notes in Mathematics 630,
// Springer 1978, section 5.
//
// With the box: from the feasible point c = 0, find the y of the parameters not
// yet fixed (radius reduced by what is fixed); go from c towards it until the
// first bound is hit; fix that parameter there, continue. The model falls along
// every stretch, since its end minimises a convex function over a set that
// contains c; N rounds at most. A parameter that was fixed wrongly is free again
// in the next step, so this is not the exact minimum in the box and need not be.

const (
	epsilon  = 0x1p-52
	singular = 64 * epsilon // a diagonal element of R below this counts as zero
)

type region struct {
	n      int
	r      []float64 // n×n triangle of J·D⁻¹, zeros below
	q      []float64 // n
	lambda float64   // of the last step; a first guess for the next

	y      []float64 // the step, n
	hit    []int8    // −1, +1: the step ends at the lower, upper bound
	bound  bool      // some bound was hit
	slope  float64   // −qᵀRy: what ½‖r‖² would fall by along y at its present rate
	sub    []float64 // n×n: triangle of the free columns
	rhs    []float64 // n
	column []int     // free columns
	z, v   []float64 // n
	target []float64 // n
	aug    []float64 // n×n
	zero   []float64 // n
	delta  []float64 // n
	work   []float64 // n×n
	tau    []float64 // n
}

func (g *region) resize(n int) {
	g.n = n
	for _, p := range []*[]float64{&g.r, &g.sub, &g.aug, &g.work} {
		*p = grow(*p, n*n)
	}
	for _, p := range []*[]float64{&g.q, &g.y, &g.rhs, &g.z, &g.v, &g.target, &g.zero, &g.delta, &g.tau} {
		*p = grow(*p, n)
	}
	g.hit = grow(g.hit, n)
	g.column = grow(g.column, n)
	g.lambda = 0
}

// step computes g.y for the radius and the bounds l, u of y (l ≤ 0 ≤ u) with the
// parameters in held at zero. It returns the predicted reduction of ½‖r‖² and
// the length of y. It is zero only at a minimum of the model.
func (g *region) step(radius float64, l, u []float64, held []bool) (predicted, length float64) {
	clear(g.y)
	clear(g.hit)
	g.bound = false
	g.column = g.column[:0]
	for j := range g.n {
		if !held[j] {
			g.column = append(g.column, j)
		}
	}
	for len(g.column) > 0 {
		k := g.reduce()
		var fixed float64
		for j := range g.n {
			if g.hit[j] != 0 {
				fixed += g.y[j] * g.y[j]
			}
		}
		left := math.Sqrt(math.Max(radius*radius-fixed, 1e-6*radius*radius))
		g.damped(k, left)
		// From c = g.y to the target.
		alpha, first := 1.0, -1
		for i, j := range g.column {
			c, t := g.y[j], g.z[i]
			switch {
			case t < l[j]:
				if a := (l[j] - c) / (t - c); a < alpha || first < 0 {
					alpha, first = a, i
				}
			case t > u[j]:
				if a := (u[j] - c) / (t - c); a < alpha || first < 0 {
					alpha, first = a, i
				}
			}
		}
		for i, j := range g.column {
			if first < 0 {
				g.y[j] = g.z[i]
			} else {
				g.y[j] += alpha * (g.z[i] - g.y[j])
			}
		}
		if first < 0 {
			break
		}
		j := g.column[first]
		g.bound = true
		if g.z[first] < l[j] {
			g.y[j], g.hit[j] = l[j], -1
		} else {
			g.y[j], g.hit[j] = u[j], 1
		}
		g.column = append(g.column[:first], g.column[first+1:]...)
	}
	return g.predict(), qr.Norm(g.y)
}

// reduce writes the triangle of the free columns to sub and the right-hand side,
// with what the fixed parameters contribute, to rhs. It returns the number of
// free columns.
func (g *region) reduce() int {
	n, k := g.n, len(g.column)
	copy(g.rhs, g.q)
	for j := range n {
		if g.hit[j] != 0 {
			floats.AddScaled(g.rhs, g.y[j], g.r[j*n:(j+1)*n])
		}
	}
	for i, j := range g.column {
		copy(g.sub[i*n:(i+1)*n], g.r[j*n:(j+1)*n])
	}
	if k < n {
		qr.Factor(g.sub, n, k, n, g.tau)
		qr.MulQT(g.sub, n, k, n, g.tau, g.rhs)
	}
	return k
}

// damped writes y(λ) for the triangle sub of k columns to z and λ to g.lambda.
func (g *region) damped(k int, radius float64) {
	n := g.n
	z, v := g.z[:k], g.v[:k]
	var lower, excess, length float64
	regular := g.newton(k)
	if regular {
		length = qr.Norm(z)
		excess = length - radius
		if excess <= 0.1*radius {
			g.lambda = 0
			return
		}
		floats.ScaleTo(v, 1/length, z)
		qr.SolveRT(g.sub, k, n, v)
		if s := floats.Dot(v, v); s > 0 {
			lower = excess / (radius * s)
		}
	}
	for j := range k {
		v[j] = floats.Dot(g.sub[j*n:j*n+j+1], g.rhs[:j+1])
	}
	slope := qr.Norm(v)
	if slope == 0 {
		clear(z)
		g.lambda = 0
		return
	}
	upper := slope / radius
	lambda := math.Min(math.Max(g.lambda, lower), upper)
	if lambda == 0 {
		lambda = 1e-3 * upper
		if regular {
			lambda = math.Min(slope/length, upper)
		}
	}
	for range 20 {
		if !(lambda > 0) {
			lambda = math.Max(math.SmallestNonzeroFloat64/epsilon, 1e-3*upper)
		}
		g.solve(k, lambda, g.rhs, z)
		before := excess
		length = qr.Norm(z)
		excess = length - radius
		if math.Abs(excess) <= 0.1*radius || lower == 0 && excess <= before && before < 0 {
			break
		}
		floats.ScaleTo(v, 1/length, z)
		if !qr.SolveRT(g.aug, k, n, v) {
			break
		}
		change := excess / (radius * floats.Dot(v, v))
		if excess > 0 {
			lower = math.Max(lower, lambda)
		} else {
			upper = math.Min(upper, lambda)
		}
		lambda = math.Max(lower, lambda+change)
	}
	g.lambda = lambda
}

// newton writes the undamped solution to z; false when sub is singular.
func (g *region) newton(k int) bool {
	for j := range k {
		if !(math.Abs(g.sub[j*g.n+j]) > singular) {
			return false
		}
		g.z[j] = -g.rhs[j]
	}
	return qr.SolveR(g.sub, k, g.n, g.z)
}

// solve writes the least-squares solution of [sub; √λ·I]·z = [−rhs; 0] to z and
// leaves the triangle in aug.
func (g *region) solve(k int, lambda float64, rhs, z []float64) {
	n := g.n
	for j := range k {
		copy(g.aug[j*n:j*n+j+1], g.sub[j*n:j*n+j+1])
		z[j] = -rhs[j]
		g.delta[j] = math.Sqrt(lambda)
	}
	clear(g.zero)
	qr.AppendDiagonal(g.aug, k, n, g.delta, z, g.zero, g.work)
	qr.SolveR(g.aug, k, n, z)
}

// correct solves the same damped system for another right-hand side, q-like of
// length n, and writes the answer to target. Only after a step without bounds.
func (g *region) correct(q []float64) bool {
	k := len(g.column)
	if k < g.n {
		qr.MulQT(g.sub, g.n, k, g.n, g.tau, q)
	}
	if g.lambda > 0 {
		g.solve(k, g.lambda, q, g.z)
	} else {
		copy(g.rhs, q)
		if !g.newton(k) {
			return false
		}
	}
	clear(g.target)
	for i, j := range g.column {
		g.target[j] = g.z[i]
	}
	return true
}

// predict returns −qᵀRy − ½‖Ry‖² and leaves R·y in target, its slope in g.slope.
func (g *region) predict() float64 {
	n := g.n
	w := g.target
	clear(w)
	for j := range n {
		if g.y[j] != 0 {
			floats.AddScaled(w[:j+1], g.y[j], g.r[j*n:j*n+j+1])
		}
	}
	g.slope = -floats.Dot(w, g.q)
	return g.slope - 0.5*floats.Dot(w, w)
}

// grow returns a slice of length n with undefined elements, the old one where
// it is large enough.
func grow[T any](x []T, n int) []T {
	if cap(x) < n {
		return make([]T, n)
	}
	return x[:n]
}
