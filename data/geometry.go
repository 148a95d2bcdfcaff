package data

import (
	"fmt"
	"math"
	"strings"

	"phaselag/data/place"
	"phaselag/data/specimen"
)

// carryGeometry turns the stated uncertainties of dimensions into that of the
// specimens' geometry factors,
//
//	u² = Σ (c_i·u_i)²,   c_i = ∂ln|G*|/∂ln(dimension i)     (JCGM 100, 5.1)
//
// and takes the greatest over the specimens where the campaign states none. A
// thickness in shear counts once, in bonded compression nearly three times.
func carryGeometry(c *Campaign, file string, plans []*plan) error {
	var faults place.List
	greatest := 0.0
	text := ""
	for i := range c.Specimens {
		s := &c.Specimens[i]
		if s.Uncertainty == nil {
			continue
		}
		shape, g := shapeOf(s, plans)
		if shape == nil {
			var err error
			if shape, _, err = s.describe().Build(); err != nil {
				faults.Add(&place.Error{File: file, Path: "specimens." + s.Name, What: fmt.Sprintf("uncertainties of the dimensions of specimen %s need its shape: %v", s.Name, err), Hint: place.Hint(err)})
				continue
			}
		}
		u, err := specimen.RelativeUncertainty(shape, g, s.Uncertainty)
		if err != nil {
			faults.Add(&place.Error{File: file, Path: "specimens." + s.Name + ".uncertainty", What: err.Error(), Hint: place.Hint(err)})
			continue
		}
		if u > greatest {
			greatest = u
			var parts []string
			for _, d := range shape.Sensitivity(g) {
				if v := s.Uncertainty[d.Name]; v > 0 {
					parts = append(parts, fmt.Sprintf("%s %.2g %% counts %.3g times", d.Name, 100*v, math.Abs(d.Sensitivity)))
				}
			}
			text = fmt.Sprintf("geometry: %.2g %% from the dimensions of specimen %s (%s)", 100*u, s.Name, strings.Join(parts, ", "))
		}
	}
	if err := faults.Err(); err != nil || greatest == 0 {
		return err
	}
	switch stated := c.Uncertainty.Geometry; {
	case math.IsNaN(stated):
		c.Uncertainty.Geometry = greatest
		c.assume("%s", text)
	case stated < 0.8*greatest:
		c.Findings = append(c.Findings, Finding{Code: "geometry-uncertainty-small", Severity: Doubt,
			Evidence: fmt.Sprintf("uncertainty.geometry is %.2g %%, and the stated dimensions make it more: %s", 100*stated, text),
			Cause:    "two statements of one thing", Remedy: "leave one of them out"})
	}
	return nil
}

// shapeOf is the shape of a specimen as the tests use it, and a modulus at which its
// sensitivities are taken.
func shapeOf(s *Specimen, plans []*plan) (specimen.Shape, complex128) {
	g := complex(1e6, 0)
	for _, p := range plans {
		if p.Specimen != s.Name {
			continue
		}
		for _, pt := range p.points {
			if pt.Used && !math.IsNaN(pt.Storage) && !math.IsNaN(pt.Loss) {
				g = complex(pt.Storage, pt.Loss)
				break
			}
		}
		if p.shape != nil {
			return p.shape, g
		}
	}
	return nil, g
}
