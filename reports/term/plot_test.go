package term

import (
	"bytes"
	"errors"
	"flag"
	"io"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

var update = flag.Bool("update", false, "rewrite the golden files; look at the difference")

// zener is the fractional Zener model with 1 and 1000 MPa, 1 µs and exponent 0.5.
func zener(f float64) (storage, loss float64) {
	s := math.Sqrt(2 * math.Pi * f * 1e-6)
	re, im := s*math.Cos(math.Pi/4), s*math.Sin(math.Pi/4)
	d := (1+re)*(1+re) + im*im
	storage = ((1+1000*re)*(1+re) + 1000*im*im) / d
	loss = (1000*im*(1+re) - im*(1+1000*re)) / d
	return storage, loss
}

func charts() map[string]Chart {
	var f, a, b, eta []float64
	for k := -24; k <= 48; k++ {
		x := math.Pow(10, float64(k)/8)
		g, l := zener(x)
		f, a, b, eta = append(f, x), append(a, g), append(b, l), append(eta, l/g)
	}
	var T, shift []float64
	for x := -40.0; x <= 80; x += 10 {
		T, shift = append(T, x), append(shift, -6*(x-23)/(150+x-23))
	}
	var hz, cold, warm []float64
	for x := 4.0; x <= 30; x++ {
		hz, cold, warm = append(hz, x), append(cold, 900+20*x), append(warm, 600+5*x)
	}
	gap := append([]float64{}, eta...)
	gap[30], gap[31] = math.NaN(), math.NaN()
	return map[string]Chart{
		"master-80":   {Width: 80, Title: "invented compound at 23 °C", X: Axis{Label: "reduced frequency f·a_T (Hz)", Log: true}, Y: Axis{Label: "G′, G″ (MPa)", Log: true}, Series: []Series{{Name: "G′", X: f, Y: a}, {Name: "G″", X: f, Y: b}, {Name: "measured", X: f[10:50], Y: a[10:50], Points: true}}},
		"master-120":  {Width: 120, Height: 30, X: Axis{Label: "reduced frequency f·a_T (Hz)", Log: true}, Y: Axis{Label: "G′, G″ (MPa)", Log: true}, Series: []Series{{Name: "G′", X: f, Y: a}, {Name: "G″", X: f, Y: b}}},
		"loss-80":     {Width: 80, Height: 16, X: Axis{Label: "frequency f (Hz)", Log: true}, Y: Axis{Label: "loss factor tan δ", Min: 0, Max: 1}, Series: []Series{{Name: "tan δ", X: f, Y: gap}}},
		"shift-80":    {Width: 80, Height: 18, X: Axis{Label: "temperature T (°C)"}, Y: Axis{Label: "log a_T"}, Series: []Series{{Name: "WLF", X: T, Y: shift}, {Name: "tested", X: T, Y: shift, Points: true}}},
		"mount-80":    {Width: 80, Height: 18, X: Axis{Label: "frequency f (Hz)"}, Y: Axis{Label: "|K*| (N/mm)"}, Series: []Series{{Name: "−20 °C", X: hz, Y: cold}, {Name: "23 °C", X: hz, Y: warm}}},
		"smallest-40": {Width: 40, Height: 10, X: Axis{Label: "f (Hz)", Log: true}, Y: Axis{Label: "G (Pa)", Log: true}, Series: []Series{{X: []float64{1e-9, 1e9}, Y: []float64{2e5, 7e8}}}},
	}
}

func plot(t *testing.T, c Chart) string {
	t.Helper()
	var b bytes.Buffer
	if err := Plot(&b, c); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

func TestGolden(t *testing.T) {
	for name, c := range charts() {
		got := plot(t, c)
		file := filepath.Join("testdata", name+".txt")
		if *update {
			if err := os.WriteFile(file, []byte(got), 0o644); err != nil {
				t.Fatal(err)
			}
		}
		want, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		if got != string(want) {
			t.Errorf("%s differs; run the test with -update and look at the difference:\n%s", name, got)
		}
		if again := plot(t, c); again != got {
			t.Errorf("%s: two runs differ", name)
		}
	}
}

// Nothing wraps, at any width, and nothing is coloured.
func TestNothingWraps(t *testing.T) {
	for name, c := range charts() {
		for _, width := range []int{40, 41, 60, 79, 80, 81, 100, 120, 200} {
			c.Width, c.Height = width, 24
			c.Series[0].Name = strings.Repeat("a long name ", 12)
			c.Y.Label, c.Title = strings.Repeat("long ", 60), strings.Repeat("長い ", 60)
			text := plot(t, c)
			for _, l := range strings.Split(text, "\n") {
				if n := columns(l); n > width {
					t.Errorf("%s at %d: a line of %d columns: %q", name, width, n, l)
				}
				if strings.HasSuffix(l, " ") {
					t.Errorf("%s at %d: a space at the end of %q", name, width, l)
				}
			}
			if n := strings.Count(text, "\n"); n > 24 {
				t.Errorf("%s at %d: %d lines", name, width, n)
			}
			if strings.ContainsAny(text, "\x1b\t\r") {
				t.Errorf("%s at %d: control characters", name, width)
			}
		}
	}
}

// A straight line from corner to corner fills the diagonal, dot by dot: in cells two
// dots wide and four high the patterns of a rising line.
func TestBraille(t *testing.T) {
	cv := newCanvas(4, 2)
	s := Series{X: []float64{0, 7}, Y: []float64{0, 7}}
	x, y := scale{lo: 0, hi: 7}, scale{lo: 0, hi: 7}
	if row := cv.curve(s, x, y, "1"); row != 0 {
		t.Errorf("it ends in row %d", row)
	}
	if got, want := cv.row(0)+"|"+cv.row(1), "  ⡠⠊|⡠⠊  "; got != want {
		t.Errorf("%q, want %q", got, want)
	}
}

func TestTickLabels(t *testing.T) {
	for _, v := range []struct {
		s     scale
		count float64
		want  string
	}{
		{scale{true, -3, 6}, 10, "0.001 0.01 0.1 1 10 100 1000 10000 10⁵ 10⁶"},
		{scale{true, -9, 9}, 4, "10⁻⁵ 1 10⁵"},
		{scale{true, 0, 2}, 8, "1 2 5 10 20 50 100"},
		{scale{true, 5.3, 6.9}, 8, "2·10⁵ 5·10⁵ 10⁶ 2·10⁶ 5·10⁶"},
		{scale{true, math.Log10(300), math.Log10(800)}, 5, "300 400 500 600 700 800"},
		{scale{false, -40, 80}, 6, "−40 −20 0 20 40 60 80"},
		{scale{false, 0, 1}, 5, "0 0.2 0.4 0.6 0.8 1.0"},
		{scale{false, 0, 3e7}, 3, "0 1·10⁷ 2·10⁷ 3·10⁷"},
		{scale{false, 0, 3e-7}, 3, "0 1·10⁻⁷ 2·10⁻⁷ 3·10⁻⁷"},
	} {
		var got []string
		for _, k := range v.s.ticks(v.count) {
			got = append(got, k.label)
		}
		if s := strings.Join(got, " "); s != v.want {
			t.Errorf("%v: %s, want %s", v.s, s, v.want)
		}
	}
}

func TestHostile(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	sets := [][]float64{nil, {1}, {5, 5, 5}, {0, 0}, {nan, nan}, {inf, -inf, 1}, {1e308, -1e308, 1e-308}, {5e-324, 1e299}, {1, 1 + 1e-15}, {-3, -2}, {-1e-300, 1e-300}, {1, nan, 2}}
	axes := []Axis{{}, {Log: true}, {Min: 3, Max: 1}, {Log: true, Min: -1, Max: 10}, {Log: true, Min: 2, Max: 2.0000001}, {Min: inf, Max: nan}, {Min: 1e299, Max: 1e300}, {Min: 2, Max: 2.5}}
	for _, xs := range sets {
		for _, ys := range sets {
			for _, a := range axes {
				for _, points := range []bool{false, true} {
					var b bytes.Buffer
					err := Plot(&b, Chart{X: a, Y: a, Title: "\x1b[31m", Series: []Series{{Name: "n\n\x00", X: xs, Y: ys, Points: points}}})
					if err != nil {
						continue
					}
					for _, l := range strings.Split(b.String(), "\n") {
						if columns(l) > 80 || strings.ContainsAny(l, "\x1b\x00") || strings.Contains(l, "NaN") || strings.Contains(l, "Inf") {
							t.Fatalf("x %v, y %v, axis %+v: %q", xs, ys, a, l)
						}
					}
				}
			}
		}
	}
}

type full struct{}

func (full) Write([]byte) (int, error) { return 0, io.ErrShortWrite }

func TestErrors(t *testing.T) {
	c := charts()["mount-80"]
	if err := Plot(io.Discard, Chart{}); !errors.Is(err, ErrNoData) {
		t.Errorf("no series: %v", err)
	}
	if err := Plot(full{}, c); !errors.Is(err, io.ErrShortWrite) {
		t.Errorf("a full disk: %v", err)
	}
	small := c
	small.Width = 39
	if err := Plot(io.Discard, small); err == nil {
		t.Error("39 columns, and no error")
	}
	many := c
	many.Series = make([]Series, MostSeries+1)
	if err := Plot(io.Discard, many); err == nil {
		t.Error("too many series, and no error")
	}
}
