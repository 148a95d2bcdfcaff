package unit

import (
	"strings"
	"unicode"
)

// normalizer maps the spellings in which programs and people leave a unit to
// one. "Â°" and "Â²" are what UTF-8 becomes when it is read as Windows-1252;
// U+FFFD before C or F is what a degree sign becomes when it is read the other
// way round.
var normalizer = strings.NewReplacer(
	"Â°", "°", "Âº", "°", "Â²", "2", "Â³", "3", "Âµ", "µ", "Â·", "·", "Î¼", "µ",
	"\ufffdC", "°C", "\ufffdF", "°F",
	"º", "°", "˚", "°", "∘", "°", "℃", "°C", "℉", "°F",
	"μ", "µ",
	"²", "2", "³", "3", "¹", "1", "⁻", "-", "^", "", "**", "",
	"−", "-", "–", "-", "‐", "-", "‑", "-", "﹣", "-", "－", "-",
	"⋅", "·", "∙", "·", "•", "·", "×", "·", "*", "·",
	"∕", "/", "⁄", "/", "％", "%",
)

// normalize brings a unit to the form in which the table is searched: one
// spelling a character, "per" as a slash, no blanks.
func normalize(symbol string) string {
	s := strings.TrimSpace(symbol)
	s = strings.ReplaceAll(s, " per ", "/")
	s = normalizer.Replace(s)
	s = strings.Map(func(r rune) rune {
		if unicode.IsSpace(r) || r == '\ufeff' || r == '\u200b' {
			return -1
		}
		return r
	}, s)
	// A full stop between units is a product: Pa.s.
	if i := strings.IndexByte(s, '.'); i > 0 && i < len(s)-1 {
		s = strings.ReplaceAll(s, ".", "·")
	}
	return strings.TrimSuffix(s, ".")
}

// Lookup finds a unit of a quantity by its symbol in any of the usual
// spellings. Capitals count (mN is not MN), but a symbol that is written
// altogether in small letters or altogether in capitals is accepted where only
// one unit of the quantity reads so: "mpa", "HZ".
func Lookup(symbol string, q Quantity) (Unit, bool) {
	s := normalize(symbol)
	if s == "" {
		return Unit{}, false
	}
	for _, u := range units {
		if u.Quantity == q && u.spelled(s, func(a, b string) bool { return a == b }) {
			return u, true
		}
	}
	if s != strings.ToLower(s) && s != strings.ToUpper(s) {
		return Unit{}, false
	}
	var found Unit
	n := 0
	for _, u := range units {
		if u.Quantity == q && u.spelled(s, strings.EqualFold) {
			found = u
			n++
		}
	}
	return found, n == 1
}

func (u Unit) spelled(s string, same func(a, b string) bool) bool {
	if same(normalize(u.Symbol), s) {
		return true
	}
	for _, alias := range u.spellings {
		if same(alias, s) {
			return true
		}
	}
	return false
}

// Known reports whether symbol is a unit of any quantity, and of which ones, in
// the order of the table.
func Known(symbol string) []Quantity {
	var qs []Quantity
	for i, u := range units {
		if i > 0 && units[i-1].Quantity == u.Quantity {
			continue
		}
		if _, ok := Lookup(symbol, u.Quantity); ok {
			qs = append(qs, u.Quantity)
		}
	}
	return qs
}
