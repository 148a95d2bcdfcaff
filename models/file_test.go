package models

import (
	"errors"
	"math"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"phaselag/data/place"
	"phaselag/data/unit"
)

// sameBits compares exported fields deeply: floats by their bits, any NaN
// equal to any NaN.
func sameBits(t rapid.TB, path string, a, b reflect.Value) {
	t.Helper()
	if a.Kind() != b.Kind() {
		t.Fatalf("%s: %v and %v", path, a, b)
	}
	switch a.Kind() {
	case reflect.Float64:
		x, y := a.Float(), b.Float()
		if math.Float64bits(x) != math.Float64bits(y) && !(math.IsNaN(x) && math.IsNaN(y)) {
			t.Errorf("%s: %v came back as %v", path, x, y)
		}
	case reflect.Pointer:
		if a.IsNil() || b.IsNil() {
			if a.IsNil() != b.IsNil() {
				t.Errorf("%s: %v came back as %v", path, a, b)
			}
			return
		}
		sameBits(t, path, a.Elem(), b.Elem())
	case reflect.Slice, reflect.Array:
		if a.Len() != b.Len() {
			t.Fatalf("%s: %d items came back as %d", path, a.Len(), b.Len())
		}
		for i := range a.Len() {
			sameBits(t, path, a.Index(i), b.Index(i))
		}
	case reflect.Struct:
		for i := range a.NumField() {
			if f := a.Type().Field(i); f.IsExported() {
				sameBits(t, path+"."+f.Name, a.Field(i), b.Field(i))
			}
		}
	default:
		if a.Interface() != b.Interface() {
			t.Errorf("%s: %#v came back as %#v", path, a.Interface(), b.Interface())
		}
	}
}

// extreme is a compound with whatever a file can hold: numbers of any size,
// nulls, texts of any characters.
func extreme(t *rapid.T) Compound {
	c := anyCompound(t)
	odd := []float64{0, math.Copysign(0, -1), 5e-324, -5e-324, 1.0 / 3, 0.1, 1e23, 9007199254740993, math.MaxFloat64, -math.MaxFloat64, 2.2250738585072014e-308, 1e21, 1e-7, 123456789012345680000}
	float := func() float64 {
		if rapid.Bool().Draw(t, "odd") {
			return rapid.SampledFrom(odd).Draw(t, "number")
		}
		return rapid.Float64().Draw(t, "number")
	}
	number := func() unit.Number {
		if rapid.IntRange(0, 3).Draw(t, "null") == 0 {
			return unit.NaN()
		}
		return unit.Number(float())
	}
	text := func() string {
		if rapid.Bool().Draw(t, "odd") {
			return rapid.SampledFrom([]string{"", "no", "null", "~", "1e3", "0x10", "2026-11-01", " a", "a ", "a: b", "# c", "- x", "<<", "*a", "&a", "tab\there", "\n", "line\nline\n", "\r\n", "\x00", "\x7f", "\u0085", "\u2028", "\ufeff", "\ufffe", "😀", "a'b\"c", "%", "@", "!!str x", "[", "{", "|", ">", "?", "---", "..."}).Draw(t, "text")
		}
		return rapid.String().Draw(t, "text")
	}
	c.Compound = Identity{Name: text(), Polymer: text(), Batch: text(), Hardness: text(), Density: number(), Tested: text()}
	c.PoissonRatio = number()
	c.State = State{Conditioning: text(), StaticPercent: number(), Deformation: text()}
	c.Linear.Branches = append(c.Linear.Branches, Branch{Time: math.Abs(rapid.Float64Range(5e-324, math.MaxFloat64).Draw(t, "τ")), Modulus: rapid.SampledFrom([]float64{0, 5e-324, 1e-300, 0.1}).Draw(t, "G")})
	c.Linear.Branches[0].Time = 5e-324
	for i := range c.Shift.Factors {
		c.Shift.Factors[i].U, c.Shift.Factors[i].Offset = number(), number()
	}
	c.Static = nil
	for range rapid.IntRange(0, 2).Draw(t, "static") {
		c.Static = append(c.Static, StaticItem{Modulus: rapid.SampledFrom([]float64{5e-324, 1e23, math.MaxFloat64, 0.1}).Draw(t, "static"), U95: number(), Strain: number(), Time: number(), TemperatureC: number(), Source: text()})
	}
	c.Fit = Fit{Points: rapid.Int().Draw(t, "points"), SigmaMagnitude: number(), SigmaPhase: number(), Superposition: Superposition{Holds: text(), P: number(), MisfitDeg: number(), MisfitPercent: number()}}
	c.Uncertainty.DegreesOfFreedom = rapid.SampledFrom([]unit.Number{unit.NaN(), 0, 1, 2.5, 1e300}).Draw(t, "dof")
	c.Uncertainty.Parameters, c.Uncertainty.Cholesky = nil, nil
	if rapid.Bool().Draw(t, "covariance") {
		withCovariance(&c, 0.01)
		for i := range c.Uncertainty.Cholesky {
			c.Uncertainty.Cholesky[i][0] = float()
		}
	}
	c.Provenance = Provenance{Version: text(), ResultSHA256: text()}
	for range rapid.IntRange(0, 2).Draw(t, "inputs") {
		c.Provenance.Inputs = append(c.Provenance.Inputs, InputFile{File: text(), SHA256: text()})
		c.Provenance.Assumptions = append(c.Provenance.Assumptions, text())
	}
	return c
}

// What is written is read back bit for bit, from YAML and from JSON, gives the
// same answers bit for bit, and is written again as the same bytes.
func TestRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := mustNew(t, extreme(t))
		write := map[string]func(*Compound) ([]byte, error){"YAML": (*Compound).YAML, "JSON": (*Compound).JSON}
		for _, format := range []string{"YAML", "JSON"} {
			text, err := write[format](c)
			if err != nil {
				t.Fatal(err)
			}
			back, err := Read(text)
			if err != nil {
				t.Fatalf("%s: %v\n%s", format, err, text)
			}
			sameBits(t, format, reflect.ValueOf(*c), reflect.ValueOf(*back))
			for _, other := range []string{"YAML", "JSON"} {
				want, _ := write[other](c)
				got, err := write[other](back)
				if err != nil || string(got) != string(want) {
					t.Errorf("%s from %s is not the same text (%v)", other, format, err)
				}
			}
			for range 3 {
				q := anyCondition(t, c)
				a, errA := c.Extrapolate(q)
				b, errB := back.Extrapolate(q)
				if (errA == nil) != (errB == nil) {
					t.Errorf("%+v: %v, read back %v", q, errA, errB)
				}
				sameBits(t, "answer", reflect.ValueOf(a), reflect.ValueOf(b))
			}
		}
	})
}

// A compound without any list that could be there writes empty lists and no
// null, and null numbers and optional parts come back as NaN and nil.
func TestNulls(t *testing.T) {
	in := sample()
	in.Static, in.Provenance.Inputs, in.Provenance.Assumptions = nil, nil, nil
	in.Uncertainty.Parameters, in.Uncertainty.Cholesky = nil, nil
	in.Uncertainty.DegreesOfFreedom, in.Compound.Density, in.PoissonRatio = unit.NaN(), unit.NaN(), unit.NaN()
	nan := unit.NaN()
	in.Amplitude = Amplitude{Law: AmplitudeNone, Coupling: Overlay, Storage: nan, Loss: nan, Critical: nan, Exponent: nan, Activation: nan, Frequency: RateIndependent, ReferenceFrequency: nan}
	in.Domain.Strain, in.Domain.AmplitudeMeasuredAt, in.Domain.OwnStrain = nil, nil, nan
	in.Shift.Factors[0].LogShift = nan
	c := mustNew(t, in)
	y, err := c.YAML()
	if err != nil {
		t.Fatal(err)
	}
	j, err := c.JSON()
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"static: []", "strain_amplitude_percent: null", "own_strain_amplitude_percent: null", "density_g_per_cm3: null", "amplitude_measured_at: null"} {
		if !strings.Contains(string(y), want) {
			t.Errorf("the file has no %q", want)
		}
	}
	for name, text := range map[string][]byte{"YAML": y, "JSON": j} {
		b, err := Read(text)
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		if b.Domain.Strain != nil || b.Domain.AmplitudeMeasuredAt != nil {
			t.Errorf("%s: a null part came back as something", name)
		}
		for what, v := range map[string]unit.Number{
			"density": b.Compound.Density, "ν": b.PoissonRatio, "storage": b.Amplitude.Storage, "own": b.Domain.OwnStrain,
			"dof": b.Uncertainty.DegreesOfFreedom, "factor": b.Shift.Factors[0].LogShift, "offset": b.Shift.Factors[0].Offset,
		} {
			if !math.IsNaN(float64(v)) {
				t.Errorf("%s: %s came back as %v", name, what, v)
			}
		}
		if b.Static == nil || b.Provenance.Inputs == nil || b.Provenance.Assumptions == nil || b.Uncertainty.Cholesky == nil {
			t.Errorf("%s: an empty list came back as nothing", name)
		}
	}
}

// JSON as other programs write it: other white space, escapes, whole numbers
// for fractions, other order of keys.
func TestJSONOfOthers(t *testing.T) {
	c := mustNew(t, sample())
	j, err := c.JSON()
	if err != nil {
		t.Fatal(err)
	}
	text := strings.ReplaceAll(string(j), "\n  ", "\r\n\t")
	text = strings.Replace(text, `"batch": "A-17"`, `"batch":"\u0041\u002d17 \ud83d\ude00\/"`, 1)
	text = strings.Replace(text, `"polymer": "NR",`, "", 1)
	text = strings.Replace(text, `"name": "invented 60",`, `"polymer": "NR", "name": "invented 60",`, 1)
	text = strings.Replace(text, `"reference_temperature_C": 23`, `"reference_temperature_C": 2.3E+1`, 1)
	b, err := Read([]byte("\ufeff" + text))
	if err != nil {
		t.Fatal(err)
	}
	if b.Compound.Batch != "A-17 😀/" || b.Compound.Polymer != "NR" || b.ReferenceTempC != 23 {
		t.Errorf("read %+v at %g °C", b.Compound, b.ReferenceTempC)
	}
}

// The same file with a date that nobody put in quotation marks: YAML 1.1 takes
// it for a time, a compound file for the text that it is.
func TestPlainDate(t *testing.T) {
	y, err := mustNew(t, sample()).YAML()
	if err != nil {
		t.Fatal(err)
	}
	b, err := Read([]byte(strings.Replace(string(y), `"2026-11-12"`, "2026-11-12", 1)))
	if err != nil {
		t.Fatal(err)
	}
	if b.Compound.Tested != "2026-11-12" {
		t.Errorf("tested %q", b.Compound.Tested)
	}
}

// The committed file is what is written today: later versions must read it.
func TestGoldenFile(t *testing.T) {
	c := mustNew(t, sample())
	y, err := c.YAML()
	if err != nil {
		t.Fatal(err)
	}
	golden(t, "testdata/invented.yaml", y)
	b, err := Open("testdata/invented.yaml")
	if err != nil {
		t.Fatal(err)
	}
	sameBits(t, "file", reflect.ValueOf(*c), reflect.ValueOf(*b))
}

func TestOpenFaults(t *testing.T) {
	_, err := Open(filepath.Join(t.TempDir(), "none.yaml"))
	if err == nil || !strings.Contains(err.Error(), "none.yaml: cannot read the compound file: no such file") {
		t.Errorf("got %v", err)
	}
	path := filepath.Join(t.TempDir(), "bad.yaml")
	if err := os.WriteFile(path, []byte("phaselag_compound: 1\ncolour: red\n"), 0o666); err != nil {
		t.Fatal(err)
	}
	_, err = Open(path)
	var e *place.Error
	if !errors.As(err, &e) || e.File != path || e.Line != 2 || e.Column != 1 {
		t.Errorf("got %v", err)
	}
}
