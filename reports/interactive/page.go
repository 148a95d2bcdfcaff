package interactive

import (
	"bytes"
	"embed"
	"fmt"
	"html/template"

	"phaselag/models"
	"phaselag/reports/html"
)

//go:embed assets
var assets embed.FS

// scripts are the files of the page's script in their order: each uses the ones
// before it.
var scripts = []string{"number.js", "unit.js", "laws.js", "domain.js", "model.js", "chart.js", "sheet.js"}

// Options are what a page can say beyond its compound.
type Options struct {
	// OwnStrainNote is what the commands say where no strain amplitude was asked
	// for; "": nothing.
	OwnStrainNote string
	// Frequencies are the lower and upper end of the charts, Hz; zero: 0.1 to 1000.
	Frequencies [2]float64
}

// New makes the interactive part of the page of c. Equal compounds and options give
// equal bytes.
func New(c *models.Compound, o Options) (*html.Live, error) {
	data, err := newData(c, o).block()
	if err != nil {
		return nil, fmt.Errorf("interactive: %w", err)
	}
	markup, err := markup(c)
	if err != nil {
		return nil, fmt.Errorf("interactive: %w", err)
	}
	return &html.Live{Markup: markup, Style: asset("live.css"), Script: script(scripts), Data: data}, nil
}

func asset(name string) string {
	b, err := assets.ReadFile("assets/" + name)
	if err != nil {
		panic("interactive: " + err.Error()) // embedded
	}
	return string(b)
}

func script(names []string) string {
	var b bytes.Buffer
	for _, name := range names {
		b.WriteString(asset(name))
	}
	return b.String()
}

func markup(c *models.Compound) ([]byte, error) {
	t, err := template.New("live").Parse(asset("live.tmpl"))
	if err != nil {
		return nil, err
	}
	var b bytes.Buffer
	err = t.Execute(&b, struct {
		Symbol string
		Sweeps bool // the amplitude can be drawn
		Strain bool // an amplitude can be asked for
	}{symbol(c), c.Amplitude.Law != models.AmplitudeNone && c.Domain.Strain != nil && c.Domain.Strain[0] > 0 && c.Domain.Strain[1] > c.Domain.Strain[0], c.Domain.Strain != nil})
	return b.Bytes(), err
}
