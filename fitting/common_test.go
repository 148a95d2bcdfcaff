package fitting

import (
	"math"
	"testing"

	"phaselag/data"
	"phaselag/fitting/superpose"
)

// What all measurements share is what is left of the geometry and the calibrations of
// force and displacement, added in squares (JCGM 100, 5.1); what is not stated counts
// as nothing.
func TestCommonFactor(t *testing.T) {
	p := &superpose.Problem{UGeometry: 0.015, Factors: 9}
	nan := math.NaN()
	if u := commonFactor(p, data.Uncertainty{Force: nan, Displacement: nan}); math.Abs(u-0.005) > 1e-15 {
		t.Errorf("%g", u)
	}
	if u := commonFactor(p, data.Uncertainty{Force: 0.012, Displacement: nan}); math.Abs(u-0.013) > 1e-15 {
		t.Errorf("%g", u)
	}
}
