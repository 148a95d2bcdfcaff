package figure

import "math"

// Margins of a panel in mm. They are fixed, so that panels of one size have
// the same data rectangle; only an unusually wide tick label moves the left
// one.
const (
	marginLeft   = 16.0
	marginRight  = 5.0
	marginBottom = 12.0
	marginTop    = 4.0
	titleHeight  = 5.0
	labelGap     = 1.3 // between frame and tick labels
	spacingX     = 13.0
	spacingY     = 8.0
)

// axes are the scales of one panel and where they stand.
type axes struct {
	panel       Panel
	cell, frame rect
	x, y, right scale
	hasRight    bool
	legend      []entry
	outside     bool // the legend stands at the right of the frame
}

// newAxes lays a panel out in its cell.
func newAxes(p Panel, cell rect) *axes {
	a := &axes{panel: p, cell: cell, hasRight: p.Right != nil, legend: entries(p)}
	f := rect{cell.x0 + marginLeft, cell.y0 + marginBottom, cell.x1 - marginRight, cell.y1 - marginTop}
	if p.Title != "" {
		f.y1 -= titleHeight
	}
	f.y1 -= p.Top.height()
	if a.hasRight {
		f.x1 = cell.x1 - marginLeft
	}
	a.frame = f
	a.fit()
	a.outside = len(a.legend) > 0 && p.Legend != NoLegend &&
		(p.Legend == Outside || len(a.legend) > 8)
	if len(a.legend) > 0 && p.Legend == Inside && !a.outside {
		w, h := legendSize(a.legend, 0.6*f.width())
		if _, ok := a.free(w, h, false); !ok {
			a.outside = true
		}
	}
	if a.outside {
		w, _ := outsideLegend(a.legend, f.height(), 0.4*cell.width())
		a.frame.x1 -= w + 2
		a.fit()
	}
	return a
}

// fit makes the scales for the frame, and the frame for the tick labels.
func (a *axes) fit() {
	a.scales()
	widest := 0.0
	for _, t := range a.y.major {
		widest = math.Max(widest, textWidth(t.label, textStyle{size: tickSize}))
	}
	// tick labels, gap, and the axis label turned on its side
	if need := widest + labelGap + 5.5; need > marginLeft && a.frame.width() > need {
		a.frame.x0 = a.cell.x0 + need
		a.scales()
	}
}

func (a *axes) scales() {
	p, f := a.panel, a.frame
	var xs, ys, rights []float64
	for _, s := range p.Series {
		yAxis, into := p.Y, &ys
		if s.Right && a.hasRight {
			yAxis, into = *p.Right, &rights
		}
		xs, *into = s.extent(xs, *into, p.X, yAxis)
	}
	for _, l := range p.Lines {
		switch {
		case l.Vertical:
			xs = append(xs, l.At)
		case l.Right && a.hasRight:
			rights = append(rights, l.At)
		default:
			ys = append(ys, l.At)
		}
	}
	a.x = newScale(p.X, xs, f.x0, f.x1, spacingX)
	a.y = newScale(p.Y, ys, f.y0, f.y1, spacingY)
	if a.hasRight {
		a.right = newScale(*p.Right, rights, f.y0, f.y1, spacingY)
	}
}

// extent appends the coordinates that a series shows. A band counts as far as
// one decade, or the height of the data, beyond the points: an interval
// without an end must not flatten the curve.
func (s Series) extent(xs, ys []float64, xAxis, yAxis Axis) ([]float64, []float64) {
	lo, hi := math.Inf(1), math.Inf(-1)
	n := min(len(s.X), len(s.Y))
	for i := range n {
		if xAxis.usable(s.X[i]) && yAxis.usable(s.Y[i]) {
			xs, ys = append(xs, s.X[i]), append(ys, s.Y[i])
			lo, hi = math.Min(lo, s.Y[i]), math.Max(hi, s.Y[i])
		}
	}
	reach := func(v float64) {
		if !yAxis.usable(v) || lo > hi {
			return
		}
		if yAxis.Log {
			v = math.Max(lo/10, math.Min(hi*10, v))
		} else {
			d := math.Max(hi-lo, 0.5*math.Max(math.Abs(hi), math.Abs(lo)))
			v = math.Max(lo-d, math.Min(hi+d, v))
		}
		ys = append(ys, v)
	}
	for i := range n {
		if !xAxis.usable(s.X[i]) {
			continue
		}
		if i < len(s.Low) && i < len(s.High) {
			reach(s.Low[i])
			reach(s.High[i])
		}
		if i < len(s.YError) && yAxis.usable(s.Y[i]) {
			reach(s.Y[i] - s.YError[i])
			reach(s.Y[i] + s.YError[i])
		}
	}
	return xs, ys
}

// yScale returns the vertical scale and axis of a series.
func (a *axes) yScale(right bool) (scale, Axis) {
	if right && a.hasRight {
		return a.right, *a.panel.Right
	}
	return a.y, a.panel.Y
}

// runs returns the stretches of a series without gap, in mm.
func (a *axes) runs(s Series) [][]xy {
	ys, axis := a.yScale(s.Right)
	var out [][]xy
	var run []xy
	for i := range min(len(s.X), len(s.Y)) {
		if a.panel.X.usable(s.X[i]) && axis.usable(s.Y[i]) {
			run = append(run, xy{a.x.place(s.X[i]), ys.place(s.Y[i])})
			continue
		}
		if run != nil {
			out, run = append(out, run), nil
		}
	}
	if run != nil {
		out = append(out, run)
	}
	return out
}

// bands returns the outlines of the band of a series, clipped to the frame.
func (a *axes) bands(s Series) [][]xy {
	ys, axis := a.yScale(s.Right)
	var out [][]xy
	var low, high []xy
	flush := func() {
		if len(low) > 1 {
			for i := len(low) - 1; i >= 0; i-- {
				high = append(high, low[i])
			}
			if p := clipArea(high, a.frame); len(p) > 2 {
				out = append(out, p)
			}
		}
		low, high = nil, nil
	}
	for i := range min(len(s.X), len(s.Low), len(s.High)) {
		l, h := s.Low[i], s.High[i]
		if !a.panel.X.usable(s.X[i]) || !axis.usable(h) || math.IsNaN(l) || math.Abs(l) > farthest {
			flush()
			continue
		}
		x := a.x.place(s.X[i])
		bottom := a.frame.y0 - 1
		if axis.usable(l) {
			bottom = ys.place(l)
		}
		low, high = append(low, xy{x, bottom}), append(high, xy{x, ys.place(h)})
	}
	flush()
	return out
}
