package data

import (
	"fmt"
	"math"

	"phaselag/data/place"
)

// convert brings all tests to one modulus. G = E/(2(1+ν)). A cellular material
// without a stated Poisson ratio keeps Young's modulus.
//
// Strains become energy-equivalent shear strains, ½Gγ² = the stored energy per
// volume: in tension and lubricated compression ½Eε² with E = 3G gives γ = √3 ε
// (our own rule). Where Young's modulus is kept, the strain is kept too.
func convert(c *Campaign, plans []*plan, poisson float64) error {
	var faults place.List
	keep := c.Compound.Cellular && math.IsNaN(poisson)
	for _, p := range plans {
		p.guessModulus(c)
	}
	if keep {
		c.Modulus = Young
		c.assume("the material is cellular and no Poisson ratio is stated: Young's modulus E is reported, not G")
	} else {
		c.PoissonRatio = poisson
	}
	for _, p := range plans {
		switch {
		case keep && p.modulus == string(Shear):
			faults.Add(p.fault("state compound: {poisson_ratio: …}", "shear moduli of a cellular material cannot become Young's moduli without a Poisson ratio"))
		case !keep && p.modulus == string(Young):
			if math.IsNaN(c.PoissonRatio) {
				c.PoissonRatio = 0.5
				c.assume("Poisson ratio 0.5: shear modulus G = E/3")
			}
			p.scale(1 / (2 * (1 + c.PoissonRatio)))
		}
		if !keep && !p.moved && (p.Deformation == Tension || p.Deformation == Compression) && p.strained() {
			c.assume("%s: strain amplitudes in %s count as shear strains of equal stored energy, γ = √3 ε (our own rule)", p.Name, p.Deformation)
			for i := range p.points {
				p.points[i].Strain *= math.Sqrt(3)
			}
			for i := range p.StaticValues {
				p.StaticValues[i].Strain *= math.Sqrt(3)
			}
		}
		if p.Deformation == Torsion && !p.moved && p.strained() {
			c.assume("%s: strain amplitudes in torsion are taken as they stand; the energy-equivalent strain of a solid cylinder is that at ¾ of the radius", p.Name)
		}
	}
	return faults.Err()
}

// guessModulus settles deformation and modulus where headings and campaign file
// say only one of them.
func (p *plan) guessModulus(c *Campaign) {
	if p.Deformation == "" {
		p.Deformation = SimpleShear
		if p.modulus == string(Young) {
			p.Deformation = Tension
			if c.Compound.Cellular {
				p.Deformation = Compression
			}
		}
		c.assume("%s: deformation not stated, taken as %s", p.Name, p.Deformation)
	}
	if p.modulus != "" {
		return
	}
	p.modulus = string(Shear)
	if p.Deformation == Tension || p.Deformation == Compression {
		p.modulus = string(Young)
	}
	c.assume("%s: the headings do not say which modulus; in %s it is taken as %s", p.Name, p.Deformation, map[string]string{string(Shear): "the shear modulus G", string(Young): "Young's modulus E"}[p.modulus])
}

func (p *plan) scale(factor float64) {
	for i := range p.points {
		p.points[i].Storage *= factor
		p.points[i].Loss *= factor
		p.points[i].StatedViscosity *= factor
	}
	for i := range p.StaticValues {
		p.StaticValues[i].Modulus *= factor
		p.StaticValues[i].U *= factor
	}
}

func (p *plan) strained() bool {
	for _, pt := range p.points {
		if pt.Strain > 0 {
			return true
		}
	}
	for _, v := range p.StaticValues {
		if v.Strain > 0 {
			return true
		}
	}
	return false
}

// runName is the name of a run for people.
func runName(p *plan, r *Run) string {
	switch {
	case p.Kind == TemperatureSweep:
		return fmt.Sprintf("%s, %.4g Hz", p.Name, r.Frequency)
	case p.Kind == StrainSweep:
		return fmt.Sprintf("%s, %s, %.4g Hz", p.Name, celsius(r.Temperature), r.Frequency)
	}
	return fmt.Sprintf("%s, %s", p.Name, celsius(r.Temperature))
}
