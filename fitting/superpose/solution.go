package superpose

import (
	"errors"
	"math"
	"math/cmplx"

	"phaselag/models/thermal"
)

// Start is where the search for the nonlinear parameters begins.
type Start struct {
	WLF        thermal.WLF // for the law WLF
	Activation float64     // J/mol, for the law Arrhenius
	Cross      float64     // K, for the law Crossover
	LogShift   []float64   // per knot, for the law Factors
	Filler     FillerStart
}

// FillerStart is a start of the amplitude term.
type FillerStart struct {
	Activation float64 // kJ/mol
	Critical   float64 // m/m
	Exponent   float64
	Extra      float64 // γ_2, m/m; 0: a tenth of Critical
	// Alpha and Beta of a term that scales; 0: 0.3 and 0.05.
	Alpha, Beta float64
}

// Solution is a fitted Form.
type Solution struct {
	Problem *Problem
	Form    Form
	Theta   []float64 // nonlinear parameters, as in the layout of the form
	// Equilibrium, Branches (as many as the lattice), FillerStorage and
	// FillerLoss are the moduli in Pa.
	Equilibrium               float64
	Branches                  []float64
	FillerStorage, FillerLoss float64 // of a term that scales: α and β, without unit
	FillerExtra               float64 // ΔG of the extra loss, Pa
	Objective                 float64 // squared weighted residuals, prior rows with them
	Iterations, Evaluations   int

	e *engine
}

// ErrNoFit says that a form cannot be fitted to a problem.
var ErrNoFit = errors.New("the fit did not converge")

// theta turns a start into parameters.
func (p *Problem) theta(f *Form, l *layout, s Start) []float64 {
	t := make([]float64, l.n)
	switch f.Law {
	case WLF:
		t[l.law], t[l.law+1] = s.WLF.C1, s.WLF.C2
	case Arrhenius:
		t[l.law] = s.Activation / 1e3
	case Crossover:
		t[l.law], t[l.law+1], t[l.law+2] = s.WLF.C1, s.WLF.C2, s.Cross
	case Factors:
		a, k := p.anchor(), 0
		for i, v := range s.LogShift {
			if i != a {
				t[l.law+k] = v - s.LogShift[a]
				k++
			}
		}
	}
	if l.activation >= 0 {
		t[l.activation] = s.Filler.Activation
	}
	if l.critical >= 0 {
		t[l.critical] = math.Log(s.Filler.Critical)
	}
	or := func(v, otherwise float64) float64 {
		if v > 0 {
			return v
		}
		return otherwise
	}
	if l.exponent >= 0 {
		t[l.exponent] = or(s.Filler.Exponent, 0.6)
	}
	if l.extra >= 0 {
		t[l.extra] = math.Log(or(s.Filler.Extra, s.Filler.Critical/10))
	}
	if l.alpha >= 0 {
		t[l.alpha], t[l.beta] = or(s.Filler.Alpha, 0.3), or(s.Filler.Beta, 0.05)
	}
	lower, upper := p.bounds(f, l)
	for i := range t {
		t[i] = max(lower[i], min(upper[i], t[i]))
	}
	return t
}

// Fit fits one form from one start, at the noise of the form.
func Fit(p *Problem, f Form, s Start) (*Solution, error) {
	e := newEngine(p, &f)
	return e.run(p.theta(&f, &e.l, s))
}

// Rival fits another form to the same problem on the lattice, the noise and
// the denominators of this solution, so that their likelihoods compare.
func (s *Solution) Rival(f Form, start Start) (*Solution, error) {
	f.Lattice, f.Sigma, f.Weights = s.Form.Lattice, s.Form.Sigma, s.Form.Weights
	e := newEngine(s.Problem, &f)
	copy(e.denom, s.e.denom)
	e.setSigma(f.Sigma)
	return e.run(s.Problem.theta(&f, &e.l, start))
}

// OnLattice fits the same form on another lattice, from where this solution is.
func (s *Solution) OnLattice(lattice []float64) (*Solution, error) {
	f := s.Form
	f.Lattice, f.Prior = lattice, Prior{}
	e := newEngine(s.Problem, &f)
	copy(e.denom, s.e.denom)
	e.setSigma(f.Sigma)
	return e.run(s.Theta)
}

// run minimises from theta.
func (e *engine) run(theta []float64) (*Solution, error) {
	s := &Solution{Problem: e.p, Form: *e.f, e: e}
	m := e.m + e.priors
	if e.l.n == 0 {
		r := make([]float64, m)
		if !e.residual(r, theta) {
			return nil, ErrNoFit
		}
		s.Objective = squares(r)
	} else {
		res, err := e.minimise(theta)
		if err != nil {
			return nil, err
		}
		theta, s.Objective = res.x, res.objective
		s.Iterations, s.Evaluations = res.iterations, res.evaluations
	}
	s.Theta = append([]float64(nil), theta...)
	s.settle()
	return s, nil
}

func squares(r []float64) float64 {
	var s float64
	for _, v := range r {
		s += v * v
	}
	return s
}

// settle puts the engine at Theta and reads the moduli.
func (s *Solution) settle() {
	e := s.e
	if !e.known || !same(e.theta, s.Theta) {
		e.residual(make([]float64, e.m+e.priors), s.Theta)
	}
	e.sums()
	nl := len(s.Form.Lattice)
	s.Equilibrium = e.c[0] * e.scale
	s.Branches = make([]float64, nl)
	for k := range nl {
		s.Branches[k] = e.c[1+k] * e.scale
	}
	s.FillerStorage, s.FillerLoss, s.FillerExtra = 0, 0, 0
	switch n := s.Form.fillerColumns(); {
	case s.Form.Filler && s.Form.Scaling:
		s.FillerStorage, s.FillerLoss = s.Theta[e.l.alpha], s.Theta[e.l.beta]
	case n >= 2:
		s.FillerStorage, s.FillerLoss = e.c[1+nl]*e.scale, e.c[2+nl]*e.scale
		if n == 3 {
			s.FillerExtra = e.c[3+nl] * e.scale
		}
	}
}

// Model is the fitted modulus of row i, Pa, with its specimen factor and
// temperature offset.
func (s *Solution) Model(i int) complex128 { return s.e.model(i) }

// Misfit is ln(G_i/M_i): relative misfit of the magnitude and, in the
// imaginary part, of the phase in rad.
func (s *Solution) Misfit(i int) complex128 {
	return cmplx.Log(s.Problem.Rows[i].G / s.e.model(i))
}

// Offset is the fitted temperature offset of run j, K; 0 where it was held.
func (s *Solution) Offset(j int) float64 {
	if o := s.e.l.offset[j]; o >= 0 {
		return s.Theta[o]
	}
	return 0
}

// Phase is the fitted common phase error, rad; 0 where it was held.
func (s *Solution) Phase() float64 {
	if s.e.l.phase < 0 {
		return 0
	}
	return s.Theta[s.e.l.phase]
}

// Factor is the fitted specimen factor s_p.
func (s *Solution) Factor(p int) float64 { return s.e.factors[p] }

// LogShift is log10 a_T at T by the fitted law.
func (s *Solution) LogShift(T float64) float64 {
	if s.e.law == nil {
		return 0
	}
	return s.e.law.LogShift(T)
}

// Law is the fitted shift law; nil for a single temperature.
func (s *Solution) Law() thermal.Law { return s.e.law }

// Vertical is b_T at knot i.
func (s *Solution) Vertical(i int) float64 {
	l := &s.e.l
	switch {
	case s.Form.Vertical == Density:
		return thermal.Density{Expansion: s.Form.Expansion, Reference: s.Problem.Reference}.Factor(s.Problem.Knots[i])
	case l.nVer > 0:
		return math.Exp(s.Problem.anchored(s.Theta[l.vertical : l.vertical+l.nVer]).LogShift(s.Problem.Knots[i]))
	}
	return 1
}

// Activation is the fitted activation energy of the filler term, kJ/mol.
func (s *Solution) Activation() float64 {
	if s.e.l.activation < 0 {
		return 0
	}
	return s.Theta[s.e.l.activation]
}

// Kraus is the fitted critical strain, m/m, and exponent; NaN where the form has
// none.
func (s *Solution) Kraus() (critical, exponent float64) {
	l := &s.e.l
	if l.critical < 0 {
		return math.NaN(), math.NaN()
	}
	critical, exponent = math.Exp(s.Theta[l.critical]), math.NaN()
	if l.exponent >= 0 {
		exponent = s.Theta[l.exponent]
	}
	return critical, exponent
}

// ExtraStrain is γ_2 of the extra loss, m/m; NaN where there is none.
func (s *Solution) ExtraStrain() float64 {
	if s.e.l.extra < 0 {
		return math.NaN()
	}
	return math.Exp(s.Theta[s.e.l.extra])
}

// Start gives the solution as a start for a form with any law.
func (s *Solution) Start() Start {
	st := Start{LogShift: make([]float64, len(s.Problem.Knots))}
	for i, T := range s.Problem.Knots {
		st.LogShift[i] = s.LogShift(T)
	}
	switch law := s.e.law.(type) {
	case thermal.WLF:
		st.WLF = law
	case thermal.Crossover:
		st.WLF, st.Cross = law.WLF, law.Cross
	default:
		st.WLF = BestWLF(s.Problem.Knots, st.LogShift, s.Problem.Reference)
	}
	st.Activation = BestArrhenius(s.Problem.Knots, st.LogShift, s.Problem.Reference)
	st.Filler.Activation = s.Activation()
	st.Filler.Critical, st.Filler.Exponent = s.Kraus()
	if x := s.ExtraStrain(); x > 0 {
		st.Filler.Extra = x
	}
	if s.Form.Filler && s.Form.Scaling {
		st.Filler.Alpha, st.Filler.Beta = s.FillerStorage, s.FillerLoss
	}
	return st
}

// BestArrhenius is the activation energy, J/mol, of the straight line through
// (T_ref, 0) that is nearest to given factors.
func BestArrhenius(T, logA []float64, reference float64) float64 {
	var xy, xx float64
	for i := range T {
		if math.IsNaN(logA[i]) {
			continue
		}
		x := (1/T[i] - 1/reference) / (thermal.GasConstant * thermal.Ln10)
		xy += x * logA[i]
		xx += x * x
	}
	if !(xy > 0) {
		return 50e3
	}
	return xy / xx
}

// BestWLF fits the law to given factors by least squares, C1 in closed form on
// a grid of C2.
func BestWLF(T, logA []float64, reference float64) thermal.WLF {
	cold := reference
	for i := range T {
		cold = min(cold, T[i])
	}
	least := reference - cold + 10
	best, bestS := least, math.Inf(1)
	for i := range 60 {
		c2 := least * math.Pow(1500/least, float64(i)/59)
		if w, s := wlfAt(T, logA, reference, c2); w.C1 > 0 && s < bestS {
			best, bestS = c2, s
		}
	}
	return WLFWithPole(T, logA, reference, best)
}

// WLFWithPole is the law with given C2 that is nearest to given factors.
func WLFWithPole(T, logA []float64, reference, c2 float64) thermal.WLF {
	w, _ := wlfAt(T, logA, reference, c2)
	if !(w.C1 > 0) {
		w.C1 = 5
	}
	return w
}

// wlfAt gives C1 in closed form and the sum of squares; NaN factors are passed
// over.
func wlfAt(T, logA []float64, reference, c2 float64) (w thermal.WLF, s float64) {
	w = thermal.WLF{C1: 1, C2: c2, Reference: reference}
	var xy, xx float64
	for i := range T {
		if x := w.LogShift(T[i]); !math.IsNaN(logA[i]) {
			xy += x * logA[i]
			xx += x * x
		}
	}
	w.C1 = xy / xx
	for i := range T {
		if d := logA[i] - w.LogShift(T[i]); !math.IsNaN(d) {
			s += d * d
		}
	}
	return w, s
}
