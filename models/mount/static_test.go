package mount

import (
	"errors"
	"math"
	"strings"
	"testing"
)

// Static stiffness by source. Natural rubber design table at 50 IRHD (values from memory):
// disc 50 × 10 mm in shear with bending 123.4687, pressed 1407.534 N/mm; computed independently
// in double precision.
func TestStatic(t *testing.T) {
	p := disc(50, 10)
	p.Bending = true
	m := &Mount{Elements: []Element{{Name: "disc", Pad: p}}, Count: 4, PartFactor: 1, Mass: 200}
	all := StaticSettings{
		Tests:     []StaticTest{{0.64e6, 0.02e6, "relaxation, 60 s"}, {0.60e6, nan, "relaxation, 1 h"}},
		FromModel: true, Model: func() (float64, float64, error) { return 0.5e6, 0.05e6, nil }, ModelSays: "relaxation modulus at 1 d",
		Hardness: 50, Table: Lindley,
	}
	s, err := m.Static(all)
	if err != nil || len(s) != 2 {
		t.Fatal(s, err)
	}
	near(t, "by test", s[0].Stiffness, 4*123.4687e3, 1e-6)
	near(t, "half-width", s[0].U95, s[0].Stiffness/32, 1e-9)
	// The chain: 3.97131 mm, computed independently in double precision.
	near(t, "deflection", s[0].Deflection, 3.97131e-3, 1e-5)
	near(t, "tangent of a straight curve", s[0].Tangent, s[0].Stiffness, 1e-12)
	if s[0].From != FromTest || !strings.Contains(s[1].Source, "relaxation, 1 h") || !math.IsNaN(s[1].U95) {
		t.Errorf("%+v", s)
	}
	all.Tests = nil
	s, err = m.Static(all)
	if err != nil || len(s) != 1 || s[0].From != FromModel || !strings.Contains(s[0].Source, "not a static test: relaxation modulus at 1 d") {
		t.Fatalf("%+v %v", s, err)
	}
	near(t, "by model", s[0].Stiffness, 4*123.4687e3*50/64, 1e-6)
	// Not asked for: the table, by name.
	all.FromModel = false
	s, err = m.Static(all)
	if err != nil || len(s) != 1 || s[0].From != FromTable || !strings.Contains(s[0].Source, "Lindley at 50") {
		t.Fatalf("%+v %v", s, err)
	}
	near(t, "by table", s[0].Stiffness, 4*123.4687e3, 1e-6)
	all.Table = Gent
	s, _ = m.Static(all)
	near(t, "by Gent", s[0].Stiffness, 4*123.4687e3*h50/3/0.64, 1e-5)
	all.Hardness = 0
	if _, err := m.Static(all); !errors.Is(err, ErrNoStatic) {
		t.Errorf("%v", err)
	}
	outside := errors.New("outside")
	if _, err := m.Static(StaticSettings{FromModel: true, Model: func() (float64, float64, error) { return 0, 0, outside }}); !errors.Is(err, outside) {
		t.Errorf("%v", err)
	}
	if _, err := m.Static(StaticSettings{Tests: []StaticTest{{-1, 0, ""}}}); err == nil {
		t.Error("a negative modulus")
	}
	m.Elements[0] = Element{Name: "part", Measured: &Measured{}}
	if _, err := m.Static(all); err == nil || !strings.Contains(err.Error(), "part") {
		t.Errorf("%v", err)
	}
}

// h50 is E in MPa by Gent's relation at 50; computed independently in double precision.
const h50 = 2.45581

// A pressed pad takes the table's E0, which is more than 3G; too great a load is named and
// leaves the stiffness without load.
func TestStaticPressed(t *testing.T) {
	p := disc(50, 10)
	p.Compression, p.Bulk, p.Pressed = 0.73, 1030e6, true
	m := &Mount{Elements: []Element{{Name: "disc", Pad: p}}, Count: 1, PartFactor: 1, Mass: 100}
	from := StaticSettings{Hardness: 50, Table: Lindley}
	s, err := m.Static(from)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "pressed", s[0].Stiffness, 1407.534e3, 1e-6)
	if d := s[0].Deflection; !(d < 100*9.80665/s[0].Stiffness && d > 0.8*100*9.80665/s[0].Stiffness) || !(s[0].Tangent > s[0].Stiffness) {
		t.Errorf("%+v", s[0])
	}
	m.Mass = 1000
	var far *CompressionError
	if s, err = m.Static(from); err != nil || !errors.As(s[0].Refused, &far) || !math.IsNaN(s[0].Deflection) || s[0].Rest != nil {
		t.Errorf("%+v %v", s, err)
	}
	near(t, "still without load", s[0].Stiffness, 1407.534e3, 1e-6)
	m.Mass = 0
	if s, err = m.Static(from); err != nil || !math.IsNaN(s[0].Deflection) || s[0].Refused != nil || s[0].Tangent != s[0].Stiffness {
		t.Errorf("%+v %v", s, err)
	}
	// A pair: Kc 1407.5, Ks 125.66 N/mm at 30°, 2174.08 and 892.24 N/mm.
	q := *p
	q.Pressed, q.Bulk = false, nan
	g := 125.66e3 * q.Thickness / q.Area
	q.Compression = (1407.5/125.66/3 - 1) / (2 * 1.25 * 1.25)
	for _, across := range []bool{false, true} {
		pair := &Mount{Elements: []Element{{Pad: &q}}, Count: 1, PartFactor: 1, Arrangement: Arrangement{Kind: InclinedPair, Angle: math.Pi / 6, Across: across}}
		s, err := pair.Static(StaticSettings{Tests: []StaticTest{{g, nan, ""}}})
		if err != nil {
			t.Fatal(err)
		}
		want := 2174.08e3
		if across {
			want = 892.24e3
		}
		near(t, "pair", s[0].Stiffness, want, 1e-5)
	}
	// A tilted bush rests at nothing.
	bush := &Mount{Elements: []Element{{Bush: &Bush{0.01, 0.02, 0.04, Torsional}}}, Count: 1, PartFactor: 1}
	if s, err = bush.Static(StaticSettings{Tests: []StaticTest{{0.64e6, nan, ""}}}); err != nil {
		t.Fatal(err)
	}
	near(t, "torsion", s[0].Stiffness, 42.89321, 1e-7)
}
