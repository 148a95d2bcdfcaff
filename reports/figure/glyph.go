package figure

import (
	"math"

	"gonum.org/v1/plot/vg"
)

// Glyph is the mark of a point. The zero value draws none.
type Glyph int

// The glyphs.
const (
	NoGlyph Glyph = iota
	Circle
	Square
	Triangle
	Diamond
	Inverted // triangle, point down
	Cross
	Plus
)

var glyphCycle = [...]Glyph{Circle, Square, Triangle, Diamond, Inverted}

// PickGlyph returns the i-th glyph of a set of series, i counted from 0; it
// starts again after five.
func PickGlyph(i int) Glyph {
	return glyphCycle[((i%len(glyphCycle))+len(glyphCycle))%len(glyphCycle)]
}

// unit outlines with about equal areas, half a glyph across.
var outlines = map[Glyph][]xy{
	Square:   {{-0.87, -0.87}, {0.87, -0.87}, {0.87, 0.87}, {-0.87, 0.87}},
	Triangle: {{-1.07, -0.8}, {1.07, -0.8}, {0, 1.1}},
	Diamond:  {{0, -1.2}, {1.2, 0}, {0, 1.2}, {-1.2, 0}},
	Inverted: {{-1.07, 0.8}, {1.07, 0.8}, {0, -1.1}},
}

// glyph draws a mark at a point; size across in mm.
func (p *pen) glyph(g Glyph, q xy, size float64, hollow bool, c Colour) {
	r := size / 2
	const pen = 0.8 // pt
	switch g {
	case NoGlyph:
	case Cross, Plus:
		d := r
		if g == Cross {
			d *= math.Sqrt2 / 2
			p.line([]xy{{q.x - d, q.y - d}, {q.x + d, q.y + d}}, 1, Solid, c)
			p.line([]xy{{q.x - d, q.y + d}, {q.x + d, q.y - d}}, 1, Solid, c)
			return
		}
		p.line([]xy{{q.x - d, q.y}, {q.x + d, q.y}}, 1, Solid, c)
		p.line([]xy{{q.x, q.y - d}, {q.x, q.y + d}}, 1, Solid, c)
	default:
		var shape vg.Path
		if unit, ok := outlines[g]; ok {
			pts := make([]xy, len(unit))
			for i, u := range unit {
				pts[i] = xy{q.x + r*u.x, q.y + r*u.y}
			}
			shape = path(pts, true)
		} else {
			shape.Move(at(q.x+r, q.y))
			shape.Arc(at(q.x, q.y), vg.Length(r)*vg.Millimeter, 0, 2*math.Pi)
			shape.Close()
		}
		if !hollow {
			p.colour(c)
			p.c.Fill(shape)
			return
		}
		p.colour(0xFFFFFF)
		p.c.Fill(shape)
		p.colour(c)
		p.c.SetLineWidth(pen)
		p.c.Stroke(shape)
	}
}
