package interactive_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"phaselag/data/unit"
	"phaselag/models"
)

const sampleFile = "../../models/testdata/invented.yaml"

func invented(t testing.TB) *models.Compound {
	t.Helper()
	c, err := models.Open(sampleFile)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

type variant struct {
	name     string
	compound *models.Compound
}

func pointer(x float64) *float64 { return &x }

// variants are invented compounds with every law and coupling that a compound file can
// name, each with every parameter in its covariance.
func variants(t testing.TB) []variant {
	base := *invented(t)
	base.Linear.Branches = nil
	for k := range 9 {
		base.Linear.Branches = append(base.Linear.Branches, models.Branch{Time: math.Pow(10, float64(k-6)), Modulus: 0.9 / float64(k+1)})
	}
	nan := unit.NaN()
	factor := func(T, l float64) models.ShiftFactor {
		return models.ShiftFactor{TemperatureC: T, LogShift: unit.Number(l), U: 0.01, Offset: nan}
	}
	at := -5.0
	shifts := []struct {
		name string
		s    models.Shift
	}{
		{"WLF", models.Shift{Law: models.LawWLF, C1: 6.01, C2: 149.75, Activation: nan}},
		{"Arrhenius", models.Shift{Law: models.LawArrhenius, C1: nan, C2: nan, Activation: 82.5}},
		{"crossover", models.Shift{Law: models.LawCrossover, C1: 6.01, C2: 149.75, Activation: nan, Crossover: &at}},
		{"factors", models.Shift{Law: models.LawNone, C1: nan, C2: nan, Activation: nan, Factors: []models.ShiftFactor{
			factor(-40, 3.9), factor(-20, 2.1), factor(0, math.NaN()), factor(0.5, 0.9), factor(23, 0), factor(50, -0.8), factor(60, -0.75), factor(80, -1.4)}}},
		{"two factors", models.Shift{Law: models.LawNone, C1: nan, C2: nan, Activation: nan, Factors: []models.ShiftFactor{factor(-10, 1), factor(40, -0.6)}}},
		{"one factor", models.Shift{Law: models.LawNone, C1: nan, C2: nan, Activation: nan, Factors: []models.ShiftFactor{factor(23, 0.1)}}},
		{"no factor", models.Shift{Law: models.LawNone, C1: nan, C2: nan, Activation: nan}},
	}
	verticals := []struct {
		name string
		v    models.Vertical
	}{
		{"", models.Vertical{Law: models.VerticalNone, Expansion: nan}},
		{"density", models.Vertical{Law: models.VerticalDensity, Expansion: 6.6e-4}},
		{"b_T", models.Vertical{Law: models.VerticalFactors, Expansion: nan, Factors: []models.VerticalFactor{{TemperatureC: -30, B: 0.86}, {TemperatureC: 0, B: 0.95}, {TemperatureC: 23, B: 1}, {TemperatureC: 80, B: 1.12}}}},
	}
	amplitudes := []models.Amplitude{{Law: models.AmplitudeNone, Coupling: models.Overlay, Storage: nan, Loss: nan, Critical: nan, Exponent: nan, Activation: nan, Frequency: models.RateIndependent, ReferenceFrequency: nan}}
	for _, law := range []string{models.AmplitudeKraus, models.AmplitudeExtraLoss, models.AmplitudeMaierGoritz} {
		for _, coupling := range []string{models.Overlay, models.Scaling} {
			for _, rate := range []string{models.Causal, models.RateIndependent} {
				a := models.Amplitude{Law: law, Coupling: coupling, Storage: 1.6, Loss: 0.25, Critical: 1.2, Exponent: 0.58, Activation: 5.5, Frequency: rate, ReferenceFrequency: 10}
				switch {
				case law == models.AmplitudeExtraLoss && coupling == models.Scaling:
					continue // no such compound
				case law == models.AmplitudeExtraLoss:
					a.ExtraLoss, a.ExtraStrain = pointer(0.12), pointer(0.7)
				case law == models.AmplitudeMaierGoritz:
					a.Exponent = nan
					if rate == models.RateIndependent {
						a.Activation, a.ReferenceFrequency = nan, nan
					}
				}
				if coupling == models.Scaling {
					a.Storage, a.Loss, a.StorageRatio, a.LossRatio = nan, nan, pointer(1.1), pointer(0.2)
				}
				amplitudes = append(amplitudes, a)
			}
		}
	}
	random := rand.New(rand.NewPCG(1, 2))
	var out []variant
	add := func(name string, c models.Compound) {
		withCovariance(&c, random)
		made, err := models.New(c)
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		out = append(out, variant{name, made})
	}
	for i, s := range shifts {
		for k, a := range amplitudes {
			c := base
			v := verticals[(i+k)%len(verticals)]
			c.Shift, c.Vertical, c.Amplitude = s.s, v.v, a
			add(fmt.Sprintf("%s, %s, %s %s %s", s.name, v.name, a.Law, a.Coupling, a.Frequency), c)
		}
	}
	plain := base
	plain.Amplitude = amplitudes[0]
	plain.Domain.AmplitudeMeasuredAt, plain.Domain.Strain, plain.Domain.OwnStrain = nil, nil, nan
	plain.ModulusKind, plain.Uncertainty.DegreesOfFreedom = "young", nan
	add("no strain stated, no degrees of freedom", plain)
	few := base
	few.Uncertainty.DegreesOfFreedom = 3
	few.Domain.AmplitudeMeasuredAt = nil
	add("three degrees of freedom, no sweeps", few)
	return append(out, variant{"the file of package models", invented(t)})
}

// withCovariance gives c every parameter that it has, with standard uncertainties of
// about one per cent of their size and random correlations.
func withCovariance(c *models.Compound, random *rand.Rand) {
	names := []string{"linear.equilibrium_modulus_MPa"}
	sizes := []float64{c.Linear.Equilibrium}
	add := func(name string, size float64) { names, sizes = append(names, name), append(sizes, size) }
	for i, b := range c.Linear.Branches {
		add(fmt.Sprintf("linear.branches.%d.modulus_MPa", i), b.Modulus)
	}
	switch c.Shift.Law {
	case models.LawWLF, models.LawCrossover:
		add("shift.c1", 6)
		add("shift.c2_K", 150)
	case models.LawArrhenius:
		add("shift.activation_kJ_per_mol", 80)
	default:
		for i, f := range c.Shift.Factors {
			if !math.IsNaN(float64(f.LogShift)) {
				add(fmt.Sprintf("shift.factors.%d.log10_aT", i), 1)
			}
		}
	}
	if c.Shift.Crossover != nil {
		add("shift.crossover_C", 100)
	}
	for i := range c.Vertical.Factors {
		add(fmt.Sprintf("vertical.factors.%d.b_T", i), 1)
	}
	if a := c.Amplitude; a.Law != models.AmplitudeNone {
		if a.Coupling == models.Scaling {
			add("amplitude.storage_ratio", 1)
			add("amplitude.loss_ratio", 0.2)
		} else {
			add("amplitude.storage_MPa", 1.6)
			add("amplitude.loss_MPa", 0.25)
		}
		add("amplitude.critical_strain_percent", 1.2)
		if a.Law != models.AmplitudeMaierGoritz {
			add("amplitude.exponent", 0.6)
		}
		if a.Law == models.AmplitudeExtraLoss {
			add("amplitude.extra_loss_MPa", 0.1)
			add("amplitude.extra_loss_strain_percent", 0.7)
		}
		add("amplitude.activation_kJ_per_mol", 5)
	}
	add(models.ParamSpecimen, 1)
	add(models.ParamTemperature, 20)
	add(models.ParamPhase, 10)
	c.Uncertainty.Parameters, c.Uncertainty.Cholesky = names, nil
	for i, size := range sizes {
		row := make(models.Row, i+1)
		for j := range row {
			row[j] = 0.01 * size * (2*random.Float64() - 1) / math.Sqrt(float64(i+1))
		}
		row[i] = 0.01 * size
		c.Uncertainty.Cholesky = append(c.Uncertainty.Cholesky, row)
	}
}

// someConditions are conditions inside the domain, at its edges, beside it, and some
// that are none.
func someConditions(c *models.Compound, n int, random *rand.Rand) []models.Condition {
	d, nan := c.Domain, math.NaN()
	var out []models.Condition
	for range n {
		T := d.Temperature[0] - 6 + (d.Temperature[1]-d.Temperature[0]+12)*random.Float64()
		q := models.Condition{Frequency: math.Pow(10, 6*random.Float64()-2), Temperature: math.Round(T*10)/10 + 273.15, Strain: nan}
		if random.IntN(2) == 0 {
			q.Strain = math.Pow(10, 3*random.Float64()-3.3)
		}
		out = append(out, q)
	}
	room := 273.15 + 23
	for _, T := range d.Temperature {
		out = append(out, models.Condition{Frequency: 10, Temperature: T + 273.15, Strain: nan})
	}
	return append(out,
		models.Condition{Frequency: 10, Temperature: room, Strain: nan},
		models.Condition{Frequency: 10, Temperature: room, Strain: 0.002},
		models.Condition{Frequency: 10, Temperature: room, Strain: 0.012},
		models.Condition{Frequency: 10, Temperature: room, Strain: 0},
		models.Condition{Frequency: 10, Temperature: room, Strain: -0.01},
		models.Condition{Frequency: -3, Temperature: room, Strain: nan},
		models.Condition{Frequency: 1e-9, Temperature: room, Strain: nan},
		models.Condition{Frequency: 1e12, Temperature: room, Strain: 5},
		models.Condition{Frequency: 10, Temperature: 10, Strain: nan},
		models.Condition{Frequency: 10, Temperature: 0, Strain: nan},
		models.Condition{Frequency: 10, Temperature: 200 + 273.15, Strain: 0.1},
		models.Condition{Frequency: 10, Temperature: -35 + 273.15, Strain: 0.05},
	)
}
