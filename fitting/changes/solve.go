package changes

import (
	"errors"
	"math"
	"math/cmplx"

	"gonum.org/v1/gonum/mat"

	"phaselag/models"
)

// observation is one measured modulus.
type observation struct {
	q        models.Condition
	ln       complex128 // ln G*
	run      int        // of the errors of temperature
	specimen int        // of the factors
}

// priors are standard deviations; 0: the error does not exist.
type priors struct {
	scatter, common, geometry, phase float64
	runs, specimens                  int
}

// layout of the unknowns: θ, z of the approved compound, then the errors.
type layout struct {
	theta, z, runs, common, specimens, phase, n int
}

func (c *Comparison) layout(p priors) layout {
	l := layout{theta: 0, z: len(c.active)}
	at := l.z + len(c.lower)
	take := func(n int, exists bool) int {
		if !exists {
			return -1
		}
		at += n
		return at - n
	}
	l.runs = take(p.runs, p.scatter > 0)
	l.common = take(1, p.common > 0)
	l.specimens = take(p.specimens, p.geometry > 0)
	l.phase = take(1, p.phase > 0)
	l.n = at
	return l
}

// ErrNothing says that there is nothing to compare.
var ErrNothing = errors.New("too few points inside the approved compound's domain")

// solve finds the changes; noise is where σ_m and σ_δ start, least their least values.
// It returns the covariance of all unknowns.
func (c *Comparison) solve(list []observation, p priors, noise, least [2]float64) error {
	l := c.layout(p)
	n := len(list)
	if 2*n < len(c.active)+4 {
		return ErrNothing
	}
	x := make([]float64, l.n)
	c.state = x
	c.theta = x[:len(c.active)]
	sigma := noise
	rows := 2*n + l.n - len(c.active)
	var cov *mat.Dense
	for pass := range 30 {
		before := append([]float64{}, x...)
		a, b := mat.NewDense(rows, l.n, nil), mat.NewVecDense(rows, nil)
		for i, o := range list {
			d := c.row(o, l, a, i, n, sigma)
			b.SetVec(i, real(d)/sigma[0])
			b.SetVec(n+i, imag(d)/sigma[1])
		}
		// The right side is that of the unknowns themselves: residual + J x.
		for i := range 2 * n {
			b.SetVec(i, b.AtVec(i)+mat.Dot(a.RowView(i), mat.NewVecDense(l.n, x)))
		}
		at := 2 * n
		prior := func(first, count int, u float64) {
			for k := range count {
				if first >= 0 {
					a.Set(at, first+k, 1/u)
					at++
				}
			}
		}
		prior(l.z, len(c.lower), 1)
		prior(l.runs, p.runs, p.scatter)
		prior(l.common, 1, p.common)
		prior(l.specimens, p.specimens, p.geometry)
		prior(l.phase, 1, p.phase)
		var qr mat.QR
		qr.Factorize(a)
		var sol mat.VecDense
		if err := qr.SolveVecTo(&sol, false, b); err != nil {
			var cond mat.Condition
			if !errors.As(err, &cond) || math.IsInf(float64(cond), 1) {
				return errors.New("the points do not tell the changes apart")
			}
		}
		copy(x, sol.RawVector().Data)
		c.theta, c.z = x[:len(c.active)], x[l.z:l.z+len(c.lower)]
		for i, k := range c.active {
			// Far steps spoil the linearisation.
			if k == Temperature {
				x[i] = before[i] + math.Max(-10, math.Min(10, x[i]-before[i]))
			} else {
				x[i] = before[i] + math.Max(-1, math.Min(1, x[i]-before[i]))
			}
		}
		var r mat.Dense
		qr.RTo(&r)
		inverse := mat.NewTriDense(l.n, mat.Upper, nil)
		tri := mat.NewTriDense(l.n, mat.Upper, nil)
		for i := range l.n {
			for k := i; k < l.n; k++ {
				tri.SetTri(i, k, r.At(i, k))
			}
		}
		if err := inverse.InverseTri(tri); err != nil {
			return errors.New("the points do not tell the changes apart")
		}
		cov = mat.NewDense(l.n, l.n, nil)
		cov.Mul(inverse, inverse.T())
		// σ² = Σ r²/(n − tr of the hat matrix), for each kind of row.
		var fit mat.Dense
		fit.Mul(a, inverse)
		moved := 0.0
		free := 0.0
		for kind := range 2 {
			sum, trace := 0.0, 0.0
			for i := range n {
				row := kind*n + i
				e := b.AtVec(row) - mat.Dot(a.RowView(row), mat.NewVecDense(l.n, x))
				sum += e * e
				h := fit.RawRowView(row)
				for _, v := range h {
					trace += v * v
				}
			}
			f := max(float64(n)-trace, 1)
			free += f
			s := math.Max(sigma[kind]*math.Sqrt(sum/f), least[kind])
			moved = max(moved, math.Abs(s/sigma[kind]-1))
			sigma[kind] = s
		}
		c.Freedom = free
		for i := range x[:len(c.active)] {
			moved = max(moved, math.Abs(x[i]-before[i]))
		}
		if pass > 2 && moved < 1e-6 {
			break
		}
	}
	c.Points, c.SigmaM, c.SigmaPhase = n, sigma[0], sigma[1]
	keep := len(c.active) + len(c.lower)
	c.cov = make([]float64, keep*keep)
	u := make([]float64, len(c.active))
	for i := range keep {
		for k := range keep {
			c.cov[i*keep+k] = cov.At(i, k)
		}
	}
	for i := range u {
		u[i] = math.Sqrt(cov.At(i, i))
	}
	c.judge(u)
	return nil
}

// row fills the two rows of an observation and returns ln(measured/model) at the present
// unknowns.
func (c *Comparison) row(o observation, l layout, a *mat.Dense, i, n int, sigma [2]float64) complex128 {
	put := func(k int, v complex128) {
		a.Set(i, k, real(v)/sigma[0])
		a.Set(n+i, k, imag(v)/sigma[1])
	}
	for k := range c.active {
		put(k, c.slope(o.q, k))
	}
	w := whitened(c.approved, c.lower, c.moved(own(c.approved, o.q)))
	for k, v := range w {
		put(l.z+k, v)
	}
	if l.runs >= 0 || l.common >= 0 {
		t := c.warmer(o.q)
		if l.runs >= 0 {
			put(l.runs+o.run, t)
		}
		if l.common >= 0 {
			put(l.common, t)
		}
	}
	if l.specimens >= 0 {
		put(l.specimens+o.specimen, 1)
	}
	if l.phase >= 0 {
		put(l.phase, 1i)
	}
	return o.ln - cmplx.Log(c.batch(o.q, c.theta)) - c.errorsOf(a, i, n, l, sigma)
}

// errorsOf is what the unknown errors make of ln G* at present: it is zero in the first
// pass, and afterwards contained in x.
func (c *Comparison) errorsOf(a *mat.Dense, i, n int, l layout, sigma [2]float64) complex128 {
	if c.state == nil {
		return 0
	}
	var re, im float64
	for k := l.z; k < l.n; k++ {
		re += a.At(i, k) * c.state[k]
		im += a.At(n+i, k) * c.state[k]
	}
	return complex(re*sigma[0], im*sigma[1])
}
