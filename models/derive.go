package models

import (
	"fmt"
	"math"

	"phaselag/models/amplitude"
	"phaselag/models/linear"
	"phaselag/models/thermal"
)

// zeroC is 0 °C in K.
const zeroC = 273.15

// mega turns MPa into Pa.
const mega = 1e6

// derived holds the SI values that follow from a Compound's fields.
type derived struct {
	spectrum  linear.Spectrum
	reference float64     // K
	law       thermal.Law // nil: one temperature, a_T = 1
	wlf       *thermal.WLF
	density   *thermal.Density
	vertical  *thermal.Factors // ln b_T over T, where the factors are given
	filler    *filler
	params    []parameter
	quantile  float64
	factorIdx []int // index into Shift.Factors of the knots of the law "none"
}

// filler is the amplitude term in SI.
type filler struct {
	storage, loss, extra float64 // Pa; of a term that scales, ratios
	law                  amplitude.Law
	arrhenius            thermal.Arrhenius
	kappa, f0            float64
	scaling              bool
}

// New checks the fields of c, derives its SI values and returns it ready for
// use; a nil list becomes an empty one, as it is in a file. The error names
// the key at fault.
func New(c Compound) (*Compound, error) {
	notNil(&c.Linear.Branches)
	notNil(&c.Shift.Factors)
	notNil(&c.Vertical.Factors)
	notNil(&c.Static)
	notNil(&c.Uncertainty.Parameters)
	notNil(&c.Uncertainty.Cholesky)
	notNil(&c.Provenance.Inputs)
	notNil(&c.Provenance.Assumptions)
	if err := c.derive(); err != nil {
		return nil, err
	}
	return &c, nil
}

func notNil[T any, S ~[]T](s *S) {
	if *s == nil {
		*s = S{}
	}
}

func (c *Compound) derive() error {
	bad := func(key, format string, a ...any) error {
		return &KeyError{Key: key, What: fmt.Sprintf(format, a...)}
	}
	if c.Format < 1 || c.Format > FormatVersion {
		return bad("phaselag_compound", "format version %d is not known; this program reads versions 1 to %d", c.Format, FormatVersion)
	}
	if c.ModulusKind != "shear" && c.ModulusKind != "young" {
		return bad("modulus", "%q is not shear or young", c.ModulusKind)
	}
	var d derived
	d.reference = c.ReferenceTempC + zeroC
	if !(d.reference > 0) || math.IsInf(d.reference, 0) {
		return bad("reference_temperature_C", "%g °C is below absolute zero or not finite", c.ReferenceTempC)
	}
	if !(c.Linear.Equilibrium >= 0) || math.IsInf(c.Linear.Equilibrium, 0) {
		return bad("linear.equilibrium_modulus_MPa", "must be finite and not negative")
	}
	d.spectrum.Equilibrium = c.Linear.Equilibrium * mega
	for i, b := range c.Linear.Branches {
		key := fmt.Sprintf("linear.branches.%d", i)
		if !(b.Time > 0) || math.IsInf(b.Time, 0) {
			return bad(key+".relaxation_time_s", "must be positive and finite")
		}
		if !(b.Modulus >= 0) || math.IsInf(b.Modulus, 0) {
			return bad(key+".modulus_MPa", "must be finite and not negative")
		}
		d.spectrum.Times = append(d.spectrum.Times, b.Time)
		d.spectrum.Moduli = append(d.spectrum.Moduli, b.Modulus*mega)
	}
	for i, item := range c.Static {
		if !(item.Modulus > 0) || math.IsInf(item.Modulus, 0) {
			return bad(fmt.Sprintf("static.%d.modulus_MPa", i), "must be positive and finite")
		}
	}
	if u := c.Uncertainty; !(u.Coverage > 0 && u.Coverage < 1) {
		return bad("uncertainty.coverage", "must lie between 0 and 1")
	} else if u.DegreesOfFreedom < 0 {
		return bad("uncertainty.degrees_of_freedom", "must not be negative")
	}
	if c.Linear.Equilibrium == 0 && len(c.Linear.Branches) == 0 {
		return bad("linear", "has neither an equilibrium modulus nor a branch")
	}
	if err := c.deriveShift(&d, bad); err != nil {
		return err
	}
	if err := c.deriveFiller(&d, bad); err != nil {
		return err
	}
	if err := c.deriveDomain(&d, bad); err != nil {
		return err
	}
	if err := c.deriveParameters(&d, bad); err != nil {
		return err
	}
	d.quantile = Quantile(float64(c.Uncertainty.DegreesOfFreedom))
	c.derived = d
	return nil
}

type badFunc func(key, format string, a ...any) error

func (c *Compound) deriveShift(d *derived, bad badFunc) error {
	positive := func(x float64) bool { return x > 0 && !math.IsInf(x, 0) }
	for i, s := range c.Shift.Factors {
		if !positive(s.TemperatureC + zeroC) {
			return bad(fmt.Sprintf("shift.factors.%d.temperature_C", i), "must be finite and above absolute zero")
		}
		if math.IsInf(float64(s.LogShift), 0) {
			return bad(fmt.Sprintf("shift.factors.%d.log10_aT", i), "must be finite or null")
		}
	}
	for i, v := range c.Vertical.Factors {
		if !positive(v.TemperatureC + zeroC) {
			return bad(fmt.Sprintf("vertical.factors.%d.temperature_C", i), "must be finite and above absolute zero")
		}
	}
	switch c.Shift.Law {
	case LawWLF:
		w := thermal.WLF{C1: float64(c.Shift.C1), C2: float64(c.Shift.C2), Reference: d.reference}
		if !positive(w.C1) || !positive(w.C2) {
			return bad("shift", "WLF needs positive c1 and c2_K")
		}
		d.law, d.wlf = w, &w
	case LawArrhenius:
		a := thermal.Arrhenius{Activation: float64(c.Shift.Activation) * 1e3, Reference: d.reference}
		if !positive(a.Activation) {
			return bad("shift.activation_kJ_per_mol", "Arrhenius needs a positive activation energy")
		}
		d.law = a
	case LawCrossover:
		l := thermal.Crossover{WLF: thermal.WLF{C1: float64(c.Shift.C1), C2: float64(c.Shift.C2), Reference: d.reference}}
		if !positive(l.C1) || !positive(l.C2) {
			return bad("shift", "WLF+Arrhenius needs positive c1 and c2_K")
		}
		if c.Shift.Crossover == nil {
			return bad("shift.crossover_C", "WLF+Arrhenius needs the temperature of the crossover")
		}
		l.Cross = *c.Shift.Crossover + zeroC
		if !positive(l.Cross) || l.Cross > d.reference || !(l.C2+l.Cross-d.reference > 0) {
			return bad("shift.crossover_C", "must lie between the pole of the law and the reference temperature")
		}
		d.law = l
	case LawNone:
		var f thermal.Factors
		for i, s := range c.Shift.Factors {
			T, l := s.TemperatureC+zeroC, float64(s.LogShift)
			if math.IsNaN(l) {
				continue
			}
			if n := len(f.T); n > 0 && !(T > f.T[n-1]) {
				return bad(fmt.Sprintf("shift.factors.%d.temperature_C", i), "temperatures must rise")
			}
			f.T, f.Log = append(f.T, T), append(f.Log, l)
			d.factorIdx = append(d.factorIdx, i)
		}
		if len(f.T) > 0 {
			d.law = f
		}
	default:
		return bad("shift.law", "%q is not one of WLF, Arrhenius, WLF+Arrhenius, none", c.Shift.Law)
	}
	if c.Shift.Crossover != nil && c.Shift.Law != LawCrossover {
		return bad("shift.crossover_C", "the law %s has no crossover", c.Shift.Law)
	}
	switch c.Vertical.Law {
	case VerticalNone:
	case VerticalDensity:
		if !positive(float64(c.Vertical.Expansion)) {
			return bad("vertical.expansion_per_K", "the density law needs a positive volume expansion")
		}
		d.density = &thermal.Density{Expansion: float64(c.Vertical.Expansion), Reference: d.reference}
	case VerticalFactors:
		var f thermal.Factors
		for i, v := range c.Vertical.Factors {
			if !positive(float64(v.B)) {
				return bad(fmt.Sprintf("vertical.factors.%d.b_T", i), "must be positive")
			}
			T := v.TemperatureC + zeroC
			if n := len(f.T); n > 0 && !(T > f.T[n-1]) {
				return bad(fmt.Sprintf("vertical.factors.%d.temperature_C", i), "temperatures must rise")
			}
			f.T, f.Log = append(f.T, T), append(f.Log, math.Log(float64(v.B)))
		}
		if len(f.T) == 0 {
			return bad("vertical.factors", "the law needs factors")
		}
		d.vertical = &f
	default:
		return bad("vertical.law", "%q is not one of none, density, factors", c.Vertical.Law)
	}
	return nil
}

func (c *Compound) deriveFiller(d *derived, bad badFunc) error {
	a := c.Amplitude
	switch a.Law {
	case AmplitudeNone:
		return nil
	case AmplitudeKraus, AmplitudeExtraLoss, AmplitudeMaierGoritz:
	default:
		return bad("amplitude.law", "%q is not one of none, kraus, kraus_extra_loss, maier_goritz", a.Law)
	}
	if a.Coupling != Overlay && a.Coupling != Scaling {
		return bad("amplitude.coupling", "%q is not overlay or scaling", a.Coupling)
	}
	if a.Coupling == Scaling && a.Law == AmplitudeExtraLoss {
		return bad("amplitude.coupling", "the law kraus_extra_loss is an overlay")
	}
	f := filler{
		storage:   float64(a.Storage) * mega,
		loss:      float64(a.Loss) * mega,
		law:       amplitude.Law{Critical: float64(a.Critical) / 100, Exponent: float64(a.Exponent)},
		scaling:   a.Coupling == Scaling,
		arrhenius: thermal.Arrhenius{Activation: float64(a.Activation) * 1e3, Reference: d.reference},
		f0:        float64(a.ReferenceFrequency),
	}
	switch a.Frequency {
	case Causal:
		f.kappa = 1
	case RateIndependent:
	default:
		return bad("amplitude.frequency_dependence", "%q is not one of causal, rate_independent", a.Frequency)
	}
	type number struct {
		key      string
		x        float64
		positive bool
	}
	numbers := []number{{"critical_strain_percent", f.law.Critical, true}}
	optional := func(p *float64) float64 {
		if p == nil {
			return math.NaN()
		}
		return *p
	}
	switch a.Law {
	case AmplitudeMaierGoritz:
		f.law.Kind = amplitude.MaierGoritz
	case AmplitudeExtraLoss:
		f.law.Kind = amplitude.ExtraLoss
		f.extra, f.law.Extra = optional(a.ExtraLoss)*mega, optional(a.ExtraStrain)/100
		numbers = append(numbers, number{"extra_loss_MPa", f.extra, false}, number{"extra_loss_strain_percent", f.law.Extra, true})
	}
	if a.Law != AmplitudeMaierGoritz {
		numbers = append(numbers, number{"exponent", f.law.Exponent, true})
	}
	if f.scaling {
		f.storage, f.loss = optional(a.StorageRatio), optional(a.LossRatio)
		numbers = append(numbers, number{"storage_ratio", f.storage, false}, number{"loss_ratio", f.loss, false})
	} else {
		numbers = append(numbers, number{"storage_MPa", f.storage, false}, number{"loss_MPa", f.loss, false})
	}
	for _, v := range numbers {
		switch {
		case math.IsNaN(v.x) || math.IsInf(v.x, 0):
			return bad("amplitude."+v.key, "the amplitude law needs a finite number")
		case v.x < 0 || v.positive && v.x == 0:
			return bad("amplitude."+v.key, "%g has the wrong sign", v.x)
		}
	}
	switch {
	case math.IsNaN(f.arrhenius.Activation):
		f.arrhenius.Activation = 0
	case math.IsInf(f.arrhenius.Activation, 0):
		return bad("amplitude.activation_kJ_per_mol", "must be finite or null")
	}
	if f.kappa != 0 && (!(f.f0 > 0) || math.IsInf(f.f0, 0)) {
		return bad("amplitude.reference_frequency_Hz", "must be positive and finite")
	}
	d.filler = &f
	return nil
}

// KeyError is a fault of a compound file: the path of the key and what is
// wrong with its value.
type KeyError struct {
	Key  string
	What string
}

func (e *KeyError) Error() string { return e.Key + ": " + e.What }
