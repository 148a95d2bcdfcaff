package doubt

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// Which isotherm is wrong?
//
// Factors y_i = log a_T(T_i) of sound isotherms follow, within their uncertainties
// u_i, the law of Williams, Landel and Ferry with an origin of its own,
//
//	y_i = c − C1 (T_i − T_0)/(C2 + T_i − T_0),
//
// which contains that of Arrhenius (C2 = T_0) and needs no isotherm to be the
// reference. For each hypothesis the factors are put right by it and the law is
// fitted again:
//
//	exchanged  factors of two isotherms change places (K(K−1)/2 hypotheses)
//	unit       a factor is off by ±log 2π, since ω was read as f or f as ω (2K)
//	off        an isotherm is left out (K)
//
// A hypothesis is believed when χ² falls by more than Fall and what remains is
// compatible with the uncertainties. exchanged and unit have no number to fit and
// explain all; they go before off, which has one, unless they are worse by more
// than Parsimony. Thresholds are our own; with K = 13 and sound isotherms they
// are never met by chance in 10 000 draws (see the test).

// Kind is what may be wrong.
type Kind int

// The kinds of fault.
const (
	None      Kind = iota
	Exchanged      // the temperatures of isotherms I and J were exchanged
	Unit           // the frequencies of isotherm I are too large by Factor
	Off            // isotherm I lies off the law of the others by Decades
)

// Fault is the likely fault of a set of isotherms.
type Fault struct {
	Kind    Kind
	I, J    int     // indices of the isotherms; J only for Exchanged
	Factor  float64 // for Unit: 2π or 1/2π
	Decades float64 // for Off: log a_T of the isotherm above the law of the others
	Kelvin  float64 // for Off: the temperature error that would explain it
	Before  float64 // χ² of all isotherms as they are
	After   float64 // χ² with the fault put right
	Freedom int     // degrees of freedom of After
	Wrong   bool    // the isotherms miss every law, whether or not a fault explains it
}

// Thresholds of belief.
const (
	Fall      = 30.0 // least fall of χ²
	Parsimony = 9.0
	least     = 1e-4 // p of what remains
)

// Isotherms looks for the fault. T in kelvin rising, y = log10 a_T and u its
// standard uncertainties are of the same length; isotherms with u NaN or not
// positive are passed over. Fewer than six tell nothing.
func Isotherms(T, y, u []float64) Fault {
	var k []int
	for i := range T {
		if u[i] > 0 && !math.IsInf(u[i], 0) && !math.IsNaN(y[i]) {
			k = append(k, i)
		}
	}
	n := len(k)
	if n < 6 {
		return Fault{}
	}
	z := curve{T: make([]float64, n), y: make([]float64, n), w: make([]float64, n)}
	for i, j := range k {
		z.T[i], z.y[i], z.w[i] = T[j], y[j], 1/(u[j]*u[j])
	}
	before, _ := z.fit(-1)
	sound := Fault{Before: before, After: before, Freedom: n - 3}
	if before < Fall || chance(before, n-3) > least {
		return sound
	}
	sound.Wrong = true
	best := sound
	better := func(f Fault) {
		f.Before, f.Wrong = before, true
		if f.After < best.After-1e-9 || best.Kind == None {
			best = f
		}
	}
	for i := range n {
		for j := i + 1; j < n; j++ {
			z.y[i], z.y[j] = z.y[j], z.y[i]
			after, _ := z.fit(-1)
			z.y[i], z.y[j] = z.y[j], z.y[i]
			better(Fault{Kind: Exchanged, I: k[i], J: k[j], After: after, Freedom: n - 3})
		}
		for _, s := range []float64{1, -1} {
			// Frequencies too large by 2π look like a factor too small by log 2π.
			z.y[i] += s * math.Log10(2*math.Pi)
			after, _ := z.fit(-1)
			z.y[i] -= s * math.Log10(2*math.Pi)
			better(Fault{Kind: Unit, I: k[i], Factor: math.Pow(2*math.Pi, s), After: after, Freedom: n - 3})
		}
	}
	exact := best
	best = Fault{}
	for i := range n {
		after, law := z.fit(i)
		at, slope := law(z.T[i])
		better(Fault{Kind: Off, I: k[i], Decades: z.y[i] - at, Kelvin: (z.y[i] - at) / slope, After: after, Freedom: n - 4})
	}
	if exact.After <= best.After+Parsimony {
		best = exact
	}
	if before-best.After < Fall || chance(best.After, best.Freedom) < least {
		return sound
	}
	return best
}

// chance is the probability of a χ² at least as large.
func chance(chi2 float64, freedom int) float64 {
	return 1 - distuv.ChiSquared{K: float64(max(freedom, 1))}.CDF(chi2)
}

type curve struct{ T, y, w []float64 }

// poles is how many values of C2 are tried.
const poles = 60

// fit fits the law without isotherm out (−1: to all), for each of a row of poles
// in closed form, and gives χ² and the law with its slope.
func (z *curve) fit(out int) (chi2 float64, law func(T float64) (y, slope float64)) {
	origin := z.T[len(z.T)/2]
	nearest, far := origin-z.T[0]+8, 5000.0
	chi2 = math.Inf(1)
	var c, c1, c2 float64
	for p := range poles {
		pole := nearest * math.Pow(far/nearest, float64(p)/(poles-1))
		var s, sx, sy, sxx, sxy float64
		for i, T := range z.T {
			if i == out {
				continue
			}
			x, w := -(T-origin)/(pole+T-origin), z.w[i]
			s, sx, sy, sxx, sxy = s+w, sx+w*x, sy+w*z.y[i], sxx+w*x*x, sxy+w*x*z.y[i]
		}
		b := (s*sxy - sx*sy) / (s*sxx - sx*sx)
		if b < 0 {
			b = 0
		}
		a := (sy - b*sx) / s
		var v float64
		for i, T := range z.T {
			if i == out {
				continue
			}
			d := z.y[i] - a + b*(T-origin)/(pole+T-origin)
			v += z.w[i] * d * d
		}
		if v < chi2 {
			chi2, c, c1, c2 = v, a, b, pole
		}
	}
	return chi2, func(T float64) (float64, float64) {
		q := c2 + T - origin
		return c - c1*(T-origin)/q, -c1 * c2 / (q * q)
	}
}
