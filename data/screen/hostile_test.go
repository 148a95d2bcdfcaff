package screen

import (
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"phaselag/data"
)

// Whatever stands in a campaign, Check neither panics nor writes NaN where a number
// belongs, changes nothing, and says the same again.
func TestHostileCampaigns(t *testing.T) {
	odd := []float64{math.NaN(), 0, 1, 1, 1e-30, 1e30, 293.15, 293.15, 0.01, 10, 1e6, math.Inf(1), -1}
	kinds := []data.Kind{data.FrequencySweep, data.StrainSweep, data.TemperatureSweep, data.Relaxation, data.Static, "unknown"}
	for seed := range uint64(400) {
		r := rand.New(rand.NewPCG(seed, 1))
		pick := func(sane float64) float64 {
			if r.IntN(8) == 0 {
				return odd[r.IntN(len(odd))]
			}
			return sane
		}
		c := &data.Campaign{Modulus: data.Shear}
		for i := range r.IntN(4) {
			c.Specimens = append(c.Specimens, data.Specimen{Name: string(rune('a' + i)), Shape: []string{"double shear", "", "parallel plates", "nothing"}[r.IntN(4)], Diameter: pick(0.025), Thickness: pick(0.005)})
		}
		for range r.IntN(5) {
			test := data.Test{Name: "test", Kind: kinds[r.IntN(len(kinds))], Specimen: string(rune('a' + r.IntN(4))), Direction: []string{"", "ascending", "descending"}[r.IntN(3)]}
			for range r.IntN(5) {
				run := data.Run{Name: "run", Temperature: pick(293.15), Frequency: pick(10), Strain: pick(0.01)}
				for k := range r.IntN(30) {
					run.Points = append(run.Points, data.Point{
						File: "file.csv", Row: k, Used: r.IntN(10) > 0,
						Frequency: pick(math.Pow(10, float64(k)/10)), Temperature: pick(run.Temperature + 0.1*r.NormFloat64()), Strain: pick(0.001 * math.Pow(10, float64(k)/10)), Time: pick(float64(k + 1)),
						Storage: pick(1e6 * (1 + 0.01*r.NormFloat64())), Loss: pick(1e5 * (1 + 0.1*r.NormFloat64())),
						StatedLossFactor: pick(0.1), StatedViscosity: pick(1e4), MassShare: pick(0), FrameShare: pick(0),
					})
				}
				for k := range run.Points {
					if oscillatory(test.Kind) {
						run.Points[k].Time = math.NaN()
					} else {
						run.Points[k].Frequency = math.NaN()
					}
				}
				test.Runs = append(test.Runs, run)
			}
			c.Tests = append(c.Tests, test)
		}
		before := make([]float64, 0)
		for i := range c.Tests {
			each(&c.Tests[i], func(p *data.Point) { before = append(before, p.Frequency, p.Storage, float64(p.Row)) })
		}
		first, second := Check(c), Check(c)
		if !slices.Equal(first, second) {
			t.Fatalf("seed %d: two checks differ", seed)
		}
		n := 0
		for i := range c.Tests {
			each(&c.Tests[i], func(p *data.Point) {
				for j, x := range []float64{p.Frequency, p.Storage, float64(p.Row)} {
					if x != before[n+j] && !(math.IsNaN(x) && math.IsNaN(before[n+j])) {
						t.Fatalf("seed %d: a point was changed", seed)
					}
				}
				n += 3
			})
		}
		for _, f := range first {
			if f.Code == "" || f.Evidence == "" || f.Cause == "" || f.Remedy == "" {
				t.Errorf("seed %d: incomplete: %+v", seed, f)
			}
			if strings.Contains(f.Evidence, "NaN") {
				t.Errorf("seed %d: %s: %s", seed, f.Code, f.Evidence)
			}
		}
	}
}
