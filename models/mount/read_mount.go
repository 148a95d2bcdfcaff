package mount

import (
	"fmt"
	"math"
	"strings"

	"gopkg.in/yaml.v3"

	"phaselag/data/place"
	"phaselag/data/unit"
)

// deepest is how far arrangements may be nested.
const deepest = 32

// mount reads the whole file. What it returns is whole only if no fault was
// gathered.
func (r *reader) mount(n *yaml.Node) *Mount {
	m := &Mount{
		Count: 1, Mass: math.NaN(), StaticForce: math.NaN(), PartFactor: 1, PartFactorU: math.NaN(),
		Excitation: Excitation{Displacement: math.NaN(), Force: math.NaN()},
		Tolerance:  Tolerance{Hardness: math.NaN()},
	}
	keys := r.mapping(n, "", "mount", "elements", "arrangement", "count", "direction", "load", "excitation", "part_factor", "tolerance", "thermal_resistance")
	if keys == nil {
		return m
	}
	if e, ok := keys["mount"]; ok {
		m.Name = r.text(e)
	}
	if e, ok := keys["direction"]; ok {
		m.Direction = r.text(e)
		r.direction = m.Direction
		r.across, r.upright = m.Direction == "horizontal", m.Direction == "vertical"
	}
	if e, ok := keys["elements"]; ok {
		m.Elements = r.elements(e)
	} else {
		r.fault(n, "elements", "missing", "for example elements: {pad: {shape: shear pad, area: 1200 mm2, thickness: 12 mm}}")
	}
	r.arrangement(m, n, keys)
	if e, ok := keys["count"]; ok {
		x := r.number(keys, "count")
		switch {
		case math.IsNaN(x): // reported
		case x != math.Trunc(x) || x > 1e6:
			r.fault(e.value, e.path, "want a whole number of mounts, not "+kind(e.value), "")
		default:
			m.Count = int(x)
		}
	}
	static, stated := r.load(m, keys)
	r.excitation(m, keys)
	if e, ok := keys["part_factor"]; ok {
		r.partFactor(m, e, keys)
	}
	if e, ok := keys["tolerance"]; ok {
		spread := r.mapping(e.value, e.path, "hardness")
		m.Tolerance.Hardness = r.amount(spread, "hardness", unit.Hardness, true)
		if h, ok := spread["hardness"]; ok && !math.IsNaN(m.Tolerance.Hardness) {
			_, symbol, _ := unit.Split(h.value.Value)
			if u, ok := unit.Lookup(symbol, unit.Hardness); ok {
				m.Tolerance.Scale = u.Symbol
			}
		}
	}
	if e, ok := keys["thermal_resistance"]; ok {
		m.Resistance = r.resistance(keys)
		for _, el := range m.Elements {
			if el.Resistance > 0 {
				r.fault(e.key, e.path, "beside that of "+el.Name, "state it for the mount or for its elements")
				break
			}
		}
	}
	if len(r.faults) == 0 {
		r.oneMotion(m, keys)
	}
	rested := m
	if len(r.faults) == 0 {
		rested = r.rest(m, static, stated, keys["load"])
	}
	r.assume(rested)
	return rested
}

// resistance reads a thermal resistance, 0 if there is none.
func (r *reader) resistance(keys map[string]entry) float64 {
	x := r.amount(keys, "thermal_resistance", unit.ThermalResistance, false)
	if math.IsNaN(x) {
		return 0
	}
	return x
}

// partFactor reads a number, or a number with its standard uncertainty.
func (r *reader) partFactor(m *Mount, e entry, keys map[string]entry) {
	if e.value.Kind == yaml.MappingNode {
		keys = r.mapping(e.value, e.path, "value", "u")
		if _, ok := keys["value"]; !ok {
			r.fault(e.value, join(e.path, "value"), "missing", "for example part_factor: {value: 1.05, u: 3 %}")
		}
		m.PartFactor = r.number(keys, "value")
		m.PartFactorU = r.amount(keys, "u", unit.Relative, true)
		return
	}
	m.PartFactor = r.number(keys, "part_factor")
}

// arrangement reads the tree, or takes the only element as the tree.
func (r *reader) arrangement(m *Mount, n *yaml.Node, keys map[string]entry) {
	r.pressed = make([]bool, len(m.Elements))
	e, ok := keys["arrangement"]
	if !ok {
		if len(m.Elements) > 1 {
			r.fault(n, "arrangement", "missing", "say how the elements are joined, for example arrangement: {parallel: ["+strings.Join(r.names, ", ")+"]}")
		}
		return
	}
	if len(r.names) > 0 {
		m.Arrangement = r.node(e.value, e.path, 0)
	}
	for i, pressed := range r.pressed {
		if pressed {
			r.press(m.Elements[i], e.value, "an inclined pair presses its pads, and their stiffness depends")
		}
	}
}

// node reads one node of the tree.
func (r *reader) node(n *yaml.Node, path string, depth int) Arrangement {
	const forms = "an element's name, {parallel: [...]}, {series: [...]} or {inclined_pair: name, angle: 30 deg}"
	if depth > deepest {
		r.fault(n, path, fmt.Sprintf("nested more than %d deep", deepest), "")
		return Arrangement{}
	}
	if n.Kind == yaml.ScalarNode && n.Tag != "!!null" {
		return Arrangement{Element: r.element(n, path)}
	}
	if n.Kind != yaml.MappingNode {
		r.fault(n, path, "want "+forms+", not "+kind(n), "")
		return Arrangement{}
	}
	keys := r.mapping(n, path, "parallel", "series", "inclined_pair", "angle")
	if pair, ok := keys["inclined_pair"]; ok {
		return r.pair(n, path, pair, keys)
	}
	if len(keys) != 1 || len(n.Content) != 2 {
		if len(n.Content) != 2 || len(keys) == 1 {
			r.fault(n, path, "want one of parallel, series and inclined_pair", "nest them: {parallel: [a, {series: [b, c]}]}")
		}
		return Arrangement{}
	}
	a := Arrangement{Kind: Parallel}
	e, ok := keys["parallel"]
	if !ok {
		if e, ok = keys["series"]; !ok {
			r.fault(n, path, "an angle without an inclined_pair", "")
			return Arrangement{}
		}
		a.Kind = Series
	}
	if e.value.Kind != yaml.SequenceNode || len(e.value.Content) == 0 {
		r.fault(e.value, e.path, "want a list of members, not "+kind(e.value), "for example [pad, bush]")
		return Arrangement{}
	}
	for i, c := range e.value.Content {
		a.Members = append(a.Members, r.node(c, fmt.Sprintf("%s[%d]", e.path, i), depth+1))
	}
	return a
}

// pair reads an inclined pair.
func (r *reader) pair(n *yaml.Node, path string, pair entry, keys map[string]entry) Arrangement {
	a := Arrangement{Kind: InclinedPair, Across: r.across}
	for _, other := range []string{"parallel", "series"} {
		if _, ok := keys[other]; ok {
			r.fault(keys[other].key, keys[other].path, "beside inclined_pair", "nest them: {parallel: [{inclined_pair: pad, angle: 30 deg}, pad]}")
		}
	}
	if !r.across && !r.upright {
		r.fault(n, path, "an inclined pair has a stiffness for each direction", "state direction: vertical or direction: horizontal")
	}
	if angle, ok := keys["angle"]; ok {
		x, good := r.quantity(angle, unit.Angle)
		if good && (x < 0 || x > math.Pi/2*(1+1e-12)) {
			r.fault(angle.value, angle.path, "must lie between 0 and 90 degrees", "it is the angle between the pads' normal and the vertical")
		}
		a.Angle = x
	} else {
		r.fault(n, join(path, "angle"), "missing", "the angle between the pads' normal and the vertical, for example 30 deg")
	}
	if pair.value.Kind != yaml.ScalarNode || pair.value.Tag == "!!null" {
		r.fault(pair.value, pair.path, "want an element's name, not "+kind(pair.value), "")
		return a
	}
	a.Element = r.element(pair.value, pair.path)
	if a.Element < len(r.pressed) {
		r.pressed[a.Element] = true
	}
	return a
}

// element returns the index of a named element.
func (r *reader) element(n *yaml.Node, path string) int {
	for i, name := range r.names {
		if name == n.Value {
			return i
		}
	}
	hint := "elements: " + strings.Join(r.names, ", ")
	if near := place.Nearest(n.Value, r.names); near != "" {
		hint = "did you mean " + near + "?"
	}
	r.fault(n, path, fmt.Sprintf("no element is called %q", n.Value), hint)
	return 0
}
