package term

import (
	"math"
	"strconv"
	"strings"
)

// scale maps values to 0 … 1.
type scale struct {
	log    bool
	lo, hi float64 // values, or their logarithms
}

type tick struct {
	value float64
	label string
}

func (a Axis) usable(v float64) bool {
	return !math.IsNaN(v) && math.Abs(v) < 1e300 && (!a.Log || v > 0)
}

func (s scale) of(v float64) float64 {
	if s.log {
		return math.Log10(v)
	}
	return v
}

func (s scale) at(v float64) float64 { return (s.of(v) - s.lo) / (s.hi - s.lo) }

// newScale takes the range from the axis or from the values; constant data get room at
// both sides. ok is false where there is no value.
func newScale(a Axis, values []float64) (s scale, ok bool) {
	s = scale{log: a.Log, lo: math.Inf(1), hi: math.Inf(-1)}
	for _, v := range values {
		s.lo, s.hi = math.Min(s.lo, s.of(v)), math.Max(s.hi, s.of(v))
	}
	if s.lo > s.hi {
		return s, false
	}
	if fixed := a.Min != 0 || a.Max != 0; fixed {
		lo, hi := s.lo, s.hi
		if a.usable(a.Min) {
			lo = s.of(a.Min)
		}
		if a.usable(a.Max) {
			hi = s.of(a.Max)
		}
		if hi > lo {
			s.lo, s.hi = lo, hi
		}
	}
	if !(s.hi-s.lo > 1e-9*math.Max(math.Abs(s.lo), math.Abs(s.hi))) {
		d := 0.1 * math.Abs(s.lo)
		if s.log || d == 0 {
			d = 0.5
		}
		s.lo, s.hi = s.lo-d, s.hi+d
	}
	return s, true
}

// ticks returns about count round numbers of the range: decades, 1-2-5 numbers of a
// short logarithmic range, or equal steps.
func (s scale) ticks(count float64) []tick {
	count = math.Max(2, count)
	const eps = 1e-9
	var out []tick
	if s.log && s.hi-s.lo >= 1 {
		digits := []float64{1, 2, 5}
		step := 1
		if (s.hi-s.lo)*3 > count {
			digits = []float64{1}
			for (s.hi-s.lo)/float64(step) > count {
				step++
			}
		}
		for k := math.Floor(s.lo); k <= math.Ceil(s.hi); k++ {
			if int(math.Abs(k))%step != 0 {
				continue
			}
			for _, d := range digits {
				v := d * math.Pow(10, k)
				if l := math.Log10(v); l >= s.lo-eps && l <= s.hi+eps {
					out = append(out, tick{v, power(d, int(k))})
				}
			}
		}
		return out
	}
	lo, hi := s.lo, s.hi
	if s.log {
		lo, hi = math.Pow(10, lo), math.Pow(10, hi)
	}
	exp := math.Floor(math.Log10((hi - lo) / count))
	step := math.Pow(10, exp)
	for _, m := range []float64{1, 2, 5, 10} {
		if (hi-lo)/(m*math.Pow(10, exp)) <= count {
			step = m * math.Pow(10, exp)
			if m == 10 {
				exp++
			}
			break
		}
	}
	small := eps * (hi - lo)
	for k := math.Ceil((lo - small) / step); k*step <= hi+small && len(out) < 100; k++ {
		out = append(out, tick{k * step, number(k*step, step, int(exp))})
	}
	return out
}

// number writes v with the decimals of its step, 10^exp; far numbers as powers of ten.
func number(v, step float64, exp int) string {
	if math.Abs(v) < step/1e6 {
		return "0"
	}
	if math.Abs(v) < 1e6 && exp >= -5 {
		return minus(strconv.FormatFloat(v, 'f', max(0, -exp), 64))
	}
	k := int(math.Floor(math.Log10(math.Abs(v)) + 1e-9))
	return minus(strconv.FormatFloat(v/math.Pow(10, float64(k)), 'f', max(0, min(12, k-exp)), 64)) + "·10" + raised(k)
}

// power writes d·10^k.
func power(d float64, k int) string {
	if k >= -3 && k <= 4 {
		return strconv.FormatFloat(d*math.Pow(10, float64(k)), 'f', max(0, -k), 64)
	}
	if d == 1 {
		return "10" + raised(k)
	}
	return strconv.FormatFloat(d, 'f', 0, 64) + "·10" + raised(k)
}

func minus(s string) string { return strings.Replace(s, "-", "−", 1) }

// raised writes an exponent in raised figures.
func raised(k int) string {
	return strings.NewReplacer("-", "⁻", "0", "⁰", "1", "¹", "2", "²", "3", "³", "4", "⁴", "5", "⁵", "6", "⁶", "7", "⁷", "8", "⁸", "9", "⁹").Replace(strconv.Itoa(k))
}
