package superpose

import (
	"math"

	"gonum.org/v1/gonum/mat"

	"phaselag/fitting/qr"
	"phaselag/models/linear"
)

// A smoothness prior of the spectrum
//
// Non-negativity alone leaves a spectrum of a few lines, whose loss factor
// scatters up to twice (at the warm edge of the window five times) as much as
// that of a smooth spectrum through the same measurements. Relaxation spectra of
// rubber are smooth. With the level w_k, a guess of G_k that need only be right
// in its slope, u_k = G_k/w_k has independent second differences
//
//	u_{k-1} − 2u_k + u_{k+1} ~ N(0, s²),   s² = Spread²
//
// (Whittaker, Proc. Edinburgh Math. Soc. 41 (1923) 63; in relaxation
// spectra Honerkamp and Weese, Macromolecules 22 (1989) 4372; both from memory).
// The level comes from the loss modulus, since a broad spectrum has
// H(τ) ≈ (2/π) G″(1/τ) (Booij and Thoone), and is kept during a fit. The spread is
// chosen by restricted likelihood, so that a spectrum that is not smooth, as of a
// liquid with one relaxation time, is left as it is.
type Prior struct {
	Level  []float64 // w_k, Pa, as many as the lattice; nil: no prior
	Spread float64   // s
}

func (p Prior) rows(lattice int) int {
	if p.Level == nil || lattice < 4 {
		return 0
	}
	return lattice - 3
}

// fillPrior writes the prior's rows below those of the measurements.
func (e *engine) fillPrior() {
	p := e.f.Prior
	n := p.rows(len(e.f.Lattice))
	if n == 0 {
		return
	}
	first := e.m - n
	for c := range e.nc {
		clear(e.a[c*e.m+first : (c+1)*e.m])
	}
	clear(e.y[first:])
	for r := range n {
		for d, v := range [3]float64{1, -2, 1} {
			e.a[(2+r+d)*e.m+first+r] = v * e.scale / (p.Level[1+r+d] * p.Spread)
		}
	}
}

// level guesses the spectrum from the loss modulus of the fitted polymer term
// within the window of reduced frequencies, Hz, and goes on with the slope at
// its ends.
func (s *Solution) level(lo, hi float64) []float64 {
	spectrum := linear.Spectrum{Times: s.Form.Lattice, Moduli: s.Branches}
	perStep := math.Log(s.Form.Lattice[1] / s.Form.Lattice[0])
	at := func(lnTau float64) float64 {
		// Mean over a third of a decade: lines of a sparse spectrum ripple.
		var sum float64
		for _, d := range [5]float64{-0.8, -0.4, 0, 0.4, 0.8} {
			sum += math.Log(imag(spectrum.Modulus(math.Exp(-lnTau - d))))
		}
		return sum / 5
	}
	fast, slow := math.Log(1/(2*math.Pi*hi))+0.8, math.Log(1/(2*math.Pi*lo))-0.8
	if slow < fast {
		fast, slow = (fast+slow)/2, (fast+slow)/2
	}
	slope := func(x float64) float64 {
		return max(-1, min(1, (at(x+0.5)-at(x-0.5))))
	}
	out := make([]float64, len(s.Form.Lattice))
	for k, tau := range s.Form.Lattice {
		x := math.Log(tau)
		inside := max(fast, min(slow, x))
		v := at(inside)
		if inside != x {
			v += slope(inside) * (x - inside)
		}
		out[k] = 2 / math.Pi * perStep * math.Exp(v)
	}
	return out
}

// restrictedLikelihood is −2 ln of the restricted likelihood of the prior's
// spread at θ: with R the triangle of the passive columns P and D_P the prior's
// rows on them,
//
//	S_min + ln det RᵀR − ln pdet D_PᵀD_P
//
// where pdet is the product of the eigenvalues that are not zero. (Branches that
// are zero take no part in the prior, either.)
func (e *engine) restrictedLikelihood() float64 {
	np := len(e.idx)
	a, tau := make([]float64, e.m*np), make([]float64, np)
	for j, k := range e.idx {
		copy(a[j*e.m:(j+1)*e.m], e.a[k*e.m:(k+1)*e.m])
	}
	n := e.f.Prior.rows(len(e.f.Lattice))
	d := mat.NewDense(n, np, nil)
	for j := range np {
		for i, v := range a[(j+1)*e.m-n : (j+1)*e.m] {
			d.Set(i, j, v)
		}
	}
	qr.Factor(a, e.m, np, e.m, tau)
	var out float64
	for k := range np {
		out += 2 * math.Log(math.Abs(a[k*e.m+k]))
	}
	var svd mat.SVD
	if !svd.Factorize(d, mat.SVDNone) {
		return math.Inf(1)
	}
	values := svd.Values(nil)
	for _, v := range values {
		if v > 1e-12*values[0] {
			out -= 2 * math.Log(v)
		}
	}
	r := make([]float64, e.m)
	copy(r, e.y)
	for k, ck := range e.c {
		if ck != 0 {
			axpy(r, -ck, e.a[k*e.m:(k+1)*e.m])
		}
	}
	return out + qr.Norm(r)*qr.Norm(r)
}

// smooth is the largest spread of a smooth spectrum. u is of the order of one;
// second differences as large as half of it mean lines, and the prior would only
// bend them. (Simulated rubbers choose 0.01 to 0.15, a liquid with one longest
// relaxation time 0.6 to 1.2, and its free shift factors suffer.)
const smooth = 0.4

// spreads are the candidates of the prior's spread.
var spreads = []float64{0.003, 0.01, 0.02, 0.04, 0.08, 0.15, 0.3, 0.6, 1.2}

// Smooth gives this solution a smoothness prior for a window of reduced
// frequencies, Hz, with the spread of the greatest restricted likelihood, and
// fits again. It returns the solution itself where that says that the spectrum is
// not smooth.
func (s *Solution) Smooth(lo, hi float64) (*Solution, error) {
	if len(s.Form.Lattice) < 4 {
		return s, nil
	}
	level := s.level(lo, hi)
	var best *engine
	least := math.Inf(1)
	for _, spread := range spreads {
		f := s.Form
		f.Prior = Prior{level, spread}
		e := newEngine(s.Problem, &f)
		copy(e.denom, s.e.denom)
		e.setSigma(f.Sigma)
		for k := range e.passive {
			e.passive[k] = true
		}
		r := make([]float64, e.m+e.priors)
		if !e.residual(r, s.Theta) {
			continue
		}
		l := e.restrictedLikelihood()
		if l < least {
			best, least = e, l
		}
	}
	if best == nil || best.f.Prior.Spread > smooth {
		return s, nil
	}
	return best.run(s.Theta)
}
