package specimen

import (
	"math"
	"strings"
	"testing"
)

// The limits that a piece breaks, by the beginning of their names.
func TestChecks(t *testing.T) {
	for _, c := range []struct {
		s    Shape
		want string // "; " between the checks
	}{
		{Shear{Double, Circle{0.025}, 0.005, false}, ""},
		{Shear{Double, Circle{0.020}, 0.006, false}, "doubt diameter over thickness"},
		{Shear{Double, Rectangle{0.020, 0.015}, 0.004, false}, "doubt width over thickness"},
		{Shear{Double, Circle{0.020}, 0.006, true}, "note diameter over thickness"},
		{Shear{Double, Circle{0.020}, 0.020, true}, "note diameter over thickness; doubt share of bending"},
		{Shear{Double, Circle{25}, 5, false}, "doubt thickness in m"},
		{Bonded{Circle{0.0178}, 0.025, 0.7, inf}, "doubt shape factor"}, // S 0.178, the tall piece of ISO 7743; from memory
		{Bonded{Circle{0.05}, 0.010, 0.7, inf}, ""},
		{Bonded{Circle{0.05}, 0.010, 1, inf}, "note compression coefficient"},
		{Bonded{Circle{0.1}, 0.005, 0.7, inf}, "doubt shape factor"},
		{Bonded{Circle{0.1}, 0.005, 0.7, 1e9}, ""},
		{Bonded{Rectangle{0.1, 0.02}, 0.010, 0.7, 1e9}, "doubt side over side"},
		{Lubricated{Circle{0.029}, 0.0125, 0.5}, "note stiffening if"},
		{Lubricated{Circle{0.029}, 0.0125, 0.3}, "note Poisson ratio; note stiffening if"},
		{Strip{0.05, 0.005, 0.001, 0.5}, ""},
		{Strip{0.015, 0.005, 0.001, 0.5}, "doubt length over width"},
		{Bar{0.05, 0.01, 0.002}, ""},
		{Bar{0.02, 0.01, 0.002}, "doubt length over width"},
		{Cylinder{0.03, 0.01, 0}, ""},
		{Cylinder{0.03, 0.01, 0.0095}, "doubt inner over outer"},
		{Plates{0.025, 0.002}, ""},
		{Plates{0.008, 0.004}, "note diameter over thickness"},
		{Beam{ThreePoint, 0.05, 0.01, 0.002, 0.5, ParabolicShear}, ""},
		{Beam{Cantilever, 0.010, 0.004, 0.0025, 0.5, ParabolicShear}, "note share of shear"},
		{Beam{Cantilever, 0.010, 0.004, 0.0025, 0.5, inf}, "doubt share of shear"},
		{Beam{Cantilever, 0.010, 0.008, 0.001, 0.5, ParabolicShear}, "doubt width over length"},
	} {
		if err := c.s.Validate(); err != nil {
			t.Errorf("%+v: %v", c.s, err)
		}
		got := c.s.Checks()
		var want []string
		if c.want != "" {
			want = strings.Split(c.want, "; ")
		}
		ok := len(got) == len(want)
		for i := 0; ok && i < len(got); i++ {
			ok = strings.HasPrefix(string(got[i].Severity)+" "+got[i].What, want[i]) && got[i].Source != "" && got[i].Wanted != "" && !math.IsNaN(got[i].Found)
		}
		if !ok {
			t.Errorf("%+v: got %+v, want %q", c.s, got, c.want)
		}
	}
}

// A double shear piece of 1 % in the diameter and 2 % in the thickness: G goes
// like t/d². JCGM 100, 5.1.2, by hand: √((2·1)² + 2²) %.
func TestRelativeUncertainty(t *testing.T) {
	s := Shear{Double, Circle{0.025}, 0.005, false}
	u, err := RelativeUncertainty(s, 1e6, map[string]float64{"diameter": 0.01, "thickness": 0.02})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "double shear", u, math.Sqrt(8)*0.01, 1e-12)
	// The cube law of slender bending: 1 % in thickness is 3 %.
	u, err = RelativeUncertainty(Beam{ThreePoint, 0.05, 0.01, 0.002, 0.5, inf}, 1e6, map[string]float64{"thickness": 0.01})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "bending", u, 0.03, 1e-12)
	if u, err := RelativeUncertainty(s, 1e6, nil); u != 0 || err != nil {
		t.Errorf("nothing uncertain: %g, %v", u, err)
	}
	for _, c := range []struct {
		u    map[string]float64
		want string
	}{
		{map[string]float64{"width": 0.01}, `has no "width"`},
		{map[string]float64{"diameter": -0.01}, "at least 0"},
		{map[string]float64{"diameter": math.NaN()}, "at least 0"},
		{map[string]float64{"diameter": math.Inf(1)}, "at least 0"},
	} {
		_, err := RelativeUncertainty(s, 1e6, c.u)
		refused(t, err, c.want)
	}
}
