package mount

import (
	"errors"
	"fmt"
	"math"
	"strings"

	"phaselag/data/unit"
)

// trimmed is an error of this package without its prefix.
func trimmed(err error) string { return strings.TrimPrefix(err.Error(), "mount: ") }

// note keeps an assumption.
func (r *reader) note(format string, args ...any) {
	r.notes = append(r.notes, fmt.Sprintf(format, args...))
}

// load reads mass and static force, and the modulus against them if one is stated.
func (r *reader) load(m *Mount, keys map[string]entry) (static StaticModulus, stated bool) {
	static = StaticModulus{math.NaN(), math.NaN()}
	e, ok := keys["load"]
	if !ok {
		return static, false
	}
	in := r.mapping(e.value, e.path, "mass", "static_force", "static_modulus", "static_modulus_from_hardness", "hardness_table")
	m.Mass = r.amount(in, "mass", unit.Mass, false)
	m.StaticForce = r.amount(in, "static_force", unit.Force, false)
	static.Shear = r.amount(in, "static_modulus", unit.Modulus, false)
	_, stated = in["static_modulus"]
	h, fromTable := in["static_modulus_from_hardness"]
	switch {
	case fromTable && stated:
		r.fault(h.key, h.path, "beside static_modulus", "state one of the two")
	case fromTable:
		if hard, table, good := r.hardness(h, in, false); good {
			static = StaticModulus{Shear: hard.Shear, Young: hard.Young}
			r.note("static modulus from %s, %s's relation (from memory): G %.3g MPa, E %.3g MPa", h.value.Value, table, hard.Shear/1e6, hard.Young/1e6)
		}
	default:
		if t, ok := in["hardness_table"]; ok {
			r.fault(t.key, t.path, "a table without a hardness", "static_modulus_from_hardness: 60 IRHD")
		}
	}
	stated = stated || fromTable
	if stated && math.IsNaN(m.Mass) && math.IsNaN(m.StaticForce) {
		r.fault(e.value, e.path, "a static modulus without a load", "state mass, or static_force (on all mounts together)")
	}
	return static, stated
}

// rest puts a faultless mount under its load where the file states a static modulus,
// and says what came of it, or why nothing did.
func (r *reader) rest(m *Mount, static StaticModulus, stated bool, at entry) *Mount {
	r.unloaded = "; no static load is stated, so that the stiffness is that of the unloaded pad"
	if !math.IsNaN(m.load()) {
		r.unloaded = "; the influence of the load is left out: load.static_modulus takes it in"
	}
	if !stated {
		return m
	}
	rest, err := m.Loaded(static)
	var far *CompressionError
	switch {
	case errors.As(err, &far):
		r.fault(at.value, at.path, trimmed(err), "a larger, thinner or harder pad, more of them, or enter the part as measured under its load")
		return m
	case errors.Is(err, ErrAcross):
		r.unloaded = "; the load does not act along the movement, so that its influence is left out"
		return m
	case err != nil:
		r.fault(at.value, at.path, trimmed(err), "leave static_modulus out, or enter the whole as measured")
		return m
	}
	r.unloaded = "; tangent at the static load"
	for _, l := range rest.Leaves {
		if l.Compression > 0 {
			r.note("%s: compressed by %.3g %% under %.4g N: its stiffness in compression is %.3g times that of the unloaded pad", m.Elements[l.Element].Name, 100*l.Compression, l.Force, l.Factor)
		}
	}
	return rest.Mount
}
