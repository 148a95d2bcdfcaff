package waveform

import (
	"math"
	"testing"
)

// BenchmarkSineFit fits the sine of one channel of a million samples, at a known
// frequency (three parameters) and at a free one (four), and checks amplitude and
// phase.
func BenchmarkSineFit(b *testing.B) {
	const n = 1_000_000
	t, y := make([]float64, n), make([]float64, n)
	for i := range t {
		t[i] = float64(i) / 1000
		y[i] = 1.5*math.Cos(2*math.Pi*7.3*t[i]) + 0.7*math.Sin(2*math.Pi*7.3*t[i]) + 0.25 + 1e-3*math.Sin(1e3*float64(i)*float64(i))
	}
	for name, fit := range map[string]func() (Sine, error){
		"three": func() (Sine, error) { return FitKnown(t, y, 7.3, Terms{}) },
		"four":  func() (Sine, error) { return FitFree(t, y, 7.3+1e-4, Terms{}) },
	} {
		b.Run(name, func(b *testing.B) {
			for b.Loop() {
				s, err := fit()
				if err != nil || math.Abs(s.Amplitude-math.Hypot(1.5, 0.7)) > 1e-4 || math.Abs(s.Phase+math.Atan2(0.7, 1.5)) > 1e-4 {
					b.Fatal(err, s)
				}
			}
			b.ReportMetric(n*float64(b.N)/b.Elapsed().Seconds()/1e6, "Msamples/s")
		})
	}
}
