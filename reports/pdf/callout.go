package pdf

import "phaselag/reports/figure"

const (
	calloutInset = 4.0
	calloutPad   = 1.6
)

var calloutTitle = style{size: 9.5, bold: true}

// calloutHeight returns the height of a callout on one page.
func (b *builder) calloutHeight(c figure.Callout) float64 {
	width := measure - calloutInset - 2
	h := 2*calloutPad + float64(len(b.text.lines(calloutHead(c), calloutTitle, width)))*calloutTitle.height()
	if c.Text != "" {
		h += float64(len(b.text.lines(c.Text, bodyStyle, width))) * bodyStyle.height()
	}
	for _, f := range c.Facts {
		// names are short; their values decide
		h += float64(len(b.text.lines(f.Value, smallStyle, 0.65*width-4)))*smallStyle.height() + 0.5
	}
	return h + blockGap
}

// callout sets a bar in the colour of the grade, with the text beside it; a
// long one runs over pages and the bar with it.
func (b *builder) callout(c figure.Callout) {
	if h := b.calloutHeight(c); h < b.page.bottom-top {
		b.need(h)
	}
	width := measure - calloutInset - 2
	start, page := b.y, b.pdf.PageNo()
	bar := func(from, to float64) {
		b.fill(c.Grade.Colour())
		b.pdf.Rect(b.page.left, from, 1.2, to-from, "F")
	}
	b.y += calloutPad
	step := func(lines []line, st style) {
		for _, l := range lines {
			if b.y+st.height() > b.page.bottom {
				bar(start, b.y)
				b.newPage()
				start, page = b.y, b.pdf.PageNo()
			}
			b.text.draw(l, st, b.page.left+calloutInset, b.y)
			b.y += st.height()
		}
	}
	step(b.text.lines(calloutHead(c), calloutTitle, width), calloutTitle)
	if c.Text != "" {
		step(b.text.lines(c.Text, bodyStyle, width), bodyStyle)
	}
	if len(c.Facts) > 0 {
		b.facts(c.Facts, b.page.left+calloutInset, width)
		if b.pdf.PageNo() != page { // facts went on by themselves
			start = top
		}
	}
	b.y += calloutPad
	bar(start, min(b.y, b.page.bottom))
	b.y += blockGap
}

// calloutHead puts the grade in words in front: colour alone says nothing to
// some readers.
func calloutHead(c figure.Callout) string {
	switch {
	case c.Title == "":
		return string(c.Grade)
	case c.Grade == "":
		return c.Title
	}
	return string(c.Grade) + ": " + c.Title
}
