package mount

import "phaselag/data/unit"

// excitation reads what shakes the mount: a displacement or a force, of a mount that
// rotates an angle or a torque.
func (r *reader) excitation(m *Mount, keys map[string]entry) {
	e, ok := keys["excitation"]
	if !ok {
		return
	}
	shake := r.mapping(e.value, e.path, "displacement", "force", "angle", "torque")
	m.Excitation.Displacement = r.amount(shake, "displacement", unit.Length, true)
	m.Excitation.Force = r.amount(shake, "force", unit.Force, true)
	if _, ok := shake["angle"]; ok {
		m.Excitation.Displacement = r.amount(shake, "angle", unit.Angle, true)
	}
	if _, ok := shake["torque"]; ok {
		m.Excitation.Force = r.amount(shake, "torque", unit.Torque, true)
	}
	if len(shake) > 1 {
		what := "displacement and force at the same time"
		if len(shake) > 2 || shake["displacement"].key == nil || shake["force"].key == nil {
			what = "more than one excitation"
		}
		r.fault(e.value, e.path, what, "state the one that is held; the other follows")
	}
}

// oneMotion checks that all of a mount is moved along a line, or all of it turned, and
// is shaken accordingly.
func (r *reader) oneMotion(m *Mount, keys map[string]entry) {
	rotates := m.Rotates()
	for _, a := range m.Arrangement.leaves() {
		e := m.Elements[a.Element]
		if rotates && !e.rotates() {
			at := keys["elements"]
			r.fault(at.value, join(at.path, e.Name), "is moved along a line beside an element that is turned", "a mount file describes one direction; give each its own file")
			return
		}
	}
	if shake, ok := keys["excitation"]; ok {
		in := r.mapping(shake.value, shake.path)
		for _, c := range []struct {
			key, instead string
			turns        bool
		}{{"displacement", "angle: 0.5 deg", false}, {"force", "torque: 5 N·m", false}, {"angle", "displacement: 0.3 mm", true}, {"torque", "force: 50 N", true}} {
			if e, ok := in[c.key]; ok && c.turns != rotates {
				what := "the mount is moved along a line"
				if rotates {
					what = "the mount is turned"
				}
				r.fault(e.key, e.path, what, c.instead)
			}
		}
	}
	if load, ok := keys["load"]; ok && rotates {
		r.fault(load.key, load.path, "a mount that is turned carries no load in its direction", "leave it out")
	}
}
