package quality

import (
	"fmt"
	"math"
)

// Problem: a value y with the standard uncertainty u is held against a lower limit T_L
// and an upper limit T_U, either of which may be absent.
//
// Guard bands (JCGM 106, ISO 14253-1): w = r·U95. A value is proven to conform inside
//
//	T_L + w ≤ y ≤ T_U − w
//
// and proven not to conform where y < T_L − w or y > T_U + w. Between lies the zone of
// doubt. The probability of conformity is
//
//	p_c = F((T_U − y)/u) − F((T_L − y)/u)
//
// with F the normal distribution, or Student's t at the stated degrees of freedom.
//
// r = 1 keeps all of U95 from a limit (p_c of 97.5 % at a lone limit); OneSided gives the
// r of another proof, 0.8391 for 95 %.

// Limits are the least and the greatest permitted value; NaN or infinite: absent.
type Limits struct{ Lower, Upper float64 }

// NoLimit stands for an absent limit.
func NoLimit() float64 { return math.NaN() }

func (l Limits) below() float64 { return orElse(l.Lower, math.Inf(-1)) }
func (l Limits) above() float64 { return orElse(l.Upper, math.Inf(1)) }

func orElse(v, absent float64) float64 {
	if finite(v) {
		return v
	}
	return absent
}

func (l Limits) fault() string {
	switch {
	case !finite(l.Lower) && !finite(l.Upper):
		return "there is no limit"
	case l.below() > l.above():
		return fmt.Sprintf("the lower limit %g lies above the upper limit %g", l.Lower, l.Upper)
	}
	return ""
}

// Measured is a value with its uncertainty.
type Measured struct {
	Value   float64
	U95     float64 // half the 95 % interval; NaN: not known
	Freedom float64 // degrees of freedom; 0, NaN or infinite: very many; below ½: no probability can be had
}

// Standard is the standard uncertainty u = U95/t(97.5 %, Freedom).
func (m Measured) Standard() float64 { return m.U95 / tQuantile(0.975, m.Freedom) }

// Conformity is the probability that the true value keeps the limits; NaN where the value,
// its uncertainty or every limit is missing. An uncertainty of zero gives 0 or 1.
func Conformity(m Measured, l Limits) float64 {
	u := m.Standard()
	if !finite(m.Value) || !finite(u) || u < 0 || l.fault() != "" {
		return math.NaN()
	}
	lo, hi := l.below(), l.above()
	if u == 0 {
		if m.Value >= lo && m.Value <= hi {
			return 1
		}
		return 0
	}
	a, b := (lo-m.Value)/u, (hi-m.Value)/u
	if a > 0 {
		// The difference of two small tails keeps its digits, that of two numbers near one
		// does not.
		return tBelow(-a, m.Freedom) - tBelow(-b, m.Freedom)
	}
	return tBelow(b, m.Freedom) - tBelow(a, m.Freedom)
}

// Verdict is the answer of a decision.
type Verdict string

// The verdicts. NotDecided stands where a number that the decision needs is missing.
const (
	Accepted   Verdict = "accepted"
	Rejected   Verdict = "rejected"
	Undecided  Verdict = "undecided"
	NotDecided Verdict = "not decided"
)

// Stance says who has to prove something, and so who bears the zone of doubt.
type Stance int

// The stances. Neutral leaves the zone of doubt undecided. Consumer accepts only what is
// proven to conform and rejects the rest. Producer rejects only what is proven not to
// conform and accepts the rest.
const (
	Neutral Stance = iota
	Consumer
	Producer
)

// Rule is how a decision is made. The zero Rule is the simple one.
type Rule struct {
	// Guard is the factor r of the guard band w = r·U95. 0: the simple rule, which looks
	// at the value alone and is never undecided.
	Guard  float64
	Stance Stance // without effect on the simple rule
}

// OneSided is the guard factor r after which a value at the end of the acceptance zone
// conforms to a lone limit with the probability p, 0.5 ≤ p < 1: t_p/t_0.975. Outside
// that range it is NaN.
func OneSided(p, freedom float64) float64 {
	if !(p >= 0.5 && p < 1) {
		return math.NaN()
	}
	return tQuantile(p, freedom) / tQuantile(0.975, freedom)
}

// Decision is a verdict with what led to it.
type Decision struct {
	Verdict Verdict
	Reason  string  // why it is not Accepted; "" where it is
	Band    float64 // w, 0 for the simple rule
	// Accept are the ends of the zone in which a value is proven to conform, Reject those
	// beyond which it is proven not to; NaN where the limit is absent.
	Accept, Reject Limits
	Conformity     float64 // p_c; NaN where it is not known
}

// Decide holds a value against limits.
func Decide(m Measured, l Limits, r Rule) Decision {
	d := Decision{Verdict: NotDecided, Band: math.NaN(), Accept: Limits{NoLimit(), NoLimit()}, Reject: Limits{NoLimit(), NoLimit()}, Conformity: Conformity(m, l)}
	if d.Reason = faultOf(m, l, r); d.Reason != "" {
		return d
	}
	d.Band = 0
	if r.Guard > 0 {
		d.Band = r.Guard * m.U95
	}
	w := d.Band
	if finite(l.Lower) {
		d.Accept.Lower, d.Reject.Lower = l.Lower+w, l.Lower-w
	}
	if finite(l.Upper) {
		d.Accept.Upper, d.Reject.Upper = l.Upper-w, l.Upper+w
	}
	y := m.Value
	proven := y >= d.Accept.below() && y <= d.Accept.above()
	refuted := y < d.Reject.below() || y > d.Reject.above()
	switch {
	case proven:
		d.Verdict = Accepted
	case refuted:
		d.Verdict = Rejected
		d.Reason = "the value lies beyond a limit"
		if w > 0 {
			d.Reason += " by more than the guard band"
		}
	case r.Stance == Producer:
		d.Verdict = Accepted
	case r.Stance == Consumer:
		d.Verdict, d.Reason = Rejected, "conformity is not proven: the value lies within the guard band of a limit"
	default:
		d.Verdict, d.Reason = Undecided, "the value lies within the guard band of a limit"
	}
	if d.Accept.below() > d.Accept.above() && d.Verdict != Accepted && !refuted {
		d.Reason = "the guard bands meet: with this uncertainty no value could be proven to conform"
	}
	return d
}

// faultOf says what a decision lacks.
func faultOf(m Measured, l Limits, r Rule) string {
	switch {
	case !finite(m.Value):
		return "the value was not measured"
	case l.fault() != "":
		return l.fault()
	case math.IsNaN(r.Guard) || r.Guard < 0 || math.IsInf(r.Guard, 0):
		return "the guard factor is no number of zero or more"
	case r.Guard > 0 && !finite(m.U95):
		return "the uncertainty is not known, and the rule needs it"
	case m.U95 < 0:
		return "the uncertainty is negative"
	case r.Guard > 0 && math.IsInf(r.Guard*m.U95, 0):
		return "the guard band is too large for a number"
	}
	return ""
}
