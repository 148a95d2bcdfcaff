package superpose

import (
	"math"

	"phaselag/models/amplitude"
	"phaselag/models/thermal"
)

// Row is one measured point.
type Row struct {
	Relaxation bool
	Group      int        // index of its noise group
	Run        int        // index into Problem.Runs
	Factor     int        // index of its specimen factor
	T          float64    // K
	Omega      float64    // rad/s, oscillatory rows
	Time       float64    // s, relaxation rows
	Strain     float64    // m/m, single amplitude; used only with a filler term
	G          complex128 // Pa, measured; real in relaxation rows
}

// Run is a pass whose temperature error is common to its rows.
type Run struct {
	U float64 // standard deviation of its temperature offset, K; 0 holds the offset at zero
	// Decades makes the offset one of log10 a_T instead, in decades, as that of a
	// wrong temperature or a wrong frequency: see Loose.
	Decades bool
}

// Problem is everything measured, as numbers.
type Problem struct {
	Reference float64 // T_ref, K
	Rows      []Row
	Runs      []Run
	Factors   int       // number of specimens and mountings, at least 1
	UGeometry float64   // standard deviation of ln s_p; 0 holds all factors at one
	UPhase    float64   // standard deviation of the phase error that all oscillatory rows share, rad; 0 holds it at zero
	Knots     []float64 // tested temperatures of the law Factors, K, rising
	Groups    int       // number of noise groups
	F0        float64   // geometric mean frequency of the strain sweeps, Hz
}

// Law is a shift law.
type Law int

// The shift laws.
const (
	Factors   Law = iota // one shift factor a tested temperature
	WLF                  // Williams–Landel–Ferry
	Arrhenius            // Arrhenius
	Crossover            // WLF above a temperature, Arrhenius below
	OneTemp              // a single temperature: nothing to shift
)

func (l Law) String() string {
	return [...]string{"none", "WLF", "Arrhenius", "WLF+Arrhenius", "one temperature"}[l]
}

// Vertical is a vertical shift of the polymer term.
type Vertical int

// The vertical shifts. Bounded factors stay within ±|ln(T/T_ref)|, the size of
// the entropic effect; free ones are free.
const (
	NoVertical Vertical = iota
	Density
	Bounded
	Free
)

func (v Vertical) String() string { return [...]string{"none", "density", "bounded", "free"}[v] }

// Sigma is the noise of a group: the relative standard deviation of the
// magnitude (of the modulus in a relaxation), and the standard deviation of the
// phase in rad, which may depend on the loss angle δ,
//
//	σ_δ(δ)² = Phase²·[(1−Share) + Share·q(δ)/Mean],  q = (½ sin 2δ)²
//
// Share 0 is an instrument with a constant error of the angle; Share 1 is one
// with independent relative errors of storage and loss modulus.
type Sigma struct {
	Magnitude, Phase float64
	Share, Mean      float64 // Mean of q over the group; both 0: constant
}

// PhaseAt is σ_δ at a loss angle, never below a twentieth of Phase.
func (s Sigma) PhaseAt(delta float64) float64 {
	if s.Share == 0 {
		return s.Phase
	}
	return s.Phase * math.Sqrt(max(0.0025, 1-s.Share+s.Share*sineSquare(delta)/s.Mean))
}

// sineSquare is (½ sin 2δ)², the square of dδ/d ln(G”/G').
func sineSquare(delta float64) float64 {
	v := math.Sin(2*delta) / 2
	return v * v
}

// Form is a model without its numbers.
type Form struct {
	Law       Law
	Vertical  Vertical
	Expansion float64 // 1/K, for Density
	Filler    bool    // with the amplitude term
	Amplitude amplitude.Kind
	// Scaling: the amplitude term multiplies the polymer term by
	// 1 + φ(T)[α K1 + β K2 (i + κ (2/π) ln(f/f0))] instead of being added to it.
	Scaling    bool
	Activation bool      // its temperature dependence is fitted, not zero
	Kappa      float64   // 1 causal, 0 rate-independent
	Lattice    []float64 // τ_k, s, rising
	Sigma      []Sigma   // per noise group
	Prior      Prior     // of the spectrum; zero: none
	Weights    []float64 // per row, by which its squared residual counts; nil: all one
}

// layout tells where a parameter stands in θ; -1: not there.
type layout struct {
	law, nLaw      int
	vertical, nVer int
	offset         []int // per run
	factor         int   // first of Factors−1
	nFactor        int
	phase          int // common phase error, rad
	activation     int
	critical       int
	exponent       int
	extra          int // ln γ_2 of the extra loss
	alpha, beta    int // of a term that scales
	n              int
}

// anchor is the knot nearest to the reference temperature; its factor is zero
// before the whole set is moved to zero at the reference.
func (p *Problem) anchor() int {
	best := 0
	for i, T := range p.Knots {
		if math.Abs(T-p.Reference) < math.Abs(p.Knots[best]-p.Reference) {
			best = i
		}
	}
	return best
}

func (p *Problem) layout(f *Form) layout {
	l := layout{law: -1, vertical: -1, factor: -1, phase: -1, activation: -1, critical: -1, exponent: -1, extra: -1, alpha: -1, beta: -1}
	take := func(n int) int {
		at := l.n
		l.n += n
		return at
	}
	switch f.Law {
	case Factors:
		l.nLaw = len(p.Knots) - 1
	case WLF:
		l.nLaw = 2
	case Arrhenius:
		l.nLaw = 1
	case Crossover:
		l.nLaw = 3
	}
	if l.nLaw > 0 {
		l.law = take(l.nLaw)
	}
	if f.Vertical >= Bounded && len(p.Knots) > 1 {
		l.nVer = len(p.Knots) - 1
		l.vertical = take(l.nVer)
	}
	l.offset = make([]int, len(p.Runs))
	for j, r := range p.Runs {
		l.offset[j] = -1
		if r.U > 0 && f.Law != OneTemp {
			l.offset[j] = take(1)
		}
	}
	if p.UGeometry > 0 && p.Factors > 1 {
		l.nFactor = p.Factors - 1
		l.factor = take(l.nFactor)
	}
	if p.UPhase > 0 {
		l.phase = take(1)
	}
	if f.Filler {
		if f.Activation {
			l.activation = take(1)
		}
		l.critical = take(1)
		if f.Amplitude != amplitude.MaierGoritz {
			l.exponent = take(1)
		}
		if f.Amplitude == amplitude.ExtraLoss && !f.Scaling {
			l.extra = take(1)
		}
		if f.Scaling {
			l.alpha, l.beta = take(1), take(1)
		}
	}
	return l
}

// knotted spreads n−1 free values over the knots with zero at the anchor.
func (p *Problem) knotted(free []float64) thermal.Factors {
	a := p.anchor()
	f := thermal.Factors{T: p.Knots, Log: make([]float64, len(p.Knots))}
	copy(f.Log, free[:a])
	copy(f.Log[a+1:], free[a:])
	return f
}

// anchored is interpolation through knots, moved to zero at the reference
// temperature. Its constants are the knots without the anchor.
type anchored struct {
	f      thermal.Factors
	anchor int
	zero   float64   // f at the reference
	zeroG  []float64 // gradient of zero by all knots
	work   []float64
}

func (p *Problem) anchored(free []float64) *anchored {
	a := &anchored{f: p.knotted(free), anchor: p.anchor()}
	a.zero = a.f.LogShift(p.Reference)
	a.zeroG = make([]float64, len(p.Knots))
	a.work = make([]float64, len(p.Knots))
	a.f.Gradient(p.Reference, a.zeroG)
	return a
}

func (a *anchored) LogShift(T float64) float64 { return a.f.LogShift(T) - a.zero }
func (a *anchored) Slope(T float64) float64    { return a.f.Slope(T) }
func (a *anchored) Gradient(T float64, g []float64) {
	a.f.Gradient(T, a.work)
	k := 0
	for i, v := range a.work {
		if i == a.anchor {
			continue
		}
		g[k] = v - a.zeroG[i]
		k++
	}
}

// law builds the shift law at θ.
func (p *Problem) law(f *Form, l *layout, theta []float64) thermal.Law {
	switch f.Law {
	case WLF:
		return thermal.WLF{C1: theta[l.law], C2: theta[l.law+1], Reference: p.Reference}
	case Arrhenius:
		return thermal.Arrhenius{Activation: 1e3 * theta[l.law], Reference: p.Reference}
	case Crossover:
		return thermal.Crossover{WLF: thermal.WLF{C1: theta[l.law], C2: theta[l.law+1], Reference: p.Reference}, Cross: theta[l.law+2]}
	case Factors:
		if l.nLaw > 0 {
			return p.anchored(theta[l.law : l.law+l.nLaw])
		}
	}
	return nil
}

// bounds are the limits within which θ is sought.
func (p *Problem) bounds(f *Form, l *layout) (lower, upper []float64) {
	lower, upper = make([]float64, l.n), make([]float64, l.n)
	for i := range lower {
		lower[i], upper[i] = math.Inf(-1), math.Inf(1)
	}
	cold := p.Reference
	for _, r := range p.Rows {
		cold = min(cold, r.T)
	}
	switch f.Law {
	case WLF:
		lower[l.law], upper[l.law] = 0.05, 200
		// The pole stays 8 K below the coldest run.
		lower[l.law+1], upper[l.law+1] = p.Reference-cold+8, 5000
	case Arrhenius:
		lower[l.law], upper[l.law] = 0.1, 2000
	case Crossover:
		lower[l.law], upper[l.law] = 0.05, 200
		lower[l.law+1], upper[l.law+1] = 5, 5000
		lower[l.law+2], upper[l.law+2] = cold, p.Reference
	case Factors:
		for i := range l.nLaw {
			lower[l.law+i], upper[l.law+i] = -30, 30
		}
	}
	if f.Vertical == Bounded {
		a := p.anchor()
		k := 0
		for i, T := range p.Knots {
			if i == a {
				continue
			}
			w := math.Abs(math.Log(T / p.Reference))
			lower[l.vertical+k], upper[l.vertical+k] = -w, w
			k++
		}
	}
	for j, r := range p.Runs {
		if o := l.offset[j]; o >= 0 {
			lower[o], upper[o] = -12*r.U, 12*r.U
		}
	}
	if l.phase >= 0 {
		lower[l.phase], upper[l.phase] = -12*p.UPhase, 12*p.UPhase
	}
	if l.critical >= 0 {
		lower[l.critical], upper[l.critical] = math.Log(1e-6), math.Log(10)
	}
	if l.exponent >= 0 {
		lower[l.exponent], upper[l.exponent] = 0.1, 2
	}
	if l.extra >= 0 {
		lower[l.extra], upper[l.extra] = math.Log(1e-6), math.Log(10)
	}
	if l.alpha >= 0 {
		lower[l.alpha], upper[l.alpha] = 0, 100
		lower[l.beta], upper[l.beta] = 0, 100
	}
	if l.activation >= 0 {
		lower[l.activation], upper[l.activation] = -20, 100
	}
	return lower, upper
}

// amplitude builds the amplitude law at θ.
func (f *Form) amplitude(l *layout, theta []float64) amplitude.Law {
	out := amplitude.Law{Kind: f.Amplitude, Critical: math.Exp(theta[l.critical])}
	if l.exponent >= 0 {
		out.Exponent = theta[l.exponent]
	}
	if l.extra >= 0 {
		out.Extra = math.Exp(theta[l.extra])
	}
	return out
}

// fillerColumns is the number of linear moduli of the filler term: storage, loss
// and extra loss.
func (f *Form) fillerColumns() int {
	switch {
	case !f.Filler || f.Scaling:
		return 0
	case f.Amplitude == amplitude.ExtraLoss:
		return 3
	}
	return 2
}
