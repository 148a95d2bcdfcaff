package quality

import (
	"math"
	"math/rand/v2"
	"testing"
)

// Numbers by hand: values 1 2 4 3 between 0 and 6: mean 2.5, s = √(5/3), σ̂ = (4/3)/1.128379.
func TestCapable(t *testing.T) {
	c, err := Capable(series(1, 2, 4, 3, math.NaN()), Limits{0, 6}, "")
	if err != nil {
		t.Fatal(err)
	}
	s, w := math.Sqrt(5./3), 4./3/1.1283791671
	near(t, "Pp", c.Pp.Value, 1/s, 1e-12)
	near(t, "Ppk", c.Ppk.Value, 2.5/3/s, 1e-12)
	near(t, "Cp", c.Cp.Value, 1/w, 1e-9)
	near(t, "Cpk", c.Cpk.Value, 2.5/3/w, 1e-9)
	// χ² with 3 degrees of freedom: 0.2158 and 9.348 (printed tables).
	near(t, "low end", c.Pp.Low, math.Sqrt(.2158/3)/s, 1e-4)
	near(t, "high end", c.Pp.High, math.Sqrt(9.348/3)/s, 1e-4)
	if len(c.Doubts) != 1 || c.N != 4 {
		t.Errorf("%+v", c)
	}
	one, err := Capable(series(1, 2, 4, 3), Limits{NoLimit(), 6}, MovingRange)
	if err != nil || !math.IsNaN(one.Cp.Value) || math.Abs(one.Cpk.Value-3.5/3/w) > 1e-9 {
		t.Errorf("one limit: %+v, %v", one, err)
	}
	still, err := Capable(series(1, 1, 1), Limits{0, 2}, "")
	if err != nil || !math.IsNaN(still.Cpk.Value) || len(still.Doubts) != 2 {
		t.Errorf("no scatter: %+v, %v", still, err)
	}
	for _, bad := range []Limits{{NoLimit(), NoLimit()}, {2, 1}} {
		if _, err := Capable(series(1, 2), bad, ""); err == nil {
			t.Errorf("limits %v were taken", bad)
		}
	}
	if n := BatchesNeeded(0.1); n < 180 || n > 200 { // z²/(2·0.1²) = 192
		t.Errorf("%d batches for 10 %%", n)
	}
	if BatchesNeeded(0) != 0 || BatchesNeeded(math.NaN()) != 0 {
		t.Error("no share")
	}
}

// The degrees of freedom of R̄/d2, against a printed table (value from memory: 20 samples of
// 5 have 72.7, 10 of 5 have 36.5).
func TestRangesFreedom(t *testing.T) {
	for k, want := range map[int]float64{10: 36.5, 20: 72.7} {
		var b []Batch
		for i := range k {
			b = append(b, spread(1, float64(i+1)))
		}
		got, err := rangesFreedom(b)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "ν", got, want, 0.3)
	}
}

// Share of simulated series in which the stated 95 % interval holds the true index.
func TestCapabilityCoverage(t *testing.T) {
	const series, u = 800, 0.0077 // u of the share
	for _, v := range []struct {
		n, repeats int
		from       Scatter
		limits     Limits
		cp, cpk    float64
	}{
		{25, 1, MovingRange, Limits{-4, 4}, 4. / 3, 4. / 3},
		{25, 1, MovingRange, Limits{-4, 6}, 5. / 3, 4. / 3},
		{50, 1, MovingRange, Limits{-3, 5}, 4. / 3, 1},
		{15, 4, Within, Limits{-4, 6}, 5. / 3, 4. / 3},
	} {
		r := rand.New(rand.NewPCG(uint64(v.n), 3))
		var in [4]float64
		for range series {
			b := make([]Batch, v.n)
			for i := range b {
				for range v.repeats {
					b[i].Values = append(b[i].Values, r.NormFloat64())
				}
			}
			c, err := Capable(b, v.limits, v.from)
			if err != nil {
				t.Fatal(err)
			}
			for k, w := range []struct {
				i    Index
				true float64
			}{{c.Cp, v.cp}, {c.Cpk, v.cpk}, {c.Pp, v.cp}, {c.Ppk, v.cpk}} {
				if w.i.Low <= w.true && w.true <= w.i.High {
					in[k] += 1. / series
				}
			}
		}
		t.Logf("%d batches of %d, %v: Cp %.3f, Cpk %.3f, Pp %.3f, Ppk %.3f", v.n, v.repeats, v.limits, in[0], in[1], in[2], in[3])
		for k, share := range in {
			if math.Abs(share-0.95) > 4*u+0.01 {
				t.Errorf("index %d of %+v: %.3f", k, v, share)
			}
		}
	}
}
