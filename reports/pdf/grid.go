package pdf

import (
	"fmt"

	"phaselag/reports/figure"
	"phaselag/reports/table"
)

var (
	cellStyle = style{size: 8}
	headStyle = style{size: 8, bold: true}
	unitStyle = style{size: 8, colour: 0x555555}
)

const (
	cellPad = 1.4 // mm, left and right of a cell's text
	rowPad  = 0.7 // above and below
)

// columns finds the widths of a table's columns.
//
// Each column wants the width of its longest cell and needs that of its
// longest word, at most a third of the page (longer words are cut). Where the
// wishes fit, they are granted; else what is left above the needs is shared in
// proportion to what is wanted beyond them; needs that do not fit shrink alike.
func (b *builder) columns(g figure.Grid) []float64 {
	n := len(g.Columns)
	want, need := make([]float64, n), make([]float64, n)
	look := func(j int, text string, st style) {
		want[j] = max(want[j], b.text.width(text, st)+2*cellPad)
		for _, w := range b.text.words(text, st, false) {
			sum := 0.0
			for _, p := range w {
				sum += p.width
			}
			need[j] = max(need[j], min(sum+2*cellPad, measure/3))
		}
	}
	for j, c := range g.Columns {
		look(j, c.Heading, headStyle)
		look(j, c.Unit, unitStyle)
		if c.Number {
			before, after := b.points(g, j)
			want[j] = max(want[j], before+after+2*cellPad)
			need[j] = max(need[j], before+after+2*cellPad)
		}
		for _, row := range g.Rows {
			if j < len(row) {
				look(j, row[j], cellStyle)
			}
		}
	}
	wanted, needed := 0.0, 0.0
	for j := range n {
		want[j] = max(want[j], need[j]) + 0.01
		wanted, needed = wanted+want[j], needed+need[j]
	}
	switch {
	case wanted <= measure:
		if wanted > 0.7*measure { // nearly as wide as the page: as wide
			for j := range want {
				want[j] *= measure / wanted
			}
		}
		return want
	case needed <= measure:
		for j := range want {
			need[j] += (measure - needed) * (want[j] - need[j]) / (wanted - needed)
		}
		return need
	}
	for j := range need {
		need[j] *= measure / needed
	}
	return need
}

// points returns the largest widths in front of and behind the decimal points
// of a column.
func (b *builder) points(g figure.Grid, j int) (before, after float64) {
	for _, row := range g.Rows {
		if j >= len(row) {
			continue
		}
		if whole, rest, ok := table.SplitPoint(row[j]); ok {
			before = max(before, b.text.width(whole, cellStyle))
			after = max(after, b.text.width(rest, cellStyle))
		}
	}
	return before, after
}

// grid sets a table; its heading is repeated on every page.
func (b *builder) grid(g figure.Grid) {
	if len(g.Columns) == 0 {
		return
	}
	widths := b.columns(g)
	total := 0.0
	for _, w := range widths {
		total += w
	}
	after := make([]float64, len(g.Columns))
	head := make([][]line, len(g.Columns))
	headRows := 0
	for j, c := range g.Columns {
		head[j] = b.text.lines(c.Heading, headStyle, widths[j]-2*cellPad)
		headRows = max(headRows, len(head[j]))
		if c.Number {
			_, after[j] = b.points(g, j)
		}
	}
	units := make([][]line, len(g.Columns))
	unitRows := 0
	for j, c := range g.Columns {
		if c.Unit != "" {
			units[j] = b.text.lines(c.Unit, unitStyle, widths[j]-2*cellPad)
			unitRows = max(unitRows, len(units[j]))
		}
	}
	headHeight := float64(headRows+unitRows)*cellStyle.height() + 2*rowPad
	var caption []line
	if g.Caption != "" {
		b.tables++
		words := b.text.words(fmt.Sprintf("Table %d.", b.tables), captionStyle, true)
		caption = b.text.wrap(append(words, b.text.words(g.Caption, captionStyle, false)...), captionStyle, measure)
	}
	b.need(float64(len(caption))*captionStyle.height() + headHeight + 3*(cellStyle.height()+2*rowPad))
	b.flow(caption, captionStyle, b.page.left)
	if caption != nil {
		b.y++
	}
	heading := func() {
		b.fill(0xEDF1F4)
		b.pdf.Rect(b.page.left, b.y, total, headHeight, "F")
		x := b.page.left
		for j, c := range g.Columns {
			y := b.y + rowPad
			for _, part := range [2]struct {
				lines []line
				st    style
			}{{head[j], headStyle}, {units[j], unitStyle}} {
				for _, l := range part.lines {
					at := x + cellPad
					if c.Number {
						at = x + widths[j] - cellPad - l.width
					}
					b.text.draw(l, part.st, at, y)
					y += cellStyle.height()
				}
			}
			x += widths[j]
		}
		b.y += headHeight
		b.tableRule(total, 0x667788)
	}
	heading()
	for _, row := range g.Rows {
		b.gridRow(g, row, widths, after, total, heading)
	}
	if len(g.Rows) == 0 {
		b.text.draw(b.text.lines("no rows", unitStyle, measure)[0], unitStyle, b.page.left+cellPad, b.y+rowPad)
		b.y += cellStyle.height() + 2*rowPad
	}
	b.tableRule(total, 0x667788)
	b.y += blockGap + 1
}

func (b *builder) tableRule(width float64, c figure.Colour) {
	b.stroke(c)
	b.pdf.SetLineWidth(0.15)
	b.pdf.Line(b.page.left, b.y, b.page.left+width, b.y)
}

// gridRow sets one row. A row goes to the next page as a whole, unless it is
// taller than half a page: then it is continued there.
func (b *builder) gridRow(g figure.Grid, row []string, widths, after []float64, total float64, heading func()) {
	cells := make([][]line, len(widths))
	rows := 1
	for j := range widths {
		if j < len(row) {
			cells[j] = b.text.lines(row[j], cellStyle, widths[j]-2*cellPad)
			rows = max(rows, len(cells[j]))
		}
	}
	h := cellStyle.height()
	turn := func() {
		b.tableRule(total, 0x667788)
		b.newPage()
		heading()
	}
	if whole := float64(rows)*h + 2*rowPad; b.y+whole > b.page.bottom && (whole < (b.page.bottom-top)/2 || b.y+2*h+2*rowPad > b.page.bottom) {
		turn()
	}
	b.y += rowPad
	for i := range rows {
		if b.y+h+rowPad > b.page.bottom+1e-6 {
			turn()
			b.y += rowPad
		}
		x := b.page.left
		for j, w := range widths {
			if i < len(cells[j]) {
				l := cells[j][i]
				at := x + cellPad
				if g.Columns[j].Number {
					at = x + w - cellPad - l.width
					if whole, _, ok := table.SplitPoint(row[j]); ok && len(cells[j]) == 1 {
						at = x + w - cellPad - after[j] - b.text.width(whole, cellStyle)
					}
				}
				b.text.draw(l, cellStyle, at, b.y)
			}
			x += w
		}
		b.y += h
	}
	b.y += rowPad
	b.tableRule(total, 0xDDDDDD)
}
