package figure

import "math"

// A mark is the name of a line that stands on the line itself, along it, in a gap:
// contours and curves are read without a legend.
//
// Places a millimetre apart along the line are tried. Each costs what the box of the
// mark covers of other data, and a little for its distance from the middle of its
// stretch, counted in the lengths of that stretch, and for its bend; the cheapest is
// taken. A stretch that is shorter than twice the mark gets none.

// The type of marks, pt; the height of their box and the room before and after them, mm.
const (
	markSize   = 6.5
	markHeight = 2.5
	markRoom   = 1.0
)

// placedMark is where a mark stands.
type placedMark struct {
	text     string
	at       xy
	angle    float64 // rad, −π/2 to π/2
	from, to float64 // mm along the stretch: the gap
	width    float64 // mm, of the box
}

// local returns p in the coordinates of the box: along and across, from its middle.
func (m placedMark) local(p xy) (u, v float64) {
	sin, cos := math.Sincos(m.angle)
	dx, dy := p.x-m.at.x, p.y-m.at.y
	return dx*cos + dy*sin, dy*cos - dx*sin
}

// covers says whether p lies in the box, widened by d.
func (m placedMark) covers(p xy, d float64) bool {
	u, v := m.local(p)
	return math.Abs(u) <= m.width/2+d && math.Abs(v) <= markHeight/2+d
}

// outline returns points of the border of the box, and its middle.
func (m placedMark) outline() []xy {
	sin, cos := math.Sincos(m.angle)
	out := []xy{m.at}
	for _, c := range [...]xy{{-1, -1}, {0, -1}, {1, -1}, {1, 1}, {0, 1}, {-1, 1}} {
		u, v := c.x*m.width/2, c.y*markHeight/2
		out = append(out, xy{m.at.x + u*cos - v*sin, m.at.y + u*sin + v*cos})
	}
	return out
}

// stretch is a part of a series' line inside the frame, with its mark, if it has one.
type stretch struct {
	line []xy
	mark *placedMark
}

// stretches returns the lines of all series, series by series, and finds the places of
// their marks.
func (a *axes) stretches() [][]stretch {
	out := make([][]stretch, len(a.panel.Series))
	var taken []xy
	for i, s := range a.panel.Series {
		if s.Line == NoLine {
			continue
		}
		for _, run := range a.runs(s) {
			for _, part := range clipLine(run, a.frame) {
				out[i] = append(out[i], stretch{line: part})
			}
		}
	}
	for i, s := range a.panel.Series {
		if s.Mark == "" || len(out[i]) == 0 {
			continue
		}
		others := *a
		others.panel.Series = nil
		for j, o := range a.panel.Series {
			if j != i {
				o.Low, o.High = nil, nil // a mark on a band can be read
				others.panel.Series = append(others.panel.Series, o)
			}
		}
		data := append(append(others.marks(), others.lines()...), taken...)
		for k := range out[i] {
			if m := a.markPlace(out[i][k].line, s.Mark, data); m != nil {
				out[i][k].mark = m
				taken = append(taken, m.outline()...)
				data = append(data, m.outline()...)
			}
		}
	}
	return out
}

// markPlace finds the place of a mark on a line; nil if there is none.
func (a *axes) markPlace(line []xy, text string, data []xy) *placedMark {
	w := textWidth(text, textStyle{size: markSize})
	length := lengthOf(line)
	if length < 2*(w+2*markRoom) {
		return nil
	}
	room := a.frame.grown(-0.5)
	var best *placedMark
	least := math.Inf(1)
	gap := w/2 + markRoom
	for s := gap; s <= length-gap; s++ {
		p, q := pointAt(line, s-gap), pointAt(line, s+gap)
		m := placedMark{text: text, angle: math.Atan2(q.y-p.y, q.x-p.x), from: s - gap, to: s + gap, width: w}
		if m.angle > math.Pi/2+1e-9 {
			m.angle -= math.Pi
		} else if m.angle < -math.Pi/2-1e-9 {
			m.angle += math.Pi
		}
		m.at = pointAt(line, s)
		inside := true
		for _, c := range m.outline() {
			inside = inside && room.has(c)
		}
		if !inside {
			continue
		}
		cost := 0.0
		for _, d := range data {
			if m.covers(d, 0.4) {
				cost++
			}
		}
		off := s/length - 0.5
		bend := 2*gap - math.Hypot(q.x-p.x, q.y-p.y)
		if cost += 2*off*off + 4*bend; cost < least {
			best, least = &m, cost
		}
	}
	return best
}

func lengthOf(line []xy) float64 {
	sum := 0.0
	for i := 1; i < len(line); i++ {
		sum += math.Hypot(line[i].x-line[i-1].x, line[i].y-line[i-1].y)
	}
	return sum
}

// pointAt is the point s mm along a line.
func pointAt(line []xy, s float64) xy {
	for i := 1; i < len(line); i++ {
		p, q := line[i-1], line[i]
		d := math.Hypot(q.x-p.x, q.y-p.y)
		if s <= d && d > 0 {
			t := math.Max(0, s/d)
			return xy{p.x + t*(q.x-p.x), p.y + t*(q.y-p.y)}
		}
		s -= d
	}
	return line[len(line)-1]
}

// pieces returns the line without the gap of its mark.
func (s stretch) pieces() [][]xy {
	if s.mark == nil {
		return [][]xy{s.line}
	}
	before, after := []xy{}, []xy{pointAt(s.line, s.mark.to)}
	at := 0.0
	for i, q := range s.line {
		if i > 0 {
			at += math.Hypot(q.x-s.line[i-1].x, q.y-s.line[i-1].y)
		}
		if at < s.mark.from {
			before = append(before, q)
		} else if at > s.mark.to {
			after = append(after, q)
		}
	}
	return [][]xy{append(before, pointAt(s.line, s.mark.from)), after}
}

func (p *pen) marks(list [][]stretch) {
	for _, series := range list {
		for _, s := range series {
			if m := s.mark; m != nil {
				p.text(m.text, m.at.x, m.at.y, textStyle{size: markSize, anchor: 0.5, raise: -0.36, angle: m.angle})
			}
		}
	}
}
