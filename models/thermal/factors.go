package thermal

import (
	"math"
	"sort"
)

// Factors is the law "none": the shift factors themselves, with monotone cubic
// interpolation between the tested temperatures.
//
// Between knots T_i the cubic Hermite polynomial with the slopes of Fritsch and
// Butland (SIAM J. Sci. Stat. Comput. 5 (1984) 300) is taken: with secants
// δ_(i−1), δ_i of the same sign over steps h_(i−1), h_i,
//
//	d_i = δ_(i−1) δ_i / (w δ_i + (1−w) δ_(i−1)),  w = (h_(i−1) + 2 h_i)/(3 (h_(i−1)+h_i))
//
// and zero where the secants differ in sign; at the ends the end secant. It is
// monotone where the factors are and linear in none of them, so that Gradient
// carries the derivative of the slopes too. Outside the knots the end value
// continues along the end slope; the domain of a compound does not reach there.
type Factors struct {
	T   []float64 // K, strictly increasing, at least one
	Log []float64 // log10 a_T, as many
}

// secants returns step and secant of interval i.
func (f Factors) secant(i int) (h, delta float64) {
	h = f.T[i+1] - f.T[i]
	return h, (f.Log[i+1] - f.Log[i]) / h
}

// knotSlope returns d_i and its derivatives with respect to Log[i-1], Log[i],
// Log[i+1] (zero where such a knot does not exist).
func (f Factors) knotSlope(i int) (d float64, g [3]float64) {
	n := len(f.T)
	switch {
	case n == 1:
		return 0, g
	case i == 0:
		h, s := f.secant(0)
		return s, [3]float64{0, -1 / h, 1 / h}
	case i == n-1:
		h, s := f.secant(n - 2)
		return s, [3]float64{-1 / h, 1 / h, 0}
	}
	h0, s0 := f.secant(i - 1)
	h1, s1 := f.secant(i)
	if s0*s1 <= 0 {
		return 0, g
	}
	w := (h0 + 2*h1) / (3 * (h0 + h1))
	q := w*s1 + (1-w)*s0
	d = s0 * s1 / q
	// ∂d/∂s0 = s1/q − s0 s1 (1−w)/q² = w s1²/q², and alike for s1.
	g0 := w * s1 * s1 / (q * q)
	g1 := (1 - w) * s0 * s0 / (q * q)
	return d, [3]float64{-g0 / h0, g0/h0 - g1/h1, g1 / h1}
}

// interval returns the interval of T, clamped, for at least two knots.
func (f Factors) interval(T float64) int {
	i := sort.SearchFloat64s(f.T, T) - 1
	return max(0, min(i, len(f.T)-2))
}

// LogShift interpolates log10 a_T.
func (f Factors) LogShift(T float64) float64 {
	if len(f.T) == 1 {
		return f.Log[0]
	}
	n := len(f.T)
	if T <= f.T[0] {
		d, _ := f.knotSlope(0)
		return f.Log[0] + d*(T-f.T[0])
	}
	if T >= f.T[n-1] {
		d, _ := f.knotSlope(n - 1)
		return f.Log[n-1] + d*(T-f.T[n-1])
	}
	i := f.interval(T)
	h := f.T[i+1] - f.T[i]
	u := (T - f.T[i]) / h
	d0, _ := f.knotSlope(i)
	d1, _ := f.knotSlope(i + 1)
	h00, h10, h01, h11 := hermite(u)
	return h00*f.Log[i] + h*h10*d0 + h01*f.Log[i+1] + h*h11*d1
}

// Slope is d log10 a_T/dT, 1/K.
func (f Factors) Slope(T float64) float64 {
	n := len(f.T)
	if n == 1 {
		return 0
	}
	if T <= f.T[0] || T >= f.T[n-1] {
		i := 0
		if T >= f.T[n-1] {
			i = n - 1
		}
		d, _ := f.knotSlope(i)
		return d
	}
	i := f.interval(T)
	h := f.T[i+1] - f.T[i]
	u := (T - f.T[i]) / h
	d0, _ := f.knotSlope(i)
	d1, _ := f.knotSlope(i + 1)
	s := 6*u*u - 6*u
	return s*(f.Log[i]-f.Log[i+1])/h + (3*u*u-4*u+1)*d0 + (3*u*u-2*u)*d1
}

// Gradient writes the derivative of LogShift(T) by every factor.
func (f Factors) Gradient(T float64, g []float64) {
	clear(g)
	n := len(f.T)
	if n == 1 {
		g[0] = 1
		return
	}
	add := func(knot int, weight float64) {
		_, dg := f.knotSlope(knot)
		for k, v := range dg {
			if j := knot - 1 + k; j >= 0 && j < n {
				g[j] += weight * v
			}
		}
	}
	if T <= f.T[0] {
		g[0] = 1
		add(0, T-f.T[0])
		return
	}
	if T >= f.T[n-1] {
		g[n-1] = 1
		add(n-1, T-f.T[n-1])
		return
	}
	i := f.interval(T)
	h := f.T[i+1] - f.T[i]
	u := (T - f.T[i]) / h
	h00, h10, h01, h11 := hermite(u)
	g[i] += h00
	g[i+1] += h01
	add(i, h*h10)
	add(i+1, h*h11)
}

func hermite(u float64) (h00, h10, h01, h11 float64) {
	v := 1 - u
	return (1 + 2*u) * v * v, u * v * v, u * u * (3 - 2*u), -u * u * v
}

// Monotone reports whether the factors fall strictly with temperature, as
// those of a sound material do.
func (f Factors) Monotone() bool {
	for i := 1; i < len(f.Log); i++ {
		if !(f.Log[i] < f.Log[i-1]) {
			return false
		}
	}
	return true
}

// Density is the vertical factor b_T by which the polymer's modulus at the
// reference temperature is multiplied to get that at T:
//
//	b_T = ρT/(ρ0T0) = (T/T0)/(1 + α (T − T0))
//
// with the volume expansion α. It is the reciprocal of the reduction factor
// ρ0T0/(ρT) that turns a measured modulus into a reduced one (Ferry, ch. 11;
// from memory). It belongs to rubber elasticity and not to glass.
type Density struct {
	Expansion float64 // α, 1/K
	Reference float64 // T0, K
}

// Factor is b_T.
func (d Density) Factor(T float64) float64 {
	return T / d.Reference / (1 + d.Expansion*(T-d.Reference))
}

// Slope is db_T/dT, 1/K.
func (d Density) Slope(T float64) float64 {
	q := 1 + d.Expansion*(T-d.Reference)
	return (1 - d.Expansion*d.Reference) / (d.Reference * q * q)
}

// LinearStart is the straight line (T−T0)/log a_T = −C2/C1 − (T−T0)/C1 through
// given shift factors, a start for a fit of WLF. ok is false where it has no
// sense (fewer than two temperatures besides the reference, C1 or C2 not
// positive).
func LinearStart(T, logA []float64, reference float64) (w WLF, ok bool) {
	var n, sx, sy, sxx, sxy float64
	for i := range T {
		d := T[i] - reference
		if d == 0 || logA[i] == 0 || math.IsNaN(logA[i]) {
			continue
		}
		y := d / logA[i]
		n++
		sx += d
		sy += y
		sxx += d * d
		sxy += d * y
	}
	det := n*sxx - sx*sx
	if n < 2 || det <= 0 {
		return WLF{}, false
	}
	slope := (n*sxy - sx*sy) / det
	intercept := (sy - slope*sx) / n
	w = WLF{C1: -1 / slope, C2: intercept / slope, Reference: reference}
	return w, w.C1 > 0 && w.C2 > 0 && !math.IsInf(w.C1, 0)
}
