// Package peak reads the peak of a curve over temperature, and how far the peaks of
// two batches lie apart, from few points and without a model of the material.
//
// Problem: the loss factor of a compound that was tested at one frequency and some
// temperatures. Near its peak
//
//	ln y(T) = p(x) = c₀ + c₁x + c₂x² + c₃x³ + c₄x⁴,     x = (T − T*)/10 K,
//
// with T* the temperature of the greatest y; the cubic term is the peak's lopsidedness,
// the fourth one its straight flanks. The peak is where p'(x) = 0 with p"(x) < 0.
// Of two batches the second has the same shape, moved and scaled,
//
//	ln y_B(T) = h + p(x − Δ/10 K),
//
// and Δ, the shift of the peak, is fitted with the shape together: near a peak the
// height says little of where it is, but the flanks of both say a lot of how far they
// are apart. Whether one shape serves both is an F test against a shape for each.
//
// Uncertainty: a scatter u of temperature from step to step moves a point on a flank
// by u·d ln y/dT and one on the peak not at all, so a point has the variance
//
//	σ_i² = s² + u²(d ln y/dT)²
//
// with u stated and s² such that the weighted residuals have their expected sum, Σ r²/σ²
// = degrees of freedom (s² = 0 where that cannot be, and then all are scaled). Weights
// and fit are repeated. t-quantiles; the calibration of one thermometer cancels in Δ.
package peak

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/stat/distuv"

	"phaselag/fitting/lsq"
)

// Point is a mean at one temperature.
type Point struct {
	T float64 // K or °C
	Y float64 // positive
}

// Peak is a reading.
type Peak struct {
	T, U95      float64 // as the points' temperatures
	Height      float64
	From, To    float64 // the temperatures used
	N           int
	Freedom     int
	Coefficient [terms]float64 // of ln y over (T − Centre)/10
	Centre      float64
}

// Shift is how far two peaks lie apart, the second less the first.
type Shift struct {
	DT, U95        float64
	Ratio, RatioU  float64 // of the heights, second over first, and its half-width
	A, B           Peak
	N, Freedom     int
	SameShape      float64 // p of the F test that one shape serves both; NaN if it cannot be told
	Scatter        float64 // standard deviation of ln y about the curves
	P              float64 // two-sided, that there is no shift
	SmallestDT     float64 // shift that would be seen in nine of ten cases at 5 %
	SmallestFactor float64 // of the heights, likewise
}

// What is refused.
var (
	ErrNoPeak = errors.New("no peak between the tested temperatures")
	ErrFew    = errors.New("too few temperatures about the peak")
)

// within is how far down its flanks a peak is followed, as a share of its height.
const within = 0.5

// least is the fewest temperatures about a peak, terms the number of coefficients.
const (
	least = 6
	terms = 5
)

// window is the points about the greatest one, in ascending order of temperature.
func window(points []Point) ([]Point, error) {
	var p []Point
	for _, v := range points {
		if v.Y > 0 && !math.IsInf(v.Y, 0) && !math.IsNaN(v.T) && !math.IsInf(v.T, 0) {
			p = append(p, v)
		}
	}
	if len(p) < least {
		return nil, fmt.Errorf("%w: %d in all", ErrFew, len(p))
	}
	slices.SortStableFunc(p, func(a, b Point) int {
		switch {
		case a.T < b.T:
			return -1
		case a.T > b.T:
			return 1
		}
		return 0
	})
	top := 0
	for i := range p {
		if p[i].Y > p[top].Y {
			top = i
		}
	}
	lo, hi := top, top
	for lo > 0 && p[lo-1].Y >= within*p[top].Y {
		lo--
	}
	for hi+1 < len(p) && p[hi+1].Y >= within*p[top].Y {
		hi++
	}
	if top == 0 || top == len(p)-1 {
		return nil, fmt.Errorf("%w: the greatest value stands at the end, %.4g", ErrNoPeak, p[top].T)
	}
	w := p[lo : hi+1]
	if len(w) < least {
		return nil, fmt.Errorf("%w: %d from %.4g to %.4g", ErrFew, len(w), w[0].T, w[len(w)-1].T)
	}
	return w, nil
}

// curve is p(x), p'(x) and p"(x).
func curve(c []float64, x float64) (value, slope, bend float64) {
	for i := terms - 1; i >= 0; i-- {
		bend = bend*x + 2*slope
		slope = slope*x + value
		value = value*x + c[i]
	}
	return value, slope, bend
}

// top is where a curve has its greatest maximum between lo and hi, and the bend there:
// a scan, then halving of the interval in which the slope changes its sign.
func top(c []float64, lo, hi float64) (x, bend float64, ok bool) {
	const steps = 200
	best := math.Inf(-1)
	for i := range steps {
		a, b := lo+(hi-lo)*float64(i)/steps, lo+(hi-lo)*float64(i+1)/steps
		_, sa, _ := curve(c, a)
		_, sb, _ := curve(c, b)
		if !(sa >= 0 && sb < 0) {
			continue
		}
		for range 60 {
			if m := a/2 + b/2; slopeAt(c, m) >= 0 {
				a = m
			} else {
				b = m
			}
		}
		if v, _, w := curve(c, a); v > best {
			best, x, bend, ok = v, a, w, w < 0
		}
	}
	return x, bend, ok
}

func slopeAt(c []float64, x float64) float64 {
	_, s, _ := curve(c, x)
	return s
}

// Find reads the peak of one curve. scatter is the standard uncertainty of the
// temperature from step to step in K, 0 for not known.
func Find(points []Point, scatter float64) (Peak, error) {
	w, err := window(points)
	if err != nil {
		return Peak{}, err
	}
	centre := middle(w)
	r, _, err := weighted(w, nil, centre, scatter)
	if err != nil {
		return Peak{}, err
	}
	return reading(r, w, centre, r.DegreesOfFreedom())
}

// weighted repeats fit and weights. The result's residuals are over their standard
// deviations up to one factor; sigma is that of a point on the peak.
func weighted(a, b []Point, centre, scatter float64) (r lsq.Result, sigma float64, err error) {
	n := len(a) + len(b)
	dev := make([]float64, n)
	for i := range dev {
		dev[i] = 1
	}
	passes := 1
	if scatter > 0 {
		passes = 4
	}
	for range passes {
		if r, err = fit(a, b, centre, dev); err != nil {
			return r, 0, err
		}
		sigma = math.Sqrt(r.Variance()) * dev[0]
		if passes == 1 {
			return r, sigma, nil
		}
		raw, lean := make([]float64, n), make([]float64, n)
		for i := range n {
			p, move := Point{}, 0.0
			if i < len(a) {
				p = a[i]
			} else {
				p, move = b[i-len(a)], r.X[terms]/10
			}
			y, slope, _ := curve(r.X, (p.T-centre)/10-move)
			if i >= len(a) {
				y += r.X[terms+1]
			}
			raw[i], lean[i] = y-math.Log(p.Y), scatter*slope/10
		}
		// Never so little that the points at the very top decide alone.
		var sum float64
		for _, v := range raw {
			sum += v * v
		}
		s2 := max(own(raw, lean, float64(r.DegreesOfFreedom())), leastOwn*sum/float64(n))
		sigma = math.Sqrt(s2)
		for i := range dev {
			dev[i] = math.Max(math.Sqrt(s2+lean[i]*lean[i]), 1e-9)
		}
	}
	return r, sigma, nil
}

// leastOwn is the least share of the points' own scatter in all of it.
const leastOwn = 0.2

// own is the s² ≥ 0 at which Σ r²/(s² + lean²) is the degrees of freedom.
func own(r, lean []float64, freedom float64) float64 {
	sum := func(s2 float64) float64 {
		var v float64
		for i := range r {
			v += r[i] * r[i] / (s2 + lean[i]*lean[i] + 1e-24)
		}
		return v
	}
	lo, hi := 0.0, 0.0
	for i := range r {
		hi += r[i] * r[i]
	}
	if sum(0) <= freedom {
		return 0
	}
	for range 200 {
		mid := lo/2 + hi/2
		if sum(mid) > freedom {
			lo = mid
		} else {
			hi = mid
		}
	}
	return hi
}

// middle is the temperature of the greatest value.
func middle(w []Point) float64 {
	best := w[0]
	for _, v := range w {
		if v.Y > best.Y {
			best = v
		}
	}
	return best.T
}

// fit fits ln y of a, and of b where there is one with shift and height; dev are the
// points' standard deviations up to a factor.
func fit(a, b []Point, centre float64, dev []float64) (lsq.Result, error) {
	n := terms
	if b != nil {
		n += 2
	}
	const shift, height = terms, terms + 1
	x := func(p Point) float64 { return (p.T - centre) / 10 }
	p := lsq.Problem{
		M: len(a) + len(b), N: n,
		Residual: func(r, c []float64) error {
			for i, v := range a {
				y, _, _ := curve(c, x(v))
				r[i] = (y - math.Log(v.Y)) / dev[i]
			}
			for i, v := range b {
				y, _, _ := curve(c, x(v)-c[shift]/10)
				r[len(a)+i] = (y + c[height] - math.Log(v.Y)) / dev[len(a)+i]
			}
			return nil
		},
		Jacobian: func(j, c []float64) error {
			m := len(a) + len(b)
			put := func(i int, x float64) {
				d := dev[i]
				power := 1 / d
				for k := range terms {
					j[k*m+i] = power
					power *= x
				}
			}
			for i, v := range a {
				put(i, x(v))
				if b != nil {
					j[shift*m+i], j[height*m+i] = 0, 0
				}
			}
			for i, v := range b {
				z := x(v) - c[shift]/10
				put(len(a)+i, z)
				_, slope, _ := curve(c, z)
				j[shift*m+len(a)+i], j[height*m+len(a)+i] = -slope/10/dev[len(a)+i], 1/dev[len(a)+i]
			}
			return nil
		},
	}
	start := make([]float64, n)
	start[0], start[2] = math.Log(a[len(a)/2].Y), -0.1
	if b != nil {
		start[shift] = middle(b) - centre
	}
	r, err := lsq.Solve(p, start, nil)
	if err != nil {
		return r, err
	}
	if !r.Usable() || r.DegreesOfFreedom() < 1 {
		return r, fmt.Errorf("%w: %d for %d constants", ErrFew, p.M, n)
	}
	return r, nil
}

// reading is the maximum of a fitted curve with its interval: with p'(x) = 0,
// dx = −(∂p'/∂c · dc)/p”.
func reading(r lsq.Result, w []Point, centre float64, freedom int) (Peak, error) {
	x, bend, ok := top(r.X, (w[0].T-centre)/10, (w[len(w)-1].T-centre)/10)
	if !ok {
		return Peak{}, fmt.Errorf("%w: the curve through them has none from %.4g to %.4g", ErrNoPeak, w[0].T, w[len(w)-1].T)
	}
	cov, err := r.Covariance()
	if err != nil {
		return Peak{}, err
	}
	g := make([]float64, len(r.X))
	power := 1.0
	for k := 1; k < terms; k++ {
		g[k] = -10 * float64(k) * power / bend
		power *= x
	}
	value, _, _ := curve(r.X, x)
	return Peak{
		T: centre + 10*x, U95: quantile(freedom) * deviation(cov, g), Height: math.Exp(value),
		From: w[0].T, To: w[len(w)-1].T, N: len(w), Freedom: freedom, Coefficient: [terms]float64(r.X[:terms]), Centre: centre,
	}, nil
}

func quantile(freedom int) float64 {
	return distuv.StudentsT{Mu: 0, Sigma: 1, Nu: float64(freedom)}.Quantile(0.975)
}

// deviation is √(gᵀCg).
func deviation(cov, g []float64) float64 {
	var s float64
	for i := range g {
		for k := range g {
			s += g[i] * cov[i*len(g)+k] * g[k]
		}
	}
	return math.Sqrt(max(s, 0))
}

// Between reads how far the peak of b lies from that of a; scatter as in Find.
func Between(a, b []Point, scatter float64) (Shift, error) {
	wa, err := window(a)
	if err != nil {
		return Shift{}, fmt.Errorf("first batch: %w", err)
	}
	wb, err := window(b)
	if err != nil {
		return Shift{}, fmt.Errorf("second batch: %w", err)
	}
	var out Shift
	if out.A, err = Find(a, scatter); err != nil {
		return Shift{}, fmt.Errorf("first batch: %w", err)
	}
	if out.B, err = Find(b, scatter); err != nil {
		return Shift{}, fmt.Errorf("second batch: %w", err)
	}
	r, sigma, err := weighted(wa, wb, middle(wa), scatter)
	if err != nil {
		return Shift{}, err
	}
	cov, err := r.Covariance()
	if err != nil {
		return Shift{}, err
	}
	f := r.DegreesOfFreedom()
	out.N, out.Freedom, out.Scatter = len(wa)+len(wb), f, sigma
	t := quantile(f)
	uT, uH := math.Sqrt(cov[terms*(terms+2)+terms]), math.Sqrt(cov[(terms+1)*(terms+2)+terms+1])
	out.DT, out.U95 = r.X[terms], t*uT
	out.Ratio = math.Exp(r.X[terms+1])
	out.RatioU = t * uH * out.Ratio
	st := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: float64(f)}
	out.P = 2 * st.Survival(math.Abs(r.X[terms])/uT)
	// Seen in nine of ten cases: the quantiles of both errors, the second one a little
	// further out, because u is an estimate and a small one promises too much.
	out.SmallestDT = (t + st.Quantile(0.95)) * uT
	out.SmallestFactor = math.Exp((t + st.Quantile(0.95)) * uH)
	out.SameShape = sameShape(wa, wb, r, scatter)
	return out, nil
}

// sameShape is the F test of one shape against two.
func sameShape(wa, wb []Point, joint lsq.Result, scatter float64) float64 {
	// With the weights of neither: near enough for a test of shapes.
	ones := make([]float64, len(wa)+len(wb))
	for i := range ones {
		ones[i] = 1
	}
	ra, errA := fit(wa, nil, middle(wa), ones)
	rb, errB := fit(wb, nil, middle(wb), ones)
	if scatter > 0 {
		var err error
		if joint, err = fit(wa, wb, middle(wa), ones); err != nil {
			return math.NaN()
		}
	}
	f := len(wa) + len(wb) - 2*terms
	if errA != nil || errB != nil || f < 1 {
		return math.NaN()
	}
	separate := ra.Variance()*float64(ra.DegreesOfFreedom()) + rb.Variance()*float64(rb.DegreesOfFreedom())
	both := joint.Variance() * float64(joint.DegreesOfFreedom())
	if !(separate > 0) {
		return math.NaN()
	}
	v := max(both-separate, 0) / (terms - 2) / (separate / float64(f))
	return distuv.F{D1: terms - 2, D2: float64(f)}.Survival(v)
}
