package unit

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"phaselag/data/place"
)

// Parse reads one quantity with its unit, for example "23 °C", and returns its
// value in SI. Errors are *place.Error without a file, with the right units as
// the hint.
func Parse(text string, q Quantity) (float64, error) {
	x, symbol, err := Split(text)
	if err != nil {
		return math.NaN(), err
	}
	if symbol == "" {
		if x == 0 && q != Temperature && q != Hardness {
			return 0, nil
		}
		return math.NaN(), &place.Error{
			What: fmt.Sprintf("the unit is missing in %q", clip(text)),
			Hint: fmt.Sprintf("write for example %s %s; units of %s: %s", strings.TrimSpace(clip(text)), Preferred(q).Symbol, article(q), strings.Join(Symbols(q), ", ")),
		}
	}
	u, ok := Lookup(symbol, q)
	if !ok {
		return math.NaN(), wrongUnit(symbol, q)
	}
	return Convert(x, u)
}

// Convert gives x, in the unit u, in SI. It refuses what is not finite, and
// temperatures below 0 K.
func Convert(x float64, u Unit) (float64, error) {
	v := u.SI(x)
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return math.NaN(), &place.Error{What: fmt.Sprintf("%v %s is not a finite %s", x, u.Symbol, u.Quantity)}
	}
	if u.Quantity == Temperature && v < 0 {
		return math.NaN(), &place.Error{
			What: fmt.Sprintf("%v %s is below absolute zero", x, u.Symbol),
			Hint: "absolute zero is 0 K = -273.15 °C = -459.67 °F; check the sign and the unit",
		}
	}
	return v, nil
}

func wrongUnit(symbol string, q Quantity) error {
	e := &place.Error{
		What: fmt.Sprintf("%q is not a unit of %s", clip(symbol), article(q)),
		Hint: fmt.Sprintf("units of %s: %s", article(q), strings.Join(Symbols(q), ", ")),
	}
	if others := Known(symbol); len(others) > 0 {
		e.What = fmt.Sprintf("%q is a unit of %s, not of %s", clip(symbol), article(others[0]), article(q))
	} else if near := place.Nearest(symbol, Symbols(q)); near != "" {
		e.Hint = fmt.Sprintf("%s was perhaps meant; %s", near, e.Hint)
	}
	return e
}

// Split takes a quantity apart into its number and its unit, "" if there is
// none; the unit is as written, without blanks at its ends.
func Split(text string) (x float64, symbol string, err error) {
	s := plain(text)
	end := numberEnd(s)
	if end == 0 {
		return math.NaN(), "", &place.Error{
			What: fmt.Sprintf("%q is not a number with a unit", clip(text)),
			Hint: "write a number with a decimal point, then its unit, for example 23 °C or 0.2 %",
		}
	}
	rest := strings.TrimSpace(s[end:])
	if strings.HasPrefix(rest, ",") {
		return math.NaN(), "", &place.Error{
			What: fmt.Sprintf("a comma in the number of %q", clip(text)),
			Hint: "write numbers with a decimal point and without thousands separators",
		}
	}
	if rest != "" && rest[0] != '1' && rest[0] >= '0' && rest[0] <= '9' || strings.HasPrefix(rest, ".") {
		return math.NaN(), "", &place.Error{
			What: fmt.Sprintf("more than one number in %q", clip(text)),
			Hint: "write one number without blanks in it, then its unit",
		}
	}
	x, err = strconv.ParseFloat(s[:end], 64)
	if err != nil || math.IsInf(x, 0) {
		return math.NaN(), "", &place.Error{What: fmt.Sprintf("the number in %q is too large", clip(text))}
	}
	return x, rest, nil
}

// ParseNumber reads a number without a unit: digits with a decimal point,
// perhaps with an exponent; a typographic minus will do. Words such as "inf"
// and "nan" are refused.
func ParseNumber(text string) (float64, error) {
	x, rest, err := Split(text)
	switch {
	case err != nil:
		e := *err.(*place.Error)
		e.What = strings.Replace(e.What, "a number with a unit", "a number", 1)
		e.Hint = "write a number with a decimal point and without a unit"
		return math.NaN(), &e
	case rest != "":
		return math.NaN(), &place.Error{
			What: fmt.Sprintf("%q follows the number in %q", clip(rest), clip(text)),
			Hint: "this is a pure number: write it without a unit",
		}
	}
	return x, nil
}

var typographic = strings.NewReplacer("−", "-", "–", "-", "﹣", "-", "－", "-",
	"\u00a0", " ", "\u202f", " ", "\u2009", " ", "\u2007", " ", "\t", " ", "\ufeff", "")

// plain replaces typographic minus signs and blanks by plain ones.
func plain(text string) string {
	return strings.TrimSpace(typographic.Replace(text))
}

// numberEnd returns the length of the decimal number at the start of s, 0 if
// there is none. An e belongs to the number only if digits follow.
func numberEnd(s string) int {
	i, digits := 0, 0
	if i < len(s) && (s[i] == '-' || s[i] == '+') {
		i++
	}
	for i < len(s) && isDigit(s[i]) {
		i++
		digits++
	}
	if i < len(s) && s[i] == '.' {
		i++
		for i < len(s) && isDigit(s[i]) {
			i++
			digits++
		}
	}
	if digits == 0 {
		return 0
	}
	if i < len(s) && (s[i] == 'e' || s[i] == 'E') {
		j := i + 1
		if j < len(s) && (s[j] == '-' || s[j] == '+') {
			j++
		}
		if j < len(s) && isDigit(s[j]) {
			for j < len(s) && isDigit(s[j]) {
				j++
			}
			i = j
		}
	}
	return i
}

func isDigit(c byte) bool { return c >= '0' && c <= '9' }

// clip keeps hostile input out of messages.
func clip(s string) string {
	if r := []rune(s); len(r) > 40 {
		return string(r[:40]) + "…"
	}
	return s
}
