package mount

import (
	"errors"
	"fmt"
	"math"
)

// Static stiffness
//
// A deflection under a load that stands is a matter of the static stiffness, a
// natural frequency of the dynamic one: with k_dyn/k_stat = 1.3 a deflection of 10 mm
// goes with 5.68, not 4.98 Hz. The static modulus comes from the first of these that
// there is, and every answer says from which:
//
//  1. static and relaxation tests of the compound;
//  2. the compound's model at a long time, only where the caller asks for it, and
//     marked, because time is where a model of vibrations is weakest;
//  3. a handbook table of hardness, which knows the trade's rubbers and not this one.

// StaticSource is where a static modulus comes from.
type StaticSource int

// The sources, best first.
const (
	FromTest StaticSource = 1 + iota
	FromModel
	FromTable
)

// String returns the source in words.
func (s StaticSource) String() string {
	switch s {
	case FromTest:
		return "static test"
	case FromModel:
		return "model, not a static test"
	case FromTable:
		return "handbook table of hardness"
	}
	return "unknown"
}

// StaticTest is a shear modulus from a static or relaxation test.
type StaticTest struct {
	Modulus float64 // G, Pa
	U95     float64 // Pa; NaN if not known
	Source  string  // its description, for people
}

// StaticSettings says where [Mount.Static] may take the modulus from.
type StaticSettings struct {
	Tests []StaticTest
	// FromModel asks for Model where there are no tests.
	FromModel bool
	// Model returns the shear modulus in Pa at a long time and its half-width (NaN if
	// not known); an error of the compound's domain is passed on.
	Model func() (modulus, u95 float64, err error)
	// ModelSays describes it: "relaxation modulus at 1 h, 23 °C".
	ModelSays string
	// Hardness in degrees, with the Table by name, is the last resort; NaN or 0: none.
	Hardness float64
	Table    Table
}

// Static is a mount's static stiffness and rest by one modulus.
type Static struct {
	From    StaticSource
	Source  string // in words: which test, model or table
	Modulus StaticModulus
	// Stiffness of all mounts without load, N/m or N·m/rad, and its half-width from
	// the modulus alone, NaN if not known.
	Stiffness, U95 float64
	// Tangent is the static stiffness about the rest under the static load; equal to
	// Stiffness without one.
	Tangent float64
	// Deflection is m under the static load, along it, NaN without one or where Refused says
	// why not.
	Deflection float64
	Refused    error
	Rest       *Rest // nil where Deflection is NaN
}

// ErrNoStatic says that no source of a static modulus was given.
var ErrNoStatic = errors.New("mount: no static modulus: no static test, no model asked for, no hardness")

// Static returns the static stiffness and deflection by every test, or else by the
// model, or else by the table.
func (m *Mount) Static(from StaticSettings) ([]Static, error) {
	for _, a := range m.Arrangement.leaves() {
		if e := m.Elements[a.Element]; e.Measured != nil {
			return nil, fmt.Errorf("mount: no static stiffness: the dynamic measurement of %s does not tell it", e.Name)
		}
	}
	switch {
	case len(from.Tests) > 0:
		var list []Static
		for _, t := range from.Tests {
			s, err := m.static(StaticModulus{t.Modulus, math.NaN()}, t.U95)
			if err != nil {
				return nil, err
			}
			s.From, s.Source = FromTest, "static test: "+t.Source
			list = append(list, s)
		}
		return list, nil
	case from.FromModel && from.Model != nil:
		g, u, err := from.Model()
		if err != nil {
			return nil, err
		}
		s, err := m.static(StaticModulus{g, math.NaN()}, u)
		if err != nil {
			return nil, err
		}
		s.From, s.Source = FromModel, "model, not a static test: "+from.ModelSays
		return []Static{s}, nil
	case from.Hardness > 0:
		h, err := from.Table.At(from.Hardness)
		if err != nil {
			return nil, err
		}
		s, err := m.static(StaticModulus{h.Shear, h.Young}, math.NaN())
		if err != nil {
			return nil, err
		}
		s.From, s.Source = FromTable, fmt.Sprintf("handbook table of hardness: %s at %g (from memory), not this compound", from.Table, from.Hardness)
		return []Static{s}, nil
	}
	return nil, ErrNoStatic
}

func (m *Mount) static(g StaticModulus, u95 float64) (Static, error) {
	if !(g.Shear > 0) || math.IsInf(g.Shear, 0) {
		return Static{}, fmt.Errorf("mount: the static shear modulus must be positive, not %g Pa", g.Shear)
	}
	free := *m
	free.Arrangement = m.Arrangement.clone()
	for _, a := range free.Arrangement.leaves() {
		a.Stretch = 0
	}
	s := Static{Modulus: g, Stiffness: free.staticStiffness(g), Deflection: math.NaN()}
	const h = 1e-5
	up, down := StaticModulus{g.Shear * (1 + h), g.Young * (1 + h)}, StaticModulus{g.Shear * (1 - h), g.Young * (1 - h)}
	s.U95 = (free.staticStiffness(up) - free.staticStiffness(down)) / (2 * h) * u95 / g.Shear
	s.Tangent = s.Stiffness
	rest, err := free.Loaded(g)
	switch {
	case errors.Is(err, ErrNoLoad) || errors.Is(err, ErrRotates):
	case err != nil:
		s.Refused, s.Tangent = err, math.NaN()
	default:
		s.Rest, s.Deflection = rest, rest.Deflection
		s.Tangent = rest.Mount.staticStiffness(g)
	}
	return s, nil
}

// staticStiffness returns the static stiffness along the movement, of all mounts, at
// the stretches of the leaves.
func (m *Mount) staticStiffness(g StaticModulus) float64 {
	nodes := m.Arrangement.leaves()
	k := make([]complex128, len(nodes))
	shear, pressed := complex(g.Shear, 0), complex(g.pressed(), 0)
	for i, a := range nodes {
		e := m.Elements[a.Element]
		switch {
		case e.Bush != nil:
			k[i] = e.Bush.Stiffness(shear)
		case e.Disc != nil:
			k[i] = e.Disc.Torsion(shear)
		case a.Kind == Single && e.Pad.Pressed:
			k[i], _ = e.Pad.PressAt(pressed, a.stretch())
		case a.Kind == Single:
			k[i] = e.Pad.Shear(shear)
		default:
			normal, along := a.components()
			press, _ := e.Pad.PressAt(pressed, a.stretch())
			k[i] = complex(2*normal*normal, 0)*press + complex(2*along*along, 0)*e.Pad.Shear(shear)
		}
	}
	whole, _ := m.Arrangement.join(k)
	return float64(m.Count) * m.PartFactor * real(whole)
}
