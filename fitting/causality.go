package fitting

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"phaselag/data"
	"phaselag/data/unit"
	"phaselag/fitting/causal"
)

// Causality is the verdict of Kramers and Kronig on one isotherm, apart from the
// question whether isotherms superpose.
type Causality struct {
	Test         string      `json:"test"`
	TemperatureC unit.Number `json:"temperature_C"`
	Points       int         `json:"points"`
	Outcome      string      `json:"outcome"` // consistent, inconsistent or undecided
	Reason       string      `json:"reason"`  // why undecided
	// Misfit of the fit with free signs, which obeys Kramers and Kronig, and of
	// the non-negative one, rms.
	FreePercent        unit.Number `json:"free_percent"`
	FreeDeg            unit.Number `json:"free_deg"`
	NonNegativePercent unit.Number `json:"non_negative_percent"`
	NonNegativeDeg     unit.Number `json:"non_negative_deg"`
	// P is the least of the probabilities of the three decisions by chance,
	// times three; null where undecided.
	P unit.Number `json:"p"`
	// Likely is the mistake that would explain most, "" for none; Others cannot be
	// told from it here.
	Likely   string      `json:"likely"`
	Others   []string    `json:"others"`
	Estimate unit.Number `json:"estimate"`
	U        unit.Number `json:"u_estimate"`
	Unit     string      `json:"estimate_unit"`
}

// alarmCausality is the probability by chance, over all isotherms of a campaign,
// below which they are called inconsistent.
const alarmCausality = 0.01

// judgeCausality asks every isotherm whether it can be causal.
func (a *answer) judgeCausality() {
	magnitude, phase := math.NaN(), math.NaN()
	for g, kind := range a.kinds {
		if kind == data.FrequencySweep {
			magnitude, phase = a.noise[g].Magnitude, a.noise[g].Phase
		}
	}
	a.eachRun(func(ref runRef, test *data.Test, run *data.Run) {
		if test.Kind != data.FrequencySweep || used(run) < 2 {
			return
		}
		s := causal.Isotherm{Magnitude: magnitude, Phase: phase}
		var pts []data.Point
		for k, p := range run.Points {
			if p.Used && p.Storage > 0 && p.Loss > 0 && !a.distrusted(origin{ref.test, ref.run, k}) {
				pts = append(pts, p)
			}
		}
		sort.SliceStable(pts, func(i, j int) bool { return pts[i].Frequency < pts[j].Frequency })
		for i := 0; i < len(pts); {
			j, sum := i, complex(0, 0)
			for ; j < len(pts) && pts[j].Frequency <= pts[i].Frequency*(1+1e-6); j++ {
				sum += complex(pts[j].Storage, pts[j].Loss)
			}
			s.Frequency = append(s.Frequency, pts[i].Frequency)
			s.Modulus = append(s.Modulus, sum/complex(float64(j-i), 0))
			i = j
		}
		nan := unit.NaN()
		out := Causality{Test: test.Name, TemperatureC: number(degreesC(run.Temperature)), Points: len(s.Frequency), Others: []string{},
			FreePercent: nan, FreeDeg: nan, NonNegativePercent: nan, NonNegativeDeg: nan, P: nan, Estimate: nan, U: nan, Outcome: string(causal.Undecided)}
		v, err := causal.Judge(s)
		switch {
		case err != nil:
			out.Reason = strings.TrimPrefix(err.Error(), "causal: ")
		default:
			out.Outcome, out.Reason = string(v.Outcome), v.Reason
		}
		if err == nil && v.Outcome != causal.Undecided {
			out.FreePercent, out.FreeDeg = number(v.Free.RMSMagnitudePercent), number(v.Free.RMSPhaseDegrees)
			out.NonNegativePercent, out.NonNegativeDeg = number(v.NonNegative.RMSMagnitudePercent), number(v.NonNegative.RMSPhaseDegrees)
			p := min(v.Free.P, v.NonNegative.P)
			for _, w := range v.Suspicions {
				p = min(p, w.P)
				if w.Kind == v.Likely {
					out.Estimate, out.U, out.Unit = number(w.Estimate), number(w.Uncertainty), w.Unit
					if w.Unit == "rad" {
						out.Estimate, out.U, out.Unit = number(deg(w.Estimate)), number(deg(w.Uncertainty)), "deg"
					}
				}
			}
			out.P = number(min(1, 3*p))
			out.Likely = string(v.Likely)
			for _, k := range v.Others {
				out.Others = append(out.Others, string(k))
			}
		}
		a.causality = append(a.causality, out)
	})
	a.nameCausality()
}

// distrusted says whether a point has little weight.
func (a *answer) distrusted(o origin) bool {
	w := a.final.Form.Weights
	if w == nil {
		return false
	}
	for i, v := range a.origin {
		if v == o {
			return w[i] < 0.5
		}
	}
	return false
}

// nameCausality makes one finding of all isotherms that cannot be causal.
func (a *answer) nameCausality() {
	var bad []string
	kinds := map[string]int{}
	var order []string
	worst := 1.0
	decided := 0
	for _, v := range a.causality {
		if v.Outcome != string(causal.Undecided) {
			decided++
		}
	}
	for _, v := range a.causality {
		if !(float64(v.P)*float64(decided) < alarmCausality) {
			continue
		}
		worst = min(worst, float64(v.P)*float64(decided))
		bad = append(bad, celsius(float64(v.TemperatureC)+zeroC))
		for _, k := range append([]string{v.Likely}, v.Others...) {
			if k == "" {
				continue
			}
			if kinds[k] == 0 {
				order = append(order, k)
			}
			kinds[k]++
		}
	}
	if len(bad) == 0 {
		return
	}
	sort.SliceStable(order, func(i, j int) bool { return kinds[order[i]] > kinds[order[j]] })
	means := map[string]string{
		string(causal.PhaseOffset): "an offset of the phase (zero of the phase measurement, a filter in one channel)",
		string(causal.LossGain):    "an error of gain in the loss modulus",
		string(causal.Inertia):     "a moving mass that was not taken off, or taken off twice",
		string(causal.TimeDelay):   "a delay of one channel against the other",
	}
	var suggests []string
	for _, k := range order {
		suggests = append(suggests, fmt.Sprintf("%s (%d of %d)", means[k], kinds[k], len(bad)))
	}
	cause := "storage and loss modulus do not belong together"
	if len(suggests) > 0 {
		cause = "the misfit looks like " + strings.Join(suggests, "; or ")
	}
	if a.final.Form.Filler && a.final.Form.Kappa == 0 {
		cause += "; a filler network whose friction knows no rate looks the same"
	}
	a.find("isotherm-not-causal", data.Doubt, "",
		fmt.Sprintf("no relaxation spectrum gives both moduli of the isotherms at %s (p %.1g over all isotherms)", strings.Join(bad, ", "), max(worst, 1e-12)),
		cause, "check phase, inertia and delay of the apparatus with an elastic specimen; the table of causality has the sizes")
}

// powerStretch finds the longest stretch of reduced frequency, Hz, along which the
// fitted polymer term is nearly a power of frequency, with its exponent: there
// vertical and horizontal shifts are the same thing.
func (a *answer) powerStretch() (lo, hi, exponent float64) {
	fLo, fHi := a.window(a.free.LogShift)
	const perDecade = 8
	n := int(math.Log10(fHi/fLo)*perDecade) + 1
	if n < 3 {
		return 0, 0, 0
	}
	slope, f := make([]float64, n), make([]float64, n)
	value := func(f float64) float64 {
		s := a.free
		g := s.Polymer(f)
		return math.Log(math.Hypot(real(g), imag(g)))
	}
	for i := range n {
		f[i] = fLo * math.Pow(10, float64(i)/perDecade)
		slope[i] = (value(f[i]*1.3) - value(f[i]/1.3)) / (2 * math.Log(1.3))
	}
	// Slopes within a tenth of their mean, at least 0.05: flatter is a plateau,
	// which tells neither.
	best := 0
	for i := range n {
		low, high := slope[i], slope[i]
		for j := i; j < n; j++ {
			low, high = min(low, slope[j]), max(high, slope[j])
			if low < 0.05 || high-low > 0.2*(high+low)/2 {
				break
			}
			if j-i > best {
				best, lo, hi, exponent = j-i, f[i], f[j], (low+high)/2
			}
		}
	}
	return lo, hi, exponent
}
