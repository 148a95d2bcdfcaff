package specimen

import (
	"fmt"
	"math"
)

// StrainAssumption says in one sentence how the strains of a valid shape became
// energy-equivalent shear strains; "" for plain shear, where they are strains.
func StrainAssumption(s Shape) string {
	young := func(nu float64) string {
		return fmt.Sprintf("%s: strains count as shear strains of equal stored energy, γ = %.4g ε (our own rule)", s.Name(), math.Sqrt(2*(1+nu)))
	}
	switch c := s.(type) {
	case Shear:
		if !c.Bending {
			return ""
		}
	case Lubricated:
		return young(c.Poisson)
	case Strip:
		return young(c.Poisson)
	case Bonded:
		return fmt.Sprintf("%s: strains count as shear strains of equal stored energy, γ = √(E_c/G) ε = %.4g ε, without the bulk part (our own rule)", s.Name(), math.Sqrt(c.stiffening()))
	}
	return s.Name() + ": the strain varies through the piece; its energy-weighted logarithmic mean counts as the shear strain (our own rule)"
}
