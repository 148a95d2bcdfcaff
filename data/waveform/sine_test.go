package waveform

import (
	"math"
	"testing"
)

// twoTone is a fundamental with a third harmonic of 1 %.
func twoTone(third float64) (t, y []float64) {
	for k := range 100 {
		x := float64(k) / 200
		t = append(t, x)
		y = append(y, 1.5*math.Cos(2*math.Pi*7.3*x)+0.7*math.Sin(2*math.Pi*7.3*x)+0.25+third*math.Cos(2*math.Pi*21.9*x+0.4))
	}
	return t, y
}

// The figures are computed independently in double precision, from the formulas
// of the three- and four-parameter fit of IEEE 1057.
func TestSineFitReference(t *testing.T) {
	ts, ys := twoTone(0.02)
	for _, c := range []struct {
		k    int
		want float64
	}{{0, 1.7684212199}, {1, 1.8791430953}, {99, -1.3259324586}} {
		if math.Abs(ys[c.k]-c.want) > 1e-10 {
			t.Fatalf("the record differs at %d", c.k)
		}
	}
	known, err := FitKnown(ts, ys, 7.3, Terms{})
	if err != nil {
		t.Fatal(err)
	}
	free, err := FitFree(ts, ys, 7.25, Terms{})
	if err != nil {
		t.Fatal(err)
	}
	_, clean := twoTone(0)
	pure, err := FitFree(ts, clean, 7.25, Terms{})
	if err != nil {
		t.Fatal(err)
	}
	both, err := FitFree(ts, ys, 7.25, Terms{Harmonics: 3})
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name      string
		got, want float64
		tol       float64
	}{
		{"3 A", known.A, 1.50020185, 5e-9},
		{"3 B", known.B, 0.69977674, 5e-9},
		{"3 C", known.Mean, 0.24992948, 5e-9},
		{"3 amplitude", known.Amplitude, 1.6553830571, 5e-11},
		{"3 phase", known.Phase * 180 / math.Pi, -25.0069365233, 5e-11},
		{"3 rms", known.Residual, 0.0141065366, 5e-11},
		{"4 frequency", free.Frequency, 7.2999469513, 5e-11},
		{"4 A", free.A, 1.50026268, 5e-9},
		{"4 B", free.B, 0.69965389, 5e-9},
		{"4 C", free.Mean, 0.24992899, 5e-9},
		{"4 amplitude", free.Amplitude, 1.6553862635, 5e-11},
		// The last digit depends on where the passes end.
		{"4 phase", free.Phase * 180 / math.Pi, -25.0021931489, 2e-10},
		{"4 rms", free.Residual, 0.0141064369, 5e-11},
		{"pure frequency", pure.Frequency, 7.3, 1e-13},
		{"pure A", pure.A, 1.5, 1e-13},
		{"pure B", pure.B, 0.7, 1e-13},
		{"pure C", pure.Mean, 0.25, 1e-13},
		{"pure amplitude", pure.Amplitude, 1.6552945357, 5e-11},
		{"pure phase", pure.Phase * 180 / math.Pi, -25.0168934781, 5e-11},
		{"pure rms", pure.Residual, 0, 1e-14},
		{"with harmonics: frequency", both.Frequency, 7.3, 1e-13},
		{"with harmonics: third", both.Harmonics[1].Amplitude, 0.02, 1e-13},
		{"with harmonics: its phase", both.Harmonics[1].Phase, 0.4, 1e-11},
	} {
		if !(math.Abs(c.got-c.want) <= c.tol) {
			t.Errorf("%s = %.12g, want %.12g", c.name, c.got, c.want)
		}
	}
	if known.UFrequency != 0 || known.Passes != 1 {
		t.Error("a known frequency was fitted")
	}
}
