package waveform

import (
	"math"

	"gonum.org/v1/gonum/floats"
)

// Problem: least squares with far more rows than fit into memory.
//
// The rows [z | y] are collected in a panel; a full panel is folded into the
// triangular factor R of all rows so far,
//
//	Qᵀ [ R     ]   [ R' ]
//	   [ panel ] = [ 0  ],
//
// by Householder reflections that touch only the diagonal element of R and the
// panel's column. No product ZᵀZ is formed, so that the condition number is not
// squared and a residual of 1e-8 of the signal keeps its digits. Cost: 2n² flops a
// row. See Golub and Van Loan, Matrix Computations, on updating QR by rows.

const panelRows = 256

// triangle is the R factor of all rows added. It has n columns.
type triangle struct {
	n     int
	r     []float64 // n×n by columns: element (i, j) is r[j*n+i]
	panel []float64 // panelRows×n by columns
	rows  int       // in the panel
	count int       // rows added in all
}

func newTriangle(n int) *triangle {
	return &triangle{n: n, r: make([]float64, n*n), panel: make([]float64, panelRows*n)}
}

func (a *triangle) reset() {
	clear(a.r)
	a.rows, a.count = 0, 0
}

func (a *triangle) at(i, j int) float64 { return a.r[j*a.n+i] }

// add takes one row of length n.
func (a *triangle) add(row []float64) {
	for j, v := range row {
		a.panel[j*panelRows+a.rows] = v
	}
	a.rows++
	a.count++
	if a.rows == panelRows {
		a.fold()
	}
}

// fold brings the panel into R.
func (a *triangle) fold() {
	m := a.rows
	if m == 0 {
		return
	}
	for j := range a.n {
		v := a.panel[j*panelRows : j*panelRows+m]
		norm := length(v)
		if norm == 0 {
			continue
		}
		alpha := a.r[j*a.n+j]
		beta := -math.Copysign(math.Hypot(alpha, norm), alpha)
		tau := (beta - alpha) / beta
		floats.Scale(1/(alpha-beta), v)
		for k := j + 1; k < a.n; k++ {
			w := a.panel[k*panelRows : k*panelRows+m]
			s := tau * (a.r[k*a.n+j] + floats.Dot(v, w))
			a.r[k*a.n+j] -= s
			floats.AddScaled(w, -s, v)
		}
		a.r[j*a.n+j] = beta
	}
	a.rows = 0
}

// length is the Euclidean norm, without the care for extreme numbers where there are
// none.
func length(v []float64) float64 {
	if d := floats.Dot(v, v); d > 1e-200 && d < 1e200 {
		return math.Sqrt(d)
	}
	return floats.Norm(v, 2)
}
