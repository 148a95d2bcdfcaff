package pdf

import (
	"strings"
	"unicode"

	"codeberg.org/go-fonts/liberation/liberationsansbold"
	"codeberg.org/go-fonts/liberation/liberationsansregular"
	"codeberg.org/go-pdf/fpdf"
	"golang.org/x/image/font/sfnt"
)

const (
	family = "sans"
	noSuch = '□' // for a character without a glyph
)

var regular = func() *sfnt.Font {
	f, err := sfnt.Parse(liberationsansregular.TTF)
	if err != nil {
		panic("pdf: built-in font: " + err.Error())
	}
	return f
}()

// addFonts registers the two faces; the bytes are copied because the subset is
// cut out of them in place.
func addFonts(pdf *fpdf.Fpdf) {
	pdf.AddUTF8FontFromBytes(family, "", append([]byte(nil), liberationsansregular.TTF...))
	pdf.AddUTF8FontFromBytes(family, "B", append([]byte(nil), liberationsansbold.TTF...))
}

// printable replaces what the fonts do not have.
func printable(s string) string {
	var buf sfnt.Buffer
	return strings.Map(func(r rune) rune {
		switch {
		case r == '\n' || r == '\t' || r == '\r':
			return ' '
		case r == '\u2007' || r == '\u2009' || r == '\u202f': // narrow blanks
			return '\u00a0'
		case unicode.IsControl(r) || unicode.In(r, unicode.Cf, unicode.Mn):
			return -1
		case r == '⌀': // the sign for a diameter, which the fonts lack
			return 'Ø'
		case r > 0xFFFF:
			return noSuch
		}
		if g, err := regular.GlyphIndex(&buf, r); err != nil || g == 0 {
			return noSuch
		}
		return r
	}, s)
}
