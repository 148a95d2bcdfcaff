package figure

// Clipping is done here, on coordinates, because a canvas knows none.

// clipSegment returns the part of a–b inside r (Liang and Barsky 1984): with
// p(t) = a + t(b − a), every side of r bounds t from below or from above.
func clipSegment(a, b xy, r rect) (xy, xy, bool) {
	t0, t1 := 0.0, 1.0
	dx, dy := b.x-a.x, b.y-a.y
	for _, side := range [4][2]float64{{-dx, a.x - r.x0}, {dx, r.x1 - a.x}, {-dy, a.y - r.y0}, {dy, r.y1 - a.y}} {
		p, q := side[0], side[1]
		switch {
		case p == 0 && q < 0:
			return a, b, false
		case p < 0:
			t0 = max(t0, q/p)
		case p > 0:
			t1 = min(t1, q/p)
		}
	}
	if t0 > t1 {
		return a, b, false
	}
	u, v := a, b
	if t0 > 0 {
		u = xy{a.x + t0*dx, a.y + t0*dy}
	}
	if t1 < 1 {
		v = xy{a.x + t1*dx, a.y + t1*dy}
	}
	return u, v, true
}

// clipLine returns the stretches of a polyline inside r.
func clipLine(pts []xy, r rect) [][]xy {
	var out [][]xy
	var run []xy
	for i := 1; i < len(pts); i++ {
		a, b, ok := clipSegment(pts[i-1], pts[i], r)
		if !ok {
			if run != nil {
				out, run = append(out, run), nil
			}
			continue
		}
		if run == nil || run[len(run)-1] != a {
			if run != nil {
				out = append(out, run)
			}
			run = []xy{a}
		}
		run = append(run, b)
	}
	if run != nil {
		out = append(out, run)
	}
	return out
}

// clipArea returns the part of a polygon inside r (Sutherland and Hodgman
// 1974): cut along one side after the other.
func clipArea(pts []xy, r rect) []xy {
	sides := [4]struct {
		inside func(xy) bool
		cut    func(a, b xy) xy
	}{
		{func(p xy) bool { return p.x >= r.x0 }, func(a, b xy) xy { return cutX(a, b, r.x0) }},
		{func(p xy) bool { return p.x <= r.x1 }, func(a, b xy) xy { return cutX(a, b, r.x1) }},
		{func(p xy) bool { return p.y >= r.y0 }, func(a, b xy) xy { return cutY(a, b, r.y0) }},
		{func(p xy) bool { return p.y <= r.y1 }, func(a, b xy) xy { return cutY(a, b, r.y1) }},
	}
	for _, side := range sides {
		var out []xy
		for i, b := range pts {
			a := pts[(i+len(pts)-1)%len(pts)]
			in, was := side.inside(b), side.inside(a)
			if in != was {
				out = append(out, side.cut(a, b))
			}
			if in {
				out = append(out, b)
			}
		}
		pts = out
	}
	return pts
}

func cutX(a, b xy, x float64) xy { return xy{x, a.y + (b.y-a.y)*(x-a.x)/(b.x-a.x)} }
func cutY(a, b xy, y float64) xy { return xy{a.x + (b.x-a.x)*(y-a.y)/(b.y-a.y), y} }
