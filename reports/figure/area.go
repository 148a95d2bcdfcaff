package figure

import (
	"math"
	"slices"

	"gonum.org/v1/plot/vg"
)

// Area is a filled or hatched part of the frame, bounded by rings in the coordinates
// of X and Y. A point is inside where the rings wind round it: a ring that runs the
// other way inside another is a hole. Areas lie under everything else, later ones over
// earlier ones, and do not count for the range of an axis.
type Area struct {
	Rings  []Ring
	Colour Colour
	Hatch  bool // slanted lines of the colour instead of a fill
}

// Ring is a closed line; the last point is joined to the first. A point that has no
// place on the axes is left out.
type Ring struct{ X, Y []float64 }

// Steps returns n pale fills that darken by equal steps of lightness, the first the
// lightest: tints of one blue, between 4 and 62 % of it, in grey as far apart as in
// colour, and pale enough for black lines and figures on them.
func Steps(n int) []Colour {
	out := make([]Colour, n)
	for i := range out {
		out[i] = mix(0xFFFFFF, Blue, 0.04+0.58*float64(i)/math.Max(1, float64(n-1)))
	}
	return out
}

// hatchGap is the distance of two lines of a hatch, mm.
const hatchGap = 1.8

// rings returns the rings of an area in mm, clipped to the frame.
func (a *axes) rings(v Area) [][]xy {
	var out [][]xy
	for _, r := range v.Rings {
		var ring []xy
		for i := range min(len(r.X), len(r.Y)) {
			if a.panel.X.usable(r.X[i]) && a.panel.Y.usable(r.Y[i]) {
				ring = append(ring, xy{a.x.place(r.X[i]), a.y.place(r.Y[i])})
			}
		}
		if len(ring) < 3 {
			continue
		}
		if ring = clipArea(ring, a.frame); len(ring) > 2 {
			out = append(out, ring)
		}
	}
	return out
}

func (p *pen) areas(a *axes) {
	for _, v := range a.panel.Areas {
		rings := a.rings(v)
		if len(rings) == 0 {
			continue
		}
		if v.Hatch {
			for _, l := range hatch(rings, a.frame) {
				p.line(l[:], 0.35, Solid, v.Colour)
			}
			continue
		}
		var whole vg.Path
		for _, r := range rings {
			whole = append(whole, path(r, true)...)
		}
		p.colour(v.Colour)
		p.c.Fill(whole)
	}
}

// hatch returns the parts inside rings of the lines y = x + k·gap·√2: those between
// the 1st and the 2nd, the 3rd and the 4th … crossing with any ring.
func hatch(rings [][]xy, f rect) [][2]xy {
	step := hatchGap * math.Sqrt2
	var out [][2]xy
	for k := math.Ceil((f.y0 - f.x1) / step); k*step < f.y1-f.x0; k++ {
		c := k * step
		var at []float64 // abscissae of the crossings
		for _, r := range rings {
			for i, q := range r {
				b := r[(i+1)%len(r)]
				u, v := q.y-q.x-c, b.y-b.x-c
				if (u > 0) != (v > 0) {
					at = append(at, q.x+(b.x-q.x)*u/(u-v))
				}
			}
		}
		slices.Sort(at)
		for i := 0; i+1 < len(at); i += 2 {
			if at[i+1]-at[i] > 0.05 {
				out = append(out, [2]xy{{at[i], at[i] + c}, {at[i+1], at[i+1] + c}})
			}
		}
	}
	return out
}
