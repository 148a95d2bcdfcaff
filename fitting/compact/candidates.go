package compact

import (
	"errors"
	"math"
	"math/cmplx"
	"sort"

	"phaselag/fitting/lsq"
	"phaselag/models/linear"
)

// Point is one point of a master curve.
type Point struct {
	Omega     float64    // reduced angular frequency, rad/s
	G         complex128 // Pa
	Magnitude float64    // standard deviation of the magnitude, relative
	Phase     float64    // standard deviation of the phase, rad
}

// Constant is one constant of a model with its standard uncertainty.
type Constant struct {
	Name, Unit string
	Value, U   float64 // U is NaN where the points do not tell it
}

// Fit is a compact model fitted to a master curve.
type Fit struct {
	Name      string
	Model     linear.Compact // nil where it could not be fitted
	Constants []Constant
	Misfit    Misfit
	AICc      float64 // of the weighted residuals
	Delta     float64 // above the least of the candidates
	// Bound says that a constant ended at the bound of its range.
	Bound bool
	Note  string
}

// Misfit is how far a model lies from points: relative of the magnitude, rad of
// the phase.
type Misfit struct {
	Magnitude, Phase           float64 // rms
	WorstMagnitude, WorstPhase float64
}

// ErrPoints says that there are too few points, or one that is no modulus.
var ErrPoints = errors.New("a compact model needs at least six points with positive moduli over a decade of frequency")

func check(points []Point) (lo, hi float64, err error) {
	lo, hi = math.Inf(1), 0
	for _, p := range points {
		if !(p.Omega > 0) || math.IsInf(p.Omega, 0) || !(real(p.G) > 0) || !(imag(p.G) > 0) || cmplx.IsInf(p.G) || !(p.Magnitude > 0) || !(p.Phase > 0) {
			return 0, 0, ErrPoints
		}
		lo, hi = min(lo, p.Omega), max(hi, p.Omega)
	}
	if len(points) < 6 || hi < 10*lo {
		return 0, 0, ErrPoints
	}
	return lo, hi, nil
}

// form says how a model is searched: x are the parameters of the search, each
// within bounds, from which the constants follow.
type form struct {
	name         string
	n            int
	names, units []string
	lower, upper []float64
	// build gives the model and, where it has a value, ∂constant/∂x, n×n with the
	// constants of the model (Tau as ln τ) in rows.
	build func(x []float64, j [][]float64) (linear.Compact, bool)
	start func(low, high, lnTau, alpha float64) []float64
	// read gives the constants as people know them and how they change with x.
	read func(x []float64) (value []float64, by [][]float64)
}

var inf = math.Inf(1)

// forms are the models. The moduli are searched as logarithms.
var forms = []form{
	{
		name: "fractional Zener", n: 4, names: []string{"G0", "Ginf", "tau", "alpha"}, units: []string{"Pa", "Pa", "s", ""},
		lower: []float64{-inf, -inf, -inf, 0.02}, upper: []float64{inf, inf, inf, 1},
		build: func(x []float64, j [][]float64) (linear.Compact, bool) {
			g0, d := math.Exp(x[0]), math.Exp(x[1])
			if j != nil {
				j[0][0], j[1][0], j[1][1], j[2][2], j[3][3] = g0, g0, d, 1, 1
			}
			return linear.FractionalZener{G0: g0, Ginf: g0 + d, Tau: math.Exp(x[2]), Alpha: x[3]}, true
		},
		start: func(low, high, lnTau, alpha float64) []float64 {
			return []float64{math.Log(low), math.Log(high - low), lnTau, alpha}
		},
		read: func(x []float64) ([]float64, [][]float64) {
			g0, d, tau := math.Exp(x[0]), math.Exp(x[1]), math.Exp(x[2])
			return []float64{g0, g0 + d, tau, x[3]}, [][]float64{{g0, 0, 0, 0}, {g0, d, 0, 0}, {0, 0, tau, 0}, {0, 0, 0, 1}}
		},
	},
	{
		name: "five-parameter fractional", n: 5, names: []string{"G0", "G1", "tau", "alpha", "beta"}, units: []string{"Pa", "Pa", "s", "", ""},
		lower: []float64{-inf, -inf, -inf, 0.02, 0}, upper: []float64{inf, inf, inf, 1, 0.9},
		build: func(x []float64, j [][]float64) (linear.Compact, bool) {
			// x[4] is α − β.
			g0, g1 := math.Exp(x[0]), math.Exp(x[1])
			if j != nil {
				j[0][0], j[1][1], j[2][2], j[3][3], j[4][3], j[4][4] = g0, g1, 1, 1, 1, -1
			}
			return linear.FiveParameter{G0: g0, G1: g1, Tau: math.Exp(x[2]), Alpha: x[3], Beta: x[3] - x[4]}, x[3]-x[4] > 0.01
		},
		start: func(low, high, lnTau, alpha float64) []float64 {
			return []float64{math.Log(low), math.Log(high - low), lnTau, alpha, 0.05}
		},
		read: func(x []float64) ([]float64, [][]float64) {
			g0, g1, tau := math.Exp(x[0]), math.Exp(x[1]), math.Exp(x[2])
			return []float64{g0, g1, tau, x[3], x[3] - x[4]}, [][]float64{{g0, 0, 0, 0, 0}, {0, g1, 0, 0, 0}, {0, 0, tau, 0, 0}, {0, 0, 0, 1, 0}, {0, 0, 0, 1, -1}}
		},
	},
	{
		name: "Havriliak–Negami", n: 5, names: []string{"G0", "Ginf", "tau", "a", "b"}, units: []string{"Pa", "Pa", "s", "", ""},
		lower: []float64{-inf, -inf, -inf, 0.02, 0.02}, upper: []float64{inf, inf, inf, 1, 1},
		build: func(x []float64, j [][]float64) (linear.Compact, bool) {
			g0, d := math.Exp(x[0]), math.Exp(x[1])
			if j != nil {
				j[0][0], j[1][0], j[1][1], j[2][2], j[3][3], j[4][4] = g0, g0, d, 1, 1, 1
			}
			return linear.HavriliakNegami{G0: g0, Ginf: g0 + d, Tau: math.Exp(x[2]), A: x[3], B: x[4]}, true
		},
		start: func(low, high, lnTau, alpha float64) []float64 {
			return []float64{math.Log(low), math.Log(high - low), lnTau, alpha, 0.7}
		},
		read: func(x []float64) ([]float64, [][]float64) {
			g0, d, tau := math.Exp(x[0]), math.Exp(x[1]), math.Exp(x[2])
			return []float64{g0, g0 + d, tau, x[3], x[4]}, [][]float64{{g0, 0, 0, 0, 0}, {g0, d, 0, 0, 0}, {0, 0, tau, 0, 0}, {0, 0, 0, 1, 0}, {0, 0, 0, 0, 1}}
		},
	},
}

// Candidates fits every compact model to the points, in the order fractional
// Zener, five-parameter fractional, Havriliak–Negami.
func Candidates(points []Point) ([]Fit, error) {
	lo, hi, err := check(points)
	if err != nil {
		return nil, err
	}
	var out []Fit
	least := math.Inf(1)
	for _, f := range forms {
		fit := f.fit(points, lo, hi)
		if fit.Model != nil {
			least = min(least, fit.AICc)
		}
		out = append(out, fit)
	}
	for i := range out {
		out[i].Delta = out[i].AICc - least
	}
	return out, nil
}

// problem is the least-squares problem of a form: real and imaginary part of
// ln(G/M) over their standard deviations.
func (f *form) problem(points []Point) lsq.Problem {
	m, n := len(points), f.n
	j := make([][]float64, n)
	for i := range j {
		j[i] = make([]float64, n)
	}
	g := make([]complex128, n)
	return lsq.Problem{
		M: 2 * m, N: n, Lower: f.lower, Upper: f.upper,
		Residual: func(r, x []float64) error {
			model, ok := f.build(x, nil)
			if !ok {
				return errors.New("outside the model")
			}
			for i, p := range points {
				d := cmplx.Log(p.G / model.Modulus(p.Omega))
				r[i], r[m+i] = real(d)/p.Magnitude, imag(d)/p.Phase
			}
			return nil
		},
		Jacobian: func(jac, x []float64) error {
			for i := range j {
				clear(j[i])
			}
			model, _ := f.build(x, j)
			for i, p := range points {
				v := model.Gradient(p.Omega, g)
				for k := range n {
					var d complex128
					for c := range n {
						d -= g[c] * complex(j[c][k], 0)
					}
					d /= v
					jac[k*2*m+i], jac[k*2*m+m+i] = real(d)/p.Magnitude, imag(d)/p.Phase
				}
			}
			return nil
		},
	}
}

const (
	startPoints = 40 // points on which the starts are tried
	goOn        = 2  // starts that go on with all points
)

// fit searches from several starts: the glassy modulus at the end of the points or
// decades beyond it, the relaxation time before, at and beyond their fast end.
func (f *form) fit(points []Point, lo, hi float64) Fit {
	low, high := math.Inf(1), 0.0
	for _, p := range points {
		low, high = min(low, cmplx.Abs(p.G)), max(high, cmplx.Abs(p.G))
	}
	// The starts are tried on a few of the points; the best few go on with all.
	few := points
	if step := len(points) / startPoints; step > 1 {
		few = nil
		for i := 0; i < len(points); i += step {
			few = append(few, points[i])
		}
	}
	type try struct {
		x    []float64
		norm float64
	}
	var tries []try
	coarse := f.problem(few)
	for _, above := range []float64{1.2, 10, 300} {
		for _, decades := range []float64{-2, 0, 3} {
			for _, alpha := range []float64{0.35, 0.65} {
				x := f.start(0.9*low, above*high, -math.Log(hi)-decades*math.Ln10, alpha)
				res, err := lsq.Solve(coarse, x, &lsq.Settings{MaxEvaluations: 60, FunctionTol: 1e-6})
				if err == nil && !math.IsNaN(res.Norm) {
					tries = append(tries, try{append([]float64(nil), res.X...), res.Norm})
				}
			}
		}
	}
	sort.SliceStable(tries, func(i, j int) bool { return tries[i].norm < tries[j].norm })
	problem := f.problem(points)
	var best *lsq.Result
	for _, t := range tries[:min(len(tries), goOn)] {
		res, err := lsq.Solve(problem, t.x, &lsq.Settings{MaxEvaluations: 300})
		if err == nil && !math.IsNaN(res.Norm) && (best == nil || res.Norm < best.Norm*(1-1e-9)) {
			c := res.Clone()
			best = &c
		}
	}
	out := Fit{Name: f.name, AICc: math.Inf(1)}
	if best == nil {
		out.Note = "could not be fitted"
		return out
	}
	model, _ := f.build(best.X, nil)
	out.Model = model
	n, k := float64(2*len(points)), float64(f.n)
	out.AICc = best.Norm*best.Norm + 2*k + 2*k*(k+1)/math.Max(n-k-1, 1)
	out.Misfit = misfit(points, model.Modulus)
	widen := math.Max(1, best.Norm/math.Sqrt(math.Max(n-k, 1)))
	value, by := f.read(best.X)
	cov, err := best.UnitCovariance()
	for i, name := range f.names {
		c := Constant{Name: name, Unit: f.units[i], Value: value[i], U: math.NaN()}
		if err == nil {
			var v float64
			for a := range f.n {
				for b := range f.n {
					v += by[i][a] * cov[a*f.n+b] * by[i][b]
				}
			}
			if v > 0 {
				c.U = widen * math.Sqrt(v)
			}
		}
		out.Constants = append(out.Constants, c)
	}
	for i, x := range best.X {
		if x == f.lower[i] || x == f.upper[i] {
			out.Bound = true
		}
	}
	switch {
	case !best.Usable():
		out.Note = "the search did not end"
	case out.Bound:
		out.Note = "an exponent ended at the bound of its range"
	}
	return out
}

// misfit compares a model with points.
func misfit(points []Point, model func(omega float64) complex128) Misfit {
	var m Misfit
	for _, p := range points {
		d := cmplx.Log(p.G / model(p.Omega))
		m.Magnitude += real(d) * real(d)
		m.Phase += imag(d) * imag(d)
		m.WorstMagnitude, m.WorstPhase = max(m.WorstMagnitude, math.Abs(real(d))), max(m.WorstPhase, math.Abs(imag(d)))
	}
	n := float64(len(points))
	m.Magnitude, m.Phase = math.Sqrt(m.Magnitude/n), math.Sqrt(m.Phase/n)
	return m
}
