package interactive_test

import (
	"fmt"
	"math"
	"regexp"
	"strings"
	"testing"

	"phaselag/data/unit"
	"phaselag/models"
)

// Pages of unusual compounds work, too: Young's modulus, no strain amplitude stated, one
// temperature, a window that 10 Hz do not reach or that no chart shows, a narrow range
// of strain. Each begins with an answer, and shows as many curves as there can be.
func TestUnusualCompounds(t *testing.T) {
	chromium(t)
	base := *invented(t)
	type kind struct {
		name   string
		change func(*models.Compound)
		curves int
	}
	none := models.Amplitude{Law: models.AmplitudeNone, Coupling: models.Overlay, Storage: unit.NaN(), Loss: unit.NaN(), Critical: unit.NaN(), Exponent: unit.NaN(), Activation: unit.NaN(), Frequency: models.RateIndependent, ReferenceFrequency: unit.NaN()}
	bare := func(c *models.Compound) { c.Uncertainty.Parameters, c.Uncertainty.Cholesky = nil, nil }
	kinds := []kind{
		{"as it is", func(*models.Compound) {}, 6},
		{"no strain stated, Young's modulus", func(c *models.Compound) {
			bare(c)
			c.Amplitude, c.ModulusKind = none, "young"
			c.Domain.Strain, c.Domain.OwnStrain, c.Domain.AmplitudeMeasuredAt = nil, unit.NaN(), nil
		}, 6},
		{"one temperature", func(c *models.Compound) {
			bare(c)
			c.Shift, c.Vertical = models.Shift{Law: models.LawNone, C1: unit.NaN(), C2: unit.NaN(), Activation: unit.NaN()}, models.Vertical{Law: models.VerticalNone, Expansion: unit.NaN()}
			c.Domain.Temperature = models.Range{23, 23}
		}, 1},
		{"slow only", func(c *models.Compound) { c.Domain.ReducedFrequency = models.Range{0, 0.7} }, 3}, // 23, 60 and 80 °C have a_T of 1 and less
		{"beyond the charts", func(c *models.Compound) {
			c.Domain.ReducedFrequency, c.Domain.Temperature = models.Range{1e5, 1e6}, models.Range{20, 30}
		}, 0},
		{"one strain amplitude", func(c *models.Compound) { c.Domain.Strain = &models.Range{0.2, 0.2} }, 6},
		{"sixty temperatures", func(c *models.Compound) {
			c.Shift.Factors = nil
			for i := range 60 {
				c.Shift.Factors = append(c.Shift.Factors, models.ShiftFactor{TemperatureC: float64(2*i - 40), LogShift: unit.NaN(), U: unit.NaN(), Offset: unit.NaN()})
			}
		}, 15},
	}
	s := &site{pages: map[string]string{}}
	var compounds []*models.Compound
	for i, k := range kinds {
		c := base
		k.change(&c)
		made, err := models.New(c)
		if err != nil {
			t.Fatalf("%s: %v", k.name, err)
		}
		_, page, _ := sheet(t, made)
		s.pages[fmt.Sprintf("/sheet%d", i)] = string(page)
		compounds = append(compounds, made)
	}
	s.pages["/"] = page(driver, `
(async () => {
  const list = [];
  for (let i = 0; i < `+fmt.Sprint(len(kinds))+`; i++) {
    await frame(700, (d, w) => {
      const svg = charts(d)[0], a = answer(d);
      svg.focus();
      svg.dispatchEvent(new w.KeyboardEvent("keydown", { key: "ArrowRight", cancelable: true }));
      list.push({ ...a, Shown: !d.getElementById("live").hidden, Curves: svg.querySelectorAll(".curve").length, Read: readout(d), Bad: (svg.outerHTML.match(/NaN|Infinity|undefined/g) || []).length, Fields: ["frequency", "temperature"].map((k) => d.querySelector('[data-live="' + k + '"]').value),
        Strain: d.querySelector('[data-live="strain"]') !== null, Modes: d.querySelectorAll('[name="live-mode"]').length, Text: text(d.getElementById("live")) });
    }, "/sheet" + i);
  }
  out(list);
})().catch((e) => out([{ Refusal: String(e.stack || e) }]));`)
	var got []struct {
		Cells, Fields []string
		Refusal, Read string
		Shown, Strain bool
		Curves, Bad   int
		Modes         int
		Text          string
	}
	run(t, s, &got, "--virtual-time-budget=20000")
	if len(got) != len(kinds) {
		t.Fatalf("%+v", got)
	}
	for i, k := range kinds {
		g, c := got[i], compounds[i]
		q := models.Condition{Strain: math.NaN()}
		for j, x := range []*float64{&q.Frequency, &q.Temperature} {
			var err error
			if *x, err = unit.Parse(g.Fields[j], []unit.Quantity{unit.Frequency, unit.Temperature}[j]); err != nil {
				t.Error(err)
			}
		}
		cells, words := expected(t, c, q)
		if strings.Join(cells, " ") != strings.Join(g.Cells, " ") || g.Refusal != "" || words != "" {
			t.Errorf("%s: the page begins at %q with %q %q, the command has %q %q", k.name, g.Fields, g.Cells, g.Refusal, cells, words)
		}
		if g.Curves != k.curves || !g.Shown || g.Bad > 0 {
			t.Errorf("%s: %d curves, not %d; shown %v, %d bad numbers", k.name, g.Curves, k.curves, g.Shown, g.Bad)
		}
		if reads := strings.Contains(g.Read, "±"); reads != (k.curves > 0) {
			t.Errorf("%s: read %q", k.name, g.Read)
		}
		if g.Strain != (c.Domain.Strain != nil) || (g.Modes == 2) != (c.Amplitude.Law != models.AmplitudeNone && c.Domain.Strain[1] > c.Domain.Strain[0]) {
			t.Errorf("%s: strain field %v, %d choices", k.name, g.Strain, g.Modes)
		}
		if wrong := map[string]string{"shear": "E", "young": "G"}[c.ModulusKind]; regexp.MustCompile(`\b` + wrong + `[′″*]`).MatchString(g.Text) {
			t.Errorf("%s: the letter %s stands on the page", k.name, wrong)
		}
	}
}
