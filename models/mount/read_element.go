package mount

import (
	"fmt"
	"math"
	"strings"

	"gopkg.in/yaml.v3"

	"phaselag/data/unit"
)

// elements reads the named elements in the order of the file.
func (r *reader) elements(e entry) []Element {
	if e.value.Kind != yaml.MappingNode || len(e.value.Content) == 0 {
		r.fault(e.value, e.path, "want named elements, not "+kind(e.value), "for example {pad: {shape: shear pad, area: 1200 mm2, thickness: 12 mm}}")
		return nil
	}
	named := r.mapping(e.value, e.path)
	var list []Element
	seen := map[string]bool{}
	for i := 0; i+1 < len(e.value.Content); i += 2 {
		one, ok := named[e.value.Content[i].Value]
		if !ok || seen[one.key.Value] {
			continue
		}
		seen[one.key.Value] = true
		r.names = append(r.names, one.key.Value)
		list = append(list, r.oneElement(one))
	}
	return list
}

// oneElement reads a shape or a measured part. A faulty one is still an
// element, so that its name is known to the arrangement.
func (r *reader) oneElement(e entry) Element {
	el := Element{Name: e.key.Value}
	measured := false
	if e.value.Kind == yaml.MappingNode {
		for i := 0; i < len(e.value.Content); i += 2 {
			measured = measured || e.value.Content[i].Value == "measured"
		}
	}
	if measured {
		el.Measured, el.Resistance = r.measured(e)
		return el
	}
	keys := r.mapping(e.value, e.path, elementKeys...)
	if keys == nil {
		return el
	}
	if s, ok := keys["strain_per_displacement"]; ok {
		r.fault(s.key, s.path, "belongs to a measured element", "the strain of a shape follows from its dimensions")
	}
	shape, ok := keys["shape"]
	if !ok {
		r.fault(e.value, join(e.path, "shape"), "missing", "shape: shear pad, or measured: {stiffness: 420 N/mm, ...}")
		return el
	}
	el.Resistance = r.resistance(keys)
	what := r.text(shape)
	if what != "bush" {
		r.foreign(keys, "a bush", "direction")
	}
	switch what {
	case "shear pad":
		r.foreign(keys, "a bush or a ring", "inner_diameter", "outer_diameter")
		el.Pad = r.pad(e, keys)
	case "compression pad", "compression strip":
		r.foreign(keys, "a bush or a ring", "inner_diameter", "outer_diameter")
		r.foreign(keys, "a shear pad", "bending")
		el.Pad = r.pad(e, keys)
		el.Pad.Pressed = true
		if el.Pad.Strip = what == "compression strip"; el.Pad.Strip {
			r.strip(e, keys, el.Pad)
		}
		r.press(el, e.key, "a compression pad's stiffness depends")
	case "compression ring":
		r.foreign(keys, "a pad", "area", "length", "width", "diameter")
		r.foreign(keys, "a shear pad", "bending")
		el.Pad = r.ring(e, keys)
		r.press(el, e.key, "a ring's stiffness depends")
	case "axial bush":
		r.foreign(keys, "a pad", "area", "thickness", "width", "diameter", "bending", "compression_coefficient", "factor", "factor_from_hardness", "bulk_modulus", "bulk_from_hardness", "hardness_table")
		el.Bush = r.bush(e, keys)
	case "bush":
		r.foreign(keys, "a pad", "area", "thickness", "width", "diameter", "bending", "compression_coefficient", "factor", "factor_from_hardness", "bulk_modulus", "bulk_from_hardness", "hardness_table")
		el.Bush = r.bush(e, keys)
		el.Bush.Way = r.way(e, keys)
	case "torsion disc":
		r.foreign(keys, "a pad or a bush", "area", "length", "width", "bending", "compression_coefficient", "factor", "factor_from_hardness", "bulk_modulus", "bulk_from_hardness", "hardness_table")
		el.Disc = r.disc(e, keys)
	default:
		r.fault(shape.value, shape.path, "unknown shape "+kind(shape.value), "known are "+strings.Join(shapes, ", ")+"; anything else can be entered as measured")
	}
	return el
}

// elementKeys are the keys of an element that is not measured.
var elementKeys = []string{
	"shape", "area", "thickness", "length", "width", "diameter", "inner_diameter", "outer_diameter",
	"bending", "compression_coefficient", "factor", "factor_from_hardness", "bulk_modulus", "bulk_from_hardness", "hardness_table",
	"direction", "thermal_resistance", "measured", "strain_per_displacement",
}

// shapes are the shapes of elements that are not measured.
var shapes = []string{"shear pad", "compression pad", "compression strip", "compression ring", "axial bush", "bush", "torsion disc"}

// foreign reports keys of another shape.
func (r *reader) foreign(keys map[string]entry, owner string, names ...string) {
	for _, n := range names {
		if e, ok := keys[n]; ok {
			r.fault(e.key, e.path, "belongs to "+owner, "leave it out")
		}
	}
}

// way reads how a bush is moved: its own direction, or the mount's.
func (r *reader) way(e entry, keys map[string]entry) Way {
	const hint = "direction: axial, torsional, radial or conical"
	word := r.direction
	d, own := keys["direction"]
	if own {
		word = r.text(d)
	}
	for i, w := range ways {
		if w == word {
			return Way(i)
		}
	}
	if own {
		r.fault(d.value, d.path, "unknown direction "+kind(d.value), hint)
	} else {
		r.fault(e.value, join(e.path, "direction"), "missing: a bush has a stiffness for each direction", hint)
	}
	return Axial
}

// bush reads the dimensions of a bush.
func (r *reader) bush(e entry, keys map[string]entry) *Bush {
	b := &Bush{
		Inner:  r.amount(keys, "inner_diameter", unit.Length, false) / 2,
		Outer:  r.amount(keys, "outer_diameter", unit.Length, false) / 2,
		Length: r.amount(keys, "length", unit.Length, false),
	}
	for _, needed := range []struct{ key, hint string }{
		{"inner_diameter", "the rubber's inner diameter"}, {"outer_diameter", "the rubber's outer diameter"}, {"length", "the rubber's length along the axis"},
	} {
		if _, ok := keys[needed.key]; !ok {
			r.fault(e.value, join(e.path, needed.key), "missing", needed.hint+", for example 20 mm")
		}
	}
	if b.Outer <= b.Inner {
		r.fault(keys["outer_diameter"].value, keys["outer_diameter"].path, "must be greater than inner_diameter", "")
	}
	return b
}

// pad reads a pad.
func (r *reader) pad(e entry, keys map[string]entry) *Pad {
	p := &Pad{
		Area:      r.amount(keys, "area", unit.Area, false),
		Thickness: r.amount(keys, "thickness", unit.Length, false),
		Length:    r.amount(keys, "length", unit.Length, false),
		Width:     r.amount(keys, "width", unit.Length, false),
		Diameter:  r.amount(keys, "diameter", unit.Length, false),
		Bending:   r.flag(keys, "bending"),
	}
	p.Compression, p.Bulk = r.rubber(e, keys)
	has := func(key string) bool { _, ok := keys[key]; return ok }
	if !has("thickness") {
		r.fault(e.value, join(e.path, "thickness"), "missing", "the thickness of one rubber layer, for example 12 mm")
	}
	sides := has("length") && has("width")
	const forms = "area: 1200 mm2, or diameter: 40 mm, or length: 40 mm and width: 30 mm"
	switch {
	case has("length") != has("width"):
		r.fault(e.value, e.path, "a rectangle needs length and width", "length is the side along the shear")
	case sides && has("diameter"):
		r.fault(e.value, e.path, "both a diameter and sides", forms)
	case has("area") && (sides || has("diameter")):
		r.fault(keys["area"].key, keys["area"].path, "the area follows from the other dimensions", "leave it out")
	case !has("area") && !sides && !has("diameter"):
		r.fault(e.value, join(e.path, "area"), "missing", forms)
	case sides:
		p.Area = p.Length * p.Width
	case has("diameter"):
		p.Area = math.Pi / 4 * p.Diameter * p.Diameter
	}
	if p.Bending && has("area") && !sides && !has("diameter") {
		r.fault(keys["bending"].value, keys["bending"].path, "bending depends on the section, not on its area alone", "state the diameter, or length and width")
	}
	return p
}

// measured reads a measured part and its thermal resistance.
func (r *reader) measured(e entry) (m *Measured, resistance float64) {
	keys := r.mapping(e.value, e.path, "measured", "strain_per_displacement", "thermal_resistance")
	resistance = r.resistance(keys)
	m = &Measured{StrainPerDisplacement: r.amount(keys, "strain_per_displacement", unit.StrainPerLength, false)}
	if _, ok := keys["strain_per_displacement"]; !ok {
		r.fault(e.value, join(e.path, "strain_per_displacement"), "missing", "the shear strain for a displacement, for example 4 %/mm; for a pad in shear it is 1/thickness")
	}
	at := keys["measured"]
	in := r.mapping(at.value, at.path, "stiffness", "part", "loss_factor", "loss_angle", "frequency", "temperature", "amplitude", "static_load", "u")
	if in == nil {
		return m, resistance
	}
	m.Stiffness = r.amount(in, "stiffness", unit.Stiffness, false)
	m.LossFactor = r.number(in, "loss_factor")
	m.Frequency = r.amount(in, "frequency", unit.Frequency, false)
	m.Amplitude = r.amount(in, "amplitude", unit.Length, true)
	m.StaticLoad = r.amount(in, "static_load", unit.Force, true)
	m.U = r.amount(in, "u", unit.Relative, true)
	m.Temperature = math.NaN()
	if t, ok := in["temperature"]; ok {
		if x, good := r.quantity(t, unit.Temperature); good {
			m.Temperature = x
		}
	}
	for _, needed := range []struct{ key, example string }{
		{"stiffness", "420 N/mm"}, {"frequency", "15 Hz"}, {"temperature", "23 °C"}, {"amplitude", "0.5 mm"},
	} {
		if _, ok := in[needed.key]; !ok {
			r.fault(at.value, join(at.path, needed.key), "missing", "for example "+needed.key+": "+needed.example)
		}
	}
	if a, ok := in["loss_angle"]; ok {
		x, good := r.quantity(a, unit.Angle)
		switch _, both := in["loss_factor"]; {
		case both:
			r.fault(a.key, a.path, "beside loss_factor", "state one of the two")
		case good && (x <= 0 || x >= math.Pi/2):
			r.fault(a.value, a.path, "must lie between 0 and 90 degrees", "")
		case good:
			m.LossFactor = math.Tan(x)
		}
	}
	if p, ok := in["part"]; ok {
		switch part := r.text(p); part {
		case "magnitude":
		case "storage":
			m.Storage = true
		default:
			r.fault(p.value, p.path, fmt.Sprintf("want magnitude or storage, not %q", part), "")
		}
	}
	return m, resistance
}

// press checks that an element can be pressed; it says why it must be.
func (r *reader) press(e Element, at *yaml.Node, why string) {
	path := "elements." + e.Name
	switch {
	case e.Measured != nil || e.Bush != nil || e.Disc != nil:
		r.fault(at, path, "an inclined pair needs a pad, which has a stiffness along and across its faces", "enter the pair as one measured element")
	case e.Pad == nil: // its own fault was reported
	case math.IsNaN(e.Pad.ShapeFactor()):
		r.fault(at, path, why+" on the pad's section", "state the diameter, or length and width")
	case math.IsNaN(e.Pad.Compression):
		r.fault(at, path+".compression_coefficient", "missing", "k of E_c = 3G(1+2kS²): 1 for unfilled rubber, less for filled, about 0.6 at 60 IRHD; or factor_from_hardness: 60 IRHD")
	}
}

// assume lists what the file left open.
func (r *reader) assume(m *Mount) {
	add := func(format string, args ...any) { m.Assumptions = append(m.Assumptions, fmt.Sprintf(format, args...)) }
	for i, e := range m.Elements {
		switch {
		case e.Measured != nil && math.IsNaN(e.Measured.LossFactor):
			add("%s: the loss factor at the measured condition is the compound's", e.Name)
		case e.Bush != nil && e.Bush.Way == Radial:
			short, long := e.Bush.Radial(1)
			own := e.Bush.RadialBetween(1)
			add("%s: radial stiffness of the bush's length between that of a short (%.3g times) and of a long bush (%.3g times), by the pressure in a thin wall: a convention; measure it where it matters", e.Name, real(short/own), real(long/own))
		case e.Bush != nil && e.Bush.Way == Conical:
			short, long := e.Bush.Conical(1)
			own := e.Bush.ConicalBetween(1)
			add("%s: conical stiffness of radial strips, about, between that of a short (%.3g times) and of a long bush (%.3g times): a convention; measure it where it matters", e.Name, real(short/own), real(long/own))
		case e.Disc != nil:
			add("%s: twisted between plates that stay parallel; the influence of the load is left out", e.Name)
		case e.Bush != nil:
			add("%s: a long bush; its ends are left out", e.Name)
		case e.Pad != nil && e.Pad.Pressed:
			add("%s: bonded compression%s", e.Name, r.unloaded)
		case e.Pad != nil && !e.Pad.Bending && !(i < len(r.pressed) && r.pressed[i]):
			add("%s: simple shear; bending and the influence of the load are left out", e.Name)
		case e.Pad != nil && i < len(r.pressed) && r.pressed[i]:
			add("%s: shear and bonded compression%s", e.Name, r.unloaded)
		case e.Pad != nil:
			add("%s: the influence of the load is left out", e.Name)
		}
		pressed := e.Pad != nil && (e.Pad.Pressed || i < len(r.pressed) && r.pressed[i])
		if pressed && math.IsNaN(e.Pad.Bulk) {
			add("%s: incompressible rubber in compression", e.Name)
		}
	}
	m.Assumptions = append(m.Assumptions, r.notes...)
	if math.IsNaN(m.PartFactorU) {
		add("the factor from specimen to part is %g, without an uncertainty", m.PartFactor)
	}
}
