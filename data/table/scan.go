package table

import "strings"

// form is how a cell is written as a number.
type form uint8

const (
	noNumber  form = iota
	whole          // without a decimal sign
	withPoint      // with a decimal point
	withComma      // with a decimal comma
)

// formOf tells how s is written: sign, digits with at most one decimal sign, and
// perhaps an exponent; a typographic minus will do.
func formOf(s string) form {
	i := skipSign(s, 0)
	digits, f := 0, whole
	for ; i < len(s); i++ {
		c := s[i]
		if c-'0' <= 9 {
			digits++
			continue
		}
		if (c != '.' && c != ',') || f != whole {
			break
		}
		f = withPoint
		if c == ',' {
			f = withComma
		}
	}
	if digits == 0 {
		return noNumber
	}
	if i < len(s) && (s[i] == 'e' || s[i] == 'E') {
		i = skipSign(s, i+1)
		if i == len(s) {
			return noNumber
		}
		for i < len(s) && s[i]-'0' <= 9 {
			i++
		}
	}
	if i < len(s) {
		return noNumber
	}
	return f
}

func skipSign(s string, i int) int {
	if i >= len(s) {
		return i
	}
	if s[i] == '+' || s[i] == '-' {
		return i + 1
	}
	if strings.HasPrefix(s[i:], "−") {
		return i + len("−")
	}
	return i
}

var powersOfTen = [...]float64{1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11,
	1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22}

// quick reads the plain numbers of which most tables consist: digits m and an
// exponent k with m < 2⁵³ and |k| ≤ 22, where m·10ᵏ or m/10ᵏ is one rounded
// operation on two exact numbers, and so the right float64 (Clinger 1990). ok is
// false for everything else, which goes the slow way.
func quick[T string | []byte](s T, decimal byte) (x float64, ok bool) {
	i := 0
	negative := false
	if len(s) > 0 && (s[0] == '-' || s[0] == '+') {
		negative = s[0] == '-'
		i++
	}
	var m uint64
	digits, point := 0, -1
	for ; i < len(s); i++ {
		c := s[i]
		if c-'0' <= 9 {
			m = m*10 + uint64(c-'0')
			if digits++; digits > 18 {
				return 0, false
			}
			continue
		}
		if c != decimal || point >= 0 {
			break
		}
		point = digits
	}
	if digits == 0 || m >= 1<<53 {
		return 0, false
	}
	k := 0
	if point >= 0 {
		k = point - digits
	}
	if i < len(s) && (s[i] == 'e' || s[i] == 'E') {
		i++
		sign := 1
		if i < len(s) && (s[i] == '-' || s[i] == '+') {
			if s[i] == '-' {
				sign = -1
			}
			i++
		}
		if i == len(s) || len(s)-i > 3 {
			return 0, false
		}
		e := 0
		for ; i < len(s) && s[i]-'0' <= 9; i++ {
			e = e*10 + int(s[i]-'0')
		}
		k += sign * e
	}
	if i < len(s) || k < -22 || k > 22 {
		return 0, false
	}
	x = float64(m)
	if k >= 0 {
		x *= powersOfTen[k]
	} else {
		x /= powersOfTen[-k]
	}
	if negative {
		x = -x
	}
	return x, true
}
