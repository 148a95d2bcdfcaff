package figure

import (
	"math"

	"codeberg.org/go-fonts/liberation/liberationsansbold"
	"codeberg.org/go-fonts/liberation/liberationsansregular"
	stdfont "golang.org/x/image/font"
	"golang.org/x/image/font/opentype"
	"golang.org/x/image/font/sfnt"
	"golang.org/x/image/math/fixed"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/vg"
)

// Type sizes in points. Scripts are drawn at 0.7 of the size, a third of it up
// or a sixth of it down.
const (
	tickSize   = 7.5
	labelSize  = 8.5
	titleSize  = 9
	scriptSize = 0.7
	superShift = 0.36
	subShift   = -0.16
	point      = 25.4 / 72 // mm
)

var (
	regular = mustParse("Regular", liberationsansregular.TTF, stdfont.WeightNormal)
	bold    = mustParse("Bold", liberationsansbold.TTF, stdfont.WeightBold)
)

func mustParse(name string, ttf []byte, weight stdfont.Weight) font.Face {
	f, err := opentype.Parse(ttf)
	if err != nil {
		panic("figure: built-in font " + name + ": " + err.Error())
	}
	return font.Face{Font: font.Font{Typeface: "Liberation", Variant: "Sans", Weight: weight}, Face: f}
}

// face returns the regular or bold face at a size in points.
func face(isBold bool, size float64) font.Face {
	f := regular
	if isBold {
		f = bold
	}
	f.Font.Size = vg.Length(size)
	return f
}

// advance returns the width of text in mm, without kerning: no back end kerns.
func advance(f font.Face, text string) float64 {
	var buf sfnt.Buffer
	em := float64(f.Face.UnitsPerEm())
	sum := 0.0
	for _, r := range text {
		g, err := f.Face.GlyphIndex(&buf, r)
		if err != nil {
			continue
		}
		a, err := f.Face.GlyphAdvance(&buf, g, fixed.Int26_6(f.Face.UnitsPerEm()), stdfont.HintingNone)
		if err != nil {
			continue
		}
		sum += float64(a) // at this size one unit of 26.6 is one font unit
	}
	return sum / em * float64(f.Font.Size) * point
}

// textStyle is how a piece of text is set.
type textStyle struct {
	size   float64 // pt
	bold   bool
	colour Colour
	turned bool    // by 90°, reading upwards
	angle  float64 // rad, anticlockwise, where not turned
	anchor float64 // 0: starts at the point, 0.5: centred on it, 1: ends there
	raise  float64 // of the baseline, in units of the size; −0.35 centres capitals on the point
}

// textWidth returns the width of marked-up text in mm.
func textWidth(s string, st textStyle) float64 {
	w := 0.0
	for _, p := range Pieces(s) {
		size := st.size
		if p.Level != OnLine {
			size *= scriptSize
		}
		w += advance(face(st.bold, size), p.Text)
	}
	return w
}

// Em returns the width of marked-up text in units of its size, in the regular
// face.
func Em(s string) float64 { return textWidth(s, textStyle{size: 1}) / point }

// text draws marked-up text at a point in mm.
func (p *pen) text(s string, x, y float64, st textStyle) {
	if s == "" {
		return
	}
	p.colour(st.colour)
	along := -st.anchor * textWidth(s, st)
	for _, piece := range Pieces(s) {
		size, shift := st.size, st.raise*st.size*point
		switch piece.Level {
		case Super:
			size, shift = size*scriptSize, shift+superShift*st.size*point
		case Sub:
			size, shift = size*scriptSize, shift+subShift*st.size*point
		}
		f := face(st.bold, size)
		if st.turned {
			p.c.Push()
			p.c.Translate(at(x-shift, y+along))
			p.c.Rotate(math.Pi / 2)
			p.c.FillString(f, vg.Point{}, piece.Text)
			p.c.Pop()
		} else if st.angle != 0 {
			p.c.Push()
			p.c.Translate(at(x, y))
			p.c.Rotate(st.angle)
			p.c.FillString(f, at(along, shift), piece.Text)
			p.c.Pop()
		} else {
			p.c.FillString(f, at(x+along, y+shift), piece.Text)
		}
		along += advance(f, piece.Text)
	}
}

// clipText shortens s, which then loses its markup, to at most width mm.
func clipText(s string, width float64, st textStyle) string {
	if textWidth(s, st) <= width {
		return s
	}
	runes := []rune(Plain(s))
	for len(runes) > 0 && textWidth(string(runes)+"…", st) > width {
		runes = runes[:len(runes)-1]
	}
	return string(runes) + "…"
}
