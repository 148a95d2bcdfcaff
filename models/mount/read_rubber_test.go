package mount

import (
	"math"
	"strings"
	"testing"

	"phaselag/data/place"
)

// Keys of pressed pads and of the static load; numbers of the natural rubber design table
// (values from memory), stiffness computed independently in double precision.
func TestReadPressed(t *testing.T) {
	const load = "load: {static_force: 1 mN, static_modulus_from_hardness: 50 IRHD, hardness_table: Lindley}\n"
	for _, c := range []struct {
		text            string
		shape, k, bulk  float64
		stiffness, tolS float64 // N/m at E0 = 2.20 MPa
	}{
		{"shape: compression pad, diameter: 50 mm, thickness: 10 mm, factor: 0.73, bulk_modulus: 1030 MPa", 1.25, 0.73, 1.03e9, 1407.534e3, 1e-6},
		{"shape: compression pad, diameter: 50 mm, thickness: 10 mm, factor_from_hardness: 50 IRHD, bulk_from_hardness: 50 IRHD", 1.25, 0.73, 1.03e9, 1407.534e3, 1e-6},
		{"shape: compression pad, diameter: 100 mm, thickness: 5 mm, compression_coefficient: 0.73, bulk_from_hardness: 50 IRHD", 5, 0.73, 1.03e9, 119980.6e3, 1e-6},
		{"shape: compression pad, diameter: 29 mm, thickness: 12.5 mm, factor: 0.73", 0.58, 0.73, nan, 173.348e3, 3e-6},
		{"shape: compression pad, length: 100 mm, width: 50 mm, thickness: 20 mm, factor: 0.73", 5.0 / 6, 0.73, nan, 4.430556e6 * 0.005 / 0.02, 1e-6},
		{"shape: compression ring, outer_diameter: 60 mm, inner_diameter: 20 mm, thickness: 15 mm, factor: 0.73", 2.0 / 3, 0.73, nan, 650.9442e3, 1e-6},
		// (4/3)·2.20·(1 + 0.73·(2/3)²) MPa on 400 × 20 mm by 15 mm, by hand.
		{"shape: compression strip, length: 400 mm, width: 20 mm, thickness: 15 mm, factor: 0.73", 2.0 / 3, 0.73, nan, 4.0 / 3 * 2.20e6 * (1 + 0.73*4/9) * 0.008 / 0.015, 1e-9},
	} {
		m, err := read(t, "elements: {pad: {"+c.text+"}}\n"+load)
		if err != nil {
			t.Errorf("%s: %v", c.text, err)
			continue
		}
		p := m.Elements[0].Pad
		near(t, "shape factor", p.ShapeFactor(), c.shape, 1e-12)
		near(t, "factor", p.Compression, c.k, 1e-12)
		if !math.IsNaN(c.bulk) || !math.IsNaN(p.Bulk) {
			near(t, "bulk", p.Bulk, c.bulk, 1e-12)
		}
		k, _ := p.Press(2.20e6 / 3)
		near(t, c.text, real(k), c.stiffness, c.tolS)
		near(t, "under next to no load", m.Arrangement.Stretch, 1, 1e-6)
		notes := strings.Join(m.Assumptions, "\n")
		if strings.Contains(c.text, "from_hardness") && !strings.Contains(notes, "Lindley's table") || !strings.Contains(notes, "tangent at the static load") {
			t.Errorf("assumptions: %s", notes)
		}
	}
	// 60 IRHD: E_c 12.37656, with bulk 12.24478 MPa; computed independently in double
	// precision.
	m, err := read(t, "elements: {pad: {shape: compression pad, diameter: 50 mm, thickness: 10 mm, factor_from_hardness: 60 IRHD, bulk_from_hardness: 60 IRHD, hardness_table: Lindley}}\n")
	if err != nil {
		t.Fatal(err)
	}
	p := m.Elements[0].Pad
	k, _ := p.Press(4.45e6 / 3)
	near(t, "60 IRHD", real(k)*p.Thickness/p.Area, 12.24478e6, 1e-6)
	near(t, "60 IRHD without bulk", p.stiffening(1)*4.45e6/3, 12.37656e6, 1e-6)
	if notes := strings.Join(m.Assumptions, "\n"); !strings.Contains(notes, "no static load is stated") {
		t.Errorf("assumptions: %s", notes)
	}
}

// A load with a static modulus gives the tangent at once, and says so.
func TestReadLoaded(t *testing.T) {
	const pads = "elements: {pad: {shape: compression pad, diameter: 50 mm, thickness: 10 mm, factor: 0.73}}\ncount: 4\n"
	m, err := read(t, pads+"load: {mass: 400 kg, static_modulus: 0.7 MPa}\n")
	if err != nil {
		t.Fatal(err)
	}
	free, err := read(t, pads+"load: {mass: 400 kg}\n")
	if err != nil {
		t.Fatal(err)
	}
	r, err := free.Loaded(StaticModulus{Shear: 0.7e6})
	if err != nil {
		t.Fatal(err)
	}
	if m.Arrangement.Stretch != r.Mount.Arrangement.Stretch || !(m.Arrangement.Stretch < 0.95) || free.Arrangement.Stretch != 0 {
		t.Errorf("stretch %g, %g", m.Arrangement.Stretch, r.Mount.Arrangement.Stretch)
	}
	near(t, "weight", r.Leaves[0].Force, 100*9.80665, 1e-9)
	if notes := strings.Join(m.Assumptions, "\n"); !strings.Contains(notes, "pad: compressed by ") || !strings.Contains(notes, "times that of the unloaded pad") {
		t.Errorf("assumptions: %s", notes)
	}
	if notes := strings.Join(free.Assumptions, "\n"); !strings.Contains(notes, "load.static_modulus takes it in") {
		t.Errorf("assumptions: %s", notes)
	}
	across, err := read(t, pads+"direction: horizontal\nload: {mass: 400 kg, static_modulus: 0.7 MPa}\n")
	if err != nil {
		t.Fatal(err)
	}
	if notes := strings.Join(across.Assumptions, "\n"); across.Arrangement.Stretch != 0 || !strings.Contains(notes, "does not act along") {
		t.Errorf("assumptions: %s", notes)
	}
}

func TestReadPressedFaults(t *testing.T) {
	pad := func(more string) string {
		return "elements: {a: {shape: compression pad, diameter: 20 mm, thickness: 5 mm" + more + "}}\n"
	}
	full := pad(", factor: 0.6")
	for _, c := range []struct{ text, want, hint string }{
		{pad(", factor: 0.6, compression_coefficient: 0.6"), "elements.a.factor: beside compression_coefficient", "one of the two"},
		{pad(", factor: 0.6, factor_from_hardness: 60 IRHD"), "elements.a.factor_from_hardness: beside factor", "one of the two"},
		{pad(", compression_coefficient: 0.6, factor_from_hardness: 60 IRHD"), "beside compression_coefficient", "one of the two"},
		{pad(", factor: 0.6, bulk_modulus: 1 GPa, bulk_from_hardness: 60 IRHD"), "elements.a.bulk_from_hardness: beside bulk_modulus", "one of the two"},
		{pad(", factor_from_hardness: 60"), "m.yaml:1:96: elements.a.factor_from_hardness: ", "IRHD"},
		{pad(", factor_from_hardness: 60 Shore A"), "Lindley's table is in IRHD", "Shore A"},
		{pad(", factor_from_hardness: 80 IRHD"), "outside the table: Lindley's table goes from 30 to 75", "numbers"},
		{pad(", factor_from_hardness: 60 IRHD, hardness_table: Gent"), "elements.a.hardness_table: Gent knows no factor", "Lindley"},
		{pad(", factor_from_hardness: 60 IRHD, hardness_table: mine"), `unknown table "mine"`, "Lindley and Gent"},
		{pad(", factor: 0.6, hardness_table: Gent"), "a table without a hardness", "factor_from_hardness"},
		{full + "load: {static_modulus: 1 MPa}\n", "m.yaml:2:7: load: a static modulus without a load", "mass"},
		{full + "load: {mass: 1 kg, static_modulus: 1 MPa, static_modulus_from_hardness: 60 IRHD, hardness_table: Gent}\n", "beside static_modulus", "one"},
		{full + "load: {mass: 1 kg, static_modulus_from_hardness: 60 IRHD}\n", "without a hardness_table", "Lindley"},
		{full + "load: {mass: 1 kg, hardness_table: Gent}\n", "a table without a hardness", "static_modulus_from"},
		{full + "load: {mass: 200 kg, static_modulus: 1 MPa}\n", "m.yaml:2:7: load: a is compressed by ", "larger"},
		{"elements: {a: {shape: compression ring, outer_diameter: 20 mm, thickness: 5 mm, factor: 0.6}}\n", "elements.a.inner_diameter: missing", "20 mm"},
		{"elements: {a: {shape: compression ring, outer_diameter: 20 mm, inner_diameter: 30 mm, thickness: 5 mm, factor: 0.6}}\n", "must be greater", ""},
		{"elements: {a: {shape: compression strip, diameter: 20 mm, thickness: 5 mm, factor: 0.6}}\n", "a strip needs length and width", "300"},
		{"elements: {a: {shape: compression strip, length: 20 mm, width: 30 mm, thickness: 5 mm, factor: 0.6}}\n", "must not be greater than the length", "short"},
		{"elements: {a: {shape: axial bush, inner_diameter: 20 mm, outer_diameter: 30 mm, length: 5 mm, factor: 1}}\n", "elements.a.factor: belongs to a pad", "leave"},
	} {
		_, err := read(t, c.text)
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %q", c.text, err, c.want)
			continue
		}
		hints := ""
		for _, e := range place.All(err) {
			hints += place.Hint(e) + "\n"
		}
		if !strings.Contains(hints, c.hint) {
			t.Errorf("%s: hints %q, want %q", c.text, hints, c.hint)
		}
	}
}

// The demonstration's pressed discs can be read.
func TestDemonstrationPressed(t *testing.T) {
	m, err := Open("../../data/demo/pump-foot.yaml")
	if err != nil {
		t.Fatal(err)
	}
	if s := m.Arrangement.Stretch; !(s > 0.8 && s < 0.97) {
		t.Errorf("stretch %g", s)
	}
	t.Log(strings.Join(m.Assumptions, "\n"))
}
