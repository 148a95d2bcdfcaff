package causal

import (
	"math"
	"math/bits"
	"testing"
)

// All orders of a and b signs, counted one by one.
func TestRunsByCounting(t *testing.T) {
	for a := 1; a <= 6; a++ {
		for b := 1; b <= 6; b++ {
			n, total := a+b, 0
			found := make([]int, n+1)
			for w := range 1 << n {
				if bits.OnesCount(uint(w)) != a {
					continue
				}
				x := make([]float64, n)
				for i := range x {
					x[i] = float64(w>>i&1) - 0.5
				}
				r := countRuns(x)
				found[r.Count]++
				total++
			}
			sum := 0
			for r := range found {
				sum += found[r]
				if p := atMost(r, a, b); math.Abs(p-float64(sum)/float64(total)) > 1e-12 {
					t.Errorf("P(R ≤ %d; %d, %d) = %g, want %d/%d", r, a, b, p, sum, total)
				}
			}
		}
	}
}

func TestRunsEdges(t *testing.T) {
	for _, c := range []struct {
		x    []float64
		want Runs
	}{
		{nil, Runs{P: 1}},
		{[]float64{0, 0}, Runs{P: 1}},
		{[]float64{1, 2, 3}, Runs{Positive: 3, Count: 1, P: 1}},
		{[]float64{1e-300, -1e-300, 0, 1e-300}, Runs{Positive: 2, Negative: 1, Count: 3, P: 1}},
	} {
		if got := countRuns(c.x); got.Positive != c.want.Positive || got.Negative != c.want.Negative || got.Count != c.want.Count || math.Abs(got.P-c.want.P) > 1e-12 {
			t.Errorf("%v: %+v, want %+v", c.x, got, c.want)
		}
	}
}
