package models

import (
	"fmt"
	"math"
	"strconv"
	"strings"

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
	factorIdx []int // index into Shift.Factors of the knots of the law "none"
}

// filler is the amplitude term in SI.
type filler struct {
	storage, loss float64 // Pa
	kraus         amplitude.Kraus
	arrhenius     thermal.Arrhenius
	kappa, f0     float64
}

// paramKind says what a row of the covariance belongs to.
type paramKind int

const (
	pEquilibrium paramKind = iota
	pBranch
	pC1
	pC2
	pShiftActivation
	pFactor
	pVertical
	pStorage
	pLoss
	pCritical
	pExponent
	pActivation
	pSpecimen
	pTemperature
	pPhase
)

type parameter struct {
	kind  paramKind
	index int
}

// The names of the common errors among Uncertainty.Parameters.
const (
	ParamSpecimen    = "specimen_factor"
	ParamTemperature = "temperature_common_K"
	ParamPhase       = "phase_common_deg"
)

var plainParams = map[string]paramKind{
	"linear.equilibrium_modulus_MPa":    pEquilibrium,
	"shift.c1":                          pC1,
	"shift.c2_K":                        pC2,
	"shift.activation_kJ_per_mol":       pShiftActivation,
	"amplitude.storage_MPa":             pStorage,
	"amplitude.loss_MPa":                pLoss,
	"amplitude.critical_strain_percent": pCritical,
	"amplitude.exponent":                pExponent,
	"amplitude.activation_kJ_per_mol":   pActivation,
	ParamSpecimen:                       pSpecimen,
	ParamTemperature:                    pTemperature,
	ParamPhase:                          pPhase,
}

// New checks the fields of c, derives its SI values and returns it ready for
// use. The error names the key at fault.
func New(c Compound) (*Compound, error) {
	if err := c.derive(); err != nil {
		return nil, err
	}
	return &c, nil
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
	if c.Linear.Equilibrium == 0 && len(c.Linear.Branches) == 0 {
		return bad("linear", "has neither an equilibrium modulus nor a branch")
	}
	if err := c.deriveShift(&d, bad); err != nil {
		return err
	}
	if err := c.deriveFiller(&d, bad); err != nil {
		return err
	}
	if err := c.deriveDomain(bad); err != nil {
		return err
	}
	if err := c.deriveParameters(&d, bad); err != nil {
		return err
	}
	c.derived = d
	return nil
}

type badFunc func(key, format string, a ...any) error

func (c *Compound) deriveShift(d *derived, bad badFunc) error {
	positive := func(x float64) bool { return x > 0 && !math.IsInf(x, 0) }
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
		return bad("shift.law", "%q is not one of WLF, Arrhenius, none", c.Shift.Law)
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
	case AmplitudeKraus:
	default:
		return bad("amplitude.law", "%q is not one of none, kraus", a.Law)
	}
	if a.Coupling != Overlay {
		return bad("amplitude.coupling", "%q is not overlay", a.Coupling)
	}
	f := filler{
		storage:   float64(a.Storage) * mega,
		loss:      float64(a.Loss) * mega,
		kraus:     amplitude.Kraus{Critical: float64(a.Critical) / 100, Exponent: float64(a.Exponent)},
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
	if !(f.storage >= 0) || !(f.loss >= 0) {
		return bad("amplitude", "storage_MPa and loss_MPa must not be negative")
	}
	if !(f.kraus.Critical > 0) || !(f.kraus.Exponent > 0) || math.IsInf(f.kraus.Critical, 0) {
		return bad("amplitude", "critical_strain_percent and exponent must be positive")
	}
	if math.IsNaN(f.arrhenius.Activation) {
		f.arrhenius.Activation = 0
	}
	if f.kappa != 0 && !(f.f0 > 0) {
		return bad("amplitude.reference_frequency_Hz", "must be positive")
	}
	d.filler = &f
	return nil
}

func (c *Compound) deriveDomain(bad badFunc) error {
	check := func(key string, r Range, lower float64) error {
		if !(r[0] >= lower) || !(r[1] >= r[0]) || math.IsInf(r[1], 0) {
			return bad(key, "must be a rising pair of finite numbers")
		}
		return nil
	}
	if err := check("domain.temperature_C", c.Domain.Temperature, -zeroC); err != nil {
		return err
	}
	if err := check("domain.reduced_frequency_Hz", c.Domain.ReducedFrequency, 0); err != nil {
		return err
	}
	if r := c.Domain.Strain; r != nil {
		if err := check("domain.strain_amplitude_percent", *r, 0); err != nil {
			return err
		}
	}
	if c.Amplitude.Law != AmplitudeNone && math.IsNaN(float64(c.Domain.OwnStrain)) {
		return bad("domain.own_strain_amplitude_percent", "is needed where there is an amplitude law")
	}
	return nil
}

func (c *Compound) deriveParameters(d *derived, bad badFunc) error {
	u := c.Uncertainty
	if len(u.Cholesky) != len(u.Parameters) {
		return bad("uncertainty.cholesky", "%d rows for %d parameters", len(u.Cholesky), len(u.Parameters))
	}
	seen := map[string]bool{}
	for i, name := range u.Parameters {
		if len(u.Cholesky[i]) != i+1 {
			return bad(fmt.Sprintf("uncertainty.cholesky.%d", i), "has %d numbers, row %d of a lower triangle has %d", len(u.Cholesky[i]), i, i+1)
		}
		for _, v := range u.Cholesky[i] {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				return bad(fmt.Sprintf("uncertainty.cholesky.%d", i), "has a number that is not finite")
			}
		}
		if seen[name] {
			return bad(fmt.Sprintf("uncertainty.parameters.%d", i), "%q stands twice", name)
		}
		seen[name] = true
		p, ok := c.parameter(name, d)
		if !ok {
			return bad(fmt.Sprintf("uncertainty.parameters.%d", i), "%q is no parameter of this compound", name)
		}
		d.params = append(d.params, p)
	}
	return nil
}

// parameter finds the parameter of a name; ok is false if c has none such.
func (c *Compound) parameter(name string, d *derived) (p parameter, ok bool) {
	if kind, plain := plainParams[name]; plain {
		switch kind {
		case pC1, pC2:
			return parameter{kind: kind}, d.wlf != nil
		case pShiftActivation:
			return parameter{kind: kind}, c.Shift.Law == LawArrhenius
		case pStorage, pLoss, pCritical, pExponent, pActivation:
			return parameter{kind: kind}, d.filler != nil
		}
		return parameter{kind: kind}, true
	}
	parts := strings.Split(name, ".")
	if len(parts) != 4 {
		return p, false
	}
	i, err := strconv.Atoi(parts[2])
	if err != nil || i < 0 {
		return p, false
	}
	switch parts[0] + "." + parts[1] + "." + parts[3] {
	case "linear.branches.modulus_MPa":
		return parameter{pBranch, i}, i < len(c.Linear.Branches)
	case "shift.factors.log10_aT":
		for k, j := range d.factorIdx {
			if j == i {
				return parameter{pFactor, k}, true
			}
		}
	case "vertical.factors.b_T":
		return parameter{pVertical, i}, d.vertical != nil && i < len(d.vertical.T)
	}
	return p, false
}

// KeyError is a fault of a compound file: the path of the key and what is
// wrong with its value.
type KeyError struct {
	Key  string
	What string
}

func (e *KeyError) Error() string { return e.Key + ": " + e.What }
