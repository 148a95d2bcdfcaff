package models

import (
	"fmt"
	"math"
)

// Readings of the glass transition.
//
// A glass transition temperature is a reading by a definition, at a frequency. Two are
// in common use (ISO 6721-11 knows both; from memory): the temperature T* at which
// the loss factor, or the loss modulus, has its peak,
//
//	y(T) = tan δ(f, T, γ)  or  G″(f, T, γ),      y_T(T*) = 0,  y_TT(T*) < 0,
//
// with f and γ fixed. They differ by several kelvin from each other, and by 3 to 7 K
// for a decade of frequency.
//
// Interval. The slope y_T at a temperature T is an answer of the compound like any
// other, with the gradient g(T) = ∂y_T/∂p and the standard uncertainty √(gᵀCg). A
// temperature could be that of the peak if the slope there may be zero, so the 95 %
// interval is the stretch around T* where
//
//	|y_T(T)| ≤ t(0.975, ν)·√(gᵀCg)
//
// (the argument of Fieller, J. R. Stat. Soc. B 16 (1954) 175, for the zero of a
// straight line; from memory). It is not symmetric where the peak is not, and it has no
// end where the peak is too flat to be told. For a sharp peak it becomes the delta
// method's
//
//	U95 = t(0.975, ν)·√(gᵀCg)/|y_TT|   at T*,
//
// by dT*/dp = −g/y_TT.
//
// Derivatives by T are central differences of five points with h = 0.1 K: the error,
// h⁴/30 of the fifth derivative, is below 1e-6 of the slope for a peak 5 K wide or
// wider; those by p are closed forms.
//
// A peak counts only where the measurements show it: the highest value over all
// temperatures inside the domain at f must have lower ones on both sides, and the
// interval must end before the domain does.

// Reading names a definition of the glass transition temperature.
type Reading int

// The definitions.
const (
	PeakOfLossFactor Reading = iota
	PeakOfLossModulus
)

// Transition is a reading of the glass transition at one frequency.
type Transition struct {
	Reading     Reading
	Frequency   float64 // Hz
	Temperature float64 // K
	// U95 is the half-width of the 95 % interval by the delta method, K.
	U95 float64
	// Low and High are the ends of the 95 % interval by the slope, K.
	Low, High float64
	// Height is the value at the peak: a loss factor, or a modulus in Pa; HeightU95 the
	// half-width of its 95 % interval.
	Height, HeightU95 float64
}

// NoPeakError says why there is no reading.
type NoPeakError struct {
	Reading   Reading
	Frequency float64 // Hz
	Reason    string
}

func (e *NoPeakError) Error() string {
	what := "tan δ"
	if e.Reading == PeakOfLossModulus {
		what = "the loss modulus"
	}
	return fmt.Sprintf("no peak of %s at %.4g Hz inside the domain: %s", what, e.Frequency, e.Reason)
}

const (
	// transitionStep is the distance of the temperatures that are tried for a peak, K.
	transitionStep = 0.5
	// transitionH is the step of the differences by temperature, K.
	transitionH = 0.1
)

// Transition reads the glass transition at a frequency in Hz and a strain amplitude in
// m/m, NaN for the isotherms' own. It returns a *NoPeakError where the domain holds no
// peak.
func (c *Compound) Transition(reading Reading, hertz, strain float64) (Transition, error) {
	if reading != PeakOfLossFactor && reading != PeakOfLossModulus {
		panic("models: no such reading of the glass transition")
	}
	none := func(format string, a ...any) (Transition, error) {
		return Transition{}, &NoPeakError{reading, hertz, fmt.Sprintf(format, a...)}
	}
	lo, hi, err := c.Temperatures(hertz, strain)
	if err != nil {
		return Transition{}, err
	}
	if !(hi-lo > 4*transitionStep) {
		return none("the domain has no stretch of temperatures at this frequency")
	}
	p := newTransitionCurve(c, reading, hertz, strain)
	n := int(math.Ceil((hi - lo) / transitionStep))
	at := func(i int) float64 { return lo + (hi-lo)*float64(i)/float64(n) }
	best, height := 0, math.Inf(-1)
	for i := range n + 1 {
		if y := p.value(at(i)); y > height {
			best, height = i, y
		}
	}
	switch best {
	case 0:
		return none("it still rises towards the coldest, %.4g °C", celsius(lo))
	case n:
		return none("it still rises towards the warmest, %.4g °C", celsius(hi))
	}
	T := zeroOf(p.slope, at(best-1), at(best+1))
	curvature := p.curvature(T)
	if !(curvature < 0) {
		return none("the curve has an edge there, not a peak")
	}
	t := c.Quantile()
	out := Transition{Reading: reading, Frequency: hertz, Temperature: T, U95: t * p.slopeU(T) / -curvature, Height: p.value(T), HeightU95: t * p.valueU(T)}
	// open(T) > 0: the slope at T cannot be zero.
	open := func(T float64) float64 { return math.Abs(p.slope(T)) - t*p.slopeU(T) }
	end := func(step, edge float64) (float64, bool) {
		for last := T; ; {
			next := last + step
			if step < 0 && next <= edge || step > 0 && next >= edge {
				next = edge
			}
			if open(next) > 0 {
				return zeroOf(open, last, next), true
			}
			if next == edge {
				return edge, false
			}
			last = next
		}
	}
	var cold, warm bool
	out.Low, cold = end(-transitionStep, lo)
	out.High, warm = end(transitionStep, hi)
	if !cold || !warm {
		return none("the 95 %% interval of its peak at %.4g °C reaches beyond the domain, or the peak is too flat to be told", math.Round(10*(T-zeroC))/10)
	}
	return out, nil
}

// Temperatures is the stretch of temperatures, K, inside the domain at a frequency in
// Hz and a strain amplitude (NaN: the isotherms' own), the longest if there are
// several; both are NaN if there is none. An error is a condition that is none.
func (c *Compound) Temperatures(hertz, strain float64) (lo, hi float64, err error) {
	inside := func(T float64) bool {
		return c.Inside(Condition{Frequency: hertz, Temperature: T, Strain: strain}) == nil
	}
	a, b := c.Domain.Temperature[0]+zeroC, c.Domain.Temperature[1]+zeroC
	if err := c.Inside(Condition{Frequency: hertz, Temperature: a, Strain: strain}); err != nil {
		if _, outside := err.(*OutsideError); !outside {
			return math.NaN(), math.NaN(), err
		}
	}
	n := max(1, int(math.Ceil((b-a)/transitionStep)))
	at := func(i int) float64 {
		if i == n {
			return b
		}
		return a + (b-a)*float64(i)/float64(n)
	}
	// edge is the last temperature inside between one inside and one outside.
	edge := func(in, out float64) float64 {
		for range 60 {
			if mid := in + (out-in)/2; inside(mid) {
				in = mid
			} else {
				out = mid
			}
		}
		return in
	}
	lo, hi = math.NaN(), math.NaN()
	for i := 0; i <= n; i++ {
		if !inside(at(i)) {
			continue
		}
		first := i
		for i < n && inside(at(i+1)) {
			i++
		}
		x, y := at(first), at(i)
		if first > 0 {
			x = edge(x, at(first-1))
		}
		if i < n {
			y = edge(y, at(i+1))
		}
		if !(hi-lo >= y-x) {
			lo, hi = x, y
		}
	}
	return lo, hi, nil
}

// transitionCurve is y(T) with its derivatives.
type transitionCurve struct {
	c       *Compound
	reading Reading
	q       Condition
	g       []complex128
	part    []float64
}

func newTransitionCurve(c *Compound, reading Reading, hertz, strain float64) *transitionCurve {
	n := len(c.derived.params)
	return &transitionCurve{c: c, reading: reading, q: Condition{Frequency: hertz, Strain: strain}, g: make([]complex128, n), part: make([]float64, n)}
}

func (p *transitionCurve) value(T float64) float64 {
	p.q.Temperature = T
	g := p.c.Value(p.q)
	if p.reading == PeakOfLossModulus {
		return imag(g)
	}
	return imag(g) / real(g)
}

// add adds w·∂y/∂p at T to part.
func (p *transitionCurve) add(T, w float64) {
	p.q.Temperature = T
	v := p.c.Gradient(p.q, p.g)
	eta := imag(v) / real(v)
	for i, g := range p.g {
		if p.reading == PeakOfLossModulus {
			p.part[i] += w * imag(g)
		} else {
			p.part[i] += w * (imag(g) - eta*real(g)) / real(v)
		}
	}
}

func (p *transitionCurve) valueU(T float64) float64 {
	clear(p.part)
	p.add(T, 1)
	return p.c.Deviation(p.part)
}

// The differences of five points: y' = [8(y₁ − y₋₁) − (y₂ − y₋₂)]/12h and
// y″ = [16(y₁ + y₋₁) − (y₂ + y₋₂) − 30y₀]/12h² (Abramowitz and Stegun 25.3; from memory).

func (p *transitionCurve) slope(T float64) float64 {
	const h = transitionH
	return (8*(p.value(T+h)-p.value(T-h)) - (p.value(T+2*h) - p.value(T-2*h))) / (12 * h)
}

func (p *transitionCurve) curvature(T float64) float64 {
	const h = transitionH
	return (16*(p.value(T+h)+p.value(T-h)) - (p.value(T+2*h) + p.value(T-2*h)) - 30*p.value(T)) / (12 * h * h)
}

// slopeU is the standard uncertainty of the slope.
func (p *transitionCurve) slopeU(T float64) float64 {
	const h = transitionH
	clear(p.part)
	for _, v := range [...]struct{ d, w float64 }{{h, 8}, {-h, -8}, {2 * h, -1}, {-2 * h, 1}} {
		p.add(T+v.d, v.w/(12*h))
	}
	return p.c.Deviation(p.part)
}

// zeroOf halves the interval between a and b, where f changes its sign, until it is
// 1e-9 K long.
func zeroOf(f func(float64) float64, a, b float64) float64 {
	positive := f(a) > 0
	for range 60 {
		mid := a + (b-a)/2
		if math.Abs(b-a) < 1e-9 {
			break
		}
		if (f(mid) > 0) == positive {
			a = mid
		} else {
			b = mid
		}
	}
	return a + (b-a)/2
}
