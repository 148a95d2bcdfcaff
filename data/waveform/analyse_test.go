package waveform

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"
)

// signal makes records of an invented specimen.
type signal struct {
	rate, f, seconds     float64
	force, delta         float64
	disp                 float64
	noiseF, noiseX, corr float64
	third                float64 // of the force
	mean, slope          float64 // of the force
	start                float64
	seed                 uint64
}

func usual() signal {
	return signal{rate: 500, f: 7.31, seconds: 2, force: 50, delta: 0.2, disp: 1e-4, noiseF: 0.5, noiseX: 1e-6, seed: 1}
}

func (s signal) at(t float64) (force, disp float64) {
	w := 2 * math.Pi * s.f * t
	return s.force*math.Cos(w+0.3+s.delta) + s.third*s.force*math.Cos(3*w+0.1) + s.mean + s.slope*t, s.disp * math.Cos(w+0.3)
}

func (s signal) each(visit func(t, force, disp float64)) {
	r := rand.New(rand.NewPCG(s.seed, 7))
	for k := range int(math.Round(s.rate * s.seconds)) {
		t := s.start + float64(k)/s.rate
		f, x := s.at(t)
		a, b := r.NormFloat64(), r.NormFloat64()
		visit(t, f+s.noiseF*a, x+s.noiseX*(s.corr*a+math.Sqrt(1-s.corr*s.corr)*b))
	}
}

func (s signal) record() Record {
	var r Record
	s.each(func(t, f, x float64) {
		r.Time, r.Force, r.Displacement = append(r.Time, t), append(r.Force, f), append(r.Displacement, x)
	})
	return r
}

// Without noise everything comes out as put in: closed forms.
func TestAnalyseExact(t *testing.T) {
	s := usual()
	s.noiseF, s.noiseX, s.third, s.mean, s.slope = 0, 0, 0.03, 400, 12
	r, err := Analyse(s.record(), nil)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name      string
		got, want float64
	}{
		{"frequency", r.Frequency, 7.31},
		{"force", r.Force.Amplitude, 50},
		{"displacement", r.Displacement.Amplitude, 1e-4},
		{"phase", r.Displacement.Phase, 0.3},
		{"loss angle", r.LossAngle, 0.2},
		{"storage", real(r.Stiffness), 5e5 * math.Cos(0.2)},
		{"loss", imag(r.Stiffness), 5e5 * math.Sin(0.2)},
		{"loss factor", r.LossFactor, math.Tan(0.2)},
		{"energy", r.Energy, math.Pi * 50 * 1e-4 * math.Sin(0.2)},
		{"loop", r.LoopEnergy, math.Pi * 50 * 1e-4 * math.Sin(0.2)},
		{"nonlinearity", r.Nonlinearity, 0.03},
		{"mean", r.Force.Mean, 400 + 12*0.999},
		{"drift", r.Force.Drift, 12 * 1.998},
	} {
		if !(math.Abs(c.got-c.want) <= 1e-9*math.Abs(c.want)) {
			t.Errorf("%s = %.12g, want %.12g", c.name, c.got, c.want)
		}
	}
	if len(r.Doubts) != 0 || r.Harmonics != 5 || r.Counts.Used != 1000 {
		t.Errorf("%+v", r)
	}
}

// The scatter of 1000 draws is the stated uncertainty, within 4 standard deviations
// of the scatter's own sampling error (1/√2000 of it), and no doubt is raised. The
// asymptotic standard deviations are those of white noise, values from memory: √(2/N)σ for
// the amplitude, √(2/N)σ/a (frequency known) and √(8/N)σ/a (free) for the phase
// at the first sample, √(6/N³) fs σ/(πa) for the frequency.
func TestScatterIsUncertainty(t *testing.T) {
	for _, c := range []struct {
		name string
		set  Settings
		corr float64
	}{
		{"three parameters", Settings{Frequency: 7.31, Known: true, Trend: NoTrend}, 0},
		{"four parameters", Settings{Trend: NoTrend}, 0},
		{"four parameters, noise correlated", Settings{Trend: LinearTrend}, 0.8},
	} {
		t.Run(c.name, func(t *testing.T) {
			t.Parallel()
			s := usual()
			s.corr, s.third, s.rate = c.corr, 0.05, 200
			const draws = 1000
			names := []string{"frequency", "amplitude", "phase", "δ", "K'", "K''", "|K|", "energy", "nonlinearity", "loss factor"}
			var drawn [][]float64
			stated := make([]float64, len(names))
			var rho, left float64
			for i := range draws {
				s.seed = uint64(i)
				r, err := Analyse(s.record(), &c.set)
				if err != nil {
					t.Fatal(err)
				}
				if len(r.Doubts) > 0 {
					left++
				}
				drawn = append(drawn, []float64{r.Frequency, r.Force.Amplitude, r.Force.Phase, r.LossAngle, real(r.Stiffness), imag(r.Stiffness), r.Magnitude, r.Energy, r.Nonlinearity, r.LossFactor})
				for k, u := range []float64{r.UFrequency, r.Force.UAmplitude, r.Force.UPhase, r.ULossAngle, r.UStorage, r.ULoss, r.UMagnitude, r.UEnergy, r.UNonlinearity, r.ULossFactor} {
					stated[k] += u / draws
				}
				rho += r.Correlation / draws
			}
			n, fs := 400.0, s.rate
			for k, name := range names {
				if c.set.Known && k == 0 {
					continue
				}
				var m, q float64
				for _, v := range drawn {
					m += v[k] / draws
				}
				for _, v := range drawn {
					q += (v[k] - m) * (v[k] - m) / (draws - 1)
				}
				if sd := math.Sqrt(q); math.Abs(sd/stated[k]-1) > 4/math.Sqrt(2*draws) {
					t.Errorf("%s scatters by %.4g, stated %.4g", name, sd, stated[k])
				}
			}
			if math.Abs(rho-c.corr) > 0.01 {
				t.Errorf("correlation %.3f, want %.3f", rho, c.corr)
			}
			if left > 5 {
				t.Errorf("%.0f of %d sound records were doubted", left, draws)
			}
			if c.corr != 0 {
				return
			}
			// One frequency from two channels of 1 % noise each: σ/a falls by √2 in
			// the frequency's share. The loss angle has none of it.
			phase := math.Sqrt(2/n) * 0.01
			freq := 0.0
			if !c.set.Known {
				freq = math.Sqrt(6/(n*n*n)) * fs * 0.01 / math.Pi / math.Sqrt2
				phase = math.Sqrt(phase*phase + 6/n*1e-4/2)
			}
			for k, want := range []float64{freq, math.Sqrt(2/n) * 0.5, phase, math.Sqrt(4/n) * 0.01} {
				if math.Abs(stated[k]-want) > 0.02*want {
					t.Errorf("%s: stated %.4g, asymptotic %.4g", names[k], stated[k], want)
				}
			}
		})
	}
}

func TestRefusals(t *testing.T) {
	fill := func(n int, f func(float64) (float64, float64, float64)) Record {
		var r Record
		for i := range n {
			a, b, c := f(float64(i))
			r.Time, r.Force, r.Displacement = append(r.Time, a), append(r.Force, b), append(r.Displacement, c)
		}
		return r
	}
	nan, inf := math.NaN(), math.Inf(1)
	sine := func(i, f float64) float64 { return math.Sin(f * i) }
	for _, c := range []struct {
		name string
		r    Record
		want error
	}{
		{"empty", Record{}, ErrTooFew},
		{"one sample", fill(1, func(i float64) (float64, float64, float64) { return i, 1, 1 }), ErrTooFew},
		{"constant", fill(500, func(i float64) (float64, float64, float64) { return i, 1, 1 }), ErrNoMotion},
		{"straight", fill(500, func(i float64) (float64, float64, float64) { return i, 3 * i, 2 * i }), ErrNoMotion},
		{"all NaN", fill(500, func(i float64) (float64, float64, float64) { return nan, nan, nan }), ErrTooFew},
		{"values NaN", fill(500, func(i float64) (float64, float64, float64) { return i, nan, nan }), ErrTooFew},
		{"infinite", fill(500, func(i float64) (float64, float64, float64) { return i, inf, -inf }), ErrTooFew},
		{"time stands", fill(500, func(i float64) (float64, float64, float64) { return 3, sine(i, .1), sine(i, .1) }), ErrTime},
		{"time falls", fill(500, func(i float64) (float64, float64, float64) { return -i, sine(i, .1), sine(i, .1) }), nil},
		{"zero displacement", fill(500, func(i float64) (float64, float64, float64) { return i, sine(i, .1), 0 }), ErrNoMotion},
		{"zero force", fill(500, func(i float64) (float64, float64, float64) { return i, 0, sine(i, .1) }), ErrNoForce},
		{"slow sampling", fill(500, func(i float64) (float64, float64, float64) { return i, sine(i, 1.9), sine(i, 1.9) }), ErrTooSlow},
		{"half a cycle", fill(500, func(i float64) (float64, float64, float64) { return i, sine(i, .0063), sine(i, .0063) }), ErrTooShort},
		{"huge", fill(500, func(i float64) (float64, float64, float64) {
			return 1e305 * i, 1e300 * sine(i, .1), 1e300 * sine(i, .1)
		}), nil},
		{"tiny", fill(500, func(i float64) (float64, float64, float64) {
			return 1e-300 * i, 1e-310 * sine(i, .1), 1e-310 * sine(i, .1)
		}), nil},
		{"huge gap", fill(500, func(i float64) (float64, float64, float64) {
			return i + 1e200*math.Floor(i/250), sine(i, .1), sine(i, .1)
		}), nil},
		{"noise", fill(500, func(i float64) (float64, float64, float64) { return i, sine(i*i, 1.7), sine(i*i, 2.3) }), nil},
		{"step", fill(500, func(i float64) (float64, float64, float64) { return i, math.Floor(i / 250), math.Floor(i / 250) }), nil},
		{"impulse", fill(500, func(i float64) (float64, float64, float64) { return i, 0, math.Floor(i / 499) }), nil},
	} {
		for _, trend := range []Trend{NoTrend, LinearTrend, QuadraticTrend} {
			_, err := Analyse(c.r, &Settings{Trend: trend})
			if c.want != nil && !errors.Is(err, c.want) {
				t.Errorf("%s: %v, want %v", c.name, err, c.want)
			}
			if _, err := Analyse(c.r, &Settings{Trend: trend, Known: true, Frequency: 0.016}); errors.Is(c.want, ErrTooFew) && err == nil {
				t.Errorf("%s at a known frequency: no error", c.name)
			}
		}
	}
	for _, s := range []Settings{{Frequency: nan}, {Known: true}, {Trend: 9}, {Harmonics: 10}, {Harmonics: -1}, {Buffer: 10}, {Change: 2}} {
		if _, err := Analyse(Record{}, &s); err == nil {
			t.Errorf("%+v was taken", s)
		}
	}
}

func has(r Result, c Code) bool {
	for _, d := range r.Doubts {
		if d.Code == c {
			return true
		}
	}
	return false
}
