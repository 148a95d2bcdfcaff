package figure

import (
	"math"
	"strings"
	"testing"

	"gonum.org/v1/plot/vg"
)

func TestTicks(t *testing.T) {
	for _, c := range []struct {
		name   string
		axis   Axis
		values []float64
		length float64
		lo, hi float64
		labels string
	}{
		{"whole decades", Auto("", true), []float64{0.02, 3000}, 60, -2, 4, "10^{−2} 10^{−1} 10^{0} 10^{1} 10^{2} 10^{3} 10^{4}"},
		{"twelve decades, short", Auto("", true), []float64{1e-4, 1e8}, 40, -4, 8, "10^{−3} 10^{0} 10^{3} 10^{6}"},
		{"two decades", Auto("", true), []float64{0.5, 50}, 90, math.Log10(0.5), math.Log10(50), "0.5 1 2 5 10 20 50"},
		{"narrow", Auto("", true), []float64{1.1, 1.9}, 60, 0, math.Log10(2), "1.0 1.2 1.4 1.6 1.8 2.0"},
		{"small numbers", Auto("", true), []float64{1.5e-7, 8e-7}, 60, -7, -6, "10^{−7} 2·10^{−7} 5·10^{−7} 10^{−6}"},
		{"temperatures", Auto("", false), []float64{-40, 80}, 80, -50, 90, "−50 0 50"},
		{"fixed", Axis{Min: -40, Max: 80}, nil, 100, -40, 80, "−40 −20 0 20 40 60 80"},
		{"from nothing", Auto("", false), []float64{0.01, 0.29}, 60, 0, 0.3, "0.0 0.1 0.2 0.3"},
		{"no data", Auto("", true), nil, 60, 0, 1, "1 2 5 10"},
	} {
		s := newScale(c.axis, c.values, 0, c.length, spacingX)
		var labels []string
		for _, m := range s.major {
			labels = append(labels, m.label)
		}
		if math.Abs(s.lo-c.lo) > 1e-9 || math.Abs(s.hi-c.hi) > 1e-9 {
			t.Errorf("%s: range %g to %g, want %g to %g", c.name, s.lo, s.hi, c.lo, c.hi)
		}
		if got := strings.Join(labels, " "); got != c.labels {
			t.Errorf("%s: labels %s, want %s", c.name, got, c.labels)
		}
	}
}

// Widths of Liberation Sans are those of the metric-compatible common sans
// faces: a digit takes 0.556, a full stop 0.278 of the size (common practice,
// no source).
func TestEm(t *testing.T) {
	for s, want := range map[string]float64{"0": 0.556, "1.5": 2*0.556 + 0.278, "^{0}": 0.7 * 0.556, "": 0} {
		if got := Em(s); math.Abs(got-want) > 0.001 {
			t.Errorf("%q is %g wide, want %g", s, got, want)
		}
	}
}

// circle checks that a traced arc keeps its radius to 2.8e-4 of it, which is
// the largest radial error of the cubic quarter circle (common practice, no
// source).
type circle struct {
	t    *testing.T
	x, y float64
}

func (c *circle) MoveTo(x, y float64) { c.x, c.y = x, y }
func (c *circle) LineTo(x, y float64) { c.x, c.y = x, y }
func (c *circle) Close()              {}
func (c *circle) CubeTo(x1, y1, x2, y2, x, y float64) {
	for i := range 11 {
		u := float64(i) / 10
		v := 1 - u
		px := v*v*v*c.x + 3*v*v*u*x1 + 3*v*u*u*x2 + u*u*u*x
		py := v*v*v*c.y + 3*v*v*u*y1 + 3*v*u*u*y2 + u*u*u*y
		if r := math.Hypot(px-3, py-4); math.Abs(r-2) > 2.8e-4*2 {
			c.t.Errorf("radius %g at (%g, %g)", r, px, py)
		}
	}
	c.x, c.y = x, y
}

func TestArcIsRound(t *testing.T) {
	for _, angle := range []float64{2 * math.Pi, -math.Pi, 0.3} {
		var p vg.Path
		p.Arc(vg.Point{X: 3, Y: 4}, 2, 0.7, angle)
		c := &circle{t: t}
		Trace(p, Identity, c)
		if wantX := 3 + 2*math.Cos(0.7+angle); math.Abs(c.x-wantX) > 1e-12 {
			t.Errorf("arc of %g ends at %g, want %g", angle, c.x, wantX)
		}
	}
}

func TestClipping(t *testing.T) {
	r := rect{0, 0, 10, 10}
	parts := clipLine([]xy{{-5, 5}, {5, 5}, {5, 20}, {8, 20}, {8, -20}}, r)
	if len(parts) != 2 || parts[0][0] != (xy{0, 5}) || parts[0][2] != (xy{5, 10}) || parts[1][1] != (xy{8, 0}) {
		t.Errorf("stretches %v", parts)
	}
	area := 0.0
	poly := clipArea([]xy{{5, -100}, {105, 5}, {5, 110}, {-95, 5}}, r) // contains all of r
	for i, p := range poly {
		q := poly[(i+1)%len(poly)]
		area += (p.x*q.y - q.x*p.y) / 2
	}
	if math.Abs(area-100) > 1e-9 {
		t.Errorf("area %g, want 100", area)
	}
}

// Nothing covers the data where there is room.
func TestLegendKeepsClear(t *testing.T) {
	p := Panel{X: Axis{Min: 0, Max: 1}, Y: Axis{Min: 0, Max: 1}, Series: []Series{
		{Name: "rising", X: []float64{0.01, 1}, Y: []float64{0.01, 1}, Line: Solid},
		{Name: "upper left", X: []float64{0.1}, Y: []float64{0.9}, Glyph: Circle}}}
	a := newAxes(p, rect{0, 0, 100, 80})
	w, h := legendSize(a.legend, 50)
	box, ok := a.free(w, h, false)
	if !ok || a.outside {
		t.Fatal("no free place found")
	}
	if n := hits(a.marks(), box.grown(1)); n > 0 {
		t.Errorf("the legend at %v covers %d points of data", box, n)
	}
}
