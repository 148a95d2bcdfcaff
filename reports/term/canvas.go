package term

import (
	"math"
	"strings"
	"unicode"

	"golang.org/x/text/width"
)

// canvas is a raster of dots, two by four in a cell, and of signs over them.
//
// A Braille cell is U+2800 plus one bit for each dot: bits 0, 1, 2, 6 down the left
// column and 3, 4, 5, 7 down the right (The Unicode Standard, chapter Braille; from
// memory).
type canvas struct {
	width, rows int
	dots        []byte
	signs       []rune
}

var bits = [2][4]byte{{1 << 0, 1 << 1, 1 << 2, 1 << 6}, {1 << 3, 1 << 4, 1 << 5, 1 << 7}}

func newCanvas(width, rows int) *canvas {
	return &canvas{width, rows, make([]byte, width*rows), make([]rune, width*rows)}
}

// dot sets the dot at x from the left and y from the top.
func (c *canvas) dot(x, y int) {
	if x >= 0 && y >= 0 && x < 2*c.width && y < 4*c.rows {
		c.dots[y/4*c.width+x/2] |= bits[x%2][y%4]
	}
}

// row is one line of text.
func (c *canvas) row(r int) string {
	var b strings.Builder
	for i := r * c.width; i < (r+1)*c.width; i++ {
		switch {
		case c.signs[i] != 0:
			b.WriteRune(c.signs[i])
		case c.dots[i] != 0:
			b.WriteRune(0x2800 + rune(c.dots[i]))
		default:
			b.WriteByte(' ')
		}
	}
	return b.String()
}

// curve joins the points by straight lines in the dashes given, and returns the row in
// which its last part lies, −1 for none.
func (c *canvas) curve(s Series, x, y scale, dash string) int {
	w, h := float64(2*c.width-1), float64(4*c.rows-1)
	phase, last := 0, -1
	put := func(px, py float64) {
		col, line := int(math.Round(px*w)), int(math.Round((1-py)*h))
		if dash[phase%len(dash)] == '1' {
			c.dot(col, line)
		}
		phase++
		last = line / 4
	}
	have := false
	var ax, ay float64
	alone := true
	for i := range min(len(s.X), len(s.Y)) {
		if !x.usable(s.X[i]) || !y.usable(s.Y[i]) {
			have = false
			continue
		}
		bx, by := x.at(s.X[i]), y.at(s.Y[i])
		if have {
			if x0, y0, x1, y1, ok := clip(ax, ay, bx, by); ok {
				n := int(math.Ceil(math.Max(math.Abs(x1-x0)*w, math.Abs(y1-y0)*h)))
				for k := range n {
					t := float64(k) / float64(n)
					put(x0+t*(x1-x0), y0+t*(y1-y0))
				}
				if i == min(len(s.X), len(s.Y))-1 || x1 != bx || y1 != by {
					put(x1, y1) // else the next part begins there
				}
			}
			alone = false
		}
		ax, ay, have = bx, by, true
	}
	if alone && have && ax >= 0 && ax <= 1 && ay >= 0 && ay <= 1 {
		put(ax, ay)
	}
	return last
}

// points sets signs.
func (c *canvas) points(s Series, x, y scale, sign rune) {
	for i := range min(len(s.X), len(s.Y)) {
		if !x.usable(s.X[i]) || !y.usable(s.Y[i]) {
			continue
		}
		px, py := x.at(s.X[i]), y.at(s.Y[i])
		if px < 0 || px > 1 || py < 0 || py > 1 {
			continue
		}
		col := int(math.Round(px*float64(2*c.width-1))) / 2
		row := int(math.Round((1-py)*float64(4*c.rows-1))) / 4
		c.signs[row*c.width+col] = sign
	}
}

func (s scale) usable(v float64) bool { return Axis{Log: s.log}.usable(v) }

// clip returns the part of a line inside the unit square (Liang and Barsky 1984).
func clip(ax, ay, bx, by float64) (x0, y0, x1, y1 float64, ok bool) {
	t0, t1 := 0.0, 1.0
	dx, dy := bx-ax, by-ay
	for _, side := range [4][2]float64{{-dx, ax}, {dx, 1 - ax}, {-dy, ay}, {dy, 1 - ay}} {
		p, q := side[0], side[1]
		switch {
		case p == 0 && q < 0:
			return 0, 0, 0, 0, false
		case p < 0:
			t0 = math.Max(t0, q/p)
		case p > 0:
			t1 = math.Min(t1, q/p)
		}
	}
	if t0 > t1 {
		return 0, 0, 0, 0, false
	}
	x0, y0, x1, y1 = ax, ay, bx, by
	if t0 > 0 {
		x0, y0 = ax+t0*dx, ay+t0*dy
	}
	if t1 < 1 {
		x1, y1 = ax+t1*dx, ay+t1*dy
	}
	return x0, y0, x1, y1, true
}

// columns is the width of text in a terminal.
func columns(s string) int {
	n := 0
	for _, r := range s {
		n += cells(r)
	}
	return n
}

func cells(r rune) int {
	switch {
	case unicode.In(r, unicode.Mn, unicode.Me, unicode.Cf):
		return 0
	case width.LookupRune(r).Kind() == width.EastAsianWide, width.LookupRune(r).Kind() == width.EastAsianFullwidth:
		return 2
	}
	return 1
}

// clean turns control characters into spaces.
func clean(s string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsControl(r) || r == 0x2028 || r == 0x2029 {
			return ' '
		}
		return r
	}, s)
}

// cut cleans s and shortens it to n columns.
func cut(s string, n int) string {
	s = clean(s)
	if columns(s) <= n {
		return s
	}
	var b strings.Builder
	used := 0
	for _, r := range s {
		if used += cells(r); used > n-1 {
			break
		}
		b.WriteRune(r)
	}
	return b.String() + "…"
}
