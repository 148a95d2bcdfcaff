package term

import (
	"errors"
	"fmt"
	"io"
	"math"
	"strings"
)

// Chart is one pair of axes with curves and points.
type Chart struct {
	// Width and Height are columns and lines in all, labels and legend included; 0: 80
	// and 24. The least are 40 and 10.
	Width, Height int
	Title         string // "" for none
	X, Y          Axis
	Series        []Series // at most MostSeries
}

// Axis is one axis.
type Axis struct {
	Label string // with unit
	Log   bool
	// Min and Max fix the range; NaN leaves an end to the data, and both 0 stand for NaN.
	Min, Max float64
}

// Series is a curve or a set of points; slices of unequal length are read up to the shorter.
type Series struct {
	Name   string // in the legend; "" keeps it out
	X, Y   []float64
	Points bool // signs instead of a curve
}

// MostSeries is how many series can be told apart.
const MostSeries = 6

// ErrNoData says that no point of any series has a place on the axes.
var ErrNoData = errors.New("term: there is nothing to draw: no point has a place on the axes")

// dashes say which of the following dots of a curve are set.
var dashes = [MostSeries]string{"1", "111100", "100", "11111001100", "1100000", "1111110000"}

// signs are the marks of points.
var signs = [MostSeries]rune{'o', '+', 'x', '*', '#', '@'}

func letter(i int) string { return string(rune('a' + i)) }

// Plot draws a chart. It returns an error for a chart that is too small or has too many
// series, ErrNoData where there is nothing to draw, and what w returns.
func Plot(w io.Writer, c Chart) error {
	if c.Width == 0 {
		c.Width = 80
	}
	if c.Height == 0 {
		c.Height = 24
	}
	if c.Width < 40 || c.Height < 10 {
		return fmt.Errorf("term: %d columns and %d lines are too few: at least 40 and 10", c.Width, c.Height)
	}
	if len(c.Series) > MostSeries {
		return fmt.Errorf("term: %d series are too many to be told apart: at most %d", len(c.Series), MostSeries)
	}
	x, okX := newScale(c.X, c.values(true))
	y, okY := newScale(c.Y, c.values(false))
	if !okX || !okY {
		return ErrNoData
	}
	legend := c.legend()
	head := 1 // the label of the vertical axis
	if c.Title != "" {
		head++
	}
	rows := c.Height - head - 3 - len(legend) // axis, its numbers, its label
	if rows < 3 {
		return fmt.Errorf("term: %d lines are too few for this chart: at least %d", c.Height, c.Height+3-rows)
	}
	yTicks := y.ticks(float64(rows) / 3)
	gutter := 0
	for _, t := range yTicks {
		gutter = max(gutter, columns(t.label))
	}
	keys := 0
	for _, s := range c.Series {
		if !s.Points {
			keys++
		}
	}
	width := c.Width - gutter - 2 - keys // the axis itself, and the letters at the right
	if keys > 0 {
		width--
	}
	if width < 16 {
		return fmt.Errorf("term: %d columns are too few for this chart: at least %d", c.Width, c.Width+16-width)
	}
	cv := newCanvas(width, rows)
	ends := make([]string, rows)
	for i, s := range c.Series {
		if s.Points {
			continue
		}
		if row := cv.curve(s, x, y, dashes[i]); row >= 0 {
			ends[row] += letter(i)
		}
	}
	for i, s := range c.Series {
		if s.Points {
			cv.points(s, x, y, signs[i])
		}
	}
	var out strings.Builder
	line := func(s string) { out.WriteString(strings.TrimRight(s, " ") + "\n") }
	if c.Title != "" {
		line(cut(c.Title, c.Width))
	}
	line(cut(strings.Repeat(" ", max(0, gutter-columns(clean(c.Y.Label))))+clean(c.Y.Label), c.Width))
	labels := make([]string, rows)
	for _, t := range yTicks {
		labels[rows-1-int(math.Round(y.at(t.value)*float64(rows-1)))] = t.label
	}
	for r := range rows {
		side := " │"
		if labels[r] != "" {
			side = " ┤"
		}
		text := strings.Repeat(" ", gutter-columns(labels[r])) + labels[r] + side + cv.row(r)
		if ends[r] != "" {
			text += " " + ends[r]
		}
		line(text)
	}
	axis, numbers := bottom(x, width, c.Width-gutter-2)
	line(strings.Repeat(" ", gutter) + " └" + axis)
	line(strings.Repeat(" ", gutter+2) + numbers)
	label := cut(c.X.Label, width)
	line(strings.Repeat(" ", gutter+2+(width-columns(label))/2) + label)
	for _, l := range legend {
		line(l)
	}
	_, err := io.WriteString(w, out.String())
	return err
}

// values returns the coordinates that have a place on both axes.
func (c Chart) values(ofX bool) []float64 {
	var out []float64
	for _, s := range c.Series {
		for i := range min(len(s.X), len(s.Y)) {
			if c.X.usable(s.X[i]) && c.Y.usable(s.Y[i]) {
				if ofX {
					out = append(out, s.X[i])
				} else {
					out = append(out, s.Y[i])
				}
			}
		}
	}
	return out
}

// legend returns the lines that name the series.
func (c Chart) legend() []string {
	var out []string
	now := ""
	for i, s := range c.Series {
		if s.Name == "" {
			continue
		}
		entry := fmt.Sprintf("%c  ", signs[i])
		if !s.Points {
			cv := newCanvas(5, 1)
			for d := range 10 {
				if dashes[i][d%len(dashes[i])] == '1' {
					cv.dot(d, 1)
				}
			}
			entry = letter(i) + " " + cv.row(0) + " "
		}
		entry = cut(entry+s.Name, c.Width-2)
		if now != "" && columns(now)+3+columns(entry) > c.Width {
			out, now = append(out, now), ""
		}
		if now == "" {
			now = "  " + entry
		} else {
			now += "   " + entry
		}
	}
	if now != "" {
		out = append(out, now)
	}
	return out
}

// bottom draws the horizontal axis of so many columns and its numbers, which may reach
// to room.
func bottom(x scale, width, room int) (axis, numbers string) {
	marks := []rune(strings.Repeat("─", width))
	text := []rune(strings.Repeat(" ", room))
	free := 0
	for _, t := range x.ticks(float64(width) / 10) {
		at := int(math.Round(x.at(t.value) * float64(width-1)))
		marks[at] = '┬'
		label := []rune(t.label)
		from := min(max(0, at-len(label)/2), room-len(label))
		if from < free {
			continue
		}
		copy(text[from:], label)
		free = from + len(label) + 1
	}
	return string(marks), string(text)
}
