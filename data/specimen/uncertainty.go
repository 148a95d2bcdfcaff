package specimen

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"phaselag/data/place"
)

// RelativeUncertainty returns the combined relative standard uncertainty of |G*|
// from the dimensions of a valid shape,
//
//	u² = Σ (c_i·u_i)²,   c_i = ∂ln|G*|/∂ln(dimension i)
//
// (JCGM 100, 5.1, uncorrelated inputs), at the shear modulus g in Pa. u holds
// relative standard uncertainties by the names of [Shape.Sensitivity]; what it
// does not name counts as known. A name that the shape does not have, and an
// uncertainty that is negative or not finite, is an error.
func RelativeUncertainty(s Shape, g complex128, u map[string]float64) (float64, error) {
	sum := 0.0
	known, names := map[string]bool{}, []string{}
	for _, d := range s.Sensitivity(g) {
		known[d.Name] = true
		names = append(names, d.Name)
		r := u[d.Name]
		if !(r >= 0) || math.IsInf(r, 0) {
			return math.NaN(), &place.Error{
				What: fmt.Sprintf("%s: relative uncertainty of %s must be a finite number of at least 0, not %g", s.Name(), d.Name, r),
				Hint: "for example 0.01 for 1 %",
			}
		}
		sum += d.Sensitivity * r * d.Sensitivity * r
	}
	var strange []string
	for name := range u {
		if !known[name] {
			strange = append(strange, name)
		}
	}
	if len(strange) > 0 {
		sort.Strings(strange)
		return math.NaN(), &place.Error{
			What: fmt.Sprintf("%s: has no %q", s.Name(), strange[0]),
			Hint: "dimensions: " + strings.Join(names, ", "),
		}
	}
	return math.Sqrt(sum), nil
}
