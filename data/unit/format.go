package unit

import (
	"math"
	"strconv"
	"strings"
)

// Celsius gives a temperature in kelvin in degrees Celsius, rounded to 1e-9, so
// that 233.15 K is −40 °C and not −39.99999999999997 °C. NaN stays NaN.
func Celsius(kelvin float64) float64 { return Preferred(Temperature).From(kelvin) }

// Kelvin gives a temperature in degrees Celsius in kelvin.
func Kelvin(celsius float64) float64 { return celsius + 273.15 }

// Display writes an SI value for people in the preferred unit of its quantity,
// with at most four significant digits (a temperature: at most two decimals)
// and a true minus sign: "−40 °C", "0.2 %". NaN is "not stated".
func Display(si float64, q Quantity) string {
	if math.IsNaN(si) {
		return "not stated"
	}
	u := Preferred(q)
	x := u.From(si)
	if q == Temperature {
		x = math.Round(x*100) / 100
	} else {
		x, _ = strconv.ParseFloat(strconv.FormatFloat(x, 'g', 4, 64), 64)
	}
	text := strconv.FormatFloat(x+0, 'g', -1, 64)
	if a := math.Abs(x); a >= 1e-4 && a < 1e7 || x == 0 {
		text = strconv.FormatFloat(x+0, 'f', -1, 64)
	}
	return strings.ReplaceAll(text, "-", "−") + " " + u.Symbol
}
