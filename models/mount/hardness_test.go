package mount

import (
	"math"
	"testing"
)

func TestTables(t *testing.T) {
	// Rows of the natural rubber design table; values from memory.
	for _, c := range [][5]float64{{30, 0.92, 0.30, 0.93, 1000}, {50, 2.20, 0.64, 0.73, 1030}, {60, 4.45, 1.06, 0.57, 1150}, {75, 9.40, 2.22, 0.52, 1330}, {62, 5.01, 1.184, 0.558, 1174}} {
		h, err := Lindley.At(c[0])
		if err != nil {
			t.Fatal(err)
		}
		for i, v := range []float64{h.Young / 1e6, h.Shear / 1e6, h.Factor, h.Bulk / 1e6} {
			near(t, "table", v, c[i+1], 1e-12)
		}
	}
	// Gent's relation at 30 to 80; computed independently in double precision.
	for i, want := range []float64{1.14237, 1.68964, 2.45581, 3.60507, 5.52051, 9.35137} {
		h, err := Gent.At(30 + 10*float64(i))
		if err != nil {
			t.Fatal(err)
		}
		near(t, "E", h.Young/1e6, want, 1e-5)
		near(t, "G", h.Shear*3, h.Young, 1e-15)
		if !math.IsNaN(h.Factor) || !math.IsNaN(h.Bulk) {
			t.Error("Gent's relation knows no factor and no bulk modulus")
		}
	}
	for _, c := range []struct {
		table    Table
		hardness float64
	}{{Lindley, 29}, {Lindley, 76}, {Lindley, math.NaN()}, {Gent, 20}, {Gent, 95}, {"lindley", 50}} {
		if _, err := c.table.At(c.hardness); err == nil {
			t.Errorf("%s at %g: no error", c.table, c.hardness)
		}
	}
}
