package mount

import "errors"

// ErrRotates says that a mount is turned or tilted where a displacement was given, or
// the other way round; or that a mass was to swing on it.
var ErrRotates = errors.New("mount: its stiffness is in N·m/rad; ask for it with an angle or a torque")

// errMoves is the other way round.
var errMoves = errors.New("mount: its stiffness is in N/m; ask for it with a displacement or a force")

// Rotates says whether the mount is turned or tilted: its bushes are torsional or
// conical, or it has twisted discs. Then State.Stiffness is in N·m/rad, displacements are angles in rad and
// forces torques in N·m, single amplitude.
func (m *Mount) Rotates() bool {
	for _, a := range m.Arrangement.leaves() {
		if m.Elements[a.Element].rotates() {
			return true
		}
	}
	return false
}

// Twisted is Displaced of a mount that rotates, at an angle in rad, single amplitude.
func (m *Mount) Twisted(material Material, hertz, kelvin, angle float64) (State, error) {
	if !m.Rotates() {
		return State{}, errMoves
	}
	return m.prepare(kelvin).displaced(material, hertz, angle)
}

// Torqued is Forced of a mount that rotates, under a torque in N·m, single amplitude.
func (m *Mount) Torqued(material Material, hertz, kelvin, torque float64) (State, error) {
	if !m.Rotates() {
		return State{}, errMoves
	}
	return m.prepare(kelvin).forced(material, hertz, torque)
}

func (e Element) rotates() bool { return e.Disc != nil || e.Bush != nil && e.Bush.Way.Rotates() }
