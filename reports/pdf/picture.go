package pdf

import (
	"fmt"

	"phaselag/reports/figure"
)

const captionGap = 1.0

// shortest is the height of the text on the shortest paper, mm.
const shortest = 279.4 - 20 - top

// scale returns the magnification that lets a figure fit a width and a page.
func scale(f figure.Figure, width float64) float64 {
	w, h := f.Size()
	return min(1, width/w, (shortest-30)/h)
}

// share returns the width of each of n pictures in a row.
func share(n int) float64 { return (measure - 4*float64(n-1)) / float64(n) }

func (b *builder) caption(p figure.Picture, number int, width float64) []line {
	if p.Caption == "" {
		return nil
	}
	words := b.text.words(fmt.Sprintf("Figure %d.", number), captionStyle, true)
	return b.text.wrap(append(words, b.text.words(p.Caption, captionStyle, false)...), captionStyle, width)
}

func (b *builder) pictureHeight(p figure.Picture, width float64) float64 {
	_, h := p.Figure.Size()
	return h*scale(p.Figure, width) + captionGap + float64(len(b.caption(p, 10, width)))*captionStyle.height() + blockGap
}

func (b *builder) rowHeight(r figure.Row) float64 {
	h := 0.0
	for _, p := range r.Pictures {
		h = max(h, b.pictureHeight(p, share(len(r.Pictures))))
	}
	return h
}

// row sets pictures side by side, their captions below on one level.
func (b *builder) row(r figure.Row) {
	if len(r.Pictures) == 0 {
		return
	}
	b.need(b.rowHeight(r))
	width := share(len(r.Pictures))
	tallest, lines := 0.0, 0.0
	for _, p := range r.Pictures {
		_, h := p.Figure.Size()
		tallest = max(tallest, h*scale(p.Figure, width))
	}
	for i, p := range r.Pictures {
		x := b.page.left + float64(i)*(width+4)
		s := scale(p.Figure, width)
		w, _ := p.Figure.Size()
		drawFigure(b.pdf, p.Figure, x+(width-w*s)/2, b.y, s)
		if p.Caption == "" {
			continue
		}
		b.figures++
		at := b.y + tallest + captionGap
		for j, l := range b.caption(p, b.figures, width) {
			b.text.draw(l, captionStyle, x, at+float64(j)*captionStyle.height())
			lines = max(lines, float64(j+1))
		}
	}
	b.y += tallest + captionGap + lines*captionStyle.height() + blockGap + 1
}
