package data

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"phaselag/data/table"
)

// A second source for modulus and strain: where a table has moduli and also the
// amplitudes of force and displacement (or torque and angle), and the specimen is
// described, its shape makes a modulus and a strain of them. If those differ from what
// the table says by a factor that has a name, somebody took one thing for another.

// checkColumns finds force and displacement beside moduli; -1: none.
func (p *plan) checkColumns(t *table.Table, cols *columnSet) {
	cols.checkForce, cols.checkDisplacement = -1, -1
	if p.shape == nil || p.stiff {
		return
	}
	force, displacement := table.Force, table.Displacement
	if p.shape.Rotates() {
		force, displacement = table.Torque, table.Angle
	}
	f, errF := t.Find(force)
	x, errX := t.Find(displacement)
	if errF == nil && errX == nil && x >= 0 {
		cols.checkForce, cols.checkDisplacement = f, x
	}
}

// second is what force and displacement make of a point; NaN where they are not there.
type second struct{ modulus, strain float64 }

func (p *plan) secondOf(t *table.Table, cols columnSet, get func(int, float64) float64) second {
	out := second{math.NaN(), math.NaN()}
	if cols.checkDisplacement < 0 {
		return out
	}
	x := p.single(t, cols.checkDisplacement) * get(cols.checkDisplacement, math.NaN())
	if !(x > 0) {
		return out
	}
	out.strain = p.shape.Strain(x)
	if cols.checkForce >= 0 {
		if f := p.single(t, cols.checkForce) * get(cols.checkForce, math.NaN()); f > 0 {
			g := p.shape.Modulus(complex(f/x, 0))
			out.modulus = math.Hypot(real(g), imag(g))
		}
	}
	return out
}

// aboutEqual is how far a ratio may lie from a factor that has a name, relative.
const aboutEqual = 0.1

// compareSources holds what the table says against what force and displacement make.
func (p *plan) compareSources(c *Campaign) {
	var moduli, strains []float64
	var points []Point
	for _, pt := range p.points {
		if !pt.Used {
			continue
		}
		said := math.Hypot(pt.Storage, pt.Loss)
		if p.modulus == string(Young) {
			said /= 3
		}
		if v := said / pt.second.modulus; v > 0 && !math.IsInf(v, 0) {
			moduli = append(moduli, v)
			points = append(points, pt.Point)
		}
		if v := pt.Strain / pt.second.strain; v > 0 && !math.IsInf(v, 0) && strings.Contains(p.shape.Name(), "shear") {
			strains = append(strains, v)
		}
	}
	if len(moduli) >= 3 {
		p.contradiction(c, "modulus-contradicted-by-force", "the moduli", moduli, points, []named{
			{3, "Young's modulus was taken for the shear modulus", "say deformation: tension, or name the columns E' and E''"},
			{1. / 3, "the shear modulus was taken for Young's modulus", "say deformation: shear, or name the columns G' and G''"},
			{2, "one of force and displacement is peak to peak", "say amplitude: peak to peak, or correct the specimen's arrangement: single shear is not double shear"},
			{0.5, "one of force and displacement is peak to peak", "say amplitude: peak to peak, or correct the specimen's arrangement: single shear is not double shear"},
		})
	}
	if len(strains) >= 3 {
		p.contradiction(c, "strain-contradicted-by-displacement", "the strains", strains, nil, []named{
			{2, "peak-to-peak strains were taken for single amplitudes", "say amplitude: peak to peak"},
			{0.5, "single amplitudes were taken for peak-to-peak strains, or the displacement is peak to peak", "say amplitude: zero to peak"},
			{math.Sqrt2, "rms values and single amplitudes are mixed", "say amplitude: rms where that is so"},
			{1 / math.Sqrt2, "rms values and single amplitudes are mixed", "say amplitude: rms where that is so"},
		})
	}
}

type named struct {
	factor        float64
	cause, remedy string
}

func (p *plan) contradiction(c *Campaign, code, what string, ratios []float64, points []Point, list []named) {
	sort.Float64s(ratios)
	mid := ratios[len(ratios)/2]
	if math.Abs(mid-1) <= aboutEqual {
		return
	}
	f := Finding{Code: code, Severity: Doubt, Test: p.Name, Rows: Places(points),
		Evidence: fmt.Sprintf("%s of the table are %.3g times what its force and displacement make through the specimen %s, %s (%d rows)", what, mid, p.Specimen, p.shape.Name(), len(ratios)),
		Cause:    "wrong dimensions, another specimen, or columns that are not what they seem", Remedy: "check the specimen's dimensions and the columns"}
	for _, v := range list {
		if math.Abs(mid/v.factor-1) <= aboutEqual {
			f.Severity, f.Cause, f.Remedy = Severe, v.cause, v.remedy
			break
		}
	}
	c.Findings = append(c.Findings, f)
}
