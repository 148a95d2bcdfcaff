package mount

import (
	"errors"
	"fmt"
	"math"
)

// Rest under the static load
//
// The members of a parallel share the load at one deflection, those of a series
// share the deflection at one load, and a pressed pad's load curve is not straight
// (loadcurve.go). The deflections x_i make the stored energy less the work of the
// load, ΣW_i(x_i) − Fx, least; it is convex. Newton: replace every leaf by its
// tangent, F_i ≈ a_i + K_i x_i, and join the tree; for parallel members a = Σa_i,
// K = ΣK_i, for a series 1/K = Σ1/K_i, a/K = Σa_i/K_i; go down again for the
// x_i. Where a full step overshoots, the zero of the energy's slope along the step
// is bracketed and bisected. It stops when no deflection changes by more than 1e-12 of
// itself (1e-10 after 100 steps, where rounding allows no more).

// standardGravity is g_n, m/s² (CGPM 1901).
const standardGravity = 9.80665

// StaticModulus is what a compound has against a load that stands.
type StaticModulus struct {
	Shear float64 // G, Pa
	// Young is E0, Pa, in the E_c of pressed pads; NaN or 0: 3G. Handbook tables
	// of filled rubber have more than 3G.
	Young float64
}

// pressed returns a third of E0, the G of pressed pads.
func (s StaticModulus) pressed() float64 {
	if s.Young > 0 {
		return s.Young / 3
	}
	return s.Shear
}

// Rest is a mount at rest under its static load.
type Rest struct {
	// Mount is the mount with the stretches of its pressed pads: its dynamic
	// stiffness is that of small vibrations about the rest.
	Mount      *Mount
	Force      float64 // N, on all mounts together
	Deflection float64 // m, along the load; NaN where a measured element takes part in it
	Tangent    float64 // N/m, static, of all mounts; NaN as Deflection
	Leaves     []RestLeaf
	Iterations int
}

// RestLeaf is one place of the arrangement that holds an element, in the order of the
// file.
type RestLeaf struct {
	Element     int
	Deflection  float64 // m, of the place; 0 for a measured element
	Force       float64 // N, on the place, in one mount
	Compression float64 // of the unloaded height, bulk included; 0 where no pad is pressed
	Factor      float64 // E_t/E_c without the bulk; 1 where no pad is pressed
}

// ErrNoLoad says that the mount file states no static load.
var ErrNoLoad = errors.New("mount: no static load is stated")

// ErrAcross says that the load does not act along the mount's direction, so that it
// tells nothing of the pads' compression.
var ErrAcross = errors.New("mount: the static load does not act along the direction of movement")

// CompressionError says that the static load presses a pad too far.
type CompressionError struct {
	Element     string
	Force       float64 // N, on the element, in one mount
	Compression float64 // of the unloaded height
}

func (e *CompressionError) Error() string {
	return fmt.Sprintf("mount: %s is compressed by %.3g %% under %.4g N; the load curve holds up to %g %%",
		e.Element, 100*e.Compression, e.Force, 100*mostCompression)
}

// load returns the static load on all mounts together in N, NaN if none is stated.
func (m *Mount) load() float64 {
	switch {
	case m.StaticForce > 0:
		return m.StaticForce
	case m.Mass > 0:
		return m.Mass * standardGravity
	}
	return math.NaN()
}

// Loaded puts the mount under its static load. The part factor multiplies the static
// stiffness, too. A pair that is moved horizontally is loaded vertically, if nothing
// but such pairs carries. A measured element's static stiffness is not known: in a
// series it is taken as rigid, which changes no other's load; beside parallel
// members it is an error.
func (m *Mount) Loaded(static StaticModulus) (*Rest, error) {
	if m.Rotates() {
		return nil, ErrRotates
	}
	force := m.load()
	if math.IsNaN(force) {
		return nil, ErrNoLoad
	}
	if !(static.Shear > 0) || math.IsInf(static.Shear, 0) || math.IsInf(static.Young, 0) {
		return nil, fmt.Errorf("mount: the static shear modulus must be positive, not %g Pa", static.Shear)
	}
	tree := m.Arrangement.clone()
	nodes := tree.leaves()
	if err := m.loadable(&tree, nodes, false); err != nil {
		return nil, err
	}
	r := &Rest{Force: force}
	each := force / (float64(m.Count) * m.PartFactor)
	x, err := m.rest(&tree, static, each)
	if err != nil {
		return nil, err
	}
	r.Iterations = x.iterations
	r.Deflection, r.Tangent = x.deflection, float64(m.Count)*m.PartFactor*x.tangent
	for i, a := range nodes {
		l := RestLeaf{Element: a.Element, Deflection: x.leaves[i], Force: x.forces[i] * m.PartFactor, Factor: 1}
		e := m.Elements[a.Element]
		if e.Measured != nil {
			r.Deflection, r.Tangent = math.NaN(), math.NaN()
		}
		if p := e.Pad; p != nil && (p.Pressed || a.Kind == InclinedPair) {
			l.Compression = x.leaves[i] / p.Thickness
			if a.Kind == InclinedPair {
				l.Compression *= math.Cos(a.Angle)
			}
			if l.Compression > mostCompression {
				return nil, &CompressionError{e.Name, l.Force, l.Compression}
			}
			a.Stretch = x.stretches[i]
			l.Factor = p.stiffening(a.Stretch) / p.stiffening(1)
		}
		r.Leaves = append(r.Leaves, l)
	}
	out := *m
	out.Arrangement = tree
	r.Mount = &out
	return r, nil
}

// loadable checks that the static load reaches the leaves along their movement, and
// that no measured element stands beside others.
func (m *Mount) loadable(a *Arrangement, nodes []*Arrangement, beside bool) error {
	if beside && a.Kind == Single && m.Elements[a.Element].Measured != nil {
		return fmt.Errorf("mount: how the load is shared is not known beside %s, whose static stiffness was not measured", m.Elements[a.Element].Name)
	}
	for i := range a.Members {
		if err := m.loadable(&a.Members[i], nil, beside || a.Kind == Parallel && len(a.Members) > 1); err != nil {
			return err
		}
	}
	pairs := true
	for _, n := range nodes {
		pairs = pairs && n.Kind == InclinedPair
	}
	if m.Direction == "horizontal" && !pairs {
		return ErrAcross
	}
	return nil
}

// settled is one mount's balance.
type settled struct {
	deflection, tangent       float64
	leaves, forces, stretches []float64
	iterations                int
}

// carry returns the force of a leaf at a static deflection, its tangent and its
// stretch.
func (m *Mount) carry(a *Arrangement, static StaticModulus, x float64) (force, tangent, stretch float64) {
	e := m.Elements[a.Element]
	switch {
	case e.Measured != nil:
		return 0, math.Inf(1), 1
	case e.Bush != nil:
		k := real(e.Bush.Stiffness(complex(static.Shear, 0)))
		return k * x, k, 1
	case a.Kind == Single && e.Pad.Pressed:
		return e.Pad.squeeze(static.pressed(), x)
	case a.Kind == Single:
		k := real(e.Pad.Shear(complex(static.Shear, 0)))
		return k * x, k, 1
	}
	sin, cos := math.Sincos(a.Angle)
	f, t, stretch := e.Pad.squeeze(static.pressed(), x*cos)
	k := real(e.Pad.Shear(complex(static.Shear, 0)))
	return 2 * (cos*f + sin*sin*k*x), 2 * (cos*cos*t + sin*sin*k), stretch
}

const restLimit = 200

func (m *Mount) rest(tree *Arrangement, static StaticModulus, force float64) (settled, error) {
	nodes := tree.leaves()
	n := len(nodes)
	s := settled{leaves: make([]float64, n), forces: make([]float64, n), stretches: make([]float64, n)}
	t, a, next, carried := make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)
	for s.iterations = 1; s.iterations <= restLimit; s.iterations++ {
		for i, node := range nodes {
			s.forces[i], t[i], s.stretches[i] = m.carry(node, static, s.leaves[i])
			a[i] = 0
			if !math.IsInf(t[i], 1) {
				a[i] = s.forces[i] - t[i]*s.leaves[i]
			}
		}
		offset, tangent, _ := tree.tangents(a, t)
		s.tangent = tangent
		x := (force - offset) / tangent
		tree.spread(x, force, a, t, next, carried)
		largest, change := 0.0, 0.0
		for i := range next {
			largest = math.Max(largest, math.Abs(next[i]))
			if d := math.Abs(next[i] - s.leaves[i]); d > 0 {
				change = math.Max(change, d/math.Abs(next[i]))
			}
		}
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return settled{}, errors.New("mount: the static load has no balance")
		}
		if change <= 1e-12 || s.iterations > restLimit/2 && change <= 1e-10 {
			for i := range nodes {
				if math.IsInf(t[i], 1) {
					s.forces[i] = carried[i]
				}
			}
			s.deflection = x
			return s, nil
		}
		// slope of the energy along the step, at a part of it
		slope := func(part float64) float64 {
			sum := -force * (x - s.deflection)
			for i, node := range nodes {
				if d := next[i] - s.leaves[i]; d != 0 {
					f, _, _ := m.carry(node, static, s.leaves[i]+part*d)
					sum += f * d
				}
			}
			return sum
		}
		part := 1.0
		if slope(1) > -0.9*slope(0)+1e-12*force*largest {
			lo, hi := 0.0, 1.0
			for range 40 {
				if part = (lo + hi) / 2; slope(part) > 0 {
					hi = part
				} else {
					lo = part
				}
			}
		}
		for i := range next {
			s.leaves[i] += part * (next[i] - s.leaves[i])
		}
		s.deflection += part * (x - s.deflection)
	}
	return settled{}, errors.New("mount: the static load has no balance")
}

// tangents joins the leaves' lines F = a + K·x to that of the tree.
func (a *Arrangement) tangents(offsets, stiffness []float64) (offset, k float64, used int) {
	if len(a.Members) == 0 {
		return offsets[0], stiffness[0], 1
	}
	compliance, shift := 0.0, 0.0
	for i := range a.Members {
		o, t, n := a.Members[i].tangents(offsets[used:], stiffness[used:])
		used += n
		offset += o
		k += t
		compliance += 1 / t
		shift += o / t
	}
	if a.Kind == Series {
		k = 1 / compliance
		offset = 0
		if compliance > 0 {
			offset = shift * k
		}
	}
	return offset, k, used
}

// spread returns the leaves' deflections and forces where the tree has the
// deflection x under the force f.
func (a *Arrangement) spread(x, f float64, offsets, stiffness, xs, fs []float64) (used int) {
	if len(a.Members) == 0 {
		xs[0], fs[0] = x, f
		return 1
	}
	for i := range a.Members {
		o, t, n := a.Members[i].tangents(offsets[used:], stiffness[used:])
		if a.Kind == Series || len(a.Members) == 1 {
			a.Members[i].spread((f-o)/t, f, offsets[used:], stiffness[used:], xs[used:], fs[used:])
		} else {
			a.Members[i].spread(x, o+t*x, offsets[used:], stiffness[used:], xs[used:], fs[used:])
		}
		used += n
	}
	return used
}
