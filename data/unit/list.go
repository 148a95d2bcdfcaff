package unit

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"phaselag/data/place"
)

// maxList bounds a list, so that a slip of the finger cannot ask for 10^9
// conditions.
const maxList = 100_000

// ParseList reads a list of the command line and returns SI values in the order
// written. Items are separated by commas; the unit stands once, at the end:
//
//	list = item {"," item} unit
//	item = number | a ":" b ":" step | a ":" b ":" n "/decade"
//
// The values of a:b:step are a, a+step, … as far as b; b is one of them if it
// lies on the grid (to 1e-9 of a step). Decimal steps give decimal values: no
// 0.30000000000000004. The sign of the step must lead from a to b.
//
// a:b:n/decade is evenly spaced in the logarithm from a to b, both included,
// with at least n steps a decade: exactly n where b/a is a whole number of
// steps, as in 1:100:5/decade.
//
// A list has at most 100 000 values.
func ParseList(text string, q Quantity) ([]float64, error) {
	items := strings.Split(plain(text), ",")
	var list []float64
	var symbol string
	for i, item := range items {
		item = strings.TrimSpace(item)
		if item == "" {
			return nil, listError(text, q, "an empty item in the list %q", clip(text))
		}
		values, rest, err := parseItem(item, text, q)
		if err != nil {
			return nil, err
		}
		last := i == len(items)-1
		if rest != "" && !last {
			if strings.HasPrefix(rest, ":") || strings.HasPrefix(rest, "/decade") {
				return nil, listError(text, q, "cannot read the item %q", clip(item))
			}
			return nil, listError(text, q, "a unit inside the list, at %q", clip(item))
		}
		if len(list)+len(values) > maxList {
			return nil, tooLong(text)
		}
		list = append(list, values...)
		symbol = rest
	}
	if symbol == "" {
		return nil, listError(text, q, "the unit is missing at the end of %q", clip(text))
	}
	u, ok := Lookup(symbol, q)
	if !ok {
		if strings.ContainsAny(symbol, ":") {
			return nil, listError(text, q, "cannot read the item %q", clip(items[len(items)-1]))
		}
		return nil, wrongUnit(symbol, q)
	}
	for i, x := range list {
		v, err := Convert(x, u)
		if err != nil {
			return nil, err
		}
		list[i] = v
	}
	return list, nil
}

func listError(text string, q Quantity, format string, args ...any) error {
	example := "1,5,10"
	if q == Frequency {
		example = "1:100:5/decade,200"
	} else if q == Temperature {
		example = "-20:60:10"
	}
	return &place.Error{
		What: fmt.Sprintf(format, args...),
		Hint: fmt.Sprintf("write items separated by commas, each a number, a:b:step or a:b:n/decade, and the unit once at the end, for example %s%s", example, Preferred(q).Symbol),
	}
}

func tooLong(text string) error {
	return &place.Error{What: fmt.Sprintf("more than %d values in %q", maxList, clip(text)), Hint: "take a larger step"}
}

// parseItem reads one item; rest is what follows, the unit if it is the last.
func parseItem(item, text string, q Quantity) (values []float64, rest string, err error) {
	var numbers []float64
	decimals := 0
	rest = item
	for {
		end := numberEnd(rest)
		if end == 0 {
			return nil, "", listError(text, q, "%q is not a number in the item %q", clip(rest), clip(item))
		}
		x, err := strconv.ParseFloat(rest[:end], 64)
		if err != nil {
			return nil, "", listError(text, q, "the number %q is too large", clip(rest[:end]))
		}
		numbers = append(numbers, x)
		decimals = max(decimals, places(rest[:end]))
		rest = strings.TrimSpace(rest[end:])
		if len(numbers) == 3 || !strings.HasPrefix(rest, ":") {
			break
		}
		rest = strings.TrimSpace(rest[1:])
	}
	switch len(numbers) {
	case 1:
		return numbers, rest, nil
	case 2:
		return nil, "", listError(text, q, "the item %q has no step", clip(item))
	}
	a, b, step := numbers[0], numbers[1], numbers[2]
	if after, ok := strings.CutPrefix(rest, "/decade"); ok {
		values, err = decades(a, b, step, item, text, q)
		return values, strings.TrimSpace(after), err
	}
	values, err = steps(a, b, step, decimals, item, text, q)
	return values, rest, err
}

func steps(a, b, step float64, decimals int, item, text string, q Quantity) ([]float64, error) {
	if a == b {
		return []float64{a}, nil
	}
	n := (b - a) / step
	if step == 0 || n < 0 || math.IsNaN(n) {
		return nil, listError(text, q, "the step of %q does not lead from %v to %v", clip(item), a, b)
	}
	if n >= maxList {
		return nil, tooLong(text)
	}
	count := int(math.Floor(n+1e-9)) + 1
	values := make([]float64, count)
	for i := range values {
		v := a + float64(i)*step
		if decimals <= 15 {
			v, _ = strconv.ParseFloat(strconv.FormatFloat(v, 'f', decimals, 64), 64)
		}
		values[i] = v + 0 // no negative zero
	}
	if math.Abs(n-math.Round(n)) <= 1e-9*max(1, n) {
		values[count-1] = b
	}
	return values, nil
}

func decades(a, b, n float64, item, text string, q Quantity) ([]float64, error) {
	switch {
	case !(a > 0 && b > 0):
		return nil, listError(text, q, "both ends of %q must be positive", clip(item))
	case !(n > 0):
		return nil, listError(text, q, "the number of points a decade in %q must be positive", clip(item))
	case a == b:
		return []float64{a}, nil
	}
	want := n * math.Abs(math.Log10(b)-math.Log10(a))
	if want >= maxList {
		return nil, tooLong(text)
	}
	count := max(1, int(math.Ceil(want-1e-9)))
	perDecade := n
	if math.Abs(want-float64(count)) > 1e-9 {
		perDecade = float64(count) / math.Abs(math.Log10(b)-math.Log10(a))
	}
	if b < a {
		perDecade = -perDecade
	}
	values := make([]float64, count+1)
	for i := range values {
		values[i] = a * math.Pow(10, float64(i)/perDecade)
	}
	values[count] = b
	return values, nil
}

// places counts the decimal places of a number as written: 2 for "0.25", 4 for
// "2.5e-3".
func places(s string) int {
	mantissa, exponent := s, 0
	if i := strings.IndexAny(s, "eE"); i >= 0 {
		mantissa = s[:i]
		exponent, _ = strconv.Atoi(s[i+1:])
	}
	p := 0
	if i := strings.IndexByte(mantissa, '.'); i >= 0 {
		p = len(mantissa) - i - 1
	}
	return max(0, p-exponent)
}
