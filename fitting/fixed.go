package fitting

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"phaselag/data"
	"phaselag/models"
)

// fixed averages the oscillatory measurements at one temperature, frequency
// and amplitude, as far as the temperature dependence at one frequency needs:
// for every frequency of temperature sweeps and of single-frequency tests.
func (a *answer) fixed() []FixedFrequency {
	type key struct{ f, T float64 } // Hz, °C
	type sums struct {
		n                      int
		st, lo, eta, st2, eta2 float64
		strain                 float64
	}
	groups := map[key]*sums{}
	a.eachRun(func(ref runRef, test *data.Test, run *data.Run) {
		if test.Kind != data.TemperatureSweep && (test.Kind != data.FrequencySweep || distinctFrequencies(run) > 1) {
			return
		}
		for _, p := range run.Points {
			if !p.Used {
				continue
			}
			T := math.Round((run.Temperature-zeroC)*10) / 10
			if math.IsNaN(T) {
				T = math.Round(p.Temperature - zeroC)
			}
			k := key{f: round6(p.Frequency), T: T}
			g := groups[k]
			if g == nil {
				g = &sums{}
				groups[k] = g
			}
			eta := p.Loss / p.Storage
			g.n++
			g.st, g.lo, g.eta = g.st+p.Storage, g.lo+p.Loss, g.eta+eta
			g.st2, g.eta2 = g.st2+p.Storage*p.Storage, g.eta2+eta*eta
			g.strain += p.Strain
		}
	})
	var keys []key
	for k := range groups {
		keys = append(keys, k)
	}
	sort.Slice(keys, func(i, j int) bool {
		if keys[i].f != keys[j].f {
			return keys[i].f < keys[j].f
		}
		return keys[i].T < keys[j].T
	})
	var out []FixedFrequency
	for _, k := range keys {
		g := groups[k]
		n := float64(g.n)
		half := func(sum, sum2 float64) float64 {
			if g.n < 2 {
				return math.NaN()
			}
			v := max(0, sum2-sum*sum/n) / (n - 1)
			return models.Quantile(n-1) * math.Sqrt(v/n)
		}
		out = append(out, FixedFrequency{
			TemperatureC: number(k.T), Frequency: number(k.f), Strain: number(100 * g.strain / n), Points: g.n,
			Storage: number(g.st / n / 1e6), Loss: number(g.lo / n / 1e6), LossFactor: number(g.eta / n),
			StorageU95: number(half(g.st, g.st2) / 1e6), LossFactorU95: number(half(g.eta, g.eta2)),
		})
	}
	return out
}

func round6(x float64) float64 { return math.Round(x*1e6) / 1e6 }

// fixedFindings doubts a modulus that falls on cooling, and names the peak of
// the loss factor.
func (a *answer) fixedFindings(rows []FixedFrequency) {
	for i := 0; i < len(rows); {
		j := i
		for j < len(rows) && rows[j].Frequency == rows[i].Frequency {
			j++
		}
		a.coldSoft(rows[i:j])
		a.lossPeak(rows[i:j])
		i = j
	}
}

// coldDrop is by how much a colder modulus must lie below a warmer one to be
// doubted, relative.
const coldDrop = 0.02

func (a *answer) coldSoft(rows []FixedFrequency) {
	stiffest := -1
	var soft []string
	for i := range rows {
		if stiffest < 0 || rows[i].Storage > rows[stiffest].Storage {
			stiffest = i
		}
	}
	for i := 0; i < stiffest; i++ {
		if float64(rows[i].Storage) < (1-coldDrop)*float64(rows[stiffest].Storage) {
			soft = append(soft, fmt.Sprintf("%.4g MPa at %s", float64(rows[i].Storage), celsius(float64(rows[i].TemperatureC)+zeroC)))
		}
	}
	if len(soft) > 0 {
		a.find("softer-when-colder", data.Doubt, "",
			fmt.Sprintf("%s′ is %s, below %.4g MPa at %s", a.symbol(), strings.Join(soft, " and "), float64(rows[stiffest].Storage), celsius(float64(rows[stiffest].TemperatureC)+zeroC)),
			"slip, loss of contact or preload at the cold end, another specimen, or a load cell at its limit; a rubber does not soften on cooling",
			"look at contact and static load at these temperatures and test again")
	}
}

func (a *answer) lossPeak(rows []FixedFrequency) {
	at := -1
	for i := range rows {
		if at < 0 || rows[i].LossFactor > rows[at].LossFactor {
			at = i
		}
	}
	if at <= 0 || at >= len(rows)-1 || len(rows) < 5 {
		return
	}
	r := rows[at]
	a.find("loss-factor-peak", data.Note, "",
		fmt.Sprintf("the loss factor at %.4g Hz is largest, %.3f, at %s (peak among the tested temperatures)", float64(r.Frequency), float64(r.LossFactor), celsius(float64(r.TemperatureC)+zeroC)),
		"glass transition at this frequency, by the peak of tan δ", "")
}
