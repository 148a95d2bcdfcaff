package mount

import "math"

// stretch returns the height of the leaf's pads over their unloaded one.
func (a *Arrangement) stretch() float64 {
	if a.Stretch == 0 {
		return 1
	}
	return a.Stretch
}

// clone copies the tree.
func (a Arrangement) clone() Arrangement {
	members := a.Members
	a.Members = nil
	for _, c := range members {
		a.Members = append(a.Members, c.clone())
	}
	return a
}

// leaves returns the places of the tree that hold an element, in the order of
// the file. The same order holds for all slices of this file.
func (a *Arrangement) leaves() []*Arrangement {
	if a.Kind == Single || a.Kind == InclinedPair {
		return []*Arrangement{a}
	}
	var list []*Arrangement
	for i := range a.Members {
		list = append(list, a.Members[i].leaves()...)
	}
	return list
}

// join returns the stiffness of the tree from those of its leaves, and for
// every leaf the ratio of its displacement to the tree's. For parallel members
// K = ΣK_i and the ratio is 1; for a series 1/K = Σ1/K_i and the ratio is K/K_i.
// As K is homogeneous in the K_i, the ratio's square is the derivative of K by
// that leaf's stiffness.
func (a *Arrangement) join(leaves []complex128) (k complex128, ratio []complex128) {
	k, ratio, _ = a.joined(leaves)
	return k, ratio
}

func (a *Arrangement) joined(leaves []complex128) (k complex128, ratio, rest []complex128) {
	if a.Kind == Single || a.Kind == InclinedPair {
		return leaves[0], []complex128{1}, leaves[1:]
	}
	ks := make([]complex128, len(a.Members))
	ratios := make([][]complex128, len(a.Members))
	rest = leaves
	for i := range a.Members {
		ks[i], ratios[i], rest = a.Members[i].joined(rest)
		if a.Kind == Parallel {
			k += ks[i]
		} else {
			k += 1 / ks[i]
		}
	}
	if a.Kind == Series {
		k = 1 / k
	}
	for i, rs := range ratios {
		for _, r := range rs {
			if a.Kind == Series {
				r *= k / ks[i]
			}
			ratio = append(ratio, r)
		}
	}
	return k, ratio, rest
}

// components returns how much of a unit movement goes along the normal of an
// inclined pair's pads, and how much along their faces.
func (a *Arrangement) components() (normal, along float64) {
	sin, cos := math.Sincos(a.Angle)
	if a.Across {
		return sin, cos
	}
	return cos, sin
}
