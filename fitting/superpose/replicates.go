package superpose

import (
	"math"
	"math/cmplx"
	"math/rand/v2"

	"phaselag/models/amplitude"
	"phaselag/models/linear"
	"phaselag/models/thermal"
)

// Parametric bootstrap
//
// Measurements are drawn from the fitted compound with everything that its
// uncertainty claims to contain drawn anew: noise, the temperature offset of each
// run, the factor of each specimen, the common error of the phase, and what no
// measurement of the campaign can show, the common error of temperature and the
// common part of the specimens' factors. Each drawn campaign is fitted as the
// measured one was. Replicate r is drawn from (seed, r) alone and stored at r, so
// that the answer does not depend on the number of workers. (Efron and Tibshirani,
// An Introduction to the Bootstrap, Chapman and Hall 1993, ch. 6; from memory.)

// Common holds the standard deviations of the errors that all measurements share.
type Common struct {
	Temperature float64 // K
	Factor      float64 // relative, of the mean of the specimens' factors
}

// Replicates draws n campaigns and returns what measure takes from the fit of each;
// nil where a fit failed. progress, nil or not, is called after each with the number
// of those that are done, from several goroutines at once.
func (s *Solution) Replicates(n int, common Common, seed uint64, workers int, measure func(*Solution) []float64, progress func()) [][]float64 {
	out := make([][]float64, n)
	parallel(n, workers, func() func(int) {
		return func(r int) {
			if fit := s.draw(common, seed, uint64(r)); fit != nil {
				out[r] = measure(fit)
			}
			if progress != nil {
				progress()
			}
		}
	})
	return out
}

// draw fits one drawn campaign.
func (s *Solution) draw(common Common, seed, r uint64) *Solution {
	rnd := rand.New(rand.NewPCG(seed, r))
	l := &s.e.l
	theta := append([]float64(nil), s.Theta...)
	for j, o := range l.offset {
		if o >= 0 {
			theta[o] = s.Problem.Runs[j].U * rnd.NormFloat64()
		}
	}
	if l.nFactor > 0 {
		var mean float64
		for i := range l.nFactor {
			theta[l.factor+i] = s.Problem.UGeometry * rnd.NormFloat64()
			mean += theta[l.factor+i]
		}
		mean = (mean + s.Problem.UGeometry*rnd.NormFloat64()) / float64(l.nFactor+1)
		for i := range l.nFactor {
			theta[l.factor+i] -= mean
		}
	}
	if l.phase >= 0 {
		theta[l.phase] = s.Problem.UPhase * rnd.NormFloat64()
	}
	warmer := common.Temperature * rnd.NormFloat64()
	factor := math.Exp(common.Factor * rnd.NormFloat64())
	// The truth of this draw: the fitted moduli at the drawn errors.
	truth := *s.Problem
	truth.Rows = append([]Row(nil), s.Problem.Rows...)
	for i := range truth.Rows {
		truth.Rows[i].T += warmer
	}
	form := s.Form
	g := newEngine(&truth, &form)
	g.prepare(theta)
	copy(g.c, s.e.c)
	g.scale = s.e.scale
	g.sums()
	p := *s.Problem
	p.Rows = append([]Row(nil), s.Problem.Rows...)
	model := make([]complex128, len(p.Rows))
	for i := range p.Rows {
		model[i] = g.model(i) * complex(factor, 0)
		w := s.Form.Sigma[p.Rows[i].Group]
		x, y := rnd.NormFloat64(), rnd.NormFloat64()
		if p.Rows[i].Relaxation {
			y = 0
		}
		p.Rows[i].G = model[i] * cmplx.Exp(complex(w.Magnitude*x, w.PhaseAt(cmplx.Phase(model[i]))*y))
	}
	e := newEngine(&p, &form)
	copy(e.denom, model)
	e.setSigma(form.Sigma)
	copy(e.passive, s.e.passive)
	fit, err := e.run(s.Theta)
	if err != nil {
		return nil
	}
	return fit
}

// Value is the complex modulus of the fitted compound, Pa, at a frequency in Hz, a
// temperature in K and a strain amplitude (m/m), without the errors of specimens,
// runs and phase. Vertical factors other than those of density are left out.
func (s *Solution) Value(f, T, strain float64) complex128 {
	g := s.Polymer(f * math.Pow(10, s.LogShift(T)))
	if s.Form.Vertical == Density {
		g *= complex(thermal.Density{Expansion: s.Form.Expansion, Reference: s.Problem.Reference}.Factor(T), 0)
	}
	if !s.Form.Filler {
		return g
	}
	k1, k2, k3 := s.Form.amplitude(&s.e.l, s.Theta).Shares(strain)
	phi := math.Exp(s.Activation() * 1e3 / thermal.GasConstant * (1/T - 1/s.Problem.Reference))
	loss := s.FillerLoss*k2 + s.FillerExtra*k3
	term := complex(phi, 0) * (complex(s.FillerStorage*k1, 0) + complex(loss, 0)*complex(amplitude.FrequencyPart(s.Form.Kappa, f, s.Problem.F0), 1))
	if s.Form.Scaling {
		return g * (1 + term)
	}
	return g + term
}

// Polymer is the fitted polymer term at the reference temperature, Pa, at a
// reduced frequency in Hz.
func (s *Solution) Polymer(f float64) complex128 {
	return linear.Spectrum{Equilibrium: s.Equilibrium, Times: s.Form.Lattice, Moduli: s.Branches}.Modulus(2 * math.Pi * f)
}
