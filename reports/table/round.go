package table

import (
	"math"
	"strconv"
	"strings"
)

// Rounding for people.
//
// A result is stated to the place of the second significant digit of its
// expanded uncertainty, as the Guide to the Expression of Uncertainty in
// Measurement (JCGM 100:2008, 7.2.6) recommends. Rounding is that of the exact
// binary value to the nearest decimal, ties to even, by strconv: no
// multiplication by powers of ten, which would round twice.

const (
	missing     = "–"
	sameDigits  = 4
	mostPlain   = 1e6  // from here on powers of ten
	leastPlain  = 1e-4 // below here too
	mostDigits  = 15
	uncertainty = 2 // significant digits of an interval
)

// Significant writes v with so many significant digits (0: four), NaN as "–".
// A number that needs fewer digits to be exact, such as a frequency of 0.5 Hz,
// is written short.
func Significant(v float64, digits int) string {
	if math.IsNaN(v) {
		return missing
	}
	if digits <= 0 {
		digits = sameDigits
	}
	digits = min(digits, mostDigits)
	if v == 0 {
		return "0"
	}
	if a := math.Abs(v); v == math.Trunc(v) && a < mostPlain && a < math.Pow(10, float64(digits+1)) {
		return strconv.FormatFloat(v, 'f', 0, 64)
	}
	mantissa, _, _ := strings.Cut(strconv.FormatFloat(v, 'e', -1, 64), "e")
	if needs := len(strings.Trim(strings.Replace(mantissa, ".", "", 1), "-")); needs < digits {
		digits = needs
	}
	return toPlace(v, decade(v, digits)-digits+1)
}

// Interval writes the half length of an interval with two significant digits,
// a zero in the second place included.
func Interval(u float64) string {
	if math.IsNaN(u) || u == 0 {
		return Significant(u, uncertainty)
	}
	return toPlace(u, decade(u, uncertainty)-uncertainty+1)
}

// WithInterval writes v to the place of the second significant digit of its
// interval u; without a usable interval as Significant does.
func WithInterval(v, u float64, digits int) string {
	if math.IsNaN(v) || math.IsNaN(u) || math.IsInf(u, 0) || u <= 0 {
		return Significant(v, digits)
	}
	place := decade(u, uncertainty) - uncertainty + 1
	if v != 0 {
		place = max(place, decade(v, mostDigits)-mostDigits+1)
	}
	if v != 0 && math.Abs(v) < leastPlain && u < leastPlain || math.Abs(v) >= mostPlain {
		if d := decade(v, mostDigits) - place + 1; d >= 1 {
			return toPlace(v, place)
		}
	}
	if place > 0 {
		return rounded(v, place)
	}
	return clean(strconv.FormatFloat(v, 'f', min(-place, 20), 64))
}

// decade returns the power of ten of the first digit of v after rounding to so
// many digits.
func decade(v float64, digits int) int {
	s := strconv.FormatFloat(v, 'e', digits-1, 64)
	e, _ := strconv.Atoi(s[strings.IndexByte(s, 'e')+1:])
	return e
}

// toPlace rounds v to 10^place; numbers too large or too small to be read at a
// glance come as a power of ten.
func toPlace(v float64, place int) string {
	if a := math.Abs(v); a >= mostPlain || a < leastPlain {
		s := strconv.FormatFloat(v, 'e', max(0, decade(v, mostDigits)-place), 64)
		m, e, _ := strings.Cut(s, "e")
		n, _ := strconv.Atoi(e)
		return m + "e" + strconv.Itoa(n)
	}
	if place > 0 {
		return rounded(v, place)
	}
	return clean(strconv.FormatFloat(v, 'f', -place, 64))
}

// rounded writes v as a whole multiple of 10^place, place > 0.
func rounded(v float64, place int) string {
	digits := decade(v, mostDigits) - place
	if v == 0 || digits < -1 {
		return "0"
	}
	if digits == -1 { // a single step or none
		if math.Abs(v) > 0.5*math.Pow(10, float64(place)) {
			return clean(strconv.FormatFloat(math.Copysign(math.Pow(10, float64(place)), v), 'f', 0, 64))
		}
		return "0"
	}
	f, _ := strconv.ParseFloat(strconv.FormatFloat(v, 'e', digits, 64), 64)
	return clean(strconv.FormatFloat(f, 'f', 0, 64))
}

// clean takes the sign off a zero.
func clean(s string) string {
	if strings.HasPrefix(s, "-") && strings.Trim(s, "-0.") == "" {
		return s[1:]
	}
	return s
}
