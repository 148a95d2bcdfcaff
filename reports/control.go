package reports

import (
	"fmt"
	"math"

	"phaselag/fitting/quality"
	"phaselag/reports/figure"
	"phaselag/reports/table"
)

// A control chart for people: one figure a property, with a panel for each of its charts
// (usually the values above and their scatter below). The panels share the abscissa, which
// counts the batches in the order of testing; their names stand above as far as there is
// room. What a point is can be told by its glyph alone.

const (
	controlWidth = 170.0 // mm, of the figure
	controlPanel = 74.0  // mm, height of the first panel
	controlNext  = 62.0  // mm, of each further one
	// The room of the names, mm: the figure less its margins and the legend at the right.
	controlNames = 115.0
	nameSize     = 7.5 * 25.4 / 72 // mm, a little more than the type of the ticks
	longestName  = 14              // characters
)

// ControlFigure draws the charts of one property of a series of batches. The caption says
// what the limits rest on and what there is to doubt. Charts without lines are left out.
func ControlFigure(property, unit string, charts ...*quality.Chart) (f figure.Figure, caption string) {
	f = figure.Figure{Width: controlWidth, Columns: 1, Shared: true}
	for _, c := range charts {
		if c == nil || len(c.Lines) == 0 {
			continue
		}
		p := controlFrame(property, unit, c)
		if len(f.Panels) == 0 {
			p.Top = batchNames(c.Lines)
			f.Height = controlPanel
			f.Alt = fmt.Sprintf("control chart of %s over %s; %s", property, amount(len(c.Lines), "batch", "batches"), calledText(c))
			caption = fmt.Sprintf("Control chart of %s in the order of testing, %s.", property, calledText(c))
			if c.Base > 0 {
				caption += fmt.Sprintf(" The limits rest on the first %s, sigma %s of a single value from the %s; bars: U95.", amount(c.Base, "point", "points"), figure.Readable(table.Significant(c.Sigma, 3)), c.From)
			} else {
				caption += " Centre line and sigma are given, not taken from these batches; bars: U95."
			}
			for _, d := range c.Doubts {
				caption += " To be doubted: " + d + "."
			}
		} else {
			f.Height += controlNext
		}
		f.Panels = append(f.Panels, p)
	}
	return f, caption
}

func amount(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}

func calledText(c *quality.Chart) string {
	if n := c.Called(); n > 0 {
		return amount(n, "point called out", "points called out")
	}
	return "no point called out"
}

// controlFrame draws one chart.
func controlFrame(property, unit string, c *quality.Chart) figure.Panel {
	label := property
	switch c.Kind {
	case "individuals", "averages":
	default:
		label = c.Kind // of the same property: the panel above says which
		if c.Kind == "EWMA" {
			label = "EWMA of " + property
		}
	}
	if unit != "" {
		label += " (" + unit + ")"
	}
	// Twelve places at least, so that the ticks are whole numbers.
	p := figure.Panel{
		X:      figure.Axis{Label: "batch, in the order of testing", Min: 0, Max: math.Max(12, float64(len(c.Lines)+1))},
		Y:      figure.Auto(label, false),
		Legend: figure.NoLegend,
	}
	limits := controlSteps(c.Lines)
	for i, s := range limits {
		s.Width, s.Line, s.Colour = 0.7, figure.Dashed, figure.Black
		s.Name = "control limits"
		if i == 1 {
			s.Line, s.Name, s.Colour = figure.Solid, "centre line", figure.Grey
		}
		if !noNumbers(s.Y) {
			p.Series = append(p.Series, s)
		}
	}
	p.Series = append(p.Series, controlPoints(c.Lines)...)
	if last := lastBase(c.Lines); last > 0 && last < len(c.Lines) {
		p.Lines = append(p.Lines, figure.Reference{Vertical: true, At: float64(last) + 0.5, Line: figure.Dotted, Label: "base ends"})
	}
	return p
}

// controlSteps are lower limit, centre line and upper limit as stairs, half a place to
// either side of each point, since the limits of batches of unequal size differ.
func controlSteps(lines []quality.Line) [3]figure.Series {
	var out [3]figure.Series
	for i, l := range lines {
		x := float64(i + 1)
		for k, v := range [3]float64{l.Lower, l.Centre, l.Upper} {
			out[k].X, out[k].Y = append(out[k].X, x-0.5, x+0.5), append(out[k].Y, v, v)
		}
	}
	return out
}

func isNumber(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }

func noNumbers(v []float64) bool {
	for _, y := range v {
		if isNumber(y) {
			return false
		}
	}
	return true
}

func lastBase(lines []quality.Line) int {
	for i := len(lines) - 1; i >= 0; i-- {
		if lines[i].Base {
			return i + 1
		}
	}
	return 0
}

// controlPoints is the line through the points, and the points by what they are. Kinds
// that do not occur keep their place in the legend, so that all charts have one width.
func controlPoints(lines []quality.Line) []figure.Series {
	kinds := []figure.Series{
		{Line: figure.Solid, Width: 0.4, Colour: figure.Grey},
		{Name: "in control", Glyph: figure.Circle, Colour: figure.Blue, Size: 1.5},
		{Name: "completes a pattern", Glyph: figure.Triangle, Colour: figure.Purple, Size: 2.2},
		{Name: "beyond a limit", Glyph: figure.Diamond, Colour: figure.Vermillion, Size: 2.4},
		{Name: "… by less than U95", Glyph: figure.Diamond, Hollow: true, Colour: figure.Vermillion, Size: 2.4},
	}
	for i, l := range lines {
		x := float64(i + 1)
		k := 1
		for _, v := range l.Violations {
			switch {
			case v == quality.Beyond && l.Doubtful:
				k = 4
			case v == quality.Beyond:
				k = 3
			case k == 1:
				k = 2
			}
		}
		kinds[0].X, kinds[0].Y = append(kinds[0].X, x), append(kinds[0].Y, l.Value)
		if isNumber(l.Value) {
			kinds[k].X, kinds[k].Y, kinds[k].YError = append(kinds[k].X, x), append(kinds[k].Y, l.Value), append(kinds[k].YError, l.U95)
		}
	}
	return kinds
}

// batchNames is the row of names: those of points beyond a limit first, then every
// first, second, fifth … as the longest of them has room; what still meets is left out by
// the row itself.
func batchNames(lines []quality.Line) *figure.Top {
	t := &figure.Top{}
	widest := 0.0
	name := func(i int) string { return shortName(lines[i].Name) }
	for i := range lines {
		widest = math.Max(widest, figure.Em(name(i))*nameSize+1.5)
	}
	add := func(i int) {
		if n := name(i); n != "" {
			t.At, t.Text = append(t.At, float64(i+1)), append(t.Text, n)
		}
	}
	beyond := func(i int) bool {
		for _, v := range lines[i].Violations {
			if v == quality.Beyond {
				return true
			}
		}
		return false
	}
	for i := range lines {
		if beyond(i) {
			add(i)
		}
	}
	step := nameStep(math.Max(12, float64(len(lines)+1)), widest)
	for i := 0; i < len(lines); i += step {
		if !beyond(i) {
			add(i)
		}
	}
	if len(t.At) == 0 {
		return nil
	}
	t.Label = "batch"
	return t
}

// nameStep is the least of 1, 2, 5, 10 … places that names so wide need.
func nameStep(places, widest float64) int {
	need := widest * places / controlNames
	for step := 1; ; step *= 10 {
		for _, k := range [...]int{1, 2, 5} {
			if float64(k*step) >= need {
				return k * step
			}
		}
	}
}

// shortName keeps the end of a name, where those of a series differ.
func shortName(s string) string {
	r := []rune(s)
	if len(r) > longestName {
		return "…" + string(r[len(r)-longestName+1:])
	}
	return s
}

// WithSpecification draws the limits of a specification into the first panel of a control
// figure of n batches, in their own dash: they are what the customer wants, and not what
// the process does.
func WithSpecification(f figure.Figure, l quality.Limits, n int) figure.Figure {
	if len(f.Panels) == 0 {
		return f
	}
	f.Panels = append([]figure.Panel{}, f.Panels...)
	p := &f.Panels[0]
	p.Series = append([]figure.Series{}, p.Series...)
	for _, y := range []float64{l.Lower, l.Upper} {
		if !math.IsNaN(y) && !math.IsInf(y, 0) {
			p.Series = append(p.Series, figure.Series{Name: "specification limits", X: []float64{0.5, float64(n) + 0.5}, Y: []float64{y, y}, Line: figure.DashDot, Colour: figure.Vermillion})
		}
	}
	return f
}
