package data

import (
	"math"
	"strings"
	"testing"
)

func TestSpecification(t *testing.T) {
	s, err := readSpecification("s.yaml", []byte(`specification: HM-60 release
compound: HM-60
decision: {rule: guarded, guard: 0.83}
limits:
  - {property: storage modulus, frequency: 10 Hz, temperature: 23 °C, strain: 0.5 %, lower: 1.8 MPa, upper: 2200 kPa}
  - {property: loss factor, frequency: 10 Hz, temperature: -20 °C, upper: 0.3}
  - {property: temperature shift, lower: -1.5 K, upper: 1.5 K}
  - {property: stiffness factor, lower: 93 %, upper: 1.07}
`))
	if err != nil {
		t.Fatal(err)
	}
	if s.Rule != Guarded || s.Guard != 0.83 || len(s.Limits) != 4 {
		t.Errorf("%+v", s)
	}
	near(t, "upper", s.Limits[0].Upper, 2.2e6)
	near(t, "strain", s.Limits[0].Strain, 0.005)
	if !math.IsNaN(s.Limits[1].Lower) || s.Limits[1].Upper != 0.3 {
		t.Errorf("%+v", s.Limits[1])
	}
	near(t, "shift", s.Limits[2].Lower, -1.5)
	near(t, "factor", s.Limits[3].Lower, 0.93)
	for _, v := range []struct{ text, want string }{
		{"limits: []", "no limits"},
		{"limits: [{property: colour}]", "not known here"},
		{"limits: [{upper: 1}]", "property is missing"},
		{"limits: [{property: loss factor, upper: 1}]", "needs a frequency"},
		{"limits: [{property: stiffness factor, frequency: 1 Hz, upper: 1}]", "has no frequency"},
		{"limits: [{property: stiffness factor}]", "without a number"},
		{"limits: [{property: stiffness factor, lower: 1.2, upper: 1.1}]", "not below"},
		{"decision: {guard: 7}\nlimits: [{property: stiffness factor, upper: 1}]", "between 0 and 3"},
		{"decision: {rule: simple, guard: 1}\nlimits: [{property: stiffness factor, upper: 1}]", "no guard band"},
		{"limits: [x]", "key: value pairs"},
		{"limit: 1", "unknown key"},
	} {
		_, err := readSpecification("s.yaml", []byte(v.text))
		if err == nil || !strings.Contains(err.Error(), v.want) {
			t.Errorf("%s: %v, should say %q", v.text, err, v.want)
		}
	}
}

func FuzzSpecification(f *testing.F) {
	f.Add([]byte("limits: [{property: loss factor, frequency: 10 Hz, temperature: 20 °C, upper: 1}]"))
	f.Fuzz(func(t *testing.T, b []byte) {
		s, err := readSpecification("s.yaml", b)
		if err == nil && (s == nil || len(s.Limits) == 0) {
			t.Error("a specification without limits was accepted")
		}
	})
}
