package quality

import (
	"fmt"
	"math"
	"math/rand/v2"
	"reflect"
	"testing"

	"pgregory.net/rapid"
)

func series(values ...float64) []Batch {
	var out []Batch
	for i, v := range values {
		out = append(out, Batch{Name: fmt.Sprintf("B%02d", i+1), Values: []float64{v}, U95: math.NaN()})
	}
	return out
}

// spread is a batch of five with a mean and a range.
func spread(mean, r float64) Batch {
	return Batch{Name: "batch", Values: []float64{mean - r/2, mean, mean, mean, mean + r/2}}
}

// The published example for samples of five: grand mean 0.0022, mean range 0.0356 give
// the limits 0.0227 and −0.0183 and for ranges 0.0753.
func TestPublishedAverages(t *testing.T) {
	a, r, err := AveragesRanges([]Batch{spread(.0012, .0300), spread(.0032, .0412)}, Settings{})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "centre", a.Centre, .0022, 1e-12)
	near(t, "upper", a.Lines[0].Upper, .0227, 5e-5)
	near(t, "lower", a.Lines[0].Lower, -.0183, 5e-5)
	near(t, "mean range", r.Centre, .0356, 1e-12)
	near(t, "upper of ranges", r.Lines[0].Upper, .0753, 5e-5)
	if !math.IsNaN(r.Lines[0].Lower) {
		t.Error("ranges of five have no lower limit")
	}
	// For samples of one size the centre and limits are x̿ ± A3·s̄ just so.
	b, s, _ := AveragesDeviations([]Batch{spread(1, .1), spread(2, .2)}, Settings{})
	c, _ := Factors(5)
	near(t, "A3", b.Lines[0].Upper-b.Centre, c.A3*s.Centre, 1e-12)
	near(t, "B4", s.Lines[1].Upper, c.B4*s.Centre, 1e-12)
}

// By hand: values 1 2 4 3, moving ranges 1 2 1, mean 4/3; limits 2.5 ± 2.6587·4/3. The
// factor was computed independently in double precision.
func TestIndividuals(t *testing.T) {
	v, m, err := Individuals(series(1, 2, math.NaN(), 4, 3, 50, math.Inf(1)), Settings{Base: 5})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "centre", v.Centre, 2.5, 1e-12)
	near(t, "upper", v.Lines[0].Upper, 2.5+2.6587*4/3, 1e-4)
	near(t, "moving range", m.Centre, 4./3, 1e-12)
	near(t, "its limit", m.Lines[0].Upper, 3.2665*4/3, 1e-4)
	if v.Base != 4 || m.Base != 3 || v.Lines[5].Base || v.Called() != 1 || v.Lines[5].Violations[0] != Beyond || m.Lines[5].Violations[0] != Beyond {
		t.Errorf("%+v\n%+v", v, m)
	}
	if !math.IsNaN(v.Lines[6].Value) || len(v.Doubts) == 0 {
		t.Errorf("%+v", v)
	}
	// A bar that reaches back over the limit makes the point doubtful.
	b := series(1, 2, 4, 3, 7)
	b[4].U95 = 1
	v, _, _ = Individuals(b, Settings{Base: 4})
	if !v.Lines[4].Doubtful {
		t.Errorf("%+v", v.Lines[4])
	}
	for _, bad := range []func() error{
		func() error { _, _, err := Individuals(nil, Settings{}); return err },
		func() error { _, _, err := Individuals(series(1), Settings{}); return err },
		func() error { _, _, err := Individuals(series(1, 2), Settings{Base: -1}); return err },
		func() error { _, _, err := Individuals(series(1, 2), Settings{Known: &Known{0, 0}}); return err },
		func() error { _, err := EWMA(series(1, 2), Settings{Lambda: 2}); return err },
		func() error { _, err := EWMA(series(1, 2), Settings{Reach: -1}); return err },
		func() error { _, err := EWMA(series(1, 2), Settings{Scatter: "x"}); return err },
		func() error { _, _, err := AveragesRanges(series(1, 2), Settings{}); return err },
	} {
		if bad() == nil {
			t.Error("a fault was taken")
		}
	}
}

// The closed form of the variance, and λ = 1, which is the chart of individuals.
func TestEWMALimits(t *testing.T) {
	s := Settings{Known: &Known{10, 2}, Lambda: 0.3, Reach: 2.7}
	c, err := EWMA(series(12, 9, 11, 10, 13), s)
	if err != nil {
		t.Fatal(err)
	}
	z := 10.0
	for i, l := range c.Lines {
		z = 0.3*[]float64{12, 9, 11, 10, 13}[i] + 0.7*z
		near(t, "z", l.Value, z, 1e-12)
		near(t, "limit", l.Upper, 10+2.7*2*math.Sqrt(0.3/1.7*(1-math.Pow(0.7, float64(2*(i+1))))), 1e-12)
	}
	e, _ := EWMA(series(1, 2, 4, 3), Settings{Lambda: 1, Reach: 3})
	v, _, _ := Individuals(series(1, 2, 4, 3), Settings{})
	for i := range e.Lines {
		near(t, "value", e.Lines[i].Value, v.Lines[i].Value, 1e-12)
		near(t, "limit", e.Lines[i].Upper, v.Lines[i].Upper, 1e-12)
	}
	// Within batches σ̂/√n.
	b := []Batch{spread(1, .1), spread(1.1, .2)}
	w, _ := EWMA(b, Settings{Lambda: 1, Reach: 3})
	a, _, _ := AveragesRanges(b, Settings{})
	near(t, "within", w.Lines[1].Upper, a.Lines[1].Upper, 1e-12)
	m, _ := EWMA(b, Settings{Lambda: 1, Reach: 3, Scatter: MovingRange})
	near(t, "moving range", m.Lines[1].Upper, 1.05+3*0.1/1.1283791671, 1e-9)
}

func TestPatterns(t *testing.T) {
	gap := math.NaN()
	for _, v := range []struct {
		p    Pattern
		z    []float64
		last bool // only the last point is called out
	}{
		{Beyond, []float64{1, -3, 3, 3.01}, true},
		{OneSide, []float64{-.1, .1, .1, .2, .1, .1, gap, .2, .1, .1, .1}, true},
		{OneSide, []float64{.1, .1, .2, .1, 0, .2, .1, .1, .1}, false},
		{Trend, []float64{0, -.5, -.4, -.3, -.2, gap, -.1, .1}, true},
		{Trend, []float64{.6, .5, .4, .3, .2, .1}, true},
		{Trend, []float64{.6, .5, .4, .4, .2, .1}, false},
		{Alternating, []float64{0, 1, 0, 1, 0, 1, 0, 1, 0, 1, 0, 1, 0, 1}, true},
		{Alternating, []float64{0, 1, 0, 1, 0, 1, 0, 0, 1, 0, 1, 0, 1, 0}, false},
		{TwoOfThree, []float64{2.1, 0, 2.2}, true},
		{TwoOfThree, []float64{2.1, -2.2, 0}, false},
		{TwoOfThree, []float64{2.1, 0, 0, 2.2}, false},
		{FourOfFive, []float64{-1.1, -1.2, 0, -1.1, -1.5}, true},
		{FourOfFive, []float64{1.1, 1.2, 0, 1.1, -1.5}, false},
		{Hugging, []float64{.1, -.1, .9, .1, -.9, 0, 0, .1, .2, .3, -.4, .1, .2, .3, .4}, true},
		{Avoiding, []float64{1.1, -1.1, 1.2, 1.3, -1.4, 2, -1.1, 1.1}, true},
		{Avoiding, []float64{1.1, -1.1, 1.2, 1.3, -1, 2, -1.1, 1.1}, false},
	} {
		got := Violations(v.z, []Pattern{v.p})
		for i := range got {
			if want := v.last && i == len(got)-1; (len(got[i]) == 1) != want {
				t.Errorf("%s: %v calls out %d: %v", v.p, v.z, i, got[i])
			}
		}
	}
	if len(FullSet()) != 8 || len(StandardSet()) != 3 || Pattern(0).String() != "no pattern" {
		t.Error("sets")
	}
}

// Charts take anything, do not change their input, give the same bytes twice, and later
// points do not move the limits. Scaling and shifting the values scales and shifts the
// chart.
func TestChartsTakeAnything(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(0, 12).Draw(t, "n")
		var batches []Batch
		for range n {
			batches = append(batches, Batch{Values: rapid.SliceOfN(anyFloat(), 0, 4).Draw(t, "values"), U95: anyFloat().Draw(t, "U95")})
		}
		s := Settings{Base: rapid.IntRange(0, 14).Draw(t, "base"), Patterns: FullSet(), Lambda: rapid.Float64Range(0, 1).Draw(t, "λ")}
		for range 2 {
			Individuals(batches, s)
			AveragesRanges(batches, s)
			AveragesDeviations(batches, s)
			EWMA(batches, s)
			Capable(batches, Limits{-1, 1}, Within)
			Capable(batches, Limits{anyFloat().Draw(t, "lower"), 1}, MovingRange)
			s.Known = &Known{anyFloat().Draw(t, "centre"), anyFloat().Draw(t, "sigma")}
		}
	})
	rapid.Check(t, func(t *rapid.T) {
		v := rapid.SliceOfN(rapid.Float64Range(-10, 10), 4, 30).Draw(t, "values")
		base := rapid.IntRange(3, len(v)).Draw(t, "base")
		a, _, err := Individuals(series(v...), Settings{Base: base})
		if err != nil {
			t.Fatal(err)
		}
		again, _, _ := Individuals(series(v...), Settings{Base: base})
		if fmt.Sprint(a) != fmt.Sprint(again) {
			t.Fatal("two runs differ")
		}
		b, _, _ := Individuals(series(append(append([]float64{}, v[:base]...), 1e3)...), Settings{Base: base})
		if a.Centre != b.Centre || a.Sigma != b.Sigma {
			t.Fatal("a later point moved the limits")
		}
	})
	rapid.Check(t, func(t *rapid.T) {
		var b, c []Batch
		for range 6 {
			v := rapid.SliceOfN(rapid.Float64Range(-10, 10), 3, 3).Draw(t, "values")
			b = append(b, Batch{Values: v})
			c = append(c, Batch{Values: rapid.Permutation(v).Draw(t, "permuted")})
		}
		x, y, _ := AveragesRanges(b, Settings{})
		p, q, _ := AveragesRanges(c, Settings{})
		if math.Abs(x.Sigma-p.Sigma) > 1e-9 || math.Abs(x.Centre-p.Centre) > 1e-9 || math.Abs(y.Lines[3].Value-q.Lines[3].Value) > 1e-9 {
			t.Fatal("the order of repeats counts")
		}
	})
}

func TestDoubtsOfTheBase(t *testing.T) {
	v, _, err := Individuals(series(1, 1, 1, 1, 2), Settings{Base: 4})
	if err != nil || v.Sigma != 0 || len(v.Doubts) != 2 || !reflect.DeepEqual(v.Lines[4].Violations, []Pattern{Beyond}) || v.Lines[3].Violations != nil {
		t.Errorf("%+v, %v", v, err)
	}
}

// runLength is the mean number of batches to the first that is called out, of a process
// at rest, or moved by a shift in sigmas from the first batch on.
func runLength(t *testing.T, runs int, shift float64, seed uint64, chart func([]Batch) (*Chart, error)) (mean, u float64) {
	t.Helper()
	r := rand.New(rand.NewPCG(seed, 1))
	const longest = 4800 // longer ones are a share of e^(−4800/370) = 2e-6
	var lengths []float64
	for len(lengths) < runs {
		var batches []Batch
		length := 0
		for stretch := 300; length == 0 && stretch <= longest; stretch *= 2 {
			for len(batches) < stretch {
				batches = append(batches, Batch{Values: []float64{r.NormFloat64() + shift}})
			}
			c, err := chart(batches)
			if err != nil {
				t.Fatal(err)
			}
			for i, l := range c.Lines {
				if len(l.Violations) > 0 {
					length = i + 1
					break
				}
			}
		}
		if length == 0 {
			length = longest
		}
		lengths = append(lengths, float64(length))
	}
	mean, sd := moments(lengths)
	return mean, sd / math.Sqrt(float64(runs))
}

// Individuals with known sigma: 1/(2Φ(−3)) = 370.4. EWMA with λ = 0.2 and limits at
// 2.962 sigmas: about 500 at rest and 10.5 for a shift of one sigma, where individuals need
// 44 (values from memory, for limits at their final distance; the exact ones, narrow at the
// beginning, take a little off).
func TestRunLengths(t *testing.T) {
	known := &Known{0, 1}
	individuals := func(p []Pattern) func([]Batch) (*Chart, error) {
		return func(b []Batch) (*Chart, error) {
			c, _, err := Individuals(b, Settings{Known: known, Patterns: p})
			return c, err
		}
	}
	ewma := func(L float64) func([]Batch) (*Chart, error) {
		return func(b []Batch) (*Chart, error) { return EWMA(b, Settings{Known: known, Reach: L}) }
	}
	for _, v := range []struct {
		what         string
		shift        float64
		chart        func([]Batch) (*Chart, error)
		want, within float64
	}{
		{"individuals", 0, individuals([]Pattern{Beyond}), 370.4, 0},
		{"individuals, 1 sigma", 1, individuals([]Pattern{Beyond}), 43.9, 0},
		{"EWMA 2.962", 0, ewma(2.962), 500, 20},
		{"EWMA, default", 0, ewma(0), 370, 20},
		{"EWMA 2.962, 1 sigma", 1, ewma(2.962), 10.5, 1.5},
	} {
		got, u := runLength(t, 700, v.shift, 7, v.chart)
		t.Logf("%s: %.1f ± %.1f", v.what, got, u)
		if math.Abs(got-v.want) > 4*u+v.within {
			t.Errorf("%s: %.1f ± %.1f, want %.1f", v.what, got, u, v.want)
		}
	}
	// No closed form: the sets as measured here.
	for _, v := range []struct {
		what string
		set  []Pattern
	}{{"standard set", StandardSet()}, {"full set", FullSet()}} {
		got, u := runLength(t, 150, 0, 8, individuals(v.set))
		t.Logf("%s: %.1f ± %.1f", v.what, got, u)
		if !(got > 30 && got < 250) {
			t.Errorf("%s: %.1f", v.what, got)
		}
	}
}
