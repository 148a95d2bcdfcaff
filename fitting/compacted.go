package fitting

import (
	"fmt"
	"math"
	"math/cmplx"
	"strings"

	"phaselag/data"
	"phaselag/data/unit"
	"phaselag/fitting/compact"
	"phaselag/models/linear"
)

// CompactModel is a model of few constants for the polymer's master curve at the
// reference temperature, for programs that cannot take a spectrum. Its
// uncertainties do not contain those of the shift factors.
type CompactModel struct {
	Name         string            `json:"name"`
	Constants    []CompactConstant `json:"constants"`
	Percent      unit.Number       `json:"rms_percent"`
	Deg          unit.Number       `json:"rms_deg"`
	WorstPercent unit.Number       `json:"worst_percent"`
	WorstDeg     unit.Number       `json:"worst_deg"`
	AICc         unit.Number       `json:"aicc"`
	Delta        unit.Number       `json:"delta"`
	Note         string            `json:"note"`
}

// CompactConstant is one of its constants: moduli in MPa, times in s.
type CompactConstant struct {
	Name  string      `json:"name"`
	Unit  string      `json:"unit"`
	Value unit.Number `json:"value"`
	U     unit.Number `json:"u"`
}

// FewBranches is the spectrum of fewest relaxation times that stays within a
// tolerance of the compound's polymer term over the window of the measurements.
type FewBranches struct {
	TolerancePercent unit.Number `json:"tolerance_percent"`
	ToleranceDeg     unit.Number `json:"tolerance_deg"`
	WorstPercent     unit.Number `json:"worst_percent"`
	WorstDeg         unit.Number `json:"worst_deg"`
	Equilibrium      unit.Number `json:"equilibrium_modulus_MPa"`
	Branches         []FewBranch `json:"branches"` // empty: not found
}

// FewBranch is one of its branches.
type FewBranch struct {
	Time    unit.Number `json:"relaxation_time_s"`
	Modulus unit.Number `json:"modulus_MPa"`
}

// fewTolerance is how far the spectrum of few branches may lie from the compound.
var fewTolerance = compact.Tolerance{Magnitude: 0.02, Phase: math.Pi / 180}

// coarseCompact is how many times the noise a compact model may miss before it says
// so.
const coarseCompact = 3

// reduced gives the measured points of the isotherms as the polymer term at the
// reference temperature: without common phase, specimen factor, filler and vertical
// factor.
func (a *answer) reduced() []compact.Point {
	s := a.final
	var out []compact.Point
	for i, r := range a.problem.Rows {
		if !a.isotherm[i] || r.Relaxation || s.Form.Weights != nil && s.Form.Weights[i] < 0.5 {
			continue
		}
		f := r.Omega / (2 * math.Pi) * math.Pow(10, s.LogShift(r.T+s.Offset(r.Run)))
		poly := s.Polymer(f)
		// The misfit of the whole, as a misfit of the polymer term.
		ratio := s.Misfit(i)
		share := cmplx.Abs(s.Model(i)) / cmplx.Abs(poly) / s.Factor(r.Factor)
		n := a.noise[r.Group]
		out = append(out, compact.Point{
			Omega: 2 * math.Pi * f, G: poly * cmplx.Exp(ratio*complex(share, 0)),
			Magnitude: share * n.Magnitude, Phase: share * n.Phase,
		})
	}
	return out
}

// compacted fills the compact models.
func (a *answer) compacted(r *Result) {
	if a.oneTemperature() && len(a.knots) == 0 {
		return
	}
	fits, err := compact.Candidates(a.reduced())
	if err != nil {
		return
	}
	for _, f := range fits {
		m := CompactModel{
			Name: f.Name, Constants: []CompactConstant{}, Percent: number(100 * f.Misfit.Magnitude), Deg: number(deg(f.Misfit.Phase)),
			WorstPercent: number(100 * f.Misfit.WorstMagnitude), WorstDeg: number(deg(f.Misfit.WorstPhase)),
			AICc: number(f.AICc), Delta: number(f.Delta), Note: f.Note,
		}
		// The noise of the isotherms against which a misfit is held.
		for g, kind := range a.kinds {
			if kind == data.FrequencySweep && (f.Misfit.Magnitude > coarseCompact*a.noise[g].Magnitude || f.Misfit.Phase > coarseCompact*a.noise[g].Phase) {
				m.Note = strings.TrimPrefix(m.Note+"; misses the curve by far more than its noise: use the spectrum", "; ")
			}
		}
		for _, c := range f.Constants {
			v, u, name := c.Value, c.U, c.Unit
			if name == "Pa" {
				v, u, name = v/1e6, u/1e6, "MPa"
			}
			m.Constants = append(m.Constants, CompactConstant{c.Name, name, number(v), number(u)})
		}
		r.Compact = append(r.Compact, m)
	}
	lo, hi := a.window(a.final.LogShift)
	spectrum := linear.Spectrum{Equilibrium: a.final.Equilibrium, Times: a.final.Form.Lattice, Moduli: a.final.Branches}
	few := FewBranches{TolerancePercent: number(100 * fewTolerance.Magnitude), ToleranceDeg: number(deg(fewTolerance.Phase)), Branches: []FewBranch{},
		WorstPercent: unit.NaN(), WorstDeg: unit.NaN(), Equilibrium: unit.NaN()}
	f, m, err := compact.Few(spectrum, 2*math.Pi*lo, 2*math.Pi*hi, fewTolerance)
	if err == nil {
		few.WorstPercent, few.WorstDeg, few.Equilibrium = number(100*m.WorstMagnitude), number(deg(m.WorstPhase)), number(f.Equilibrium/1e6)
		for i := range f.Times {
			few.Branches = append(few.Branches, FewBranch{number(f.Times[i]), number(f.Moduli[i] / 1e6)})
		}
	} else {
		a.assume("few branches: %v", fmt.Sprint(err))
	}
	r.Few = &few
}
