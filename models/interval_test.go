package models

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"

	"pgregory.net/rapid"

	"phaselag/data/unit"
)

// t(0.975, ν), two-sided 95 %: the table in every book of statistics; the
// normal limit 1.959964.
func TestQuantile(t *testing.T) {
	for _, c := range []struct{ dof, want float64 }{
		{1, 12.7062}, {2, 4.3027}, {5, 2.5706}, {10, 2.2281}, {12, 2.1788}, {30, 2.0423}, {120, 1.9799},
		{math.NaN(), 1.959964}, {math.Inf(1), 1.959964}, {1e7, 1.959964},
	} {
		if q := Quantile(c.dof); math.Abs(q-c.want) > 5.1e-5 {
			t.Errorf("t(0.975, %g) = %.6f, want %.6f", c.dof, q, c.want)
		}
	}
}

// Parameters redrawn from the covariance: the answers' scatter over √(gᵀCg) is
// 1, and 95 % of them lie within U95 of the answer. Seed fixed beforehand.
func TestIntervalsAgainstRedrawnParameters(t *testing.T) {
	in := sample()
	in.Uncertainty.DegreesOfFreedom = unit.NaN() // the covariance is known: normal
	withCovariance(&in, 0.004)
	c := mustNew(t, in)
	names := c.Uncertainty.Parameters
	conditions := []Condition{
		{10, 23 + zeroC, math.NaN()}, {100, -20 + zeroC, math.NaN()}, {1, 60 + zeroC, 0.05}, {5, 40 + zeroC, 0.002},
	}
	ref := Condition{10, 23 + zeroC, 0.001}
	const draws = 4000
	rnd := rand.New(rand.NewPCG(20261201, 1))
	type tally struct {
		u95, inside, square float64
	}
	var got [4][6]tally
	centre := make([]Modulus, len(conditions))
	ratio := make([]complex128, len(conditions))
	for i, q := range conditions {
		m, err := c.Modulus(q)
		if err != nil {
			t.Fatal(err)
		}
		centre[i] = m
		r, uMag, uAngle := c.Ratio(q, ref)
		ratio[i] = r
		for k, u := range []float64{m.StorageU95, m.LossU95, m.MagnitudeU95, m.LossFactorU95, uMag, uAngle} {
			got[i][k].u95 = u
		}
	}
	z := make([]float64, len(names))
	for range draws {
		for i := range z {
			z[i] = rnd.NormFloat64()
		}
		change := map[string]float64{}
		for i, name := range names {
			for j, l := range c.Uncertainty.Cholesky[i] {
				change[name] += l * z[j]
			}
		}
		n := moved(t, c, change)
		value := func(q Condition) complex128 {
			q.Temperature -= change[ParamTemperature]
			return n.Value(q) * complex(1+change[ParamSpecimen], 0)
		}
		g0 := value(ref)
		for i, q := range conditions {
			g := value(q)
			m := centre[i]
			r := g / g0 / ratio[i]
			for k, d := range []float64{
				real(g) - m.Storage, imag(g) - m.Loss, cmplx.Abs(g) - m.Magnitude, imag(g)/real(g) - m.LossFactor,
				(cmplx.Abs(r) - 1) * cmplx.Abs(ratio[i]), cmplx.Phase(r),
			} {
				got[i][k].square += d * d
				if math.Abs(d) <= got[i][k].u95 {
					got[i][k].inside++
				}
			}
		}
	}
	for i, q := range conditions {
		for k, what := range []string{"G'", "G''", "|G*|", "tan δ", "ratio", "angle"} {
			v := got[i][k]
			// Standard errors: 0.34 % of a share of 95 %, 1.1 % of a deviation.
			share, spread := v.inside/draws, math.Sqrt(v.square/draws)/(v.u95/c.Quantile())
			if math.Abs(share-0.95) > 0.013 || math.Abs(spread-1) > 0.04 {
				t.Errorf("%s at %g Hz, %g K: %.1f %% inside, scatter/u = %.3f", what, q.Frequency, q.Temperature, 100*share, spread)
			}
		}
	}
}

// A common factor of the specimens cancels from a ratio, exactly; a ratio to
// itself is 1 and certain.
func TestRatioCancels(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		in := anyCompound(t)
		in.Uncertainty.Parameters = []string{ParamSpecimen}
		in.Uncertainty.Cholesky = []Row{{0.03}}
		c := mustNew(t, in)
		q, ref := anyCondition(t, c), anyCondition(t, c)
		if _, mag, angle := c.Ratio(q, ref); mag != 0 || angle != 0 {
			t.Errorf("a factor left %g and %g", mag, angle)
		}
		withCovariance(&in, 0.02)
		c = mustNew(t, in)
		r, mag, angle := c.Ratio(q, q)
		if cmplx.Abs(r-1) > 1e-15 || mag != 0 || angle != 0 {
			t.Errorf("G*/G* = %v ± %g, %g rad", r, mag, angle)
		}
	})
}

// Deviation is √(gᵀCg) with C = LLᵀ: against the plain double sum.
func TestDeviation(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		in := anyCompound(t)
		c := mustNew(t, in)
		L := c.Uncertainty.Cholesky
		g := make([]float64, len(L))
		for i := range g {
			g[i] = rapid.Float64Range(-3, 3).Draw(t, "g")
		}
		var sum, size float64
		for i := range L {
			for j := range L {
				var cij float64
				for k := range min(i, j) + 1 {
					cij += L[i][k] * L[j][k]
				}
				sum += g[i] * cij * g[j]
				size += math.Abs(g[i] * cij * g[j])
			}
		}
		if d := c.Deviation(g); math.Abs(d*d-sum) > 1e-12*size {
			t.Errorf("variance %g, want %g", d*d, sum)
		}
	})
}
