package quality

import "math"

// Pattern is a rule by which a chart calls out a point. The eight are those of the usual
// Shewhart practice (ISO 7870-2; the definitions are values from memory). A, B and C are
// the zones of one sigma each on either side of the centre line, A the outermost.
//
// A point is called out when it completes a pattern; where a pattern goes on, so is every
// further point. "Beyond" and "inside" are strict, and a point on the centre line lies on
// neither side. Points that were not measured are passed over: those before and behind are
// neighbours.
type Pattern int

// The patterns.
const (
	Beyond      Pattern = iota + 1 // one point beyond a limit
	OneSide                        // nine points in a row on one side of the centre line
	Trend                          // six points in a row that all rise or all fall
	Alternating                    // fourteen points in a row that rise and fall in turn
	TwoOfThree                     // two of three points in a row beyond 2 sigma on one side; the last is one
	FourOfFive                     // four of five points in a row beyond 1 sigma on one side; the last is one
	Hugging                        // fifteen points in a row inside 1 sigma, on either side
	Avoiding                       // eight points in a row beyond 1 sigma, on either side
)

var patternNames = [...]string{
	Beyond:      "beyond a limit",
	OneSide:     "nine on one side",
	Trend:       "six rising or falling",
	Alternating: "fourteen alternating",
	TwoOfThree:  "two of three beyond 2 sigma",
	FourOfFive:  "four of five beyond 1 sigma",
	Hugging:     "fifteen within 1 sigma",
	Avoiding:    "eight beyond 1 sigma",
}

// String says what the pattern looks for.
func (p Pattern) String() string {
	if p < Beyond || p > Avoiding {
		return "no pattern"
	}
	return patternNames[p]
}

// StandardSet is the default: a point beyond a limit, a shift of the mean and a trend. More
// patterns find more, and raise more false alarms: from a process at rest with known sigma
// Beyond alone calls out every 370th point, this set has its first after about 140 and the
// full set after about 80 (simulated in the tests).
func StandardSet() []Pattern { return []Pattern{Beyond, OneSide, Trend} }

// FullSet is all eight.
func FullSet() []Pattern {
	return []Pattern{Beyond, OneSide, Trend, Alternating, TwoOfThree, FourOfFive, Hugging, Avoiding}
}

// Violations returns for each value the patterns that it completes, in the order of the
// list. z are the values in sigmas from the centre line, so the limits lie at ±3; values
// that are NaN are passed over.
func Violations(z []float64, patterns []Pattern) [][]Pattern {
	out := make([][]Pattern, len(z))
	var seen []float64
	for i, v := range z {
		if math.IsNaN(v) {
			continue
		}
		seen = append(seen, v)
		for _, p := range patterns {
			if p.completed(seen) {
				out[i] = append(out[i], p)
			}
		}
	}
	return out
}

// completed says whether the last of the values completes the pattern.
func (p Pattern) completed(z []float64) bool {
	last := func(n int) []float64 { return z[max(0, len(z)-n):] }
	above := func(v float64) bool { return v > 0 }
	switch p {
	case Beyond:
		return math.Abs(z[len(z)-1]) > 3
	case OneSide:
		return oneSide(last(9), 9, above)
	case Trend:
		return trend(last(6))
	case Alternating:
		return alternating(last(14))
	case TwoOfThree:
		return oneSide(last(3), 2, func(v float64) bool { return v > 2 })
	case FourOfFive:
		return oneSide(last(5), 4, func(v float64) bool { return v > 1 })
	case Hugging:
		return count(last(15), func(v float64) bool { return math.Abs(v) < 1 }) == 15
	case Avoiding:
		return count(last(8), func(v float64) bool { return math.Abs(v) > 1 }) == 8
	}
	return false
}

func count(z []float64, is func(float64) bool) int {
	n := 0
	for _, v := range z {
		if is(v) {
			n++
		}
	}
	return n
}

// oneSide says whether so many of the values, the last among them, are as asked, or all
// of their negatives.
func oneSide(z []float64, n int, is func(float64) bool) bool {
	mirrored := func(v float64) bool { return is(-v) }
	end := z[len(z)-1]
	return is(end) && count(z, is) >= n || mirrored(end) && count(z, mirrored) >= n
}

func trend(z []float64) bool {
	up, down := 0, 0
	for i := 1; i < len(z); i++ {
		if z[i] > z[i-1] {
			up++
		}
		if z[i] < z[i-1] {
			down++
		}
	}
	return up == 5 || down == 5
}

func alternating(z []float64) bool {
	if len(z) < 14 {
		return false
	}
	for i := 1; i < len(z); i++ {
		step := z[i] - z[i-1]
		if step == 0 || math.IsNaN(step) || i > 1 && (step > 0) == (z[i-1] > z[i-2]) {
			return false
		}
	}
	return true
}
