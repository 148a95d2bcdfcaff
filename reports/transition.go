package reports

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"phaselag/models"
	"phaselag/reports/figure"
	"phaselag/reports/table"
)

// transitionFrequencies are those at which the temperature dependence is drawn and the
// glass transition read, Hz.
var transitionFrequencies = []float64{1, 10, 100}

// readings are the definitions with their names.
func readings(c *models.Compound) []struct {
	kind models.Reading
	name string
} {
	return []struct {
		kind models.Reading
		name string
	}{{models.PeakOfLossFactor, "peak of tan δ"}, {models.PeakOfLossModulus, "peak of " + symbol(c) + "″"}}
}

// TransitionTable gives the readings of the glass transition at the frequencies, Hz, by
// each definition, with 95 % intervals; where the domain holds no peak the row has no
// number and says why. A frequency that is none is an error.
func TransitionTable(c *models.Compound, frequencies []float64) (table.Table, error) {
	t := table.Table{Name: "glass-transition 1", Columns: []table.Column{
		{Key: "definition"}, {Key: "frequency_Hz", Heading: "f", Unit: "Hz"},
		{Key: "temperature_C", Heading: "T", Unit: "°C", Interval: "temperature_U95_K"}, {Key: "temperature_U95_K", Heading: "± T", Unit: "K"},
		{Key: "low_95_C", Heading: "from", Unit: "°C", Digits: 4}, {Key: "high_95_C", Heading: "to", Unit: "°C", Digits: 4},
		{Key: "height", Heading: "height", Interval: "height_U95"}, {Key: "height_U95", Heading: "± height"}, {Key: "height_unit"},
		{Key: "reason"},
	}}
	t.Assumptions = []string{"glass transition temperatures are readings by the definition named, at the frequency named; ± by the delta method, from and to where the slope may be zero (95 %)"}
	for _, v := range readings(c) {
		for _, f := range frequencies {
			p, err := c.Transition(v.kind, f, math.NaN())
			row := []table.Cell{table.Text(v.name), table.Number(f)}
			var none *models.NoPeakError
			switch {
			case errors.As(err, &none):
				for range 6 {
					row = append(row, table.Number(math.NaN()))
				}
				row = append(row, table.Text(""), table.Text(none.Reason))
			case err != nil:
				return table.Table{}, err
			default:
				scale, unit := 1.0, "1"
				if v.kind == models.PeakOfLossModulus {
					scale, unit = 1e-6, "MPa"
				}
				row = append(row, table.Number(celsius(p.Temperature)), table.Number(p.U95), table.Number(celsius(p.Low)), table.Number(celsius(p.High)),
					table.Number(scale*p.Height), table.Number(scale*p.HeightU95), table.Text(unit), table.Text(""))
			}
			t.Rows = append(t.Rows, row)
		}
	}
	return t, nil
}

// transitions is the table at the usual frequencies; ok is false where there is no
// compound, or no temperature to read at.
func transitions(c *models.Compound) (t table.Table, ok bool) {
	if c == nil || c.Domain.Temperature[0] == c.Domain.Temperature[1] {
		return t, false
	}
	t, err := TransitionTable(c, transitionFrequencies)
	if err != nil { // the frequencies are positive
		panic("reports: " + err.Error())
	}
	return t, true
}

// transitionBlocks is the table of the datasheet, with the readings that exist; nil
// where there is none.
func transitionBlocks(c *models.Compound) []figure.Block {
	if c == nil {
		return nil
	}
	g := figure.Grid{Caption: "Glass transition, read by definition, with 95 % intervals where the slope of the curve may be zero", Columns: []figure.GridColumn{
		{Heading: "Definition"}, {Heading: "Frequency", Unit: "Hz", Number: true}, {Heading: "T", Unit: "°C", Number: true}, {Heading: "from", Unit: "°C", Number: true}, {Heading: "to", Unit: "°C", Number: true}}}
	for _, v := range readings(c) {
		for _, f := range transitionFrequencies {
			if p, err := c.Transition(v.kind, f, math.NaN()); err == nil {
				g.Rows = append(g.Rows, []string{v.name, short(f), degrees(p.Temperature, p.U95), degrees(p.Low, p.U95), degrees(p.High, p.U95)})
			}
		}
	}
	if g.Rows == nil {
		return nil
	}
	return []figure.Block{g}
}

// transitionFigure draws storage modulus, loss modulus and loss factor over temperature
// at fixed frequencies, inside the domain, and marks the peaks that lie there; ok is
// false where the domain has no stretch of temperatures at any of the frequencies.
func transitionFigure(c *models.Compound) (out namedFigure, ok bool) {
	s := symbol(c)
	axis := figure.Auto("temperature T (°C)", false)
	panels := []figure.Panel{
		{X: axis, Y: figure.Auto(s+"′ (MPa)", true)},
		{X: axis, Y: figure.Auto(s+"″ (MPa)", true)},
		{X: axis, Y: figure.Auto("tan δ", false)},
	}
	dashes := []figure.Dash{figure.Solid, figure.Dashed, figure.DashDot}
	var peaks [3][]figure.Series
	var texts []string
	var missing []string
	for i, f := range transitionFrequencies {
		lo, hi, err := c.Temperatures(f, math.NaN())
		if err != nil || !(hi-lo > 1) {
			missing = append(missing, fmt.Sprintf("%g Hz", f))
			continue
		}
		ok = true
		var st, lm, eta band
		const n = 120
		for k := range n + 1 {
			T := lo + (hi-lo)*float64(k)/n
			m, err := c.Modulus(models.Condition{Frequency: f, Temperature: T, Strain: math.NaN()})
			if err != nil {
				continue
			}
			st.add(celsius(T), m.Storage/1e6, m.StorageU95/1e6)
			lm.add(celsius(T), m.Loss/1e6, m.LossU95/1e6)
			eta.add(celsius(T), m.LossFactor, m.LossFactorU95)
		}
		name := fmt.Sprintf("%g Hz, 95 %% band", f)
		colour := figure.Pick(i)
		for k, b := range []*band{&st, &lm, &eta} {
			panels[k].Series = append(panels[k].Series, b.series(name, dashes[i], colour))
		}
		for _, v := range readings(c) {
			p, err := c.Transition(v.kind, f, math.NaN())
			if err != nil {
				continue
			}
			k, y := 2, p.Height
			if v.kind == models.PeakOfLossModulus {
				k, y = 1, p.Height/1e6
			}
			peaks[k] = append(peaks[k],
				figure.Series{Name: v.name + ", 95 %", X: []float64{celsius(p.Low), celsius(p.High)}, Y: []float64{y, y}, Line: figure.Solid, Width: 1.6},
				figure.Series{Name: v.name + ", 95 %", X: []float64{celsius(p.Temperature)}, Y: []float64{y}, Glyph: figure.Circle, Hollow: true, Size: 1.8})
			texts = append(texts, fmt.Sprintf("%s at %g Hz %s °C (%s to %s °C)", v.name, f, degrees(p.Temperature, p.U95), degrees(p.Low, p.U95), degrees(p.High, p.U95)))
		}
	}
	for k := range panels {
		panels[k].Series = append(panels[k].Series, peaks[k]...)
	}
	caption := "Temperature dependence of the compound at fixed frequencies, inside the domain, with 95 % bands." + ownStrainText(c)
	if len(missing) > 0 {
		caption += fmt.Sprintf(" Outside the domain at all temperatures: %s.", strings.Join(missing, ", "))
	}
	switch {
	case len(texts) > 0:
		caption += fmt.Sprintf(" Glass transition, read by definition: %s; intervals: 95 %%, where the slope of the curve may be zero.", strings.Join(texts, "; "))
	case ok:
		caption += " No glass transition is read: neither tan δ nor " + s + "″ has a peak that lies inside the domain with its interval."
	}
	return namedFigure{"temperature-curves", caption, figure.Figure{Width: 170, Height: 150, Columns: 1, Shared: true, Panels: panels}}, ok
}

// degrees writes a temperature in K as °C, with one digit more than its half-width
// needs at least.
func degrees(T, u float64) string {
	places := 1
	if u < 0.1 {
		places = 2
	}
	return minusSign(fmt.Sprintf("%.*f", places, T-zeroC))
}
