// Package decision holds a measured value against limits, with its uncertainty.
//
// With a value y, its standard uncertainty u and limits T_L and T_U, either of which may
// be missing (−∞, +∞), the probability that the true value keeps them is
//
//	p_c = F((T_U − y)/u) − F((T_L − y)/u),
//
// F the distribution of Student with the uncertainty's degrees of freedom, the normal
// one where they are many. The guarded rule keeps a band w = r·U, U the half-width of
// the 95 % interval, from each limit: accepted within T_L + w … T_U − w, rejected beyond
// T_L − w and T_U + w, undecided between. The uncertainty then counts against whoever
// claims: to accept is to claim conformity, to reject is to claim the opposite
// (JCGM 106:2012; ISO 14253-1:2017; values and rules from memory).
package decision

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// Verdict is what a value says of its limits.
type Verdict int

// The verdicts. NoVerdict: a number is missing.
const (
	NoVerdict Verdict = iota
	Accept
	Reject
	Undecided
)

// Limits are the lower and the upper limit; NaN: none.
type Limits struct{ Lower, Upper float64 }

// Value is a measured value.
type Value struct {
	Y       float64
	U       float64 // standard uncertainty, 0 or more
	U95     float64 // half-width of the 95 % interval
	Freedom float64 // of U; NaN or infinite: many
}

// Answer is the outcome.
type Answer struct {
	Verdict    Verdict
	Acceptance Limits  // the limits less their guard bands; NaN where there is no limit
	Conformity float64 // p_c
}

// Decide holds v against its limits. guard is r, 0 for simple acceptance. A value, an
// uncertainty or both limits that are not there give NoVerdict. Where the guard bands
// leave nothing between the limits, nothing can be accepted.
func Decide(v Value, l Limits, guard float64) Answer {
	nan := math.NaN()
	if math.IsNaN(v.Y) || math.IsInf(v.Y, 0) || !(v.U >= 0) || math.IsInf(v.U, 0) || !(v.U95 >= 0) || math.IsInf(v.U95, 0) || !(guard >= 0) || math.IsInf(guard, 0) ||
		math.IsNaN(l.Lower) && math.IsNaN(l.Upper) || l.Lower > l.Upper {
		return Answer{NoVerdict, Limits{nan, nan}, nan}
	}
	w := guard * v.U95
	a := Answer{Acceptance: Limits{l.Lower + w, l.Upper - w}, Conformity: Conformity(v, l)}
	inside := !(v.Y < a.Acceptance.Lower) && !(v.Y > a.Acceptance.Upper)
	beyond := v.Y < l.Lower-w || v.Y > l.Upper+w
	switch {
	case inside:
		a.Verdict = Accept
	case beyond:
		a.Verdict = Reject
	default:
		a.Verdict = Undecided
	}
	return a
}

// Conformity is p_c; at u = 0 it is 0 or 1.
func Conformity(v Value, l Limits) float64 {
	below := func(limit, missing float64) float64 {
		switch {
		case math.IsNaN(limit):
			return missing
		case v.U == 0:
			if v.Y <= limit {
				return 1
			}
			return 0
		}
		z := (limit - v.Y) / v.U
		if math.IsNaN(v.Freedom) || v.Freedom > 1e6 {
			return distuv.UnitNormal.CDF(z)
		}
		return distuv.StudentsT{Mu: 0, Sigma: 1, Nu: max(v.Freedom, 1)}.CDF(z)
	}
	low := below(l.Lower, 0)
	if v.U == 0 && v.Y == l.Lower {
		low = 0
	}
	return max(below(l.Upper, 1)-low, 0)
}
