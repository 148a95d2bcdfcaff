package models

import "math/cmplx"

// Parts is G*(f, T, γ) in its two terms, in Pa: that of the polymer, b_T included, and
// what the filler adds, F; where the compound's filler term scales, what it adds is the
// polymer's term times F. Their sum is Value.
func (c *Compound) Parts(q Condition) (polymer, filler complex128) {
	bare := *c
	bare.derived.filler = nil
	polymer = bare.Value(q)
	if cmplx.IsNaN(polymer) || c.derived.filler == nil {
		return polymer, 0
	}
	term := c.derived.filler.at(q.Frequency, q.Temperature, c.strain(q))
	if c.derived.filler.scaling {
		term *= polymer
	}
	return polymer, term
}

// VerticalShift is b_T at T in kelvin, 1 without a vertical shift.
func (c *Compound) VerticalShift(T float64) float64 {
	b, _ := c.derived.verticalAt(T)
	return b
}
