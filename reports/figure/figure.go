package figure

import "math"

// Figure is one figure of one or several panels.
type Figure struct {
	Width, Height float64 // mm; 0: 160 × 95
	// Columns is the number of panels side by side; 0: all in one row.
	Columns int
	Panels  []Panel
	// Shared puts one legend for all panels at the right of the figure.
	Shared bool
	// Alt says in a sentence what there is to see, for those who cannot see
	// it. "" leaves the figure with its panels' titles.
	Alt string
}

// Panel is one pair of axes with what is drawn between them.
type Panel struct {
	Title string // above the frame; "" for none
	X, Y  Axis
	// Right is a second vertical axis at the right, for the series marked
	// Right; nil for none.
	Right *Axis
	// Top is a row of labels above the frame; nil for none.
	Top    *Top
	Areas  []Area // under the data
	Series []Series
	Lines  []Reference
	// Notes are short lines of text in a free corner of the frame.
	Notes []string
	// Legend says where the names of the series stand.
	Legend Placement
}

// Axis is one axis of a panel.
type Axis struct {
	Label string // with unit, for example "storage modulus G′ (MPa)"
	Log   bool
	// Min and Max fix the range. NaN leaves an end to the data, rounded
	// outwards to whole decades or round numbers; both zero stand for NaN. A
	// fixed end that is no number of the axis (not positive on a logarithmic
	// one) counts as NaN.
	Min, Max float64
}

// Auto is an axis whose range follows the data.
func Auto(label string, log bool) Axis {
	return Axis{Label: label, Log: log, Min: math.NaN(), Max: math.NaN()}
}

// Series is one set of points, one curve, or both.
type Series struct {
	// Name stands in the legend; "" keeps the series out of it. Series of the
	// same name share one entry, for example a curve and its points.
	Name string
	// Mark stands on the line itself, in a gap of it, once for each stretch that has the
	// room; "" for none.
	Mark string
	X, Y []float64
	// Low and High bound a band round the curve; nil for none. A NaN is a gap.
	// On a logarithmic axis a Low that is not positive reaches down to the
	// axis.
	Low, High []float64
	// YError holds half the length of each error bar; nil or NaN for none.
	YError []float64
	Right  bool // measured on Panel.Right
	Line   Dash
	Width  float64 // pt, of the line; 0: 1.1
	Glyph  Glyph
	Hollow bool    // glyphs with white inside: points that were left out, or measured apart
	Size   float64 // mm, of a glyph across; 0: 1.5
	Colour Colour
}

// Reference is a line across the frame, at one abscissa or one ordinate.
type Reference struct {
	Vertical bool
	At       float64
	Label    string // small text beside the line; "" for none
	Right    bool   // a horizontal line that is measured on Panel.Right
	Line     Dash   // NoLine: Dashed
	Colour   Colour // black: grey
}

// Dash is the pattern of a line. The zero value draws none.
type Dash int

// The dash patterns.
const (
	NoLine Dash = iota
	Solid
	Dashed
	Dotted
	DashDot
)

// dashes are the lengths of ink and gap in points.
var dashes = [...][]float64{nil, nil, {4.5, 2.2}, {1.1, 1.7}, {5.5, 1.8, 1.1, 1.8}}

// Placement says where a legend stands.
type Placement int

// The placements. Inside looks for a place free of data and goes outside, at
// the right of the frame, where there is none or the entries are too many.
const (
	Inside Placement = iota
	Outside
	NoLegend
)

func (f Figure) size() (w, h float64) {
	w, h = f.Width, f.Height
	if !(w > 0) || math.IsInf(w, 0) {
		w = 160
	}
	if !(h > 0) || math.IsInf(h, 0) {
		h = 95
	}
	return math.Max(w, 40), math.Max(h, 30)
}

// Size returns the width and height in millimetres that are really used.
func (f Figure) Size() (width, height float64) { return f.size() }

// grid returns the number of columns and rows of panels.
func (f Figure) grid() (columns, rows int) {
	n := max(len(f.Panels), 1)
	columns = f.Columns
	if columns <= 0 || columns > n {
		columns = n
	}
	return columns, (n + columns - 1) / columns
}

// AltText returns Alt, or what the panels' titles and labels say where it is
// empty; never "". Markup is taken off.
func (f Figure) AltText() string {
	if f.Alt != "" {
		return Plain(f.Alt)
	}
	text := ""
	for _, p := range f.Panels {
		part := p.Title
		if part == "" && (p.X.Label != "" || p.Y.Label != "") {
			part = p.Y.Label + " against " + p.X.Label
		}
		if part == "" {
			continue
		}
		if text != "" {
			text += "; "
		}
		text += part
	}
	if text == "" {
		return "figure"
	}
	return Plain(text)
}
