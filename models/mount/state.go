package mount

import (
	"errors"
	"math"
	"math/cmplx"
	"slices"
)

// Material returns the complex shear modulus in Pa of the compound at a
// frequency in Hz, a temperature in K and a shear strain amplitude in m/m.
type Material func(hertz, kelvin, strain float64) complex128

// State is a mount at one condition.
type State struct {
	// Stiffness is that of all mounts together, part factor included, N/m.
	Stiffness complex128
	// Uncorrected is the same without the influence of the static load on the
	// pressed pads, at the same moduli; equal to Stiffness where no load is stated.
	Uncorrected  complex128
	Displacement float64 // m, single amplitude
	Force        float64 // N, single amplitude, on all mounts together
	Leaves       []Leaf
	Iterations   int
}

// Leaf is one place of the arrangement that holds an element, in the order of
// the file.
//
// Where the compound changes by dG at the leaf's condition and by dG0 at the
// reference condition of a measured element, the stiffness of all mounts
// changes by
//
//	dK = Sensitivity·dG + ReferenceSensitivity·dG0 + ReferenceConjugate·conj(dG0),
//
// summed over the leaves; the shares of displacement are held in that. A
// measured element's relative error e changes it by Stiffness·Share·e.
type Leaf struct {
	Element              int        // index into Mount.Elements
	Displacement         float64    // m, single amplitude
	Strain               float64    // energy-equivalent shear strain, single amplitude
	Modulus              complex128 // Pa
	Stiffness            complex128 // N/m, of this leaf alone
	Sensitivity          complex128 // N/m per Pa
	ReferenceStrain      float64    // of a measured element, else NaN
	ReferenceModulus     complex128 // Pa, of a measured element, else 0
	ReferenceSensitivity complex128 // N/m per Pa, of a measured element, else 0
	ReferenceConjugate   complex128 // N/m per Pa, of a measured element, else 0
	// Share is the leaf's part in the whole stiffness, ∂ln K/∂ln K_leaf; over
	// all leaves the shares add up to 1.
	Share complex128
}

// ErrNoBalance says that amplitude and stiffness found no balance; the material
// softens faster than amplitude grows.
var ErrNoBalance = errors.New("mount: amplitude and stiffness do not settle")

// tolerance and limit of the balance below: relative change of any
// displacement from one pass to the next, and passes.
const (
	balanceTolerance = 1e-12
	balanceLimit     = 500
	// balanceFarthest in m: a mount that moves farther has run away.
	balanceFarthest = 1e3
)

// Displaced returns the mount's state at a frequency in Hz and a temperature in
// K when it is moved by displacement, in m, single amplitude. In a series the
// members share the displacement as their compliances do,
//
//	x_i = x·|K/K_i|,
//
// and as a member's modulus depends on its own strain, the shares are found by
// repetition until no displacement changes by more than 1e-12 of itself. It
// converges as long as no modulus falls faster than its amplitude rises.
func (m *Mount) Displaced(material Material, hertz, kelvin, displacement float64) (State, error) {
	if m.Rotates() {
		return State{}, ErrRotates
	}
	return m.prepare(kelvin).displaced(material, hertz, displacement)
}

// Forced returns the mount's state under a force amplitude in N on all mounts
// together; the displacement is found in the same repetition.
func (m *Mount) Forced(material Material, hertz, kelvin, force float64) (State, error) {
	if m.Rotates() {
		return State{}, ErrRotates
	}
	return m.prepare(kelvin).forced(material, hertz, force)
}

// prepared is a mount with what does not depend on amplitude and frequency.
type prepared struct {
	*Mount
	nodes  []*Arrangement
	per    []float64 // strain per displacement
	kelvin []float64 // temperature of every leaf
}

func (m *Mount) prepare(kelvin float64) *prepared {
	p := &prepared{Mount: m, nodes: m.Arrangement.leaves()}
	integrals := map[int]float64{} // by element: they take time, and a file may repeat one often
	for _, a := range p.nodes {
		per, known := integrals[a.Element]
		if e := m.Elements[a.Element]; !known {
			per = m.strainPer(a)
			if e.Bush != nil || e.Pad != nil && e.Pad.Bending && a.Kind == Single {
				integrals[a.Element] = per
			}
		}
		p.per = append(p.per, per)
		p.kelvin = append(p.kelvin, kelvin)
	}
	return p
}

func (m *prepared) displaced(material Material, hertz, displacement float64) (State, error) {
	return m.settle(material, hertz, displacement, math.NaN())
}

func (m *prepared) forced(material Material, hertz, force float64) (State, error) {
	return m.settle(material, hertz, math.NaN(), force)
}

func (m *prepared) settle(material Material, hertz, displacement, force float64) (State, error) {
	s := State{Displacement: displacement, Force: force}
	nodes := m.nodes
	s.Leaves = make([]Leaf, len(nodes))
	shares := make([]float64, len(nodes)) // |x_i/x|
	for i := range nodes {
		s.Leaves[i].Element = nodes[i].Element
		m.refer(&s.Leaves[i], material)
		shares[i] = 1
	}
	forced := math.IsNaN(displacement)
	if forced {
		s.Displacement = 0
	}
	stiffness := make([]complex128, len(nodes))
	slope := make([]complex128, len(nodes))
	whole := complex(float64(m.Count)*m.PartFactor, 0)
	for s.Iterations = 1; s.Iterations <= balanceLimit; s.Iterations++ {
		for i := range s.Leaves {
			l := &s.Leaves[i]
			l.Displacement = s.Displacement * shares[i]
			l.Strain = m.per[i] * l.Displacement
			l.Modulus = material(hertz, m.kelvin[i], l.Strain)
			stiffness[i], slope[i] = m.stiffness(nodes[i], l)
			l.Stiffness = stiffness[i]
		}
		k, ratio := m.Arrangement.join(stiffness)
		change := 0.0
		for i, r := range ratio {
			next := cmplx.Abs(r)
			change = math.Max(change, math.Abs(next-shares[i])/next)
			shares[i] = next
		}
		s.Stiffness = whole * k
		if forced {
			next := force / cmplx.Abs(s.Stiffness)
			if next > 0 {
				change = math.Max(change, math.Abs(next-s.Displacement)/next)
			}
			s.Displacement = next
			if next > balanceFarthest {
				return State{}, ErrNoBalance
			}
		}
		if cmplx.IsNaN(s.Stiffness) {
			return State{}, errors.New("mount: the compound has no modulus at this condition")
		}
		if change <= balanceTolerance {
			s.Uncorrected = whole * m.uncorrected(k, nodes, s.Leaves)
			s.Force = s.Displacement * cmplx.Abs(s.Stiffness)
			for i, r := range ratio {
				l := &s.Leaves[i]
				l.Sensitivity = whole * r * r * slope[i]
				l.Share = whole * r * r * l.Stiffness / s.Stiffness
				if e := m.Elements[l.Element].Measured; e != nil {
					direct, conjugate := e.slopes(l.Stiffness, l.ReferenceModulus)
					l.ReferenceSensitivity = whole * r * r * direct
					l.ReferenceConjugate = whole * r * r * conjugate
				}
			}
			return s, nil
		}
	}
	return State{}, ErrNoBalance
}

// uncorrected returns the stiffness of one mount at the moduli of its leaves with
// all pads at their unloaded height; loaded is that under the static load.
func (m *Mount) uncorrected(loaded complex128, nodes []*Arrangement, leaves []Leaf) complex128 {
	if !slices.ContainsFunc(nodes, func(a *Arrangement) bool { return a.stretch() != 1 }) {
		return loaded
	}
	k := make([]complex128, len(nodes))
	for i, a := range nodes {
		free := *a
		free.Stretch = 1
		k[i], _ = m.stiffness(&free, &leaves[i])
	}
	k0, _ := m.Arrangement.join(k)
	return k0
}

// refer fills in a measured element's modulus at its reference condition.
func (m *Mount) refer(l *Leaf, material Material) {
	l.ReferenceStrain = math.NaN()
	if e := m.Elements[l.Element].Measured; e != nil {
		l.ReferenceStrain = e.Amplitude * e.StrainPerDisplacement
		l.ReferenceModulus = material(e.Frequency, e.Temperature, l.ReferenceStrain)
	}
}

// stiffness returns a leaf's stiffness and its derivative by the modulus.
func (m *Mount) stiffness(a *Arrangement, l *Leaf) (k, slope complex128) {
	e := m.Elements[a.Element]
	if e.Measured != nil {
		slope = e.Measured.reference(l.ReferenceModulus) / l.ReferenceModulus
		return slope * l.Modulus, slope
	}
	switch {
	case e.Bush != nil:
		return e.Bush.Stiffness(l.Modulus), e.Bush.Stiffness(1)
	case e.Disc != nil:
		return e.Disc.Torsion(l.Modulus), e.Disc.Torsion(1)
	case a.Kind == Single && e.Pad.Pressed:
		return e.Pad.PressAt(l.Modulus, a.stretch())
	case a.Kind == Single:
		return e.Pad.Shear(l.Modulus), e.Pad.Shear(1)
	}
	// The normal stands at Angle to the vertical: a vertical movement x presses
	// each pad by x·cos and shears it by x·sin; a horizontal one the other way
	// round.
	normal, along := a.components()
	press, pressSlope := e.Pad.PressAt(l.Modulus, a.stretch())
	n2, a2 := complex(2*normal*normal, 0), complex(2*along*along, 0)
	return n2*press + a2*e.Pad.Shear(l.Modulus), n2*pressSlope + a2*e.Pad.Shear(1)
}

// strainPer returns the energy-equivalent shear strain of a leaf (equivalent.go) for a
// displacement of 1 m or an angle of 1 rad.
func (m *Mount) strainPer(a *Arrangement) float64 {
	e := m.Elements[a.Element]
	switch {
	case e.Measured != nil:
		return e.Measured.StrainPerDisplacement
	case e.Bush != nil:
		return e.Bush.strainPer()
	case e.Disc != nil:
		return e.Disc.strainPer()
	case a.Kind == Single && e.Pad.Pressed:
		return math.Sqrt(e.Pad.stiffening(a.stretch())) / e.Pad.Thickness
	case a.Kind == Single && e.Pad.Bending:
		return e.Pad.bentStrain() / e.Pad.Thickness
	case a.Kind == Single:
		return 1 / e.Pad.Thickness
	}
	normal, along := a.components()
	return math.Sqrt(along*along+normal*normal*e.Pad.stiffening(a.stretch())) / e.Pad.Thickness
}
