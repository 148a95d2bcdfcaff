package unit

import (
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"phaselag/data/place"
)

func TestParse(t *testing.T) {
	for _, c := range []struct {
		text string
		q    Quantity
		want float64
		ulps float64 // 0: bit for bit
	}{
		{"23 °C", Temperature, 296.15, 0},
		{"23C", Temperature, 296.15, 0},
		{"-40 degC", Temperature, 233.15, 1},
		{"−40\u00a0°C", Temperature, 233.15, 1},
		{"-40 º C", Temperature, 233.15, 1},
		{"-40 Â°C", Temperature, 233.15, 1},
		{"-40 \ufffdC", Temperature, 233.15, 1},
		{"296.15 K", Temperature, 296.15, 0},
		{"-40 °F", Temperature, 233.15, 2}, // −40 °F = −40 °C
		{"212 F", Temperature, 373.15, 2},
		{"0 K", Temperature, 0, 0},
		{"0.3 K", TemperatureDifference, 0.3, 0},
		{"1.8 °F", TemperatureDifference, 1, 1},
		{"10 Hz", Frequency, 10, 0},
		{"10 hz", Frequency, 10, 0},
		{"1 rad/s", Frequency, 1 / (2 * math.Pi), 1},
		{"1 rad s^-1", Frequency, 1 / (2 * math.Pi), 1},
		{"1 rad·s⁻¹", Frequency, 1 / (2 * math.Pi), 1},
		{"600 rpm", Frequency, 10, 0},
		{"2.5 MPa", Modulus, 2.5e6, 0},
		{"1 N/mm²", Modulus, 1e6, 0},
		{"1 N/mm^2", Modulus, 1e6, 0},
		{"1 GPa", Modulus, 1e9, 0},
		// NIST SP 811, appendix B.8: psi to Pa 6.894757 E+03 (value from memory).
		{"1 psi", Modulus, 6894.757293168361, 4},
		{"1 dyn/cm2", Modulus, 0.1, 0},
		{"1 kgf/cm²", Modulus, 98066.5, 0},
		{"0.2 %", Strain, 0.002, 0},
		{"0.2%", Strain, 0.002, 0},
		{"0.01 m/m", Strain, 0.01, 0},
		{"0.01 1", Strain, 0.01, 0},
		{"0", Strain, 0, 0},
		{"5 kN/mm", Stiffness, 5e6, 0},
		{"1 lbf/in", Stiffness, 175.12683524647636, 2}, // NIST SP 811, appendix B.8: 1.751268 E+02 (value from memory)
		{"25 mm", Length, 0.025, 0},
		{"1 in", Length, 0.0254, 0},
		{"1200 mm2", Area, 1.2e-3, 0},
		{"1.12 g/cm3", Density, 1120, 0},
		{"200 g", Mass, 0.2, 0},
		{"180 deg", Angle, math.Pi, 0},
		{"0.05 °", Angle, 0.05 * math.Pi / 180, 1},
		{"4 %/mm", StrainPerLength, 40, 0},
		{"10 min", Time, 600, 0},
		{"1 h", Time, 3600, 0},
		{"2 K/min", TemperatureRate, 2.0 / 60, 0},
		{"3 °C/min", TemperatureRate, 0.05, 0},
		{"12 K/W", ThermalResistance, 12, 0},
		{"1.5 %", Relative, 0.015, 0},
		{"60 IRHD", Hardness, 60, 0},
		{"58 Shore A", Hardness, 58, 0},
		{"3 Pa s", Viscosity, 3, 0},
		{"3 Pa.s", Viscosity, 3, 0},
		{"6.6e-4 1/K", Expansion, 6.6e-4, 0},
		{"6.6e-4 /K", Expansion, 6.6e-4, 0},
		{"1e3 Pa", Modulus, 1e3, 0},
		{"1E", Modulus, math.NaN(), 0},
	} {
		got, err := Parse(c.text, c.q)
		if math.IsNaN(c.want) {
			if err == nil {
				t.Errorf("%q was accepted as %v", c.text, got)
			}
			continue
		}
		if err != nil {
			t.Errorf("%q: %v", c.text, err)
			continue
		}
		if math.Abs(got-c.want) > c.ulps*math.Abs(c.want)*0x1p-52 {
			t.Errorf("%q = %v, want %v", c.text, got, c.want)
		}
	}
}

func TestParseRefuses(t *testing.T) {
	for _, c := range []struct {
		text    string
		q       Quantity
		message string
		hint    string
	}{
		{"-300 °C", Temperature, "below absolute zero", "-273.15 °C"},
		{"-1 K", Temperature, "below absolute zero", "check the sign"},
		{"23", Temperature, "the unit is missing", "23 °C"},
		{"0", Temperature, "the unit is missing", "0 °C"},
		{"0.2", Strain, "the unit is missing", "0.2 %"},
		{"10 s", Frequency, "is a unit of a time, not of a frequency", "Hz"},
		{"10 MPa", Frequency, "is a unit of a modulus", "rad/s"},
		{"10 MPq", Modulus, "is not a unit of a modulus", "MPa was perhaps meant"},
		{"10 mPa", Modulus, "is not a unit", "MPa"},
		{"10 MHZ", Frequency, "is not a unit", "kHz"},
		{"abc", Force, "is not a number", "decimal point"},
		{"", Force, "is not a number", "decimal point"},
		{"nan Pa", Modulus, "is not a number", ""},
		{"inf Pa", Modulus, "is not a number", ""},
		{"0x10 Pa", Modulus, "not a unit", ""},
		{"1e400 Pa", Modulus, "too large", ""},
		{"1e308 GPa", Modulus, "not a finite modulus", ""},
		{"0,2 %", Strain, "a comma", "decimal point"},
		{"1 000 Pa", Modulus, "more than one number", "without blanks"},
		{"5 100 Pa", Modulus, "not a unit", ""},
		{"1 500 Pa", Modulus, "more than one number", ""},
		{strings.Repeat("9", 100000), Modulus, "too large", ""},
	} {
		v, err := Parse(c.text, c.q)
		if err == nil {
			t.Errorf("%q was accepted as %v", clip(c.text), v)
			continue
		}
		if !math.IsNaN(v) {
			t.Errorf("%q: value %v beside an error", clip(c.text), v)
		}
		if !strings.Contains(err.Error(), c.message) || len(err.Error()) > 300 {
			t.Errorf("%q: %q does not say %q", clip(c.text), err, c.message)
		}
		if !strings.Contains(place.Hint(err), c.hint) {
			t.Errorf("%q: hint %q does not say %q", clip(c.text), place.Hint(err), c.hint)
		}
	}
}

// Every spelling in the table must find its own unit, and nothing else.
func TestTableIsConsistent(t *testing.T) {
	for _, u := range units {
		for _, s := range append([]string{u.Symbol}, u.spellings...) {
			got, ok := Lookup(s, u.Quantity)
			if !ok || got.Symbol != u.Symbol {
				t.Errorf("%q as %s finds %q, want %q", s, u.Quantity, got.Symbol, u.Symbol)
			}
			if normalize(s) != normalize(normalize(s)) {
				t.Errorf("normalize(%q) is not stable", s)
			}
		}
	}
}

func TestThereAndBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		u := rapid.SampledFrom(units).Draw(t, "unit")
		x := rapid.Float64Range(-1e6, 1e6).Draw(t, "x")
		back := u.From(u.SI(x))
		if math.Abs(back-x) > 1e-9*math.Max(1, math.Abs(x)) {
			t.Fatalf("%v %s came back as %v", x, u.Symbol, back)
		}
		if y := u.SI(x); x == 0 && u.Zero == 0 && y != 0 {
			t.Fatalf("0 %s is %v", u.Symbol, y)
		}
	})
}

func TestCelsius(t *testing.T) {
	if got := Celsius(Kelvin(-40)); got != -40 {
		t.Errorf("got %v, want -40", got)
	}
	for i := -2731; i <= 3000; i++ {
		c, _ := strconv.ParseFloat(strconv.FormatFloat(float64(i)/10, 'f', 1, 64), 64)
		if got := Celsius(Kelvin(c)); got != c {
			t.Errorf("%v °C came back as %v", c, got)
		}
	}
}

func TestDisplay(t *testing.T) {
	for _, c := range []struct {
		si   float64
		q    Quantity
		want string
	}{
		{233.15, Temperature, "−40 °C"},
		{0.002, Strain, "0.2 %"},
		{1.23456e6, Modulus, "1.235 MPa"},
		{math.NaN(), Strain, "not stated"},
		{273.15, Temperature, "0 °C"},
	} {
		if got := Display(c.si, c.q); got != c.want {
			t.Errorf("got %q, want %q", got, c.want)
		}
	}
}

func FuzzParse(f *testing.F) {
	for _, s := range []string{"23 °C", "-1e5 Pa", "0.2%", "1e", ".", "−", "Â°", "1 1", "\xff\xfe"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		for _, q := range []Quantity{Temperature, Frequency, Modulus, Strain} {
			if v, err := Parse(s, q); err == nil && (math.IsNaN(v) || math.IsInf(v, 0)) {
				t.Errorf("%q gave %v", s, v)
			}
			_, _ = ParseList(s, q)
		}
	})
}
