package figure

// Finding free space: the data are turned into points about a millimetre
// apart, and places for a box are tried in order of preference; the first that
// nothing comes near is taken, or one that only a reference line crosses.

// marks returns the data: what a legend must not cover.
func (a *axes) marks() []xy {
	var out []xy
	add := func(line []xy) { out = append(out, a.dotted(line)...) }
	for _, s := range a.panel.Series {
		for _, run := range a.runs(s) {
			if s.Line != NoLine {
				add(run)
			}
			if s.Glyph != NoGlyph {
				out = append(out, run...)
			}
		}
		for _, band := range a.bands(s) {
			add(append(band, band[0]))
		}
		for _, bar := range a.bars(s) {
			add(bar[:])
		}
	}
	return out
}

// lines returns the reference lines: a legend avoids them if it can.
func (a *axes) lines() []xy {
	var out []xy
	for _, l := range a.panel.Lines {
		if line, ok := a.reference(l); ok {
			out = append(out, a.dotted(line[:])...)
		}
	}
	return out
}

// dotted turns a polyline into points, as far as it lies in the frame.
func (a *axes) dotted(line []xy) []xy {
	var out []xy
	for _, run := range clipLine(line, a.frame) {
		for i := 1; i < len(run); i++ {
			out = append(out, along(run[i-1], run[i])...)
		}
	}
	return out
}

// hits counts the points in a rectangle.
func hits(pts []xy, r rect) int {
	n := 0
	for _, p := range pts {
		if r.has(p) {
			n++
		}
	}
	return n
}

// blank whitens the ground of a box that a reference line crosses.
func (p *pen) blank(a *axes, box rect) {
	if near := box.grown(0.6); hits(a.lines(), near) > 0 {
		p.area(near.outline(), 0xFFFFFF)
	}
}

// along returns points from p to q at most a millimetre apart.
func along(p, q xy) []xy {
	dx, dy := q.x-p.x, q.y-p.y
	n := int(max(dx, -dx, dy, -dy)) + 1
	out := make([]xy, 0, n+1)
	for i := 0; i <= n; i++ {
		t := float64(i) / float64(n)
		out = append(out, xy{p.x + t*dx, p.y + t*dy})
	}
	return out
}

// free returns the best place in the frame for a box of w × h mm, and whether
// it is clear of data. Notes look at the upper corners first and legends leave
// room for the notes.
func (a *axes) free(w, h float64, note bool) (rect, bool) {
	const inset = 3.0
	f := a.frame
	if w > f.width()-2*inset || h > f.height()-2*inset {
		return rect{f.x0 + inset, f.y1 - inset - h, f.x0 + inset + w, f.y1 - inset}, false
	}
	const data = 10000 // what one point of data weighs, in points of a line
	marks, lines := a.marks(), a.lines()
	var taken []rect
	if !note {
		if r, ok := a.noteBox(); ok {
			taken = append(taken, r)
		}
	}
	bestCount := -1
	var best rect
	for _, at := range spots {
		x := f.x0 + inset + at.x*(f.width()-2*inset-w)
		y := f.y0 + inset + at.y*(f.height()-2*inset-h)
		box := rect{x, y, x + w, y + h}
		near := box.grown(clearance)
		count := data*hits(marks, near) + hits(lines, near)
		for _, t := range taken {
			if near.x0 < t.x1 && t.x0 < near.x1 && near.y0 < t.y1 && t.y0 < near.y1 {
				count += 1000 * data
			}
		}
		if count == 0 {
			return box, true
		}
		if bestCount < 0 || count < bestCount {
			best, bestCount = box, count
		}
	}
	return best, bestCount < data
}

// spots are the places that are tried, as fractions of the free travel:
// corners, middles of the sides, then a raster.
var spots = func() []xy {
	out := []xy{{0, 1}, {1, 1}, {1, 0}, {0, 0}, {0.5, 1}, {0.5, 0}, {1, 0.5}, {0, 0.5}}
	const n = 8
	for i := range n + 1 {
		for j := range n + 1 {
			out = append(out, xy{float64(j) / n, 1 - float64(i)/n})
		}
	}
	return out
}()

// noteBox returns where the notes stand.
func (a *axes) noteBox() (rect, bool) {
	if len(a.panel.Notes) == 0 {
		return rect{}, false
	}
	w := 0.0
	for _, n := range a.panel.Notes {
		w = max(w, textWidth(n, legendStyle()))
	}
	w = min(w, a.frame.width()-6)
	r, _ := a.free(w, rowHeight*float64(len(a.panel.Notes)), true)
	return r, true
}
