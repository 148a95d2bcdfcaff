package screen

import (
	"fmt"
	"math"

	"phaselag/data"
)

// Viscosity compares a column of complex viscosity with the moduli of the same rows,
//
//	|η*| = |G*|/ω,     r = |G*|/(2πf·|η*|),
//
// which tells a frequency in Hz from one in rad/s without any model: r is 1 where f is
// right, 1/2π where the column of frequencies was rad/s but is read as Hz, 2π the
// other way round. viscosity has one value in Pa·s for each point; NaN and values that
// are not positive are passed over. Columns of another kind than
// the magnitude (η' = G”/ω is one) and of another unit give another constant, which is
// told; a ratio that is not constant is a column from elsewhere. Allowed are 1 % for
// numbers of three digits. Fewer than three rows say nothing; ok is false then, and
// where the columns agree.
func Viscosity(test string, points []data.Point, viscosity []float64) (f data.Finding, ok bool) {
	if len(viscosity) != len(points) {
		panic("screen: a viscosity for every point is wanted")
	}
	var ratios, spread []float64
	var rows []data.Point
	for i, p := range points {
		if v := viscosity[i]; v > 0 && p.Used && p.Frequency > 0 && magnitude(p) > 0 {
			ratios = append(ratios, math.Log(magnitude(p)/(2*math.Pi*p.Frequency*v)))
			rows = append(rows, p)
		}
	}
	if len(ratios) < 3 {
		return data.Finding{}, false
	}
	middle := median(ratios)
	for _, r := range ratios {
		spread = append(spread, math.Abs(r-middle))
	}
	outside := 0
	for _, s := range spread {
		if s > 0.01 {
			outside++
		}
	}
	constant := 10*outside <= len(ratios)
	ratio := math.Exp(middle)
	if math.Abs(middle) < 0.01 && constant {
		return data.Finding{}, false
	}
	f = data.Finding{
		Code: "frequency-unit-contradicted", Severity: data.Severe, Test: test, Rows: data.Places(rows),
		Evidence: fmt.Sprintf("|G*|/(2πf·|η*|) is %.4g in %d rows and should be 1", ratio, len(rows)),
	}
	turn := math.Log(2 * math.Pi)
	switch {
	case !constant:
		f.Code, f.Severity = "viscosity-differs", data.Doubt
		f.Evidence = fmt.Sprintf("|G*|/(2πf·|η*|) should be 1 in every row; it is %.3g in the middle and more than 1 %% off that in %d of %d rows", ratio, outside, len(rows))
		f.Cause, f.Remedy = "columns that do not belong together, or a viscosity of another kind", "compare the file with the apparatus's own record"
	case math.Abs(middle+turn) < 0.02:
		f.Cause, f.Remedy = "the column of frequencies is in rad/s and was read as Hz: every frequency is too large by 2π", "state the unit in columns: {frequency: {unit: rad/s}}"
	case math.Abs(middle-turn) < 0.02:
		f.Cause, f.Remedy = "the column of frequencies is in Hz and was read as rad/s: every frequency is too small by 2π", "state the unit in columns: {frequency: {unit: Hz}}"
	default:
		f.Code, f.Severity = "viscosity-differs", data.Doubt
		f.Cause, f.Remedy = "the viscosity, the modulus or the frequency is in another unit than was read, or the viscosity is of another kind", "look at the three columns' units"
	}
	return f, true
}

// viscosities applies Viscosity to the columns that a campaign's tests have.
func viscosities(c *data.Campaign) (list []data.Finding) {
	for _, t := range c.Tests {
		if !oscillatory(t.Kind) {
			continue
		}
		var points []data.Point
		var viscosity []float64
		for _, r := range t.Runs {
			for _, p := range used(r) {
				points, viscosity = append(points, p), append(viscosity, p.StatedViscosity)
			}
		}
		if f, ok := Viscosity(t.Name, points, viscosity); ok {
			list = append(list, f)
		}
	}
	return list
}
