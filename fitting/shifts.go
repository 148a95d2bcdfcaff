package fitting

import (
	"fmt"
	"math"

	"phaselag/data"
	"phaselag/data/unit"
	"phaselag/fitting/superpose"
	"phaselag/models/thermal"
)

// commonShift is what the calibration of temperature adds to the uncertainty of
// log a_T: it moves T and T_ref together.
func (a *answer) commonShift(T float64) float64 {
	u, law := a.campaign.Uncertainty.TemperatureCommon, a.final.Law()
	if law == nil || !(u > 0) {
		return 0
	}
	return u * math.Abs(law.Slope(T)-law.Slope(a.reference))
}

// preferredC are the temperatures of ISO 23529 and ASTM D1349-09, °C, at which
// constants and properties are stated (ASTM list: its public summary).
var preferredC = []float64{-75, -70, -55, -40, -25, -10, 0, 23, 35, 40, 50, 55, 70, 85, 90, 100, 105, 120, 125, 130, 135, 150, 155, 160, 175, 180, 200, 225, 250, 275, 300}

// Preferred lists the standard test temperatures of ISO 23529 and ASTM D1349
// within [lo, hi], °C.
func Preferred(lo, hi float64) []float64 {
	var out []float64
	for _, t := range preferredC {
		if t >= lo && t <= hi {
			out = append(out, t)
		}
	}
	return out
}

func (a *answer) fillShifts(r *Result, cov *superpose.Covariance) {
	s := a.final
	if a.free == nil {
		return
	}
	freeCov := a.free.Covariance()
	overlap := a.overlapShifts()
	for i, T := range a.problem.Knots {
		u := freeCov.LogShift(T).Deviation()
		u = math.Hypot(u, a.commonShift(T))
		row := Shift{
			TemperatureC: number(degreesC(T)), Log: number(a.free.LogShift(T)), U: number(u),
			Overlap: number(overlap.Log[i]), Law: unit.NaN(), LawU: unit.NaN(),
			Offset: number(a.knotOffset(i)), B: number(s.Vertical(i)), Determined: u <= notDetermined,
		}
		if !row.Determined {
			row.U = unit.NaN()
			a.find("shift-factor-not-determined", data.Doubt, "",
				fmt.Sprintf("log a_T at %s has a standard uncertainty of %.2g decades", celsius(T), u),
				"the isotherm hardly depends on frequency", "test lower temperatures or a wider range of frequencies")
		}
		if s.Form.Law != superpose.Factors {
			row.Law = number(s.LogShift(T))
			row.LawU = number(math.Hypot(cov.LogShift(T).Deviation(), a.commonShift(T)))
		}
		r.Shifts = append(r.Shifts, row)
	}
	w, ok := s.Law().(thermal.WLF)
	if !ok {
		return
	}
	i := s.Indices().Law
	r1, r2 := cov.Theta(i), cov.Theta(i+1)
	lo, hi := degreesC(a.problem.Knots[0]), degreesC(a.problem.Knots[len(a.problem.Knots)-1])
	at := append([]float64{degreesC(a.reference)}, Preferred(lo, hi)...)
	seen := map[float64]bool{}
	for _, tc := range at {
		if seen[tc] {
			continue
		}
		seen[tc] = true
		v := w.At(tc + zeroC)
		j := w.AtJacobian(tc + zeroC)
		b1, b2 := make(superpose.Root, len(r1)+1), make(superpose.Root, len(r1)+1)
		// A common error δ of all temperatures moves the pole: C2 falls by δ and
		// C1C2 stays.
		if u := a.campaign.Uncertainty.TemperatureCommon; u > 0 {
			b1[len(r1)], b2[len(r1)] = v.C1/v.C2*u, -u
		}
		var dot float64
		for k := range r1 {
			b1[k] = j[0][0]*r1[k] + j[0][1]*r2[k]
			b2[k] = j[1][0]*r1[k] + j[1][1]*r2[k]
			dot += b1[k] * b2[k]
		}
		u1, u2 := b1.Deviation(), b2.Deviation()
		r.Constants = append(r.Constants, Constants{
			ReferenceC: tc, C1: number(v.C1), C1U: number(u1), C2: number(v.C2), C2U: number(u2), Correlation: number(dot / (u1 * u2)),
		})
	}
}

func candidates(rivals []rival) []Candidate {
	var out []Candidate
	best := math.Inf(1)
	for _, v := range rivals {
		best = min(best, v.s.AICc())
	}
	for _, v := range rivals {
		n := v.s.Constants()
		out = append(out, Candidate{Name: v.name, Constants: n, AICc: number(v.s.AICc()), Delta: number(v.s.AICc() - best), Chosen: v.chosen, Note: v.note})
	}
	return out
}
