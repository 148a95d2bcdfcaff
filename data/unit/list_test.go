package unit

import (
	"math"
	"strings"
	"testing"

	"phaselag/data/place"
)

func TestParseList(t *testing.T) {
	for _, c := range []struct {
		text string
		q    Quantity
		want []float64
	}{
		{"0.5%", Strain, []float64{0.005}},
		{"1,2, 5 Hz", Frequency, []float64{1, 2, 5}},
		{"-20:60:20C", Temperature, []float64{Kelvin(-20), Kelvin(0), Kelvin(20), Kelvin(40), Kelvin(60)}},
		{"−20:0:10 °C", Temperature, []float64{Kelvin(-20), Kelvin(-10), Kelvin(0)}},
		{"0:0.5:0.1Hz", Frequency, []float64{0, 0.1, 0.2, 0.3, 0.4, 0.5}},
		{"60:20:-20K", Temperature, []float64{60, 40, 20}},
		{"1:10:4Hz", Frequency, []float64{1, 5, 9}},
		{"5:5:1Hz", Frequency, []float64{5}},
		{"1:100:2/decade,200Hz", Frequency, []float64{1, math.Sqrt(10), 10, 10 * math.Sqrt(10), 100, 200}},
		{"100:1:1/decadeHz", Frequency, []float64{100, 10, 1}},
		{"1:1000:1/decade Hz", Frequency, []float64{1, 10, 100, 1000}},
	} {
		got, err := ParseList(c.text, c.q)
		if err != nil {
			t.Errorf("%q: %v", c.text, err)
			continue
		}
		if len(got) != len(c.want) {
			t.Errorf("%q = %v, want %v", c.text, got, c.want)
			continue
		}
		for i := range got {
			if math.Abs(got[i]-c.want[i]) > 1e-15*math.Abs(c.want[i]) {
				t.Errorf("%q: value %d is %v, want %v", c.text, i, got[i], c.want[i])
			}
		}
	}
}

func TestDecadesHaveBothEnds(t *testing.T) {
	got, err := ParseList("1:200:5/decadeHz", Frequency)
	if err != nil {
		t.Fatal(err)
	}
	// log10(200) = 2.301, so 11.5 steps were asked for and 12 are made.
	if len(got) != 13 || got[0] != 1 || got[12] != 200 {
		t.Fatalf("got %v", got)
	}
	for i := 2; i < len(got); i++ {
		if a, b := got[i]/got[i-1], got[1]; math.Abs(a-b) > 1e-12*b {
			t.Errorf("step %d is %v, want %v", i, a, b)
		}
	}
}

func TestParseListRefuses(t *testing.T) {
	for _, c := range []struct{ text, message, hint string }{
		{"", "empty item", "1:100:5/decade"},
		{"1,2", "the unit is missing", "Hz"},
		{"1Hz,2Hz", "a unit inside the list", "once at the end"},
		{"1:100Hz", "has no step", "a:b:step"},
		{"1:100:0Hz", "does not lead", ""},
		{"1:100:-1Hz", "does not lead", ""},
		{"1:1e9:1Hz", "more than 100000 values", "larger step"},
		{"1:1e9:1e-300Hz", "more than 100000 values", "larger step"},
		{"1:1e300:1e5/decadeHz", "more than 100000 values", ""},
		{"-1:10:5/decadeHz", "must be positive", ""},
		{"1:10:-5/decadeHz", "must be positive", ""},
		{"1:10:5:2Hz", "cannot read", ""},
		{"1,,2Hz", "empty item", ""},
		{"a:b:cHz", "is not a number", ""},
		{"1:2:1MPa", "is a unit of a modulus", "Hz"},
		{"1e999Hz", "too large", ""},
	} {
		v, err := ParseList(c.text, Frequency)
		if err == nil {
			t.Errorf("%q was accepted as %v", c.text, v)
			continue
		}
		if !strings.Contains(err.Error(), c.message) {
			t.Errorf("%q: %q does not say %q", c.text, err, c.message)
		}
		if !strings.Contains(place.Hint(err), c.hint) {
			t.Errorf("%q: hint %q does not say %q", c.text, place.Hint(err), c.hint)
		}
	}
	if _, err := ParseList("-300:0:100C", Temperature); err == nil {
		t.Error("a temperature below 0 K was accepted")
	}
}
