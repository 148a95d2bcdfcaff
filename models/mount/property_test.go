package mount

import (
	"errors"
	"fmt"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"strings"
	"testing"
)

// sketch draws a mount file. Most are sound; some have a dimension that is absurd, a key that
// belongs elsewhere or a text that is cut off.
type sketch struct {
	*rand.Rand
	names []string
}

func (d *sketch) pick(list ...string) string { return list[d.IntN(len(list))] }

// length in mm, over a few decades now and then.
func (d *sketch) length(lo, hi float64) string {
	switch d.IntN(60) {
	case 0:
		return "0 mm"
	case 1:
		return fmt.Sprintf("%g mm", math.Pow(10, 40*d.Float64()-20))
	}
	return fmt.Sprintf("%.4g mm", lo*math.Pow(hi/lo, d.Float64()))
}

func (d *sketch) element() string {
	compression := d.pick("factor: 0.6", "factor_from_hardness: 55 IRHD", "compression_coefficient: 1", "factor_from_hardness: 60 IRHD, hardness_table: Lindley") +
		d.pick("", ", bulk_modulus: 1.1 GPa", ", bulk_from_hardness: 62 IRHD")
	sides := "diameter: " + d.length(20, 100)
	if d.IntN(2) == 0 {
		sides = "length: " + d.length(20, 100) + ", width: " + d.length(20, 100)
	}
	thick := ", thickness: " + d.length(4, 40)
	more := d.pick("", "", "", ", thermal_resistance: 3 K/W", ", nonsense: 3")
	bush := ", inner_diameter: " + d.length(10, 30) + ", outer_diameter: " + d.length(32, 60) + ", length: " + d.length(10, 100)
	switch d.IntN(9) {
	case 0:
		return "{shape: shear pad, area: 1200 mm2" + thick + more + "}"
	case 1:
		return "{shape: shear pad, " + sides + thick + ", bending: true" + more + "}"
	case 2:
		return "{shape: shear pad, " + sides + thick + ", " + compression + "}"
	case 3:
		return "{shape: compression pad, " + sides + thick + ", " + compression + more + "}"
	case 4:
		return "{shape: compression ring, outer_diameter: " + d.length(50, 90) + ", inner_diameter: " + d.length(10, 40) + thick + ", " + compression + "}"
	case 5:
		return "{shape: bush" + bush + ", direction: " + d.pick("axial", "radial", "torsional", "conical") + more + "}"
	case 6:
		return "{measured: {stiffness: 420 N/mm, part: " + d.pick("magnitude", "storage") + d.pick("", ", loss_factor: 0.12") + ", frequency: 15 Hz, temperature: 23 °C, amplitude: 0.5 mm}, strain_per_displacement: 4 %/mm" + more + "}"
	}
	if d.IntN(3) == 0 {
		return "{shape: torsion disc, diameter: " + d.length(20, 100) + thick + "}"
	}
	return "{shape: axial bush" + bush + "}"
}

func (d *sketch) tree(depth int) string {
	name := d.pick(d.names...)
	switch k := d.IntN(6); {
	case depth == 0 || k < 2:
		return name
	case k == 2:
		return "{inclined_pair: " + name + ", angle: " + fmt.Sprintf("%.3g", 95*d.Float64()) + " deg}"
	case k < 5:
		members := []string{}
		for range 1 + d.IntN(3) {
			members = append(members, d.tree(depth-1))
		}
		return "{" + d.pick("parallel", "series") + ": [" + strings.Join(members, ", ") + "]}"
	}
	return d.pick("{series: []}", "{angle: 3 deg}", "[a]", name, name, name)
}

func (d *sketch) file() string {
	d.names = []string{"a", "b", "c", "d"}[:1+d.IntN(4)]
	var b strings.Builder
	b.WriteString("elements:\n")
	for _, n := range d.names {
		fmt.Fprintf(&b, "  %s: %s\n", n, d.element())
	}
	fmt.Fprintf(&b, "arrangement: %s\n", d.tree(3))
	b.WriteString(d.pick("", "count: 4\n", "count: 3\n"))
	b.WriteString(d.pick("direction: vertical\n", "direction: vertical\n", "direction: horizontal\n", ""))
	mass := fmt.Sprintf("mass: %.4g kg", math.Pow(10, 1+1.7*d.Float64()))
	b.WriteString(d.pick("", "load: {"+mass+"}\n", "load: {"+mass+", static_modulus: 0.9 MPa}\n", "load: {"+mass+", static_modulus_from_hardness: 60 IRHD, hardness_table: Gent}\n", "load: {"+mass+", static_force: 200 N, static_modulus: 1 MPa}\n"))
	b.WriteString(d.pick("", "", "part_factor: 1.1\n", "thermal_resistance: 2 K/W\n"))
	text := b.String()
	if d.IntN(20) == 0 {
		text = text[:d.IntN(len(text))]
	}
	return text
}

// lively depends on everything, softly.
func lively(hertz, kelvin, strain float64) complex128 {
	f := math.Pow(hertz/10, 0.08) * math.Exp(-(kelvin-296)/200)
	r := math.Pow(strain/0.02, 1.2)
	return complex(f*(0.8e6+0.7e6/(1+r)), f*(1e5+1.5e5*math.Sqrt(r)/(1+r)))
}

// Of 10 000 drawn files none hangs or panics, and what is solved satisfies its equation to
// 1e-9: shares of displacement, amplitude under a force, natural frequency, response, rest and
// tangent under the static load, temperature.
func TestDrawnFiles(t *testing.T) {
	d := &sketch{Rand: rand.New(rand.NewPCG(20261201, 1))}
	sound, loaded, natural, answered, warmed := 0, 0, 0, 0, 0
	for n := range 10000 {
		text := d.file()
		fail := func(format string, args ...any) {
			t.Helper()
			t.Fatalf("file %d: %s\n%s", n, fmt.Sprintf(format, args...), text)
		}
		m, err := Read("m.yaml", strings.NewReader(text))
		if (m == nil) == (err == nil) {
			fail("mount %v, error %v", m, err)
		}
		if err != nil {
			continue
		}
		sound++
		displaced, forced := m.Displaced, m.Forced
		if m.Rotates() {
			displaced, forced = m.Twisted, m.Torqued
		}
		s, err := displaced(lively, 12, 296, 2e-4)
		if err != nil {
			fail("displaced: %v", err)
		}
		stiffness := []complex128{}
		var shares complex128
		for _, l := range s.Leaves {
			stiffness = append(stiffness, l.Stiffness)
			shares += l.Share
		}
		if cmplx.Abs(shares-1) > 1e-9 {
			fail("shares add up to %v", shares)
		}
		k, ratio := m.Arrangement.join(stiffness)
		whole := complex(float64(m.Count)*m.PartFactor, 0)
		if cmplx.Abs(whole*k-s.Stiffness) > 1e-9*cmplx.Abs(s.Stiffness) {
			fail("stiffness %v of leaves, %v", whole*k, s.Stiffness)
		}
		for i, l := range s.Leaves {
			if x := 2e-4 * cmplx.Abs(ratio[i]); math.Abs(l.Displacement-x) > 1e-9*x {
				fail("leaf %d moves by %g, not %g", i, l.Displacement, x)
			}
		}
		if f, err := forced(lively, 12, 296, s.Force); err != nil {
			if !errors.Is(err, ErrNoBalance) {
				fail("forced: %v", err)
			}
		} else if b, err := displaced(lively, 12, 296, f.Displacement); err != nil || math.Abs(b.Force-s.Force) > 1e-9*s.Force {
			fail("force %g gives %g, %v", s.Force, b.Force, err)
		}
		static := StaticModulus{Shear: 0.9e6}
		r, err := m.Loaded(static)
		if err == nil {
			loaded++
			nodes := r.Mount.Arrangement.leaves()
			for i, l := range r.Leaves {
				if f, _, _ := m.carry(nodes[i], static, l.Deflection); m.Elements[l.Element].Measured == nil && math.Abs(f*m.PartFactor-l.Force) > 1e-9*math.Abs(l.Force) {
					fail("leaf %d: %g N on its load curve, %g carried", i, f*m.PartFactor, l.Force)
				}
				if l.Compression > mostCompression {
					fail("leaf %d is compressed by %g", i, l.Compression)
				}
			}
			if !math.IsNaN(r.Deflection) {
				// The tangent is the slope of the deflection over the load.
				more := *m
				const h = 1e-4
				more.StaticForce = r.Force * (1 + h)
				up, err1 := more.Loaded(static)
				more.StaticForce = r.Force * (1 - h)
				down, err2 := more.Loaded(static)
				if err1 == nil && err2 == nil {
					if slope := 2 * h * r.Force / (up.Deflection - down.Deflection); math.Abs(slope-r.Tangent) > 1e-5*r.Tangent {
						fail("tangent %g, slope %g", r.Tangent, slope)
					}
				}
			}
		}
		if m.Mass > 0 && n%5 == 0 {
			fs, err := m.Natural(lively, 1, 200, 296, 2e-4)
			if err != nil {
				fail("natural frequency: %v", err)
			}
			for _, f := range fs {
				natural++
				s, err := m.Displaced(lively, f, 296, 2e-4)
				if want := math.Sqrt(real(s.Stiffness)/m.Mass) / (2 * math.Pi); err != nil || math.Abs(f-want) > 1e-9*f {
					fail("natural frequency %g, not %g, %v", f, want, err)
				}
			}
		}
		if m.Mass > 0 && n%40 == 0 {
			answers, err := m.Respond(lively, 14, 296, Drive{Force: 30, Base: nan, Deflection: nan})
			if err != nil && !errors.Is(err, ErrNoResponse) && !errors.Is(err, ErrNoBalance) {
				fail("response: %v", err)
			}
			a := complex(math.Pow(2*math.Pi*14, 2)*m.Mass, 0)
			for _, r := range answers {
				answered++
				if f := r.Displacement * cmplx.Abs(r.Stiffness-a); math.Abs(f-30) > 1e-9*30 {
					fail("force %g", f)
				}
			}
		}
		if n%10 == 0 {
			ws, err := m.Heated(lively, 20, 296, 400, HeatDrive{Displacement: 2e-4, Force: nan})
			var run *RunawayError
			if err != nil && !errors.Is(err, ErrNoResistance) && !errors.As(err, &run) {
				fail("heat: %v", err)
			}
			for _, w := range ws {
				warmed++
				for i, l := range w.Leaves {
					rise := m.Elements[l.Element].Resistance * w.Powers[i]
					if m.Resistance > 0 {
						rise = m.Resistance * w.Power / float64(m.Count)
					}
					if math.Abs(w.Temperatures[i]-296-rise) > 1e-8+1e-9*rise {
						fail("leaf %d is %g K warmer, by its heat %g K", i, w.Temperatures[i]-296, rise)
					}
				}
			}
		}
	}
	t.Logf("%d sound files, %d with a load, %d natural frequencies, %d responses, %d warmed", sound, loaded, natural, answered, warmed)
	if sound < 1500 || loaded < 150 || natural < 30 || answered < 10 || warmed < 20 {
		t.Error("too few sound files to prove anything")
	}
}
