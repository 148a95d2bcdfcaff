package fitting

import (
	"fmt"
	"math"
	"sort"

	"phaselag/data/unit"
	"phaselag/fitting/superpose"
	"phaselag/models"
)

// Bootstrap compares the stated uncertainties with the scatter of campaigns drawn
// from the fitted compound.
type Bootstrap struct {
	Replicates int            `json:"replicates"` // 0: not made
	Failed     int            `json:"failed"`     // fits that did not end
	Rows       []BootstrapRow `json:"rows"`
}

// BootstrapRow is one quantity.
type BootstrapRow struct {
	Quantity string      `json:"quantity"`
	Unit     string      `json:"unit"`
	Value    unit.Number `json:"value"`
	U        unit.Number `json:"u"`           // stated, linearised
	Scatter  unit.Number `json:"u_bootstrap"` // standard deviation of the draws
	Bias     unit.Number `json:"bias"`        // mean of the draws less the value
	Low      unit.Number `json:"low"`         // 95 % interval: the value less the quantiles of the draws' errors
	High     unit.Number `json:"high"`
}

// quantity is what the bootstrap takes from a fit.
type quantity struct {
	name, unit string
	u          float64
	of         func(s *superpose.Solution) float64
}

// leastDraws is the number of draws below which a standard deviation says little.
const leastDraws = 20

// bootstrap draws campaigns from the final fit and compares.
func (a *answer) bootstrap(r *Result) {
	n := a.set.Bootstrap
	if n <= 0 || r.Compound == nil {
		return
	}
	list := a.quantities(r)
	common := superpose.Common{Factor: commonFactor(a.problem, a.campaign.Uncertainty)}
	if u := a.campaign.Uncertainty.TemperatureCommon; u > 0 {
		common.Temperature = u
	}
	draws := a.final.Replicates(n, common, a.seed(), a.set.Workers, func(s *superpose.Solution) []float64 {
		out := make([]float64, len(list))
		for i, q := range list {
			out[i] = q.of(s)
		}
		return out
	}, a.set.Progress)
	b := Bootstrap{Replicates: n}
	for _, d := range draws {
		if d == nil {
			b.Failed++
		}
	}
	if n-b.Failed < leastDraws {
		a.assume("bootstrap of the intervals: %d of %d draws fitted, too few to tell", n-b.Failed, n)
		r.Bootstrap = b
		return
	}
	for i, q := range list {
		value := q.of(a.final)
		var v []float64
		var sum float64
		for _, d := range draws {
			if d != nil {
				v = append(v, d[i]-value)
				sum += d[i] - value
			}
		}
		mean := sum / float64(len(v))
		var squares float64
		for _, x := range v {
			squares += (x - mean) * (x - mean)
		}
		sort.Float64s(v)
		at := func(p float64) float64 {
			x := p*float64(len(v)+1) - 1
			k := max(0, min(len(v)-2, int(math.Floor(x))))
			return v[k] + max(0, min(1, x-float64(k)))*(v[k+1]-v[k])
		}
		b.Rows = append(b.Rows, BootstrapRow{
			Quantity: q.name, Unit: q.unit, Value: number(value), U: number(q.u), Scatter: number(math.Sqrt(squares / float64(len(v)-1))),
			Bias: number(mean), Low: number(value - at(0.975)), High: number(value - at(0.025)),
		})
	}
	r.Bootstrap = b
}

// quantities lists the constants and, at the preferred temperatures within the
// domain, storage modulus and loss factor.
func (a *answer) quantities(r *Result) []quantity {
	var out []quantity
	u := map[string]float64{}
	for _, p := range r.Parameters {
		u[p.Name] = float64(p.U)
	}
	add := func(name, unit string, of func(s *superpose.Solution) float64) {
		if v, ok := u[name]; ok {
			out = append(out, quantity{name, unit, v, of})
		}
	}
	idx := a.final.Indices()
	at := func(i int) func(s *superpose.Solution) float64 {
		return func(s *superpose.Solution) float64 { return s.Theta[i] }
	}
	if idx.Law >= 0 {
		add("C1", "", at(idx.Law))
		add("C2", "K", at(idx.Law+1))
		add("activation energy of the shift", "kJ/mol", at(idx.Law))
		add("crossover temperature", "°C", func(s *superpose.Solution) float64 { return degreesC(s.Theta[idx.Law+2]) })
	}
	add("filler storage ΔG′", "MPa", func(s *superpose.Solution) float64 { return s.FillerStorage / 1e6 })
	add("filler loss ΔG″", "MPa", func(s *superpose.Solution) float64 { return s.FillerLoss / 1e6 })
	if idx.Critical >= 0 {
		add("critical strain", "%", func(s *superpose.Solution) float64 { return 100 * math.Exp(s.Theta[idx.Critical]) })
	}
	if idx.Exponent >= 0 {
		add("Kraus exponent m", "", at(idx.Exponent))
	}
	if idx.Extra >= 0 {
		add("extra loss modulus", "MPa", func(s *superpose.Solution) float64 { return s.FillerExtra / 1e6 })
		add("extra loss strain", "%", func(s *superpose.Solution) float64 { return 100 * s.ExtraStrain() })
	}
	if idx.Alpha >= 0 {
		add("filler storage ratio α", "", at(idx.Alpha))
		add("filler loss ratio β", "", at(idx.Beta))
	}
	if idx.Activation >= 0 {
		add("filler activation energy", "kJ/mol", at(idx.Activation))
	}
	c := r.Compound
	t95 := models.Quantile(a.dof())
	for _, T := range Preferred(c.Domain.Temperature[0], c.Domain.Temperature[1]) {
		q := models.Condition{Frequency: 10, Temperature: T + zeroC, Strain: math.NaN()}
		m, err := c.Modulus(q)
		if err != nil || c.Vertical.Law == models.VerticalFactors {
			continue
		}
		strain := float64(c.Domain.OwnStrain) / 100
		value := func(s *superpose.Solution) complex128 { return s.Value(q.Frequency, q.Temperature, strain) }
		out = append(out,
			quantity{fmt.Sprintf("%s′ at 10 Hz, %s", a.symbol(), celsius(q.Temperature)), "MPa", m.StorageU95 / t95 / 1e6, func(s *superpose.Solution) float64 { return real(value(s)) / 1e6 }},
			quantity{fmt.Sprintf("tan δ at 10 Hz, %s", celsius(q.Temperature)), "", m.LossFactorU95 / t95, func(s *superpose.Solution) float64 { g := value(s); return imag(g) / real(g) }})
	}
	return out
}
