package reports

import (
	"fmt"
	"io"
	"math"
	"math/cmplx"

	"phaselag/models"
	"phaselag/models/mount"
	"phaselag/reports/term"
)

// Charts for the command line, at most width columns wide; 0 stands for 80.

// PlotMaster draws storage and loss modulus at the reference temperature over the
// domain's reduced frequencies.
func PlotMaster(w io.Writer, c *models.Compound, width int) error {
	d := c.Domain.ReducedFrequency
	if !(d[1] > d[0]) {
		return fmt.Errorf("the domain has one reduced frequency only, %.4g Hz: there is no curve", d[0])
	}
	s := symbol(c)
	st, lo := term.Series{Name: s + "′"}, term.Series{Name: s + "″"}
	for _, f := range logSpace(d[0], d[1], curveDecade) {
		g := c.Value(models.Condition{Frequency: f, Temperature: c.ReferenceTempC + zeroC, Strain: math.NaN()})
		st.X, st.Y = append(st.X, f), append(st.Y, real(g)/1e6)
		lo.X, lo.Y = append(lo.X, f), append(lo.Y, imag(g)/1e6)
	}
	return term.Plot(w, term.Chart{Width: width, Height: 22,
		X:      term.Axis{Label: fmt.Sprintf("frequency f·a_T (Hz) reduced to %s", degreesLabel(c.ReferenceTempC)), Log: true},
		Y:      term.Axis{Label: fmt.Sprintf("%s′, %s″ (MPa)", s, s), Log: true},
		Series: []term.Series{st, lo}})
}

// PlotStiffness draws the dynamic stiffness |K*| of a mount, or its loss factor, over
// frequency at up to term.MostSeries temperatures in K, inside the domain. Of where, the
// temperatures are not used. It returns an error where no condition lies inside, or no
// amplitude is stated.
func PlotStiffness(w io.Writer, c *models.Compound, m *mount.Mount, quantity MapQuantity, temperatures []float64, where Spread, width int) error {
	s, err := where.filled(c)
	if err != nil {
		return err
	}
	u := unitsOf(m)
	chart := term.Chart{Width: width, Height: 20, X: term.Axis{Label: "frequency f (Hz)", Log: s.High/s.Low > 5}, Y: term.Axis{Label: "|K*| (" + u.stiffness + ")"}}
	if quantity == MapLossFactor {
		chart.Y.Label = "loss factor η"
	}
	var firstErr error
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, T := range temperatures {
		line := term.Series{Name: degreesLabel(roundTo(celsius(T), 4))}
		for _, f := range logSpace(s.Low, s.High, 2*curveDecade) {
			y := math.NaN()
			state, err := mountAt(c, m, StiffnessQuery{Frequency: f, Temperature: T, Displacement: s.Displacement})
			switch {
			case err != nil:
				if firstErr == nil {
					firstErr = err
				}
			case state.inside(c) == nil && real(state.value) > 0:
				y = u.scale * cmplx.Abs(state.value)
				if quantity == MapLossFactor {
					y = imag(state.value) / real(state.value)
				}
				lo, hi = math.Min(lo, y), math.Max(hi, y)
			}
			line.X, line.Y = append(line.X, f), append(line.Y, y)
		}
		chart.Series = append(chart.Series, line)
	}
	if lo > hi {
		if firstErr != nil {
			return firstErr
		}
		return fmt.Errorf("no condition from %.4g to %.4g Hz lies inside the domain at these temperatures: %s", s.Low, s.High, domainText(c))
	}
	chart.Y.Log = quantity == MapStiffness && hi/lo > 4
	return term.Plot(w, chart)
}
