package reports

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"phaselag/fitting"
	"phaselag/models"
	"phaselag/reports/figure"
)

// named is a figure with the name of its file and its caption.
type namedFigure struct {
	name, caption string
	figure        figure.Figure
}

// isothermSet is the measured points of the frequency sweeps at one nominal
// temperature.
type isothermSet struct {
	T      float64 // °C
	points []fitting.Point
}

// isotherms groups the frequency sweeps by nominal temperature, cold first.
// Reading order is kept inside.
func isotherms(r *fitting.Result) []isothermSet {
	at := map[float64]int{}
	var out []isothermSet
	for _, p := range r.Points {
		if p.Kind != "frequency sweep" || !p.Used || !finite(p.Nominal) {
			continue
		}
		T := math.Round(float64(p.Nominal)*2) / 2
		i, ok := at[T]
		if !ok {
			i = len(out)
			at[T] = i
			out = append(out, isothermSet{T: T})
		}
		out[i].points = append(out[i].points, p)
	}
	sort.SliceStable(out, func(i, j int) bool { return out[i].T < out[j].T })
	return out
}

func degreesLabel(T float64) string { return minusSign(fmt.Sprintf("%g °C", T)) }

func minusSign(s string) string { return strings.ReplaceAll(s, "-", "−") }

// xy takes two numbers from every point.
func xy(points []fitting.Point, x, y func(fitting.Point) float64) (xs, ys []float64) {
	for _, p := range points {
		xs, ys = append(xs, x(p)), append(ys, y(p))
	}
	return xs, ys
}

func pFrequency(p fitting.Point) float64 { return float64(p.Frequency) }
func pStorage(p fitting.Point) float64   { return float64(p.Storage) }
func pLoss(p fitting.Point) float64      { return float64(p.Loss) }
func pEta(p fitting.Point) float64       { return float64(p.Loss) / float64(p.Storage) }
func pMagnitude(p fitting.Point) float64 { return math.Hypot(float64(p.Storage), float64(p.Loss)) }
func pStrain(p fitting.Point) float64    { return float64(p.Strain) }

// figures draws everything that the result can show.
func figures(r *fitting.Result) []namedFigure {
	var out []namedFigure
	s := r.Campaign.Symbol()
	sets := isotherms(r)
	if len(sets) > 0 && len(r.Shifts)+len(sets) > 0 && manyFrequencies(sets) {
		out = append(out, isothermFigure(s, sets), wicketFigure(s, sets), phaseFigure(s, sets))
	}
	if r.Compound != nil && len(sets) > 0 {
		out = append(out, masterFigure(r, sets))
	}
	if len(r.Shifts) > 1 {
		out = append(out, shiftFigure(r))
	}
	if r.Compound != nil && r.Compound.Amplitude.Law != models.AmplitudeNone {
		out = append(out, strainFigure(r))
	}
	if len(r.Fixed) > 2 {
		out = append(out, temperatureFigure(r))
	}
	if relaxation := relaxationPoints(r); r.Compound != nil && len(relaxation) > 0 {
		out = append(out, relaxationFigure(r, relaxation))
	}
	if r.Compound != nil {
		for _, draw := range []func(*models.Compound) (namedFigure, bool){nomogram, transitionFigure} {
			if f, ok := draw(r.Compound); ok {
				out = append(out, f)
			}
		}
	}
	return out
}

func manyFrequencies(sets []isothermSet) bool {
	for _, v := range sets {
		for _, p := range v.points {
			if p.Frequency != v.points[0].Frequency {
				return true
			}
		}
	}
	return false
}

func isothermFigure(s string, sets []isothermSet) namedFigure {
	panel := func(label string, log bool, y func(fitting.Point) float64) figure.Panel {
		p := figure.Panel{X: figure.Auto("frequency f (Hz)", true), Y: figure.Auto(label, log), Legend: figure.NoLegend}
		for i, v := range sets {
			xs, ys := xy(v.points, pFrequency, y)
			p.Series = append(p.Series, figure.Series{Name: degreesLabel(v.T), X: xs, Y: ys, Line: figure.Solid, Width: 0.5, Glyph: figure.PickGlyph(i), Size: 1.3, Colour: figure.Ramp(i, len(sets))})
		}
		return p
	}
	return namedFigure{"isotherms", "Isotherms as measured, not shifted.", figure.Figure{
		Width: 170, Height: 118, Columns: 2, Shared: true,
		Panels: []figure.Panel{
			panel("storage modulus "+s+"′ (MPa)", true, pStorage), panel("loss modulus "+s+"″ (MPa)", true, pLoss),
			panel("loss factor tan δ", false, pEta), panel("magnitude |"+s+"*| (MPa)", true, pMagnitude),
		},
	}}
}

func wicketFigure(s string, sets []isothermSet) namedFigure {
	p := figure.Panel{X: figure.Auto("magnitude |"+s+"*| (MPa)", true), Y: figure.Auto("loss factor tan δ", true), Legend: figure.Outside}
	for i, v := range sets {
		xs, ys := xy(v.points, pMagnitude, pEta)
		p.Series = append(p.Series, figure.Series{Name: degreesLabel(v.T), X: xs, Y: ys, Glyph: figure.PickGlyph(i), Colour: figure.Ramp(i, len(sets))})
	}
	return namedFigure{"wicket", "Wicket plot: with neither frequency nor temperature on the axes, the isotherms of a thermorheologically simple material fall on one curve without any shift.", figure.Figure{Width: 160, Height: 80, Panels: []figure.Panel{p}}}
}

// phaseFigure is the plot of van Gurp and Palmen (Rheol. Bull. 67 (1998) 5; from
// memory): a need for vertical shifts shows as a shift sideways.
func phaseFigure(s string, sets []isothermSet) namedFigure {
	p := figure.Panel{X: figure.Auto("magnitude |"+s+"*| (MPa)", true), Y: figure.Auto("loss angle δ (°)", false), Legend: figure.Outside}
	for i, v := range sets {
		xs, ys := xy(v.points, pMagnitude, func(p fitting.Point) float64 {
			return math.Atan2(float64(p.Loss), float64(p.Storage)) * 180 / math.Pi
		})
		p.Series = append(p.Series, figure.Series{Name: degreesLabel(v.T), X: xs, Y: ys, Glyph: figure.PickGlyph(i), Colour: figure.Ramp(i, len(sets))})
	}
	return namedFigure{"phase-against-modulus", "Loss angle against magnitude (van Gurp and Palmen): as in the wicket plot no shift is needed; isotherms that part sideways would need a vertical shift.", figure.Figure{Width: 160, Height: 80, Panels: []figure.Panel{p}}}
}

// curveDecade is how many points a decade a curve has.
const curveDecade = 12

func logSpace(lo, hi float64, perDecade int) []float64 {
	n := max(2, int(math.Ceil(math.Log10(hi/lo)*float64(perDecade)))+1)
	out := make([]float64, n)
	for i := range out {
		out[i] = lo * math.Pow(hi/lo, float64(i)/float64(n-1))
	}
	out[n-1] = hi
	return out
}

// band is a curve with its 95 % interval.
type band struct{ x, y, low, high []float64 }

func (b *band) add(x, y, half float64) {
	b.x, b.y = append(b.x, x), append(b.y, y)
	b.low, b.high = append(b.low, y-half), append(b.high, y+half)
}

func (b *band) series(name string, dash figure.Dash, colour figure.Colour) figure.Series {
	return figure.Series{Name: name, X: b.x, Y: b.y, Low: b.low, High: b.high, Line: dash, Colour: colour}
}

// reducedPoint turns a measured point to the reference temperature where the
// polymer term alone was shifted: the filler's part does not shift, so that a
// filled compound's points are moved by what the model says of their condition.
func reducedPoint(c *models.Compound, p fitting.Point) (storage, loss float64) {
	g := c.Value(models.Condition{Frequency: float64(p.ReducedFrequency), Temperature: c.ReferenceTempC + zeroC, Strain: float64(p.Strain) / 100})
	re, im := real(g)/1e6, imag(g)/1e6
	return re * float64(p.Storage) / float64(p.FittedStorage), im * float64(p.Loss) / float64(p.FittedLoss)
}

func masterFigure(r *fitting.Result, sets []isothermSet) namedFigure {
	c := r.Compound
	s := r.Campaign.Symbol()
	d := c.Domain.ReducedFrequency
	var st, lo, eta band
	for _, f := range logSpace(d[0], d[1], curveDecade) {
		m, err := c.Extrapolate(models.Condition{Frequency: f, Temperature: c.ReferenceTempC + zeroC, Strain: math.NaN()})
		if err != nil {
			continue
		}
		st.add(f, m.Storage/1e6, m.StorageU95/1e6)
		lo.add(f, m.Loss/1e6, m.LossU95/1e6)
		eta.add(f, m.LossFactor, m.LossFactorU95)
	}
	note := fmt.Sprintf("T_{ref} = %s", degreesLabel(c.ReferenceTempC))
	top := figure.Panel{X: figure.Auto("reduced frequency f·a_{T} (Hz)", true), Y: figure.Auto(s+"′, "+s+"″ (MPa)", true), Notes: []string{note}, Legend: figure.NoLegend}
	bottom := figure.Panel{X: figure.Auto("reduced frequency f·a_{T} (Hz)", true), Y: figure.Auto("loss factor tan δ", false), Notes: []string{note}, Legend: figure.NoLegend}
	top.Series = append(top.Series, st.series(s+"′, 95 % band", figure.Solid, figure.Blue), lo.series(s+"″, 95 % band", figure.Dashed, figure.Vermillion))
	bottom.Series = append(bottom.Series, eta.series("tan δ, 95 % band", figure.DashDot, figure.Green))
	for i, v := range sets {
		var xs, sy, ly, ey []float64
		for _, p := range v.points {
			if !finite(p.ReducedFrequency) || !finite(p.FittedLoss) {
				continue
			}
			a, b := reducedPoint(c, p)
			xs, sy, ly, ey = append(xs, float64(p.ReducedFrequency)), append(sy, a), append(ly, b), append(ey, b/a)
		}
		g := figure.PickGlyph(i)
		name := degreesLabel(v.T)
		top.Series = append(top.Series,
			figure.Series{Name: name, X: xs, Y: sy, Glyph: g, Size: 1.2, Colour: figure.Blue},
			figure.Series{X: xs, Y: ly, Glyph: g, Size: 1.2, Colour: figure.Vermillion})
		bottom.Series = append(bottom.Series, figure.Series{X: xs, Y: ey, Glyph: g, Size: 1.2, Colour: figure.Green})
	}
	// The curves once more on top of the points, which would hide them.
	for _, v := range []struct {
		panel *figure.Panel
		b     *band
	}{{&top, &st}, {&top, &lo}, {&bottom, &eta}} {
		v.panel.Series = append(v.panel.Series, figure.Series{X: v.b.x, Y: v.b.y, Line: figure.Solid, Width: 0.5, Colour: figure.Black})
	}
	caption := "Master curve of storage modulus, loss modulus and loss factor at the reference temperature, with 95 % bands. The bands hold everything that the measurements share."
	if c.Amplitude.Law != models.AmplitudeNone {
		caption += fmt.Sprintf(" Curve at the isotherms' own amplitude of %.3g %%; the filler's part does not shift with temperature and is moved as the model says.", float64(c.Domain.OwnStrain))
	}
	return namedFigure{"master-curve", caption, figure.Figure{Width: 170, Height: 140, Columns: 1, Shared: true, Panels: []figure.Panel{top, bottom}}}
}

func shiftFigure(r *fitting.Result) namedFigure {
	p := figure.Panel{X: figure.Auto("temperature T (°C)", false), Y: figure.Auto("shift factor log a_{T}", false)}
	var free, overlap figure.Series
	free = figure.Series{Name: "free of any law, ± 95 %", Glyph: figure.PickGlyph(0), Colour: figure.Blue}
	overlap = figure.Series{Name: "closed-form overlap", Glyph: figure.PickGlyph(1), Hollow: true, Colour: figure.Vermillion}
	for _, v := range r.Shifts {
		free.X, free.Y, free.YError = append(free.X, float64(v.TemperatureC)), append(free.Y, float64(v.Log)), append(free.YError, 1.96*float64(v.U))
		overlap.X, overlap.Y = append(overlap.X, float64(v.TemperatureC)), append(overlap.Y, float64(v.Overlap))
	}
	c := r.Compound
	if c != nil {
		var law band
		d := c.Domain.Temperature
		const n = 80
		for i := range n + 1 {
			T := d[0] + (d[1]-d[0])*float64(i)/n
			law.add(T, c.LogShift(T+zeroC), 0)
		}
		name := c.Shift.Law
		if name == models.LawNone {
			name = "interpolation"
		}
		p.Series = append(p.Series, figure.Series{Name: name, X: law.x, Y: law.y, Line: figure.Solid, Colour: figure.Black})
	}
	p.Series = append(p.Series, free, overlap)
	residual := figure.Panel{X: figure.Auto("temperature T (°C)", false), Y: figure.Auto("difference from the law", false), Legend: figure.NoLegend,
		Lines: []figure.Reference{{At: 0, Line: figure.Solid}}}
	diff := figure.Series{Glyph: figure.PickGlyph(0), Colour: figure.Blue}
	for _, v := range r.Shifts {
		diff.X, diff.Y, diff.YError = append(diff.X, float64(v.TemperatureC)), append(diff.Y, float64(v.Log)-float64(v.Law)), append(diff.YError, 1.96*float64(v.U))
	}
	residual.Series = []figure.Series{diff}
	fig := figure.Figure{Width: 170, Height: 72, Panels: []figure.Panel{p}}
	caption := "Shift factors of the tested temperatures."
	if c != nil && c.Shift.Law != models.LawNone {
		fig.Panels = append(fig.Panels, residual)
		caption = "Shift factors of the tested temperatures with the law, and their difference from it. The bars hold the scatter of the temperature from run to run."
	}
	return namedFigure{"shift-factors", caption, fig}
}

func strainFigure(r *fitting.Result) namedFigure {
	c := r.Compound
	s := r.Campaign.Symbol()
	left := figure.Panel{X: figure.Auto("strain amplitude (%)", true), Y: figure.Auto("storage modulus "+s+"′ (MPa)", false)}
	right := figure.Panel{X: figure.Auto("strain amplitude (%)", true), Y: figure.Auto("loss modulus "+s+"″ (MPa)", false), Legend: figure.NoLegend}
	type key struct{ run, test string }
	var order []key
	groups := map[key][]fitting.Point{}
	for _, p := range r.Points {
		if p.Kind != "strain sweep" || !p.Used {
			continue
		}
		k := key{p.Run, p.Test}
		if groups[k] == nil {
			order = append(order, k)
		}
		groups[k] = append(groups[k], p)
	}
	colours := []figure.Colour{figure.Blue, figure.Green, figure.Vermillion, figure.Orange, figure.Black}
	for i, k := range order {
		pts := groups[k]
		col := colours[i%len(colours)]
		name := fmt.Sprintf("%s, %g Hz", degreesLabel(math.Round(float64(pts[0].Nominal)*10)/10), float64(pts[0].Frequency))
		g := figure.PickGlyph(i)
		xs, ys := xy(pts, pStrain, pStorage)
		left.Series = append(left.Series, figure.Series{Name: name, X: xs, Y: ys, Glyph: g, Colour: col})
		xs, ys = xy(pts, pStrain, pLoss)
		right.Series = append(right.Series, figure.Series{X: xs, Y: ys, Glyph: g, Colour: col})
		var st, lo band
		d := *c.Domain.Strain
		for _, gamma := range logSpace(d[0], d[1], 16) {
			m, err := c.Extrapolate(models.Condition{Frequency: float64(pts[0].Frequency), Temperature: float64(pts[0].Nominal) + zeroC, Strain: gamma / 100})
			if err != nil {
				continue
			}
			st.add(gamma, m.Storage/1e6, m.StorageU95/1e6)
			lo.add(gamma, m.Loss/1e6, m.LossU95/1e6)
		}
		dash := []figure.Dash{figure.Solid, figure.Dashed, figure.DashDot, figure.Dotted}[i%4]
		left.Series = append(left.Series, st.series(name, dash, col))
		right.Series = append(right.Series, lo.series("", dash, col))
	}
	return namedFigure{"strain-dependence", "Dependence on the strain amplitude (single amplitude) as measured, with the compound and its 95 % bands. Points and curves may differ by the factor of the specimen and the temperature offset of the run.", figure.Figure{Width: 170, Height: 72, Panels: []figure.Panel{left, right}}}
}

func temperatureFigure(r *fitting.Result) namedFigure {
	s := r.Campaign.Symbol()
	p := figure.Panel{X: figure.Auto("temperature T (°C)", false), Y: figure.Auto("storage and loss modulus (MPa)", true), Legend: figure.Outside}
	right := figure.Auto("loss factor tan δ", false)
	p.Right = &right
	f0 := r.Fixed[0].Frequency
	var st, lo, eta figure.Series
	st = figure.Series{Name: s + "′", Glyph: figure.PickGlyph(0), Colour: figure.Blue}
	lo = figure.Series{Name: s + "″", Glyph: figure.PickGlyph(1), Colour: figure.Vermillion}
	eta = figure.Series{Name: "tan δ (right)", Glyph: figure.PickGlyph(2), Colour: figure.Green, Right: true}
	for _, v := range r.Fixed {
		if v.Frequency != f0 {
			continue
		}
		T := float64(v.TemperatureC)
		st.X, st.Y, st.YError = append(st.X, T), append(st.Y, float64(v.Storage)), append(st.YError, float64(v.StorageU95))
		lo.X, lo.Y = append(lo.X, T), append(lo.Y, float64(v.Loss))
		eta.X, eta.Y, eta.YError = append(eta.X, T), append(eta.Y, float64(v.LossFactor)), append(eta.YError, float64(v.LossFactorU95))
	}
	p.Series = []figure.Series{st, lo, eta}
	if c := r.Compound; c != nil {
		var a, b, e band
		d := c.Domain.Temperature
		const n = 100
		for i := range n + 1 {
			T := d[0] + (d[1]-d[0])*float64(i)/n
			m, err := c.Modulus(models.Condition{Frequency: float64(f0), Temperature: T + zeroC, Strain: math.NaN()})
			if err != nil {
				continue
			}
			a.add(T, m.Storage/1e6, m.StorageU95/1e6)
			b.add(T, m.Loss/1e6, m.LossU95/1e6)
			e.add(T, m.LossFactor, m.LossFactorU95)
		}
		es := e.series("tan δ (right)", figure.DashDot, figure.Green)
		es.Right = true
		p.Series = append(p.Series, a.series(s+"′", figure.Solid, figure.Blue), b.series(s+"″", figure.Dashed, figure.Vermillion), es)
	}
	return namedFigure{"temperature-dependence", fmt.Sprintf("Temperature dependence at %.4g Hz: means of repeats with 95 %% intervals where there are repeats%s.", float64(f0), ifText(r.Compound != nil, "; curves: the compound with its 95 % band")), figure.Figure{Width: 160, Height: 90, Panels: []figure.Panel{p}}}
}

func ifText(yes bool, s string) string {
	if yes {
		return s
	}
	return ""
}

func relaxationPoints(r *fitting.Result) []fitting.Point {
	var out []fitting.Point
	for _, p := range r.Points {
		if p.Kind == "relaxation" && p.Used {
			out = append(out, p)
		}
	}
	return out
}

func relaxationFigure(r *fitting.Result, pts []fitting.Point) namedFigure {
	s := r.Campaign.Symbol()
	p := figure.Panel{X: figure.Auto("time t (s)", true), Y: figure.Auto("relaxation modulus "+s+"(t) (MPa)", true)}
	xs, ys := xy(pts, func(p fitting.Point) float64 { return float64(p.Time) }, pStorage)
	_, fs := xy(pts, func(p fitting.Point) float64 { return float64(p.Time) }, func(p fitting.Point) float64 { return float64(p.FittedStorage) })
	p.Series = []figure.Series{
		{Name: "measured", X: xs, Y: ys, Glyph: figure.PickGlyph(0), Colour: figure.Blue},
		{Name: "fitted", X: xs, Y: fs, Line: figure.Solid, Colour: figure.Black},
	}
	return namedFigure{"relaxation", "Relaxation modulus as measured and fitted, with the specimen's factor.", figure.Figure{Width: 120, Height: 68, Panels: []figure.Panel{p}}}
}
