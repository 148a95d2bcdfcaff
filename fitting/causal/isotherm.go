package causal

import (
	"fmt"
	"math"
	"math/cmplx"
)

// Isotherm is one frequency sweep at one temperature and one small strain.
type Isotherm struct {
	Frequency []float64    // Hz, strictly rising, positive
	Modulus   []complex128 // G' + iG'', any unit, one a frequency; G' and G'' positive

	// Noise of one reading, from a joint fit or from repeats: relative standard
	// deviation of the magnitude, and standard deviation of the phase in rad.
	// NaN or 0 in either: both are estimated from the free-sign fit's own
	// residuals, and the size of that fit's misfit can then not be judged.
	Magnitude, Phase float64
}

// check returns the first fault of the data, nil when there is none.
func (s Isotherm) check() error {
	if len(s.Frequency) == 0 {
		return fmt.Errorf("causal: no frequency given")
	}
	if len(s.Frequency) != len(s.Modulus) {
		return fmt.Errorf("causal: %d frequencies but %d moduli", len(s.Frequency), len(s.Modulus))
	}
	for i, f := range s.Frequency {
		g := s.Modulus[i]
		switch {
		case !(f > 0) || math.IsInf(f, 0):
			return fmt.Errorf("causal: row %d: frequency %g Hz is not a positive number", i+1, f)
		case i > 0 && f <= s.Frequency[i-1]:
			return fmt.Errorf("causal: row %d: frequency %g Hz does not rise (row %d has %g Hz); sort the rows and average repeats",
				i+1, f, i, s.Frequency[i-1])
		case !(real(g) > 0) || !(imag(g) > 0) || cmplx.IsInf(g):
			return fmt.Errorf("causal: row %d (%g Hz): storage and loss modulus must be positive numbers, not %g and %g",
				i+1, f, real(g), imag(g))
		}
	}
	for _, u := range []struct {
		name  string
		value float64
	}{{"magnitude", s.Magnitude}, {"phase", s.Phase}} {
		if u.value < 0 || math.IsInf(u.value, 0) {
			return fmt.Errorf("causal: noise of the %s is %g; give a positive number, or NaN or 0 for unknown", u.name, u.value)
		}
	}
	return nil
}

// noiseKnown reports whether both noise figures were given.
func (s Isotherm) noiseKnown() bool { return s.Magnitude > 0 && s.Phase > 0 }

// span is the width of the isotherm in decades.
func (s Isotherm) span() float64 {
	return math.Log10(s.Frequency[len(s.Frequency)-1] / s.Frequency[0])
}
