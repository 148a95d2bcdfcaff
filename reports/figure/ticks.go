package figure

import (
	"math"
	"strconv"
	"strings"
)

// linearTicks sets about count labelled ticks and the minor ones between.
func (s *scale) linearTicks(count float64) {
	step, parts := niceStep(s.hi-s.lo, count)
	places := max(0, -int(math.Floor(math.Log10(step)+eps)))
	small := eps * (s.hi - s.lo)
	first, last := math.Ceil(s.lo/step-1e-6), math.Floor(s.hi/step+1e-6)
	for k := first; k <= last && len(s.major) < 50; k++ {
		s.major = append(s.major, tick{k * step, linearLabel(k*step, step, places)})
	}
	minor := step / float64(parts)
	for k := math.Ceil((s.lo - small) / minor); k*minor <= s.hi+small && len(s.minor) < 250; k++ {
		if math.Mod(k, float64(parts)) != 0 {
			s.minor = append(s.minor, k*minor)
		}
	}
}

// linearLabel writes v with the decimals of the step; very large and very
// small numbers as a power of ten.
func linearLabel(v, step float64, places int) string {
	if math.Abs(v) < step/1e6 {
		v = 0
	}
	if v != 0 && (math.Abs(v) >= 1e6 || places > 4) {
		exp := int(math.Floor(math.Log10(math.Abs(v)) + eps))
		digits := max(0, exp+places)
		if places == 0 {
			digits = max(0, exp-int(math.Floor(math.Log10(step)+eps)))
		}
		m := strconv.FormatFloat(v/math.Pow(10, float64(exp)), 'f', min(digits, 12), 64)
		return minus(m) + "·" + power(exp)
	}
	return minus(strconv.FormatFloat(v, 'f', places, 64))
}

// logTicks labels whole decades where there are three or more, else 1-2-5
// numbers, else round numbers.
func (s *scale) logTicks(count float64) {
	first, last := int(math.Ceil(s.lo-eps)), int(math.Floor(s.hi+eps))
	switch decades := last - first + 1; {
	case decades >= 3:
		s.decadeTicks(first, last, count)
	case s.hi-s.lo > 0.35:
		s.logNumbers(count)
	default:
		s.narrowTicks(count)
	}
}

func (s *scale) decadeTicks(first, last int, count float64) {
	step := 1
	for _, step = range [...]int{1, 2, 3, 4, 5, 10, 20, 50, 100} {
		if float64((last-first)/step) <= count {
			break
		}
	}
	for k := first; k <= last; k++ {
		if ((k%step)+step)%step == 0 {
			s.major = append(s.major, tick{float64(k), power(k)})
		} else {
			s.minor = append(s.minor, float64(k))
		}
	}
	if step > 1 || math.Abs(s.p1-s.p0)/(s.hi-s.lo) < 6 {
		return
	}
	for k := first - 1; k <= last; k++ {
		for n := 2; n <= 9; n++ {
			if t := float64(k) + math.Log10(float64(n)); t > s.lo && t < s.hi {
				s.minor = append(s.minor, t)
			}
		}
	}
}

// logNumbers labels 1, 2 and 5 of every decade, or all nine where there is
// room.
func (s *scale) logNumbers(count float64) {
	labelled := "125"
	if s.hi-s.lo < 0.8 && count >= 6 {
		labelled = "1234568"
	}
	if (s.hi-s.lo)*3 > count+2 {
		labelled = "1"
	}
	for k := int(math.Floor(s.lo)); k <= int(math.Ceil(s.hi)); k++ {
		for n := 1; n <= 9; n++ {
			t := float64(k) + math.Log10(float64(n))
			if t < s.lo-eps || t > s.hi+eps {
				continue
			}
			if strings.Contains(labelled, strconv.Itoa(n)) {
				s.major = append(s.major, tick{t, logLabel(n, k)})
			} else {
				s.minor = append(s.minor, t)
			}
		}
	}
}

// narrowTicks puts the round numbers of a linear axis on a short logarithmic
// one.
func (s *scale) narrowTicks(count float64) {
	lin := scale{lo: math.Pow(10, s.lo), hi: math.Pow(10, s.hi)}
	if !(lin.lo > 0) || math.IsInf(lin.hi, 0) || lin.hi-lin.lo < 1e-12*lin.hi {
		return
	}
	lin.linearTicks(math.Min(count, 6))
	for _, m := range lin.major {
		s.major = append(s.major, tick{math.Log10(m.t), m.label})
	}
	for _, m := range lin.minor {
		if m > 0 {
			s.minor = append(s.minor, math.Log10(m))
		}
	}
}

func logLabel(n, k int) string {
	if k < -3 || k > 3 {
		if n == 1 {
			return power(k)
		}
		return strconv.Itoa(n) + "·" + power(k)
	}
	return strconv.FormatFloat(float64(n)*math.Pow(10, float64(k)), 'f', max(0, -k), 64)
}

// power writes 10^k with its exponent raised.
func power(k int) string { return "10^{" + minus(strconv.Itoa(k)) + "}" }

// minus turns a leading hyphen into a minus sign; −0 becomes 0.
func minus(s string) string {
	if !strings.HasPrefix(s, "-") {
		return s
	}
	if strings.Trim(s, "-0.") == "" {
		return s[1:]
	}
	return "−" + s[1:]
}
