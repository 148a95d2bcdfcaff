package models

import (
	"flag"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"phaselag/data/unit"
)

var update = flag.Bool("update", false, "rewrite the golden files in testdata and the schema")

// golden compares got with a file, or writes it with -update.
func golden(t *testing.T, path string, got []byte) {
	t.Helper()
	if *update {
		if err := os.MkdirAll(filepath.Dir(path), 0o777); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, got, 0o666); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if string(want) != string(got) {
		t.Errorf("%s is not what is written now; run go test -update and look at the difference", path)
	}
}

// sample is an invented filled natural rubber: 30 branches, WLF, a density
// law and a filler with causal loss, with a covariance of all it has.
func sample() Compound {
	c := Compound{
		Format:         1,
		Compound:       Identity{Name: "invented 60", Polymer: "NR", Batch: "A-17", Hardness: "60 IRHD", Density: 1.12, Tested: "2026-11-12"},
		ModulusKind:    "shear",
		PoissonRatio:   0.5,
		Strain:         StrainNote{Measure: "shear", Amplitude: "zero to peak"},
		State:          State{Conditioning: "6 cycles at 20 %, rest 1 h", StaticPercent: unit.NaN(), Deformation: "double shear"},
		ReferenceTempC: 23,
		Linear:         Linear{Equilibrium: 0.9},
		Shift:          Shift{Law: LawWLF, C1: 6.01, C2: 149.75, Activation: unit.NaN()},
		Vertical:       Vertical{Law: VerticalDensity, Expansion: 6.6e-4},
		Amplitude: Amplitude{
			Law: AmplitudeKraus, Coupling: Overlay, Storage: 1.6, Loss: 0.25, Critical: 1.2, Exponent: 0.58,
			Activation: 5.5, Frequency: Causal, ReferenceFrequency: 10,
		},
		Static: []StaticItem{{Modulus: 1.02, U95: 0.03, Strain: 10, Time: 60, TemperatureC: 23, Source: "relaxation test hold"}},
		Domain: Domain{
			Temperature: Range{-40, 80}, ReducedFrequency: Range{0.0123456, 1234567.8}, Strain: &Range{0.1, 20}, OwnStrain: 0.2,
			AmplitudeMeasuredAt: &AmplitudeMeasuredAt{Temperature: Range{-10, 60}, Frequency: Range{10, 10}},
		},
		Fit:         Fit{Points: 318, SigmaMagnitude: 0.5, SigmaPhase: 0.3, Superposition: Superposition{Holds: HoldsYes, P: 0.4, MisfitDeg: 0.02, MisfitPercent: unit.NaN()}},
		Uncertainty: Uncertainty{Coverage: 0.95, DegreesOfFreedom: 500},
		Provenance: Provenance{
			Version: "test", Inputs: []InputFile{{File: "isotherms.csv", SHA256: strings.Repeat("0", 64)}},
			Assumptions: []string{"invented numbers"},
		},
	}
	for k := range 30 {
		c.Linear.Branches = append(c.Linear.Branches, Branch{
			Time:    math.Pow(10, float64(k-21)/3),
			Modulus: 0.02 + 0.6*math.Exp(-0.25*float64(k)),
		})
	}
	for _, T := range []float64{-40, -20, 0, 23, 60, 80} {
		w := -6.01 * (T - 23) / (149.75 + T - 23)
		c.Shift.Factors = append(c.Shift.Factors, ShiftFactor{TemperatureC: T, LogShift: unit.Number(w), U: 0.01, Offset: unit.NaN()})
	}
	withCovariance(&c, 0.01)
	return c
}

// sampleParameters names everything that can have a covariance in c.
func sampleParameters(c *Compound) []string {
	names := []string{"linear.equilibrium_modulus_MPa"}
	for i := range c.Linear.Branches {
		names = append(names, fmt.Sprintf("linear.branches.%d.modulus_MPa", i))
	}
	switch c.Shift.Law {
	case LawWLF:
		names = append(names, "shift.c1", "shift.c2_K")
	case LawCrossover:
		names = append(names, "shift.c1", "shift.c2_K", "shift.crossover_C")
	case LawArrhenius:
		names = append(names, "shift.activation_kJ_per_mol")
	case LawNone:
		for i, f := range c.Shift.Factors {
			if !math.IsNaN(float64(f.LogShift)) {
				names = append(names, fmt.Sprintf("shift.factors.%d.log10_aT", i))
			}
		}
	}
	if c.Vertical.Law == VerticalFactors {
		for i := range c.Vertical.Factors {
			names = append(names, fmt.Sprintf("vertical.factors.%d.b_T", i))
		}
	}
	if c.Amplitude.Law != AmplitudeNone {
		if c.Amplitude.Coupling == Scaling {
			names = append(names, "amplitude.storage_ratio", "amplitude.loss_ratio")
		} else {
			names = append(names, "amplitude.storage_MPa", "amplitude.loss_MPa")
		}
		names = append(names, "amplitude.critical_strain_percent")
		if c.Amplitude.Law != AmplitudeMaierGoritz {
			names = append(names, "amplitude.exponent")
		}
		if c.Amplitude.Law == AmplitudeExtraLoss {
			names = append(names, "amplitude.extra_loss_MPa", "amplitude.extra_loss_strain_percent")
		}
		names = append(names, "amplitude.activation_kJ_per_mol")
	}
	return append(names, ParamSpecimen, ParamTemperature, ParamPhase)
}

// withCovariance gives every parameter of c a standard uncertainty of rel of
// its size (rel itself where it has none), neighbours correlated.
func withCovariance(c *Compound, rel float64) {
	c.Uncertainty.Parameters = sampleParameters(c)
	c.Uncertainty.Cholesky = nil
	for i, name := range c.Uncertainty.Parameters {
		size := 1.0
		if p := field(c, name); p != nil {
			size = math.Max(math.Abs(*p), 0.01)
		}
		row := make(Row, i+1)
		row[i] = 0.8 * rel * size
		if i > 0 {
			row[i-1] = -0.6 * rel * size
		}
		c.Uncertainty.Cholesky = append(c.Uncertainty.Cholesky, row)
	}
}

// field is where the parameter of a name stands; nil for the common errors.
// The lists of c are shared with whatever c was copied from.
func field(c *Compound, name string) *float64 {
	number := func(n *unit.Number) *float64 { return (*float64)(n) }
	switch name {
	case "linear.equilibrium_modulus_MPa":
		return &c.Linear.Equilibrium
	case "shift.c1":
		return number(&c.Shift.C1)
	case "shift.c2_K":
		return number(&c.Shift.C2)
	case "shift.activation_kJ_per_mol":
		return number(&c.Shift.Activation)
	case "amplitude.storage_MPa":
		return number(&c.Amplitude.Storage)
	case "amplitude.loss_MPa":
		return number(&c.Amplitude.Loss)
	case "amplitude.critical_strain_percent":
		return number(&c.Amplitude.Critical)
	case "amplitude.exponent":
		return number(&c.Amplitude.Exponent)
	case "amplitude.activation_kJ_per_mol":
		return number(&c.Amplitude.Activation)
	case "shift.crossover_C":
		return c.Shift.Crossover
	case "amplitude.extra_loss_MPa":
		return c.Amplitude.ExtraLoss
	case "amplitude.extra_loss_strain_percent":
		return c.Amplitude.ExtraStrain
	case "amplitude.storage_ratio":
		return c.Amplitude.StorageRatio
	case "amplitude.loss_ratio":
		return c.Amplitude.LossRatio
	}
	part := strings.Split(name, ".")
	if len(part) != 4 {
		return nil
	}
	i, _ := strconv.Atoi(part[2])
	switch part[1] {
	case "branches":
		return &c.Linear.Branches[i].Modulus
	}
	if part[0] == "shift" {
		return number(&c.Shift.Factors[i].LogShift)
	}
	return number(&c.Vertical.Factors[i].B)
}

// moved is c with some parameters changed, by name; the common errors are
// left to the caller.
func moved(t rapid.TB, c *Compound, change map[string]float64) *Compound {
	n := *c
	n.Linear.Branches = append([]Branch{}, c.Linear.Branches...)
	n.Shift.Factors = append([]ShiftFactor{}, c.Shift.Factors...)
	n.Vertical.Factors = append([]VerticalFactor{}, c.Vertical.Factors...)
	for _, p := range []**float64{&n.Shift.Crossover, &n.Amplitude.ExtraLoss, &n.Amplitude.ExtraStrain, &n.Amplitude.StorageRatio, &n.Amplitude.LossRatio} {
		if *p != nil {
			v := **p
			*p = &v
		}
	}
	for name, d := range change {
		if p := field(&n, name); p != nil {
			*p += d
		}
	}
	out, err := New(n)
	if err != nil {
		t.Fatal(err)
	}
	return out
}

func mustNew(t rapid.TB, c Compound) *Compound {
	t.Helper()
	out, err := New(c)
	if err != nil {
		t.Fatal(err)
	}
	return out
}

// anyCompound draws a compound like those of rubbers, with any of the laws.
func anyCompound(t *rapid.T) Compound {
	c := sample()
	num := func(lo, hi float64, name string) unit.Number {
		return unit.Number(rapid.Float64Range(lo, hi).Draw(t, name))
	}
	c.ReferenceTempC = rapid.Float64Range(-10, 60).Draw(t, "reference")
	c.Linear.Equilibrium = float64(num(0.1, 3, "Ge"))
	c.Linear.Branches = nil
	for k := range rapid.IntRange(1, 12).Draw(t, "branches") {
		c.Linear.Branches = append(c.Linear.Branches, Branch{Time: math.Pow(10, float64(k-6)), Modulus: float64(num(0.01, 3, "G"))})
	}
	c.Shift = Shift{Law: rapid.SampledFrom([]string{LawWLF, LawArrhenius, LawCrossover, LawNone}).Draw(t, "law"), C1: unit.NaN(), C2: unit.NaN(), Activation: unit.NaN()}
	c.Domain.Temperature = Range{c.ReferenceTempC - 30, c.ReferenceTempC + 50}
	switch c.Shift.Law {
	case LawWLF:
		c.Shift.C1, c.Shift.C2 = num(2, 12, "C1"), num(80, 220, "C2")
	case LawCrossover:
		c.Shift.C1, c.Shift.C2 = num(2, 12, "C1"), num(80, 220, "C2")
		at := c.ReferenceTempC - float64(num(2, 40, "below"))
		c.Shift.Crossover = &at
	case LawArrhenius:
		c.Shift.Activation = num(20, 200, "E")
	default:
		l := num(0, 3, "log a")
		T := c.Domain.Temperature[0] - 5
		for range rapid.IntRange(1, 6).Draw(t, "factors") {
			c.Shift.Factors = append(c.Shift.Factors, ShiftFactor{TemperatureC: T, LogShift: l, U: unit.NaN(), Offset: 0.1})
			T += float64(num(5, 25, "step"))
			l -= num(0.05, 1.5, "fall")
		}
	}
	c.Vertical = Vertical{Law: rapid.SampledFrom([]string{VerticalNone, VerticalDensity, VerticalFactors}).Draw(t, "vertical"), Expansion: unit.NaN()}
	switch c.Vertical.Law {
	case VerticalDensity:
		c.Vertical.Expansion = num(1e-4, 1e-3, "α")
	case VerticalFactors:
		b, T := unit.Number(1), c.Domain.Temperature[0]-5
		for range rapid.IntRange(1, 5).Draw(t, "factors") {
			c.Vertical.Factors = append(c.Vertical.Factors, VerticalFactor{TemperatureC: T, B: b})
			T += float64(num(5, 25, "step"))
			b += num(0.02, 0.2, "rise")
		}
	}
	if rapid.Bool().Draw(t, "filler") {
		c.Amplitude.Storage, c.Amplitude.Loss = num(0.1, 5, "ΔG'"), num(0.02, 0.4, "ΔG''")
		c.Amplitude.Critical, c.Amplitude.Exponent = num(0.1, 10, "γc"), num(0.3, 1, "m")
		c.Amplitude.Activation = num(0, 20, "Ea")
		c.Amplitude.Frequency = rapid.SampledFrom([]string{Causal, RateIndependent}).Draw(t, "κ")
		c.Amplitude.ReferenceFrequency = num(1, 30, "f0")
		some := func(lo, hi float64, name string) *float64 {
			v := float64(num(lo, hi, name))
			return &v
		}
		c.Amplitude.Law = rapid.SampledFrom([]string{AmplitudeKraus, AmplitudeExtraLoss, AmplitudeMaierGoritz}).Draw(t, "form")
		switch c.Amplitude.Law {
		case AmplitudeExtraLoss:
			c.Amplitude.ExtraLoss, c.Amplitude.ExtraStrain = some(0.02, 0.3, "ΔG2"), some(0.05, 5, "γ2")
		case AmplitudeMaierGoritz:
			c.Amplitude.Exponent = unit.NaN()
		}
		if c.Amplitude.Law != AmplitudeExtraLoss && rapid.Bool().Draw(t, "scaling") {
			c.Amplitude.Coupling = Scaling
			c.Amplitude.Storage, c.Amplitude.Loss = unit.NaN(), unit.NaN()
			c.Amplitude.StorageRatio, c.Amplitude.LossRatio = some(0.1, 3, "α"), some(0.02, 0.4, "β")
		}
	} else {
		nan := unit.NaN()
		c.Amplitude = Amplitude{Law: AmplitudeNone, Coupling: Overlay, Storage: nan, Loss: nan, Critical: nan, Exponent: nan, Activation: nan, Frequency: RateIndependent, ReferenceFrequency: nan}
	}
	if rapid.Bool().Draw(t, "no sweeps") && c.Amplitude.Law == AmplitudeNone {
		c.Domain.AmplitudeMeasuredAt = nil
		c.Domain.Strain = &Range{0.16, 0.24}
		if rapid.Bool().Draw(t, "no strain stated") {
			c.Domain.Strain, c.Domain.OwnStrain = nil, unit.NaN()
		}
	}
	withCovariance(&c, 0.01)
	return c
}

// anyCondition draws a condition for c, mostly inside its domain.
func anyCondition(t *rapid.T, c *Compound) Condition {
	q := Condition{
		Frequency:   math.Pow(10, rapid.Float64Range(-2, 3).Draw(t, "log f")),
		Temperature: rapid.Float64Range(c.Domain.Temperature[0], c.Domain.Temperature[1]).Draw(t, "T") + zeroC,
		Strain:      math.NaN(),
	}
	if rapid.Bool().Draw(t, "with strain") {
		q.Strain = math.Pow(10, rapid.Float64Range(-4, 0).Draw(t, "log γ"))
	}
	return q
}
