package waveform

import (
	"math"
	"testing"
)

// change applies f to every sample of a record.
func change(r Record, f func(i int, t, force, disp *float64)) Record {
	for i := range r.Time {
		f(i, &r.Time[i], &r.Force[i], &r.Displacement[i])
	}
	return r
}

// Each record has one thing wrong with it; exactly that is doubted, and the loss
// angle stays where it should where the doubt does not say otherwise.
func TestDoubts(t *testing.T) {
	with := func(f func(*signal)) signal {
		s := usual()
		s.seconds = 6
		f(&s)
		return s
	}
	plain := with(func(*signal) {})
	clamp := func(at float64) func(int, *float64, *float64, *float64) {
		return func(_ int, _, f, _ *float64) { *f = math.Max(-at, math.Min(at, *f)) }
	}
	same := func(int, *float64, *float64, *float64) {}
	w := 2 * math.Pi * 7.31
	for _, c := range []struct {
		name   string
		s      signal
		change func(i int, t, force, disp *float64)
		set    Settings
		want   []Code
		off    float64 // of δ in standard uncertainties; -1: not tested
	}{
		{"sound", plain, same, Settings{}, nil, 5},
		{"slow sampling", with(func(s *signal) { s.f = 80 }), same, Settings{}, []Code{SlowSampling}, 5},
		{"two cycles", with(func(s *signal) { s.seconds = 0.28 }), same, Settings{Trend: NoTrend}, []Code{FewCycles}, 5},
		{"clipped", plain, clamp(45), Settings{}, []Code{Clipped}, -1},
		{"clipped a little, without noise", with(func(s *signal) { s.noiseF, s.noiseX = 0, 0 }), clamp(49), Settings{}, []Code{Clipped}, -1},
		{"coarse steps, not clipped", with(func(s *signal) { s.rate, s.noiseF = 5000, 0 }), func(_ int, _, f, _ *float64) { *f = math.Round(*f) }, Settings{}, nil, -1},
		{"fine steps, noise", with(func(s *signal) { s.rate = 5000 }), func(_ int, _, f, _ *float64) { *f = math.Round(*f*50) / 50 }, Settings{}, nil, 5},
		{"frequency rises by 0.1 Hz", plain, func(_ int, t, f, x *float64) {
			p := w**t + math.Pi*0.1/6**t**t
			*f, *x = 50*math.Cos(p+0.2), 1e-4*math.Cos(p)
		}, Settings{}, []Code{FrequencyDrifts}, -1},
		{"force falls by 3 %", plain, func(_ int, t, f, _ *float64) { *f *= 1 - 0.03**t/6 }, Settings{}, []Code{AmplitudeDrifts}, 5},
		{"times rounded", with(func(s *signal) { s.rate = 700 }), func(_ int, t, _, _ *float64) { *t = math.Round(*t*1000) / 1000 }, Settings{}, []Code{TimeUneven}, 5},
		{"one sample back", plain, func(i int, t, _, _ *float64) {
			if i == 1000 {
				*t -= 0.003
			}
		}, Settings{}, []Code{TimeBackward}, 5},
		{"NaN", plain, func(i int, t, f, x *float64) {
			switch {
			case i%100 == 3:
				*f = math.NaN()
			case i%100 == 33:
				*x = math.Inf(1)
			case i%100 == 73:
				*t = math.NaN()
			}
		}, Settings{}, []Code{SamplesMissing}, 5},
		{"gap", plain, func(i int, t, _, _ *float64) {
			if i > 1500 {
				*t += 17 / 7.31
			}
		}, Settings{}, []Code{SamplesMissing}, 5},
		{"onset", plain, func(_ int, t, f, x *float64) {
			k := 1 - 0.4*math.Exp(-*t/0.1)
			*f, *x = *f*k, *x*k
		}, Settings{}, []Code{TransientLeftOut}, 5},
		{"another frequency in the force", plain, func(_ int, t, f, _ *float64) { *f = 50 * math.Cos(2*math.Pi*9.4**t) }, Settings{}, []Code{FrequenciesDiffer, Noisy, BlocksScatter}, -1},
		{"another clock", plain, func(_ int, t, f, _ *float64) { *f = 50 * math.Cos(w*1.001**t+0.3) }, Settings{}, []Code{FrequenciesDiffer}, -1},
		{"not the nominal frequency", plain, same, Settings{Frequency: 7.3, Known: true}, []Code{FrequencyOffNominal, FrequencyDrifts}, -1},
		{"another motor beside", plain, func(_ int, t, f, _ *float64) { *f += 3 * math.Cos(2*math.Pi*7.9**t+1) }, Settings{}, []Code{BlocksScatter}, -1},
		{"noisy", with(func(s *signal) { s.noiseF = 60 }), same, Settings{}, []Code{Noisy}, 5},
		{"both distorted", with(func(s *signal) { s.third, s.noiseF, s.noiseX = 0.2, 0.01, 1e-8 }), func(_ int, t, _, x *float64) { *x += 2e-5 * math.Cos(3*w**t-1) }, Settings{}, []Code{LoopDiffers}, 5},
	} {
		rec := change(c.s.record(), c.change)
		r, err := Analyse(rec, &c.set)
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		got := codes(r)
		ok := len(got) <= len(c.want) && (len(got) > 0 || len(c.want) == 0)
		for _, w := range c.want[:min(1, len(c.want))] {
			ok = ok && has(r, w)
		}
		for _, d := range r.Doubts {
			known := false
			for _, w := range c.want {
				known = known || w == d.Code
			}
			ok = ok && known && d.Evidence != "" && d.Cause != "" && d.Remedy != "" && finite(d.Value)
		}
		if !ok {
			t.Errorf("%s: %+v, want %v", c.name, r.Doubts, c.want)
		}
		if off := math.Abs(r.LossAngle-0.2) / r.ULossAngle; c.off > 0 && off > c.off {
			t.Errorf("%s: δ = %g ± %g", c.name, r.LossAngle, r.ULossAngle)
		}
		if n := r.Counts; n.Given != len(rec.Time) || n.Given != n.Missing+n.Backward+n.LeftOut+n.Used {
			t.Errorf("%s: the counts do not add up: %+v", c.name, n)
		}
		for _, d := range r.Doubts {
			t.Logf("%s: %s %s: %s", c.name, d.Severity, d.Code, d.Evidence)
		}
	}
}

// A record that begins at rest, longer than the buffer.
func TestRestBeforeMotion(t *testing.T) {
	s := usual()
	s.seconds = 60
	rec := change(s.record(), func(i int, t, f, x *float64) {
		if *t < 20 {
			clean, still := s.at(*t)
			*f, *x = *f-clean, *x-still
		}
	})
	a := analyser(t, &Settings{Buffer: 2048})
	a.AddBlock(rec)
	r := one(t, a)
	if !has(r, RestLeftOut) || r.Start < 20-0.01 || r.Start > 24.5 || math.Abs(r.LossAngle-0.2) > 5*r.ULossAngle {
		t.Errorf("start %g, δ %g ± %g, %+v", r.Start, r.LossAngle, r.ULossAngle, r.Doubts)
	}
}
