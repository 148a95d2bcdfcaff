package specimen

import (
	"fmt"
	"math"
	"strings"

	"phaselag/data/place"
)

// Description is a test piece as a campaign file states it: a shape's name and
// the numbers that were stated. "Not stated" is NaN; start from [Unstated].
type Description struct {
	Shape string // one of [Names]

	Diameter      float64 // m, of a round section, a cylinder or a disc
	InnerDiameter float64 // m, of a hollow cylinder; not stated: solid
	Length        float64 // m: along the shear; between clamps, ends or supports
	Width         float64 // m
	Thickness     float64 // m: of one layer, between the plates; in the plane of bending

	Poisson     float64 // not stated: 0.5
	Coefficient float64 // k of bonded compression; not stated: [UnfilledCoefficient]
	Bulk        float64 // Pa, of bonded compression; not stated: incompressible
	Shear       float64 // shear coefficient of bending; not stated: [ParabolicShear]
	Bending     bool    // take the bending of sheared layers off
}

// kind says which numbers a shape takes.
type kind struct {
	name    string
	section bool     // a diameter, or length and width
	needs   []string // beside the section
	may     []string
}

var (
	beamNeeds = []string{length, width, thickness}
	beamMay   = []string{poisson, shearFactor}
)

var kinds = []kind{
	{"single shear", true, []string{thickness}, nil},
	{"double shear", true, []string{thickness}, nil},
	{"quadruple shear", true, []string{thickness}, nil},
	{"bonded compression", true, []string{thickness}, []string{coefficient, bulk}},
	{"lubricated compression", true, []string{thickness}, []string{poisson}},
	{"tension strip", false, []string{length, width, thickness}, []string{poisson}},
	{"torsion bar", false, []string{length, width, thickness}, nil},
	{"torsion cylinder", false, []string{diameter, length}, []string{innerDiameter}},
	{"parallel plates", false, []string{diameter, thickness}, nil},
	{"cantilever", false, beamNeeds, beamMay},
	{"dual cantilever", false, beamNeeds, beamMay},
	{"three-point bending", false, beamNeeds, beamMay},
}

// Names returns the names of all shapes.
func Names() []string {
	list := make([]string, len(kinds))
	for i, k := range kinds {
		list[i] = k.name
	}
	return list
}

// Unstated returns a description of which nothing but the shape is stated.
func Unstated(shape string) Description {
	nan := math.NaN()
	return Description{shape, nan, nan, nan, nan, nan, nan, nan, nan, nan, false}
}

// stated is one number of a description.
type stated struct {
	name  string
	value float64
}

func (d Description) numbers() []stated {
	return []stated{
		{diameter, d.Diameter}, {innerDiameter, d.InnerDiameter}, {length, d.Length}, {width, d.Width}, {thickness, d.Thickness},
		{poisson, d.Poisson}, {coefficient, d.Coefficient}, {bulk, d.Bulk}, {shearFactor, d.Shear},
	}
}

// Build returns the valid shape and, as sentences, what had to be assumed. A
// name that is no shape's, a number that is missing, one that the shape does not
// have, and an impossible one are errors with a hint.
func (d Description) Build() (Shape, []string, error) {
	name := strings.TrimSpace(d.Shape)
	var k kind
	for _, one := range kinds {
		if one.name == name {
			k = one
		}
	}
	if k.name == "" {
		hint := "shapes: " + strings.Join(Names(), ", ")
		if near := place.Nearest(name, Names()); near != "" {
			hint = fmt.Sprintf("did you mean %q?", near)
		}
		return nil, nil, &place.Error{What: fmt.Sprintf("no shape has the name %.60q", name), Hint: hint}
	}
	if err := d.fits(k); err != nil {
		return nil, nil, err
	}
	var assumed []string
	or := func(v float64, instead float64, sentence string) float64 {
		if !math.IsNaN(v) {
			return v
		}
		assumed = append(assumed, k.name+": "+sentence)
		return instead
	}
	half := func() float64 { return or(d.Poisson, 0.5, "a Poisson ratio of 0.5 is assumed") }
	section := Section(Circle{d.Diameter})
	if math.IsNaN(d.Diameter) {
		section = Rectangle{d.Length, d.Width}
	}
	var s Shape
	switch k.name {
	case "single shear":
		s = Shear{Single, section, d.Thickness, d.Bending}
	case "double shear":
		s = Shear{Double, section, d.Thickness, d.Bending}
	case "quadruple shear":
		s = Shear{Quadruple, section, d.Thickness, d.Bending}
	case "bonded compression":
		s = Bonded{
			section, d.Thickness,
			or(d.Coefficient, UnfilledCoefficient, "the compression coefficient of unfilled rubber, k = 1, is assumed"),
			or(d.Bulk, math.Inf(1), "the rubber is assumed incompressible"),
		}
	case "lubricated compression":
		s = Lubricated{section, d.Thickness, half()}
	case "tension strip":
		s = Strip{d.Length, d.Width, d.Thickness, half()}
	case "torsion bar":
		s = Bar{d.Length, d.Width, d.Thickness}
	case "torsion cylinder":
		inner := d.InnerDiameter
		if math.IsNaN(inner) {
			inner = 0
		}
		s = Cylinder{d.Length, d.Diameter, inner}
	case "parallel plates":
		s = Plates{d.Diameter, d.Thickness}
	default:
		support := map[string]Support{"cantilever": Cantilever, "dual cantilever": DualCantilever, "three-point bending": ThreePoint}[k.name]
		s = Beam{support, d.Length, d.Width, d.Thickness, half(), or(d.Shear, ParabolicShear, "the shear coefficient 5/6 is taken")}
	}
	if err := s.Validate(); err != nil {
		return nil, nil, err
	}
	return s, assumed, nil
}

// fits refuses numbers that are missing, too many or out of place.
func (d Description) fits(k kind) error {
	has := map[string]bool{}
	for _, n := range d.numbers() {
		has[n.name] = !math.IsNaN(n.value)
	}
	allowed := map[string]bool{}
	for _, name := range append(append([]string{}, k.needs...), k.may...) {
		allowed[name] = true
	}
	takes := strings.Join(k.needs, ", ")
	if k.section {
		takes += ", and diameter or length and width"
		allowed[diameter], allowed[length], allowed[width] = true, true, true
		if has[diameter] && (has[length] || has[width]) {
			return &place.Error{What: k.name + ": both a diameter and a side are stated", Hint: "a diameter for a round section, length and width for a rectangular one"}
		}
		if !has[diameter] && !(has[length] && has[width]) {
			return &place.Error{What: k.name + ": no cross-section is stated", Hint: "it takes " + takes}
		}
	}
	for _, n := range d.numbers() {
		if has[n.name] && !allowed[n.name] {
			return &place.Error{What: fmt.Sprintf("%s: has no %s", k.name, n.name), Hint: "it takes " + takes}
		}
	}
	for _, name := range k.needs {
		if !has[name] {
			return &place.Error{What: fmt.Sprintf("%s: %s is not stated", k.name, name), Hint: "it takes " + takes}
		}
	}
	if d.Bending && !strings.HasSuffix(k.name, " shear") {
		return &place.Error{What: k.name + ": has no bending to take off", Hint: "bending belongs to sheared layers"}
	}
	return nil
}
