package models

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// A surface is what Value and the intervals say, condition by condition, for
// compounds with any laws.
func TestSurface(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := mustNew(t, anyCompound(t))
		var f, T, s []float64
		for range 3 {
			q := anyCondition(t, c)
			f, T, s = append(f, q.Frequency), append(T, q.Temperature), append(s, q.Strain)
		}
		s = append(s, math.NaN())
		with, without := c.Surface(f, T, s, true), c.Surface(f, T, s, false)
		k := 0
		for _, temperature := range T {
			for _, hz := range f {
				for _, gamma := range s {
					q := Condition{hz, temperature, gamma}
					want := c.interval(q)
					for i, v := range [][3]float64{
						{with[k].Storage, want.Storage, want.Storage}, {with[k].Loss, want.Loss, want.Loss}, {with[k].Magnitude, want.Magnitude, want.Magnitude}, {with[k].LossFactor, want.LossFactor, want.LossFactor},
						{with[k].StorageU95, want.StorageU95, want.Magnitude}, {with[k].LossU95, want.LossU95, want.Magnitude}, {with[k].MagnitudeU95, want.MagnitudeU95, want.Magnitude}, {with[k].LossFactorU95, want.LossFactorU95, want.LossFactor},
						{without[k].Storage, want.Storage, want.Storage}, {without[k].Loss, want.Loss, want.Loss}, {with[k].ReducedFrequency, want.ReducedFrequency, want.ReducedFrequency},
					} {
						if math.IsNaN(v[1]) && math.IsNaN(v[0]) || v[0] == v[1] {
							continue
						}
						if !(math.Abs(v[0]-v[1]) <= 1e-9*math.Abs(v[2])+1e-9*math.Abs(v[1])) {
							t.Fatalf("%+v, number %d: %v, one by one %v", q, i, v[0], v[1])
						}
					}
					k++
				}
			}
		}
	})
}

// BenchmarkSurface is a map of 100 frequencies × 100 temperatures × 20 strain
// amplitudes; one value of each is checked.
func BenchmarkSurface(b *testing.B) {
	c := sample()
	withCovariance(&c, 0.01)
	v := mustNew(b, c)
	var f, T, s []float64
	for i := range 100 {
		f, T = append(f, math.Pow(10, -1+3*float64(i)/99)), append(T, 240+float64(i))
	}
	for i := range 20 {
		s = append(s, 0.001*math.Pow(10, 2*float64(i)/19))
	}
	for name, intervals := range map[string]bool{"values": false, "intervals": true} {
		b.Run(name, func(b *testing.B) {
			for b.Loop() {
				m := v.Surface(f, T, s, intervals)
				got, want := m[(57*100+31)*20+7], v.interval(Condition{f[31], T[57], s[7]})
				if len(m) != 200_000 || math.Abs(got.Storage/want.Storage-1) > 1e-12 || intervals && math.Abs(got.LossFactorU95/want.LossFactorU95-1) > 1e-9 {
					b.Fatal(got, want)
				}
			}
		})
	}
}
