package fitting

import (
	"crypto/sha256"
	"encoding/binary"
	"fmt"
	"math"

	"phaselag/data"
	"phaselag/fitting/superpose"
	"phaselag/models"
)

// The bars of the verdict on superposition: a misfit is of weight when it is
// beyond chance and beyond these in some isotherm.
const (
	alarmP       = 0.02
	alarmDeg     = 0.3
	alarmPercent = 1.0
)

// smallFactor is where a specimen's factor becomes a finding, in standard
// uncertainties.
const smallFactor = 3

// judge compares the common curve with isotherms of their own and looks at
// what the fit had to assume.
func (a *answer) judge() error {
	a.judgeSpecimens()
	a.nameOutliers()
	if a.oneTemperature() {
		return nil
	}
	// The factors free of a law, at the final noise and scatter.
	free := a.freely(a.final)
	if free == nil {
		return superpose.ErrNoFit
	}
	var err error
	if a.free, _, err = free.Refine(6); err != nil {
		return err
	}
	a.separate = a.free.Superposition(a.isotherm, a.set.Replicates, a.seed(), a.set.Workers)
	switch a.verdict() {
	case models.HoldsNo:
		a.tryFreeVertical()
		k := a.worstKnot()
		a.find("superposition-fails", data.Severe, "",
			fmt.Sprintf("one common curve misses the phase by %.2g° and the magnitude by %.2g %% rms, spectra of their own by %.2g° and %.2g %%; worst at %s (%.2g° and %.2g %% beyond noise); p %s",
				deg(a.separate.Phase.Joint), 100*a.separate.Relative.Joint, deg(a.separate.Phase.Floor), 100*a.separate.Relative.Floor,
				celsius(k.T), deg(k.BeyondPhase), 100*k.BeyondRelative, a.pText()),
			"the material is not thermorheologically simple (several phases or processes with shifts of their own, crystallisation, a change between isotherms), or specimen or fixture changed between temperatures",
			"use the compound only near the tested temperatures and look at the wicket plot; do not shift vertically to hide it")
		if a.freeUp != nil {
			span, u := a.freeSpan()
			a.find("vertical-shift-not-physical", data.Note, "",
				fmt.Sprintf("free vertical shifts would lower the phase misfit from %.2g° to %.2g° rms with factors that span %.2g decades (largest standard uncertainty %.2g decades)", deg(a.separate.Phase.Joint), deg(a.freeUpPhase), span, u),
				a.degenerate()+"; no density or entropy effect is that large",
				"not used; asked for with `analysis: {vertical_shift: free}`")
		}
	case models.HoldsUndecided:
		a.find("superposition-misfit-small", data.Note, "",
			fmt.Sprintf("a misfit of the common curve is detectable (p %s), without practical weight: below %.2g° and %.2g %% in every isotherm", a.pText(), alarmDeg, alarmPercent),
			"", "")
	}
	return nil
}

func deg(rad float64) float64 { return rad * 180 / math.Pi }

func (a *answer) pText() string {
	if a.separate.Draws > 0 {
		if least := 1 / float64(a.separate.Draws+1); a.separate.P <= least*1.0001 {
			return fmt.Sprintf("≤ %.2g", least)
		}
	}
	return fmt.Sprintf("= %.2g", a.separate.P)
}

// verdict is holds, or not, or not decided.
func (a *answer) verdict() string {
	s := a.separate
	if math.IsNaN(s.P) || len(s.Knots) < 2 {
		return models.HoldsUndecided
	}
	if s.P > alarmP {
		return models.HoldsYes
	}
	k := a.worstKnot()
	if deg(k.BeyondPhase) > alarmDeg || 100*k.BeyondRelative > alarmPercent {
		return models.HoldsNo
	}
	return models.HoldsUndecided
}

// worstKnot is the tested temperature with the largest misfit against the bars.
func (a *answer) worstKnot() superpose.KnotMisfit {
	var worst superpose.KnotMisfit
	size := -1.0
	for _, k := range a.separate.Knots {
		if v := max(deg(k.BeyondPhase)/alarmDeg, 100*k.BeyondRelative/alarmPercent); v > size {
			worst, size = k, v
		}
	}
	return worst
}

// seed comes from the inputs' hashes, so that the draws belong to the data.
func (a *answer) seed() uint64 {
	h := sha256.New()
	for _, in := range a.campaign.Inputs {
		fmt.Fprintln(h, in.File, in.SHA256)
	}
	return binary.LittleEndian.Uint64(h.Sum(nil))
}

// tryFreeVertical looks what free vertical shifts would pretend.
func (a *answer) tryFreeVertical() {
	f := a.free.Form
	f.Vertical = superpose.Free
	s, err := a.free.Rival(f, a.free.Start())
	if err != nil {
		return
	}
	if s, _, err = s.Refine(4); err != nil {
		return
	}
	a.freeUp = s
	var sum float64
	n := 0
	for i, iso := range a.isotherm {
		if iso {
			d := imag(s.Misfit(i))
			sum += d * d
			n++
		}
	}
	a.freeUpPhase = math.Sqrt(sum / float64(max(n, 1)))
}

// degenerate says why free vertical shifts are no property.
func (a *answer) degenerate() string {
	text := "along a stretch where the modulus is a power of frequency, vertical and horizontal shifts cannot be told apart"
	if lo, hi, n := a.powerStretch(); hi > lo {
		text += fmt.Sprintf(": here from %.2g to %.2g Hz reduced, where |%s*| rises nearly as f^%.2f over %.1f decades", lo, hi, a.symbol(), n, math.Log10(hi/lo))
	}
	return text
}

// freeSpan is the span of log10 b_T of the free vertical shifts and the largest
// standard uncertainty among them.
func (a *answer) freeSpan() (span, u float64) {
	lo, hi := math.Inf(1), math.Inf(-1)
	cov := a.freeUp.Covariance()
	for i, T := range a.problem.Knots {
		v := math.Log10(a.freeUp.Vertical(i))
		lo, hi = min(lo, v), max(hi, v)
		u = max(u, cov.Vertical(T).Deviation()/math.Ln10)
	}
	return hi - lo, u
}

func (a *answer) judgeSpecimens() {
	if len(a.pieces) < 2 || !(a.problem.UGeometry > 0) {
		return
	}
	for i, p := range a.pieces {
		if v := math.Log(a.final.Factor(i)) / a.problem.UGeometry; math.Abs(v) > smallFactor {
			a.find("specimen-factor-large", data.Doubt, "",
				fmt.Sprintf("specimen %s, mounting %s: stiffer by %+.2g %% than the mean, %.1f times the stated uncertainty of geometry", p.specimen, p.mounting, 100*(a.final.Factor(i)-1), math.Abs(v)),
				"dimensions, bonding or another batch", "measure the specimen again")
		}
	}
}
