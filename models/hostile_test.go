package models

import (
	"errors"
	"fmt"
	"strings"
	"testing"

	"phaselag/data/place"
)

// spot takes the mark ¶ out of a text and says where it stood.
func spot(text string) (plain string, line, column int) {
	at := strings.Index(text, "¶")
	if at < 0 {
		return text, 0, 0
	}
	before := text[:at]
	line = 1 + strings.Count(before, "\n")
	column = 1 + len([]rune(before[strings.LastIndex(before, "\n")+1:]))
	return before + text[at+len("¶"):], line, column
}

// refused reads text, which must fail at the mark ¶ with an error that
// contains want.
func refused(t *testing.T, name, text, want string) {
	t.Helper()
	plain, line, column := spot(text)
	c, err := Read([]byte(plain))
	var e *place.Error
	switch {
	case err == nil:
		t.Errorf("%s: was read", name)
	case c != nil:
		t.Errorf("%s: a compound beside the error %v", name, err)
	case !errors.As(err, &e):
		t.Errorf("%s: no place: %v", name, err)
	case e.Line < 1 || e.Column < 1:
		t.Errorf("%s: no line and column: %v", name, err)
	case line > 0 && (e.Line != line || e.Column != column):
		t.Errorf("%s: %v, want it at %d:%d", name, err, line, column)
	case !strings.Contains(err.Error(), want):
		t.Errorf("%s: %q does not say %q", name, err, want)
	}
}

// TestHostileFiles changes one thing of a good file at a time. ¶ marks where
// the error must point.
func TestHostileFiles(t *testing.T) {
	y, err := mustNew(t, sample()).YAML()
	if err != nil {
		t.Fatal(err)
	}
	good := string(y)
	for _, c := range []struct{ old, new, want string }{
		{"modulus: shear", "¶modlus: shear", "modlus: is no key"},
		{"modulus: shear", "modulus: shear\n¶modulus: shear", "modulus: stands twice"},
		{"  c1: 6.01", "  c1: 6.01\n  ¶c1: 6.01", "shift.c1: stands twice"},
		{"modulus: shear\n", "modulus: ¶shore\n", `"shore" is not shear or young`},
		{"poisson_ratio: 0.5\n", "", "poisson_ratio: is missing"},
		{"shift:\n  law: WLF", "shift:\n  ¶c3: 0\n  law: WLF", "shift.c3: is no key"},
		{"  c1: 6.01\n", "", "shift.c1: is missing"},
		{"  c1: 6.01", "  c1: ¶\"6.01\"", `shift.c1: must be a number or null, not the text "6.01"`},
		{"  c1: 6.01", "  c1: ¶six", "must be a number or null, not six"},
		{"  c1: 6.01", "  c1: ¶[6.01]", "must be a number or null, not a list"},
		{"  c1: 6.01", "  c1: ¶.inf", "must be a number or null, not .inf"},
		{"  c1: 6.01", "  c1: ¶0x10", "must be a number"},
		{"  c1: 6.01", "  c1: ¶6_01", "must be a number"},
		{"  c1: 6.01", "  c1: ¶1e999", "must be a number or null, not 1e999"},
		{"  c1: 6.01", "  c1: -6.01", "WLF needs positive c1"},
		{"  c1: 6.01", "  c1: null", "WLF needs positive c1"},
		{"  c1: 6.01", "  c1: ¶!!float six", "must be a number"},
		{"  c1: 6.01", "  c1: &a 6.01\n  ¶c9: *a", "is no key"},
		{"  c2_K: 149.75", "  c2_K: 60", "the shift law has no value at -40"}, // beyond its pole
		{"  law: WLF", "  law: ¶wlf", "is not one of WLF, Arrhenius, WLF+Arrhenius, none"},
		{"  law: density", "  law: ¶free", "is not one of none, density, factors"},
		{"  law: kraus", "  law: ¶cubic", "is not one of none, kraus"},
		{"reference_temperature_C: 23", "reference_temperature_C: ¶-300", "below absolute zero"},
		{"reference_temperature_C: 23", "reference_temperature_C: ¶null", "must be a number, not null"},
		{"reference_temperature_C: 23", "reference_temperature_C: ¶.nan", "must be a number, not .nan"},
		{"equilibrium_modulus_MPa: 0.9", "equilibrium_modulus_MPa: ¶-0.9", "not negative"},
		{"relaxation_time_s: 1e-07", "relaxation_time_s: ¶0", "linear.branches.0.relaxation_time_s: must be positive"},
		{"modulus_MPa: 0.62", "modulus_MPa: ¶-0.62", "linear.branches.0.modulus_MPa: must be finite and not negative"},
		{"  storage_MPa: 1.6", "  storage_MPa: ¶-1.6", "amplitude.storage_MPa: -1.6e+06 has the wrong sign"},
		{"  storage_MPa: 1.6", "  storage_MPa: ¶null", "amplitude.storage_MPa: the amplitude law needs a finite number"},
		{"  exponent: 0.58", "  exponent: ¶0", "amplitude.exponent"},
		{"  coupling: overlay", "  coupling: ¶product", "is not overlay"},
		{"frequency_dependence: causal", "frequency_dependence: ¶sometimes", "is not one of causal, rate_independent"},
		{"  reference_frequency_Hz: 10", "  reference_frequency_Hz: ¶0", "must be positive"},
		{"temperature_C: [-40, 80]", "temperature_C: ¶[-40]", "must be a list of 2 numbers"},
		{"temperature_C: [-40, 80]", "temperature_C: ¶[-40, 80, 90]", "must be a list of 2 numbers"},
		{"temperature_C: [-40, 80]", "temperature_C: ¶[80, -40]", "must be two finite numbers"},
		{"temperature_C: [-40, 80]", "temperature_C: [-40, ¶null]", "domain.temperature_C.1: must be a number, not null"},
		{"temperature_C: [-40, 80]", "temperature_C: ¶[-400, 80]", "none below -273.15"},
		{"strain_amplitude_percent: [0.1, 20]", "strain_amplitude_percent: ¶[-1, 20]", "domain.strain_amplitude_percent"},
		{"own_strain_amplitude_percent: 0.2", "own_strain_amplitude_percent: ¶-0.2", "not negative"},
		{"own_strain_amplitude_percent: 0.2", "own_strain_amplitude_percent: ¶null", "is needed where there is an amplitude law"},
		{"own_strain_amplitude_percent: 0.2", "own_strain_amplitude_percent: ¶30", "is not within the domain's strain amplitudes"},
		{"frequency_Hz: [10, 10]", "frequency_Hz: ¶[10, 1]", "amplitude_measured_at.frequency_Hz"},
		{"coverage: 0.95", "coverage: ¶95", "between 0 and 1"},
		{"degrees_of_freedom: 500", "degrees_of_freedom: ¶-1", "must not be negative"},
		{"points: 318", "points: ¶318.5", "must be a whole number, not 318.5"},
		{"points: 318", "points: ¶99999999999999999999", "must be a whole number"},
		{"- [0.007200000000000001]", "- ¶[0.0072, 0]", "row 0 of a lower triangle has 1"},
		{"- [0.007200000000000001]", "- [¶.nan]", "must be a number, not .nan"},
		{"- [0.007200000000000001]", "- [¶-.inf]", "must be a number"},
		{"    - [0.007200000000000001]\n", "", "40 rows for 41 parameters"},
		{"[linear.equilibrium_modulus_MPa", "[¶linear.equilibrium_modulus_MPA", "is no parameter of this compound"},
		{"shift.c1, shift.c2_K", "shift.c1, ¶shift.c1", "stands twice"},
		{"shift.c1, shift.c2_K", "shift.c1, ¶shift.factors.0.log10_aT", "is no parameter"},
		{"shift.c1, shift.c2_K", "shift.c1, ¶linear.branches.30.modulus_MPa", "is no parameter"},
		{"shift.c1, shift.c2_K", "shift.c1, ¶linear.branches.-1.modulus_MPa", "is no parameter"},
		{"name: invented 60", "name: ¶60", "compound.name: must be a text, not 60"},
		{"name: invented 60", "name:¶ ", "must be a text, not nothing"},
		{"name: invented 60", "name: ¶[a, b]", "must be a text, not a list"},
		{"name: invented 60", "name: ¶{a: b}", "must be a text, not a mapping"},
		{"name: invented 60", "name: ¶!!binary aGVsbG8=", "must be a text"},
		{"state:\n", "state: ¶calm\nstatic_state:\n", "state: must be a mapping of keys, not calm"},
		{"static:\n", "static: ¶{}\nmore:\n", "static: must be a list, not a mapping"},
		{"  - modulus_MPa: 1.02", "  - modulus_MPa: ¶0", "static.0.modulus_MPa: must be positive"},
		{"phaselag_compound: 1", "phaselag_compound: ¶2\n", "format version 2 is not known"},
		{"phaselag_compound: 1", "phaselag_compound: ¶2\nnovelty: true", "format version 2 is not known"},
		{"phaselag_compound: 1", "phaselag_compound: ¶0", "format version 0 is not known"},
		{"phaselag_compound: 1", "phaselag_compound: ¶one", "must be a whole number"},
		{"phaselag_compound: 1\n", "", "it has no key phaselag_compound"},
		{"result_sha256: \"\"", "result_sha256: \"\"\n¶---\na: 1", "a second document"},
		{"modulus: shear", "modulus: shear\n\tx: 1", "not a compound file"},
		{"modulus: shear", "modulus: \"sh¶\x01ear\"", "it has a control character"},
		{"modulus: shear", "modulus: °¶\xffshear", "it is not text in UTF-8"},
		{"modulus: shear", "<<: {}\nmodulus: shear", "is no key"},
		{"modulus: shear", "? [a, b]\n: c\nmodulus: shear", "is no key"},
		{"law: WLF", "law: ¶&x [*x]", "shift.law: must be a text, not a list"},
	} {
		if !strings.Contains(good, c.old) {
			t.Errorf("%q is not in the sample", c.old)
		}
		refused(t, c.new, strings.Replace(good, c.old, c.new, 1), c.want)
	}
	if _, err := Read(y); err != nil {
		t.Errorf("the sample itself: %v", err)
	}
}

// Files that are no compound files at all, and bombs.
func TestNoCompoundFiles(t *testing.T) {
	bomb := "a: &a [x, x, x, x, x, x, x, x, x]\n"
	for i := 'b'; i < 'j'; i++ {
		bomb += fmt.Sprintf("%c: &%c [*%c, *%c, *%c, *%c, *%c, *%c, *%c, *%c, *%c]\n", i, i, i-1, i-1, i-1, i-1, i-1, i-1, i-1, i-1, i-1)
	}
	for _, c := range []struct{ name, text, want string }{
		{"empty", "", "it is empty"},
		{"blank", " \n\t\n", "it is empty"},
		{"byte order mark", "\ufeff", "it is empty"},
		{"comment", "# nothing\n", "it is empty"},
		{"number", "¶1", "it has no keys"},
		{"list", "¶[1, 2]", "it has no keys"},
		{"null", "¶null", "it has no keys"},
		{"text", "¶once upon a time", "it has no keys"},
		{"empty mapping", "¶{}", "it has no key phaselag_compound"},
		{"only the version", "¶phaselag_compound: 1", "compound: is missing"},
		{"only the version, JSON", "\t¶{\"phaselag_compound\": 1}", "compound: is missing"},
		{"version twice, JSON", "{\"phaselag_compound\": 1,\n ¶\"phaselag_compound\": 1}", "stands twice"},
		{"open JSON", `{"phaselag_compound": 1`, "not a compound file"},
		{"JSON and more", `{"phaselag_compound": 1} {}`, "not a compound file"},
		{"zeros", "¶" + strings.Repeat("\x00", 1000), "control character"},
		{"zip", "PK¶\x03\x04\x14\x00", "control character"},
		{"picture", "¶\x89PNG\r\n\x1a\n", "not text in UTF-8"},
		{"UTF-16", "¶\xff\xfea\x00:\x00", "not text in UTF-8"},
		{"half a character", "a: ¶\xc3", "not text in UTF-8"},
		{"alias bomb", "¶" + bomb + "phaselag_compound: 1\n", "is no key"},
		{"alias bomb as the version", bomb + "phaselag_compound: ¶*i\n", "an alias cannot stand here"},
		{"itself", "phaselag_compound: ¶&a [*a]\n", "whole number"},
		{"deep list", "phaselag_compound: " + strings.Repeat("[", 200000), "not a compound file"},
		{"deep mapping", strings.Repeat("{a: ", 200000), "not a compound file"},
		{"deep JSON", `{"a":` + strings.Repeat("[", 9000) + strings.Repeat("]", 9000) + "}", "no key phaselag_compound"},
		{"deep blocks", "phaselag_compound:\n  ¶" + strings.Repeat("- ", 5000), "must be a whole number, not a list"},
		{"huge", strings.Repeat("# padding\n", sizeLimit/10+1), "longer than 32 MiB"},
	} {
		refused(t, c.name, c.text, c.want)
	}
}

// FuzzRead: no input makes Read panic; what it accepts it writes, reads again
// and writes as the same bytes.
func FuzzRead(f *testing.F) {
	small := sample()
	small.Linear.Branches, small.Shift.Factors = small.Linear.Branches[:1], small.Shift.Factors[:1]
	withCovariance(&small, 0.01)
	c := mustNew(f, small)
	y, err := c.YAML()
	if err != nil {
		f.Fatal(err)
	}
	j, err := c.JSON()
	if err != nil {
		f.Fatal(err)
	}
	f.Add(y)
	f.Add(j)
	f.Add([]byte("phaselag_compound: 1\ncompound: {name: &a x, polymer: *a}\n"))
	f.Add([]byte(`{"phaselag_compound": 1e0, "linear": {"branches": [null]}}`))
	f.Add([]byte("? {a: b}\n: - - !!binary x\n--- # second\n"))
	f.Fuzz(func(t *testing.T, b []byte) {
		c, err := Read(b)
		if err != nil {
			var e *place.Error
			if c != nil || !errors.As(err, &e) || e.Line < 1 || e.Column < 1 {
				t.Fatalf("%v beside the error %v", c, err)
			}
			return
		}
		y, err := c.YAML()
		if err != nil {
			t.Fatal(err)
		}
		back, err := Read(y)
		if err != nil {
			t.Fatalf("its own file: %v", err)
		}
		again, err := back.YAML()
		if err != nil || string(again) != string(y) {
			t.Fatalf("not the same text again (%v)", err)
		}
		if _, err := c.JSON(); err != nil {
			t.Fatal(err)
		}
	})
}
