package figure

// Top is a row of labels above the frame, for lines that leave it there: temperatures
// over a nomogram. They stand at abscissae of the panel's X axis, and take the place of
// its ticks at that side. Of two labels without room for both the earlier in the list
// is drawn, so the list begins with those that matter most; every one keeps its tick.
type Top struct {
	Label string // with unit, above the row; "" for none
	At    []float64
	Text  []string
}

// height is the room above the frame that it takes, mm.
func (t *Top) height() float64 {
	if t == nil {
		return 0
	}
	if t.Label == "" {
		return 2.5
	}
	return 6.5
}

func (p *pen) top(a *axes) {
	t := a.panel.Top
	if t == nil {
		return
	}
	f := a.frame
	st := textStyle{size: tickSize, anchor: 0.5}
	var taken [][2]float64
	for i := range min(len(t.At), len(t.Text)) {
		if !a.panel.X.usable(t.At[i]) {
			continue
		}
		x := a.x.place(t.At[i])
		if x < f.x0-0.01 || x > f.x1+0.01 {
			continue
		}
		p.line([]xy{{x, f.y1}, {x, f.y1 - tickLength}}, frameWidth, Solid, Black)
		w := textWidth(t.Text[i], st)/2 + 0.6
		free := true
		for _, o := range taken {
			free = free && (x+w < o[0] || x-w > o[1])
		}
		if free {
			taken = append(taken, [2]float64{x - w, x + w})
			p.text(t.Text[i], x, f.y1+labelGap, st)
		}
	}
	if t.Label != "" {
		mid := textStyle{size: labelSize, anchor: 0.5}
		p.text(clipText(t.Label, a.cell.width()-2, mid), (f.x0+f.x1)/2, f.y1+labelGap+4, mid)
	}
}
