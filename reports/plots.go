package reports

import (
	"fmt"
	"io"
	"math"
	"strings"

	"phaselag/fitting/quality"
	"phaselag/models"
	"phaselag/reports/term"
)

// PlotModulus draws the storage modulus of the asked conditions in a terminal: over
// frequency where several were asked for, else over temperature, else over strain; a
// curve for each of the other conditions, as many as can be told apart. It draws nothing
// of a single condition.
func PlotModulus(w io.Writer, c *models.Compound, list []models.Condition, width int) error {
	distinct := func(of func(models.Condition) float64) int {
		seen := map[float64]bool{}
		for _, q := range list {
			seen[of(q)] = true
		}
		return len(seen)
	}
	s := symbol(c)
	axes := []struct {
		of   func(models.Condition) float64
		axis term.Axis
		text func(models.Condition) string
	}{
		{func(q models.Condition) float64 { return q.Frequency }, term.Axis{Label: "frequency f (Hz)", Log: true}, func(q models.Condition) string { return fmt.Sprintf("%.4g Hz", q.Frequency) }},
		{func(q models.Condition) float64 { return celsius(q.Temperature) }, term.Axis{Label: "temperature T (°C)"}, func(q models.Condition) string { return minusSign(fmt.Sprintf("%.4g °C", celsius(q.Temperature))) }},
		{func(q models.Condition) float64 { return 100 * q.Strain }, term.Axis{Label: "strain amplitude (%)", Log: true}, func(q models.Condition) string {
			if math.IsNaN(q.Strain) {
				return ""
			}
			return fmt.Sprintf("%.3g %%", 100*q.Strain)
		}},
	}
	at := -1
	for i, a := range axes {
		if distinct(a.of) > 1 {
			at = i
			break
		}
	}
	if at < 0 {
		return nil
	}
	chart := term.Chart{Width: width, Height: 22, X: axes[at].axis, Y: term.Axis{Label: s + "′ (MPa)", Log: true}}
	index := map[string]int{}
	for _, q := range list {
		m, err := c.Modulus(q)
		if err != nil {
			continue
		}
		var parts []string
		for i, a := range axes {
			if text := a.text(q); i != at && text != "" {
				parts = append(parts, text)
			}
		}
		name := strings.Join(parts, ", ")
		k, ok := index[name]
		if !ok {
			if len(chart.Series) == term.MostSeries {
				continue
			}
			k = len(chart.Series)
			index[name] = k
			chart.Series = append(chart.Series, term.Series{Name: name})
		}
		chart.Series[k].X = append(chart.Series[k].X, axes[at].of(q))
		chart.Series[k].Y = append(chart.Series[k].Y, m.Storage/1e6)
	}
	if len(chart.Series) == 0 {
		return nil
	}
	return term.Plot(w, chart)
}

// PlotControl draws a control chart in a terminal.
func PlotControl(w io.Writer, property, unit string, c *quality.Chart, width int) error {
	label := property
	if unit != "" && unit != "1" {
		label += " (" + unit + ")"
	}
	values := term.Series{Name: c.Kind, Points: true}
	lower, centre, upper := term.Series{Name: "lower limit"}, term.Series{Name: "centre"}, term.Series{Name: "upper limit"}
	for i, l := range c.Lines {
		x := float64(i + 1)
		values.X, values.Y = append(values.X, x), append(values.Y, l.Value)
		lower.X, lower.Y = append(lower.X, x), append(lower.Y, l.Lower)
		centre.X, centre.Y = append(centre.X, x), append(centre.Y, l.Centre)
		upper.X, upper.Y = append(upper.X, x), append(upper.Y, l.Upper)
	}
	return term.Plot(w, term.Chart{Width: width, Height: 20, X: term.Axis{Label: "batch, in the order of testing"}, Y: term.Axis{Label: label}, Series: []term.Series{values, lower, centre, upper}})
}
