package figure

import "gonum.org/v1/plot/vg"

// pen draws in millimetres, y upwards.
type pen struct{ c vg.Canvas }

func at(x, y float64) vg.Point {
	return vg.Point{X: vg.Length(x) * vg.Millimeter, Y: vg.Length(y) * vg.Millimeter}
}

func (p *pen) colour(c Colour) { p.c.SetColor(c.rgba()) }

// line strokes a polyline; width in points.
func (p *pen) line(pts []xy, width float64, dash Dash, c Colour) {
	if len(pts) < 2 {
		return
	}
	p.colour(c)
	p.c.SetLineWidth(vg.Length(width))
	var pattern []vg.Length
	if dash > NoLine && int(dash) < len(dashes) {
		for _, d := range dashes[dash] {
			pattern = append(pattern, vg.Length(d))
		}
	}
	p.c.SetLineDash(pattern, 0)
	p.c.Stroke(path(pts, false))
	p.c.SetLineDash(nil, 0)
}

// area fills a polygon.
func (p *pen) area(pts []xy, c Colour) {
	if len(pts) < 3 {
		return
	}
	p.colour(c)
	p.c.Fill(path(pts, true))
}

func path(pts []xy, closed bool) vg.Path {
	out := make(vg.Path, 0, len(pts)+1)
	out.Move(at(pts[0].x, pts[0].y))
	for _, q := range pts[1:] {
		out.Line(at(q.x, q.y))
	}
	if closed {
		out.Close()
	}
	return out
}

// xy is a point in mm.
type xy struct{ x, y float64 }

// rect is a rectangle in mm.
type rect struct{ x0, y0, x1, y1 float64 }

func (r rect) width() float64  { return r.x1 - r.x0 }
func (r rect) height() float64 { return r.y1 - r.y0 }

func (r rect) grown(d float64) rect { return rect{r.x0 - d, r.y0 - d, r.x1 + d, r.y1 + d} }

func (r rect) has(p xy) bool {
	return p.x >= r.x0 && p.x <= r.x1 && p.y >= r.y0 && p.y <= r.y1
}

func (r rect) outline() []xy {
	return []xy{{r.x0, r.y0}, {r.x1, r.y0}, {r.x1, r.y1}, {r.x0, r.y1}}
}
