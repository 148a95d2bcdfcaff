package figure

import (
	"math"

	"gonum.org/v1/plot/vg"
)

// Affine is the plane transformation x' = A·x + C·y + E, y' = B·x + D·y + F.
type Affine struct{ A, B, C, D, E, F float64 }

// Identity changes nothing.
var Identity = Affine{A: 1, D: 1}

// Apply returns the image of a point.
func (m Affine) Apply(x, y float64) (float64, float64) {
	return m.A*x + m.C*y + m.E, m.B*x + m.D*y + m.F
}

// Mul returns the transformation that does n first and m afterwards.
func (m Affine) Mul(n Affine) Affine {
	e, f := m.Apply(n.E, n.F)
	return Affine{m.A*n.A + m.C*n.B, m.B*n.A + m.D*n.B, m.A*n.C + m.C*n.D, m.B*n.C + m.D*n.D, e, f}
}

// Rotation turns by an angle in radians, anticlockwise.
func Rotation(angle float64) Affine {
	s, c := math.Sincos(angle)
	return Affine{A: c, B: s, C: -s, D: c}
}

// Tracer is told a path in straight lines and cubic curves.
type Tracer interface {
	MoveTo(x, y float64)
	LineTo(x, y float64)
	CubeTo(x1, y1, x2, y2, x, y float64)
	Close()
}

// Trace tells t the path in points, transformed by m.
//
// An arc of angle φ is cut into n equal parts of at most a quarter turn, each
// a cubic curve whose control points lie on the tangents at
// (4/3)·tan(φ/4n) of the radius from the ends; the radius is then right to
// 2.8·10⁻⁴ (common practice, no source).
func Trace(p vg.Path, m Affine, t Tracer) {
	open := false
	for _, c := range p {
		x, y := float64(c.Pos.X), float64(c.Pos.Y)
		switch c.Type {
		case vg.MoveComp:
			t.MoveTo(m.Apply(x, y))
			open = true
		case vg.LineComp:
			t.LineTo(m.Apply(x, y))
		case vg.CurveComp:
			traceCurve(c, m, t)
		case vg.ArcComp:
			traceArc(c, m, t, open)
			open = true
		case vg.CloseComp:
			t.Close()
			open = false
		}
	}
}

func traceCurve(c vg.PathComp, m Affine, t Tracer) {
	x, y := m.Apply(float64(c.Pos.X), float64(c.Pos.Y))
	switch len(c.Control) {
	case 1: // both inner points at the one control point: close enough for a mark
		cx, cy := m.Apply(float64(c.Control[0].X), float64(c.Control[0].Y))
		t.CubeTo(cx, cy, cx, cy, x, y)
	case 2:
		ax, ay := m.Apply(float64(c.Control[0].X), float64(c.Control[0].Y))
		bx, by := m.Apply(float64(c.Control[1].X), float64(c.Control[1].Y))
		t.CubeTo(ax, ay, bx, by, x, y)
	default:
		panic("figure: curve with neither one nor two control points")
	}
}

func traceArc(c vg.PathComp, m Affine, t Tracer, open bool) {
	x, y, r := float64(c.Pos.X), float64(c.Pos.Y), float64(c.Radius)
	n := max(1, int(math.Ceil(math.Abs(c.Angle)/(math.Pi/2)-1e-9)))
	step := c.Angle / float64(n)
	k := 4.0 / 3 * math.Tan(step/4) * r
	sin, cos := math.Sincos(c.Start)
	startX, startY := m.Apply(x+r*cos, y+r*sin)
	if open {
		t.LineTo(startX, startY)
	} else {
		t.MoveTo(startX, startY)
	}
	for i := 1; i <= n; i++ {
		sin1, cos1 := math.Sincos(c.Start + float64(i)*step)
		ax, ay := m.Apply(x+r*cos-k*sin, y+r*sin+k*cos)
		bx, by := m.Apply(x+r*cos1+k*sin1, y+r*sin1-k*cos1)
		ex, ey := m.Apply(x+r*cos1, y+r*sin1)
		t.CubeTo(ax, ay, bx, by, ex, ey)
		sin, cos = sin1, cos1
	}
}
