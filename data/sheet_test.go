package data

import (
	"bytes"
	"image"
	"image/png"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func TestSheet(t *testing.T) {
	dir := t.TempDir()
	write := func(name, text string) string {
		p := filepath.Join(dir, name)
		if err := os.WriteFile(p, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
		return p
	}
	var logo bytes.Buffer
	if err := png.Encode(&logo, image.NewGray(image.Rect(0, 0, 8, 4))); err != nil {
		t.Fatal(err)
	}
	write("logo.png", logo.String())
	write("logo.svg", "<svg/>")
	s, err := OpenSheet(write("a.yaml", `title: HM-60
laboratory: |
  Invented Laboratory
  Mill Lane 1
signatories: [{name: A. Tester, role: operator}, {name: B. Head}]
logo: logo.png
sections: [identity, properties, findings, signatures]
conditions: [{frequency: 10 Hz, temperature: 23 °C}, {frequency: 1 Hz, temperature: -20 °C, strain: 0.5 %}]
units: inch-pound
paper: letter
`))
	if err != nil {
		t.Fatal(err)
	}
	if !s.InchPound || !s.Letter || len(s.Logo) != logo.Len() || len(s.Sections) != 4 || len(s.Signatories) != 2 || s.Conditions[1].Strain != 0.005 || !math.IsNaN(s.Conditions[0].Strain) {
		t.Errorf("%+v", s)
	}
	for _, v := range []struct{ text, want string }{
		{"sections: [weather]", "is no section"},
		{"sections: [identity, identity]", "twice"},
		{"logo: logo.svg", "neither PNG nor JPEG"},
		{"logo: gone.png", "no such file"},
		{"units: metric", "not known here"},
		{"conditions: [{frequency: 1 Hz}]", "needs a frequency and a temperature"},
		{"signatories: [{role: x}]", "without a name"},
		{"papre: A4", "unknown key"},
	} {
		if _, err := OpenSheet(write("b.yaml", v.text)); err == nil || !strings.Contains(err.Error(), v.want) {
			t.Errorf("%s: %v, should say %q", v.text, err, v.want)
		}
	}
}
