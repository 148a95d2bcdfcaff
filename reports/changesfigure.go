package reports

import (
	"fmt"
	"math"
	"sort"

	"phaselag/data"
	"phaselag/fitting/changes"
	"phaselag/models"
	"phaselag/reports/figure"
)

// ChangesFigure draws the approved compound and the batch that the changes make of it,
// with 95 % bands: storage modulus and loss factor over temperature at one frequency, and
// over strain amplitude where there was a strain sweep. The points of a campaign stand
// beside them; campaign is nil where two compound files were compared.
func ChangesFigure(c *changes.Comparison, approved *models.Compound, campaign *data.Campaign) (figure.Figure, string) {
	f, sweep := middleFrequency(campaign), strainRun(campaign)
	s := symbol(approved)
	axis := figure.Auto("temperature T (°C)", false)
	panels := []figure.Panel{{X: axis, Y: figure.Auto(s+"′ (MPa)", true)}, {X: axis, Y: figure.Auto("tan δ", false)}}
	name := [2]string{"approved, 95 % band", "batch, 95 % band"}
	answer := [2]func(models.Condition) (models.Modulus, error){approved.Modulus, c.Modulus}
	dash := [2]figure.Dash{figure.Solid, figure.Dashed}
	draw := func(panel int, x []float64, at func(float64) models.Condition, scale func(float64) float64) {
		for i := range answer {
			var g, eta band
			for _, v := range x {
				m, err := answer[i](at(v))
				if err != nil {
					continue
				}
				g.add(scale(v), m.Storage/1e6, m.StorageU95/1e6)
				eta.add(scale(v), m.LossFactor, m.LossFactorU95)
			}
			if len(g.x) > 1 {
				panels[panel].Series = append(panels[panel].Series, g.series(name[i], dash[i], figure.Pick(i)))
				panels[panel+1].Series = append(panels[panel+1].Series, eta.series(name[i], dash[i], figure.Pick(i)))
			}
		}
	}
	var T []float64
	for k := range 101 {
		d := approved.Domain.Temperature
		T = append(T, d[0]+(d[1]-d[0])*float64(k)/100+zeroC)
	}
	draw(0, T, func(v float64) models.Condition {
		return models.Condition{Frequency: f, Temperature: v, Strain: math.NaN()}
	}, celsius)
	caption := fmt.Sprintf("Approved compound and batch at %.4g Hz", f)
	if sweep != nil {
		strain := figure.Auto("strain amplitude (%)", true)
		panels = append(panels, figure.Panel{X: strain, Y: figure.Auto(s+"′ (MPa)", true)}, figure.Panel{X: strain, Y: figure.Auto("tan δ", false)})
		var x []float64
		lo, hi := sweep.Points[0].Strain, sweep.Points[0].Strain
		for _, p := range sweep.Points {
			if p.Used {
				lo, hi = min(lo, p.Strain), max(hi, p.Strain)
			}
		}
		for k := range 61 {
			x = append(x, lo*math.Pow(hi/lo, float64(k)/60))
		}
		draw(2, x, func(v float64) models.Condition {
			return models.Condition{Frequency: sweep.Frequency, Temperature: sweep.Temperature, Strain: v}
		}, func(v float64) float64 { return 100 * v })
		caption += fmt.Sprintf(", and over strain amplitude at %.4g Hz, %.4g °C", sweep.Frequency, celsius(sweep.Temperature))
	}
	if campaign != nil {
		addPoints(panels, campaign, f, sweep)
		caption += "; points: the batch as measured, with its specimens’ factors"
	}
	caption += ". The batch is the approved compound with the fitted changes; " + c.Summary() + "."
	height := 80.0
	if sweep != nil {
		height = 140
	}
	return figure.Figure{Width: 170, Height: height, Columns: 2, Panels: panels}, caption
}

// middleFrequency is the middle one of a campaign's isotherms, 10 Hz without one.
func middleFrequency(campaign *data.Campaign) float64 {
	var all []float64
	if campaign != nil {
		for _, t := range campaign.Tests {
			if t.Kind != data.FrequencySweep {
				continue
			}
			for _, r := range t.Runs {
				for _, p := range r.Points {
					if p.Used {
						all = append(all, p.Frequency)
					}
				}
			}
		}
	}
	if len(all) == 0 {
		return 10
	}
	sort.Float64s(all)
	return all[len(all)/2]
}

// strainRun is the first strain sweep with a range of strains, nil without one.
func strainRun(campaign *data.Campaign) *data.Run {
	if campaign == nil {
		return nil
	}
	for i := range campaign.Tests {
		t := &campaign.Tests[i]
		if t.Kind != data.StrainSweep {
			continue
		}
		for k := range t.Runs {
			if r := &t.Runs[k]; len(r.Points) > 2 && r.Points[0].Strain > 0 && !math.IsNaN(r.Frequency) && !math.IsNaN(r.Temperature) {
				return r
			}
		}
	}
	return nil
}

// addPoints puts the measured points into the panels.
func addPoints(panels []figure.Panel, campaign *data.Campaign, f float64, sweep *data.Run) {
	put := func(panel int, x, y []float64) {
		if len(x) > 0 {
			panels[panel].Series = append(panels[panel].Series, figure.Series{Name: "batch as measured", X: x, Y: y, Glyph: figure.Circle, Hollow: true, Colour: figure.Pick(1), Size: 1.6})
		}
	}
	var x, g, eta []float64
	for _, t := range campaign.Tests {
		if t.Kind != data.FrequencySweep {
			continue
		}
		for _, r := range t.Runs {
			for _, p := range r.Points {
				if p.Used && math.Abs(p.Frequency/f-1) < 0.02 {
					x, g, eta = append(x, celsius(p.Temperature)), append(g, p.Storage/1e6), append(eta, p.Loss/p.Storage)
				}
			}
		}
	}
	put(0, x, g)
	put(1, x, eta)
	if sweep == nil {
		return
	}
	x, g, eta = nil, nil, nil
	for _, p := range sweep.Points {
		if p.Used && p.Strain > 0 {
			x, g, eta = append(x, 100*p.Strain), append(g, p.Storage/1e6), append(eta, p.Loss/p.Storage)
		}
	}
	put(2, x, g)
	put(3, x, eta)
}
