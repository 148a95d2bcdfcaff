package mount

import (
	"errors"
	"fmt"
	"math"
)

// Heat and stiffness
//
// A cycle of amplitude x turns πK″x² into heat, so that an element makes the power
//
//	P = πf·K″·x²          (x its own displacement; summed over all it is that of the mount)
//
// and a thermal resistance R to the surroundings lets it rest at T = T0 + R·P. As
// stiffness and loss depend on T, this is an equation,
//
//	h(T) = T − T0 − R·P(T) = 0,
//
// the heat curve against the straight line of the cooling. Moved by a displacement a
// rubber softens and loses less as it warms: one solution. Under a force it moves farther
// as it warms, and there may be several solutions or none. A solution where h rises is
// stable (warmer, it loses more heat than it makes); one where h falls is the threshold
// beyond which it runs away to the next solution. h is sampled from T0 to the warmest
// temperature allowed, and each change of sign bisected to 1e-12 of T − T0; where h is still
// negative at the warmest, the heat outruns the cooling from the last threshold on:
// thermal runaway.
//
// With a resistance of the mount (of the rubber of one mount to the surroundings) all its
// elements have one temperature. With resistances of elements each has its own, which
// hang together through the shares of displacement: element after element is solved as above with
// the others held, at its coolest stable solution, round after round until no temperature
// changes by more than 1e-9 K. Elements without a resistance stay at T0.
//
// R is constant, the temperature within an element even: a mean, for thick rubber well
// below that of its core.

// HeatDrive is what moves the mount, single amplitude; exactly one is not NaN.
type HeatDrive struct {
	Displacement float64 // m; of a mount that rotates rad
	Force        float64 // N, on all mounts together; of a mount that rotates N·m
}

// Warm is a mount at a temperature where it loses as much heat as it makes.
type Warm struct {
	State
	Temperatures []float64 // K, of every leaf
	Powers       []float64 // W, of every leaf, in one mount
	Power        float64   // W, of all mounts
	Rise         float64   // K, of the warmest leaf above the surroundings
	// Stable is false for a threshold: a little warmer, and the mount runs away from here.
	Stable bool
}

// ErrNoResistance says that the mount file states no thermal resistance.
var ErrNoResistance = errors.New("mount: no thermal resistance is stated")

// RunawayError says that the heat outruns the cooling up to the warmest temperature that
// was allowed, from the temperature From on.
type RunawayError struct {
	Element  string  // "" for the whole mount
	From, To float64 // K
}

func (e *RunawayError) Error() string {
	who := "the mount"
	if e.Element != "" {
		who = e.Element
	}
	return fmt.Sprintf("mount: thermal runaway: from %.4g °C on %s makes more heat than it loses, up to %.4g °C",
		e.From-273.15, who, e.To-273.15)
}

const (
	heatSteps  = 120 // samples of h
	heatRounds = 200 // rounds over the elements
)

// Heated returns the temperatures at which the mount, shaken at hertz in surroundings
// at ambient K, loses as much heat as it makes, coolest first; warmest, in K, is how far it
// may warm (the end of the compound's domain, say).
//
// Thermal runaway is a *RunawayError. It may stand beside answers: the mount rests
// at the stable ones unless it is warmed beyond the threshold, the last answer. Without
// answers it runs away from the surroundings' temperature. Mounts whose elements have their
// own resistances have one answer, the coolest.
func (m *Mount) Heated(material Material, hertz, ambient, warmest float64, d HeatDrive) ([]Warm, error) {
	if !(warmest > ambient) || math.IsInf(warmest, 0) {
		return nil, fmt.Errorf("mount: the warmest temperature, %g K, must lie above the surroundings', %g K", warmest, ambient)
	}
	h := heating{m.prepare(ambient), material, hertz, ambient, warmest, d}
	own := false
	for _, a := range h.nodes {
		own = own || m.Elements[a.Element].Resistance > 0
	}
	switch {
	case own:
		w, err := h.elements()
		if err != nil {
			return nil, err
		}
		return []Warm{w}, nil
	case m.Resistance > 0:
		return h.whole()
	}
	return nil, ErrNoResistance
}

// heating is one question.
type heating struct {
	*prepared
	material                Material
	hertz, ambient, warmest float64
	drive                   HeatDrive
}

// at solves the motion at the temperatures of the leaves, and the heat they make.
func (h *heating) at() (Warm, error) {
	s, err := h.settle(h.material, h.hertz, h.drive.Displacement, h.drive.Force)
	if err != nil {
		return Warm{}, err
	}
	w := Warm{State: s, Temperatures: append([]float64(nil), h.kelvin...)}
	for i, l := range s.Leaves {
		p := math.Pi * h.hertz * h.PartFactor * imag(l.Stiffness) * l.Displacement * l.Displacement
		w.Powers = append(w.Powers, p)
		w.Power += float64(h.Count) * p
		w.Rise = math.Max(w.Rise, h.kelvin[i]-h.ambient)
	}
	return w, nil
}

// whole solves for one temperature of all elements.
func (h *heating) whole() ([]Warm, error) {
	set := func(T float64) {
		for i := range h.kelvin {
			h.kelvin[i] = T
		}
	}
	roots, runs, err := h.solve(func(T float64) (float64, error) {
		set(T)
		w, err := h.at()
		return T - h.ambient - h.Resistance*w.Power/float64(h.Count), err
	})
	if err != nil {
		return nil, err
	}
	var list []Warm
	for _, r := range roots {
		set(r.kelvin)
		w, err := h.at()
		if err != nil {
			return nil, err
		}
		w.Stable = r.stable
		list = append(list, w)
	}
	if runs {
		from := h.ambient
		if len(roots) > 0 {
			from = roots[len(roots)-1].kelvin
		}
		return list, &RunawayError{From: from, To: h.warmest}
	}
	return list, nil
}

// elements solves for each element's own temperature.
func (h *heating) elements() (Warm, error) {
	for range heatRounds {
		change := 0.0
		for i, a := range h.nodes {
			e := h.Elements[a.Element]
			if !(e.Resistance > 0) {
				continue
			}
			before := h.kelvin[i]
			roots, runs, err := h.solve(func(T float64) (float64, error) {
				h.kelvin[i] = T
				w, err := h.at()
				if err != nil {
					return 0, err
				}
				return T - h.ambient - e.Resistance*w.Powers[i], nil
			})
			if err != nil {
				return Warm{}, err
			}
			if len(roots) == 0 {
				if runs {
					return Warm{}, &RunawayError{e.Name, h.ambient, h.warmest}
				}
				return Warm{}, fmt.Errorf("mount: %s has no temperature at which it rests", e.Name)
			}
			h.kelvin[i] = roots[0].kelvin
			change = math.Max(change, math.Abs(h.kelvin[i]-before))
		}
		if change <= 1e-9 {
			w, err := h.at()
			w.Stable = true
			return w, err
		}
	}
	return Warm{}, errors.New("mount: the temperatures of the elements do not settle")
}

type heatRoot struct {
	kelvin float64
	stable bool
}

// solve finds the zeros of h from the surroundings' temperature to the warmest, and says
// whether heat still outruns the cooling there. The steps grow with the rise, so that
// small rises are told apart.
func (h *heating) solve(f func(T float64) (float64, error)) (roots []heatRoot, runs bool, err error) {
	last, lastH := h.ambient, 0.0
	if lastH, err = f(last); err != nil {
		return nil, false, err
	}
	if lastH >= 0 { // no loss at all
		roots = append(roots, heatRoot{h.ambient, true})
	}
	for i := range heatSteps {
		part := float64(i+1) / heatSteps
		T := h.ambient + (h.warmest-h.ambient)*part*part
		v, err := f(T)
		if errors.Is(err, ErrNoBalance) {
			return roots, true, nil // softer than its own force can be balanced by
		}
		if err != nil {
			return nil, false, err
		}
		if (v >= 0) != (lastH >= 0) && !(i == 0 && lastH == 0) {
			lo, hi := last, T
			for range 200 {
				mid := lo + (hi-lo)/2
				if mid == lo || mid == hi || hi-lo <= 1e-12*(hi-h.ambient) {
					break
				}
				x, err := f(mid)
				if err != nil {
					return nil, false, err
				}
				if (x >= 0) == (lastH >= 0) {
					lo = mid
				} else {
					hi = mid
				}
			}
			roots = append(roots, heatRoot{hi, v >= 0})
		}
		last, lastH = T, v
	}
	return roots, lastH < 0, nil
}
