package fitting

import (
	"math"
	"testing"

	"phaselag/data/demo"
)

// TestUnstatedScatter: a scatter of temperature that nobody stated is found by
// restricted likelihood, without bias in the mean of its square, from 13 isotherms
// that also have to tell the law; and the intervals of the law hold all the same.
func TestUnstatedScatter(t *testing.T) {
	const n = 8
	var squares float64
	hit, all := 0, 0
	truth := demo.Gum()
	for seed := range uint64(n) {
		c := open(t, truth, demo.IsothermPlan(), 700+seed)
		c.Uncertainty.TemperatureScatter = math.NaN()
		r, err := Characterize(c, &Settings{Replicates: -1})
		if err != nil {
			t.Fatal(err)
		}
		u := float64(r.Uncertainty.ScatterUsed)
		squares += u * u / n
		Tref := r.Compound.ReferenceTempC + 273.15
		for _, s := range r.Shifts {
			T := float64(s.TemperatureC) + 273.15
			want := math.Log10(truth.ShiftFactor(T)) - math.Log10(truth.ShiftFactor(Tref))
			if float64(s.LawU) > 0 {
				all++
				if math.Abs(float64(s.Law)-want) < 1.96*float64(s.LawU) {
					hit++
				}
			}
		}
	}
	// The simulated scatter is 0.3 K; the variance of 11 degrees of freedom in each of
	// 8 campaigns is known to 15 %.
	if rms := math.Sqrt(squares); rms < 0.2 || rms > 0.4 {
		t.Errorf("scatter %.3f K in the mean, simulated 0.3 K", rms)
	}
	if share := float64(hit) / float64(all); share < 0.8 {
		t.Errorf("the intervals of the law hold the truth in %.2f", share)
	}
}
