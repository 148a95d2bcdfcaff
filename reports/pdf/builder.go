package pdf

import (
	"bytes"
	"fmt"

	"codeberg.org/go-pdf/fpdf"

	"phaselag/reports/figure"
)

// builder sets one block below the other.
type builder struct {
	pdf     *fpdf.Fpdf
	text    setter
	doc     figure.Document
	page    sheet
	pages   int
	y       float64 // mm from the top: where the next thing begins
	figures int     // numbered so far
	tables  int
}

var (
	bodyStyle    = style{size: 9.5}
	smallStyle   = style{size: 8}
	captionStyle = style{size: 8.5, colour: 0x303030}
	runStyle     = style{size: 7.5, colour: 0x666666}
	titleStyle   = style{size: 18, bold: true}
	headStyles   = [...]style{{size: 13, bold: true, colour: 0x12344D}, {size: 10.5, bold: true, colour: 0x12344D}}
)

const blockGap = 2.6 // mm, below a block

// newPage begins a page with its running lines.
func (b *builder) newPage() {
	b.pdf.AddPage()
	n := b.pdf.PageNo()
	if n > 1 {
		b.running(b.doc.Title, "", 12)
		b.rule(17, 0xBBBBBB)
	}
	foot := b.doc.Running
	if foot == "" {
		foot = b.doc.Title
	}
	b.rule(b.page.height-14, 0xBBBBBB)
	b.running(foot, fmt.Sprintf("page %d of %d", n, b.pages), b.page.height-12.5)
	b.y = top
}

// running sets a line at the head or foot: one text left, one right.
func (b *builder) running(start, end string, y float64) {
	room := measure - b.text.width(end, runStyle) - 5
	l := b.text.lines(start, runStyle, room)
	first := l[0]
	if len(l) > 1 {
		first.spans = append(first.spans[:len(first.spans):len(first.spans)], span{text: "…"})
	}
	b.text.draw(first, runStyle, b.page.left, y)
	if end != "" {
		l := b.text.lines(end, runStyle, measure)[0]
		b.text.draw(l, runStyle, b.page.right-l.width, y)
	}
}

func (b *builder) rule(y float64, c figure.Colour) {
	b.stroke(c)
	b.pdf.SetLineWidth(0.15)
	b.pdf.Line(b.page.left, y, b.page.right, y)
}

func (b *builder) stroke(c figure.Colour) {
	x, y, z := c.RGB()
	b.pdf.SetDrawColor(int(x), int(y), int(z))
}

func (b *builder) fill(c figure.Colour) {
	x, y, z := c.RGB()
	b.pdf.SetFillColor(int(x), int(y), int(z))
}

// need begins a new page where less than h mm are left, unless the page is
// still empty.
func (b *builder) need(h float64) {
	if b.y+h > b.page.bottom+1e-6 && b.y > top {
		b.newPage()
	}
}

func (b *builder) title() {
	if b.doc.Title == "" && b.doc.Subtitle == "" {
		return
	}
	b.y = 18
	b.logo()
	for _, l := range b.text.lines(b.doc.Title, titleStyle, measure) {
		b.text.draw(l, titleStyle, b.page.left, b.y)
		b.y += titleStyle.height()
	}
	if b.doc.Subtitle != "" {
		st := style{size: 11, colour: 0x555555}
		for _, l := range b.text.lines(b.doc.Subtitle, st, measure) {
			b.text.draw(l, st, b.page.left, b.y)
			b.y += st.height()
		}
	}
	b.y += 1.5
	b.stroke(0x12344D)
	b.pdf.SetLineWidth(0.5)
	b.pdf.Line(b.page.left, b.y, b.page.right, b.y)
	b.y += 4
}

// logoHeight is the height of a logo, mm; it is at most four times as wide.
const logoHeight = 14.0

// logo sets the laboratory's sign in the upper right corner, above the title.
func (b *builder) logo() {
	if b.doc.Logo == nil {
		return
	}
	options := fpdf.ImageOptions{ImageType: "PNG"}
	info := b.pdf.RegisterImageOptionsReader("logo", options, bytes.NewReader(b.doc.Logo))
	if b.pdf.Err() || info == nil || !(info.Height() > 0) {
		return // Bytes reports the library's error
	}
	height := logoHeight
	width := info.Width() / info.Height() * height
	if most := 4 * logoHeight; width > most {
		width, height = most, height*most/width
	}
	b.pdf.ImageOptions("logo", b.page.right-width, 9, width, height, false, options, 0, "")
	b.y = 9 + height + 3
}

func (b *builder) section(s figure.Section, level int) {
	st := headStyles[min(level, len(headStyles)-1)]
	if s.NewPage && b.y > top {
		b.newPage()
	}
	if s.Heading != "" {
		lines := b.text.lines(s.Heading, st, measure)
		h := float64(len(lines))*st.height() + 2
		if b.y > top {
			h += 3
		}
		b.need(h + b.least(s))
		if b.y > top {
			b.y += 3
		}
		b.pdf.SetFont(family, "", 9)
		b.pdf.Bookmark(printable(figure.Plain(s.Heading)), min(level, 1), b.y)
		for _, l := range lines {
			b.text.draw(l, st, b.page.left, b.y)
			b.y += st.height()
		}
		b.y += 2
	}
	b.blocks(s.Blocks)
	for _, sub := range s.Sections {
		b.section(sub, level+1)
	}
}

// least returns how much of what follows a heading must stand on its page.
func (b *builder) least(s figure.Section) float64 {
	if len(s.Blocks) == 0 {
		if len(s.Sections) > 0 {
			return 12 + b.least(s.Sections[0])
		}
		return 0
	}
	switch k := s.Blocks[0].(type) {
	case figure.Picture:
		return b.pictureHeight(k, measure)
	case figure.Row:
		return b.rowHeight(k)
	case figure.Grid:
		return 28
	case figure.Callout:
		return min(60, b.calloutHeight(k))
	}
	return 12
}

func (b *builder) blocks(list []figure.Block) {
	for _, k := range list {
		switch k := k.(type) {
		case figure.Paragraph:
			b.paragraph(k)
		case figure.List:
			b.list(k)
		case figure.Facts:
			b.facts(k.Items, b.page.left, measure)
			b.y += blockGap
		case figure.Grid:
			b.grid(k)
		case figure.Picture:
			b.row(figure.Row{Pictures: []figure.Picture{k}})
		case figure.Row:
			b.row(k)
		case figure.Callout:
			b.callout(k)
		}
	}
}

// flow sets lines one below the other over as many pages as it takes; two
// lines at least stay together. each is called with a page's share of lines.
func (b *builder) flow(lines []line, st style, x float64) {
	h := st.height()
	for i, l := range lines {
		keep := 1
		if len(lines) > 1 && (i == 0 || i == len(lines)-2) {
			keep = 2
		}
		b.need(float64(keep) * h)
		b.text.draw(l, st, x, b.y)
		b.y += h
	}
}

func (b *builder) paragraph(p figure.Paragraph) {
	st := bodyStyle
	if p.Small {
		st = smallStyle
	}
	var words [][]span
	if p.Lead != "" {
		words = b.text.words(p.Lead, st, true)
	}
	words = append(words, b.text.words(p.Text, st, false)...)
	if len(words) == 0 {
		return
	}
	b.flow(b.text.wrap(words, st, measure), st, b.page.left)
	b.y += blockGap
}

func (b *builder) list(k figure.List) {
	if len(k.Items) == 0 {
		return
	}
	indent := 5.0
	if k.Numbered {
		indent = 2.5 + b.text.width(fmt.Sprintf("%d.", len(k.Items)), bodyStyle)
	}
	for i, item := range k.Items {
		lines := b.text.lines(item, bodyStyle, measure-indent)
		b.need(float64(min(2, len(lines))) * bodyStyle.height())
		if k.Numbered {
			b.text.draw(b.text.lines(fmt.Sprintf("%d.", i+1), bodyStyle, measure)[0], bodyStyle, b.page.left, b.y)
		} else {
			b.fill(figure.Black)
			b.pdf.Circle(b.page.left+2, b.y+bodyStyle.height()/2, 0.5, "F")
		}
		b.flow(lines, bodyStyle, b.page.left+indent)
		b.y += 0.6
	}
	b.y += blockGap - 0.6
}

// facts sets names and values in two columns from x on.
func (b *builder) facts(items []figure.Fact, x, width float64) {
	st := smallStyle
	name := 0.0
	for _, f := range items {
		name = max(name, b.text.width(f.Name, st))
	}
	name = min(name, 0.35*width)
	for _, f := range items {
		names := b.text.lines(f.Name, style{size: st.size, colour: 0x555555}, name)
		values := b.text.lines(f.Value, st, width-name-4)
		for i := range max(len(names), len(values)) {
			b.need(st.height())
			if i < len(names) {
				b.text.draw(names[i], style{size: st.size, colour: 0x555555}, x, b.y)
			}
			if i < len(values) {
				b.text.draw(values[i], st, x+name+4, b.y)
			}
			b.y += st.height()
		}
		b.y += 0.5
	}
}
