package specimen

import (
	"math"
	"math/cmplx"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"phaselag/data/place"
)

func near(t *testing.T, what string, got, want, relative float64) {
	t.Helper()
	if !(math.Abs(got-want) <= relative*math.Abs(want)) {
		t.Errorf("%s: got %.10g, want %.10g", what, got, want)
	}
}

// refused wants an error with the words, and a hint.
func refused(t *testing.T, err error, words string) {
	t.Helper()
	if err == nil || !strings.Contains(err.Error(), words) || place.Hint(err) == "" {
		t.Errorf("got error %v (hint %q), want one with %q and a hint", err, place.Hint(err), words)
	}
}

var inf = math.Inf(1)

// samples draws one valid shape of every kind.
func samples(t *rapid.T) []Shape {
	l := func(name string) float64 { return rapid.Float64Range(1e-3, 0.1).Draw(t, name) }
	section := Section(Circle{l("d")})
	if rapid.Bool().Draw(t, "rectangle") {
		section = Rectangle{l("a"), l("b")}
	}
	nu := rapid.Float64Range(-0.5, 0.5).Draw(t, "nu")
	kappa := rapid.Float64Range(0.5, 1).Draw(t, "kappa")
	h, w, b := l("length"), l("width"), l("thickness")
	bending := rapid.Bool().Draw(t, "bending")
	list := []Shape{
		Bonded{section, h, rapid.Float64Range(0, 1).Draw(t, "k"), inf},
		// Shape factors of 20 at most: far beyond, K* is the bulk's and the
		// modulus is a small difference.
		Bonded{section, math.Max(h, math.Sqrt(section.area())/40), 1, rapid.Float64Range(1e9, 2e9).Draw(t, "B")},
		Lubricated{section, h, nu},
		Strip{h, w, b, nu},
		Bar{h, w, b},
		Cylinder{h, w, 0},
		Cylinder{h, w, w * rapid.Float64Range(0, 0.99).Draw(t, "hole")},
		Plates{w, h},
	}
	for _, a := range []Arrangement{Single, Double, Quadruple} {
		list = append(list, Shear{a, section, h, bending})
	}
	for _, s := range []Support{Cantilever, DualCantilever, ThreePoint} {
		list = append(list, Beam{s, h, w, b, nu, kappa}, Beam{s, h, w, b, nu, inf})
	}
	return list
}

func modulus(t *rapid.T) complex128 {
	g := math.Pow(10, rapid.Float64Range(5, 9).Draw(t, "log G"))
	return cmplx.Rect(g, rapid.Float64Range(0, 1.5).Draw(t, "delta"))
}

// There and back, both ways.
func TestRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		g, x := modulus(t), rapid.Float64Range(1e-6, 1e-2).Draw(t, "x")
		for _, s := range samples(t) {
			if err := s.Validate(); err != nil {
				t.Fatal(err)
			}
			tolerance := 1e-12
			if b, ok := s.(Bonded); ok && b.Bulk < inf {
				// The digits that 1/K − 1/K2 loses are those of K itself.
				tolerance *= 1 + b.stiffening()*cmplx.Abs(g)/b.Bulk/100
			}
			if back := s.Modulus(s.Stiffness(g)); !(cmplx.Abs(back-g) <= tolerance*cmplx.Abs(g)) {
				t.Errorf("%+v: modulus %v became %v", s, g, back)
			}
			k := s.Stiffness(g)
			if back := s.Stiffness(s.Modulus(k)); !(cmplx.Abs(back-k) <= 1e-12*cmplx.Abs(k)) {
				t.Errorf("%+v: stiffness %v became %v", s, k, back)
			}
			if back := s.Displacement(s.Strain(x)); !(math.Abs(back-x) <= 1e-14*x) {
				t.Errorf("%+v: displacement %g became %g", s, x, back)
			}
			if g, k := s.Strain(2*x), 2*s.Strain(x); !(math.Abs(g-k) <= 1e-14*k) {
				t.Errorf("%+v: strain is not proportional", s)
			}
			s.Checks()
		}
	})
}

// The sensitivities are what moving each dimension does to the modulus at a
// fixed stiffness.
func TestSensitivity(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		g := modulus(t)
		for _, s := range samples(t) {
			if b, ok := s.(Bar); ok && math.Abs(math.Log(b.Width/b.Thickness)) < 1e-4 {
				continue
			}
			k := s.Stiffness(g)
			for _, d := range s.Sensitivity(g) {
				if d.Value == 0 {
					continue
				}
				const h = 1e-5
				up, down := s, s
				set(&up, d.Name, d.Value*math.Exp(h))
				set(&down, d.Name, d.Value*math.Exp(-h))
				want := math.Log(cmplx.Abs(up.Modulus(k))/cmplx.Abs(down.Modulus(k))) / (2 * h)
				if !(math.Abs(d.Sensitivity-want) <= 1e-5*(1+math.Abs(want)*math.Abs(want))) {
					t.Errorf("%+v: %s: got %g, want %g", s, d.Name, d.Sensitivity, want)
				}
			}
		}
	})
}

// set puts one dimension of a shape to a value.
func set(s *Shape, name string, v float64) {
	side := func(section Section) Section {
		switch c := section.(type) {
		case Circle:
			return Circle{v}
		case Rectangle:
			if name == length {
				return Rectangle{v, c.Width}
			}
			return Rectangle{c.Length, v}
		}
		return nil
	}
	switch c := (*s).(type) {
	case Shear:
		if name == thickness {
			c.Thickness = v
		} else {
			c.Section = side(c.Section)
		}
		*s = c
	case Bonded:
		switch name {
		case thickness:
			c.Thickness = v
		case coefficient:
			c.Coefficient = v
		case bulk:
			c.Bulk = v
		default:
			c.Section = side(c.Section)
		}
		*s = c
	case Lubricated:
		switch name {
		case thickness:
			c.Thickness = v
		case poisson:
			c.Poisson = v
		default:
			c.Section = side(c.Section)
		}
		*s = c
	case Strip:
		*map[string]*float64{length: &c.Length, width: &c.Width, thickness: &c.Thickness, poisson: &c.Poisson}[name] = v
		*s = c
	case Bar:
		*map[string]*float64{length: &c.Length, width: &c.Width, thickness: &c.Thickness}[name] = v
		*s = c
	case Cylinder:
		*map[string]*float64{length: &c.Length, diameter: &c.Diameter, innerDiameter: &c.InnerDiameter}[name] = v
		*s = c
	case Plates:
		*map[string]*float64{diameter: &c.Diameter, thickness: &c.Thickness}[name] = v
		*s = c
	case Beam:
		*map[string]*float64{length: &c.Length, width: &c.Width, thickness: &c.Thickness, poisson: &c.Poisson, shearFactor: &c.Shear}[name] = v
		*s = c
	}
}
