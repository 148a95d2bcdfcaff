package figure

// A mark is the name of a line that stands on the line itself, in a gap: contours and
// lines of equal temperature are read without a legend.
//
// Places a millimetre apart along the line are tried. Each costs what the box of the
// mark covers of other data, and a little for its distance from the middle of its
// stretch, counted in the lengths of that stretch; the cheapest is taken. A stretch that is
// shorter than twice the mark gets none.

// markSize is the size of the type of marks, pt.
const markSize = 6.5

func markStyle() textStyle { return textStyle{size: markSize, anchor: 0.5, raise: -0.36} }

// placedMark is where a mark stands.
type placedMark struct {
	text string
	box  rect
}

// placeMarks finds the places of the marks of all series.
func (a *axes) placeMarks() [][]placedMark {
	out := make([][]placedMark, len(a.panel.Series))
	var taken []rect
	for i, s := range a.panel.Series {
		if s.Mark == "" || s.Line == NoLine {
			continue
		}
		others := *a
		others.panel.Series = nil
		for j, o := range a.panel.Series {
			if j != i {
				others.panel.Series = append(others.panel.Series, o)
			}
		}
		data := append(others.marks(), others.lines()...)
		w := textWidth(s.Mark, markStyle()) + 1
		const h = 2.6
		for _, run := range a.runs(s) {
			for _, part := range clipLine(run, a.frame) {
				if box, ok := a.markPlace(part, w, h, data, taken); ok {
					out[i] = append(out[i], placedMark{s.Mark, box})
					taken = append(taken, box)
				}
			}
		}
	}
	return out
}

func (a *axes) markPlace(line []xy, w, h float64, data []xy, taken []rect) (rect, bool) {
	var path []xy
	for i := 1; i < len(line); i++ {
		path = append(path, along(line[i-1], line[i])...)
	}
	if float64(len(path)) < 2*w+2 {
		return rect{}, false
	}
	room := a.frame.grown(-0.8)
	best, least := rect{}, -1.0
	for i, q := range path {
		box := rect{q.x - w/2, q.y - h/2, q.x + w/2, q.y + h/2}
		if box.x0 < room.x0 || box.x1 > room.x1 || box.y0 < room.y0 || box.y1 > room.y1 {
			continue
		}
		off := float64(i)/float64(len(path)) - 0.5
		cost := float64(hits(data, box.grown(0.3))) + 2*off*off
		for _, t := range taken {
			if near := box.grown(1.5); near.x0 < t.x1 && t.x0 < near.x1 && near.y0 < t.y1 && t.y0 < near.y1 {
				cost += 100
			}
		}
		if least < 0 || cost < least {
			best, least = box, cost
		}
	}
	return best, least >= 0 && least < 100
}

// outsideBoxes returns the parts of a polyline that no box covers.
func outsideBoxes(pts []xy, boxes []placedMark) [][]xy {
	parts := [][]xy{pts}
	for _, b := range boxes {
		var next [][]xy
		for _, part := range parts {
			next = append(next, outsideBox(part, b.box)...)
		}
		parts = next
	}
	return parts
}

func outsideBox(pts []xy, r rect) [][]xy {
	var out [][]xy
	run := []xy{pts[0]}
	flush := func() {
		if len(run) > 1 {
			out = append(out, run)
		}
		run = nil
	}
	for i := 1; i < len(pts); i++ {
		a, b := pts[i-1], pts[i]
		u, v, ok := clipSegment(a, b, r)
		if !ok {
			run = append(run, b)
			continue
		}
		if u != a {
			run = append(run, u)
		}
		flush()
		run = []xy{v}
		if v != b {
			run = append(run, b)
		}
	}
	flush()
	return out
}

func (p *pen) marks(list [][]placedMark) {
	for _, marks := range list {
		for _, m := range marks {
			p.text(m.text, (m.box.x0+m.box.x1)/2, (m.box.y0+m.box.y1)/2, markStyle())
		}
	}
}
