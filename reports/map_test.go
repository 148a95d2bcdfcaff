package reports

import (
	"math"
	"math/cmplx"
	"strconv"
	"strings"
	"testing"

	"phaselag/models"
)

const testPad = "mount: invented foot\nelements:\n  pad: {shape: shear pad, area: 2400 mm2, thickness: 20 mm}\narrangement: pad\ncount: 4\nexcitation: {displacement: 0.3 mm}\ntolerance: {hardness: 5 IRHD}\n"

// Every line of equal value has its value by the stiffness of a shear pad, n·G*A/t, and
// lies inside the domain; one point over the border is hatched.
func TestStiffnessMap(t *testing.T) {
	c := filled(t)
	m := readMount(t, testPad)
	for quantity, name := range map[MapQuantity]string{MapStiffness: "map-stiffness", MapLossFactor: "map-loss-factor"} {
		fig, caption, err := StiffnessMap(c, m, quantity, AnySpread())
		if err != nil {
			t.Fatal(err)
		}
		look(t, name, fig)
		t.Log(caption)
		if !strings.Contains(caption, "Hatched: outside") || !strings.Contains(caption, "at 0.3 mm") {
			t.Error(caption)
		}
		lines := 0
		for _, s := range fig.Panels[0].Series {
			level, err := strconv.ParseFloat(s.Mark, 64)
			if err != nil {
				continue // the border of the domain
			}
			lines++
			for i, T := range s.X {
				if math.IsNaN(T) {
					continue
				}
				q := models.Condition{Frequency: s.Y[i], Temperature: T + zeroC, Strain: 0.015}
				g := c.Value(q)
				want := 4 * 2400e-6 / 0.02 / 1e3 * cmplx.Abs(g)
				if quantity == MapLossFactor {
					want = imag(g) / real(g)
				}
				if math.Abs(want/level-1) > 0.02 {
					t.Errorf("%s: %g on the line of %g at %g Hz, %g °C", name, want, level, s.Y[i], T)
				}
				near := q
				near.Temperature += 0.02 * (20 - T) / 60
				near.Frequency *= 1 - 1e-2*math.Copysign(1, math.Log10(s.Y[i])-1)
				if c.Inside(q) != nil && c.Inside(near) != nil {
					t.Errorf("%s: the line of %g leaves the domain at %g Hz, %g °C", name, level, s.Y[i], T)
				}
			}
		}
		if lines < 4 {
			t.Errorf("%s: %d lines", name, lines)
		}
	}
}

// Where all lies inside nothing is hatched, and where nothing does there is no map.
func TestMapOfParts(t *testing.T) {
	c := filled(t)
	m := readMount(t, testPad)
	s := AnySpread()
	s.Cold, s.Warm, s.Low, s.High = 270, 310, 4, 30
	fig, caption, err := StiffnessMap(c, m, MapStiffness, s)
	if err != nil || strings.Contains(caption, "Hatched") {
		t.Errorf("%v: %s", err, caption)
	}
	look(t, "map-inside", fig)
	s.Cold, s.Warm = 400, 420
	if _, _, err := StiffnessMap(c, m, MapStiffness, s); err == nil || !strings.Contains(err.Error(), "inside the domain") {
		t.Errorf("%v", err)
	}
	for _, bad := range []Spread{{0, 10, 270, 310, math.NaN()}, {10, 1, 270, 310, math.NaN()}, {1, 10, 310, 270, math.NaN()}, {1, math.Inf(1), 270, 310, math.NaN()}} {
		if _, _, err := StiffnessMap(c, m, MapStiffness, bad); err == nil {
			t.Errorf("%v, and no error", bad)
		}
	}
	still := readMount(t, "elements:\n  pad: {shape: shear pad, area: 2400 mm2, thickness: 20 mm}\narrangement: pad\n")
	if _, _, err := StiffnessMap(c, still, MapStiffness, AnySpread()); err == nil || !strings.Contains(err.Error(), "no amplitude") {
		t.Errorf("no amplitude: %v", err)
	}
	if _, _, err := StiffnessCurves(c, still, []float64{300}, AnySpread()); err == nil || !strings.Contains(err.Error(), "no amplitude") {
		t.Errorf("no amplitude: %v", err)
	}
}

// At the isotherms' own strain the map reaches to the domain's corner, cut off by the
// highest reduced frequency: there the border of the hatch is f = f_R/a_T. A torsional
// bush shows N·m/rad.
func TestMapAtTheBorder(t *testing.T) {
	c := damper(t)
	m := readMount(t, "mount: invented bush\nelements:\n  bush: {shape: bush, inner_diameter: 12 mm, outer_diameter: 36 mm, length: 40 mm}\narrangement: bush\ndirection: torsional\nexcitation: {angle: 0.05 deg}\n")
	s := AnySpread()
	s.Low, s.High = 0.5, 2000
	fig, caption, err := StiffnessMap(c, m, MapStiffness, s)
	if err != nil {
		t.Fatal(err)
	}
	look(t, "map-border", fig)
	if !strings.Contains(fig.Panels[0].Title, "N·m/rad") || !strings.Contains(caption, "at 0.05 ° (zero to peak)") {
		t.Errorf("%s: %s", fig.Panels[0].Title, caption)
	}
	checked := 0
	for _, border := range fig.Panels[0].Series {
		if border.Mark != "" {
			continue
		}
		for i, T := range border.X {
			if f := border.Y[i]; f > 0.6 && f < 1900 {
				fr := f * math.Pow(10, c.LogShift(T+zeroC))
				for _, end := range c.Domain.ReducedFrequency {
					if math.Abs(fr/end-1) < 1e-6 {
						checked++
					}
				}
			}
		}
	}
	if checked < 5 {
		t.Errorf("%d points of the border lie where they should", checked)
	}
}

// The curves are n·|G*|A/t with the relative band of the compound; production by the
// dashed lines, beside and not within the bands.
func TestStiffnessCurves(t *testing.T) {
	c := filled(t)
	in := *c
	in.Compound.Hardness = "60 IRHD"
	c, err := models.New(in)
	if err != nil {
		t.Fatal(err)
	}
	m := readMount(t, testPad)
	s := AnySpread()
	fig, caption, err := StiffnessCurves(c, m, []float64{253.15, 273.15, 296.15, 333.15, 400}, s)
	if err != nil {
		t.Fatal(err)
	}
	look(t, "mount-curves", fig)
	t.Log(caption)
	if !strings.Contains(caption, "Dashed: the softest and the hardest parts") || !strings.Contains(caption, "Outside the domain at all these frequencies: 126.8 °C") {
		t.Error(caption)
	}
	top := fig.Panels[0].Series
	if len(top) != 12 || len(fig.Panels[1].Series) != 4 {
		t.Fatalf("%d and %d curves", len(top), len(fig.Panels[1].Series))
	}
	scale := 4 * 2400e-6 / 0.02 / 1e3
	for i, f := range top[6].X { // 23 °C
		g, err := c.Modulus(models.Condition{Frequency: f, Temperature: 296.15, Strain: 0.015})
		if err != nil {
			t.Fatal(err)
		}
		if math.Abs(top[6].Y[i]/(scale*g.Magnitude)-1) > 1e-9 || math.Abs((top[6].High[i]-top[6].Y[i])/(scale*g.MagnitudeU95)-1) > 1e-6 {
			t.Errorf("%g Hz: %g, want %g", f, top[6].Y[i], scale*g.Magnitude)
		}
		if !(top[7].Y[i] < top[6].Low[i] && top[8].Y[i] > top[6].High[i]) {
			t.Errorf("%g Hz: production from %g to %g, tested %g", f, top[7].Y[i], top[8].Y[i], top[6].Y[i])
		}
	}
}

func BenchmarkStiffnessMap(b *testing.B) {
	t := &testing.T{}
	c, m := damper(t), readMount(t, strings.Replace(testPad, "0.3 mm", "0.02 mm", 1))
	for b.Loop() {
		if _, _, err := StiffnessMap(c, m, MapStiffness, AnySpread()); err != nil {
			b.Fatal(err)
		}
	}
}
