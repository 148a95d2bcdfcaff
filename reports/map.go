package reports

import (
	"fmt"
	"math"

	"phaselag/models"
	"phaselag/models/mount"
	"phaselag/reports/figure"
)

// MapQuantity is what a map of a mount shows.
type MapQuantity int

// The quantities.
const (
	MapStiffness  MapQuantity = iota // |K*|
	MapLossFactor                    // η
)

// Spread is where a map or a set of curves of a mount is wanted. A NaN stands for the default.
type Spread struct {
	// Frequencies in Hz. Default: 1 to 200 Hz.
	Low, High float64
	// Temperatures in K. Default: those of the compound's domain. Curves have
	// their own list.
	Cold, Warm float64
	// Displacement is the amplitude across the mount in m, of a mount that rotates rad,
	// single amplitude. Default: the mount file's excitation.
	Displacement float64
}

// AnySpread is a Spread of defaults.
func AnySpread() Spread {
	nan := math.NaN()
	return Spread{nan, nan, nan, nan, nan}
}

func (s Spread) filled(c *models.Compound) (Spread, error) {
	or := func(v *float64, other float64) {
		if math.IsNaN(*v) {
			*v = other
		}
	}
	or(&s.Low, 1)
	or(&s.High, 200)
	or(&s.Cold, c.Domain.Temperature[0]+zeroC)
	or(&s.Warm, c.Domain.Temperature[1]+zeroC)
	if !(s.Low > 0 && s.High > s.Low) || math.IsInf(s.High, 0) {
		return s, fmt.Errorf("frequencies from %g to %g Hz: the first must be positive and below the second", s.Low, s.High)
	}
	if !(s.Cold > 0 && s.Warm > s.Cold) || math.IsInf(s.Warm, 0) {
		return s, fmt.Errorf("temperatures from %.4g to %.4g °C: the first must be above absolute zero and below the second", s.Cold-zeroC, s.Warm-zeroC)
	}
	return s, nil
}

// amplitudeText says in a caption how the mount is moved.
func amplitudeText(m *mount.Mount, displacement float64) string {
	u := unitsOf(m)
	switch {
	case !math.IsNaN(displacement):
	case !math.IsNaN(m.Excitation.Displacement):
		displacement = m.Excitation.Displacement
	default:
		unit := "N"
		if m.Rotates() {
			unit = "N·m"
		}
		return fmt.Sprintf("under %s %s (zero to peak)", short(m.Excitation.Force), unit)
	}
	return fmt.Sprintf("at %s %s (zero to peak)", short(u.perRad*displacement), u.travel)
}

// columns and rows of a map's grid.
const (
	mapColumns = 72
	mapRows    = 48
)

// mapColumn is the mount at one temperature: its values, and the frequencies inside the
// domain, as logarithms; NaN where there are none.
type mapColumn struct {
	T        float64 // °C
	z        []float64
	low, top float64
}

// kind says how the domain ends in a column of the map from y0 to y1: not there, cut off
// below, cut off above.
func (c mapColumn) kind(y0, y1 float64) [3]bool {
	return [3]bool{math.IsNaN(c.low), c.low > y0, c.top < y1}
}

// StiffnessMap draws the dynamic stiffness |K*| or the loss factor of a mount over
// temperature and frequency as steps of shade with lines of equal value, which carry
// their numbers. What lies outside the compound's domain is hatched. It returns an error
// where no condition of the map lies inside, or no amplitude is stated.
func StiffnessMap(c *models.Compound, m *mount.Mount, quantity MapQuantity, where Spread) (fig figure.Figure, caption string, err error) {
	fail := func(format string, a ...any) (figure.Figure, string, error) {
		return figure.Figure{}, "", fmt.Errorf(format, a...)
	}
	s, err := where.filled(c)
	if err != nil {
		return figure.Figure{}, "", err
	}
	u := unitsOf(m)
	y0, y1 := math.Log10(s.Low), math.Log10(s.High)
	ys := make([]float64, mapRows+1)
	for j := range ys {
		ys[j] = y0 + (y1-y0)*float64(j)/mapRows
	}
	// at gives the value and whether it lies inside.
	at := func(T, logF float64) (float64, bool, error) {
		state, err := mountAt(c, m, StiffnessQuery{Frequency: math.Pow(10, logF), Temperature: T + zeroC, Displacement: s.Displacement})
		if err != nil {
			return math.NaN(), false, err
		}
		k := state.value
		z := imag(k) / real(k)
		if quantity == MapStiffness {
			z = u.scale * math.Hypot(real(k), imag(k))
		}
		return z, real(k) > 0 && drawable(z) && state.inside(c) == nil, nil
	}
	var firstErr error
	column := func(T float64) mapColumn {
		out := mapColumn{T: T, low: math.NaN(), top: math.NaN()}
		in := make([]bool, len(ys))
		for j, y := range ys {
			z, ok, err := at(T, y)
			if err != nil && firstErr == nil {
				firstErr = err
			}
			out.z, in[j] = append(out.z, z), ok
		}
		out.low, out.top = insideStretch(ys, in, func(y float64) bool { _, ok, _ := at(T, y); return ok })
		return out
	}
	var grid []mapColumn
	for i := range mapColumns + 1 {
		T := celsius(s.Cold + (s.Warm-s.Cold)*float64(i)/mapColumns)
		next := column(T)
		if n := len(grid); n > 0 && grid[n-1].kind(y0, y1) != next.kind(y0, y1) {
			// Two more columns where the domain begins or ends, or its border leaves the map.
			a, b := grid[n-1], next
			for b.T-a.T > 1e-6 {
				mid := column(a.T + (b.T-a.T)/2)
				if mid.kind(y0, y1) == grid[n-1].kind(y0, y1) {
					a = mid
				} else {
					b = mid
				}
			}
			grid = append(grid, a, b)
		}
		grid = append(grid, next)
	}
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, col := range grid {
		if math.IsNaN(col.low) {
			continue
		}
		for j, y := range ys {
			if y >= col.low-1e-9 && y <= col.top+1e-9 {
				lo, hi = math.Min(lo, col.z[j]), math.Max(hi, col.z[j])
			}
		}
	}
	if lo > hi {
		if firstErr != nil {
			return figure.Figure{}, "", firstErr
		}
		return fail("no condition from %.4g to %.4g °C and %.4g to %.4g Hz lies inside the domain: %s", celsius(s.Cold), celsius(s.Warm), s.Low, s.High, domainText(c))
	}
	p, outside := mapPanel(grid, ys, lo, hi)
	name := "dynamic stiffness |K*| (" + u.stiffness + ")"
	if quantity == MapLossFactor {
		name = "loss factor η"
	}
	p.Title = name
	p.X = figure.Axis{Label: "temperature T (°C)", Min: celsius(s.Cold), Max: celsius(s.Warm)}
	p.Y = figure.Axis{Label: "frequency f (Hz)", Log: true, Min: s.Low, Max: s.High}
	caption = fmt.Sprintf("Map of the %s of the mount %s, %s: lines of equal value, darker is higher; %s to %s inside the domain. Of the tested batch, without intervals.", name, m.Name, amplitudeText(m, s.Displacement), short(roundTo(lo, 3)), short(roundTo(hi, 3)))
	if outside {
		caption += " Hatched: outside the compound's domain, where nothing is said."
	}
	return figure.Figure{Width: 150, Height: 100, Panels: []figure.Panel{p}, Alt: fmt.Sprintf("map of the %s of a mount over temperature and frequency, from %s to %s", name, short(roundTo(lo, 3)), short(roundTo(hi, 3)))}, caption, nil
}

// insideStretch is the longest stretch of ys that is inside, its ends found by halving.
func insideStretch(ys []float64, in []bool, inside func(float64) bool) (low, top float64) {
	low, top = math.NaN(), math.NaN()
	edge := func(a, b float64) float64 {
		for range 30 {
			if mid := (a + b) / 2; inside(mid) {
				a = mid
			} else {
				b = mid
			}
		}
		return a
	}
	for j := 0; j < len(ys); j++ {
		if !in[j] {
			continue
		}
		first := j
		for j+1 < len(ys) && in[j+1] {
			j++
		}
		a, b := ys[first], ys[j]
		if first > 0 {
			a = edge(a, ys[first-1])
		}
		if j+1 < len(ys) {
			b = edge(b, ys[j+1])
		}
		if !(top-low >= b-a) {
			low, top = a, b
		}
	}
	return low, top
}

// mapPanel fills a panel with steps, lines and hatch; outside says whether anything is
// hatched.
func mapPanel(grid []mapColumn, ys []float64, lo, hi float64) (p figure.Panel, outside bool) {
	// Over decades the logarithm is the straighter of the two between nodes.
	scale := func(v float64) float64 { return v }
	if lo > 0 && hi/lo > 6 {
		scale = math.Log10
	}
	xs := make([]float64, len(grid))
	z := make([][]float64, len(grid))
	for i, col := range grid {
		xs[i] = col.T
		z[i] = make([]float64, len(ys))
		for j, v := range col.z {
			// Beyond the domain the numbers only carry the lines across its border.
			if !drawable(v) {
				v = lo
			}
			z[i][j] = scale(math.Max(lo/10, math.Min(10*hi, v)))
		}
	}
	power := func(ly []float64) []float64 {
		out := make([]float64, len(ly))
		for i, v := range ly {
			out[i] = math.Pow(10, v)
		}
		return out
	}
	x0, x1, y0, y1 := xs[0], xs[len(xs)-1], ys[0], ys[len(ys)-1]
	levels := mapLevels(lo, hi)
	shades := figure.Steps(len(levels) + 1)
	ring := func(x, y []float64) figure.Ring { return figure.Ring{X: x, Y: power(y)} }
	p.Areas = append(p.Areas, figure.Area{Rings: []figure.Ring{ring([]float64{x0, x1, x1, x0}, []float64{y0, y0, y1, y1})}, Colour: shades[0]})
	for k, level := range levels {
		area := figure.Area{Colour: shades[k+1]}
		line := figure.Series{Mark: minusSign(short(level)), Line: figure.Solid, Width: 0.5}
		for _, r := range contours(xs, ys, z, scale(level)) {
			area.Rings = append(area.Rings, ring(r.x, r.y))
			for _, l := range r.lines {
				for _, part := range cutToDomain(grid, l[0], l[1]) {
					if len(line.X) > 0 {
						line.X, line.Y = append(line.X, math.NaN()), append(line.Y, math.NaN())
					}
					line.X, line.Y = append(line.X, part[0]...), append(line.Y, power(part[1])...)
				}
			}
		}
		p.Areas = append(p.Areas, area)
		p.Series = append(p.Series, line)
	}
	p.Legend = figure.NoLegend
	// What is outside: above and below the domain's frequencies, whole columns above.
	var above, below [2][]float64
	var border [2]figure.Series
	last := [2]float64{math.NaN(), math.NaN()}
	for k := range border {
		border[k] = figure.Series{Line: figure.Solid, Width: 0.9}
	}
	for _, col := range grid {
		low, top := col.low, col.top
		if math.IsNaN(low) {
			low, top = y0, y0
		}
		above[0], above[1] = append(above[0], col.T), append(above[1], top)
		below[0], below[1] = append(below[0], col.T), append(below[1], low)
		for k, v := range [2]float64{low, top} {
			limit := [2]float64{y0, y1}[k]
			if math.Abs(v-limit) > 1e-6 {
				outside = true
			}
			// The frame is a line already.
			if last[k] == v && (v == y0 || v == y1) {
				border[k].X, border[k].Y = append(border[k].X, math.NaN()), append(border[k].Y, math.NaN())
			}
			last[k] = v
			border[k].X, border[k].Y = append(border[k].X, col.T), append(border[k].Y, math.Pow(10, v))
		}
	}
	if !outside {
		return p, false
	}
	hatched := []figure.Ring{
		ring(append(above[0], x1, x0), append(above[1], y1, y1)),
		ring(append(below[0], x1, x0), append(below[1], y0, y0)),
	}
	for _, r := range hatched {
		p.Areas = append(p.Areas, figure.Area{Rings: []figure.Ring{r}, Colour: 0xFFFFFF}, figure.Area{Rings: []figure.Ring{r}, Colour: figure.Grey, Hatch: true})
	}
	p.Series = append(p.Series, border[0], border[1])
	return p, true
}

// cutToDomain returns the stretches of a line, y as logarithm, that lie inside.
func cutToDomain(grid []mapColumn, x, y []float64) [][2][]float64 {
	inside := func(x, y float64) bool {
		i := 1
		for i < len(grid)-1 && grid[i].T < x {
			i++
		}
		a, b := grid[i-1], grid[i]
		t := 0.0
		if b.T > a.T {
			t = (x - a.T) / (b.T - a.T)
		}
		low, top := a.low+t*(b.low-a.low), a.top+t*(b.top-a.top)
		return y >= low-1e-9 && y <= top+1e-9
	}
	var out [][2][]float64
	var run [2][]float64
	add := func(x, y float64) { run[0], run[1] = append(run[0], x), append(run[1], y) }
	flush := func() {
		if len(run[0]) > 1 {
			out = append(out, run)
		}
		run = [2][]float64{}
	}
	for k := range x {
		now := inside(x[k], y[k])
		if k > 0 && now != inside(x[k-1], y[k-1]) {
			in, out := 0.0, 1.0
			if now {
				in, out = 1, 0
			}
			for range 40 {
				if t := (in + out) / 2; inside(x[k-1]+t*(x[k]-x[k-1]), y[k-1]+t*(y[k]-y[k-1])) {
					in = t
				} else {
					out = t
				}
			}
			add(x[k-1]+in*(x[k]-x[k-1]), y[k-1]+in*(y[k]-y[k-1]))
			if !now {
				flush()
			}
		}
		if now {
			add(x[k], y[k])
		}
	}
	flush()
	return out
}

func drawable(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }
