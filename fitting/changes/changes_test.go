package changes

import (
	"flag"
	"fmt"
	"math"
	"math/rand/v2"
	"sync"
	"testing"

	"phaselag/data"
	"phaselag/data/demo"
	"phaselag/fitting"
	"phaselag/models"
)

var pairs = flag.Int("pairs", 8, "simulated pairs of batches (1000 in the long form)")

// laboratory is an approved compound, with the errors that it shares with the batches.
func approved(t testing.TB, truth demo.Truth, plan demo.Plan, seed uint64) *models.Compound {
	t.Helper()
	c, err := data.OpenFS(demo.Campaign(truth, plan, seed), demo.CampaignFile)
	if err != nil {
		t.Fatal(err)
	}
	r, err := fitting.Characterize(c, &fitting.Settings{Replicates: -1, Workers: 1})
	if err != nil {
		t.Fatal(err)
	}
	return r.Compound
}

func campaignOf(t testing.TB, truth demo.Truth, plan demo.Plan, seed uint64) *data.Campaign {
	t.Helper()
	c, err := data.OpenFS(demo.Campaign(truth, plan, seed), demo.CampaignFile)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// Without any error the changes are what was done to the compound.
func TestNoiseless(t *testing.T) {
	truth := demo.HM60()
	c := approved(t, truth, demo.HM60Plan().Noiseless(), 1)
	b := demo.Batch{Warmer: 2, Stiffness: 1.05, Filler: 1.1, Critical: 0.9}
	got, err := Points(c, campaignOf(t, truth.Changed(b), demo.ReleasePlan().Noiseless(), 2), &Settings{SameThermometer: true, SamePhase: true, SameGauge: true})
	if err != nil {
		t.Fatal(err)
	}
	want := map[Kind]float64{Temperature: 2, Stiffness: 1.05, Loss: 1, Filler: 1.1, Critical: 0.9}
	for _, v := range got.Changes {
		if !v.Determined || math.Abs(v.Value-want[v.Kind]) > 0.02*math.Max(want[v.Kind], 1) {
			t.Errorf("%s: %+v, should be %g", v.Kind, v, want[v.Kind])
		}
	}
}

// plans with a stated geometry, and no error of what both batches share: an error of one
// thermometer for both moves both alike.
func plans(geometry float64) (full, short demo.Plan) {
	full, short = demo.HM60Plan(), demo.ReleasePlan()
	for _, p := range []*demo.Plan{&full, &short} {
		p.Errors.Geometry = geometry
		p.Errors.TemperatureCommon, p.Errors.Phase = 0, 0
	}
	return full, short
}

// TestPairs: simulated pairs of an approved compound and a batch, with a geometry of 0.5 %
// and one thermometer and phase calibration for both, σ_m 0.5 % and σ_δ 0.3°. Intervals
// hold the truth as often as they say; a shift of 1 K and 3 % of stiffness are found from
// the short release test; unchanged batches are left alone; the smallest change printed is
// right, also with a geometry of 1.5 %. Each approved compound serves a few batches.
func TestPairs(t *testing.T) {
	truth := demo.HM60()
	n := *pairs
	const each = 4 // batches of an approved compound
	var mu sync.Mutex
	hit, told := map[string]int{}, map[string]int{}
	found, claimed, seen := map[string]int{}, 0, map[string]int{}
	unchanged := 0
	var group sync.WaitGroup
	slots := make(chan struct{}, 2)
	same := &Settings{SameThermometer: true, SamePhase: true}
	for seed := range (n + each - 1) / each {
		for _, geometry := range []float64{0.005, 0.015} {
			group.Add(1)
			slots <- struct{}{}
			go func() {
				defer func() { <-slots; group.Done() }()
				full, short := plans(geometry)
				a := approved(t, truth, full, 9000+uint64(seed))
				for k := range each {
					r := rand.New(rand.NewPCG(uint64(seed), uint64(k)))
					one := func(b demo.Batch, s uint64) *Comparison {
						c, err := Points(a, campaignOf(t, truth.Changed(b), short, 100_000+uint64(seed)*100+uint64(k)*10+s), same)
						if err != nil {
							t.Error(err)
							return &Comparison{Changes: all(map[Kind]string{})}
						}
						return c
					}
					b := demo.Batch{Warmer: 4*r.Float64() - 2, Stiffness: 0.95 + 0.1*r.Float64(), Filler: 0.9 + 0.2*r.Float64(), Critical: 0.9 + 0.2*r.Float64()}
					random, plain := one(b, 1), one(demo.Batch{}, 2)
					want := map[Kind]float64{Temperature: b.Warmer, Stiffness: b.Stiffness, Loss: 1, Filler: b.Filler, Critical: b.Critical}
					mu.Lock()
					for _, v := range random.Changes {
						key := fmt.Sprintf("%s, geometry %g %%", v.Kind, 100*geometry)
						if v.Determined {
							told[key]++
							if math.Abs(v.Value-want[v.Kind]) <= v.U95 {
								hit[key]++
							}
						}
					}
					unchanged++
					if plain.Any() {
						claimed++
					}
					mu.Unlock()
					if geometry == 0.005 {
						warm, stiff := one(demo.Batch{Warmer: 1}, 3), one(demo.Batch{Stiffness: 1.03}, 4)
						mu.Lock()
						if v, _ := warm.Found(string(Temperature)); v.Real {
							found["1 K"]++
						}
						if v, _ := stiff.Found(string(Stiffness)); v.Real {
							found["3 %"]++
						}
						mu.Unlock()
					}
					dT, _ := plain.Found(string(Temperature))
					ds, _ := plain.Found(string(Stiffness))
					warm, stiff := one(demo.Batch{Warmer: dT.Smallest}, 5), one(demo.Batch{Stiffness: 1 + ds.Smallest}, 6)
					mu.Lock()
					if v, _ := warm.Found(string(Temperature)); v.Real {
						seen[fmt.Sprintf("temperature, geometry %g %%", 100*geometry)]++
					}
					if v, _ := stiff.Found(string(Stiffness)); v.Real {
						seen[fmt.Sprintf("stiffness, geometry %g %%", 100*geometry)]++
					}
					mu.Unlock()
				}
			}()
		}
	}
	group.Wait()
	total := (n + each - 1) / each * each
	least, most := 0.915, 0.985
	power, error5 := 0.9, 0.05
	lo, hi := 0.82, 0.97
	if n < 500 {
		least, most, power, error5, lo, hi = 0.8, 1, 0.8, 0.12, 0.7, 1
	}
	for _, k := range kinds {
		for _, g := range []float64{0.5, 1.5} {
			key := fmt.Sprintf("%s, geometry %g %%", k, g)
			share := float64(hit[key]) / float64(told[key])
			t.Logf("| coverage | %s | %d | %.3f |", key, told[key], share)
			if share < least || share > most {
				t.Errorf("%s: %.3f of %d", key, share, told[key])
			}
		}
	}
	for _, key := range []string{"1 K", "3 %"} {
		share := float64(found[key]) / float64(total)
		t.Logf("| found | %s, geometry 0.5 %% | %d | %.3f |", key, total, share)
		if share < power {
			t.Errorf("%s found in %.3f of %d", key, share, total)
		}
	}
	t.Logf("| claimed | unchanged batches | %d | %.3f |", unchanged, float64(claimed)/float64(unchanged))
	if share := float64(claimed) / float64(unchanged); share > error5 {
		t.Errorf("a change is claimed in %.3f of %d unchanged batches", share, unchanged)
	}
	for _, what := range []string{"temperature", "stiffness"} {
		for _, g := range []float64{0.5, 1.5} {
			key := fmt.Sprintf("%s, geometry %g %%", what, g)
			share := float64(seen[key]) / float64(total)
			t.Logf("| smallest seen | %s | %d | %.3f |", key, total, share)
			if share < lo || share > hi {
				t.Errorf("the smallest change of %s is seen in %.3f of %d", key, share, total)
			}
		}
	}
}

// TestCompoundPairs: the same of two compound files, each from its own campaign.
func TestCompoundPairs(t *testing.T) {
	truth := demo.HM60()
	n := max(4, *pairs/4)
	full, _ := plans(0.005)
	same := &Settings{SameThermometer: true, SamePhase: true}
	hit, told := map[Kind]int{}, map[Kind]int{}
	var mu sync.Mutex
	var group sync.WaitGroup
	slots := make(chan struct{}, 2)
	for seed := range n {
		group.Add(1)
		slots <- struct{}{}
		go func() {
			defer func() { <-slots; group.Done() }()
			r := rand.New(rand.NewPCG(uint64(seed), 9))
			b := demo.Batch{Warmer: 4*r.Float64() - 2, Stiffness: 0.95 + 0.1*r.Float64(), Filler: 0.9 + 0.2*r.Float64(), Critical: 0.9 + 0.2*r.Float64()}
			want := map[Kind]float64{Temperature: b.Warmer, Stiffness: b.Stiffness, Loss: 1, Filler: b.Filler, Critical: b.Critical}
			c, err := Compounds(approved(t, truth, full, 20_000+uint64(seed)), approved(t, truth.Changed(b), full, 30_000+uint64(seed)), same)
			if err != nil {
				t.Error(err)
				return
			}
			mu.Lock()
			defer mu.Unlock()
			for _, v := range c.Changes {
				if v.Determined {
					told[v.Kind]++
					if math.Abs(v.Value-want[v.Kind]) <= v.U95 {
						hit[v.Kind]++
					}
				}
			}
		}()
	}
	group.Wait()
	least := 0.9
	if n < 100 {
		least = 0.6
	}
	for _, k := range kinds {
		share := float64(hit[k]) / float64(told[k])
		t.Logf("| coverage, compound files | %s | %d | %.3f |", k, told[k], share)
		if share < least {
			t.Errorf("%s: %.3f of %d", k, share, told[k])
		}
	}
}
