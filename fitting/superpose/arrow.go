package superpose

import (
	"math"
	"sort"

	"phaselag/fitting/qr"
)

// The linearised problem
//
// With the passive moduli c_P and θ as parameters the Jacobian of all rows has
// the shape of an arrow: the rows of a run know its own temperature offset, near
// their temperature one or a few factors of an interpolated law, and the
// columns that all share. qr.Front eliminates the columns run by run, so the work
// is linear in the number of rows, and everything that needs the Jacobian as a
// whole works on its triangle.

// arrow is a triangle of the Jacobian. Parameters are counted with the passive
// moduli first, in units of the engine's scale, then θ.
type arrow struct {
	e       *engine
	columns []int // passive columns of the engine
	n       int
	front   *qr.Front
	where   []int // workspaces
	at      []int
}

// arrow factors the Jacobian on the given columns of moduli, at the latest θ,
// after sums and derivatives; with priors the prior rows of θ are among the
// rows. The right-hand side is the residual. With reuse the result lives until
// the next such call.
func (e *engine) arrow(columns []int, priors, reuse bool) *arrow {
	z := &arrow{e: e, columns: columns, n: len(columns) + e.l.n}
	z.where = make([]int, e.l.n)
	np := len(columns)
	order := e.order()
	// The last block that touches each parameter; what all share stays.
	shared := len(order) + 1
	last := make([]int, z.n)
	for c := range last {
		last[c] = shared
	}
	touched := make([][]int, len(order))
	at := make([]int, z.n)
	for b, run := range order {
		for c := range at {
			at[c] = -1
		}
		for c := range np {
			at[c] = c
		}
		list := make([]int, np, np+e.l.n)
		for c := range np {
			list[c] = c
		}
		for _, i := range e.rowsOf[run] {
			for k := e.slope.start[i]; k < e.slope.start[i+1]; k++ {
				if c := np + e.slope.column[k]; at[c] < 0 && e.slope.value[k] != 0 {
					at[c] = len(list)
					list = append(list, c)
				}
			}
		}
		if o := e.l.offset[run]; o >= 0 && at[np+o] < 0 {
			list = append(list, np+o)
		}
		for _, c := range list[np:] {
			last[c] = b
		}
		touched[b] = list
	}
	for _, c := range e.common() {
		last[np+c] = shared
	}
	z.front = new(qr.Front)
	if reuse {
		z.front = &e.front
	}
	z.front.Reset(z.n, last)
	residual, prior := e.misfit(), e.priorRows(e.theta)
	var a []float64
	for b, run := range order {
		a = z.block(a, touched[b], run, residual, prior, priors)
	}
	z.tail(residual, prior, priors)
	z.front.Finish()
	return z
}

// block adds the rows of a run.
func (z *arrow) block(a []float64, list []int, run int, residual []float64, all []prior, priors bool) []float64 {
	e, np := z.e, len(z.columns)
	rows := e.rowsOf[run]
	m := 0
	for _, i := range rows {
		m += 2
		if e.p.Rows[i].Relaxation {
			m--
		}
	}
	if priors && e.l.offset[run] >= 0 {
		m++
	}
	a = resized(a, m*(len(list)+1))
	clear(a)
	where := z.where // of a nonlinear parameter among the columns of the block
	for k, c := range list[np:] {
		where[c-np] = (np + k) * m
	}
	rhs := a[len(list)*m:]
	r := 0
	z.at = z.at[:0]
	for _, i := range rows {
		z.at = append(z.at, e.place[i])
		for k := e.slope.start[i]; k < e.slope.start[i+1]; k++ {
			if v := real(e.slope.value[k]); v != 0 {
				a[where[e.slope.column[k]]+r] -= v
			}
		}
		r++
		if e.p.Rows[i].Relaxation {
			continue
		}
		z.at = append(z.at, len(e.osc)+e.place[i])
		for k := e.slope.start[i]; k < e.slope.start[i+1]; k++ {
			if v := imag(e.slope.value[k]); v != 0 {
				a[where[e.slope.column[k]]+r] -= v
			}
		}
		r++
	}
	for r, at := range z.at {
		rhs[r] = residual[at]
	}
	for k, c := range z.columns {
		from, to := e.a[c*e.m:(c+1)*e.m], a[k*m:(k+1)*m]
		for r, at := range z.at {
			to[r] = -from[at]
		}
	}
	if o := e.l.offset[run]; priors && o >= 0 {
		p := all[e.priorOf[run]]
		a[where[o]+r], rhs[r] = p.value[0], p.residual
	}
	z.front.Add(append(list[:len(list):len(list)], z.n), a, m)
	return a
}

// tail adds the rows of the spectrum's prior and the prior rows of what all
// share.
func (z *arrow) tail(residual []float64, all []prior, priors bool) {
	e, np := z.e, len(z.columns)
	smooth := e.f.Prior.rows(len(e.f.Lattice))
	m := smooth
	if priors {
		m += len(all)
	}
	if m == 0 {
		return
	}
	list := make([]int, 0, z.n+1)
	for c := range np {
		list = append(list, c)
	}
	shared := e.common()
	for _, c := range shared {
		list = append(list, np+c)
	}
	list = append(list, z.n)
	a := make([]float64, m*len(list))
	rhs := a[(len(list)-1)*m:]
	for k, c := range z.columns {
		for i := range smooth {
			a[k*m+i] = -e.a[c*e.m+e.m-smooth+i]
		}
	}
	copy(rhs, residual[e.m-smooth:])
	r := smooth
	for _, p := range all {
		if !priors || p.run >= 0 {
			continue
		}
		for k, c := range p.column {
			a[(np+sort.SearchInts(shared, c))*m+r] = p.value[k]
		}
		rhs[r] = p.residual
		r++
	}
	z.front.Add(list, a, m)
}

// order lists the runs that have rows, by temperature.
func (e *engine) order() []int {
	var out []int
	for j := range e.p.Runs {
		if len(e.rowsOf[j]) > 0 {
			out = append(out, j)
		}
	}
	sort.SliceStable(out, func(a, b int) bool {
		return e.p.Rows[e.rowsOf[out[a]][0]].T < e.p.Rows[e.rowsOf[out[b]][0]].T
	})
	return out
}

// common lists the nonlinear parameters with prior rows that are no run's own,
// rising.
func (e *engine) common() []int {
	var out []int
	for i := range e.l.nFactor {
		out = append(out, e.l.factor+i)
	}
	if e.l.phase >= 0 {
		out = append(out, e.l.phase)
	}
	return out
}

// misfit is the residual of the linear problem, y − Ac.
func (e *engine) misfit() []float64 {
	r := append([]float64(nil), e.y...)
	for k, ck := range e.c {
		if ck != 0 {
			axpy(r, -ck, e.a[k*e.m:(k+1)*e.m])
		}
	}
	return r
}

// dense writes the triangle with its columns in the given order of parameters,
// and the right-hand side last, as a matrix of rows×(len(order)+1). The rows are
// those of the triangle, and one with what no parameter explains.
func (z *arrow) dense(order []int) (a []float64, rows int) {
	rows = len(z.front.Rows) + 1
	at := make([]int, z.n+1)
	for k := range at {
		at[k] = -1
	}
	for k, c := range order {
		at[c] = k
	}
	at[z.n] = len(order)
	a = make([]float64, rows*(len(order)+1))
	for i, row := range z.front.Rows {
		for k, c := range row.Columns {
			if at[c] >= 0 {
				a[at[c]*rows+i] = row.Elements[k]
			}
		}
	}
	a[len(order)*rows+rows-1] = z.front.Rest
	return a, rows
}

// triangle writes what the trust region needs: the triangle of Kaufman's Jacobian
// of residual and Qᵀ times the residual. With the passive moduli eliminated
// first, the rows below theirs are the projection off their columns.
func (e *engine) triangle(r, q, theta []float64) bool {
	if !e.known || !same(theta, e.theta) {
		if !e.residual(make([]float64, e.m+e.priors), theta) {
			return false
		}
	}
	e.sums()
	e.derivatives()
	z := e.arrow(e.idx, true, true)
	np, n := len(e.idx), e.l.n
	order := make([]int, z.n)
	for c := range order {
		order[c] = c
	}
	a, rows := z.dense(order)
	tau := make([]float64, min(rows, z.n+1))
	qr.Factor(a, rows, z.n+1, rows, tau)
	for j := range n {
		c := a[(np+j)*rows:]
		clear(r[j*n : (j+1)*n])
		if np < rows {
			copy(r[j*n:(j+1)*n], c[np:min(np+j+1, rows)])
		}
	}
	clear(q)
	if np < rows {
		copy(q, a[z.n*rows+np:z.n*rows+min(np+n, rows)])
	}
	for _, v := range r {
		if math.IsNaN(v) {
			return false
		}
	}
	return true
}
