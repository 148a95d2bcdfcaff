package models

import (
	"errors"
	"math"
	"slices"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"phaselag/data/unit"
)

// The rules of the domain on one compound: −40 to 80 °C, 0.0123456 to
// 1234567.8 Hz reduced to 23 °C, strain 0.1 to 20 %, isotherms at 0.2 %, strain
// sweeps at −10 to 60 °C.
func TestDomainRules(t *testing.T) {
	c := mustNew(t, sample())
	nan := math.NaN()
	for _, q := range []struct {
		f, celsius, percent float64
		outside             string // quantities; "" inside
		reason              string
	}{
		{10, 23, nan, "", ""},
		{10, 23, 0.2, "", ""},
		{10, -40, nan, "", ""}, // the bounds belong to the domain
		{10, 80, nan, "", ""},
		{0.0123456, 23, nan, "", ""},
		{1234567.8, 23, nan, "", ""},
		{10, 23, 0.1, "", ""},
		{10, 23, 20, "", ""},
		{10, -40.001, nan, "temperature", "-40 °C is not within the tested -40 to 80 °C"},
		{10, 80.001, nan, "temperature", "tested"},
		{0.0123, 23, nan, "frequency", "not within the measured 0.0123 to 1.23e+06 Hz"},
		{0.01234559, 23, nan, "frequency", "measured"}, // the guard is that of this bound, not of the upper one
		{1234568, 23, nan, "frequency", "measured"},
		{1000, -40, nan, "frequency", "1000 Hz at -40 °C is 2.32e+07 Hz reduced to 23 °C"},
		{0.1, 80, nan, "frequency", "reduced"},
		{10, 23, 0.0999, "strain", "not within the measured 0.1 to 20 %"},
		{10, 23, 20.1, "strain", "not within"},
		{10, 23, 0, "strain", "not within"},
		// Above the isotherms' own amplitude: within 10 K of the sweeps only.
		{10, -20, 5, "", ""},
		{10, 70, 5, "", ""},
		{10, -20.1, 5, "strain", "above the isotherms' amplitude of 0.2 % strain dependence was measured from -10 to 60 °C only"},
		{10, 70.1, 5, "strain", "above"},
		{10, -40, 0.2, "", ""}, // at it and below: everywhere
		{10, -40, 0.15, "", ""},
		{10, 90, 25, "temperature|strain", "; "},
		{1e-4, 23, 25, "frequency|strain", "; "},
	} {
		cond := Condition{q.f, q.celsius + zeroC, q.percent / 100}
		m, err := c.Modulus(cond)
		e, _ := c.Extrapolate(cond)
		if q.outside == "" {
			if err != nil || m.Domain != "inside" || !(m.Storage > 0) || e != m {
				t.Errorf("%+v: %+v, %v", q, m, err)
			}
			continue
		}
		var out *OutsideError
		if !errors.As(err, &out) || strings.Join(out.Quantities, "|") != q.outside || !strings.Contains(out.Reason, q.reason) {
			t.Errorf("%+v: %v", q, err)
		}
		if m != (Modulus{}) {
			t.Errorf("%+v: a number beside the refusal", q)
		}
		if e.Domain != "extrapolated: "+q.outside || !(e.Storage > 0) {
			t.Errorf("%+v: extrapolated to %+v", q, e)
		}
	}
}

// Without strain sweeps the domain is the isotherms' amplitude ± 20 %; where
// no strain was ever stated every request for one is refused.
func TestDomainWithoutSweeps(t *testing.T) {
	in := sample()
	in.Amplitude.Law = AmplitudeNone
	in.Domain.AmplitudeMeasuredAt = nil
	in.Domain.Strain = &Range{0.16, 0.24}
	withCovariance(&in, 0.01)
	c := mustNew(t, in)
	for percent, inside := range map[float64]bool{0.159: false, 0.16: true, 0.2: true, 0.24: true, 0.241: false} {
		if err := c.Inside(Condition{10, 296.15, percent / 100}); (err == nil) != inside {
			t.Errorf("%g %%: %v", percent, err)
		}
	}
	in.Domain.Strain, in.Domain.OwnStrain = nil, unit.NaN()
	c = mustNew(t, in)
	if err := c.Inside(Condition{10, 296.15, math.NaN()}); err != nil {
		t.Errorf("no strain asked for: %v", err)
	}
	for _, percent := range []float64{0, 0.2, 50} {
		var out *OutsideError
		if err := c.Inside(Condition{10, 296.15, percent / 100}); !errors.As(err, &out) || out.Nearest != "leave the strain out" || !math.IsNaN(out.Allowed.Strain) {
			t.Errorf("%g %%: %v", percent, err)
		}
	}
}

// A condition that is none is an error of its own, with and without domain.
func TestNoCondition(t *testing.T) {
	c := mustNew(t, sample())
	for _, q := range []Condition{
		{0, 296.15, math.NaN()}, {-1, 296.15, math.NaN()}, {math.NaN(), 296.15, math.NaN()}, {math.Inf(1), 296.15, math.NaN()},
		{10, 0, math.NaN()}, {10, -1, math.NaN()}, {10, math.NaN(), math.NaN()}, {10, math.Inf(1), math.NaN()},
		{10, 296.15, -0.01}, {10, 296.15, math.Inf(1)},
	} {
		for _, f := range []func(Condition) (Modulus, error){c.Modulus, c.Extrapolate} {
			m, err := f(q)
			var out *OutsideError
			if err == nil || errors.As(err, &out) || m != (Modulus{}) {
				t.Errorf("%+v: %+v, %v", q, m, err)
			}
		}
	}
	// Below the pole of WLF, 23 − 149.75 °C, there is nothing to extrapolate.
	if m, err := c.Extrapolate(Condition{10, 140, math.NaN()}); err == nil {
		t.Errorf("below the pole: %+v", m)
	}
	if v := c.Value(Condition{10, 140, math.NaN()}); !math.IsNaN(real(v)) {
		t.Errorf("below the pole: %v", v)
	}
}

// The nearest allowed condition really is allowed, and so are the numbers in
// the text; what was inside stays as it was.
func TestNearestIsInside(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		in := anyCompound(t)
		lo := math.Pow(10, rapid.Float64Range(-6, 3).Draw(t, "log f lowest"))
		in.Domain.ReducedFrequency = Range{lo, lo * math.Pow(10, rapid.Float64Range(0, 9).Draw(t, "decades"))}
		c := mustNew(t, in)
		q := Condition{
			Frequency:   math.Pow(10, rapid.Float64Range(-8, 10).Draw(t, "log f")),
			Temperature: rapid.Float64Range(200, 420).Draw(t, "T"),
			Strain:      math.Pow(10, rapid.Float64Range(-6, 1).Draw(t, "log γ")),
		}
		if rapid.Bool().Draw(t, "no strain") {
			q.Strain = math.NaN()
		}
		err := c.Inside(q)
		if err == nil {
			if m, err := c.Modulus(q); err == nil && m.Domain != "inside" {
				t.Errorf("inside, but %q", m.Domain)
			}
			return
		}
		var out *OutsideError
		if !errors.As(err, &out) {
			t.Fatal(err)
		}
		if out.Reason == "" || out.Nearest == "" {
			t.Errorf("no reason or nothing nearest: %+v", out)
		}
		if again := c.Inside(out.Allowed); again != nil {
			t.Errorf("%v: and that is %v", err, again)
		}
		if !slices.Contains(out.Quantities, "temperature") && out.Allowed.Temperature != q.Temperature {
			t.Errorf("another temperature: %v", err)
		}
		if !slices.Contains(out.Quantities, "temperature") && !slices.Contains(out.Quantities, "frequency") && out.Allowed.Frequency != q.Frequency {
			t.Errorf("another frequency: %v", err)
		}
		// The first number of each part of the text is the number allowed.
		for _, part := range strings.Split(out.Nearest, ", ") {
			word, rest, _ := strings.Cut(part, " ")
			v, bad := strconv.ParseFloat(word, 64)
			if bad != nil {
				continue // "leave …", "or …"
			}
			var want float64
			switch {
			case strings.HasPrefix(rest, "°C"):
				want = out.Allowed.Temperature - zeroC
			case strings.HasPrefix(rest, "Hz"):
				want = out.Allowed.Frequency
			default:
				want = 100 * out.Allowed.Strain
			}
			if math.Abs(v-want) > 1e-9*math.Max(1, math.Abs(want)) {
				t.Errorf("%q, but allowed is %g", out.Nearest, want)
			}
		}
	})
}

// A time belongs to the frequency 1/(2πt). Refusals say which quantity, and
// the nearest condition is inside; the relaxation modulus falls with time and
// joins the modulus of the long- and short-time ends.
func TestRelaxation(t *testing.T) {
	c := mustNew(t, sample())
	for _, q := range []struct {
		time, celsius, percent float64
		outside                string
	}{
		{1, 23, math.NaN(), ""},
		{1, 23, 0.2, ""},
		{100, 23, math.NaN(), "time"}, // 0.0016 Hz
		{1e-8, 23, math.NaN(), "time"},
		{1, 81, math.NaN(), "temperature"},
		{1, 23, 30, "strain"},
		{1, -30, 5, "strain"},
		{1000, 23, 30, "time|strain"},
	} {
		g, err := c.Relaxation(q.time, q.celsius+zeroC, q.percent/100)
		if q.outside == "" {
			if err != nil || !(g > 0) {
				t.Errorf("%+v: %g, %v", q, g, err)
			}
			continue
		}
		var out *OutsideError
		if !errors.As(err, &out) || strings.Join(out.Quantities, "|") != q.outside || g != 0 {
			t.Errorf("%+v: %g, %v", q, g, err)
			continue
		}
		if err := c.Inside(out.Allowed); err != nil {
			t.Errorf("%+v: nearest %v", q, err)
		}
	}
	for _, bad := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		if _, err := c.Relaxation(bad, 296.15, math.NaN()); err == nil {
			t.Errorf("%g s was taken", bad)
		}
	}
	if _, err := c.Relaxation(1, math.NaN(), math.NaN()); err == nil {
		t.Error("NaN K was taken")
	}

	// The polymer's part is the spectrum's; the filler's the storage and loss
	// terms with ln(2πf0 t) + Euler's constant (the transform of ln iω).
	const at = 0.5
	g, err := c.Relaxation(at, 296.15, 0.012) // γ = γ_c: K1 = 1/2, K2 = 1
	if err != nil {
		t.Fatal(err)
	}
	want := 0.9e6
	for _, b := range c.Linear.Branches {
		want += b.Modulus * 1e6 * math.Exp(-at/b.Time)
	}
	want += 1.6e6/2 - 0.25e6*2/math.Pi*(math.Log(2*math.Pi*10*at)+0.5772156649015329)
	if math.Abs(g-want) > 1e-12*want {
		t.Errorf("G(%g s) = %.12g, want %.12g", at, g, want)
	}
	last := math.Inf(1)
	for _, tm := range []float64{1e-6, 1e-4, 0.01, 0.1, 1, 10} {
		g, err := c.Relaxation(tm, 296.15, math.NaN())
		if err != nil || !(g < last) {
			t.Errorf("G(%g s) = %g after %g, %v", tm, g, last, err)
		}
		last = g
	}
}
