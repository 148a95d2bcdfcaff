package models

import (
	"fmt"
	"math"
	"math/cmplx"
	"strings"

	"gonum.org/v1/gonum/stat/distuv"

	"phaselag/models/amplitude"
	"phaselag/models/linear"
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

// OutsideError says that a condition lies outside the domain of a compound.
type OutsideError struct {
	Quantities []string // "temperature", "frequency", "strain"
	Reason     string   // in numbers, for people
	Nearest    string   // the nearest allowed value
}

func (e *OutsideError) Error() string {
	return "outside: " + e.Reason + "; nearest allowed: " + e.Nearest
}

// Modulus answers at one condition, with intervals. Outside the domain it
// returns an *OutsideError and no number; a condition that is no condition
// (frequency not positive, temperature below 0 K) is an error too.
func (c *Compound) Modulus(q Condition) (Modulus, error) {
	if err := c.Inside(q); err != nil {
		return Modulus{}, err
	}
	m := c.interval(q)
	m.Domain = "inside"
	return m, nil
}

// Extrapolate answers like Modulus, also outside the domain, and then says so
// in Domain. The intervals do not cover what the model cannot know there.
func (c *Compound) Extrapolate(q Condition) (Modulus, error) {
	err := c.Inside(q)
	out, isOutside := err.(*OutsideError)
	if err != nil && !isOutside {
		return Modulus{}, err
	}
	m := c.interval(q)
	m.Domain = "inside"
	if isOutside {
		m.Domain = "extrapolated: " + strings.Join(out.Quantities, "|")
	}
	if !(m.Storage > 0) || math.IsInf(m.Storage, 0) {
		return Modulus{}, fmt.Errorf("the model has no value at %s: beyond the pole of the shift law or of the frequency law of the filler", describe(q))
	}
	return m, nil
}

func describe(q Condition) string {
	return fmt.Sprintf("%.4g Hz, %.4g °C", q.Frequency, q.Temperature-zeroC)
}

// Inside returns nil if q lies inside the domain, an *OutsideError if it does
// not, and another error if it is no condition at all.
func (c *Compound) Inside(q Condition) error {
	if !(q.Frequency > 0) || math.IsInf(q.Frequency, 0) {
		return fmt.Errorf("frequency %g Hz: must be positive and finite", q.Frequency)
	}
	if !(q.Temperature > 0) || math.IsInf(q.Temperature, 0) {
		return fmt.Errorf("temperature %g K: must be above absolute zero and finite", q.Temperature)
	}
	if q.Strain < 0 || math.IsInf(q.Strain, 0) {
		return fmt.Errorf("strain amplitude %g: must be positive and finite", q.Strain)
	}
	var out OutsideError
	var reasons, nearest []string
	add := func(quantity, reason, near string) {
		out.Quantities = append(out.Quantities, quantity)
		reasons, nearest = append(reasons, reason), append(nearest, near)
	}
	T := q.Temperature - zeroC
	dom := c.Domain
	if !dom.Temperature.Contains(T) {
		add("temperature", fmt.Sprintf("%.4g °C is not within the tested %.4g to %.4g °C", T, dom.Temperature[0], dom.Temperature[1]),
			fmt.Sprintf("%.4g °C", dom.Temperature.Nearest(T)))
	} else if fr := q.Frequency * c.shift(q.Temperature); !dom.ReducedFrequency.Contains(fr) {
		a := c.shift(q.Temperature)
		add("frequency", fmt.Sprintf("%.4g Hz at %.4g °C is %.3g Hz reduced to %.4g °C, not within the measured %.3g to %.3g Hz", q.Frequency, T, fr, c.ReferenceTempC, dom.ReducedFrequency[0], dom.ReducedFrequency[1]),
			fmt.Sprintf("%.4g Hz at that temperature", dom.ReducedFrequency.Nearest(fr)/a))
	}
	if !math.IsNaN(q.Strain) {
		c.strainInside(q, T, add)
	}
	if len(out.Quantities) == 0 {
		return nil
	}
	out.Reason, out.Nearest = strings.Join(reasons, "; "), strings.Join(nearest, ", ")
	return &out
}

// amplitudeReach is how far from the temperatures of the strain sweeps the
// amplitude law is trusted above the isotherms' own amplitude, K.
const amplitudeReach = 10

func (c *Compound) strainInside(q Condition, T float64, add func(quantity, reason, nearest string)) {
	dom, p := c.Domain, 100*q.Strain
	if dom.Strain == nil {
		add("strain", "no strain amplitude was ever stated with the measurements", "leave the strain out")
		return
	}
	if !dom.Strain.Contains(p) {
		add("strain", fmt.Sprintf("a strain amplitude of %.3g %% is not within the measured %.3g to %.3g %%", p, dom.Strain[0], dom.Strain[1]),
			fmt.Sprintf("%.3g %%", dom.Strain.Nearest(p)))
		return
	}
	m := dom.AmplitudeMeasuredAt
	if own := float64(dom.OwnStrain); m != nil && p > own*(1+1e-9) {
		reach := Range{m.Temperature[0] - amplitudeReach, m.Temperature[1] + amplitudeReach}
		if !reach.Contains(T) {
			add("strain", fmt.Sprintf("above the isotherms' amplitude of %.3g %% strain dependence was measured from %.4g to %.4g °C only", own, m.Temperature[0], m.Temperature[1]),
				fmt.Sprintf("%.3g %% at that temperature, or %.4g °C", own, reach.Nearest(T)))
		}
	}
}

// shift is a_T.
func (c *Compound) shift(T float64) float64 {
	d := &c.derived
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

// fillerAt is F*(γ, f)·φ(T).
func (f *filler) at(freq, T, gamma float64) complex128 {
	k1, k2 := f.kraus.Shape(gamma)
	phi := f.arrhenius.Factor(T)
	return complex(phi*(f.storage*k1+f.loss*k2*amplitude.FrequencyPart(f.kappa, freq, f.f0)), phi*f.loss*k2)
}

// Value is G*(f, T, γ) in Pa, without interval, without a look at the domain
// and without allocation. Outside the law's reach it is not finite.
func (c *Compound) Value(q Condition) complex128 {
	d := &c.derived
	g := d.spectrum.Modulus(2 * math.Pi * q.Frequency * c.shift(q.Temperature))
	if b, _ := d.verticalAt(q.Temperature); b != 1 {
		g *= complex(b, 0)
	}
	if d.filler != nil {
		g += d.filler.at(q.Frequency, q.Temperature, c.strain(q))
	}
	return g
}

func (c *Compound) strain(q Condition) float64 {
	if math.IsNaN(q.Strain) {
		return float64(c.Domain.OwnStrain) / 100
	}
	return q.Strain
}

// Relaxation is the relaxation modulus G(t; T, γ) in Pa at the time t in s
// after a step of strain gamma (NaN: the isotherms' own amplitude):
// b_T[G_e + Σ G_k exp(−t/(a_Tτ_k))] plus the filler's part. It returns an
// error where t/a_T lies outside the reach of the measured window.
func (c *Compound) Relaxation(t, T, gamma float64) (float64, error) {
	if !(t > 0) || math.IsInf(t, 0) {
		return 0, fmt.Errorf("time %g s: must be positive and finite", t)
	}
	a := c.shift(T)
	// 1/(2π f_R) is the time that belongs to a reduced frequency.
	if f := a / (2 * math.Pi * t); !c.Domain.Temperature.Contains(T-zeroC) || !c.Domain.ReducedFrequency.Contains(f) {
		return 0, &OutsideError{
			Quantities: []string{"time"},
			Reason:     fmt.Sprintf("%.3g s at %.4g °C lies outside the measured window", t, T-zeroC),
			Nearest:    fmt.Sprintf("%.3g s", a/(2*math.Pi*c.Domain.ReducedFrequency.Nearest(f))),
		}
	}
	return c.relaxation(t, T, gamma), nil
}

func (c *Compound) relaxation(t, T, gamma float64) float64 {
	d := &c.derived
	b, _ := d.verticalAt(T)
	g := b * d.spectrum.Relaxation(t/c.shift(T))
	if f := d.filler; f != nil {
		k1, k2 := f.kraus.Shape(c.strain(Condition{Strain: gamma}))
		g += f.arrhenius.Factor(T) * (f.storage*k1 + f.loss*k2*amplitude.RelaxationPart(f.kappa, t, f.f0))
	}
	return g
}

// Gradient writes ∂G*/∂p for every row of Uncertainty.Parameters into g, in Pa
// per unit of the parameter as the file has it, and returns G* in Pa. The
// length of g is that of Parameters.
func (c *Compound) Gradient(q Condition, g []complex128) complex128 {
	d := &c.derived
	omega := 2 * math.Pi * q.Frequency
	x := omega * c.shift(q.Temperature)
	b, bSlope := d.verticalAt(q.Temperature)
	poly := d.spectrum.Modulus(x)
	polySlope := d.spectrum.Slope(x) // per ln x
	cb := complex(b, 0)
	value := cb * poly

	var lawGrad []float64
	var slope float64
	if d.law != nil {
		slope = d.law.Slope(q.Temperature)
		n := 2
		if f, ok := d.law.(thermal.Factors); ok {
			n = len(f.T)
		}
		lawGrad = make([]float64, n)
		d.law.Gradient(q.Temperature, lawGrad)
	}
	var vertGrad []float64
	if d.vertical != nil {
		vertGrad = make([]float64, len(d.vertical.T))
		d.vertical.Gradient(q.Temperature, vertGrad)
	}
	dT := cb*polySlope*complex(thermal.Ln10*slope, 0) + complex(bSlope, 0)*poly

	var fil fillerGradient
	if d.filler != nil {
		fil = d.filler.gradient(q.Frequency, q.Temperature, c.strain(q))
		value += fil.value
		dT += fil.byT
	}
	for i, p := range d.params {
		switch p.kind {
		case pEquilibrium:
			g[i] = cb * mega
		case pBranch:
			re, im := linear.Branch(x * d.spectrum.Times[p.index])
			g[i] = cb * complex(mega*re, mega*im)
		case pC1:
			g[i] = cb * polySlope * complex(thermal.Ln10*lawGrad[0], 0)
		case pC2:
			g[i] = cb * polySlope * complex(thermal.Ln10*lawGrad[1], 0)
		case pShiftActivation:
			g[i] = cb * polySlope * complex(1e3*thermal.Ln10*lawGrad[0], 0)
		case pFactor:
			g[i] = cb * polySlope * complex(thermal.Ln10*lawGrad[p.index], 0)
		case pVertical:
			// The file has b_T, the interpolation ln b_T.
			g[i] = cb * poly * complex(vertGrad[p.index]/float64(c.Vertical.Factors[p.index].B), 0)
		case pStorage:
			g[i] = fil.byStorage
		case pLoss:
			g[i] = fil.byLoss
		case pCritical:
			g[i] = fil.byLnCritical / complex(float64(c.Amplitude.Critical), 0)
		case pExponent:
			g[i] = fil.byExponent
		case pActivation:
			g[i] = fil.byActivation
		case pSpecimen:
			g[i] = value
		case pTemperature:
			g[i] = -dT
		case pPhase:
			g[i] = 0 // the moduli are those without the error of the phase
		}
	}
	return value
}

type fillerGradient struct {
	value, byT               complex128
	byStorage, byLoss        complex128 // per MPa
	byLnCritical, byExponent complex128
	byActivation             complex128 // per kJ/mol
}

func (f *filler) gradient(freq, T, gamma float64) fillerGradient {
	k1, k2, k1c, k2c, k1m, k2m := f.kraus.Slopes(gamma)
	phi := f.arrhenius.Factor(T)
	lossDir := complex(amplitude.FrequencyPart(f.kappa, freq, f.f0), 1)
	term := func(a, b float64) complex128 {
		return complex(phi*f.storage*a, 0) + complex(phi*f.loss*b, 0)*lossDir
	}
	v := term(k1, k2)
	return fillerGradient{
		value:        v,
		byT:          v * complex(-f.arrhenius.Activation/(thermal.GasConstant*T*T), 0),
		byStorage:    complex(mega*phi*k1, 0),
		byLoss:       complex(mega*phi*k2, 0) * lossDir,
		byLnCritical: term(k1c, k2c),
		byExponent:   term(k1m, k2m),
		byActivation: v * complex(1e3/thermal.GasConstant*(1/T-1/f.arrhenius.Reference), 0),
	}
}

// interval evaluates with half-widths.
func (c *Compound) interval(q Condition) Modulus {
	n := len(c.derived.params)
	g := make([]complex128, n)
	value := c.Gradient(q, g)
	storage, loss := real(value), imag(value)
	mag := cmplx.Abs(value)
	eta := loss / storage
	t := c.Quantile()
	part := make([]float64, n)
	half := func(f func(complex128) float64) float64 {
		for i, v := range g {
			part[i] = f(v)
		}
		return t * c.Deviation(part)
	}
	return Modulus{
		Storage: storage, Loss: loss, Magnitude: mag, LossFactor: eta,
		StorageU95:       half(func(v complex128) float64 { return real(v) }),
		LossU95:          half(func(v complex128) float64 { return imag(v) }),
		MagnitudeU95:     half(func(v complex128) float64 { return (storage*real(v) + loss*imag(v)) / mag }),
		LossFactorU95:    half(func(v complex128) float64 { return (imag(v) - eta*real(v)) / storage }),
		ReducedFrequency: q.Frequency * c.shift(q.Temperature),
	}
}

// Deviation is the standard uncertainty √(gᵀCg) = ‖Lᵀg‖ of an answer whose
// gradient by Uncertainty.Parameters is g.
func (c *Compound) Deviation(g []float64) float64 {
	var s float64
	for j := range g {
		var v float64
		for i := j; i < len(g); i++ {
			v += c.Uncertainty.Cholesky[i][j] * g[i]
		}
		s += v * v
	}
	return math.Sqrt(s)
}

// Quantile is t(0.975, ν), the factor between a standard uncertainty and the
// half-width of a 95 % interval; 1.96 where the degrees of freedom are null.
func (c *Compound) Quantile() float64 { return Quantile(float64(c.Uncertainty.DegreesOfFreedom)) }

// Quantile is t(0.975, dof); the normal quantile where dof is NaN or infinite.
func Quantile(dof float64) float64 {
	if math.IsNaN(dof) || dof > 1e6 {
		return distuv.UnitNormal.Quantile(0.975)
	}
	return distuv.StudentsT{Mu: 0, Sigma: 1, Nu: max(dof, 1)}.Quantile(0.975)
}

// Ratio is G*(q)/G*(ref) with the half-widths of the 95 % intervals of its
// magnitude and of the difference of the loss angles, from the joint
// covariance, so that what both have in common cancels. With
// w_i = ∂G*(q)/∂p_i /G*(q) − ∂G*(ref)/∂p_i /G*(ref), d ln|ratio| = Re w and the
// angle's change is Im w.
func (c *Compound) Ratio(q, ref Condition) (ratio complex128, magnitudeU95, angleU95 float64) {
	n := len(c.derived.params)
	g, g0 := make([]complex128, n), make([]complex128, n)
	v, v0 := c.Gradient(q, g), c.Gradient(ref, g0)
	ratio = v / v0
	re, im := make([]float64, n), make([]float64, n)
	for i := range g {
		w := g[i]/v - g0[i]/v0
		re[i], im[i] = real(w), imag(w)
	}
	t := c.Quantile()
	return ratio, t * c.Deviation(re) * cmplx.Abs(ratio), t * c.Deviation(im)
}
