package superpose

import "math"

// LooseFactors are shift factors of chosen runs that no law and no other test at
// the same temperature holds.
type LooseFactors struct {
	Log []float64 // per run: log10 a_T at its nominal temperature
	// U is its standard uncertainty against the mean of all, from the shape of the
	// curve alone; NaN: not a chosen run.
	U []float64
}

// looseDecades is the standard deviation with which the factors of chosen runs
// leave the law: wide enough for a factor 2π of frequency and for the step of 10 K
// near the glass.
const looseDecades = 1

// Loose fits the law WLF to everything, with an almost free factor for each chosen
// run, and gives the factors that they ask for. T are nominal temperatures of the
// runs and logA the factors from which the search starts, per run.
func (s *Solution) Loose(chosen []bool, T, logA []float64) (LooseFactors, error) {
	p := *s.Problem
	p.Runs = append([]Run(nil), s.Problem.Runs...)
	var knownT, known []float64
	for j := range p.Runs {
		if chosen[j] {
			p.Runs[j] = Run{U: looseDecades, Decades: true}
			knownT, known = append(knownT, T[j]), append(known, logA[j])
		}
	}
	f := s.Form
	f.Law, f.Weights, f.Vertical = WLF, nil, NoVertical
	st := s.Start()
	st.WLF = BestWLF(knownT, known, p.Reference)
	e := newEngine(&p, &f)
	theta := p.theta(&f, &e.l, st)
	for j := range p.Runs {
		if o := e.l.offset[j]; o >= 0 && chosen[j] {
			theta[o] = logA[j] - st.WLF.LogShift(T[j])
		}
	}
	fit, err := e.run(theta)
	if err != nil {
		return LooseFactors{}, err
	}
	out := LooseFactors{make([]float64, len(p.Runs)), make([]float64, len(p.Runs))}
	cov := fit.Covariance()
	roots := make([]Root, len(p.Runs))
	mean, n := make(Root, cov.n), 0.0
	for j := range p.Runs {
		out.Log[j], out.U[j] = math.NaN(), math.NaN()
		if o := e.l.offset[j]; o >= 0 && chosen[j] {
			out.Log[j] = fit.LogShift(T[j]) + fit.Theta[o]
			roots[j] = cov.LogShift(T[j])
			axpy(roots[j], 1, cov.Theta(o))
			axpy(mean, 1, roots[j])
			n++
		}
	}
	for j, r := range roots {
		if r != nil {
			axpy(r, -1/n, mean)
			out.U[j] = r.Deviation()
		}
	}
	return out, nil
}
