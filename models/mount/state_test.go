package mount

import (
	"errors"
	"math"
	"math/cmplx"
	"testing"
)

func near(t *testing.T, what string, got, want, relative float64) {
	t.Helper()
	if !(math.Abs(got-want) <= relative*math.Abs(want)) {
		t.Errorf("%s: got %.12g, want %.12g", what, got, want)
	}
}

func nearComplex(t *testing.T, what string, got, want complex128, relative float64) {
	t.Helper()
	if !(cmplx.Abs(got-want) <= relative*cmplx.Abs(want)) {
		t.Errorf("%s: got %.12g, want %.12g", what, got, want)
	}
}

// disc is a round pad with dimensions in mm.
func disc(diameter, thickness float64) *Pad {
	d, t := diameter/1000, thickness/1000
	return &Pad{Area: math.Pi / 4 * d * d, Thickness: t, Diameter: d, Length: math.NaN(), Width: math.NaN(), Compression: math.NaN(), Bulk: math.NaN()}
}

// A disc of 50 mm by 10 mm with G = 0.64 MPa, and the factors of bending of
// thicker discs (the formula derived, the values computed independently in
// double precision).
func TestShearPad(t *testing.T) {
	p := disc(50, 10)
	near(t, "simple shear", real(p.Shear(0.64e6)), 125.6637e3, 1e-6)
	p.Bending = true
	near(t, "with bending", real(p.Shear(0.64e6)), 123.4687e3, 1e-6)
	for _, c := range []struct{ diameter, thickness, factor float64 }{{50, 10, 0.982533}, {50, 25, 0.9}, {25, 25, 0.692308}} {
		p := disc(c.diameter, c.thickness)
		p.Bending = true
		near(t, "factor of bending", p.bending(), c.factor, 1e-6)
	}
	// A rectangle leans over its length: thicker along the shear is stiffer.
	block := Pad{Area: 6e-4, Thickness: 0.02, Length: 0.03, Width: 0.02, Diameter: math.NaN(), Bending: true}
	near(t, "rectangle", block.bending(), 1/(1+0.02*0.02/(36*0.03*0.03/12)), 1e-14)
}

// Bonded compression: the shape factor is the loaded by the force-free area;
// E_c = E0(1+2kS²) after Gent and Lindley (1959), value from memory; the numbers
// computed independently in double precision for E0 2.20 MPa, k 0.73, B 1030 MPa.
func TestPress(t *testing.T) {
	for _, c := range []struct{ diameter, thickness, shape, ec, withBulk float64 }{
		{50, 10, 1.25, 7.21875, 7.16851}, {29, 12.5, 0.58, 3.28052, math.NaN()}, {100, 5, 5, 82.5, 76.38202},
	} {
		p := disc(c.diameter, c.thickness)
		p.Compression = 0.73
		const g = 2.20e6 / 3
		near(t, "shape factor", p.ShapeFactor(), c.shape, 1e-12)
		k, _ := p.Press(g)
		near(t, "E_c", real(k)*p.Thickness/p.Area, c.ec*1e6, 1e-6)
		if math.IsNaN(c.withBulk) {
			near(t, "stiffness", real(k), 173.348e3, 1e-5)
			continue
		}
		p.Bulk = 1030e6
		k, slope := p.Press(g)
		near(t, "E_c with bulk", real(k)*p.Thickness/p.Area, c.withBulk*1e6, 1e-6)
		up, _ := p.Press(g * (1 + 1e-6))
		nearComplex(t, "derivative", slope, (up-k)/(g*1e-6), 1e-5)
	}
	block := Pad{Length: 0.1, Width: 0.05, Thickness: 0.02, Diameter: math.NaN(), Compression: 0.73}
	near(t, "block's shape factor", block.ShapeFactor(), 0.833333333333, 1e-11)
	// 100 × 50 × 20 mm: E_c 4.430556 MPa, computed independently in double precision.
	near(t, "block's E_c", block.stiffening(1)*2.20e6/3, 4.430556e6, 1e-6)
}

// constant is a material without any dependence.
func constant(g complex128) Material {
	return func(_, _, _ float64) complex128 { return g }
}

// Two pads whose normals stand at 30° to the vertical, Kc 1407.5 and Ks 125.66
// N/mm: 2174.08 vertically and 892.24 N/mm horizontally (derived; computed
// independently in double precision).
func TestInclinedPair(t *testing.T) {
	p := disc(50, 10)
	p.Compression = 0.73
	// A pad with the two stiffnesses: G sets Ks, the coefficient then Kc.
	g := 125.66e3 * p.Thickness / p.Area
	p.Compression = (1407.5/125.66/3 - 1) / (2 * 1.25 * 1.25)
	for _, c := range []struct {
		across bool
		want   float64
	}{{false, 2174.08e3}, {true, 892.24e3}} {
		m := &Mount{Elements: []Element{{Pad: p}}, Count: 1, PartFactor: 1,
			Arrangement: Arrangement{Kind: InclinedPair, Angle: math.Pi / 6, Across: c.across}}
		s, err := m.Displaced(constant(complex(g, 0)), 10, 300, 1e-4)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "pair", real(s.Stiffness), c.want, 1e-5)
	}
}

// The energy-equivalent strain of a pair stores what the pair stores:
// 2·½·G·γ²·volume = ½·K·x².
func TestPairStrainStoresTheEnergy(t *testing.T) {
	p := disc(50, 10)
	p.Compression = 0.6
	m := &Mount{Elements: []Element{{Pad: p}}, Count: 1, PartFactor: 1,
		Arrangement: Arrangement{Kind: InclinedPair, Angle: 0.4}}
	const g, x = 1e6, 1e-4
	s, err := m.Displaced(constant(g), 10, 300, x)
	if err != nil {
		t.Fatal(err)
	}
	strain := s.Leaves[0].Strain
	near(t, "energy", g*strain*strain*p.Area*p.Thickness, real(s.Stiffness)*x*x/2, 1e-12)
}

func pads(n int) (list []Element) {
	for i := range n {
		p := disc(40+5*float64(i), 10+2*float64(i))
		list = append(list, Element{Pad: p})
	}
	return list
}

// soft is a material that softens with strain as a filled rubber does.
func soft(_, _, strain float64) complex128 {
	r := math.Pow(strain/0.01, 1.2)
	return complex(1e6+1e6/(1+r), 1e5+2e5*math.Sqrt(r)/(1+r))
}

func TestParallelAndSeries(t *testing.T) {
	one := Arrangement{Element: 0}
	two := Arrangement{Element: 1}
	g := complex(1.2e6, 0.2e6)
	m := &Mount{Elements: pads(2), Count: 3, PartFactor: 1.1}
	a, b := m.Elements[0].Pad.Shear(g), m.Elements[1].Pad.Shear(g)
	for _, c := range []struct {
		kind Kind
		want complex128
	}{{Parallel, a + b}, {Series, a * b / (a + b)}} {
		m.Arrangement = Arrangement{Kind: c.kind, Members: []Arrangement{one, two}}
		s, err := m.Displaced(constant(g), 10, 300, 1e-3)
		if err != nil {
			t.Fatal(err)
		}
		nearComplex(t, "stiffness", s.Stiffness, 3*1.1*c.want, 1e-13)
		near(t, "force", s.Force, 1e-3*cmplx.Abs(s.Stiffness), 1e-13)
		nearComplex(t, "shares", s.Leaves[0].Share+s.Leaves[1].Share, 1, 1e-13)
	}
	// In series the displacements add up: here in phase, as all moduli are alike.
	s, _ := m.Displaced(constant(g), 10, 300, 1e-3)
	near(t, "displacements", s.Leaves[0].Displacement+s.Leaves[1].Displacement, 1e-3, 1e-12)
}

// Two equal pads in series halve the displacement each, whatever they are made
// of; a force finds the displacement that makes it.
func TestBalance(t *testing.T) {
	m := &Mount{Elements: pads(1), Count: 1, PartFactor: 1}
	m.Arrangement = Arrangement{Kind: Series, Members: []Arrangement{{}, {}}}
	s, err := m.Displaced(soft, 10, 300, 4e-4)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "half", s.Leaves[1].Strain, 0.02, 1e-12)
	nearComplex(t, "modulus", s.Leaves[0].Modulus, soft(0, 0, 0.02), 1e-12)

	m = &Mount{Elements: pads(3), Count: 2, PartFactor: 0.9}
	m.Arrangement = Arrangement{Kind: Series, Members: []Arrangement{{Element: 0}, {Kind: Parallel, Members: []Arrangement{{Element: 1}, {Element: 2}, {Element: 0}}}}}
	s, err = m.Displaced(soft, 10, 300, 4e-4)
	if err != nil {
		t.Fatal(err)
	}
	f, err := m.Forced(soft, 10, 300, s.Force)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "displacement from force", f.Displacement, 4e-4, 1e-10)
	nearComplex(t, "stiffness from force", f.Stiffness, s.Stiffness, 1e-10)
	if none, err := m.Forced(soft, 10, 300, 0); err != nil || none.Displacement != 0 {
		t.Errorf("no force: %v, %v", none.Displacement, err)
	}
	// A material whose force falls as it is stretched has no balance under a force.
	collapse := func(_, _, strain float64) complex128 { return complex(1e6/(1+1e9*strain*strain*strain), 0) }
	if _, err := m.Forced(collapse, 10, 300, 1e5); !errors.Is(err, ErrNoBalance) {
		t.Errorf("collapse: %v", err)
	}
	if _, err := m.Displaced(constant(cmplx.NaN()), 10, 300, 1e-3); err == nil {
		t.Error("a modulus that is not a number gives a stiffness")
	}
}

// Sensitivities against differences. Each leaf's modulus is varied alone by a
// real and an imaginary amount; shares depend on moduli, so that the amplitude
// is made irrelevant by a material that does not depend on it.
func TestSensitivities(t *testing.T) {
	for _, part := range []Measured{
		{Stiffness: 4e5, LossFactor: 0.12},
		{Stiffness: 4e5, LossFactor: math.NaN()},
		{Stiffness: 4e5, LossFactor: math.NaN(), Storage: true},
	} {
		part.Frequency, part.Temperature, part.Amplitude, part.StrainPerDisplacement = 15, 296, 5e-4, 40
		pair := disc(50, 10)
		pair.Compression, pair.Bulk = 0.6, 1.1e9
		m := &Mount{
			Elements: append(pads(1), Element{Measured: &part}, Element{Pad: pair}), Count: 2, PartFactor: 1.05,
			Arrangement: Arrangement{Kind: Series, Members: []Arrangement{
				{Element: 0}, {Kind: Parallel, Members: []Arrangement{{Element: 1}, {Kind: InclinedPair, Element: 2, Angle: 0.5}}},
			}},
		}
		state := func(dg, dg0 complex128) State {
			s, err := m.Displaced(func(hertz, _, _ float64) complex128 {
				if hertz == 15 {
					return 1.5e6 + 0.2e6i + dg0
				}
				return 1.9e6 + 0.4e6i + dg
			}, 40, 260, 1e-4)
			if err != nil {
				t.Fatal(err)
			}
			return s
		}
		base := state(0, 0)
		near(t, "reference strain", base.Leaves[1].ReferenceStrain, 0.02, 1e-14)
		for _, d := range []complex128{100, 100i, 70 - 80i} {
			var direct, reference complex128
			for _, l := range base.Leaves {
				direct += l.Sensitivity * d
				reference += l.ReferenceSensitivity*d + l.ReferenceConjugate*cmplx.Conj(d)
			}
			nearComplex(t, "by the modulus", direct, (state(d, 0).Stiffness-state(-d, 0).Stiffness)/2, 1e-7)
			nearComplex(t, "by the reference modulus", reference, (state(0, d).Stiffness-state(0, -d).Stiffness)/2, 1e-7)
		}
	}
}

// At its own condition a measured element is what was measured.
func TestMeasuredAtItsOwnCondition(t *testing.T) {
	part := Measured{Stiffness: 420e3, LossFactor: 0.12, Frequency: 15, Temperature: 296.15, Amplitude: 5e-4, StrainPerDisplacement: 40}
	m := &Mount{Elements: []Element{{Measured: &part}}, Count: 1, PartFactor: 1}
	s, err := m.Displaced(soft, 15, 296.15, 5e-4)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "magnitude", cmplx.Abs(s.Stiffness), 420e3, 1e-13)
	near(t, "loss factor", imag(s.Stiffness)/real(s.Stiffness), 0.12, 1e-12)
	part.Storage, part.LossFactor = true, math.NaN()
	s, _ = m.Displaced(soft, 15, 296.15, 5e-4)
	near(t, "storage part", real(s.Stiffness), 420e3, 1e-13)
	g := soft(0, 0, 0.02)
	near(t, "the compound's loss factor", imag(s.Stiffness)/real(s.Stiffness), imag(g)/real(g), 1e-12)
}
