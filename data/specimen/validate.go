package specimen

import (
	"fmt"
	"math"

	"phaselag/data/place"
)

// faults collects the first fault of a shape.
type faults struct {
	shape string
	err   error
}

func (f *faults) add(hint, format string, a ...any) {
	if f.err == nil {
		f.err = &place.Error{What: f.shape + ": " + fmt.Sprintf(format, a...), Hint: hint}
	}
}

// length wants a finite length above zero.
func (f *faults) length(name string, v float64) {
	if !(v > 0) || math.IsInf(v, 0) {
		f.add("for example 0.005 for 5 mm", "%s must be a finite length above zero in m, not %g", name, v)
	}
}

// poisson wants a ratio of an elastic solid that may be stretched.
func (f *faults) poisson(v float64) {
	if !(v > -1 && v <= 0.5) {
		f.add("rubber has 0.5, foams have less", "Poisson ratio must lie above -1 and be at most 0.5, not %g", v)
	}
}

// section wants a circle or a rectangle.
func (f *faults) section(s Section) {
	switch s := s.(type) {
	case Circle:
		f.length(diameter, s.Diameter)
	case Rectangle:
		f.length(length, s.Length)
		f.length(width, s.Width)
	default:
		f.add("Circle{Diameter} or Rectangle{Length, Width}", "no cross-section is stated")
	}
}

// scale refuses dimensions that are possible one by one, but together leave
// the range of numbers.
func (f *faults) scale(numbers ...float64) error {
	if f.err != nil {
		return f.err
	}
	for _, v := range numbers {
		if !(v > 0) || math.IsInf(v, 0) {
			f.add("lengths are in m", "the dimensions together give no finite stiffness and strain")
		}
	}
	return f.err
}

// metres doubts lengths that are probably millimetres.
func metres(dimensions []Dimension) []Check {
	for _, d := range dimensions {
		if d.Unit == "m" && d.Value > 1 {
			return []Check{{What: d.Name + " in m", Found: d.Value, Wanted: "below 1 m; it may be millimetres", Source: commonPractice, Severity: Doubt}}
		}
	}
	return nil
}

// compressible notes a Poisson ratio on which the modulus depends visibly.
func compressible(nu float64) []Check {
	if nu >= 0.45 {
		return nil
	}
	return []Check{{What: poisson, Found: nu, Wanted: "0.45 to 0.5 for rubber; below, the shear modulus is only as good as this number", Source: derived, Severity: Note}}
}
