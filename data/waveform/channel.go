package waveform

import (
	"math"
	"math/cmplx"
)

// Channel is what was found in one channel. Its unit is that of the samples.
type Channel struct {
	Amplitude, UAmplitude float64 // of the fundamental, half of peak to peak
	Phase, UPhase         float64 // rad, at the first sample used
	A, B                  float64 // cosine and sine part at the first sample used
	Mean                  float64 // of the trend over the record
	Drift                 float64 // of the mean from the first sample to the last; 0 without a trend
	Harmonics             []Harmonic
	Residual              float64 // rms of the residuals, √(RSS/N)
	Noise                 float64 // standard deviation of the noise, √(RSS/degrees of freedom)
}

// Harmonic is one harmonic of a channel.
type Harmonic struct {
	Order                 int // 2 and up
	Amplitude, UAmplitude float64
	Phase                 float64 // rad, at the first sample used, of cos(orderω(t-t0)+phase)
}

// derivation turns a solution into quantities and their uncertainties.
type derivation struct {
	s     *solution
	start float64 // s, where phases are zero
	mean  int     // samples averaged into one; 0 or 1: none
	gain  float64 // of white noise by the averaging: √mean
	dt    float64 // s, between samples before averaging
}

// attenuation is what averaging over the even times of one group leaves of a
// harmonic: sin(m h ω dt/2)/(m sin(h ω dt/2)).
func (d *derivation) attenuation(h int) float64 {
	if d.mean <= 1 {
		return 1
	}
	x := float64(h) * d.s.frame.omega * d.dt / 2
	a := math.Sin(float64(d.mean)*x) / (float64(d.mean) * math.Sin(x))
	if !(math.Abs(a) > 0.1) {
		return 1
	}
	return a
}

// phasor returns harmonic h of channel c at the centre of the record: A - iB.
func (d *derivation) phasor(c, h int) complex128 {
	b := d.s.b[c]
	return complex(b[2*h-2], -b[2*h-1]) / complex(d.attenuation(h), 0)
}

// cov is the covariance of the base parameters i of channel c and k of channel e;
// index -1 stands for ωL.
func (d *derivation) cov(c, i, e, k int) float64 {
	s := d.s
	g := func(c, i int) float64 {
		if i < 0 {
			return 1
		}
		return -s.g[c][i]
	}
	var v float64
	if s.varK > 0 {
		v = g(c, i) * g(e, k) * s.varK
	}
	if i >= 0 && k >= 0 {
		v += s.sigma[c][e] * s.unit[i*s.layout.base()+k]
	}
	return v
}

// term is one partial derivative, with respect to parameter i of channel c.
type term struct {
	c, i int
	d    float64
}

// u is the standard uncertainty of a quantity with these partial derivatives.
func (d *derivation) u(terms ...term) float64 {
	var v float64
	for _, a := range terms {
		for _, b := range terms {
			v += a.d * b.d * d.cov(a.c, a.i, b.c, b.i)
		}
	}
	return math.Sqrt(math.Max(v, 0))
}

// amplitude and its uncertainty.
func (d *derivation) amplitude(c, h int) (a, u float64) {
	z := d.phasor(c, h)
	a = cmplx.Abs(z)
	k := d.attenuation(h)
	if a == 0 {
		return 0, d.u(term{c, 2*h - 2, 1 / k})
	}
	return a, d.u(term{c, 2*h - 2, real(z) / a / k}, term{c, 2*h - 1, -imag(z) / a / k})
}

// phaseTerms are the partial derivatives of the fundamental's phase at the centre
// of the record, times sign.
func (d *derivation) phaseTerms(c int, sign float64) []term {
	A, B := d.s.b[c][0], d.s.b[c][1]
	a2 := A*A + B*B
	return []term{{c, 0, sign * B / a2}, {c, 1, -sign * A / a2}}
}

func (d *derivation) channel(c int) Channel {
	s := d.s
	lead := d.start - s.frame.center // before the centre: negative
	turn := cmplx.Rect(1, s.frame.omega*lead)
	z := d.phasor(c, 1) * turn
	ch := Channel{
		A: real(z), B: -imag(z), Phase: phaseOf(z),
		Residual: d.gain * math.Sqrt(s.rss[c][c]/float64(s.n)),
		Noise:    d.gain * math.Sqrt(s.sigma[c][c]),
	}
	ch.Amplitude, ch.UAmplitude = d.amplitude(c, 1)
	ch.UPhase = d.u(append(d.phaseTerms(c, 1), term{c, -1, lead / s.frame.scale})...)
	p := s.b[c][2*s.layout.harmonics:]
	ch.Mean = p[0]
	if s.layout.trend >= 1 {
		ch.Drift = 2 * p[1]
	}
	if s.layout.trend == 2 {
		ch.Mean += p[2] / 3
	}
	for h := 2; h <= s.layout.harmonics; h++ {
		x := Harmonic{Order: h, Phase: phaseOf(d.phasor(c, h) * cmplx.Rect(1, float64(h)*s.frame.omega*lead))}
		x.Amplitude, x.UAmplitude = d.amplitude(c, h)
		ch.Harmonics = append(ch.Harmonics, x)
	}
	return ch
}

// phaseOf returns the angle in (-π, π], 0 for 0.
func phaseOf(z complex128) float64 {
	p := cmplx.Phase(z)
	if p == -math.Pi {
		return math.Pi
	}
	return p
}
