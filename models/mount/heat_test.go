package mount

import (
	"errors"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// melting is a rubber whose modulus falls with temperature, by e every span kelvin.
func melting(g complex128, span float64) Material {
	return func(_, kelvin, _ float64) complex128 { return g * complex(math.Exp(-(kelvin-300)/span), 0) }
}

func warmPad(resistance float64) *Mount {
	m := spring(0)
	m.Resistance = resistance
	return m
}

// With a constant modulus the rise is R·π·f·K″·x², closed form.
func TestHeatOfAConstant(t *testing.T) {
	m := warmPad(2)
	m.Count, m.PartFactor = 4, 1.1
	w, err := m.Heated(always(1e5+2e4i), 20, 300, 400, HeatDrive{Displacement: 1e-3, Force: nan})
	if err != nil || len(w) != 1 {
		t.Fatal(w, err)
	}
	p := math.Pi * 20 * 2e4 * 1.1 * 1e-6 // W, one mount
	near(t, "power of all", w[0].Power, 4*p, 1e-12)
	near(t, "rise", w[0].Rise, 2*p, 1e-10)
	if !w[0].Stable {
		t.Error("not stable")
	}
}

// Moved by a displacement: one solution of T − T0 = R·P(T), at the root of
// u·e^u = c, Lambert's function: with K″ ∝ e^(−ΔT/s) the rise is s·W(R·P0/s).
func TestHeatHeldDisplacement(t *testing.T) {
	const span = 30
	for _, r := range []float64{0.1, 2, 50, 1000} {
		w, err := warmPad(r).Heated(melting(1e5+2e4i, span), 20, 300, 700, HeatDrive{Displacement: 1e-3, Force: nan})
		if err != nil || len(w) != 1 {
			t.Fatal(w, err)
		}
		c := r * math.Pi * 20 * 2e4 * 1e-6 / span
		u := w[0].Rise / span
		near(t, "Lambert", u*math.Exp(u), c, 1e-9)
	}
}

// Under a force the heat grows as e^(ΔT/s): two solutions of u·e^(−u) = c, the cooler stable,
// up to c = 1/e, none beyond; and then it runs away.
func TestHeatHeldForce(t *testing.T) {
	const span, f, force = 30.0, 20.0, 100.0
	g := complex(1e5, 2e4)
	p0 := math.Pi * f * imag(g) * force * force / (real(g)*real(g) + imag(g)*imag(g))
	for _, c := range []float64{0.01, 0.2, 0.36, 0.38, 2} {
		r := c * span / p0
		w, err := warmPad(r).Heated(melting(g, span), f, 300, 900, HeatDrive{Force: force, Displacement: nan})
		var run *RunawayError
		if !errors.As(err, &run) {
			t.Fatalf("c %g: %v", c, err)
		}
		if c > 1/math.E {
			if len(w) != 0 || run.From != 300 || !strings.Contains(err.Error(), "thermal runaway") {
				t.Errorf("c %g: %d answers, %v", c, len(w), err)
			}
			continue
		}
		if len(w) != 2 || !w[0].Stable || w[1].Stable || w[0].Rise >= w[1].Rise || run.From != w[1].Temperatures[0] {
			t.Errorf("c %g: %+v", c, w)
			continue
		}
		for _, v := range w {
			near(t, "balance", v.Rise/span*math.Exp(-v.Rise/span), c, 1e-8)
		}
	}
	// As far as the domain goes it may be cool enough.
	w, err := warmPad(0.2*span/p0).Heated(melting(g, span), f, 300, 330, HeatDrive{Force: force, Displacement: nan})
	if err != nil || len(w) != 1 {
		t.Errorf("%+v %v", w, err)
	}
}

// Elements with their own resistance: each satisfies its own balance, and a series shares the
// displacement as warm as it is.
func TestHeatOfElements(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		m := &Mount{Elements: pads(3), Count: 2, PartFactor: 1.05}
		m.Arrangement = Arrangement{Kind: Series, Members: []Arrangement{{Element: 0}, {Kind: Parallel, Members: []Arrangement{{Element: 1}, {Element: 2}}}}}
		for i := range m.Elements {
			if rapid.Bool().Draw(t, "own") || i == 0 {
				m.Elements[i].Resistance = rapid.Float64Range(0.1, 30).Draw(t, "resistance")
			}
		}
		x := rapid.Float64Range(1e-5, 1e-3).Draw(t, "x")
		w, err := m.Heated(melting(1e6+2e5i, 40), 25, 290, 500, HeatDrive{Displacement: x, Force: nan})
		if err != nil {
			t.Fatal(err)
		}
		total := 0.0
		for i, l := range w[0].Leaves {
			rise := m.Elements[l.Element].Resistance * w[0].Powers[i]
			if math.Abs(w[0].Temperatures[i]-290-rise) > 1e-8 {
				t.Fatalf("leaf %d: %g K for %g K", i, w[0].Temperatures[i]-290, rise)
			}
			total += w[0].Powers[i]
		}
		// The leaves' heat is the mount's: πf·K″·x².
		whole := math.Pi * 25 * imag(w[0].Stiffness) * x * x
		if math.Abs(2*total-whole) > 1e-9*whole || math.Abs(w[0].Power-whole) > 1e-9*whole {
			t.Fatalf("%g W of the leaves, %g W of the mount", 2*total, whole)
		}
	})
}

func TestHeatRefuses(t *testing.T) {
	d := HeatDrive{Displacement: 1e-3, Force: nan}
	if _, err := spring(0).Heated(always(1), 1, 300, 400, d); !errors.Is(err, ErrNoResistance) {
		t.Errorf("%v", err)
	}
	if _, err := warmPad(1).Heated(always(1), 1, 300, 300, d); err == nil {
		t.Error("no room to warm")
	}
	if w, err := warmPad(1).Heated(always(1), 1, 300, 310, d); err != nil || len(w) != 1 || w[0].Rise != 0 {
		t.Errorf("without loss: %+v %v", w, err)
	}
	m := spring(0)
	m.Elements[0].Resistance = 1e9
	_, err := m.Heated(melting(1e5+2e4i, 30), 20, 300, 400, HeatDrive{Displacement: nan, Force: 100})
	var run *RunawayError
	if !errors.As(err, &run) || run.Element != "pad" {
		t.Errorf("%v", err)
	}
	if _, err := warmPad(1).Heated(always(complex(nan, nan)), 1, 300, 310, d); err == nil {
		t.Error("no modulus, yet a temperature")
	}
}

func TestReadResistance(t *testing.T) {
	const pad = "elements: {a: {shape: shear pad, area: 12 mm2, thickness: 1 mm"
	m, err := read(t, pad+"}}\nthermal_resistance: 2 K/W\n")
	if err != nil || m.Resistance != 2 || m.Elements[0].Resistance != 0 {
		t.Errorf("%+v %v", m, err)
	}
	m, err = read(t, pad+", thermal_resistance: 3 K/W}}\n")
	if err != nil || m.Resistance != 0 || m.Elements[0].Resistance != 3 {
		t.Errorf("%+v %v", m, err)
	}
	m, err = read(t, "elements: {b: {measured: {stiffness: 1 N/mm, frequency: 1 Hz, temperature: 0 °C, amplitude: 0 mm}, strain_per_displacement: 1 %/mm, thermal_resistance: 4 K/W}}\n")
	if err != nil || m.Elements[0].Resistance != 4 {
		t.Errorf("%+v %v", m, err)
	}
	for text, want := range map[string]string{
		pad + ", thermal_resistance: 3 K/W}}\nthermal_resistance: 2 K/W\n": "m.yaml:2:1: thermal_resistance: beside that of a",
		pad + "}}\nthermal_resistance: 2 W/K\n":                            "m.yaml:2:21: thermal_resistance: ",
		pad + "}}\nthermal_resistance: 0 K/W\n":                            "must be positive",
	} {
		if _, err := read(t, text); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v", text, err)
		}
	}
}
