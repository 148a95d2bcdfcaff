package data

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"phaselag/data/place"
	"phaselag/data/specimen"
	"phaselag/data/table"
)

// From stiffness to modulus. A table that has stiffness (or the amplitudes of force
// and displacement) instead of moduli needs the specimen's shape and dimensions;
// and wherever a moving mass or a frame is to be taken off, stiffness is where that
// is done: K* = shape(G*), corrected, G* = shape⁻¹(K*).

// stiffPairs are the pairs that determine a complex stiffness, as pairs does for
// moduli.
var stiffPairs = []pair{
	{table.StorageStiffness, table.LossStiffness, pairs[0].complex},
	{table.StorageStiffness, table.LossFactor, pairs[1].complex},
	{table.StorageStiffness, table.Phase, pairs[2].complex},
	{table.Stiffness, table.Phase, pairs[5].complex},
	{table.Stiffness, table.LossFactor, pairs[6].complex},
	{table.Force, table.Phase, pairs[5].complex}, // force over displacement
	{table.Force, table.LossFactor, pairs[6].complex},
	{table.Torque, table.Phase, pairs[5].complex}, // torque over angle
	{table.Torque, table.LossFactor, pairs[6].complex},
}

// stiffnessColumns looks for a complex stiffness where there is no modulus. at has
// the columns of phase and loss factor.
func (p *plan) stiffnessColumns(t *table.Table, cols *columnSet, at map[table.Concept]int) error {
	var trouble error
	for _, c := range []table.Concept{table.StorageStiffness, table.LossStiffness, table.Stiffness, table.Force, table.Displacement, table.Torque, table.Angle} {
		i, err := t.Find(c)
		if err != nil {
			i = -1
			if trouble == nil {
				trouble = err
			}
		}
		at[c] = i
	}
	for k := range stiffPairs {
		v := &stiffPairs[k]
		if at[v.a] < 0 || at[v.b] < 0 || v.a == table.Force && at[table.Displacement] < 0 || v.a == table.Torque && at[table.Angle] < 0 {
			continue
		}
		cols.pair, cols.a, cols.b, cols.stiff = v, at[v.a], at[v.b], true
		if v.a == table.Force || v.a == table.Torque {
			cols.force = at[v.a]
		}
		break
	}
	if cols.pair == nil {
		return trouble
	}
	turns := cols.pair.a == table.Torque
	cols.displacement = at[table.Displacement]
	if turns {
		cols.displacement = at[table.Angle]
	}
	p.stiff = true
	if err := p.shaped(t, "the table has stiffness", turns); err != nil {
		return err
	}
	return p.constants(t, cols, true)
}

// shaped refuses stiffness without a described specimen, or along a line for one
// that turns, and the other way round.
func (p *plan) shaped(t *table.Table, what string, turns bool) error {
	switch {
	case p.shape == nil:
		e := p.where
		e.What = what + ", and the specimen's shape and dimensions are not described"
		if p.bare {
			e = place.Error{File: t.File, Line: t.HeaderLine, What: e.What}
		}
		e.Hint = "describe it in a campaign file: specimens: {pair: {shape: double shear, diameter: 25 mm, thickness: 5 mm}}; shapes: " + strings.Join(specimen.Names(), ", ")
		return &e
	case p.shape.Rotates() && !turns:
		return p.fault("give the modulus, or torque and angle", "a %s turns, and the table has force and displacement along a line", p.shape.Name())
	case !p.shape.Rotates() && turns:
		return p.fault("give force and displacement, or a specimen in torsion", "a %s does not turn, and the table has torque and angle", p.shape.Name())
	case turns && p.machine != (specimen.Machine{}):
		return p.fault("give moduli that are corrected, and list it under corrected", "moving mass and frame stiffness of a torsion test are not taken off: its moment of inertia would be needed")
	}
	p.modulus = string(Shear)
	if p.Deformation == "" {
		// The specimen says it; what is bent stays not stated.
		for _, d := range []Deformation{SimpleShear, Compression, Tension, Torsion} {
			if strings.Contains(p.shape.Name(), string(d)) || d == Torsion && p.shape.Rotates() {
				p.Deformation = d
				break
			}
		}
	}
	return nil
}

// describeShape builds the specimen's shape where it will be needed: for
// stiffness, or where the machine is to be taken off.
func (p *plan) describeShape(c *Campaign, t *table.Table) error {
	if p.shape != nil || p.Kind == Static || p.Kind == Relaxation {
		return nil
	}
	needed := p.machine != specimen.Machine{}
	for _, concept := range []table.Concept{table.Stiffness, table.StorageStiffness, table.LossStiffness, table.Force, table.Torque} {
		needed = needed || len(t.FindAll(concept)) > 0
	}
	if !needed {
		return nil
	}
	var s *Specimen
	for i := range c.Specimens {
		if c.Specimens[i].Name == p.Specimen {
			s = &c.Specimens[i]
		}
	}
	if s == nil || s.Shape == "" {
		if p.machine != (specimen.Machine{}) {
			return p.fault("specimens: {pair: {shape: double shear, diameter: 25 mm, thickness: 5 mm}}, or list it under corrected", "a moving mass or a frame stiffness is stated, and the specimen's shape, through which it is taken off, is not")
		}
		return nil
	}
	shape, assumed, err := s.describe().Build()
	if err != nil {
		e := p.where
		e.What, e.Hint, e.Path = fmt.Sprintf("specimen %s: %v", s.Name, err), place.Hint(err), "specimens."+s.Name
		return &e
	}
	if err := p.machine.Validate(); err != nil {
		return p.fault(place.Hint(err), "%v", err)
	}
	p.shape = shape
	for _, a := range assumed {
		c.assume("specimen %s: %s", s.Name, a)
	}
	if a := specimen.StrainAssumption(shape); a != "" {
		c.assume("specimen %s: %s", s.Name, a)
	}
	for _, k := range shape.Checks() {
		severity := Note
		if k.Severity == specimen.Doubt {
			severity = Doubt
		}
		c.Findings = append(c.Findings, Finding{
			Code: "specimen-proportions", Severity: severity, Test: p.Name,
			Evidence: fmt.Sprintf("specimen %s, %s: %s is %.3g; wanted %s (%s)", s.Name, shape.Name(), k.What, k.Found, k.Wanted, k.Source),
			Cause:    "outside its proportions a specimen is not strained as its formula says", Remedy: "use a specimen of the proportions wanted, or state a larger uncertainty of geometry",
		})
	}
	return nil
}

// describe is the specimen as package specimen wants it.
func (s *Specimen) describe() specimen.Description {
	return specimen.Description{
		Shape: s.Shape, Diameter: s.Diameter, InnerDiameter: s.InnerDiameter, Length: s.Length, Width: s.Width, Thickness: s.Thickness,
		Poisson: s.Poisson, Coefficient: s.Coefficient, Bulk: s.Bulk, Shear: s.ShearFactor, Bending: s.Bending,
	}
}

// throughShape turns a stiffness into the shear modulus, and takes the machine
// off; a modulus goes to the stiffness and back for that. Storage and loss are
// those of what the table has.
func (p *plan) throughShape(pt *Point) {
	if p.shape == nil || !p.stiff && p.machine == (specimen.Machine{}) {
		return
	}
	k := complex(pt.Storage, pt.Loss)
	if !p.stiff {
		if p.modulus == string(Young) {
			// The formulas are those of the shear modulus; with ν = 1/2 for the size of
			// the stiffness, which only the correction sees.
			k /= 3
		}
		k = p.shape.Stiffness(k)
	}
	if p.machine != (specimen.Machine{}) {
		c, err := p.machine.Correct(k, 2*math.Pi*pt.Frequency)
		if err != nil {
			pt.Reason = "the machine cannot be taken off: " + err.Error()
			return
		}
		k, pt.MassShare, pt.FrameShare = c.Stiffness, c.MassPart, c.FrameShare
	}
	g := p.shape.Modulus(k)
	if !p.stiff && p.modulus == string(Young) {
		g *= 3
	}
	pt.Storage, pt.Loss = real(g), imag(g)
	pt.Reason = modulusFault(pt.Storage, pt.Loss)
}

// largeCorrection is the share of a correction from which on it is a doubt.
const largeCorrection = 0.1

// reportCorrections tells how large the machine's share was.
func (p *plan) reportCorrections(c *Campaign) {
	for _, v := range []struct {
		code, what, remedy string
		of                 func(Point) float64
	}{
		{"inertia-corrected", "the force on the moving mass", "test at lower frequencies, with a lighter grip or a stiffer specimen", func(q Point) float64 { return q.MassShare }},
		{"compliance-corrected", "the displacement of the frame", "use a softer or smaller specimen, or measure the displacement at the specimen", func(q Point) float64 { return q.FrameShare }},
	} {
		var all []raw
		for _, q := range p.points {
			if x := v.of(q.Point); q.Used && !math.IsNaN(x) && x != 0 {
				all = append(all, q)
			}
		}
		if len(all) == 0 {
			continue
		}
		sort.SliceStable(all, func(i, j int) bool { return v.of(all[i].Point) > v.of(all[j].Point) })
		most := v.of(all[0].Point)
		f := Finding{Code: v.code, Severity: Note, Test: p.Name, Evidence: fmt.Sprintf("%s was taken off: at most %.2g %% of the specimen's, at %.4g Hz and %s", v.what, 100*most, all[0].Frequency, celsius(all[0].Temperature))}
		if most > largeCorrection {
			f.Severity, f.Cause, f.Remedy = Doubt, "the correction is as good as the stated mass or stiffness, and grows with it", v.remedy
			var far []Point
			for _, q := range all {
				if v.of(q.Point) > largeCorrection {
					far = append(far, q.Point)
				}
			}
			f.Rows = Places(far)
		}
		c.Findings = append(c.Findings, f)
	}
}
