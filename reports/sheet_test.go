package reports

import (
	"bytes"
	"image"
	"image/color"
	"image/png"
	"math"
	"strings"
	"testing"
	"time"

	"phaselag/data"
	"phaselag/models"
	"phaselag/reports/figure"
)

// One pound-force per square inch is 6894.757293168 Pa (NIST SP 811, appendix B; value
// from memory).
func TestPsi(t *testing.T) {
	if math.Abs(psi/6894.757293168-1) > 1e-12 {
		t.Errorf("%.12g", psi)
	}
	if f := fahrenheit(-40); f != -40 {
		t.Errorf("−40 °C are %g °F", f)
	}
}

// A laboratory's settings decide on sections and their order, conditions, units and
// paper.
func TestSettings(t *testing.T) {
	r := demoResult(t, 1)
	plain := Datasheet(r, time.Time{}, nil)
	if n := len(plain.Sections); n < 9 || plain.Paper != figure.A4 {
		t.Errorf("%d sections by default", n)
	}
	var logo bytes.Buffer
	img := image.NewNRGBA64(image.Rect(0, 0, 30, 10))
	img.Set(3, 3, color.NRGBA64{0x1234, 0x5678, 0x9abc, 0x8000})
	if err := png.Encode(&logo, img); err != nil {
		t.Fatal(err)
	}
	set := &data.Sheet{
		Title: "HM-60", Laboratory: "Invented\nMill Lane 1", Sections: []string{"signatures", "properties", "identity"}, InchPound: true, Letter: true, Logo: logo.Bytes(),
		Signatories: []data.Signatory{{Name: "A. Bench", Role: "tested"}},
		Conditions:  []data.SheetCondition{{Frequency: 10, Temperature: 296.15, Strain: 0.01}, {Frequency: 10, Temperature: 400, Strain: 0.01}},
	}
	d := Datasheet(r, time.Time{}, set)
	var heads []string
	for _, s := range d.Sections {
		heads = append(heads, s.Heading)
	}
	if strings.Join(heads, "|") != "Signatures|Properties|Identity, state and conditions" || d.Paper != figure.Letter || d.Title != "HM-60" || d.Author != "Invented" {
		t.Errorf("%q, paper %v, title %q, author %q", heads, d.Paper, d.Title, d.Author)
	}
	grid := d.Sections[1].Blocks[0].(figure.Grid)
	units := ""
	for _, c := range grid.Columns {
		units += c.Unit + " "
	}
	if !strings.Contains(units, "psi") || !strings.Contains(units, "°F") || strings.Contains(units, "MPa") {
		t.Errorf("units %s", units)
	}
	m := r.Compound.Value(models.Condition{Frequency: 10, Temperature: 296.15, Strain: 0.01})
	if got, want := grid.Rows[0][3], real(m)/6894.757293168; !strings.HasPrefix(got, figure.Readable(short(want))[:3]) {
		t.Errorf("G' is %s psi, should be %.1f", got, want)
	}
	if text := d.Sections[1].Blocks[1].(figure.Paragraph).Text; !strings.Contains(text, "Row 2: Outside") {
		t.Errorf("the condition outside the domain: %q", text)
	}
	p, h, err := Sheets(r, set)
	if err != nil || !bytes.HasPrefix(p, []byte("%PDF")) || !bytes.Contains(h, []byte("data:image/png;base64,")) {
		t.Errorf("%d and %d bytes, %v", len(p), len(h), err)
	}
	again, _, err := Sheets(r, set)
	if err != nil || !bytes.Equal(p, again) {
		t.Error("two sheets differ")
	}
}
