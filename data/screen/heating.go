package screen

import (
	"fmt"
	"math"
	"slices"

	"phaselag/data"
)

// selfHeating finds runs that warm their specimen by their own loss. The dissipated
// power in a volume is
//
//	q = πfγ²G”
//
// and the measured temperature rises with it, T = T0 + R·q. The finding needs a
// correlation of T with q above 0.8, R six times its standard deviation, a rise of
// more than 0.5 K at the largest q, and less left of the scatter than a plain drift
// with time (T over the number of the row) leaves. Where the temperature in the
// specimen is not measured, the heat that it cannot lose says what must be feared: a
// layer of thickness h between metal plates of constant temperature, in which q is
// produced everywhere, is warmer in the mean by
//
//	ΔT = q·h²/(12λ),     λ = 0.2 W/(m·K)
//
// in the steady state (derived; λ of rubber from memory), which a step of few cycles
// does not reach: its time is h²/(π²·0.1 mm²/s), 25 s at 5 mm. More than 5 K is a note, in
// the runs in which no rise is measured. Beyond 2 K of measured rise the finding is
// severe.
const conductivity = 0.2

func selfHeating(c *data.Campaign) (list []data.Finding) {
	const least, severe, feared = 0.5, 2.0, 5.0
	for _, t := range c.Tests {
		if !oscillatory(t.Kind) || t.Kind == data.TemperatureSweep {
			continue
		}
		var warm, expected []data.Point
		var worst data.Finding
		rise, fear := 0.0, 0.0
		for _, r := range continued(t) {
			points := used(r)
			var q, kelvin, k []float64
			for i, p := range points {
				if p.Strain > 0 && p.Loss > 0 {
					q, kelvin, k = append(q, power(p)), append(kelvin, p.Temperature), append(k, float64(i))
				}
			}
			if up, u, ok := heated(q, kelvin, k); ok && up > least {
				warm = append(warm, points...)
				if up > rise {
					rise = up
					worst.Evidence = fmt.Sprintf("%s: the temperature rises with the dissipated power πfγ²%s'', by %.2g K (± %.1g K) at %.3g kW/m³", r.Name, symbol(c), up, 2*u, largest(q)/1000)
				}
				continue
			}
			for _, p := range points {
				if h := thickness(c, t); p.Strain > 0 && power(p)*h*h/(12*conductivity) > feared {
					expected = append(expected, p)
					fear = math.Max(fear, power(p)*h*h/(12*conductivity))
				}
			}
		}
		if len(warm) > 0 {
			f := data.Finding{
				Code: "self-heating", Severity: data.Doubt, Test: t.Name, Rows: data.Places(warm),
				Evidence: worst.Evidence,
				Cause:    "the specimen's own loss warms it faster than it can lose the heat",
				Remedy:   "rest between the steps, take fewer cycles, thinner layers, or give the temperature that was measured in the specimen for every row",
			}
			if rise > severe {
				f.Severity = data.Severe
			}
			list = append(list, f)
		}
		if len(expected) > 0 {
			list = append(list, data.Finding{
				Code: "self-heating-expected", Severity: data.Note, Test: t.Name, Rows: data.Places(expected),
				Evidence: fmt.Sprintf("the dissipated power of these rows would warm specimen %s by %.2g K in the mean if held; the table shows no rise", t.Specimen, fear),
				Cause:    "large strains at these frequencies; the table's temperature is probably the chamber's",
				Remedy:   "keep these steps short, rest between them, and repeat a small strain at the end",
			})
		}
	}
	return list
}

// continued returns a test's runs, those drawn together that a jump of temperature alone
// parted: what is swept goes on in the same direction by at most two of its usual
// steps, and the temperature is less than 10 K off.
func continued(t data.Test) (runs []data.Run) {
	for _, r := range t.Runs {
		points := used(r)
		if n := len(runs) - 1; n >= 0 && len(points) > 0 {
			before := runs[n].Points
			if k := len(before); k >= 3 {
				last := before[k-1]
				var steps []float64
				for i := 1; i < k; i++ {
					steps = append(steps, abscissa(t.Kind, before[i])-abscissa(t.Kind, before[i-1]))
				}
				usual, next := median(steps), abscissa(t.Kind, points[0])-abscissa(t.Kind, last)
				onward := usual != 0 && next/usual > 0 && next/usual <= 2
				if onward && math.Abs(points[0].Temperature-last.Temperature) < 10 && (t.Kind == data.FrequencySweep || alike(points[0].Frequency, last.Frequency, 0.01)) {
					runs[n].Points = append(slices.Clone(before), points...)
					continue
				}
			}
		}
		r.Points = points
		runs = append(runs, r)
	}
	return runs
}

// power returns the power that is dissipated in a volume, W/m³.
func power(p data.Point) float64 { return math.Pi * p.Frequency * p.Strain * p.Strain * p.Loss }

func largest(x []float64) float64 {
	top := math.Inf(-1)
	for _, v := range x {
		top = math.Max(top, v)
	}
	return top
}

// heated returns the rise of temperature at the largest power and its standard
// deviation.
func heated(q, kelvin, k []float64) (rise, u float64, ok bool) {
	n := len(q)
	if n < 6 || !(span(kelvin) > 0.3) || !(span(q) > 0) {
		return 0, 0, false
	}
	hot, fits := regress(kelvin, ones(n), q)
	drift, also := regress(kelvin, ones(n), k)
	if !fits || !also {
		return 0, 0, false
	}
	total := 0.0
	middle := mean(kelvin)
	for _, v := range kelvin {
		total += (v - middle) * (v - middle)
	}
	explained := 1 - hot.scatter*hot.scatter*float64(hot.freedom)/total
	if explained < 0.8*0.8 || hot.b[1] < 6*hot.u[1] || hot.scatter > drift.scatter {
		return 0, 0, false
	}
	top := largest(q)
	return hot.b[1] * top, hot.u[1] * top, true
}

// thickness returns the thickness of a test's rubber layer between metal in m, 0 where
// it is not known or the piece is no such layer.
func thickness(c *data.Campaign, t data.Test) float64 {
	for _, s := range c.Specimens {
		if s.Name != t.Specimen || !(s.Thickness > 0) {
			continue
		}
		switch s.Shape {
		case "single shear", "double shear", "quadruple shear", "bonded compression", "parallel plates":
			return s.Thickness
		}
	}
	return 0
}
