package specimen

import (
	"math"
	"math/cmplx"
	"strings"
	"testing"
)

// Double shear, 50 N at 0.1 mm, 500 mm², 4 mm: 2.0 MPa at 2.5 %. Closed form by
// hand.
func TestDoubleShear(t *testing.T) {
	// Sections with an area of 500 mm².
	for _, section := range []Section{Circle{math.Sqrt(4 * 500e-6 / math.Pi)}, Rectangle{0.025, 0.020}} {
		s := Shear{Arrangement: Double, Section: section, Thickness: 0.004}
		near(t, "modulus", real(s.Modulus(50/0.1e-3)), 2e6, 1e-12)
		near(t, "strain", s.Strain(0.1e-3), 0.025, 1e-12)
	}
}

// The three arrangements of one layer: a pair is twice as stiff at the same
// strain; two pairs in a row are as stiff as one layer, at half its strain.
// ISO 1827 has stress F/2A and strain x/2t for the four blocks; from memory.
func TestArrangements(t *testing.T) {
	layer := Shear{Single, Rectangle{0.025, 0.020}, 0.004, false}
	for _, c := range []struct {
		a                 Arrangement
		stiffness, strain float64
	}{{Single, 1, 1}, {Double, 2, 1}, {Quadruple, 1, 0.5}} {
		s := layer
		s.Arrangement = c.a
		near(t, s.Name(), real(s.Stiffness(1e6)/layer.Stiffness(1e6)), c.stiffness, 1e-14)
		near(t, s.Name(), s.Strain(1)/layer.Strain(1), c.strain, 1e-14)
	}
	quadruple := Shear{Quadruple, Rectangle{0.025, 0.020}, 0.004, false}
	force, x := 100.0, 0.002
	near(t, "ISO 1827", real(quadruple.Modulus(complex(force/x, 0))), force/(2*500e-6)/(x/(2*0.004)), 1e-12)
}

// Discs of G = 0.64 MPa. Computed independently in double precision.
func TestBending(t *testing.T) {
	k := func(d, h float64, bending bool) float64 {
		return real(Shear{Single, Circle{d}, h, bending}.Stiffness(0.64e6)) / 1e3
	}
	near(t, "50 x 10", k(0.050, 0.010, false), 125.6637, 1e-6)
	near(t, "50 x 10, bending", k(0.050, 0.010, true), 123.4687, 1e-6)
	near(t, "50 x 10, factor", k(0.050, 0.010, true)/k(0.050, 0.010, false), 0.982533, 1e-6)
	near(t, "50 x 25, factor", k(0.050, 0.025, true)/k(0.050, 0.025, false), 0.9, 1e-12)
	near(t, "25 x 25, factor", k(0.025, 0.025, true)/k(0.025, 0.025, false), 0.692308, 1e-6)
}

// A 50 IRHD rubber (E0 2.20 MPa, k 0.73, B 1030 MPa) and a 60 IRHD one (4.45,
// 0.57, 1150). Computed independently in double precision.
func TestBonded(t *testing.T) {
	for _, c := range []struct {
		name           string
		section        Section
		h, e0, k, b    float64
		s, ec, eb, kmm float64 // 0: no value
	}{
		{"disc 50 x 10", Circle{0.050}, 0.010, 2.20, 0.73, 1030, 1.25, 7.21875, 7.16851, 1407.534},
		{"disc 29 x 12.5", Circle{0.029}, 0.0125, 2.20, 0.73, inf, 0.58, 3.28052, 0, 173.348},
		{"disc 100 x 5", Circle{0.100}, 0.005, 2.20, 0.73, 1030, 5, 82.5, 76.38202, 119980.6},
		{"block 100 x 50 x 20", Rectangle{0.100, 0.050}, 0.020, 2.20, 0.73, inf, 0.833333, 4.430556, 0, 0},
		{"60 IRHD", Circle{0.050}, 0.010, 4.45, 0.57, 1150, 1.25, 12.37656, 12.24478, 0},
	} {
		p := Bonded{c.section, c.h, c.k, c.b * 1e6}
		g := complex(c.e0*1e6/3, 0)
		near(t, c.name+": S", p.ShapeFactor(), c.s, 1e-6)
		near(t, c.name+": E_c", p.stiffening()*real(g), c.ec*1e6, 1e-6)
		k := real(p.Stiffness(g))
		if c.eb > 0 {
			near(t, c.name+": E_c'", k*c.h/c.section.area(), c.eb*1e6, 1e-6)
		}
		if c.kmm > 0 {
			near(t, c.name+": K", k/1e3, c.kmm, 2e-6)
		}
	}
}

// The bulk modulus is a spring in series: without loss of its own it lowers the
// loss factor. Closed form, 1/K = 1/K1 + 1/K2.
func TestBulkInSeries(t *testing.T) {
	p := Bonded{Circle{0.100}, 0.005, 0.73, 1.03e9}
	g := complex(1e6, 3e5)
	k1 := complex(p.stiffening(), 0) * g * complex(p.Section.area()/p.Thickness, 0)
	k2 := complex(1.03e9*p.Section.area()/p.Thickness, 0)
	if k, want := p.Stiffness(g), 1/(1/k1+1/k2); cmplx.Abs(k-want) > 1e-14*cmplx.Abs(want) {
		t.Errorf("got %v, want %v", k, want)
	}
	if k := p.Stiffness(g); imag(k)/real(k) >= 0.3 {
		t.Errorf("loss factor %g", imag(k)/real(k))
	}
	if g := p.Modulus(1.1 * k2); !cmplx.IsNaN(g) {
		t.Errorf("stiffer than the bulk: got %v, want NaN", g)
	}
	if g := p.Modulus(0); g != 0 {
		t.Errorf("no stiffness: got %v", g)
	}
}

// With a shape factor near zero the bonded piece is the lubricated one.
func TestBondedTall(t *testing.T) {
	b := Bonded{Circle{0.001}, 1, 1, inf}
	l := Lubricated{Circle{0.001}, 1, 0.5}
	near(t, "stiffness", real(b.Stiffness(1)), real(l.Stiffness(1)), 1e-6)
	near(t, "strain", b.Strain(1), l.Strain(1), 1e-6)
	near(t, "strain of tension", Strip{0.1, 0.01, 0.001, 0.5}.Strain(0.1), math.Sqrt(3), 1e-14)
}

// β of rectangles in torsion, K = βGab³/L, as handbooks tabulate it (Timoshenko
// and Goodier, Theory of Elasticity, torsion of rectangular bars); values from
// memory, to the printed digits.
func TestBarTable(t *testing.T) {
	for _, c := range []struct{ rho, beta, half float64 }{
		{1, 0.1406, 5e-5}, {1.2, 0.166, 5e-4}, {1.5, 0.196, 5e-4}, {2, 0.229, 5e-4}, {2.5, 0.249, 5e-4},
		{3, 0.263, 5e-4}, {4, 0.281, 5e-4}, {5, 0.291, 5e-4}, {10, 0.312, 5e-4}, {1e9, 1.0 / 3, 1e-9},
	} {
		beta, _ := bar(c.rho)
		if !(math.Abs(beta-c.beta) <= c.half) {
			t.Errorf("%g: got %.6f, want %g", c.rho, beta, c.beta)
		}
		b := Bar{Length: 0.1, Width: 0.002 * c.rho, Thickness: 0.002}
		near(t, "stiffness", real(b.Stiffness(1e6)), beta*1e6*b.Width*math.Pow(b.Thickness, 3)/b.Length, 1e-13)
		turned := Bar{Length: 0.1, Width: b.Thickness, Thickness: b.Width}
		near(t, "turned", real(turned.Stiffness(1e6)), real(b.Stiffness(1e6)), 0)
	}
	// The series as it stands, 2000 terms.
	for _, rho := range []float64{1, 1.7, 4} {
		sum := 0.0
		for n := 1.0; n < 4000; n += 2 {
			sum += math.Tanh(n*math.Pi*rho/2) / math.Pow(n, 5)
		}
		beta, _ := bar(rho)
		near(t, "plain sum", beta, (1-192/math.Pow(math.Pi, 5)/rho*sum)/3, 1e-13)
	}
}

// K of circular pieces: the polar moment πd⁴/32 of a shaft. Handbook formula.
func TestTwist(t *testing.T) {
	g := complex(1e6, 1e5)
	solid := Cylinder{Length: 0.030, Diameter: 0.010}
	near(t, "solid", real(solid.Stiffness(g)), 1e6*math.Pi*math.Pow(0.010, 4)/32/0.030, 1e-13)
	near(t, "loss", imag(solid.Stiffness(g)), 1e5*math.Pi*math.Pow(0.010, 4)/32/0.030, 1e-13)
	hollow := Cylinder{Length: 0.030, Diameter: 0.010, InnerDiameter: 0.006}
	near(t, "hollow", real(hollow.Stiffness(g)), 1e6*math.Pi*(math.Pow(0.010, 4)-math.Pow(0.006, 4))/32/0.030, 1e-13)
	plates := Plates{Diameter: 0.025, Thickness: 0.002}
	near(t, "plates", real(plates.Stiffness(g)), 1e6*math.Pi*math.Pow(0.0125, 4)/2/0.002, 1e-13)
	// A thin tube: 2πR³sG/L at the strain Rθ/L.
	tube := Cylinder{Length: 0.030, Diameter: 0.010, InnerDiameter: 0.009999}
	near(t, "tube", real(tube.Stiffness(1e6)), 2*math.Pi*math.Pow(0.005, 3)*0.5e-6*1e6/0.030, 2e-4)
	near(t, "tube strain", tube.Strain(0.1), 0.005*0.1/0.030, 2e-4)
	// ∫r³ ln r dr = r⁴(ln r − ¼)/4. Closed form.
	near(t, "solid strain", solid.Strain(0.1), math.Exp(-0.25)*0.005*0.1/0.030, 1e-14)
	near(t, "rim strain", 0.0125*0.1/0.002/plates.Strain(0.1), math.Exp(0.25), 1e-14)
	near(t, "hollow strain", hollow.Strain(0.1), equivalent(func(u, v float64) (float64, float64) {
		r := 0.003 + 0.002*u
		return r * 0.1 / 0.030, r
	}), 1e-12)
}

// Slender beams: 12EI/L³, 24EI/L³, 48EI/L³; and the greatest fibre strain of
// three points, 6hx/L² (ISO 178; from memory). Short ones: with shear alone the
// beam is a shear pad of κA.
func TestBeams(t *testing.T) {
	for _, c := range []struct {
		s                Support
		k, shear, fibres float64
	}{
		{Cantilever, 12, 1, 3}, {DualCantilever, 24, 2, 3}, {ThreePoint, 48, 4, 6},
	} {
		b := Beam{c.s, 0.1, 0.01, 0.001, 0.5, inf}
		inertia := 0.01 * math.Pow(0.001, 3) / 12
		near(t, b.Name(), real(b.Stiffness(1e6)), c.k*3e6*inertia/1e-3, 1e-13)
		greatest := math.Sqrt(3) * c.fibres * 0.001 * 1e-3 / 1e-2
		near(t, b.Name()+": strain", b.Strain(1e-3), math.Exp(-2.0/3)*greatest, 1e-5)
		b.Shear = ParabolicShear
		// 1/K gains n·L/(κGA).
		more := 1 / real(b.Stiffness(1e6))
		pure := Beam{c.s, 0.1, 0.01, 0.001, 0.5, inf}
		near(t, b.Name()+": shear", more-1/real(pure.Stiffness(1e6)), 0.1/(c.shear*5.0/6*1e6*0.01*0.001), 1e-6)
	}
	near(t, "Cowper at 0.3", CowperShear(0.3), 0.85, 1e-3) // 0.850, Cowper (1966), from memory
	near(t, "Cowper at 0", CowperShear(0), ParabolicShear, 1e-15)
}

func TestStrainAssumption(t *testing.T) {
	for _, c := range []struct {
		s    Shape
		want string // a part; "": nothing to say
	}{
		{Shear{Double, Circle{0.025}, 0.005, false}, ""},
		{Shear{Double, Circle{0.025}, 0.005, true}, "logarithmic mean"},
		{Strip{0.05, 0.005, 0.001, 0.5}, "γ = 1.732 ε"},
		{Lubricated{Circle{0.029}, 0.0125, 0.5}, "γ = 1.732 ε"},
		// S = 1.25: √(3·(1 + 2·1.5625)) = 3.518, by hand.
		{Bonded{Circle{0.05}, 0.010, 1, inf}, "3.518 ε"},
		{Plates{0.025, 0.002}, "logarithmic mean"},
	} {
		got := StrainAssumption(c.s)
		if (got == "") != (c.want == "") || !strings.Contains(got, c.want) {
			t.Errorf("%+v: got %q, want %q in it", c.s, got, c.want)
		}
	}
}

func BenchmarkBarStrain(b *testing.B) {
	bar := Bar{0.05, 0.01, 0.002}
	for b.Loop() {
		bar.Strain(0.1)
	}
}

func BenchmarkBeamStrain(b *testing.B) {
	beam := Beam{ThreePoint, 0.05, 0.01, 0.002, 0.5, ParabolicShear}
	for b.Loop() {
		beam.Strain(1e-4)
	}
}
