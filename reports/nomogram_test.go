package reports

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"phaselag/models"
	"phaselag/reports/figure"
)

// Reading by hand: from the frequency at the right along a line to the reduced
// frequency, and there the modulus at the left, must give the compound's answer.
func TestNomogramReads(t *testing.T) {
	c := damper(t)
	n, ok := nomogram(c)
	if !ok {
		t.Fatal("no nomogram")
	}
	look(t, "nomogram-damper", n.figure)
	p := n.figure.Panels[0]
	curves := map[string]figure.Series{}
	for _, s := range p.Series {
		if !s.Right {
			curves[s.Mark] = s
		}
	}
	lines := 0
	for _, s := range p.Series {
		if !s.Right || s.Line != figure.Solid {
			continue
		}
		lines++
		// Each line: log f_R = log f + log a_T, at a temperature that is found by its shift.
		a := math.Log10(s.X[0] / s.Y[0])
		if b := math.Log10(s.X[1] / s.Y[1]); math.Abs(a-b) > 1e-9 {
			t.Errorf("a line of slope other than 1: %v, %v", s.X, s.Y)
		}
		T := 23 + 120*-a/(7.5+a) // WLF turned round
		f := math.Sqrt(s.Y[0] * s.Y[1])
		m, err := c.Modulus(models.Condition{Frequency: f, Temperature: T + zeroC, Strain: math.NaN()})
		if err != nil {
			t.Fatal(err)
		}
		if got := between(curves["G′"], f*math.Pow(10, a)); math.Abs(got/m.Storage*1e6-1) > 2e-3 {
			t.Errorf("%g Hz, %.1f °C: read %.4g MPa, the compound says %.4g", f, T, got, m.Storage/1e6)
		}
		if got := between(curves["tan δ"], f*math.Pow(10, a)); math.Abs(got/m.LossFactor-1) > 5e-3 {
			t.Errorf("%g Hz, %.1f °C: read %.4g, the compound says %.4g", f, T, got, m.LossFactor)
		}
	}
	if lines < 8 {
		t.Errorf("%d lines", lines)
	}
	if strings.Contains(n.caption, "misses") {
		t.Errorf("all of the modulus shifts: %s", n.caption)
	}
}

// between reads a curve on logarithmic axes.
func between(s figure.Series, x float64) float64 {
	for i := 1; i < len(s.X); i++ {
		if x <= s.X[i] {
			w := math.Log(x/s.X[i-1]) / math.Log(s.X[i]/s.X[i-1])
			return math.Exp(math.Log(s.Y[i-1])*(1-w) + math.Log(s.Y[i])*w)
		}
	}
	return math.NaN()
}

// The filler's part does not shift: the caption says what that costs.
func TestNomogramOfFilledCompound(t *testing.T) {
	n, ok := nomogram(filled(t))
	if !ok || !strings.Contains(n.caption, "misses the compound by up to") {
		t.Errorf("%v: %s", ok, n.caption)
	}
	t.Log(n.caption)
	look(t, "nomogram-filled", n.figure)
}

func TestNoNomogramOfOneTemperature(t *testing.T) {
	c := *damper(t)
	c.Domain.Temperature = models.Range{23, 23}
	one, err := models.New(c)
	if err != nil {
		t.Fatal(err)
	}
	if _, ok := nomogram(one); ok {
		t.Error("a nomogram of one temperature")
	}
}

func TestRoundTemperatures(t *testing.T) {
	for _, v := range []struct {
		r    models.Range
		want string
	}{
		{models.Range{-40, 80}, "[-40 -30 -20 -10 0 10 20 30 40 50 60 70 80]"},
		{models.Range{12, 31}, "[15 20 25 30]"}, {models.Range{21, 24}, "[21 24]"}, {models.Range{-60, 200}, "[-60 -40 -20 0 20 40 60 80 100 120 140 160 180 200]"},
	} {
		if got := fmt.Sprint(roundTemperatures(v.r)); got != v.want {
			t.Errorf("%v: %s", v.r, got)
		}
	}
}
