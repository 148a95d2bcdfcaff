package mount

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"
)

// The slope of the load curve is its own difference quotient, and E_c unloaded.
func TestTangent(t *testing.T) {
	p := disc(50, 10)
	p.Compression = 0.73
	near(t, "unloaded", p.stiffening(1), 3*(1+2*0.73*1.25*1.25), 1e-14)
	for _, l := range []float64{1, 0.95, 0.9, 0.8, 0.7} {
		_, slope := p.stress(1 - l)
		up, _ := p.stress(1 - l + 1e-6)
		down, _ := p.stress(1 - l - 1e-6)
		near(t, "slope", slope, (up-down)/2e-6, 1e-8)
	}
	// S = 0: the Gaussian block between lubricated plates, E_t/E = (2/λ³+1)/3; at
	// 10 % 1.247828, computed by hand.
	p.Compression = 0
	near(t, "lubricated", p.stiffening(0.9)/p.stiffening(1), (2/0.729+1)/3, 1e-14)
}

// A thin layer of Gaussian rubber, sheared in parabolas between the plates, is
// pressed with σ ∝ 1/λ³ − 1/λ², closed form: the mean outward movement at X is
// X(1/λ − 1) times a constant of the section, the energy goes with its square,
// and −d/dλ of (1/λ−1)²/2 is the stress (derived independently of the load curve).
func TestTangentOfAThinLayer(t *testing.T) {
	p := disc(1000, 1)
	p.Compression = 1
	for _, l := range []float64{0.98, 0.95, 0.9} {
		want := 3/math.Pow(l, 4) - 2/math.Pow(l, 3)
		near(t, "thin layer", p.stiffening(l)/p.stiffening(1), want, 1.1*(1-l)*(1-l)+1e-4)
	}
	near(t, "thin layer at 10 %", p.stiffening(0.9)/p.stiffening(1), 1.829, 0.01)
}

// Static deflections of one pad satisfy the load curve and the bulk: σ(λ)A = F and
// x = (1−λ)t + Ft/(AB).
func TestLoadedPad(t *testing.T) {
	p := disc(50, 10)
	p.Compression, p.Bulk, p.Pressed = 0.73, 1030e6, true
	for _, force := range []float64{1e-3, 10, 1000, 2000} {
		m := &Mount{Elements: []Element{{Name: "pad", Pad: p}}, Count: 4, PartFactor: 1.1, StaticForce: 4 * 1.1 * force}
		r, err := m.Loaded(StaticModulus{Shear: 0.64e6, Young: 2.20e6})
		if err != nil {
			t.Fatal(err)
		}
		l := r.Mount.Arrangement.Stretch
		s := 2.20e6 / 3 * (1 + 2*0.73*1.25*1.25/(l*l)) * (1/(l*l) - l)
		near(t, "force", s*p.Area, force, 1e-9)
		near(t, "deflection", r.Deflection, (1-l)*p.Thickness+force*p.Thickness/(p.Area*p.Bulk), 1e-9)
		near(t, "compression", r.Leaves[0].Compression, r.Deflection/p.Thickness, 1e-12)
		near(t, "force of the leaf", r.Leaves[0].Force, 1.1*force, 1e-9)
		// The dynamic stiffness has the factor, in series with the bulk; unloaded it is
		// beside it.
		g := complex(1e6, 1e5)
		d, err := r.Mount.Displaced(constant(g), 10, 300, 1e-5)
		if err != nil {
			t.Fatal(err)
		}
		c := complex(r.Leaves[0].Factor*p.stiffening(1), 0) * g
		nearComplex(t, "dynamic", d.Stiffness, complex(4.4*p.Area/p.Thickness, 0)/(1/c+1/complex(p.Bulk, 0)), 1e-12)
		free, _ := m.Displaced(constant(g), 10, 300, 1e-5)
		nearComplex(t, "uncorrected", d.Uncorrected, free.Stiffness, 1e-13)
		nearComplex(t, "nothing to correct", free.Uncorrected, free.Stiffness, 0)
		up, down := *m, *m
		up.StaticForce *= 1.0001
		down.StaticForce /= 1.0001
		ru, _ := up.Loaded(StaticModulus{0.64e6, 2.20e6})
		rd, _ := down.Loaded(StaticModulus{0.64e6, 2.20e6})
		near(t, "tangent", r.Tangent, (up.StaticForce-down.StaticForce)/(ru.Deflection-rd.Deflection), 1e-6)
	}
	// Handbook stiffness 1407.534 N/mm (50 IRHD) for a load that is next to nothing;
	// computed independently in double precision.
	m := &Mount{Elements: []Element{{Pad: p}}, Count: 1, PartFactor: 1, StaticForce: 1e-6}
	r, err := m.Loaded(StaticModulus{0.64e6, 2.20e6})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "handbook", r.Tangent, 1407.534e3, 1e-6)
}

// Beyond 20 % there is no answer.
func TestTooFar(t *testing.T) {
	p := disc(50, 10)
	p.Compression, p.Pressed = 0.73, true
	g := StaticModulus{Shear: 2.20e6 / 3}
	s, _ := p.stress(0.2)
	limit := s * g.Shear * p.Area
	m := &Mount{Elements: []Element{{Name: "foot", Pad: p}}, Count: 1, PartFactor: 1, StaticForce: limit * 0.9999}
	if _, err := m.Loaded(g); err != nil {
		t.Error(err)
	}
	var e *CompressionError
	m.StaticForce = limit * 1.0001
	if _, err := m.Loaded(g); !errors.As(err, &e) || e.Element != "foot" || !(math.Abs(e.Compression-0.2) < 1e-4) {
		t.Errorf("%v", err)
	}
	m.StaticForce *= 1e9
	if _, err := m.Loaded(g); !errors.As(err, &e) {
		t.Errorf("%v", err)
	}
}

func TestLoadedRefuses(t *testing.T) {
	p := disc(50, 10)
	p.Compression, p.Pressed = 0.73, true
	part := &Measured{Stiffness: 1e5, LossFactor: 0.1, Frequency: 10, Temperature: 300, StrainPerDisplacement: 10}
	both := []Arrangement{{Element: 0}, {Element: 1}}
	m := &Mount{Elements: []Element{{Name: "pad", Pad: p}, {Name: "part", Measured: part}}, Count: 1, PartFactor: 1, Arrangement: Arrangement{Kind: Parallel, Members: both}}
	if _, err := m.Loaded(StaticModulus{Shear: 1e6}); !errors.Is(err, ErrNoLoad) {
		t.Errorf("%v", err)
	}
	m.StaticForce = 500
	if _, err := m.Loaded(StaticModulus{Shear: 1e6}); err == nil {
		t.Error("a load shared with a measured element")
	}
	if _, err := m.Loaded(StaticModulus{}); err == nil {
		t.Error("no modulus")
	}
	m.Arrangement.Kind = Series
	r, err := m.Loaded(StaticModulus{Shear: 1e6})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "force on the pad", r.Leaves[0].Force, 500, 1e-12)
	near(t, "force on the part", r.Leaves[1].Force, 500, 1e-12)
	if !math.IsNaN(r.Deflection) || !(r.Leaves[0].Factor > 1) {
		t.Errorf("%+v", r)
	}
	m.Direction = "horizontal"
	if _, err := m.Loaded(StaticModulus{Shear: 1e6}); !errors.Is(err, ErrAcross) {
		t.Errorf("%v", err)
	}
	m.Arrangement = Arrangement{Kind: InclinedPair, Angle: 0.5, Across: true}
	if r, err = m.Loaded(StaticModulus{Shear: 1e6}); err != nil || !(r.Leaves[0].Factor > 1) {
		t.Errorf("%v %+v", err, r)
	}
}

// Trees of pads: every parallel shares its deflection, every series its load, and every
// leaf lies on its load curve.
func TestRestOfTrees(t *testing.T) {
	static := StaticModulus{Shear: 0.8e6, Young: 2.6e6}
	rapid.Check(t, func(t *rapid.T) {
		m := &Mount{Count: 2, PartFactor: 1.05, StaticForce: rapid.Float64Range(1, 2000).Draw(t, "force")}
		var grow func(depth int) Arrangement
		grow = func(depth int) Arrangement {
			kind := rapid.IntRange(0, 5).Draw(t, "kind")
			if depth == 0 && kind > 2 {
				kind = 0
			}
			a := Arrangement{Kind: InclinedPair, Element: len(m.Elements), Angle: rapid.Float64Range(0, math.Pi/2).Draw(t, "angle")}
			if kind > 2 {
				a = Arrangement{Kind: []Kind{Parallel, Series}[kind%2]}
				for range rapid.IntRange(1, 3).Draw(t, "members") {
					a.Members = append(a.Members, grow(depth-1))
				}
				return a
			}
			p := disc(rapid.Float64Range(20, 80).Draw(t, "d"), rapid.Float64Range(5, 30).Draw(t, "t"))
			p.Compression, p.Pressed = rapid.Float64Range(0.5, 1).Draw(t, "factor"), kind == 0
			if rapid.Bool().Draw(t, "bulk") {
				p.Bulk = 1.2e9
			}
			if kind < 2 {
				a = Arrangement{Element: a.Element}
			}
			m.Elements = append(m.Elements, Element{Name: "pad", Pad: p})
			return a
		}
		m.Arrangement = grow(3)
		r, err := m.Loaded(static)
		var far *CompressionError
		if errors.As(err, &far) {
			return
		}
		if err != nil {
			t.Fatal(err)
		}
		nodes := r.Mount.Arrangement.leaves()
		for i, l := range r.Leaves {
			f, _, s := m.carry(nodes[i], static, l.Deflection)
			if math.Abs(f*m.PartFactor-l.Force) > 1e-9*math.Abs(l.Force) || nodes[i].Stretch != 0 && math.Abs(s-nodes[i].Stretch) > 1e-12 {
				t.Fatalf("leaf %d: %g N on the curve, %g carried", i, f*m.PartFactor, l.Force)
			}
		}
		near := func(what string, a, b float64) {
			if math.Abs(a-b) > 1e-9*math.Abs(b) {
				t.Fatalf("%s: %.12g and %.12g", what, a, b)
			}
		}
		next := 0
		var walk func(a *Arrangement) (x, f float64)
		walk = func(a *Arrangement) (x, f float64) {
			if len(a.Members) == 0 {
				l := r.Leaves[next]
				next++
				return l.Deflection, l.Force
			}
			for i := range a.Members {
				xi, fi := walk(&a.Members[i])
				switch {
				case i == 0:
					x, f = xi, fi
				case a.Kind == Parallel:
					near("deflection", xi, x)
					f += fi
				default:
					near("force", fi, f)
					x += xi
				}
			}
			return x, f
		}
		x, f := walk(&m.Arrangement)
		near("deflection of the mount", x, r.Deflection)
		near("force on the mount", f, m.StaticForce/2)
	})
}
