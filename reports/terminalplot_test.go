package reports

import (
	"bytes"
	"io"
	"strings"
	"testing"
	"unicode/utf8"

	"phaselag/models"
)

func TestTerminalPlots(t *testing.T) {
	c := damper(t)
	m := readMount(t, "elements:\n  pad: {shape: shear pad, area: 2400 mm2, thickness: 20 mm}\narrangement: pad\nexcitation: {displacement: 0.02 mm}\n")
	s := AnySpread()
	for _, width := range []int{80, 120} {
		var b bytes.Buffer
		if err := PlotMaster(&b, c, width); err != nil {
			t.Fatal(err)
		}
		for _, q := range []MapQuantity{MapStiffness, MapLossFactor} {
			if err := PlotStiffness(&b, c, m, q, []float64{263.15, 296.15, 333.15}, s, width); err != nil {
				t.Fatal(err)
			}
		}
		for _, want := range []string{"G′, G″ (MPa)", "reduced to 23 °C", "|K*| (N/mm)", "loss factor η", "−10 °C"} {
			if !strings.Contains(b.String(), want) {
				t.Errorf("no %q", want)
			}
		}
		for _, l := range strings.Split(b.String(), "\n") {
			if n := utf8.RuneCountInString(l); n > width {
				t.Errorf("%d columns in %q", n, l)
			}
		}
		t.Log("\n" + b.String())
	}
	if err := PlotStiffness(io.Discard, c, m, MapStiffness, []float64{400}, s, 80); err == nil || !strings.Contains(err.Error(), "inside the domain") {
		t.Errorf("outside the domain: %v", err)
	}
	one := *c
	one.Domain.ReducedFrequency = models.Range{10, 10}
	if err := PlotMaster(io.Discard, &one, 80); err == nil {
		t.Error("one frequency, and no error")
	}
}
