// Package figuretest makes figures and a document of realistic size and
// content for the tests of the renderers. Every number in them is invented:
// they come from closed forms with a deterministic ripple for noise.
package figuretest

import (
	"fmt"
	"math"
	"math/cmplx"

	"phaselag/reports/figure"
)

// Temperatures are those of the invented isotherms, °C.
var Temperatures = []float64{-40, -30, -20, -10, 0, 10, 20, 30, 40, 50, 60, 70, 80}

const reference = 20.0

// logShift is an invented WLF law.
func logShift(t float64) float64 { return -6.0 * (t - reference) / (120 + t - reference) }

// modulus is an invented compound, MPa, at a reduced frequency in Hz.
func modulus(f float64) complex128 {
	s := cmplx.Pow(complex(0, 2*math.Pi*f*1e-7), 0.62)
	return 0.7 + 900*s/(1+s) + complex(0.12*math.Pow(f, 0.03), 0.05)
}

func ripple(i, j int) float64 { return 1 + 0.012*math.Sin(float64(7*i*i+13*j+3*i*j)) }

// Isotherms returns storage modulus and loss factor of 13 isotherms.
func Isotherms() figure.Figure {
	g := figure.Panel{Title: "Storage modulus", X: figure.Auto("frequency f (Hz)", true), Y: figure.Auto("storage modulus G′ (MPa)", true), Legend: figure.NoLegend}
	d := figure.Panel{Title: "Loss factor", X: figure.Auto("frequency f (Hz)", true), Y: figure.Auto("loss factor tan δ (–)", true)}
	for i, t := range Temperatures {
		var f, s, l []float64
		for j := range 21 {
			x := 0.5 * math.Pow(10, float64(j)/10)
			m := modulus(x * math.Pow(10, logShift(t)))
			f = append(f, x)
			s = append(s, real(m)*ripple(i, j))
			l = append(l, imag(m)/real(m)*ripple(j, i))
		}
		one := figure.Series{Name: fmt.Sprintf("%.0f °C", t), X: f, Y: s, Line: figure.Solid, Width: 0.5, Glyph: figure.PickGlyph(i), Colour: figure.Ramp(i, len(Temperatures)), Size: 1.2}
		if t < 0 {
			one.Name = fmt.Sprintf("−%.0f °C", -t)
		}
		g.Series = append(g.Series, one)
		one.Y = l
		d.Series = append(d.Series, one)
	}
	return figure.Figure{Width: 170, Height: 80, Shared: true, Panels: []figure.Panel{g, d},
		Alt: "storage modulus and loss factor of 13 isotherms from −40 to 80 °C against frequency"}
}

// MasterCurve returns moduli over twelve decades with bands, and the loss
// factor on a second axis.
func MasterCurve() figure.Figure {
	p := figure.Panel{
		X:     figure.Auto("reduced frequency f·a_{T} (Hz)", true),
		Y:     figure.Auto("storage and loss modulus G′, G″ (MPa)", true),
		Notes: []string{"T_{ref} = 20 °C, strain amplitude 0.2 %", "bands: 95 % intervals"},
	}
	right := figure.Auto("loss factor tan δ (–)", false)
	p.Right = &right
	var f, s, sl, sh, l, ll, lh, d []float64
	for i := range 121 {
		x := math.Pow(10, -4+float64(i)/10)
		m := modulus(x)
		u := 0.03 + 0.2*math.Pow((float64(i)-60)/60, 4)
		f, s, l = append(f, x), append(s, real(m)), append(l, imag(m))
		sl, sh = append(sl, real(m)*(1-u)), append(sh, real(m)*(1+u))
		ll, lh = append(ll, imag(m)*(1-1.5*u)), append(lh, imag(m)*(1+1.5*u))
		d = append(d, imag(m)/real(m))
	}
	p.Series = []figure.Series{
		{Name: "G′, fit and 95 % band", X: f, Y: s, Low: sl, High: sh, Line: figure.Solid, Colour: figure.Blue},
		{Name: "G″, fit and 95 % band", X: f, Y: l, Low: ll, High: lh, Line: figure.Dashed, Colour: figure.Vermillion},
		{Name: "tan δ (right)", X: f, Y: d, Line: figure.DashDot, Colour: figure.Green, Right: true},
	}
	for i, t := range Temperatures {
		if i%3 != 0 {
			continue
		}
		var x, y, z []float64
		for j := 0; j < 21; j += 2 {
			r := 0.5 * math.Pow(10, float64(j)/10+logShift(t))
			x, y, z = append(x, r), append(y, real(modulus(r))*ripple(i, j)), append(z, imag(modulus(r))*ripple(j, i))
		}
		p.Series = append(p.Series,
			figure.Series{X: x, Y: y, Glyph: figure.PickGlyph(i / 3), Colour: figure.Blue},
			figure.Series{X: x, Y: z, Glyph: figure.PickGlyph(i / 3), Colour: figure.Vermillion, Hollow: true})
	}
	return figure.Figure{Width: 170, Height: 95, Panels: []figure.Panel{p},
		Alt: "master curve of storage modulus, loss modulus and loss factor over twelve decades of reduced frequency"}
}

// ShiftFactors returns factors with error bars and their law.
func ShiftFactors() figure.Figure {
	p := figure.Panel{X: figure.Auto("temperature T (°C)", false), Y: figure.Auto("shift factor log_{10} a_{T} (–)", false),
		Lines: []figure.Reference{{Vertical: true, At: reference, Label: "T_{ref}"}, {At: 0, Colour: figure.Grey, Line: figure.Dotted}}}
	var t, y, e, lt, ly []float64
	for i, x := range Temperatures {
		t, y, e = append(t, x), append(y, logShift(x)+0.3*(ripple(i, 2*i)-1)), append(e, 0.02+0.002*math.Abs(x-reference))
	}
	for x := -42.0; x <= 82; x++ {
		lt, ly = append(lt, x), append(ly, logShift(x))
	}
	p.Series = []figure.Series{
		{Name: "fitted factors, 95 %", X: t, Y: y, YError: e, Glyph: figure.Circle, Colour: figure.Blue},
		{Name: "WLF, C_{1} = 6.0, C_{2} = 120 K", X: lt, Y: ly, Line: figure.Solid, Colour: figure.Vermillion},
	}
	return figure.Figure{Width: 82, Height: 70, Panels: []figure.Panel{p}, Alt: "shift factors against temperature with the WLF law"}
}

// Wicket returns the loss factor against the magnitude of the modulus.
func Wicket() figure.Figure {
	f := Isotherms()
	g, d := f.Panels[0], f.Panels[1]
	p := figure.Panel{X: figure.Auto("magnitude |G*| (MPa)", true), Y: figure.Auto("loss factor tan δ (–)", true)}
	for i, s := range g.Series {
		x := make([]float64, len(s.Y))
		for j := range x {
			x[j] = s.Y[j] * math.Hypot(1, d.Series[i].Y[j])
		}
		s.X, s.Y, s.Line = x, d.Series[i].Y, figure.NoLine
		p.Series = append(p.Series, s)
	}
	return figure.Figure{Width: 120, Height: 80, Panels: []figure.Panel{p}, Alt: "wicket plot: loss factor against magnitude of the modulus"}
}

// StrainSweep returns moduli against strain amplitude at two frequencies.
func StrainSweep() figure.Figure {
	p := figure.Panel{Title: "23 °C", X: figure.Auto("shear strain amplitude γ (%)", true), Y: figure.Auto("storage modulus G′ (MPa)", false)}
	q := figure.Panel{Title: "23 °C", X: p.X, Y: figure.Auto("loss factor tan δ (–)", false)}
	for i, f := range []string{"1 Hz", "10 Hz"} {
		var x, s, d, sl, sh []float64
		for j := range 15 {
			g := 0.05 * math.Pow(10, float64(j)/5.2)
			r := math.Pow(g/1.4, 1.1)
			k := 0.9 + 0.05*float64(i) + 1.1/(1+r)
			x, s = append(x, g), append(s, k*ripple(i, j))
			sl, sh = append(sl, 0.97*k), append(sh, 1.03*k)
			d = append(d, (0.08+0.36*math.Sqrt(r)/(1+r))/k*ripple(j, i))
		}
		name := f
		p.Series = append(p.Series, figure.Series{Name: name, X: x, Y: s, Low: sl, High: sh, Line: figure.Dash(i + 1), Glyph: figure.PickGlyph(i), Colour: figure.Pick(i)})
		q.Series = append(q.Series, figure.Series{Name: name, X: x, Y: d, Line: figure.Dash(i + 1), Glyph: figure.PickGlyph(i), Colour: figure.Pick(i)})
	}
	return figure.Figure{Width: 170, Height: 70, Panels: []figure.Panel{p, q}, Alt: "storage modulus and loss factor against strain amplitude"}
}

// All returns every figure with a short name.
func All() []struct {
	Name   string
	Figure figure.Figure
} {
	return []struct {
		Name   string
		Figure figure.Figure
	}{
		{"isotherms", Isotherms()}, {"master-curve", MasterCurve()}, {"shift-factors", ShiftFactors()},
		{"wicket", Wicket()}, {"strain-sweep", StrainSweep()}, {"empty", figure.Figure{Width: 80, Height: 60}},
	}
}
