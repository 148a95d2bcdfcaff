package causal

import "math"

// Runs is the test of Wald and Wolfowitz on the signs of residuals along
// frequency. With a residuals of one sign and b of the other in random order,
// the number of runs R of equal sign has
//
//	P(R = 2k)   = 2·C(a−1, k−1)·C(b−1, k−1) / C(a+b, a)
//	P(R = 2k+1) = [C(a−1, k)·C(b−1, k−1) + C(a−1, k−1)·C(b−1, k)] / C(a+b, a)
//
// and too few runs tell of a systematic misfit. Residuals of a fit alternate
// a little more than random ones, which makes the test cautious.
//
// Source: Wald and Wolfowitz, Ann. Math. Statist. 11 (1940) 147.
type Runs struct {
	Positive, Negative int     // residuals of either sign; exact zeros are left out
	Count              int     // runs found
	P                  float64 // probability of so few or fewer by chance; 1 when all signs agree
}

func countRuns(residual []float64) Runs {
	var r Runs
	last := 0.0
	for _, x := range residual {
		switch {
		case x > 0:
			r.Positive++
		case x < 0:
			r.Negative++
		default:
			continue
		}
		if math.Copysign(1, x) != last {
			r.Count++
		}
		last = math.Copysign(1, x)
	}
	r.P = atMost(r.Count, r.Positive, r.Negative)
	return r
}

// atMost is P(R ≤ r) for a and b signs.
func atMost(r, a, b int) float64 {
	if a == 0 || b == 0 {
		return 1
	}
	all := logChoose(a+b, a)
	c := func(n, k int) float64 { return logChoose(n, k) }
	p := 0.0
	for i := 2; i <= r; i++ {
		k := i / 2
		if i%2 == 0 {
			p += 2 * math.Exp(c(a-1, k-1)+c(b-1, k-1)-all)
		} else {
			p += math.Exp(c(a-1, k)+c(b-1, k-1)-all) + math.Exp(c(a-1, k-1)+c(b-1, k)-all)
		}
	}
	return min(p, 1)
}

// logChoose is ln C(n, k), −Inf outside 0 ≤ k ≤ n.
func logChoose(n, k int) float64 {
	if k < 0 || k > n {
		return math.Inf(-1)
	}
	x, _ := math.Lgamma(float64(n + 1))
	y, _ := math.Lgamma(float64(k + 1))
	z, _ := math.Lgamma(float64(n - k + 1))
	return x - y - z
}
