package figure

import "math"

// entry is one line of a legend: all series of one name.
type entry struct {
	name   string
	series []Series
}

const (
	keyLength = 7.0 // mm, of the sample of line and band
	keyGap    = 1.3
	rowHeight = 3.7
	clearance = 1.4 // mm, between legend or note and data
)

func legendStyle() textStyle { return textStyle{size: tickSize, raise: -0.36} }

// entries collects the names in the order in which they first appear.
func entries(p Panel) []entry {
	var out []entry
	index := map[string]int{}
	for _, s := range p.Series {
		if s.Name == "" {
			continue
		}
		i, ok := index[s.Name]
		if !ok {
			i = len(out)
			index[s.Name] = i
			out = append(out, entry{name: s.Name})
		}
		out[i].series = append(out[i].series, s)
	}
	return out
}

// key returns the width of the sample: short where all series are points.
func key(list []entry) float64 {
	for _, e := range list {
		for _, s := range e.series {
			if s.Line != NoLine || len(s.Low) > 0 {
				return keyLength
			}
		}
	}
	return 2.6
}

// legendSize returns the size of one column, names shortened to widest mm.
func legendSize(list []entry, widest float64) (w, h float64) {
	for _, e := range list {
		w = math.Max(w, math.Min(widest, textWidth(e.name, legendStyle())))
	}
	return key(list) + keyGap + w, rowHeight * float64(len(list))
}

// outsideLegend returns the width of a legend of height at most h, and the
// rows of each of its columns.
func outsideLegend(list []entry, h, widest float64) (w float64, rows int) {
	rows = max(1, min(len(list), int(h/rowHeight)))
	columns := (len(list) + rows - 1) / rows
	widest = math.Max(8, widest/float64(columns)-key(list)-keyGap)
	for c := range columns {
		part := list[c*rows : min(len(list), (c+1)*rows)]
		cw, _ := legendSize(part, widest)
		w += cw + 2
	}
	return w, rows
}

// drawLegend draws one column with its upper left corner at (x, y).
func (p *pen) drawLegend(list []entry, x, y, widest float64) {
	k := key(list)
	for i, e := range list {
		mid := y - rowHeight*(float64(i)+0.5)
		for _, s := range e.series {
			if len(s.Low) > 0 && len(s.High) > 0 {
				p.area(rect{x, mid - 1.25, x + k, mid + 1.25}.outline(), s.Colour.Tint())
			}
		}
		for _, s := range e.series {
			if s.Line != NoLine {
				p.line([]xy{{x, mid}, {x + k, mid}}, s.width(), s.Line, s.Colour)
			}
		}
		for _, s := range e.series {
			p.glyph(s.Glyph, xy{x + k/2, mid}, s.size(), s.Hollow, s.Colour)
		}
		p.text(clipText(e.name, widest, legendStyle()), x+k+keyGap, mid, legendStyle())
	}
}

// placeLegend draws the legend where newAxes decided.
func (a *axes) placeLegend(p *pen) {
	if len(a.legend) == 0 || a.panel.Legend == NoLegend {
		return
	}
	if !a.outside {
		widest := 0.6 * a.frame.width()
		w, h := legendSize(a.legend, widest)
		spot, _ := a.free(w, h, false)
		p.blank(a, spot)
		p.drawLegend(a.legend, spot.x0, spot.y1, widest)
		return
	}
	w, rows := outsideLegend(a.legend, a.frame.height(), 0.4*a.cell.width())
	x := a.frame.x1 + 3
	if a.hasRight {
		x = a.cell.x1 - w
	}
	p.columns(a.legend, x, a.frame.y1, rows, 0.4*a.cell.width())
}

// columns draws a legend outside the frame, in columns of so many rows.
func (p *pen) columns(list []entry, x, y float64, rows int, widest float64) {
	columns := (len(list) + rows - 1) / rows
	widest = math.Max(8, widest/float64(columns)-key(list)-keyGap)
	for from := 0; from < len(list); from += rows {
		part := list[from:min(len(list), from+rows)]
		p.drawLegend(part, x, y, widest)
		cw, _ := legendSize(part, widest)
		x += cw + 2
	}
}

// shared draws the common legend of a figure and returns its panels without
// legends of their own, and the width that is left for them.
func (p *pen) shared(f Figure, w, h float64) ([]Panel, float64) {
	if !f.Shared {
		return f.Panels, w
	}
	var all Panel
	panels := make([]Panel, len(f.Panels))
	for i, panel := range f.Panels {
		// a name that another panel has shown already says nothing new
		for _, s := range panel.Series {
			if !hasName(f.Panels[:i], s.Name) {
				all.Series = append(all.Series, s)
			}
		}
		panel.Legend = NoLegend
		panels[i] = panel
	}
	list := entries(all)
	if len(list) == 0 {
		return panels, w
	}
	top := h - marginTop
	for _, panel := range f.Panels[:min(len(f.Panels), 1)] {
		if panel.Title != "" {
			top -= titleHeight
		}
	}
	lw, rows := outsideLegend(list, top-marginBottom, 0.4*w)
	x := w - lw
	p.columns(list, x, top, rows, 0.4*w)
	return panels, w - lw + 2
}

// hasName says whether one of the panels shows a series of that name.
func hasName(panels []Panel, name string) bool {
	for _, p := range panels {
		for _, s := range p.Series {
			if s.Name == name {
				return true
			}
		}
	}
	return false
}
