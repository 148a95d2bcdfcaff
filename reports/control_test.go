package reports

import (
	"bytes"
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"phaselag/fitting/quality"
	"phaselag/reports/figure"
	"phaselag/reports/table"
)

// inventedSeries is a made-up run of batches: a modulus of 1 MPa, a batch that was never
// measured, one far out, one that is out by less than its U95, and a shift at the end.
func inventedSeries(n int) []quality.Batch {
	r := rand.New(rand.NewPCG(5, 5))
	var out []quality.Batch
	for i := range n {
		v := 1 + 0.02*r.NormFloat64()
		switch {
		case i == 11:
			v = math.NaN()
		case i == 24:
			v = 1.12
		case i == 27:
			v = 0.928
		case i > 29:
			v += 0.025
		}
		out = append(out, quality.Batch{Name: fmt.Sprintf("2611-%02d", i+1), Values: []float64{v}, U95: 0.012})
	}
	return out
}

// drawn is the figure as a file, which holds no broken number and comes out the same twice.
func drawn(t *testing.T, f figure.Figure) string {
	t.Helper()
	b, err := figure.SVG(f)
	if err != nil {
		t.Fatal(err)
	}
	for _, bad := range []string{"NaN", "Inf", "%!", "no data"} {
		if bytes.Contains(b, []byte(bad)) {
			t.Errorf("the figure holds %q", bad)
		}
	}
	if again, _ := figure.SVG(f); !bytes.Equal(again, b) {
		t.Error("two runs differ")
	}
	return string(b)
}

func TestControlFigure(t *testing.T) {
	v, m, err := quality.Individuals(inventedSeries(45), quality.Settings{Base: 20})
	if err != nil {
		t.Fatal(err)
	}
	f, caption := ControlFigure("storage modulus G′", "MPa", v, m)
	text := drawn(t, f)
	for _, want := range []string{"beyond a limit", "by less than U95", "completes a pattern", "centre line", "control limits", "base ends", "2611-25"} {
		if !strings.Contains(text, want) {
			t.Errorf("%q is not in the figure", want)
		}
	}
	if !strings.Contains(caption, "first 19 points") || !strings.Contains(caption, "25 are wanted") {
		t.Error(caption)
	}
	// Glyphs differ where the kind does: colour is not all there is.
	seen := map[string]string{}
	for _, s := range f.Panels[0].Series {
		if s.Glyph != figure.NoGlyph {
			key := fmt.Sprint(s.Glyph, s.Hollow)
			if other, twice := seen[key]; twice && other != s.Name {
				t.Errorf("%s and %s look alike", other, s.Name)
			}
			seen[key] = s.Name
		}
	}
	// Every measured batch is drawn once.
	n := 0
	for _, s := range f.Panels[0].Series {
		if s.Glyph != figure.NoGlyph {
			n += len(s.X)
		}
	}
	if n != 44 {
		t.Errorf("%d points of 44", n)
	}

	e, err := quality.EWMA(inventedSeries(45), quality.Settings{Base: 20})
	if err != nil {
		t.Fatal(err)
	}
	f, _ = ControlFigure("storage modulus G′", "MPa", e)
	drawn(t, f)
	var repeats []quality.Batch
	r := rand.New(rand.NewPCG(6, 6))
	for i := range 14 {
		b := quality.Batch{Name: fmt.Sprintf("a long name of batch %d", i), U95: math.NaN()}
		for range 3 + i%3 {
			b.Values = append(b.Values, 0.08+0.002*r.NormFloat64())
		}
		repeats = append(repeats, b)
	}
	a, d, err := quality.AveragesRanges(repeats, quality.Settings{})
	if err != nil {
		t.Fatal(err)
	}
	f, _ = ControlFigure("loss factor tan δ", "", a, d)
	drawn(t, f)
	if f, caption := ControlFigure("x", "", nil, &quality.Chart{}); len(f.Panels) != 0 || caption != "" {
		t.Error("a figure of nothing")
	}
}

// Names of any number and length: those of one step keep their distance.
func TestControlNames(t *testing.T) {
	for _, n := range []int{1, 5, 12, 40, 400} {
		lines := make([]quality.Line, n)
		for i := range lines {
			lines[i].Name = fmt.Sprintf("batch 2611-%03d", i)
		}
		top := batchNames(lines)
		places := math.Max(12, float64(n+1))
		for i := 1; i < len(top.At); i++ {
			gap := (top.At[i] - top.At[i-1]) / places * controlNames
			if w := figure.Em(top.Text[i]) * nameSize; gap < w {
				t.Errorf("%d batches: %.1f mm for names of %.1f mm", n, gap, w)
			}
		}
	}
	if batchNames(make([]quality.Line, 3)) != nil {
		t.Error("a row of empty names")
	}
}

func TestControlTable(t *testing.T) {
	v, _, err := quality.Individuals(inventedSeries(45), quality.Settings{Base: 20})
	if err != nil {
		t.Fatal(err)
	}
	v.Lines[3].U95 = math.Inf(1)
	for _, f := range []table.Format{table.Terminal, table.CSV, table.JSON} {
		var b bytes.Buffer
		if err := table.Write(&b, f, ControlTable("storage modulus", "MPa", v)); err != nil {
			t.Fatal(err)
		}
		want := []string{"2611-25", "beyond a limit"}
		if f != table.Terminal {
			want = append(want, "value_MPa")
		}
		for _, w := range want {
			if !strings.Contains(b.String(), w) {
				t.Errorf("%s: no %q in\n%s", f, w, b.String())
			}
		}
		if f == table.Terminal {
			t.Log("\n" + b.String())
		}
	}
	for unit, want := range map[string]string{"": "", "%": "_percent", "N/mm": "_N_per_mm", "°C": "_C"} {
		if got := keyUnit(unit); got != want {
			t.Errorf("%s: %s", unit, got)
		}
	}
}
