package mount

import (
	"errors"
	"math"
	"strings"
	"testing"

	"phaselag/data/place"
)

// The strains of both plane problems store ½Kx² with the bounds of the radial
// stiffness, so that fields, stiffness and mean belong together.
func TestRadialFieldStoresTheEnergy(t *testing.T) {
	for _, rho := range []float64{1.05, 1.5, 2, 4} {
		b := Bush{Inner: 1, Outer: rho, Length: 1}
		short, long := b.Radial(1)
		for _, c := range []struct{ kappa, want float64 }{{5.0 / 3, real(short)}, {1, real(long)}} {
			p := b.plane(c.kappa)
			sum := 0.0
			for i, x := range gaussX {
				r := 1 + (rho-1)*x
				n, s := p.strain(r)
				sum += gaussW[i] * (rho - 1) * r * math.Pi * (n*n + s*s) // ∫cos² = ∫sin² = π
			}
			near(t, "energy", sum, c.want, 1e-9)
		}
		// The log mean lies near the root mean square, and above it: the energy
		// gathers where the strain is high.
		for _, w := range []float64{0, 0.5, 1} {
			k := (1-w)*real(short) + w*real(long)
			rms := math.Sqrt(k / (math.Pi * (rho*rho - 1)))
			if g := b.acrossStrain(w); !(g > rms*0.8 && g < rms*3) {
				t.Errorf("b/a %g, part %g: γ_eq %g, rms %g", rho, w, g, rms)
			}
		}
	}
}

// Limits of the length: short and long bush, and in between the thin wall's pressure, whose
// long stiffness is 12πGR³L/w³ (closed form).
func TestRadialLength(t *testing.T) {
	at := func(l float64) Bush { return Bush{Inner: 0.010, Outer: 0.020, Length: l} }
	for _, c := range []struct {
		length float64
		long   bool
	}{{1e-6, false}, {1e3, true}} {
		b := at(c.length)
		short, long := b.Radial(1)
		tilt, tiltLong := b.Conical(1)
		if c.long {
			short, tilt = long, tiltLong
		}
		nearComplex(t, "radial", b.RadialBetween(1), short, 1e-4)
		nearComplex(t, "conical", b.ConicalBetween(1), tilt, 1e-4)
	}
	thin := Bush{Inner: 0.999, Outer: 1.001, Length: 0.7}
	_, long := thin.Radial(1)
	near(t, "thin wall", real(long), 12*math.Pi*0.7/math.Pow(0.002, 3), 1e-5)
	// The pressure's share against the energy of the strip's own Poisson problem by
	// finite differences: p'' − p = −1, p(±ξ) = 0 has the mean 1 − tanh ξ/ξ, and
	// p'' − p = −z the moment 1 − 3(ξ coth ξ − 1)/ξ².
	for _, xi := range []float64{0.02, 0.5, 4.0 / 3, 5} {
		b := Bush{Inner: 0.25, Outer: 0.75, Length: xi}
		const n = 4000
		h := xi / n
		solve := func(source func(z float64) float64, symmetric bool) (mean float64) {
			// Thomas' algorithm on 0..ξ with p'(0) = 0 or p(0) = 0 and p(ξ) = 0.
			c, d := make([]float64, n), make([]float64, n)
			for i := range n {
				lower, diagonal, upper := -1.0, 2+h*h, -1.0
				right := h * h * source(float64(i)*h)
				if i == 0 {
					if lower = 0; symmetric {
						upper = -2
					} else {
						upper, diagonal, right = 0, 1, 0
					}
					c[0], d[0] = upper/diagonal, right/diagonal
					continue
				}
				m := diagonal - lower*c[i-1]
				c[i], d[i] = upper/m, (right-lower*d[i-1])/m
			}
			p, own := 0.0, 0.0
			for i := n - 1; i >= 0; i-- {
				p = d[i] - c[i]*p
				w := 1.0
				if i == 0 {
					w = 0.5
				}
				mean += w * p * source(float64(i)*h)
				own += w * source(float64(i)*h) * source(float64(i)*h)
			}
			own += 0.5 * source(xi) * source(xi)
			return mean / own
		}
		near(t, "radial pressure", b.pressure(), solve(func(float64) float64 { return 1 }, true), 2e-4)
		near(t, "conical pressure", b.tiltPressure(), solve(func(z float64) float64 { return z }, false), 2e-3)
	}
	for _, l := range []float64{0.9e-3, 1.1e-3, 0.029, 0.031} {
		b := Bush{Inner: 0.25, Outer: 0.75, Length: l}
		near(t, "series", b.pressure(), l*l/3-2*l*l*l*l/15, 1e-6)
		near(t, "series", b.tiltPressure(), l*l/15-2*l*l*l*l/315, 1e-6)
	}
}

// The closed forms of the mean strains are those of the quadrature.
func TestBushStrains(t *testing.T) {
	const a, b = 0.010, 0.023
	across := func(v float64) float64 { return a + (b-a)*v }
	axial := equivalent(func(_, v float64) (float64, float64) { return 1 / (across(v) * math.Log(b/a)), across(v) })
	near(t, "axial", Bush{Inner: a, Outer: b, Length: 1}.strainPer(), axial, 1e-12)
	torsional := equivalent(func(_, v float64) (float64, float64) {
		r := across(v)
		return 2 / (r * r * (1/(a*a) - 1/(b*b))), r
	})
	near(t, "torsional", Bush{Inner: a, Outer: b, Length: 1, Way: Torsional}.strainPer(), torsional, 1e-12)
	// A thin wall is sheared evenly.
	thin := Bush{Inner: 0.999, Outer: 1.001, Length: 1, Way: Torsional}
	near(t, "thin", thin.strainPer(), 1/0.002, 1e-5)
	// Conical: radial strips at the arm z.
	c := Bush{Inner: a, Outer: b, Length: 0.05, Way: Conical}
	tilt := equivalent(func(u, _ float64) (float64, float64) { return u * 0.025, 1 })
	near(t, "conical", c.strainPer(), c.acrossStrain(c.tiltPressure())*tilt, 1e-5)
}

// A pad that bends stores ½Kx²; its mean strain against a sum over midpoints.
func TestBentStrain(t *testing.T) {
	block := Pad{Area: 6e-4, Thickness: 0.012, Length: 0.02, Width: 0.03, Diameter: nan, Bending: true}
	round := *disc(50, 25)
	round.Bending = true
	const n = 400
	for _, p := range []Pad{block, round} {
		mean, energy, volume := 0.0, 0.0, 0.0
		for i := range n {
			for j := range n {
				z, y := (float64(i)+0.5)/n*p.Thickness/2, (float64(j)+0.5)/n
				w := 1.0
				if math.IsNaN(p.Diameter) {
					y *= p.Length / 2
				} else {
					w = math.Sqrt(1 - y*y)
					y *= p.Diameter / 2
				}
				bent := z * y / p.gyration()
				g2 := 1 + bent*bent/3
				volume += w
				energy += w * g2
				mean += w * g2 * math.Log(g2) / 2
			}
		}
		beta := p.bending()
		near(t, "energy", beta*beta*energy/volume, beta, 1e-4)
		near(t, "strain", p.bentStrain(), beta*math.Exp(mean/energy), 1e-4)
	}
}

// Torsion and tilting are asked for with angles; N·m/rad.
func TestRotation(t *testing.T) {
	m, err := read(t, "direction: torsional\nelements: {b: {shape: bush, inner_diameter: 20 mm, outer_diameter: 40 mm, length: 40 mm}}\ncount: 2\nexcitation: {angle: 2 deg}\n")
	if err != nil {
		t.Fatal(err)
	}
	if !m.Rotates() {
		t.Fatal("a torsional mount that does not rotate")
	}
	g := complex(0.64e6, 0.064e6)
	s, err := m.Twisted(always(g), 10, 300, m.Excitation.Displacement)
	if err != nil {
		t.Fatal(err)
	}
	// 42893.21 N·mm/rad, computed independently in double precision.
	near(t, "torsion", real(s.Stiffness), 2*42.89321, 1e-7)
	near(t, "angle", s.Displacement, math.Pi/90, 1e-12)
	f, err := m.Torqued(soft, 10, 300, 3)
	if err != nil {
		t.Fatal(err)
	}
	b, err := m.Twisted(soft, 10, 300, f.Displacement)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "torque", b.Force, 3, 1e-10)
	if _, err := m.Displaced(always(g), 10, 300, 1e-3); !errors.Is(err, ErrRotates) {
		t.Errorf("%v", err)
	}
	if _, err := m.Forced(always(g), 10, 300, 1e-3); !errors.Is(err, ErrRotates) {
		t.Errorf("%v", err)
	}
	m.Mass = 1
	if _, err := m.Natural(always(g), 1, 10, 300, 1e-3); !errors.Is(err, ErrRotates) {
		t.Errorf("%v", err)
	}
	if _, err := m.Respond(always(g), 1, 10, Drive{Force: 1}); !errors.Is(err, ErrRotates) {
		t.Errorf("%v", err)
	}
	if _, err := m.Loaded(StaticModulus{Shear: 1}); !errors.Is(err, ErrRotates) {
		t.Errorf("%v", err)
	}
	if _, err := spring(1).Twisted(always(g), 10, 300, 1e-3); err == nil {
		t.Error("a pad was turned")
	}
	if _, err := spring(1).Torqued(always(g), 10, 300, 1e-3); err == nil {
		t.Error("a pad was turned")
	}
}

func TestReadBush(t *testing.T) {
	const b = "elements: {b: {shape: bush, inner_diameter: 20 mm, outer_diameter: 40 mm, length: 40 mm"
	for _, c := range []struct {
		text string
		way  Way
		note string
	}{
		{b + "}}\ndirection: axial\n", Axial, "long bush"},
		{b + ", direction: radial}}\ndirection: vertical\n", Radial, "convention"},
		{b + ", direction: conical}}\n", Conical, "convention"},
		{b + "}}\ndirection: conical\nexcitation: {torque: 5 N·m}\n", Conical, "strips"},
	} {
		m, err := read(t, c.text)
		if err != nil {
			t.Errorf("%s: %v", c.text, err)
			continue
		}
		if got := m.Elements[0].Bush.Way; got != c.way || !strings.Contains(strings.Join(m.Assumptions, "\n"), c.note) {
			t.Errorf("%s: %v, %s", c.text, got, strings.Join(m.Assumptions, "\n"))
		}
	}
	for _, c := range []struct{ text, want, hint string }{
		{b + "}}\ndirection: vertical\n", "elements.b.direction: missing", "radial"},
		{b + ", direction: sideways}}\n", `m.yaml:1:101: elements.b.direction: unknown direction "sideways"`, "radial"},
		{b + ", direction: radial, factor: 1}}\n", "elements.b.factor: belongs to a pad", "leave"},
		{"elements: {b: {shape: shear pad, diameter: 20 mm, thickness: 4 mm, direction: axial}}\n", "elements.b.direction: belongs to a bush", "leave"},
		{b + ", direction: torsional}, p: {shape: shear pad, diameter: 20 mm, thickness: 4 mm}}\narrangement: {parallel: [b, p]}\n", "elements.p: is moved along a line beside an element that is turned", "own file"},
		{b + ", direction: torsional}}\nload: {mass: 4 kg}\n", "m.yaml:2:1: load: a mount that is turned", "leave"},
		{b + ", direction: torsional}}\nexcitation: {displacement: 4 mm}\n", "m.yaml:2:14: excitation.displacement: the mount is turned", "angle"},
		{b + ", direction: radial}}\nexcitation: {torque: 4 N·m}\n", "excitation.torque: the mount is moved along a line", "force"},
		{b + ", direction: radial}}\nexcitation: {torque: 4 N·m, force: 2 N}\n", "more than one excitation", "held"},
	} {
		_, err := read(t, c.text)
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %q", c.text, err, c.want)
			continue
		}
		if hint := place.Hint(place.All(err)[0]); !strings.Contains(hint, c.hint) {
			t.Errorf("%s: hint %q, want %q", c.text, hint, c.hint)
		}
	}
}

// The demonstration's tilted bush can be read.
func TestDemonstrationBush(t *testing.T) {
	m, err := Open("../../data/demo/link-bush.yaml")
	if err != nil || !m.Rotates() || m.Elements[0].Bush.Way != Conical {
		t.Fatalf("%v %+v", err, m)
	}
}
