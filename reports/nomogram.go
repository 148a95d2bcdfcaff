package reports

import (
	"fmt"
	"math"

	"phaselag/models"
	"phaselag/reports/figure"
)

// The reduced-frequency nomogram (ISO 10112): modulus and loss factor at the reference
// temperature against f_R = f·a_T on the left axis, the frequency f on the right one,
// and for each temperature the line
//
//	log f_R = log f + log a_T(T).
//
// A frequency is found at the right, its level followed to the line of the
// temperature, and the curves are read above or below that point.
//
// The reading is exact where all of the modulus shifts. The filler's part does not,
// and the vertical shift moves the modulus up or down, so the caption says by how much
// the reading then misses the compound at worst.

// nomogram draws the compound's nomogram; ok is false where it has no shift.
func nomogram(c *models.Compound) (out namedFigure, ok bool) {
	d := c.Domain
	if d.Temperature[0] == d.Temperature[1] || len(c.Shift.Factors) < 2 && c.Shift.Law == models.LawNone {
		return out, false
	}
	shift := func(T float64) float64 { return c.LogShift(T + zeroC) }
	cold, warm := shift(d.Temperature[0]), shift(d.Temperature[1])
	if !(cold > warm) || math.IsInf(cold, 0) {
		return out, false
	}
	// The frequencies of the tests follow from the domain; 1 to 100 Hz are always there.
	down := func(l float64) float64 { return math.Floor(l + 1e-6) }
	up := func(l float64) float64 { return math.Ceil(l - 1e-6) }
	lo, hi := math.Log10(d.ReducedFrequency[0]), math.Log10(d.ReducedFrequency[1])
	f0, f1 := down(math.Min(0, lo-warm)), up(math.Max(2, hi-cold))
	x0, x1 := math.Min(lo, f0+warm)-0.4, math.Max(hi, f1+cold)+0.4
	// The label of a decade at the right end would touch those of the frequency axis.
	if mm := 135 / (x1 - x0); (x1-math.Floor(x1))*mm < 4 {
		x1 = math.Floor(x1) + 4/mm
	}
	ten := func(l float64) float64 { return math.Pow(10, l) }

	s := symbol(c)
	p := figure.Panel{
		X:      figure.Axis{Label: fmt.Sprintf("reduced frequency f·a_{T} (Hz), T_{ref} = %s", degreesLabel(c.ReferenceTempC)), Log: true, Min: ten(x0), Max: ten(x1)},
		Y:      figure.Auto("storage modulus "+s+"′ (MPa), loss factor tan δ", true),
		Right:  &figure.Axis{Label: "frequency f (Hz)", Log: true, Min: ten(f0), Max: ten(f1)},
		Top:    &figure.Top{Label: "temperature T (°C)"},
		Legend: figure.NoLegend,
	}
	const line = figure.Colour(0x5A5A5A)
	lines := roundTemperatures(d.Temperature)
	for _, T := range lines {
		a := shift(T)
		width := 0.35
		if math.Mod(T, 20) == 0 {
			width = 0.6
		}
		add := func(from, to float64, dash figure.Dash) {
			if to > from {
				p.Series = append(p.Series, figure.Series{X: []float64{ten(from + a), ten(to + a)}, Y: []float64{ten(from), ten(to)}, Right: true, Line: dash, Width: width, Colour: line})
			}
		}
		from, to := math.Max(f0, math.Min(f1, lo-a)), math.Max(f0, math.Min(f1, hi-a))
		add(f0, from, figure.Dotted)
		add(from, to, figure.Solid)
		add(to, f1, figure.Dotted)
	}
	// Labels by rank: every 20 K, then the others.
	for rank := range 2 {
		for _, T := range lines {
			if (math.Mod(T, 20) == 0) == (rank == 0) {
				p.Top.At, p.Top.Text = append(p.Top.At, ten(f1+shift(T))), append(p.Top.Text, minusSign(fmt.Sprintf("%g", T)))
			}
		}
	}
	var st, eta band
	for _, f := range logSpace(d.ReducedFrequency[0], d.ReducedFrequency[1], curveDecade) {
		m, err := c.Extrapolate(models.Condition{Frequency: f, Temperature: c.ReferenceTempC + zeroC, Strain: math.NaN()})
		if err != nil {
			continue
		}
		st.add(f, m.Storage/1e6, m.StorageU95/1e6)
		eta.add(f, m.LossFactor, m.LossFactorU95)
	}
	a, b := st.series("", figure.Solid, figure.Blue), eta.series("", figure.Dashed, figure.Vermillion)
	a.Mark, b.Mark, a.Width, b.Width = s+"′", "tan δ", 1.5, 1.5
	p.Series = append(p.Series, a, b)

	caption := fmt.Sprintf("Reduced-frequency nomogram (ISO 10112): find the frequency at the right, go left to the line of the temperature (dotted: outside the domain), and read the curves above or below at the left axis; bands: 95 %%.%s", ownStrainText(c))
	if g, t := nomogramMiss(c, lines); g > 0.005 || t > 0.002 {
		caption += fmt.Sprintf(" What does not shift with temperature is not in it: the reading misses the compound by up to %.2g %% in %s′ and %.2g in tan δ; the compound file answers rightly.", 100*g, s, t)
	}
	return namedFigure{"nomogram", caption, figure.Figure{Width: 170, Height: 115, Panels: []figure.Panel{p},
		Alt: fmt.Sprintf("nomogram of storage modulus and loss factor against reduced frequency, with lines of equal temperature from %g to %g °C", lines[0], lines[len(lines)-1])}}, true
}

// ownStrainText says in a caption at which strain amplitude curves hold.
func ownStrainText(c *models.Compound) string {
	if own := float64(c.Domain.OwnStrain); !math.IsNaN(own) {
		return fmt.Sprintf(" Strain amplitude %.3g %%.", own)
	}
	return ""
}

// roundTemperatures are the tens of °C in a range, every second, fifth … of them where
// there are more than 16; the ends of the range where there are fewer than two.
func roundTemperatures(r models.Range) []float64 {
	for _, step := range []float64{5, 10, 20, 50, 100} {
		var out []float64
		for k := math.Ceil(r[0]/step - 1e-9); k*step <= r[1]+1e-9; k++ {
			out = append(out, k*step)
		}
		if step == 5 && r[1]-r[0] > 40 || len(out) > 16 {
			continue
		}
		if len(out) < 2 {
			break
		}
		return out
	}
	return []float64{r[0], r[1]}
}

// nomogramMiss is the largest difference between the compound and its value at the
// reference temperature and the reduced frequency, inside the domain: of the storage
// modulus as a share, of the loss factor itself.
func nomogramMiss(c *models.Compound, temperatures []float64) (storage, lossFactor float64) {
	d := c.Domain.ReducedFrequency
	for _, fr := range logSpace(d[0], d[1], 3) {
		ref := c.Value(models.Condition{Frequency: fr, Temperature: c.ReferenceTempC + zeroC, Strain: math.NaN()})
		for _, T := range temperatures {
			q := models.Condition{Frequency: fr / math.Pow(10, c.LogShift(T+zeroC)), Temperature: T + zeroC, Strain: math.NaN()}
			// Only frequencies that the axis shows can be misread.
			if q.Frequency < 0.1 || q.Frequency > 1000 || c.Inside(q) != nil {
				continue
			}
			g := c.Value(q)
			storage = math.Max(storage, math.Abs(real(ref)/real(g)-1))
			lossFactor = math.Max(lossFactor, math.Abs(imag(ref)/real(ref)-imag(g)/real(g)))
		}
	}
	return storage, lossFactor
}
