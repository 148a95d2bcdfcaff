package reports

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"phaselag/data"
	"phaselag/data/unit"
	"phaselag/fitting/quality"
	"phaselag/models"
)

// Found is a value with its interval, or why there is none. Value and U95 in SI, Freedom
// the degrees of freedom (NaN or infinite: many).
type Found struct {
	Value, U95, Freedom float64
	Reason              string
}

func notFound(format string, a ...any) Found {
	nan := math.NaN()
	return Found{nan, nan, nan, fmt.Sprintf(format, a...)}
}

// ValueOf reads the property of a limit from a compound.
func ValueOf(c *models.Compound, l data.Limit) Found {
	m, err := c.Modulus(models.Condition{Frequency: l.Frequency, Temperature: l.Temperature, Strain: l.Strain})
	var out *models.OutsideError
	switch {
	case errors.As(err, &out):
		return notFound("%s", out.Error())
	case err != nil:
		return notFound("%v", err)
	}
	return pick(m, l.Property, float64(c.Uncertainty.DegreesOfFreedom))
}

// pick takes a property out of a modulus.
func pick(m models.Modulus, p data.Property, freedom float64) Found {
	f := Found{Freedom: freedom}
	switch p {
	case data.StorageModulus:
		f.Value, f.U95 = m.Storage, m.StorageU95
	case data.LossModulus:
		f.Value, f.U95 = m.Loss, m.LossU95
	case data.ComplexModulus:
		f.Value, f.U95 = m.Magnitude, m.MagnitudeU95
	case data.LossFactor:
		f.Value, f.U95 = m.LossFactor, m.LossFactorU95
	default:
		return notFound("a %s needs an approved compound to compare with", p)
	}
	return f
}

// Decide holds found values against a specification, limit by limit.
func Decide(spec *data.Specification, found func(data.Limit) Found) *Release {
	r := &Release{Specification: spec}
	guard := spec.Guard
	if spec.Rule == data.Simple {
		guard = 0
	}
	for _, l := range spec.Limits {
		f := found(l)
		out := line(l, f)
		a := quality.Decide(quality.Measured{Value: f.Value, U95: f.U95, Freedom: f.Freedom}, quality.Limits{Lower: l.Lower, Upper: l.Upper}, quality.Rule{Guard: guard})
		scale := out.Lower / l.Lower
		if math.IsNaN(scale) {
			scale = out.Upper / l.Upper
		}
		if math.IsNaN(scale) {
			scale = 1 // a limit of zero
		}
		out.AcceptLower, out.AcceptUpper, out.Conformity, out.Decision = a.Accept.Lower*scale, a.Accept.Upper*scale, a.Conformity, a.Verdict
		r.Lines = append(r.Lines, out)
	}
	r.Decision = Overall(r.Lines)
	return r
}

// ReleaseOf is a release by what a compound file says of itself.
func ReleaseOf(c *models.Compound, spec *data.Specification, found func(data.Limit) Found) *Release {
	r := Decide(spec, found)
	r.Batch, r.Compound, r.Tested = c.Compound.Batch, c.Compound.Name, c.Compound.Tested
	r.Basis = fmt.Sprintf("full characterization, %d points", c.Fit.Points)
	if spec.Compound != "" && spec.Compound != c.Compound.Name {
		r.Notes = append(r.Notes, fmt.Sprintf("The specification is for %s, the batch is of %s.", spec.Compound, stated(c.Compound.Name)))
		r.Decision = quality.Undecided
	}
	if !slices.Contains(c.Uncertainty.Parameters, models.ParamPhase) {
		r.Notes = append(r.Notes, "The common uncertainty of the phase was not stated: decisions on loss are those of repeatability.")
	}
	for _, in := range c.Provenance.Inputs {
		r.Inputs = append(r.Inputs, fmt.Sprintf("%s, SHA-256 %s", in.File, first(in.SHA256, 16)))
	}
	return r
}

// line puts a found value beside its limit, in units for people.
func line(l data.Limit, f Found) ReleaseLine {
	scale, symbol := 1.0, "1"
	switch l.Property.Quantity() {
	case unit.Modulus:
		scale, symbol = 1e-6, "MPa"
	case unit.TemperatureDifference:
		symbol = "K"
	}
	return ReleaseLine{
		Property: string(l.Property), Condition: conditionText(l), Unit: symbol,
		Value: f.Value * scale, U95: f.U95 * scale, Lower: l.Lower * scale, Upper: l.Upper * scale, Reason: f.Reason,
	}
}

// conditionText is the condition of a limit for people.
func conditionText(l data.Limit) string {
	if !l.Property.AtCondition() {
		return ""
	}
	parts := []string{fmt.Sprintf("%.4g Hz", l.Frequency), strings.Replace(fmt.Sprintf("%.4g °C", celsius(l.Temperature)), "-", "−", 1)}
	if !math.IsNaN(l.Strain) {
		parts = append(parts, fmt.Sprintf("%.3g %%", 100*l.Strain))
	}
	return strings.Join(parts, ", ")
}
