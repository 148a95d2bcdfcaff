package changes

import (
	"errors"
	"math"
	"math/cmplx"

	"gonum.org/v1/gonum/mat"

	"phaselag/models"
)

// Two compound files
//
// Both are models that obey causality, so that a factor on the loss factor alone, or any
// other pattern that no parameters of theirs can make, would seem known without limit if
// their covariances alone weighed the conditions. Therefore the changes are those that a
// laboratory would find that measured both: least squares over the grid with an
// instrument's weights, σ of magnitude and phase alike,
//
//	θ̂ = argmin Σ |ln G_other − ln G_batch(θ)|²,
//
// and their covariance is what that makes of the files' own, H(C_other + C_approved)Hᵀ
// with H = (JᵀJ)⁻¹Jᵀ, and of what the changes leave undescribed, s²(JᵀJ)⁻¹.

// pair is one condition of the grid.
type pair struct {
	q     models.Condition
	ln    complex128   // ln G* of the other compound
	other []complex128 // its Lᵀ∂ln G*/∂p
}

// project finds the changes between two compounds.
func (c *Comparison) project(list []pair, freedom float64) error {
	k, n := len(c.active), len(list)
	if 2*n < k+4 {
		return ErrNothing
	}
	c.theta = make([]float64, k)
	j, r := mat.NewDense(2*n, k, nil), mat.NewVecDense(2*n, nil)
	fill := func() {
		for i, o := range list {
			d := o.ln - cmplx.Log(c.batch(o.q, c.theta))
			r.SetVec(i, real(d))
			r.SetVec(n+i, imag(d))
			for a := range k {
				s := c.slope(o.q, a)
				j.Set(i, a, real(s))
				j.Set(n+i, a, imag(s))
			}
		}
	}
	var qr mat.QR
	for range 40 {
		fill()
		qr.Factorize(j)
		var step mat.VecDense
		if err := qr.SolveVecTo(&step, false, r); err != nil {
			var cond mat.Condition
			if !errors.As(err, &cond) || math.IsInf(float64(cond), 1) {
				return errors.New("the two compounds have too little in common to tell the changes apart")
			}
		}
		largest := 0.0
		for i := range c.theta {
			v := math.Max(-1, math.Min(1, step.AtVec(i)))
			c.theta[i] += v
			largest = max(largest, math.Abs(v))
		}
		if largest < 1e-10 {
			break
		}
	}
	fill()
	qr.Factorize(j)
	var h mat.Dense // (JᵀJ)⁻¹Jᵀ: the solution for every unit vector
	unit := mat.NewDense(2*n, 2*n, nil)
	for i := range 2 * n {
		unit.Set(i, i, 1)
	}
	if err := qr.SolveTo(&h, false, unit); err != nil {
		var cond mat.Condition
		if !errors.As(err, &cond) || math.IsInf(float64(cond), 1) {
			return errors.New("the two compounds have too little in common to tell the changes apart")
		}
	}
	var sum float64
	for i := range 2 * n {
		sum += r.AtVec(i) * r.AtVec(i)
	}
	s2 := sum / float64(2*n-k)
	// H M, M the roots of both covariances side by side.
	through := func(rows func(i int) []complex128, width int) *mat.Dense {
		m := mat.NewDense(2*n, max(width, 1), nil)
		for i := range list {
			for a, v := range rows(i) {
				m.Set(i, a, real(v))
				m.Set(n+i, a, imag(v))
			}
		}
		var out mat.Dense
		out.Mul(&h, m)
		return &out
	}
	other := through(func(i int) []complex128 { return list[i].other }, len(list[0].other))
	mine := through(func(i int) []complex128 {
		return whitened(c.approved, c.lower, c.moved(own(c.approved, list[i].q)))
	}, len(c.lower))
	var cov, part mat.Dense
	cov.Mul(&h, h.T())
	cov.Scale(s2, &cov)
	part.Mul(other, other.T())
	cov.Add(&cov, &part)
	part.Mul(mine, mine.T())
	cov.Add(&cov, &part)
	c.Points, c.Freedom = n, freedom
	c.SigmaM, c.SigmaPhase = 0, 0
	var sm, sp float64
	for i := range n {
		sm += r.AtVec(i) * r.AtVec(i)
		sp += r.AtVec(n+i) * r.AtVec(n+i)
	}
	c.SigmaM, c.SigmaPhase = math.Sqrt(sm/float64(n)), math.Sqrt(sp/float64(n))
	// Together with z, of which θ̂ has −H L_approved.
	nz := len(c.lower)
	c.z = make([]float64, nz)
	size := k + nz
	c.cov = make([]float64, size*size)
	u := make([]float64, k)
	for a := range k {
		for b := range k {
			c.cov[a*size+b] = cov.At(a, b)
		}
		for b := range nz {
			c.cov[a*size+k+b] = -mine.At(a, b)
			c.cov[(k+b)*size+a] = -mine.At(a, b)
		}
		u[a] = math.Sqrt(cov.At(a, a))
	}
	for b := range nz {
		c.cov[(k+b)*size+k+b] = 1
	}
	c.judge(u)
	return nil
}
