package waveform

import (
	"math"
	"math/cmplx"
)

// Record is one record: slices of equal length.
type Record struct {
	Time         []float64 // s, increasing
	Force        []float64 // N, or N·m
	Displacement []float64 // m, or rad
}

// Result is what one record or segment says. The names with U are standard
// uncertainties.
type Result struct {
	Frequency, UFrequency float64 // Hz; the uncertainty is 0 where Known
	Force, Displacement   Channel

	Stiffness               complex128 // K* in N/m (or N·m/rad)
	UStorage, ULoss         float64    // of its real and imaginary part
	Magnitude, UMagnitude   float64    // |K*|
	LossAngle, ULossAngle   float64    // δ in rad, in (-π, π]
	LossFactor, ULossFactor float64    // tan δ; at |δ| near π/2 its uncertainty says nothing

	Energy, UEnergy float64 // π F0 x0 sin δ, N·m per cycle
	// LoopEnergy is the integral of force over displacement round the loop, from
	// all harmonics fitted: Σ π h F_h x_h sin(φ_Fh - φ_xh).
	LoopEnergy float64
	// Nonlinearity is the amplitude of the force's third harmonic over that of
	// its fundamental; NaN where it was not fitted.
	Nonlinearity, UNonlinearity float64
	// Correlation of the two channels' noise.
	Correlation float64

	Start, End float64 // s, first and last sample used
	Cycles     float64 // in between
	PerCycle   float64 // samples a cycle as given
	Counts     Counts
	Streamed   bool // the record was longer than the buffer
	Harmonics  int  // the highest harmonic fitted
	Doubts     []Doubt
}

// Counts says what became of the samples.
type Counts struct {
	Given    int // as added
	Missing  int // given with a NaN or an infinity
	Lost     int // not given: the length of the gaps in time
	Backward int // given with a time before that of the sample before, left out
	LeftOut  int // of the transient, or at rest before the motion
	Used     int // in the fit
	Averaged int // so many samples were averaged into one, 1 for none
}

// Usable reports whether no doubt is severe.
func (r *Result) Usable() bool {
	for _, d := range r.Doubts {
		if d.Severity == Severe {
			return false
		}
	}
	return true
}

// derive fills in what follows from the fit.
func (r *Result) derive(d *derivation) {
	s := d.s
	r.Frequency = s.frame.omega / (2 * math.Pi)
	r.UFrequency = math.Sqrt(s.varK) / s.frame.scale / (2 * math.Pi)
	r.Force, r.Displacement = d.channel(0), d.channel(1)
	r.Harmonics = s.layout.harmonics

	F, x := d.phasor(0, 1), d.phasor(1, 1)
	k := d.attenuation(1)
	K := F / x
	r.Stiffness = K
	r.Magnitude = cmplx.Abs(K)
	r.LossAngle = phaseOf(F * cmplx.Conj(x))
	r.LossFactor = imag(K) / real(K)
	// Partial derivatives of K with respect to A_F, B_F, A_x, B_x.
	dK := [4]complex128{1 / x, -1i / x, -K / x, 1i * K / x}
	u := func(weight func(complex128) float64) float64 {
		var t []term
		for i, v := range dK {
			t = append(t, term{i / 2, i % 2, weight(v) / k})
		}
		return d.u(t...)
	}
	r.UStorage = u(func(v complex128) float64 { return real(v) })
	r.ULoss = u(func(v complex128) float64 { return imag(v) })
	r.UMagnitude = u(func(v complex128) float64 { return real(v*cmplx.Conj(K)) / r.Magnitude })
	r.ULossAngle = u(func(v complex128) float64 { return imag(v / K) })
	r.ULossFactor = r.ULossAngle * (1 + r.LossFactor*r.LossFactor)

	// Im(F x̄) = A_F B_x - B_F A_x.
	r.Energy = math.Pi * imag(F*cmplx.Conj(x))
	p := math.Pi / k
	r.UEnergy = d.u(term{0, 0, -p * imag(x)}, term{0, 1, -p * real(x)}, term{1, 0, p * imag(F)}, term{1, 1, p * real(F)})
	for h := 1; h <= s.layout.harmonics; h++ {
		r.LoopEnergy += math.Pi * float64(h) * imag(d.phasor(0, h)*cmplx.Conj(d.phasor(1, h)))
	}
	r.Nonlinearity, r.UNonlinearity = math.NaN(), math.NaN()
	if s.layout.harmonics >= 3 {
		a, ua := d.amplitude(0, 3)
		r.Nonlinearity = a / r.Force.Amplitude
		r.UNonlinearity = ua / r.Force.Amplitude
	}
	r.Correlation = s.sigma[0][1] / math.Sqrt(s.sigma[0][0]*s.sigma[1][1])
	if !(math.Abs(r.Correlation) <= 1) {
		r.Correlation = math.NaN()
	}
}
