package mount

import (
	"errors"
	"math"
	"math/cmplx"
)

// A mass on the mounts
//
// With the mass M on a complex stiffness K*(f, T, x), x the amplitude across the
// mounts and a = (2πf)²M,
//
//	force F on the mass      x·|K* − a| = F,      transmitted force/F    = |K*/(K* − a)|
//	base moving by X         x·|K* − a| = a·X,    motion of the mass/X   = |K*/(K* − a)|
//
// so that both have the same transmissibility; for a constant K* it is
// √((1+η²)/((1−r²)²+η²)), r² = a/K'. Since K* depends on x the amplitude is found
// together with the response. A compound that softens with strain bends the resonance
// over to lower frequencies, and up to three amplitudes may satisfy the same
// equation; all of them are given.
//
// The undamped natural frequency is a solution of (2πf)²M = K'(f, T, x): K' rises with f,
// slower than f², so there is one at most for a given x wherever it does.

// Drive is what shakes the mass, single amplitude; exactly one is not NaN.
type Drive struct {
	Force      float64 // N, on the mass
	Base       float64 // m, motion of the base
	Deflection float64 // m, held across the mounts, whatever causes it
}

// Response is one steady answer.
type Response struct {
	State
	// Transmissibility is the transmitted force over the force, or the motion of the
	// mass over that of the base.
	Transmissibility float64
	// Heat is the power that the rubber of all mounts turns into heat, W:
	// π f K″ x².
	Heat float64
}

// The amplitudes that are tried: from farBelow to farAbove times that of the drive
// on the stiffness at small amplitude.
const (
	scanSteps = 400
	farBelow  = 1e-3
	farAbove  = 1e3
	// most is the largest strain amplitude that is tried.
	mostStrain = 10
)

// ErrNoResponse says that no amplitude satisfies the equation of motion within
// what was tried.
var ErrNoResponse = errors.New("mount: no steady amplitude was found")

// ErrNoMass says that the mount file states no load.
var ErrNoMass = errors.New("mount: no mass is stated")

// Respond gives every steady response at a frequency in Hz and a temperature in K,
// smallest amplitude first.
func (m *Mount) Respond(material Material, hertz, kelvin float64, d Drive) ([]Response, error) {
	if m.Rotates() {
		return nil, ErrRotates
	}
	if !(m.Mass > 0) {
		return nil, ErrNoMass
	}
	p := m.prepare(kelvin)
	a := math.Pow(2*math.Pi*hertz, 2) * m.Mass
	answer := func(x float64) (Response, error) {
		s, err := p.displaced(material, hertz, x)
		if err != nil {
			return Response{}, err
		}
		return Response{s, cmplx.Abs(s.Stiffness / (s.Stiffness - complex(a, 0))), math.Pi * hertz * imag(s.Stiffness) * x * x}, nil
	}
	if !math.IsNaN(d.Deflection) {
		r, err := answer(d.Deflection)
		return []Response{r}, err
	}
	drive := d.Force
	if math.IsNaN(drive) {
		drive = a * d.Base
	}
	// h(x) changes its sign at every answer.
	h := func(x float64) float64 {
		s, err := p.displaced(material, hertz, x)
		if err != nil {
			return math.NaN()
		}
		strain := 0.0
		for _, l := range s.Leaves {
			strain = max(strain, l.Strain)
		}
		if strain > mostStrain {
			return math.NaN()
		}
		return math.Log(x * cmplx.Abs(s.Stiffness-complex(a, 0)) / drive)
	}
	small, err := p.displaced(material, hertz, 1e-9)
	if err != nil {
		return nil, err
	}
	near := drive / cmplx.Abs(small.Stiffness-complex(a, 0))
	var out []Response
	last, lastH := 0.0, math.NaN()
	for i := range scanSteps + 1 {
		x := near * farBelow * math.Pow(farAbove/farBelow, float64(i)/scanSteps)
		v := h(x)
		if !math.IsNaN(v) && !math.IsNaN(lastH) && (v >= 0) != (lastH >= 0) {
			r, err := answer(bisect(h, last, x))
			if err != nil {
				return nil, err
			}
			out = append(out, r)
		}
		last, lastH = x, v
	}
	if len(out) == 0 {
		return nil, ErrNoResponse
	}
	return out, nil
}

// bisect finds a zero of h, which changes its sign between lo and hi, to 1e-14 of
// itself.
func bisect(h func(float64) float64, lo, hi float64) float64 {
	below := h(lo) < 0
	for range 200 {
		mid := math.Sqrt(lo * hi)
		if hi-lo <= 1e-14*hi || mid <= lo || mid >= hi {
			break
		}
		if (h(mid) < 0) == below {
			lo = mid
		} else {
			hi = mid
		}
	}
	return math.Sqrt(lo * hi)
}

// Natural gives the undamped natural frequencies, Hz, of the mass on the mounts between
// two frequencies at an amplitude across the mounts in m.
func (m *Mount) Natural(material Material, lo, hi, kelvin, x float64) ([]float64, error) {
	if m.Rotates() {
		return nil, ErrRotates
	}
	if !(m.Mass > 0) {
		return nil, ErrNoMass
	}
	p := m.prepare(kelvin)
	h := func(f float64) float64 {
		s, err := p.displaced(material, f, x)
		if err != nil || !(real(s.Stiffness) > 0) {
			return math.NaN()
		}
		w := 2 * math.Pi * f
		return math.Log(w * w * m.Mass / real(s.Stiffness))
	}
	var out []float64
	steps := int(math.Ceil(20*math.Log10(hi/lo))) + 1
	last, lastH := 0.0, math.NaN()
	for i := range steps + 1 {
		f := lo * math.Pow(hi/lo, float64(i)/float64(steps))
		v := h(f)
		if !math.IsNaN(v) && !math.IsNaN(lastH) && (v >= 0) != (lastH >= 0) {
			out = append(out, bisect(h, last, f))
		}
		last, lastH = f, v
	}
	return out, nil
}

// Required is what an isolation needs of a support with loss factor eta: the ratio r
// of the disturbing to the natural frequency with √((1+η²)/((1−r²)²+η²)) = 1 −
// isolation, above resonance. NaN for an isolation outside 0 to 1.
func Required(isolation, eta float64) (r float64) {
	T := 1 - isolation
	if !(T > 0 && T < 1) {
		return math.NaN()
	}
	return math.Sqrt(1 + math.Sqrt((1+eta*eta)/(T*T)-eta*eta))
}
