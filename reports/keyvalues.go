package reports

import (
	"fmt"
	"math"
	"slices"

	"phaselag/data/register"
	"phaselag/models"
)

// The conditions at which a register keeps a batch's values, as far as they lie inside
// its domain: frequencies in Hz and temperatures in °C that standards prefer, at the
// isotherms' own amplitude, and strain amplitudes in percent at 10 Hz and 23 °C.
var (
	keyFrequencies  = []float64{1, 10, 100}
	keyTemperatures = []float64{-40, -20, 0, 23, 40, 60, 80}
	keyStrains      = []float64{0.1, 0.5, 1, 5, 10, 20}
)

// KeyValues are a compound's numbers for a register and its trends, with half-widths of
// 95 % intervals.
func KeyValues(c *models.Compound) []register.Value {
	var out []register.Value
	at := func(q models.Condition, condition string) {
		m, err := c.Modulus(q)
		if err != nil {
			return
		}
		out = append(out,
			register.Value{Name: "storage modulus", Condition: condition, Value: m.Storage / 1e6, U95: m.StorageU95 / 1e6, Unit: "MPa"},
			register.Value{Name: "loss factor", Condition: condition, Value: m.LossFactor, U95: m.LossFactorU95, Unit: "1"})
	}
	for _, T := range keyTemperatures {
		for _, f := range keyFrequencies {
			at(models.Condition{Frequency: f, Temperature: T + zeroC, Strain: math.NaN()}, fmt.Sprintf("%g Hz, %g °C", f, T))
		}
	}
	if c.Domain.Strain != nil {
		for _, s := range keyStrains {
			at(models.Condition{Frequency: 10, Temperature: 23 + zeroC, Strain: s / 100}, fmt.Sprintf("10 Hz, 23 °C, %g %%", s))
		}
	}
	// The constants of which a batch's change speaks.
	constant := func(parameter, name, unit string, value float64) {
		i := slices.Index(c.Uncertainty.Parameters, parameter)
		if i < 0 || math.IsNaN(value) {
			return
		}
		g := make([]float64, len(c.Uncertainty.Parameters))
		g[i] = 1
		out = append(out, register.Value{Name: name, Value: value, U95: c.Quantile() * c.Deviation(g), Unit: unit})
	}
	if a := c.Amplitude; a.Law != models.AmplitudeNone {
		constant("amplitude.storage_MPa", "filler storage modulus", "MPa", float64(a.Storage))
		constant("amplitude.loss_MPa", "filler loss modulus", "MPa", float64(a.Loss))
		constant("amplitude.critical_strain_percent", "critical strain", "%", float64(a.Critical))
	}
	for i, s := range c.Static {
		if condition := staticCondition(s); !slices.ContainsFunc(out, func(v register.Value) bool { return v.Name == "static modulus" && v.Condition == condition }) {
			out = append(out, register.Value{Name: "static modulus", Condition: condition, Value: c.Static[i].Modulus, U95: float64(s.U95), Unit: "MPa"})
		}
	}
	return out
}

func staticCondition(s models.StaticItem) string {
	text := s.Source
	for _, v := range []struct {
		x      float64
		format string
	}{{float64(s.TemperatureC), "%g °C"}, {float64(s.Time), "%g s"}, {float64(s.Strain), "%.3g %%"}} {
		if !math.IsNaN(v.x) {
			text += ", " + fmt.Sprintf(v.format, v.x)
		}
	}
	return text
}
