package models

import (
	"math/cmplx"
	"testing"

	"pgregory.net/rapid"
)

// The two terms of a compound with any laws sum up to its value.
func TestParts(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := mustNew(t, anyCompound(t))
		q := anyCondition(t, c)
		value := c.Value(q)
		polymer, filler := c.Parts(q)
		if cmplx.IsNaN(value) {
			return
		}
		if cmplx.Abs(polymer+filler-value) > 1e-12*cmplx.Abs(value) {
			t.Fatalf("%v + %v is not %v at %+v", polymer, filler, value, q)
		}
		if filler != 0 && c.Amplitude.Law == AmplitudeNone {
			t.Fatal("a filler term without a filler")
		}
		if b := c.VerticalShift(q.Temperature); !(b > 0) {
			t.Fatalf("b_T = %v", b)
		}
	})
}
