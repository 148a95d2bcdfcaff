package waveform

import (
	"errors"
	"fmt"
	"math"

	"phaselag/data/place"
)

// Terms says what is fitted beside the fundamental. The zero value is the plain
// sine fit: fundamental and mean.
type Terms struct {
	// Harmonics is the highest harmonic fitted, 1 to 9. Zero: 1.
	Harmonics int
	// Trend is the degree of the polynomial in time removed together with the
	// sine, 0 (a mean), 1 or 2.
	Trend int
}

func (t Terms) layout(channels int, times bool) (layout, error) {
	h := t.Harmonics
	if h == 0 {
		h = 1
	}
	if h < 1 || h > 9 {
		return layout{}, fmt.Errorf("harmonics up to %d asked for, 1 to 9 are possible", t.Harmonics)
	}
	if t.Trend < 0 || t.Trend > 2 {
		return layout{}, fmt.Errorf("a trend of degree %d asked for, 0 to 2 are possible", t.Trend)
	}
	return layout{harmonics: h, trend: t.Trend, times: times, channels: channels}, nil
}

// Sine is the fit of one channel,
//
//	y = A cos ωt' + B sin ωt' + … = Amplitude cos(ωt' + Phase) + …,  t' = t - t0,
//
// where t0 is the first sample's time. The names with U are standard uncertainties.
type Sine struct {
	Frequency, UFrequency float64 // Hz; the uncertainty is 0 at a known frequency
	Channel
	Samples int // used: neither time nor value missing
	Passes  int // over the samples, 1 at a known frequency
}

// ErrFit is returned where the samples do not determine the sine.
var ErrFit = errors.New("the sine cannot be fitted")

// FitKnown fits a sine of known frequency, in Hz, to y at the times t, in seconds:
// the three-parameter fit. Samples with a NaN or an infinity are left out. The
// times may be uneven. The uncertainties are those of white noise with the residuals'
// variance.
func FitKnown(t, y []float64, frequency float64, terms Terms) (Sine, error) {
	return fitOne(t, y, frequency, terms, false)
}

// FitFree fits a sine of unknown frequency, starting from frequency (Hz), which
// must be right within about a third of a cycle over the record: the four-parameter
// fit.
func FitFree(t, y []float64, frequency float64, terms Terms) (Sine, error) {
	return fitOne(t, y, frequency, terms, true)
}

func fitOne(t, y []float64, frequency float64, terms Terms, free bool) (Sine, error) {
	if len(t) != len(y) {
		panic("waveform: times and values differ in number")
	}
	l, err := terms.layout(1, true)
	if err != nil {
		return Sine{}, err
	}
	if !(frequency > 0) || math.IsInf(frequency, 0) {
		return Sine{}, fmt.Errorf("the frequency %g Hz is not above zero", frequency)
	}
	ts, ys := make([]float64, 0, len(t)), make([]float64, 0, len(t))
	for i := range t {
		if finite(t[i]) && finite(y[i]) {
			ts, ys = append(ts, t[i]), append(ys, y[i])
		}
	}
	s := fitSamples(ts, [][]float64{ys}, l, 2*math.Pi*frequency, free)
	if s == nil {
		return Sine{}, &place.Error{Err: ErrFit, What: fmt.Sprintf("%d samples at %g Hz", len(ts), frequency),
			Hint: "give more samples than parameters over at least one cycle, and a start near the frequency"}
	}
	d := derivation{s: s, start: ts[0], gain: 1}
	return Sine{
		Frequency:  s.frame.omega / (2 * math.Pi),
		UFrequency: math.Sqrt(s.varK) / s.frame.scale / (2 * math.Pi),
		Channel:    d.channel(0),
		Samples:    s.n,
		Passes:     s.passes,
	}, nil
}

// fitSamples fits channels of equal length at the times t.
func fitSamples(t []float64, ys [][]float64, l layout, omega float64, free bool) *solution {
	if len(t) < l.base()+1 {
		return nil
	}
	first, last := bounds(t)
	f := frame{omega: omega, center: first/2 + last/2, scale: last/2 - first/2}
	if !(f.scale > 0) || math.IsInf(f.scale, 0) {
		return nil
	}
	a := newTriangle(l.columns())
	row := make([]float64, l.columns())
	return iterate(func(f frame) *triangle {
		a.reset()
		for i, v := range t {
			l.fill(row, f, v)
			for c := range ys {
				row[len(row)-l.channels+c] = ys[c][i]
			}
			a.add(row)
		}
		a.fold()
		return a
	}, l, f, free)
}

func bounds(t []float64) (first, last float64) {
	first, last = t[0], t[0]
	for _, v := range t {
		first, last = math.Min(first, v), math.Max(last, v)
	}
	return first, last
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }
