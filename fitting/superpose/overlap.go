package superpose

import (
	"math"
	"sort"
)

// Closed-form overlap shifting.
//
// Two neighbouring isotherms are taken as inverse functions x(y), x = log f,
// y the logarithm of a modulus, piecewise linear. Over the window of moduli that
// both reach, L = max(min y_1, min y_2) to U = min(max y_1, max y_2), the mean
// horizontal distance is
//
//	log a = 1/(U−L) ∫_L^U [x_1(y) − x_2(y)] dy
//
// and the trapezoidal rule on the union of all breakpoints is exact. Shifts of
// neighbours add up. Source: Gergesova, Zupančič, Saprunov, Emri, J. Rheol. 55
// (2011) 1, the method of ISO 18437-6 (from memory); the formula was rederived.
//
// Known failures: no common window (refused); a modulus that is not monotonic,
// such as G'' with its peak in the window (only the longest rising stretch is
// taken); a vertical shift, which the method turns into a wrong horizontal one.

// Segment is one isotherm as a curve to shift: x = log10 f, y = log10 of a
// modulus, both of the same length, x rising.
type Segment struct{ X, Y []float64 }

// rising returns the longest stretch in which y rises, after pooling adjacent
// violators, as a strictly rising curve.
func (s Segment) rising() Segment {
	lo, hi := longestRise(s.Y)
	x, y := s.X[lo:hi], s.Y[lo:hi]
	type block struct {
		y, x float64
		n    int
	}
	var blocks []block
	for i := range y {
		blocks = append(blocks, block{y[i], x[i], 1})
		for len(blocks) > 1 && blocks[len(blocks)-1].y <= blocks[len(blocks)-2].y {
			b, a := blocks[len(blocks)-1], blocks[len(blocks)-2]
			n := float64(a.n + b.n)
			blocks[len(blocks)-2] = block{(a.y*float64(a.n) + b.y*float64(b.n)) / n, (a.x*float64(a.n) + b.x*float64(b.n)) / n, a.n + b.n}
			blocks = blocks[:len(blocks)-1]
		}
	}
	var out Segment
	for _, b := range blocks {
		out.X, out.Y = append(out.X, b.x), append(out.Y, b.y)
	}
	return out
}

// longestRise finds the stretch [lo, hi) from a valley to a peak with the
// largest rise; small dips inside do not end it.
func longestRise(y []float64) (lo, hi int) {
	best := math.Inf(-1)
	minAt := 0
	for i := range y {
		if y[i] < y[minAt] {
			minAt = i
		}
		if d := y[i] - y[minAt]; d > best {
			best, lo, hi = d, minAt, i+1
		}
	}
	return lo, hi
}

func (s Segment) at(y float64) float64 {
	n := len(s.Y)
	i := max(1, min(sort.SearchFloat64s(s.Y, y), n-1))
	w := (y - s.Y[i-1]) / (s.Y[i] - s.Y[i-1])
	return s.X[i-1] + w*(s.X[i]-s.X[i-1])
}

// Overlap gives log10 a of warm minus that of cold: negative for a sound
// material. window is the height of the common window in decades, negative where
// there is a gap and −Inf where one of the two is no rising curve; ok is false
// where there is no window, and then nothing is extrapolated.
func Overlap(cold, warm Segment) (logA, window float64, ok bool) {
	c, w := cold.rising(), warm.rising()
	if len(c.X) == 0 || len(w.X) == 0 {
		return math.NaN(), math.Inf(-1), false
	}
	L := max(c.Y[0], w.Y[0])
	U := min(c.Y[len(c.Y)-1], w.Y[len(w.Y)-1])
	if !(U > L) {
		return math.NaN(), U - L, false
	}
	ys := []float64{L, U}
	for _, s := range []Segment{c, w} {
		for _, y := range s.Y {
			if y > L && y < U {
				ys = append(ys, y)
			}
		}
	}
	sort.Float64s(ys)
	var sum float64
	for i := 1; i < len(ys); i++ {
		a := c.at(ys[i-1]) - w.at(ys[i-1])
		b := c.at(ys[i]) - w.at(ys[i])
		sum += (ys[i] - ys[i-1]) * (a + b) / 2
	}
	return sum / (U - L), U - L, true
}

// Isotherm is one tested temperature with everything measured there in
// frequency sweeps, sorted by frequency.
type Isotherm struct {
	T         float64 // K
	Frequency []float64
	Modulus   []complex128
}

func (s Isotherm) segment(f func(complex128) float64) Segment {
	var out Segment
	for i, g := range s.Modulus {
		if v := f(g); v > 0 {
			out.X = append(out.X, math.Log10(s.Frequency[i]))
			out.Y = append(out.Y, math.Log10(v))
		}
	}
	return out
}

// Pair is the overlap of two neighbouring isotherms.
type Pair struct {
	LogA     float64 // log a_warm − log a_cold; NaN without overlap
	Window   float64 // decades of the modulus; negative: the gap
	Quantity string  // "G'", "|G*|" or "G''": what was shifted; "" without overlap
}

// minWindow is the least height of a window, in decades, that is taken for an
// overlap: 0.5 %, the noise of a good measurement.
const minWindow = 0.002

// Neighbours shifts each isotherm onto its colder neighbour by the first of
// the storage modulus, the magnitude and the loss modulus that overlaps. The
// isotherms must come from cold to warm.
func Neighbours(s []Isotherm) []Pair {
	quantities := []struct {
		name string
		f    func(complex128) float64
	}{
		{"G'", func(g complex128) float64 { return real(g) }},
		{"|G*|", func(g complex128) float64 { return math.Hypot(real(g), imag(g)) }},
		{"G''", func(g complex128) float64 { return imag(g) }},
	}
	var out []Pair
	for i := 1; i < len(s); i++ {
		pair := Pair{LogA: math.NaN(), Window: math.Inf(-1)}
		for _, q := range quantities {
			logA, window, ok := Overlap(s[i-1].segment(q.f), s[i].segment(q.f))
			if ok && window >= minWindow {
				pair = Pair{logA, window, q.name}
				break
			}
			pair.Window = max(pair.Window, window)
		}
		out = append(out, pair)
	}
	return out
}
