package models

import (
	"fmt"
	"math"
	"math/cmplx"
	"strings"

	"phaselag/models/amplitude"
	"phaselag/models/thermal"
)

// Condition is where a modulus is wanted.
type Condition struct {
	Frequency   float64 // Hz, positive
	Temperature float64 // K
	// Strain is the single amplitude of the energy-equivalent shear strain,
	// m/m; NaN means the isotherms' own amplitude.
	Strain float64
}

// Modulus is a complex modulus with the half-widths of its 95 % intervals.
type Modulus struct {
	Storage, Loss, Magnitude float64 // Pa
	LossFactor               float64
	StorageU95, LossU95      float64 // Pa
	MagnitudeU95             float64 // Pa
	LossFactorU95            float64
	ReducedFrequency         float64 // f·a_T, Hz
	// Domain is "inside", or "extrapolated: " and the quantities that lie
	// outside the domain.
	Domain string
}

// Modulus answers at one condition, with intervals. Outside the domain it
// returns an *OutsideError and no number; a condition that is no condition
// (frequency not positive, temperature below 0 K) is an error too.
func (c *Compound) Modulus(q Condition) (Modulus, error) {
	if err := c.Inside(q); err != nil {
		return Modulus{}, err
	}
	return c.answer(q, "inside")
}

// Extrapolate answers like Modulus, also outside the domain, and then says so
// in Domain. The intervals do not cover what the model cannot know there.
func (c *Compound) Extrapolate(q Condition) (Modulus, error) {
	err := c.Inside(q)
	if err == nil {
		return c.answer(q, "inside")
	}
	out, isOutside := err.(*OutsideError)
	if !isOutside {
		return Modulus{}, err
	}
	return c.answer(q, "extrapolated: "+strings.Join(out.Quantities, "|"))
}

func (c *Compound) answer(q Condition, domain string) (Modulus, error) {
	m := c.interval(q)
	m.Domain = domain
	if !(m.Storage > 0) || math.IsInf(m.Storage, 0) || math.IsInf(m.ReducedFrequency, 0) {
		return Modulus{}, fmt.Errorf("the model has no value at %s: beyond the pole of the shift law or of the frequency law of the filler", describe(q))
	}
	return m, nil
}

func describe(q Condition) string {
	return fmt.Sprintf("%.4g Hz, %.4g °C", q.Frequency, q.Temperature-zeroC)
}

// shift is a_T.
func (c *Compound) shift(T float64) float64 { return c.derived.shift(T) }

func (d *derived) shift(T float64) float64 {
	if d.wlf != nil {
		return math.Exp(thermal.Ln10 * d.wlf.LogShift(T))
	}
	if d.law == nil {
		return 1
	}
	return math.Exp(thermal.Ln10 * d.law.LogShift(T))
}

// LogShift is log10 a_T at T in kelvin by the compound's law.
func (c *Compound) LogShift(T float64) float64 { return math.Log10(c.shift(T)) }

// vertical is b_T and db_T/dT.
func (d *derived) verticalAt(T float64) (b, slope float64) {
	switch {
	case d.density != nil:
		return d.density.Factor(T), d.density.Slope(T)
	case d.vertical != nil:
		b = math.Exp(d.vertical.LogShift(T))
		return b, b * d.vertical.Slope(T)
	}
	return 1, 0
}

// at is F*(γ, f)·φ(T).
func (f *filler) at(freq, T, gamma float64) complex128 {
	k1, k2, k3 := f.law.Shares(gamma)
	phi := f.arrhenius.Factor(T)
	loss := f.loss*k2 + f.extra*k3
	return complex(phi*(f.storage*k1+loss*amplitude.FrequencyPart(f.kappa, freq, f.f0)), phi*loss)
}

// with puts the filler term to the polymer term g.
func (f *filler) with(g, term complex128) complex128 {
	if f.scaling {
		return g * (1 + term)
	}
	return g + term
}

// Value is G*(f, T, γ) in Pa, without interval, without a look at the domain
// and without allocation. At and below the pole of the shift law it is NaN.
func (c *Compound) Value(q Condition) complex128 {
	d := &c.derived
	a := d.shift(q.Temperature)
	if math.IsInf(a, 1) {
		return cmplx.NaN()
	}
	g := d.spectrum.Modulus(2 * math.Pi * q.Frequency * a)
	if b, _ := d.verticalAt(q.Temperature); b != 1 {
		g *= complex(b, 0)
	}
	if d.filler != nil {
		g = d.filler.with(g, d.filler.at(q.Frequency, q.Temperature, c.strain(q)))
	}
	return g
}

func (c *Compound) strain(q Condition) float64 {
	if math.IsNaN(q.Strain) {
		return float64(c.Domain.OwnStrain) / 100
	}
	return q.Strain
}
