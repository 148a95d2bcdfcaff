package mount

import (
	"fmt"
	"math"
)

// Hardness and modulus
//
// Tables and formulas of the relation differ, so that a table is always named; a
// filled rubber's E0 of a table is more than three times its G.

// Table names a relation of hardness and modulus.
type Table string

// The relations.
const (
	// Lindley is the design table of natural rubbers (filled with SRF black
	// above 48 IRHD) of P. B. Lindley, Engineering design with natural rubber; values
	// from memory, editions differ by about 2 %. Between rows it is interpolated
	// straight in IRHD, from 30 to 75.
	Lindley Table = "Lindley"
	// Gent is A. N. Gent's formula (Rubber Chem. Technol. 31 (1958) 896; from
	// memory) for E from 25 to 90 IRHD or Shore A, with G = E/3; it knows no κ
	// and no B.
	Gent Table = "Gent"
)

// Hard is what a table says of a hardness; NaN where it says nothing.
type Hard struct {
	Young  float64 // E0, Pa
	Shear  float64 // G, Pa
	Factor float64 // κ of E_c = E0(1+2κS²)
	Bulk   float64 // B, Pa
}

// lindley: IRHD, E0/MPa, G/MPa, κ, B/MPa.
var lindley = [...][5]float64{
	{30, 0.92, 0.30, 0.93, 1000},
	{35, 1.18, 0.37, 0.89, 1000},
	{40, 1.50, 0.45, 0.85, 1000},
	{45, 1.80, 0.54, 0.80, 1000},
	{50, 2.20, 0.64, 0.73, 1030},
	{55, 3.25, 0.81, 0.64, 1090},
	{60, 4.45, 1.06, 0.57, 1150},
	{65, 5.85, 1.37, 0.54, 1210},
	{70, 7.35, 1.73, 0.53, 1270},
	{75, 9.40, 2.22, 0.52, 1330},
}

// At looks a hardness up; an error says which hardnesses and tables there are.
func (t Table) At(hardness float64) (Hard, error) {
	switch t {
	case Gent:
		if !(hardness >= 25 && hardness <= 90) {
			return Hard{}, fmt.Errorf("mount: Gent's relation is used from 25 to 90 IRHD, not at %g", hardness)
		}
		e := 0.0981e6 * (56 + 7.62336*hardness) / (0.137505 * (254 - 2.54*hardness))
		return Hard{e, e / 3, math.NaN(), math.NaN()}, nil
	case Lindley:
		last := len(lindley) - 1
		if !(hardness >= lindley[0][0] && hardness <= lindley[last][0]) {
			return Hard{}, fmt.Errorf("mount: Lindley's table goes from %g to %g IRHD, not to %g", lindley[0][0], lindley[last][0], hardness)
		}
		i := 0
		for i < last-1 && hardness >= lindley[i+1][0] {
			i++
		}
		lo, hi := lindley[i], lindley[i+1]
		part := (hardness - lo[0]) / (hi[0] - lo[0])
		at := func(k int) float64 { return lo[k]*(1-part) + hi[k]*part }
		return Hard{1e6 * at(1), 1e6 * at(2), at(3), 1e6 * at(4)}, nil
	}
	return Hard{}, fmt.Errorf("mount: no table is called %q; known are %s and %s", string(t), Lindley, Gent)
}
