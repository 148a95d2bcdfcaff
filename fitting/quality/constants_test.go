package quality

import (
	"math"
	"testing"
)

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s: %.9g, want %.9g ± %.1g", what, got, want, tol)
	}
}

// The digits were computed independently in double precision; c4, A2, A3, B3 and B4 agree
// with the tables that are printed with three decimals.
func TestFactors(t *testing.T) {
	for _, v := range []struct {
		n                                  int
		c4, d2, d3, a2, a3, b3, b4, D3, D4 float64
	}{
		{2, .797885, 1.128379, .852502, 1.8800, 2.6587, 0, 3.2665, 0, 3.2665},
		{3, .886227, 1.692569, .888368, 1.0233, 1.9544, 0, 2.5682, 0, 2.5746},
		{4, .921318, 2.058751, .879808, .7286, 1.6281, 0, 2.2660, 0, 2.2821},
		{5, .939986, 2.325929, .864082, .5768, 1.4273, 0, 2.0890, 0, 2.1145},
		{6, .951533, 2.534413, .848040, .4832, 1.2871, .0304, 1.9696, 0, 2.0038},
		{7, .959369, 2.704357, .833205, .4193, 1.1819, .1177, 1.8823, .0757, 1.9243},
		{8, .965030, 2.847201, .819831, .3725, 1.0991, .1851, 1.8149, .1362, 1.8638},
		{9, .969311, 2.970026, .807834, .3367, 1.0317, .2391, 1.7609, .1840, 1.8160},
		{10, .972659, 3.077505, .797051, .3083, .9754, .2837, 1.7163, .2230, 1.7770},
	} {
		c, err := Factors(v.n)
		if err != nil {
			t.Fatal(err)
		}
		for _, w := range []struct {
			name      string
			got, want float64
			tol       float64
		}{
			{"c4", c.C4, v.c4, 6e-7}, {"d2", c.RangeMean, v.d2, 6e-7}, {"d3", c.RangeSD, v.d3, 6e-7},
			{"A2", c.A2, v.a2, 6e-5}, {"A3", c.A3, v.a3, 6e-5}, {"B3", c.B3, v.b3, 6e-5}, {"B4", c.B4, v.b4, 6e-5},
			{"D3", c.D3, v.D3, 6e-5}, {"D4", c.D4, v.D4, 6e-5},
		} {
			near(t, w.name, w.got, w.want, w.tol)
		}
	}
	// Closed forms: d2 = 2/√π and d3² = 2 − 4/π for two values, d2 = 3/√π for three.
	two, _ := Factors(2)
	near(t, "d2(2)", two.RangeMean, 2/math.Sqrt(math.Pi), 1e-12)
	near(t, "d3(2)", two.RangeSD, math.Sqrt(2-4/math.Pi), 1e-12)
	mean, sd := rangeQuadrature(2)
	near(t, "d2(2) by quadrature", mean, two.RangeMean, 1e-11)
	near(t, "d3(2) by quadrature", sd, two.RangeSD, 1e-11)
	three, _ := Factors(3)
	near(t, "d2(3)", three.RangeMean, 3/math.Sqrt(math.Pi), 1e-11)
	// Printed tables (value from memory): d2 = 3.735 for 20, 3.931 for 25.
	twenty, _ := Factors(20)
	near(t, "d2(20)", twenty.RangeMean, 3.735, 6e-4)
	most, _ := Factors(25)
	near(t, "d2(25)", most.RangeMean, 3.931, 6e-4)
	near(t, "d3(25)", most.RangeSD, 0.708, 6e-4)
	for _, n := range []int{-1, 0, 1, 26} {
		if _, err := Factors(n); err == nil {
			t.Errorf("a sample of %d was taken", n)
		}
	}
}

// Every constant moves one way with the size of the sample.
func TestFactorsInOrder(t *testing.T) {
	last, _ := Factors(2)
	for n := 3; n <= MaxSample; n++ {
		c, err := Factors(n)
		if err != nil {
			t.Fatal(err)
		}
		if !(c.C4 > last.C4 && c.RangeMean > last.RangeMean && c.A2 < last.A2 && c.A3 < last.A3 && c.B4 < last.B4 && c.D4 < last.D4 && c.B3 >= last.B3 && c.D3 >= last.D3) {
			t.Errorf("%d: %+v after %+v", n, c, last)
		}
		last = c
	}
}
