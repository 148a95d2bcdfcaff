package models

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// Range is a closed interval [lower, upper].
type Range [2]float64

// rangeGuard is how far outside a bound still counts as inside, as a share of
// the bound, because a conversion of units rounds.
const rangeGuard = 1e-9

// Contains reports whether x is inside, each bound widened by 1e-9 of itself.
func (r Range) Contains(x float64) bool {
	return x >= r[0]-rangeGuard*math.Abs(r[0]) && x <= r[1]+rangeGuard*math.Abs(r[1])
}

// Nearest is the value of the interval that is nearest to x.
func (r Range) Nearest(x float64) float64 { return max(r[0], min(r[1], x)) }

// short is the nearest value to x in the interval with the fewest digits, at
// least four, that do not leave it, and that number.
func (r Range) short(x float64) (string, float64) {
	x = r.Nearest(x)
	for digits := 4; digits < 17; digits++ {
		text := strconv.FormatFloat(x, 'g', digits, 64)
		if v, err := strconv.ParseFloat(text, 64); err == nil && r.Contains(v) {
			return strconv.FormatFloat(v, 'g', -1, 64), v
		}
	}
	return strconv.FormatFloat(x, 'g', -1, 64), x
}

// OutsideError says that a condition lies outside the domain of a compound.
type OutsideError struct {
	Quantities []string // "temperature", "frequency", "strain"; "time" for a relaxation modulus
	Reason     string   // in numbers, for people
	Nearest    string   // the nearest allowed values, for people
	// Allowed is the nearest condition inside: temperature first, then the
	// frequency at that temperature, then the strain.
	Allowed Condition
}

func (e *OutsideError) Error() string {
	return "outside: " + e.Reason + "; nearest allowed: " + e.Nearest
}

// Inside returns nil if q lies inside the domain, an *OutsideError if it does
// not, and another error if it is no condition at all.
//
// Temperature, reduced frequency and strain each have their range. Strain
// above the isotherms' own amplitude is trusted only within amplitudeReach of
// the temperatures of the strain sweeps. A frequency is judged only where the
// temperature is inside, because the shift law holds only there.
func (c *Compound) Inside(q Condition) error {
	if !(q.Frequency > 0) || math.IsInf(q.Frequency, 0) {
		return fmt.Errorf("frequency %g Hz: must be positive and finite", q.Frequency)
	}
	if !(q.Temperature > 0) || math.IsInf(q.Temperature, 0) {
		return fmt.Errorf("temperature %g K: must be above absolute zero and finite", q.Temperature)
	}
	if q.Strain < 0 || math.IsInf(q.Strain, 0) {
		return fmt.Errorf("strain amplitude %g: must be positive and finite", q.Strain)
	}
	var out OutsideError
	var reasons []string
	add := func(quantity, format string, a ...any) {
		out.Quantities = append(out.Quantities, quantity)
		reasons = append(reasons, fmt.Sprintf(format, a...))
	}
	T := celsius(q.Temperature)
	dom := c.Domain
	if !dom.Temperature.Contains(T) {
		add("temperature", "%.4g °C is not within the tested %.4g to %.4g °C", T, dom.Temperature[0], dom.Temperature[1])
	} else if fr := q.Frequency * c.shift(q.Temperature); !dom.ReducedFrequency.Contains(fr) {
		add("frequency", "%.4g Hz at %.4g °C is %.3g Hz reduced to %.4g °C, not within the measured %.3g to %.3g Hz", q.Frequency, T, fr, c.ReferenceTempC, dom.ReducedFrequency[0], dom.ReducedFrequency[1])
	}
	if p := 100 * q.Strain; !math.IsNaN(p) {
		switch {
		case dom.Strain == nil:
			add("strain", "no strain amplitude was ever stated with the measurements")
		case !dom.Strain.Contains(p):
			add("strain", "a strain amplitude of %.3g %% is not within the measured %.3g to %.3g %%", p, dom.Strain[0], dom.Strain[1])
		case !c.strainTrusted(p, T):
			m := dom.AmplitudeMeasuredAt
			add("strain", "above the isotherms' amplitude of %.3g %% strain dependence was measured from %.4g to %.4g °C only", float64(dom.OwnStrain), m.Temperature[0], m.Temperature[1])
		}
	}
	if len(out.Quantities) == 0 {
		return nil
	}
	out.Reason = strings.Join(reasons, "; ")
	out.Allowed, out.Nearest = c.nearest(q)
	return &out
}

// celsius turns K into °C without the noise of the subtraction.
func celsius(T float64) float64 { return math.Round((T-zeroC)*1e9) / 1e9 }

// amplitudeReach is how far from the temperatures of the strain sweeps the
// amplitude law is trusted above the isotherms' own amplitude, K.
const amplitudeReach = 10

// reach is where strain above the isotherms' own amplitude is trusted, °C.
func (m *AmplitudeMeasuredAt) reach() Range {
	return Range{m.Temperature[0] - amplitudeReach, m.Temperature[1] + amplitudeReach}
}

// strainTrusted reports whether the strain p, in %, is trusted at T in °C.
func (c *Compound) strainTrusted(p, T float64) bool {
	m := c.Domain.AmplitudeMeasuredAt
	return m == nil || !(p > float64(c.Domain.OwnStrain)*(1+rangeGuard)) || m.reach().Contains(T)
}

// nearest is the condition inside the domain that is nearest to q, and what
// had to change.
func (c *Compound) nearest(q Condition) (Condition, string) {
	var texts []string
	dom, near := c.Domain, q
	T := celsius(q.Temperature)
	if !dom.Temperature.Contains(T) {
		var text string
		text, T = dom.Temperature.short(T)
		near.Temperature = T + zeroC
		texts = append(texts, text+" °C")
	}
	a := c.shift(near.Temperature)
	if !dom.ReducedFrequency.Contains(q.Frequency * a) {
		r := Range{dom.ReducedFrequency[0] / a, dom.ReducedFrequency[1] / a}
		var text string
		text, near.Frequency = r.short(q.Frequency)
		texts = append(texts, text+" Hz at that temperature")
	}
	p := 100 * q.Strain
	switch {
	case math.IsNaN(p):
	case dom.Strain == nil:
		near.Strain = math.NaN()
		texts = append(texts, "leave the strain out")
	default:
		text, s := "", p
		if !dom.Strain.Contains(p) {
			text, s = dom.Strain.short(p)
			text += " %"
		}
		if !c.strainTrusted(s, T) {
			s = float64(dom.OwnStrain)
			text = strconv.FormatFloat(s, 'g', -1, 64) + " % at that temperature"
			if warm := dom.AmplitudeMeasuredAt.reach().Nearest(T); dom.Temperature.Contains(warm) {
				text += fmt.Sprintf(", or %.4g °C", warm)
			}
		}
		if text != "" {
			near.Strain = s / 100
			texts = append(texts, text)
		}
	}
	return near, strings.Join(texts, ", ")
}

// inTime re-words a refusal of the frequency 1/(2πt) for the time t in s.
func (c *Compound) inTime(e *OutsideError, t float64) *OutsideError {
	out := *e
	out.Quantities = nil
	for _, q := range e.Quantities {
		if q == "frequency" {
			q = "time"
		}
		out.Quantities = append(out.Quantities, q)
	}
	out.Reason = fmt.Sprintf("%.4g s belongs to %.4g Hz: %s", t, 1/(2*math.Pi*t), e.Reason)
	if a, dom := c.shift(e.Allowed.Temperature), c.Domain.ReducedFrequency; dom[0] > 0 {
		text, near := Range{a / (2 * math.Pi * dom[1]), a / (2 * math.Pi * dom[0])}.short(t)
		out.Allowed.Frequency = 1 / (2 * math.Pi * near)
		out.Nearest += "; that is " + text + " s"
	}
	return &out
}

func (c *Compound) deriveDomain(d *derived, bad badFunc) error {
	dom := c.Domain
	type bounds struct {
		key    string
		r      Range
		lowest float64
	}
	all := []bounds{{"temperature_C", dom.Temperature, -zeroC}, {"reduced_frequency_Hz", dom.ReducedFrequency, 0}}
	if dom.Strain != nil {
		all = append(all, bounds{"strain_amplitude_percent", *dom.Strain, 0})
	}
	if m := dom.AmplitudeMeasuredAt; m != nil {
		all = append(all, bounds{"amplitude_measured_at.temperature_C", m.Temperature, -zeroC}, bounds{"amplitude_measured_at.frequency_Hz", m.Frequency, 0})
	}
	for _, v := range all {
		if !(v.r[0] >= v.lowest) || !(v.r[1] >= v.r[0]) || math.IsInf(v.r[1], 0) {
			return bad("domain."+v.key, "must be two finite numbers, the second not below the first, none below %g", v.lowest)
		}
	}
	for _, T := range dom.Temperature {
		if a := d.shift(T + zeroC); !(a > 0) || math.IsInf(a, 0) {
			return bad("domain.temperature_C", "the shift law has no value at %g °C", T)
		}
	}
	own := float64(dom.OwnStrain)
	switch {
	case math.IsNaN(own):
		if c.Amplitude.Law != AmplitudeNone {
			return bad("domain.own_strain_amplitude_percent", "is needed where there is an amplitude law")
		}
		if dom.AmplitudeMeasuredAt != nil {
			return bad("domain.own_strain_amplitude_percent", "is needed where strain sweeps were made")
		}
	case !(own >= 0) || math.IsInf(own, 0):
		return bad("domain.own_strain_amplitude_percent", "must be finite and not negative")
	case dom.Strain != nil && !dom.Strain.Contains(own):
		return bad("domain.own_strain_amplitude_percent", "%g %% is not within the domain's strain amplitudes", own)
	}
	return nil
}
