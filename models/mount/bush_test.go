package mount

import (
	"math"
	"testing"
)

// a 10 mm, b 20 mm, L 40 mm, G 0.64 MPa: torsion 42893.21 N·mm/rad, axial
// 232.0568 N/mm, radial 539.3708 (short) and 3453.664 N/mm (long); computed
// independently in double precision.
func TestBush(t *testing.T) {
	b := Bush{Inner: 0.010, Outer: 0.020, Length: 0.040}
	const g = 0.64e6
	near(t, "torsion", real(b.Torsion(g)), 42.89321, 1e-7)
	near(t, "axial", real(b.Axial(g)), 232.0568e3, 1e-6)
	short, long := b.Radial(g)
	near(t, "short", real(short), 539.3708e3, 1e-6)
	near(t, "long", real(long), 3453.664e3, 1e-6)
	// K/(GL) at b/a = 2 and 1.5; computed independently in double precision.
	for _, c := range []struct{ ratio, short, long float64 }{{2, 21.06917300, 134.9087599}, {1.5, 37.65154340, 602.7116196}} {
		short, long := Bush{Inner: 1, Outer: c.ratio, Length: 1}.Radial(1)
		near(t, "short", real(short), c.short, 1e-9)
		near(t, "long", real(long), c.long, 1e-9)
	}
}

// The one strain at which a bush's modulus is taken stores about the energy
// that the integral over its strains stores, for a modulus after Kraus (m 0.6)
// whose strain is near the middle of the fall.
func TestBushStrain(t *testing.T) {
	b := Bush{Inner: 0.010, Outer: 0.018, Length: 0.04}
	m := &Mount{Elements: []Element{{Bush: &b}}, Count: 1, PartFactor: 1}
	storage := func(strain float64) float64 { return 1 + 1/(1+math.Pow(strain/0.01, 1.2)) }
	const x = 1e-4
	s, err := m.Displaced(func(_, _, strain float64) complex128 { return complex(storage(strain), 0) }, 10, 300, x)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "strain", s.Leaves[0].Strain, x/(math.Sqrt(0.010*0.018)*math.Log(1.8)), 1e-12)
	energy, n := 0.0, 2000
	for i := range n {
		r := b.Inner + (float64(i)+0.5)/float64(n)*(b.Outer-b.Inner)
		strain := x / (r * math.Log(b.Outer/b.Inner))
		energy += storage(strain) * strain * strain / 2 * 2 * math.Pi * r * b.Length * (b.Outer - b.Inner) / float64(n)
	}
	near(t, "energy", real(s.Stiffness)*x*x/2, energy, 0.008)
}

// A pad that is pressed alone is a pair of upright pads, halved.
func TestCompressionPad(t *testing.T) {
	p := disc(50, 10)
	p.Compression, p.Bulk = 0.73, 1030e6
	pressed := *p
	pressed.Pressed = true
	one := &Mount{Elements: []Element{{Pad: &pressed}}, Count: 1, PartFactor: 1}
	two := &Mount{Elements: []Element{{Pad: p}}, Count: 1, PartFactor: 1, Arrangement: Arrangement{Kind: InclinedPair}}
	a, err := one.Displaced(soft, 10, 300, 1e-4)
	if err != nil {
		t.Fatal(err)
	}
	b, err := two.Displaced(soft, 10, 300, 1e-4)
	if err != nil {
		t.Fatal(err)
	}
	nearComplex(t, "stiffness", 2*a.Stiffness, b.Stiffness, 1e-13)
	near(t, "strain", a.Leaves[0].Strain, b.Leaves[0].Strain, 1e-13)
	nearComplex(t, "sensitivity", 2*a.Leaves[0].Sensitivity, b.Leaves[0].Sensitivity, 1e-13)
}
