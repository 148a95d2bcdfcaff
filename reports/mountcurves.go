package reports

import (
	"fmt"
	"math"
	"math/cmplx"
	"strings"

	"phaselag/models"
	"phaselag/models/mount"
	"phaselag/reports/figure"
)

// StiffnessCurves draws the dynamic stiffness |K*| and the loss factor of a mount against
// frequency at temperatures in K, with 95 % bands, inside the domain. Where the mount
// file states a production tolerance, the stiffness of the softest and the hardest parts
// is drawn as dashed lines. Of where, the temperatures are not used. It returns an error
// where no condition lies inside, or no amplitude is stated.
func StiffnessCurves(c *models.Compound, m *mount.Mount, temperatures []float64, where Spread) (fig figure.Figure, caption string, err error) {
	s, err := where.filled(c)
	if err != nil {
		return figure.Figure{}, "", err
	}
	u := unitsOf(m)
	soft, hard, _ := production(c, m)
	var firstErr error
	var stiffness, loss []figure.Series
	lo, hi := math.Inf(1), math.Inf(-1)
	var missing []string
	for i, T := range temperatures {
		var k, eta, softest, hardest band
		for _, f := range logSpace(s.Low, s.High, 2*curveDecade) {
			state, err := mountAt(c, m, StiffnessQuery{Frequency: f, Temperature: T, Displacement: s.Displacement})
			if err != nil || state.inside(c) != nil || !(real(state.value) > 0) {
				if firstErr == nil {
					firstErr = err
				}
				continue
			}
			v := state.value
			mag, tan := cmplx.Abs(v), imag(v)/real(v)
			k.add(f, u.scale*mag, u.scale*state.half(c, func(d complex128) float64 { return (real(v)*real(d) + imag(v)*imag(d)) / mag }, state.ownU*mag))
			eta.add(f, tan, state.half(c, func(d complex128) float64 { return (imag(d) - tan*real(d)) / real(v) }, 0))
			lo, hi = math.Min(lo, u.scale*mag), math.Max(hi, u.scale*mag)
			if soft == hard {
				continue
			}
			for n, factor := range [2]float64{soft, hard} {
				end, err := mountAt(c, scaled(m, factor), StiffnessQuery{Frequency: f, Temperature: T, Displacement: s.Displacement})
				if err == nil {
					[2]*band{&softest, &hardest}[n].add(f, u.scale*cmplx.Abs(end.value), 0)
				}
			}
		}
		if len(k.x) == 0 {
			missing = append(missing, degreesLabel(roundTo(celsius(T), 4)))
			continue
		}
		colour := figure.Ramp(i, len(temperatures))
		a, b := k.series("", figure.Solid, colour), eta.series("", figure.Solid, colour)
		a.Mark = degreesLabel(roundTo(celsius(T), 4))
		b.Mark = a.Mark
		stiffness, loss = append(stiffness, a), append(loss, b)
		for _, end := range []*band{&softest, &hardest} {
			if len(end.x) > 0 {
				stiffness = append(stiffness, figure.Series{X: end.x, Y: end.y, Line: figure.Dashed, Width: 0.7, Colour: colour})
			}
		}
	}
	if len(stiffness) == 0 {
		if firstErr != nil {
			return figure.Figure{}, "", firstErr
		}
		return figure.Figure{}, "", fmt.Errorf("no condition from %.4g to %.4g Hz lies inside the domain at these temperatures: %s", s.Low, s.High, domainText(c))
	}
	x := figure.Axis{Label: "frequency f (Hz)", Log: s.High/s.Low > 5, Min: s.Low, Max: s.High}
	fig = figure.Figure{Width: 150, Height: 140, Columns: 1, Panels: []figure.Panel{
		{X: x, Y: figure.Auto("dynamic stiffness |K*| ("+u.stiffness+")", hi/lo > 4), Series: stiffness, Legend: figure.NoLegend},
		{X: x, Y: figure.Auto("loss factor η", false), Series: loss, Legend: figure.NoLegend},
	}}
	caption = fmt.Sprintf("Dynamic stiffness and loss factor of the mount %s, %s, inside the domain, with 95 %% bands.", m.Name, amplitudeText(m, s.Displacement))
	if soft != hard {
		caption += fmt.Sprintf(" Dashed: the softest and the hardest parts of production (± %s %s), which the bands do not hold.", short(m.Tolerance.Hardness), m.Tolerance.Scale)
	}
	if len(missing) > 0 {
		caption += " Outside the domain at all these frequencies: " + strings.Join(missing, ", ") + "."
	}
	return fig, caption, nil
}
