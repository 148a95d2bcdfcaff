package superpose

import (
	"math"

	"phaselag/fitting/qr"
)

// Covariance is the linearised covariance of a solution: of the moduli that
// are not zero and of all nonlinear parameters. It comes from the triangle of
// the Jacobian, never from the normal matrix.
type Covariance struct {
	z    *arrow
	rinv []float64 // n×n, column-major: row i has the root of parameter i
	n    int
}

// Covariance linearises at the solution.
func (s *Solution) Covariance() *Covariance {
	z := s.linearise(s.e.passiveColumns())
	n := z.n
	c := &Covariance{z: z, n: n, rinv: make([]float64, n*n)}
	order := make([]int, 0, n)
	seen := make([]bool, n)
	for _, row := range z.front.Rows {
		order = append(order, row.Columns[0])
		seen[row.Columns[0]] = true
	}
	for k := range n {
		if !seen[k] {
			order = append(order, k)
		}
	}
	a, rows := z.dense(order)
	r := make([]float64, n*n)
	for j := range n {
		col := r[j*n : (j+1)*n]
		copy(col, a[j*rows:j*rows+min(rows, j+1)])
		// A column that the earlier ones explain to rounding carries nothing, and
		// its parameter has a very large uncertainty.
		scale := qr.Norm(col)
		if scale == 0 {
			scale = 1
		}
		if math.Abs(col[j]) < noInformation*scale {
			col[j] = noInformation * scale
		}
	}
	inverse := make([]float64, n*n)
	qr.InvertR(inverse, n, r, n, n)
	for k, i := range order {
		for j := range n {
			c.rinv[i+j*n] = inverse[k+j*n]
		}
	}
	return c
}

// Root is a row of a square root of the covariance: Cov(a, b) = Σ a_k b_k.
type Root []float64

// Deviation is the standard uncertainty of a quantity with this root.
func (r Root) Deviation() float64 {
	var s float64
	for _, v := range r {
		s += v * v
	}
	return math.Sqrt(s)
}

// add adds w times row i of R⁻¹, whose products are the covariance, to a root.
func (c *Covariance) add(r Root, i int, w float64) {
	if w == 0 {
		return
	}
	for j := range r {
		r[j] += w * c.rinv[i+j*c.n]
	}
}

func (c *Covariance) theta(i int) int { return len(c.z.columns) + i }

// Modulus is the root of column k of the moduli (0 equilibrium, then the
// lattice, then filler storage and loss), Pa; nil where the modulus is zero.
func (c *Covariance) Modulus(k int) Root {
	for j, col := range c.z.columns {
		if col == k {
			r := make(Root, c.n)
			c.add(r, j, c.z.e.scale)
			return r
		}
	}
	return nil
}

// Theta is the root of nonlinear parameter i.
func (c *Covariance) Theta(i int) Root {
	r := make(Root, c.n)
	c.add(r, c.theta(i), 1)
	return r
}

// LogShift is the root of log10 a_T at T by the fitted law.
func (c *Covariance) LogShift(T float64) Root {
	r := make(Root, c.n)
	l := &c.z.e.l
	if l.nLaw == 0 {
		return r
	}
	g := make([]float64, l.nLaw)
	c.z.e.law.Gradient(T, g)
	for k, v := range g {
		if c.z.e.f.Law == Arrhenius {
			v *= 1e3
		}
		c.add(r, c.theta(l.law+k), v)
	}
	return r
}

// Vertical is the root of ln b_T at T where the factors were fitted; a zero
// root elsewhere.
func (c *Covariance) Vertical(T float64) Root {
	r := make(Root, c.n)
	l := &c.z.e.l
	if l.nVer == 0 {
		return r
	}
	g := make([]float64, l.nVer)
	c.z.e.p.anchored(c.z.e.theta[l.vertical:l.vertical+l.nVer]).Gradient(T, g)
	for k, v := range g {
		c.add(r, c.theta(l.vertical+k), v)
	}
	return r
}

// Indices are places of nonlinear parameters in θ; -1 where the form has none
// such.
type Indices struct {
	Law        int // first of the law's constants
	Activation int
	Critical   int // ln γ_c
	Exponent   int
	Extra      int // ln γ_2
	Alpha      int // α and β of a term that scales
	Beta       int
}

// Indices tells where the parameters stand in θ.
func (s *Solution) Indices() Indices {
	l := &s.e.l
	return Indices{Law: l.law, Activation: l.activation, Critical: l.critical, Exponent: l.exponent, Extra: l.extra, Alpha: l.alpha, Beta: l.beta}
}

// OffsetRoot is the root of the temperature offset of run j, K; nil where it
// was held.
func (c *Covariance) OffsetRoot(j int) Root {
	if o := c.z.e.l.offset[j]; o >= 0 {
		return c.Theta(o)
	}
	return nil
}

// PhaseRoot is the root of the common phase error, rad; nil where it was held.
func (c *Covariance) PhaseRoot() Root {
	if c.z.e.l.phase < 0 {
		return nil
	}
	return c.Theta(c.z.e.l.phase)
}

// FactorRoot is the root of ln s_p; nil where the factors were held.
func (c *Covariance) FactorRoot(p int) Root {
	l := &c.z.e.l
	if l.nFactor == 0 {
		return nil
	}
	if p < l.nFactor {
		return c.Theta(l.factor + p)
	}
	r := make(Root, c.n)
	for k := range l.nFactor {
		c.add(r, c.theta(l.factor+k), -1)
	}
	return r
}

// Cholesky is the lower triangle L of the covariance B·Bᵀ of quantities with
// roots B, row by row, LLᵀ = BBᵀ: the triangle of the factorization of Bᵀ with
// the signs that make the diagonal positive. It exists for any rank.
func Cholesky(b []Root) [][]float64 {
	n := len(b)
	if n == 0 {
		return nil
	}
	m := max(len(b[0]), n)
	a := make([]float64, m*n)
	for j, r := range b {
		copy(a[j*m:], r)
	}
	tau := make([]float64, n)
	qr.Factor(a, m, n, m, tau)
	out := make([][]float64, n)
	for i := range n {
		out[i] = make([]float64, i+1)
		for j := 0; j <= i; j++ {
			v := a[i*m+j]
			if a[j*m+j] < 0 {
				v = -v
			}
			out[i][j] = v
		}
	}
	return out
}
