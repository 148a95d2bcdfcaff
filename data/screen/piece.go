package screen

import (
	"cmp"
	"slices"

	"phaselag/data"
	"phaselag/data/specimen"
)

// stiffnessOf returns the stiffness in N/m of a test's specimen for 1 Pa of the
// campaign's modulus; ok is false where the specimen is not described, or turns.
func stiffnessOf(c *data.Campaign, t data.Test) (k float64, ok bool) {
	for _, s := range c.Specimens {
		if s.Name != t.Specimen || s.Shape == "" {
			continue
		}
		shape, _, err := specimen.Description{
			Shape: s.Shape, Diameter: s.Diameter, InnerDiameter: s.InnerDiameter, Length: s.Length, Width: s.Width, Thickness: s.Thickness,
			Poisson: s.Poisson, Coefficient: s.Coefficient, Bulk: s.Bulk, Shear: s.ShearFactor, Bending: s.Bending,
		}.Build()
		if err != nil || shape.Rotates() {
			return 0, false
		}
		k = real(shape.Stiffness(1e6)) / 1e6
		if c.Modulus == data.Young {
			k /= 3
		}
		return k, true
	}
	return 0, false
}

// byFrequency returns points sorted by frequency, in their order where it is equal.
func byFrequency(points []data.Point) []data.Point {
	points = slices.Clone(points)
	slices.SortStableFunc(points, func(a, b data.Point) int { return cmp.Compare(a.Frequency, b.Frequency) })
	return points
}

// byStrain returns the points with a known strain sorted by it.
func byStrain(points []data.Point) []data.Point {
	points = slices.DeleteFunc(slices.Clone(points), func(p data.Point) bool { return !(p.Strain > 0) })
	slices.SortStableFunc(points, func(a, b data.Point) int { return cmp.Compare(a.Strain, b.Strain) })
	return points
}
