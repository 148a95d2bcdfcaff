package figure_test

import (
	"bytes"
	"encoding/xml"
	"errors"
	"flag"
	"io"
	"math"
	"os"
	"strings"
	"testing"

	"phaselag/reports/figure"
	"phaselag/reports/figure/figuretest"

	"pgregory.net/rapid"
)

var update = flag.Bool("update", false, "rewrite the golden files; look at the difference")

// small shows every element once.
func small() figure.Figure {
	right := figure.Auto("loss factor tan δ (–)", false)
	return figure.Figure{Width: 90, Height: 60, Alt: "a <small> figure", Panels: []figure.Panel{{
		Title: "invented numbers", X: figure.Auto("f·a_{T} (Hz)", true), Y: figure.Auto("G′ (MPa)", true), Right: &right,
		Notes: []string{"T_{ref} = 23 °C"},
		Lines: []figure.Reference{{Vertical: true, At: 10, Label: "10 Hz"}, {At: 2, Line: figure.Dotted}},
		Series: []figure.Series{
			{Name: "curve", X: []float64{1, 10, 100, 1000}, Y: []float64{1, 2, math.NaN(), 9}, Low: []float64{0.8, 1.7, 2, 3}, High: []float64{1.2, 2.3, 4, 12}, Line: figure.Solid, Colour: figure.Blue},
			{Name: "points", X: []float64{1, 10, 100, -5}, Y: []float64{1.1, 1.9, 0, 1}, YError: []float64{0.1, 0.2}, Glyph: figure.Circle, Hollow: true, Colour: figure.Vermillion},
			{Name: "loss", X: []float64{1, 1000}, Y: []float64{0.1, 0.3}, Glyph: figure.Cross, Line: figure.DashDot, Right: true, Colour: figure.Green},
		}}}}
}

func TestGolden(t *testing.T) {
	got, err := figure.SVG(small())
	if err != nil {
		t.Fatal(err)
	}
	const file = "testdata/small.svg"
	if *update {
		if err := os.WriteFile(file, got, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(got, want) {
		t.Errorf("%s differs; run the test with -update and look at the difference", file)
	}
}

func wellFormed(t interface{ Fatalf(string, ...any) }, b []byte) {
	d := xml.NewDecoder(bytes.NewReader(b))
	for {
		if _, err := d.Token(); errors.Is(err, io.EOF) {
			return
		} else if err != nil {
			t.Fatalf("not well-formed: %v", err)
		}
	}
}

func TestSameBytesTwice(t *testing.T) {
	for _, s := range figuretest.All() {
		a, err := figure.SVG(s.Figure)
		if err != nil {
			t.Fatal(err)
		}
		b, _ := figure.SVG(s.Figure)
		if !bytes.Equal(a, b) {
			t.Errorf("%s: two runs differ", s.Name)
		}
		wellFormed(t, a)
		if bytes.Contains(a, []byte(" id=")) || bytes.Contains(a, []byte("NaN")) || bytes.Contains(a, []byte("Inf")) {
			t.Errorf("%s: identifiers or numbers that are none", s.Name)
		}
	}
}

func TestText(t *testing.T) {
	b, err := figure.SVG(small())
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"<title>a &lt;small&gt; figure</title>", ">G′ (MPa)<", ">f·a<", ">T<", "sans-serif", `role="img"`} {
		if !strings.Contains(string(b), want) {
			t.Errorf("no %q", want)
		}
	}
	plain := figure.Figure{Panels: []figure.Panel{{X: figure.Auto("T (°C)", false), Y: figure.Auto("log a_{T}", false)}}}
	if got, want := plain.AltText(), "log aT against T (°C)"; got != want {
		t.Errorf("alternative text %q, want %q", got, want)
	}
}

// Whatever the numbers, there is a picture without panic.
func TestHostileNumbers(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	sets := [][]float64{nil, {1}, {5, 5, 5}, {0, 0}, {nan, nan}, {inf, -inf, 1}, {1e308, -1e308, 1e-308}, {5e-324, 1e299}, {1, 1 + 1e-15}, {-3, -2}, {-1e-300, 1e-300}}
	axes := []figure.Axis{{}, {Log: true}, figure.Auto("x", true), {Min: 3, Max: 1}, {Log: true, Min: -1, Max: 10}, {Log: true, Min: 2, Max: 2.0000001}, {Min: inf, Max: nan}, {Min: 1e299, Max: 1e300}}
	for _, xs := range sets {
		for _, ys := range sets {
			for _, a := range axes {
				right := a
				f := figure.Figure{Width: 60, Height: 40, Panels: []figure.Panel{{X: a, Y: a, Right: &right, Notes: []string{strings.Repeat("long ", 50)},
					Lines: []figure.Reference{{At: nan}, {At: 1e308, Label: "far"}, {Vertical: true, At: -1}},
					Series: []figure.Series{
						{Name: strings.Repeat("name ", 40), X: xs, Y: ys, Low: ys, High: xs, YError: xs, Line: figure.Dash(99), Glyph: figure.Glyph(99), Width: inf, Size: nan},
						{X: ys, Y: xs, Line: figure.Dashed, Right: true},
					}}}}
				b, err := figure.SVG(f)
				if err != nil {
					t.Fatal(err)
				}
				wellFormed(t, b)
				if bytes.Contains(b, []byte("NaN")) || bytes.Contains(b, []byte("Inf")) {
					t.Fatalf("a number that is none: x %v, y %v, axis %+v", xs, ys, a)
				}
			}
		}
	}
}

func TestStrangeShapes(t *testing.T) {
	for _, f := range []figure.Figure{
		{}, {Width: -1, Height: math.NaN()}, {Width: 1, Height: 1, Panels: make([]figure.Panel, 9)},
		{Panels: make([]figure.Panel, 5), Columns: 2}, {Shared: true}, {Shared: true, Panels: make([]figure.Panel, 2)},
		{Panels: []figure.Panel{{Title: "\x00\xff<&", Series: []figure.Series{{Name: "a_{", X: []float64{1}, Y: []float64{1}, Glyph: figure.Plus}}, Legend: figure.Outside}}},
	} {
		b, err := figure.SVG(f)
		if err != nil {
			t.Fatal(err)
		}
		wellFormed(t, b)
	}
}

func TestPiecesKeepTheText(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := rapid.StringMatching(`[aG_^{} ]{0,20}`).Draw(t, "s")
		sum := ""
		for _, p := range figure.Pieces(s) {
			switch p.Level {
			case figure.Sub:
				sum += "_{" + p.Text + "}"
			case figure.Super:
				sum += "^{" + p.Text + "}"
			default:
				sum += p.Text
			}
		}
		for _, empty := range []string{"_{}", "^{}"} {
			s, sum = strings.ReplaceAll(s, empty, ""), strings.ReplaceAll(sum, empty, "")
		}
		if sum != s {
			t.Fatalf("%q became %q", s, sum)
		}
	})
}
