package table

import (
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// TestQuick: what the quick reader reads is what the standard library's reads, bit
// for bit, and the forms are those of the patterns that define them.
func TestQuick(t *testing.T) {
	point := regexp.MustCompile(`^[+\-−]?(\d+\.?\d*|\.\d+)([eE][+\-−]?\d+)?$`)
	comma := regexp.MustCompile(`^[+\-−]?(\d+,\d*|,\d+)([eE][+\-−]?\d+)?$`)
	check := func(t rapid.TB, s string) {
		if x, ok := quick(s, '.'); ok {
			want, err := strconv.ParseFloat(s, 64)
			if err != nil || math.Float64bits(want) != math.Float64bits(x) {
				t.Fatalf("%q: %v, not %v (%v)", s, x, want, err)
			}
		}
		if x, ok := quick([]byte(strings.Replace(s, ".", ",", 1)), ','); ok && !strings.Contains(s, ",") {
			if want, err := strconv.ParseFloat(s, 64); err != nil || want != x {
				t.Fatalf("%q with a comma: %v, not %v (%v)", s, x, want, err)
			}
		}
		want := noNumber
		switch {
		case comma.MatchString(s):
			want = withComma
		case point.MatchString(s) && strings.Contains(s, "."):
			want = withPoint
		case point.MatchString(s):
			want = whole
		}
		// An exponent without digits is no number in either; the pattern also wants
		// one digit at least.
		if got := formOf(s); got != want {
			t.Fatalf("%q has the form %d, not %d", s, got, want)
		}
	}
	for _, s := range []string{"0", "-0", "1", "-1.5", "+.5", "5.", ".", "", "-", "1e5", "1e", "1e+", "1E-3", "−2.5", "1,5", ",5", "1,", "1.2.3", "1,2,3",
		"123456789012345678901234567890", "0.1", "9007199254740993", "9007199254740991e22", "1e23", "1e-22", "3.0e-10x", "1 2", "1e-−3", "１"} {
		check(t, s)
	}
	rapid.Check(t, func(t *rapid.T) {
		check(t, rapid.StringMatching(`[+-]?[0-9]{0,20}[.,]?[0-9]{0,6}([eE][+-]?[0-9]{0,3})?`).Draw(t, "number"))
	})
}
