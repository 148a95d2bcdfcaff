package data

import (
	"fmt"
	"math"
	"sort"

	"phaselag/data/unit"
)

const (
	// temperatureJump parts runs: a step from the mean of the run so far, K.
	temperatureJump = 1.0
	// restartSteps parts runs: going back towards the first value by more than
	// so many usual steps at once.
	restartSteps = 1.5
)

// split parts the points of a test into runs. Isotherms, strain sweeps and
// relaxations end where the temperature jumps, where a segment column or a new
// block says so, or where frequency, strain or time starts again; temperature
// sweeps are parted by frequency.
func split(c *Campaign, p *plan) []Run {
	if p.Kind == Static {
		return nil
	}
	segments := p.usefulSegments()
	var runs []Run
	if p.Kind == TemperatureSweep {
		runs = p.splitByFrequency(segments)
	} else {
		var start int
		for i := 1; i <= len(p.points); i++ {
			if i < len(p.points) && !p.breaks(start, i, segments) {
				continue
			}
			runs = append(runs, p.run(p.points[start:i]))
			start = i
		}
	}
	seen := map[string]int{}
	for i := range runs {
		name := runName(p, &runs[i])
		seen[name]++
		if n := seen[name]; n > 1 {
			name = fmt.Sprintf("%s, repeat %d", name, n)
		}
		runs[i].Name = name
	}
	return runs
}

// usefulSegments reports whether segment columns part the points, and orders
// points of interleaved segments (repeat 1, 2, 3 at the first frequency, then at
// the second) by segment. A column that changes with nearly every row and
// under whose values nothing is swept numbers the points and parts nothing.
func (p *plan) usefulSegments() bool {
	changes := 0
	var order []string
	groups := map[string][]raw{}
	for i, pt := range p.points {
		if i > 0 && pt.segment != p.points[i-1].segment {
			changes++
		}
		key := fmt.Sprintf("%s\x00%d\x00%s", pt.File, pt.block, pt.segment)
		if groups[key] == nil {
			order = append(order, key)
		}
		groups[key] = append(groups[key], pt)
	}
	switch {
	case changes == 0:
		return false
	case 2*changes < len(p.points):
		return true
	case 3*len(order) > len(p.points):
		return false
	}
	sorted := make([]raw, 0, len(p.points))
	for _, key := range order {
		if !p.swept(groups[key]) {
			return false
		}
		sorted = append(sorted, groups[key]...)
	}
	p.points = sorted
	return true
}

// swept reports whether the quantity that the kind of test sweeps takes several
// values among points next to each other at one temperature.
func (p *plan) swept(points []raw) bool {
	for i := 1; i < len(points); i++ {
		a, b := points[i-1], points[i]
		if math.Abs(a.Temperature-b.Temperature) > temperatureJump {
			continue
		}
		if p.Kind == StrainSweep && a.Strain != b.Strain || p.Kind != StrainSweep && (a.Frequency != b.Frequency || a.Time != b.Time && p.Kind == Relaxation) {
			return true
		}
	}
	return false
}

// breaks reports whether a new run begins at point i.
func (p *plan) breaks(start, i int, segments bool) bool {
	a, b := p.points[i-1], p.points[i]
	if a.File != b.File || a.block != b.block || segments && a.segment != b.segment {
		return true
	}
	if math.Abs(b.Temperature-p.mean(start, i)) > temperatureJump {
		return true
	}
	switch p.Kind {
	case FrequencySweep:
		return p.restarts(start, i, func(r raw) float64 { return r.Frequency })
	case StrainSweep:
		return math.Abs(b.Frequency-a.Frequency) > 0.01*a.Frequency || p.restarts(start, i, func(r raw) float64 { return r.Strain })
	case Relaxation:
		return b.Time < a.Time
	}
	return false
}

// remembered is how many of the last points of a run a new one is compared
// with, so that a long table takes linear time.
const remembered = 64

// mean is the mean temperature of the last points of [start, i).
func (p *plan) mean(start, i int) float64 {
	start = max(start, i-remembered)
	var sum float64
	n := 0
	for _, pt := range p.points[start:i] {
		if !math.IsNaN(pt.Temperature) {
			sum += pt.Temperature
			n++
		}
	}
	return sum / float64(n) // NaN, which breaks nothing, where none is known
}

// restarts reports whether a quantity that climbs (or falls) on a logarithmic
// scale jumps back by several of its usual steps.
func (p *plan) restarts(start, i int, get func(raw) float64) bool {
	if i-start < 2 {
		return false
	}
	last, next := get(p.points[i-1]), get(p.points[i])
	var steps []float64
	for k := max(start, i-remembered) + 1; k < i; k++ {
		steps = append(steps, math.Abs(math.Log(get(p.points[k])/get(p.points[k-1]))))
	}
	sort.Float64s(steps)
	usual := steps[len(steps)/2]
	jump := math.Log(next / last)
	if !(usual > 1e-6) || math.IsNaN(jump) {
		return false
	}
	back := math.Signbit(jump) != math.Signbit(math.Log(last/get(p.points[start])))
	return back && math.Abs(jump) > restartSteps*usual
}

// sameFrequency is how far apart two frequencies may be to be one, relative.
const sameFrequency = 0.005

func (p *plan) splitByFrequency(segments bool) []Run {
	var groups [][]raw
	for _, pt := range p.points {
		found := false
		for i, g := range groups {
			same := math.Abs(pt.Frequency-g[0].Frequency) <= sameFrequency*g[0].Frequency || math.IsNaN(pt.Frequency)
			if same && g[0].File == pt.File && g[0].block == pt.block && (!segments || g[0].segment == pt.segment) {
				groups[i] = append(g, pt)
				found = true
				break
			}
		}
		if !found {
			groups = append(groups, []raw{pt})
		}
	}
	var runs []Run
	for _, g := range groups {
		runs = append(runs, p.run(g))
	}
	return runs
}

// run makes a run of points.
func (p *plan) run(points []raw) Run {
	r := Run{Temperature: math.NaN(), Frequency: math.NaN(), Strain: math.NaN()}
	var T, f, s, set []float64
	for _, pt := range points {
		r.Points = append(r.Points, pt.Point)
		if pt.Used {
			T, f, s, set = append(T, pt.Temperature), append(f, pt.Frequency), append(s, pt.Strain), append(set, pt.set)
		}
	}
	if p.Kind != TemperatureSweep {
		r.Temperature = nominal(T)
		if v := constant(set, 1e-9); !math.IsNaN(v) {
			r.Temperature = v
		}
		if !math.IsNaN(p.temperature) {
			r.Temperature = p.temperature
		}
	}
	r.Frequency = constant(f, sameFrequency)
	r.Strain = constant(s, 0.1)
	return r
}

// nominal is the mean rounded to 0.1 °C; NaN of nothing.
func nominal(T []float64) float64 {
	var sum float64
	for _, v := range T {
		sum += v
	}
	return unit.Kelvin(math.Round((sum/float64(len(T))-273.15)*10) / 10)
}

// constant is the first value where all agree within a relative tolerance, NaN
// otherwise.
func constant(v []float64, tolerance float64) float64 {
	if len(v) == 0 {
		return math.NaN()
	}
	for _, x := range v {
		if !(math.Abs(x-v[0]) <= tolerance*math.Abs(v[0])) {
			return math.NaN()
		}
	}
	return v[0]
}
