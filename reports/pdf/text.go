package pdf

import (
	"strings"

	"codeberg.org/go-pdf/fpdf"

	"phaselag/reports/figure"
)

// style is how text is set.
type style struct {
	size   float64 // pt
	bold   bool
	colour figure.Colour
	line   float64 // height of a line, mm; 0: 1.35 times the size
}

func (s style) height() float64 {
	if s.line > 0 {
		return s.line
	}
	return 1.35 * s.size * point
}

// Scripts are 0.7 of the size, as in figures.
const (
	scriptSize = 0.7
	superShift = 0.34
	subShift   = -0.14
)

// span is a stretch of text of one face on one level.
type span struct {
	text  string
	level figure.Level
	bold  bool
	width float64
}

// line is what stands in one line.
type line struct {
	spans []span
	width float64
}

// setter measures and draws text.
type setter struct{ pdf *fpdf.Fpdf }

func (t setter) face(s style, level figure.Level, bold bool) {
	size, face := s.size, ""
	if level != figure.OnLine {
		size *= scriptSize
	}
	if bold || s.bold {
		face = "B"
	}
	t.pdf.SetFont(family, face, size)
}

func (t setter) measure(s style, p span) float64 {
	t.face(s, p.level, p.bold)
	return t.pdf.GetStringWidth(p.text)
}

// words cuts marked-up text at its blanks; a word may have several spans.
// An empty word stands for a forced end of line.
func (t setter) words(text string, s style, bold bool) [][]span {
	var out [][]span
	var word []span
	flush := func() {
		if word != nil {
			out = append(out, word)
		}
		word = nil
	}
	for _, p := range figure.Pieces(text) {
		if p.Level != figure.OnLine {
			sp := span{text: printable(p.Text), level: p.Level, bold: bold}
			sp.width = t.measure(s, sp)
			word = append(word, sp)
			continue
		}
		for i, row := range strings.Split(p.Text, "\n") {
			if i > 0 {
				flush()
				out = append(out, nil)
			}
			for j, w := range strings.FieldsFunc(row, func(r rune) bool { return r == ' ' || r == '\t' || r == '\r' }) {
				if j > 0 || startsBlank(row) {
					flush()
				}
				sp := span{text: printable(w), bold: bold}
				sp.width = t.measure(s, sp)
				word = append(word, sp)
			}
			if endsBlank(row) {
				flush()
			}
		}
	}
	flush()
	return out
}

func startsBlank(s string) bool { return s != "" && (s[0] == ' ' || s[0] == '\t') }
func endsBlank(s string) bool   { return s != "" && (s[len(s)-1] == ' ' || s[len(s)-1] == '\t') }

// wrap breaks words into lines of a width. A word wider than a line is cut,
// after a sign that separates its parts where there is one.
func (t setter) wrap(words [][]span, s style, width float64) []line {
	blank := t.measure(s, span{text: " "})
	var out []line
	var now line
	flush := func() {
		out = append(out, now)
		now = line{}
	}
	for i := 0; i < len(words); i++ {
		word := words[i]
		if word == nil {
			flush()
			continue
		}
		w := 0.0
		for _, p := range word {
			w += p.width
		}
		gap := 0.0
		if len(now.spans) > 0 {
			gap = blank
		}
		if now.width+gap+w > width+1e-6 && len(now.spans) > 0 {
			flush()
			gap = 0
		}
		if w > width+1e-6 {
			head, tail := t.cut(word, s, width)
			if len(tail) > 0 {
				words = append(words[:i:i], append([][]span{head, tail}, words[i+1:]...)...)
				i--
				continue
			}
		}
		if gap > 0 {
			now.spans = append(now.spans, span{text: " ", width: blank, bold: word[0].bold})
		}
		now.spans = append(now.spans, word...)
		now.width += gap + w
	}
	if len(now.spans) > 0 || len(out) == 0 {
		flush()
	}
	return out
}

// cut splits a word so that its head fits the width; at least one character
// stays in the head.
func (t setter) cut(word []span, s style, width float64) (head, tail []span) {
	used := 0.0
	for i, p := range word {
		if used+p.width <= width {
			used += p.width
			continue
		}
		runes := []rune(p.text)
		n, good := 0, 0
		for n < len(runes) {
			w := t.measure(s, span{text: string(runes[:n+1]), level: p.level, bold: p.bold})
			if used+w > width {
				break
			}
			n++
			if strings.ContainsRune("/\\_-.,;:=&?", runes[n-1]) {
				good = n
			}
		}
		if good > n/2 {
			n = good
		}
		if n == 0 && i == 0 {
			n = 1
		}
		part := func(r []rune) []span {
			if len(r) == 0 {
				return nil
			}
			sp := span{text: string(r), level: p.level, bold: p.bold}
			sp.width = t.measure(s, sp)
			return []span{sp}
		}
		head = append(append([]span(nil), word[:i]...), part(runes[:n])...)
		tail = append(part(runes[n:]), word[i+1:]...)
		return head, tail
	}
	return word, nil
}

// lines wraps marked-up text.
func (t setter) lines(text string, s style, width float64) []line {
	return t.wrap(t.words(text, s, false), s, width)
}

// draw sets a line with its upper edge at y; stretches of one face go into one
// string, so that searching finds phrases.
func (t setter) draw(l line, s style, x, y float64) {
	r, g, b := s.colour.RGB()
	t.pdf.SetTextColor(int(r), int(g), int(b))
	base := y + (s.height()+0.7*s.size*point)/2
	for i := 0; i < len(l.spans); {
		p := l.spans[i]
		text, width := p.text, p.width
		for i++; i < len(l.spans) && l.spans[i].level == p.level && l.spans[i].bold == p.bold; i++ {
			text += l.spans[i].text
			width += l.spans[i].width
		}
		shift := 0.0
		switch p.level {
		case figure.Super:
			shift = superShift * s.size * point
		case figure.Sub:
			shift = subShift * s.size * point
		}
		t.face(s, p.level, p.bold)
		t.pdf.Text(x, base-shift, text)
		x += width
	}
}

// width returns the width of marked-up text on one line.
func (t setter) width(text string, s style) float64 {
	w := 0.0
	for _, p := range figure.Pieces(text) {
		w += t.measure(s, span{text: printable(p.Text), level: p.Level})
	}
	return w
}
