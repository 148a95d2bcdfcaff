package figure

import (
	"math"

	"gonum.org/v1/plot/vg"
)

const (
	frameWidth = 0.6 // pt
	gridColour = Colour(0xE9E9E9)
	tickLength = 1.6 // mm
	minorTick  = 0.9
)

// Draw draws f with its lower left corner at the origin of c, Size
// millimetres large.
func Draw(f Figure, c vg.Canvas) {
	vg.Initialize(c)
	p := &pen{c}
	w, h := f.size()
	f.Panels, w = p.shared(f, w, h)
	columns, rows := f.grid()
	for i, panel := range f.Panels {
		cw, ch := w/float64(columns), h/float64(rows)
		x, y := cw*float64(i%columns), h-ch*float64(i/columns+1)
		p.panel(newAxes(panel, rect{x, y, x + cw, y + ch}))
	}
	if len(f.Panels) == 0 {
		p.panel(newAxes(Panel{}, rect{0, 0, w, h}))
	}
}

func (s Series) width() float64 {
	if s.Width > 0 {
		return math.Min(s.Width, 10)
	}
	return 1.1
}

func (s Series) size() float64 {
	if s.Size > 0 {
		return math.Min(s.Size, 10)
	}
	return 1.5
}

func (p *pen) panel(a *axes) {
	if a.frame.width() < 1 || a.frame.height() < 1 {
		return
	}
	p.grid(a)
	p.areas(a)
	for _, s := range a.panel.Series {
		for _, band := range a.bands(s) {
			p.area(band, s.Colour.Tint())
		}
	}
	for _, l := range a.panel.Lines {
		p.reference(a, l)
	}
	stretches := a.stretches()
	marks := 0
	for i, s := range a.panel.Series {
		for _, bar := range a.bars(s) {
			p.bar(a, bar, s)
		}
		for _, run := range a.runs(s) {
			marks += len(run)
		}
		for _, part := range stretches[i] {
			for _, piece := range part.pieces() {
				p.line(piece, s.width(), s.Line, s.Colour)
			}
		}
	}
	near := a.frame.grown(0.3) // points on the frame count as inside
	for _, s := range a.panel.Series {
		for _, run := range a.runs(s) {
			for _, q := range run {
				if near.has(q) {
					p.glyph(s.Glyph, q, s.size(), s.Hollow, s.Colour)
				}
			}
		}
	}
	p.marks(stretches)
	p.frame(a)
	p.top(a)
	p.labels(a)
	if marks == 0 {
		p.text("no data", (a.frame.x0+a.frame.x1)/2, (a.frame.y0+a.frame.y1)/2,
			textStyle{size: labelSize, anchor: 0.5, raise: -0.36, colour: Grey})
	}
	if box, ok := a.noteBox(); ok {
		p.blank(a, box)
		for i, n := range a.panel.Notes {
			n = clipText(n, a.frame.width()-6, legendStyle())
			p.text(n, box.x0, box.y1-rowHeight*(float64(i)+0.5), legendStyle())
		}
	}
	a.placeLegend(p)
}

func (p *pen) grid(a *axes) {
	f := a.frame
	for _, t := range a.x.major {
		x := a.x.at(t.t)
		p.line([]xy{{x, f.y0}, {x, f.y1}}, 0.5, Solid, gridColour)
	}
	for _, t := range a.y.major {
		y := a.y.at(t.t)
		p.line([]xy{{f.x0, y}, {f.x1, y}}, 0.5, Solid, gridColour)
	}
}

// frame draws the frame and its inward ticks, on all four sides.
func (p *pen) frame(a *axes) {
	f := a.frame
	right := a.y
	if a.hasRight {
		right = a.right
	}
	side := func(s scale, draw func(place, length float64)) {
		for _, t := range s.major {
			draw(s.at(t.t), tickLength)
		}
		for _, t := range s.minor {
			draw(s.at(t), minorTick)
		}
	}
	side(a.x, func(x, l float64) {
		p.line([]xy{{x, f.y0}, {x, f.y0 + l}}, frameWidth, Solid, Black)
		if a.panel.Top == nil {
			p.line([]xy{{x, f.y1}, {x, f.y1 - l}}, frameWidth, Solid, Black)
		}
	})
	side(a.y, func(y, l float64) { p.line([]xy{{f.x0, y}, {f.x0 + l, y}}, frameWidth, Solid, Black) })
	side(right, func(y, l float64) { p.line([]xy{{f.x1, y}, {f.x1 - l, y}}, frameWidth, Solid, Black) })
	p.c.SetLineDash(nil, 0)
	p.colour(Black)
	p.c.SetLineWidth(frameWidth)
	p.c.Stroke(path(f.outline(), true))
}

func (p *pen) labels(a *axes) {
	f := a.frame
	for _, t := range a.x.major {
		p.text(t.label, a.x.at(t.t), f.y0-labelGap-2.2, textStyle{size: tickSize, anchor: 0.5})
	}
	for _, t := range a.y.major {
		p.text(t.label, f.x0-labelGap, a.y.at(t.t), textStyle{size: tickSize, anchor: 1, raise: -0.36})
	}
	mid := textStyle{size: labelSize, anchor: 0.5}
	room := clipText(a.panel.X.Label, a.cell.width()-2, mid)
	p.text(room, a.within((f.x0+f.x1)/2, textWidth(room, mid)), a.cell.y0+2.6, mid)
	mid.turned = true
	p.text(clipText(a.panel.Y.Label, a.cell.height()-2, mid), a.cell.x0+3.6, a.middle(a.panel.Y.Label, mid), mid)
	if a.hasRight {
		for _, t := range a.right.major {
			p.text(t.label, f.x1+labelGap, a.right.at(t.t), textStyle{size: tickSize, raise: -0.36})
		}
		p.text(clipText(a.panel.Right.Label, a.cell.height()-2, mid), f.x1+marginLeft-3, a.middle(a.panel.Right.Label, mid), mid)
	}
	if a.panel.Title != "" {
		st := textStyle{size: titleSize, bold: true}
		p.text(clipText(a.panel.Title, a.cell.x1-f.x0-1, st), f.x0, f.y1+a.panel.Top.height()+2, st)
	}
}

// within keeps text of width w that is centred on x inside the cell.
func (a *axes) within(x, w float64) float64 {
	return math.Max(a.cell.x0+1+w/2, math.Min(a.cell.x1-1-w/2, x))
}

// middle does the same for turned text along the frame.
func (a *axes) middle(label string, st textStyle) float64 {
	w := math.Min(textWidth(label, st), a.cell.height()-2)
	y := (a.frame.y0 + a.frame.y1) / 2
	return math.Max(a.cell.y0+1+w/2, math.Min(a.cell.y1-1-w/2, y))
}

// bars returns the error bars of a series, from bottom to top.
func (a *axes) bars(s Series) [][2]xy {
	ys, axis := a.yScale(s.Right)
	var out [][2]xy
	for i := range min(len(s.X), len(s.Y), len(s.YError)) {
		y, d := s.Y[i], math.Abs(s.YError[i])
		if !a.panel.X.usable(s.X[i]) || !axis.usable(y) || !axis.usable(y+d) || d == 0 {
			continue
		}
		x := a.x.place(s.X[i])
		bottom := a.frame.y0 - 1
		if axis.usable(y - d) {
			bottom = ys.place(y - d)
		}
		out = append(out, [2]xy{{x, bottom}, {x, ys.place(y + d)}})
	}
	return out
}

func (p *pen) bar(a *axes, bar [2]xy, s Series) {
	const cap = 0.7 // mm, half the width of the ends
	lo, hi, ok := clipSegment(bar[0], bar[1], a.frame)
	if !ok {
		return
	}
	p.line([]xy{lo, hi}, 0.7, Solid, s.Colour)
	for i, q := range [2]xy{lo, hi} {
		if q == bar[i] { // an end that was cut off gets no cap
			p.line([]xy{{q.x - cap, q.y}, {q.x + cap, q.y}}, 0.7, Solid, s.Colour)
		}
	}
}

// reference returns the ends of a reference line, if it has a place.
func (a *axes) reference(l Reference) ([2]xy, bool) {
	f := a.frame
	if l.Vertical {
		if !a.panel.X.usable(l.At) {
			return [2]xy{}, false
		}
		x := a.x.place(l.At)
		return [2]xy{{x, f.y0}, {x, f.y1}}, x >= f.x0 && x <= f.x1
	}
	ys, axis := a.yScale(l.Right)
	if !axis.usable(l.At) {
		return [2]xy{}, false
	}
	y := ys.place(l.At)
	return [2]xy{{f.x0, y}, {f.x1, y}}, y >= f.y0 && y <= f.y1
}

func (p *pen) reference(a *axes, l Reference) {
	line, ok := a.reference(l)
	if !ok {
		return
	}
	dash, c := l.Line, l.Colour
	if dash == NoLine {
		dash = Dashed
	}
	if c == Black {
		c = Grey
	}
	p.line(line[:], 0.8, dash, c)
	if l.Label == "" {
		return
	}
	st := textStyle{size: 6.5, colour: 0x555555}
	w, f := textWidth(l.Label, st), a.frame
	x, y := line[0].x, line[0].y
	spots := []xy{{x + 0.8, f.y0 + 2.4}, {x + 0.8, f.y1 - 4.2}, {x - 0.8 - w, f.y0 + 2.4}, {x - 0.8 - w, f.y1 - 4.2}}
	if !l.Vertical {
		spots = []xy{{f.x1 - 2.4 - w, y + 0.7}, {f.x0 + 2.4, y + 0.7}, {f.x1 - 2.4 - w, y - 2.5}, {f.x0 + 2.4, y - 2.5}}
	}
	data := a.marks()
	best, least := spots[0], -1
	for _, s := range spots {
		box := rect{s.x, s.y, s.x + w, s.y + 1.8}
		if box.x0 < f.x0 || box.x1 > f.x1 || box.y0 < f.y0 || box.y1 > f.y1 {
			continue
		}
		if n := hits(data, box.grown(0.7)); least < 0 || n < least {
			best, least = s, n
		}
	}
	p.text(l.Label, best.x, best.y, st)
}
