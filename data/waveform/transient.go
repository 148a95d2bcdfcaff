package waveform

import (
	"math"
	"slices"
)

// Problem: which leading cycles belong to the onset of the motion?
//
// The first maxOnset cycles are fitted one by one (more than one together where a
// cycle has few samples), at the frequency of the whole, and give |x|, |F| and K.
// Of each the median and the scatter 1.4826 MAD of the last two thirds is taken.
// A leading cycle is left out as long as one of the three is further from its
// median than five scatters, six standard uncertainties and 0.5 %. Where more than
// a third would go, the record changes throughout: nothing is left out, and the
// doubt says how many differ.

const maxOnset = 60

// onset is what the cycles say.
type onset struct {
	cycles   int     // leading cycles that differ
	compared int     // cycles looked at
	end      float64 // s, where the leading cycles end
	worst    float64 // largest relative departure among them
	channel  string
}

func findOnset(t, force, displacement []float64, omega float64, l layout, perCycle float64) onset {
	l.times, l.harmonics, l.trend = false, min(l.harmonics, 3), min(l.trend, 1)
	period := 2 * math.Pi / omega
	group := 1
	for float64(group)*perCycle < float64(2*l.base()+2) {
		group++
	}
	span := float64(group) * period
	a := newTriangle(l.columns())
	row := make([]float64, l.columns())
	var size [3][]complex128 // x, F, K
	var own [3][]float64     // relative uncertainties
	for i := 0; len(size[0]) < maxOnset; {
		lo := t[0] + float64(len(size[0]))*span
		f := frame{omega: omega, center: lo + span/2, scale: span / 2}
		a.reset()
		for i < len(t) && t[i] < lo+span {
			l.fill(row, f, t[i])
			row[len(row)-2], row[len(row)-1] = force[i], displacement[i]
			a.add(row)
			i++
		}
		a.fold()
		if i == len(t) && t[i-1] < lo+span-1.5*period/perCycle {
			break // the last one is not complete
		}
		s := solve(a, l, f, false, nil)
		if s == nil {
			break // a gap: what follows cannot tell
		}
		d := derivation{s: s}
		F, x := d.phasor(0, 1), d.phasor(1, 1)
		aF, uF := d.amplitude(0, 1)
		ax, ux := d.amplitude(1, 1)
		size[0], own[0] = append(size[0], complex(ax, 0)), append(own[0], ux/ax)
		size[1], own[1] = append(size[1], complex(aF, 0)), append(own[1], uF/aF)
		size[2], own[2] = append(size[2], F/x), append(own[2], math.Hypot(ux/ax, uF/aF))
	}
	n := len(size[0])
	o := onset{compared: n * group}
	if n < 6 {
		return o
	}
	lead := 0
	for q, name := range []string{"displacement", "force", ""} {
		rest := size[q][n/3:]
		m := complex(median(rest, func(z complex128) float64 { return real(z) }), median(rest, func(z complex128) float64 { return imag(z) }))
		off := func(z complex128) float64 { return math.Hypot(real(z-m), imag(z-m)) / math.Hypot(real(m), imag(m)) }
		limit := math.Max(5*1.4826*median(rest, off), 0.005)
		k := 0
		for k < n && off(size[q][k]) > math.Max(limit, 6*own[q][k]) {
			if k == 0 && off(size[q][0]) > o.worst {
				o.worst, o.channel = off(size[q][0]), name
			}
			k++
		}
		lead = max(lead, k)
	}
	o.cycles = lead * group
	o.end = t[0] + float64(lead)*span
	return o
}

// restBefore returns how many samples lie before the first cycle in which the
// displacement has half of its largest amplitude, if the first cycle has less than
// a tenth of it; otherwise 0. The second largest amplitude counts, for the largest
// may be a jerk.
func restBefore(t, x []float64, omega float64) int {
	period := 2 * math.Pi / omega
	var sizes []float64
	var starts []int
	for i := 0; i < len(t); {
		end := t[i] + period
		k := i
		m := 0.0
		for k < len(t) && t[k] < end {
			m += x[k]
			k++
		}
		m /= float64(k - i)
		var c, s float64
		for j := i; j < k; j++ {
			sin, cos := math.Sincos(omega * (t[j] - t[i]))
			c += (x[j] - m) * cos
			s += (x[j] - m) * sin
		}
		sizes, starts = append(sizes, math.Hypot(c, s)/float64(k-i)), append(starts, i)
		i = k
	}
	sorted := slices.Clone(sizes)
	slices.Sort(sorted)
	if len(sorted) < 3 {
		return 0
	}
	large := sorted[len(sorted)-2]
	if !(sizes[0] < 0.1*large) {
		return 0
	}
	for i, a := range sizes {
		if a > large/2 {
			return starts[i]
		}
	}
	return 0
}

func median[T any](x []T, of func(T) float64) float64 {
	v := make([]float64, len(x))
	for i := range x {
		v[i] = of(x[i])
	}
	slices.Sort(v)
	return (v[(len(v)-1)/2] + v[len(v)/2]) / 2
}
