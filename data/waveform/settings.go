package waveform

import (
	"fmt"
	"math"
)

// Trend is the polynomial in time that is removed together with the sine, so that
// a drifting mean biases nothing.
type Trend int

// The trends.
const (
	DefaultTrend   Trend = iota // LinearTrend
	NoTrend                     // a mean only, as in the plain sine fit
	LinearTrend                 // a mean that creeps at a constant rate
	QuadraticTrend              // a mean that creeps at a changing rate
)

func (t Trend) degree() int {
	switch t {
	case NoTrend:
		return 0
	case QuadraticTrend:
		return 2
	}
	return 1
}

// Settings say how records are analysed. Nil and the zero value work.
type Settings struct {
	// Frequency is the nominal frequency in Hz. Zero: not known, it is searched
	// for from one cycle a record to four samples a cycle; otherwise within 20 %
	// of it. An Analyser uses it for every segment.
	Frequency float64
	// Known holds the frequency at Frequency: the three-parameter fit. Without it
	// the frequency is fitted: the four-parameter fit.
	Known bool
	// Trend of the mean. Zero: linear.
	Trend Trend
	// Harmonics is the highest harmonic fitted, 1 to 9; fewer are fitted where a
	// cycle has fewer than 2.5 samples for each. Zero: 5.
	Harmonics int
	// LeaveOut is the number of leading cycles to leave out as the transient.
	// Zero: the leading cycles that differ from the later ones, at most a third.
	// Negative: none.
	LeaveOut int
	// Buffer is the number of samples an Analyser holds of a segment before it
	// fixes the frequency of its columns, at least 2048. Zero: 65536. A segment
	// that is not longer is fitted exactly as Analyse does it.
	Buffer int
	// Detect lets an Analyser begin a new segment where frequency or amplitude of
	// the displacement change, see [Splitter]. Without it segments are those of
	// the step given with the samples.
	Detect bool
	// Change is the relative change of frequency or amplitude that makes a new
	// segment. Zero: 0.05.
	Change float64
}

const (
	defaultBuffer    = 1 << 16
	leastBuffer      = 1 << 11
	defaultHarmonics = 5
	defaultChange    = 0.05
)

// filled returns a copy with the defaults written in, or what is wrong.
func (s *Settings) filled() (Settings, error) {
	var c Settings
	if s != nil {
		c = *s
	}
	if c.Harmonics == 0 {
		c.Harmonics = defaultHarmonics
	}
	if c.Buffer == 0 {
		c.Buffer = defaultBuffer
	}
	if c.Change == 0 {
		c.Change = defaultChange
	}
	switch {
	case !(c.Frequency >= 0) || math.IsInf(c.Frequency, 0):
		return c, fmt.Errorf("the nominal frequency %g Hz is not above zero", c.Frequency)
	case c.Known && c.Frequency == 0:
		return c, fmt.Errorf("the frequency is said to be known, but is not given")
	case c.Trend < DefaultTrend || c.Trend > QuadraticTrend:
		return c, fmt.Errorf("unknown trend %d", c.Trend)
	case c.Harmonics < 1 || c.Harmonics > 9:
		return c, fmt.Errorf("harmonics up to %d asked for, 1 to 9 are possible", c.Harmonics)
	case c.Buffer < leastBuffer:
		return c, fmt.Errorf("a buffer of %d samples is too small, %d is the least", c.Buffer, leastBuffer)
	case !(c.Change > 0 && c.Change < 1):
		return c, fmt.Errorf("a change of %g is not between 0 and 1", c.Change)
	}
	return c, nil
}

// layout for a record with so many samples, and samples a cycle.
func (s *Settings) layout(samples int, perCycle float64) layout {
	l := layout{harmonics: s.Harmonics, trend: s.Trend.degree(), times: true, channels: 2}
	for l.harmonics > 1 && (2.5*float64(l.harmonics) > perCycle || 2*l.base() > samples) {
		l.harmonics--
	}
	return l
}
