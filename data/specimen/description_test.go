package specimen

import (
	"math"
	"reflect"
	"strings"
	"testing"
)

func TestBuild(t *testing.T) {
	of := func(shape string, change func(*Description)) Description {
		d := Unstated(shape)
		change(&d)
		return d
	}
	disc := func(d *Description) { d.Diameter, d.Thickness = 0.025, 0.005 }
	block := func(d *Description) { d.Length, d.Width, d.Thickness = 0.1, 0.01, 0.002 }
	for _, c := range []struct {
		d       Description
		want    Shape
		assumed int
	}{
		{of("single shear", disc), Shear{Single, Circle{0.025}, 0.005, false}, 0},
		{of(" double shear ", disc), Shear{Double, Circle{0.025}, 0.005, false}, 0},
		{of("quadruple shear", func(d *Description) { block(d); d.Bending = true }), Shear{Quadruple, Rectangle{0.1, 0.01}, 0.002, true}, 0},
		{of("bonded compression", disc), Bonded{Circle{0.025}, 0.005, 1, inf}, 2},
		{of("bonded compression", func(d *Description) { block(d); d.Coefficient, d.Bulk = 0.6, 1e9 }), Bonded{Rectangle{0.1, 0.01}, 0.002, 0.6, 1e9}, 0},
		{of("lubricated compression", disc), Lubricated{Circle{0.025}, 0.005, 0.5}, 1},
		{of("lubricated compression", func(d *Description) { disc(d); d.Poisson = 0.3 }), Lubricated{Circle{0.025}, 0.005, 0.3}, 0},
		{of("tension strip", block), Strip{0.1, 0.01, 0.002, 0.5}, 1},
		{of("torsion bar", block), Bar{0.1, 0.01, 0.002}, 0},
		{of("torsion cylinder", func(d *Description) { d.Diameter, d.Length = 0.01, 0.03 }), Cylinder{0.03, 0.01, 0}, 0},
		{of("torsion cylinder", func(d *Description) { d.Diameter, d.Length, d.InnerDiameter = 0.01, 0.03, 0.006 }), Cylinder{0.03, 0.01, 0.006}, 0},
		{of("parallel plates", disc), Plates{0.025, 0.005}, 0},
		{of("cantilever", block), Beam{Cantilever, 0.1, 0.01, 0.002, 0.5, ParabolicShear}, 2},
		{of("dual cantilever", block), Beam{DualCantilever, 0.1, 0.01, 0.002, 0.5, ParabolicShear}, 2},
		{of("three-point bending", func(d *Description) { block(d); d.Poisson, d.Shear = 0.4, 0.85 }), Beam{ThreePoint, 0.1, 0.01, 0.002, 0.4, 0.85}, 0},
	} {
		got, assumed, err := c.d.Build()
		if err != nil || !reflect.DeepEqual(got, c.want) || len(assumed) != c.assumed {
			t.Errorf("%s: got %+v, %q, %v; want %+v", c.d.Shape, got, assumed, err, c.want)
			continue
		}
		if got.Name() != strings.TrimSpace(c.d.Shape) {
			t.Errorf("%q calls itself %q", c.d.Shape, got.Name())
		}
	}
	for _, c := range []struct {
		d    Description
		want string
	}{
		{of("dubble shear", disc), "no shape has the name"},
		{of("", disc), "no shape has the name"},
		{of("double shear", func(d *Description) { d.Diameter = 0.025 }), "thickness is not stated"},
		{of("double shear", func(d *Description) { d.Thickness = 0.025 }), "no cross-section"},
		{of("double shear", func(d *Description) { d.Thickness, d.Width = 0.025, 1 }), "no cross-section"},
		{of("double shear", func(d *Description) { disc(d); d.Length = 0.01 }), "both a diameter and a side"},
		{of("double shear", func(d *Description) { disc(d); d.Thickness = -1 }), "thickness must be a finite length"},
		{of("double shear", func(d *Description) { disc(d); d.Poisson = 0.5 }), "has no Poisson ratio"},
		{of("three-point bending", func(d *Description) { block(d); d.Diameter = 0.01 }), "has no diameter"},
		{of("torsion bar", func(d *Description) { block(d); d.Bending = true }), "no bending"},
	} {
		s, _, err := c.d.Build()
		refused(t, err, c.want)
		if s != nil {
			t.Errorf("%s: a shape came with the error", c.want)
		}
	}
}

// Every dimension of every shape: zero, negative, NaN and infinite ones are
// refused by name, and never panic.
func TestValidateRefuses(t *testing.T) {
	valid := []Shape{
		Shear{Single, Circle{0.025}, 0.005, true},
		Shear{Quadruple, Rectangle{0.025, 0.020}, 0.004, false},
		Bonded{Rectangle{0.025, 0.020}, 0.01, 1, 1e9},
		Lubricated{Circle{0.029}, 0.0125, 0.5},
		Strip{0.1, 0.01, 0.002, 0.5},
		Bar{0.1, 0.01, 0.002},
		Cylinder{0.03, 0.01, 0.006},
		Plates{0.025, 0.005},
		Beam{Cantilever, 0.1, 0.01, 0.002, 0.5, ParabolicShear},
	}
	for _, s := range valid {
		if err := s.Validate(); err != nil {
			t.Errorf("%+v: %v", s, err)
		}
		for _, d := range s.Sensitivity(1e6) {
			for _, v := range []float64{0, -1, math.NaN(), inf, -inf} {
				bad := s
				set(&bad, d.Name, v)
				if !possible(d.Name, v) {
					refused(t, bad.Validate(), d.Name+" must")
				}
			}
			for _, v := range []float64{5e-324, 1e-160, 1e160, math.MaxFloat64} {
				bad := s
				set(&bad, d.Name, v)
				err := bad.Validate()
				if k := real(bad.Stiffness(1)); err == nil && !(k >= 0 && k < inf) {
					t.Errorf("%+v: is valid, and its stiffness is %g", bad, k)
				}
			}
		}
	}
	for _, c := range []struct {
		s    Shape
		want string
	}{
		{Shear{}, "no known arrangement"},
		{Shear{Single, nil, 0.005, false}, "no cross-section"},
		{Bonded{}, "no cross-section"},
		{Lubricated{Circle{0.02}, 0.01, 0.6}, "Poisson"},
		{Cylinder{0.03, 0.01, 0.01}, "inner diameter"},
		{Beam{0, 0.1, 0.01, 0.002, 0.5, 1}, "no known support"},
		{Beam{Cantilever, 0.1, 0.01, 0.002, 0.5, 0}, "shear coefficient"},
		{Bonded{Circle{0.02}, 0.01, 1, 0}, "bulk modulus"},
	} {
		refused(t, c.s.Validate(), c.want)
	}
}

// possible reports values of the refused kinds that some numbers may have.
func possible(name string, v float64) bool {
	switch name {
	case poisson, coefficient, innerDiameter:
		return v == 0
	case bulk, shearFactor:
		return v == inf
	}
	return false
}
