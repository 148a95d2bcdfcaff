package mount

import (
	"math"
	"strings"
	"testing"
)

// A twisted disc and ring: closed forms.
func TestDisc(t *testing.T) {
	m, err := read(t, "elements: {d: {shape: torsion disc, diameter: 50 mm, thickness: 10 mm}}\nexcitation: {angle: 1 deg}\n")
	if err != nil {
		t.Fatal(err)
	}
	s, err := m.Twisted(always(1e6+1e5i), 10, 300, m.Excitation.Displacement)
	if err != nil {
		t.Fatal(err)
	}
	nearComplex(t, "disc", s.Stiffness, complex(math.Pi*math.Pow(0.025, 4)/0.02, 0)*(1e6+1e5i), 1e-13)
	near(t, "strain", s.Leaves[0].Strain, math.Exp(-0.25)*2.5*math.Pi/180, 1e-12)
	d := Disc{Outer: 0.03, Inner: 0.012, Thickness: 0.01}
	ring := equivalent(func(_, v float64) (float64, float64) {
		r := 0.012 + 0.018*v
		return r / 0.01, r
	})
	near(t, "ring's strain", d.strainPer(), ring, 1e-12)
	near(t, "ring", real(d.Torsion(1)), math.Pi*(math.Pow(0.03, 4)-math.Pow(0.012, 4))/0.02, 1e-13)
	// A thin ring has its rim's strain.
	near(t, "thin", Disc{1, 0.9999, 1}.strainPer(), 1, 1e-4)
	for text, want := range map[string]string{
		"shape: torsion disc, diameter: 50 mm":                                                        "elements.d.thickness: missing",
		"shape: torsion disc, thickness: 5 mm":                                                        "elements.d.diameter: missing",
		"shape: torsion disc, thickness: 5 mm, diameter: 3 mm, inner_diameter: 2 mm":                  "elements.d.diameter: beside",
		"shape: torsion disc, thickness: 5 mm, outer_diameter: 3 mm, inner_diameter: 3 mm":            "must be greater",
		"shape: torsion disc, thickness: 5 mm, diameter: 3 mm, area: 3 mm2":                           "elements.d.area: belongs to a pad",
		"shape: torsion disc, thickness: 5 mm, outer_diameter: 3 mm, inner_diameter: 1 mm, factor: 1": "elements.d.factor: belongs to a pad",
	} {
		if _, err := read(t, "elements: {d: {"+text+"}}\n"); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v", text, err)
		}
	}
	if _, err := read(t, "elements: {d: {shape: torsion disc, outer_diameter: 30 mm, inner_diameter: 1 cm, thickness: 5 mm}}\n"); err != nil {
		t.Error(err)
	}
}

// Words for people.
func TestNames(t *testing.T) {
	for _, c := range []struct{ got, want string }{
		{Conical.String(), "conical"}, {Axial.String(), "axial"}, {Way(9).String(), "unknown"},
		{FromTest.String(), "static test"}, {FromModel.String(), "model, not a static test"}, {FromTable.String(), "handbook table of hardness"}, {StaticSource(0).String(), "unknown"},
	} {
		if c.got != c.want {
			t.Errorf("%q for %q", c.got, c.want)
		}
	}
}
