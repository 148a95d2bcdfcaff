package models

import (
	"errors"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"phaselag/data/unit"
)

// zener is an invented compound of one relaxation time: the standard linear solid with
// G_e = 1 MPa, G_1 = 99 MPa, τ = 1e-6 s at 23 °C and the WLF constants 6, 150 K.
func zener(parameters []string, cholesky []Row) Compound {
	nan := unit.NaN()
	c := sample()
	c.Linear = Linear{Equilibrium: 1, Branches: []Branch{{Time: 1e-6, Modulus: 99}}}
	c.Shift = Shift{Law: LawWLF, C1: 6, C2: 150, Activation: nan}
	c.Vertical = Vertical{Law: VerticalNone, Expansion: nan}
	c.Amplitude = Amplitude{Law: AmplitudeNone, Coupling: Overlay, Storage: nan, Loss: nan, Critical: nan, Exponent: nan, Activation: nan, Frequency: RateIndependent, ReferenceFrequency: nan}
	c.Domain = Domain{Temperature: Range{-80, 60}, ReducedFrequency: Range{1e-6, 1e12}, OwnStrain: nan}
	c.Uncertainty = Uncertainty{Coverage: 0.95, DegreesOfFreedom: nan, Parameters: parameters, Cholesky: cholesky}
	return c
}

// peakOfZener is the closed form: tan δ = ωτ'G_1/(G_e + (G_e+G_1)(ωτ')²) with τ' = a_Tτ has its peak
// where (ωτ')² = G_e/(G_e+G_1), and G″ where ωτ' = 1. WLF turned round: with
// L = log a_T, T − T_0 = −C_2 L/(C_1 + L).
func peakOfZener(c *Compound, reading Reading, f float64) float64 {
	x := 1.0
	if ge := c.Linear.Equilibrium; reading == PeakOfLossFactor {
		x = math.Sqrt(ge / (ge + c.Linear.Branches[0].Modulus))
	}
	l := math.Log10(x / (2 * math.Pi * f * c.Linear.Branches[0].Time))
	return c.ReferenceTempC + zeroC - float64(c.Shift.C2)*l/(float64(c.Shift.C1)+l)
}

func TestTransitionOfOneRelaxationTime(t *testing.T) {
	names := []string{"linear.equilibrium_modulus_MPa", "linear.branches.0.modulus_MPa", "shift.c1", "shift.c2_K", ParamSpecimen, ParamTemperature}
	u := []float64{0.01, 2, 0.05, 1, 0.02, 0.2}
	var rows []Row
	for i := range names {
		row := make(Row, i+1)
		row[i] = 1e-3 * u[i]
		rows = append(rows, row)
	}
	c := mustNew(t, zener(names, rows))
	for _, reading := range []Reading{PeakOfLossFactor, PeakOfLossModulus} {
		for _, f := range []float64{0.1, 1, 10, 100} {
			got, err := c.Transition(reading, f, math.NaN())
			if err != nil {
				t.Fatal(err)
			}
			want := peakOfZener(c, reading, f)
			if math.Abs(got.Temperature-want) > 1e-5 {
				t.Errorf("reading %d at %g Hz: %.7f K, want %.7f", reading, f, got.Temperature, want)
			}
			// The interval: the closed form with every parameter moved.
			var square float64
			for i, name := range names {
				var d float64
				switch name {
				case ParamSpecimen: // multiplies everything and moves no peak
				case ParamTemperature:
					d = rows[i][i]
				default:
					up := peakOfZener(moved(t, c, map[string]float64{name: rows[i][i]}), reading, f)
					down := peakOfZener(moved(t, c, map[string]float64{name: -rows[i][i]}), reading, f)
					d = (up - down) / 2
				}
				square += d * d
			}
			half := 1.959964 * math.Sqrt(square)
			if math.Abs(got.U95/half-1) > 1e-4 {
				t.Errorf("reading %d at %g Hz: U95 %.8f K, want %.8f", reading, f, got.U95, half)
			}
			if math.Abs((got.High-got.Temperature)/half-1) > 1e-2 || math.Abs((got.Temperature-got.Low)/half-1) > 1e-2 {
				t.Errorf("reading %d at %g Hz: %.6f to %.6f K, want ± %.6f", reading, f, got.Low-want, got.High-want, half)
			}
		}
	}
	// Heights of the closed form: G_1/(2√(G_e(G_e+G_1))) and G_1/2.
	eta, err := c.Transition(PeakOfLossFactor, 1, math.NaN())
	if want := 99 / (2 * math.Sqrt(100)); err != nil || math.Abs(eta.Height/want-1) > 1e-9 {
		t.Errorf("height %g, want %g: %v", eta.Height, want, err)
	}
	loss, err := c.Transition(PeakOfLossModulus, 1, math.NaN())
	if err != nil || math.Abs(loss.Height/49.5e6-1) > 1e-9 {
		t.Errorf("height %g, want 49.5 MPa: %v", loss.Height, err)
	}
	if m, _ := c.Modulus(Condition{1, loss.Temperature, math.NaN()}); math.Abs(loss.HeightU95/m.LossU95-1) > 1e-9 {
		t.Errorf("interval of the height %g, want %g", loss.HeightU95, m.LossU95)
	}
}

// An error of the thermometer moves the reading by itself, whatever the peak.
func TestTransitionFollowsTheThermometer(t *testing.T) {
	c := mustNew(t, zener([]string{ParamTemperature}, []Row{{0.2}}))
	got, err := c.Transition(PeakOfLossFactor, 10, math.NaN())
	if err != nil || math.Abs(got.U95-1.959964*0.2) > 1e-5 {
		t.Errorf("U95 %g K, want 1.96·0.2: %v", got.U95, err)
	}
}

// 95 of a hundred redrawn compounds have their peak in the interval. Seed fixed
// beforehand; 600 draws give 95 ± 1.8 % (95 % range of a binomial share).
func TestTransitionCoverage(t *testing.T) {
	names := []string{"linear.equilibrium_modulus_MPa", "linear.branches.0.modulus_MPa", "shift.c1", "shift.c2_K"}
	rows := []Row{{0.03}, {2, 6}, {0.02, 0, 0.15}, {0, 0, 3, 1.5}}
	truth := mustNew(t, zener(names, rows))
	rnd := rand.New(rand.NewPCG(20261201, 7))
	const draws = 600
	want := peakOfZener(truth, PeakOfLossFactor, 10)
	inside, delta := 0, 0
	for range draws {
		change := map[string]float64{}
		var z []float64
		for i, name := range names {
			z = append(z, rnd.NormFloat64())
			for j := range rows[i] {
				change[name] += rows[i][j] * z[j]
			}
		}
		got, err := moved(t, truth, change).Transition(PeakOfLossFactor, 10, math.NaN())
		if err != nil {
			t.Fatal(err)
		}
		if want >= got.Low && want <= got.High {
			inside++
		}
		if math.Abs(want-got.Temperature) <= got.U95 {
			delta++
		}
	}
	if share := float64(inside) / draws; share < 0.925 || share > 0.975 {
		t.Errorf("%.1f %% of the intervals by the slope hold the peak", 100*share)
	}
	if share := float64(delta) / draws; share < 0.925 || share > 0.975 {
		t.Errorf("%.1f %% of the intervals by the delta method hold the peak", 100*share)
	}
}

func TestNoTransition(t *testing.T) {
	in := zener([]string{"shift.c1"}, []Row{{0.05}})
	in.Domain.Temperature = Range{-20, 60} // the peak at 1 Hz is at −39 °C
	for _, v := range []struct {
		change func(*Compound)
		f      float64
		want   string
	}{
		{func(*Compound) {}, 1, "rises towards the coldest, -20 °C"},
		{func(c *Compound) { c.Domain.Temperature = Range{-80, -72} }, 1, "rises towards the warmest, -72 °C"},
		{func(c *Compound) { c.Domain.ReducedFrequency = Range{1e-3, 1e-2} }, 1e6, "no stretch of temperatures"},
		{func(c *Compound) {
			c.Domain.Temperature = Range{-46, -32}
			c.Uncertainty.Cholesky = []Row{{4}}
		}, 1, "reaches beyond the domain"},
	} {
		n := in
		v.change(&n)
		_, err := mustNew(t, n).Transition(PeakOfLossFactor, v.f, math.NaN())
		var none *NoPeakError
		if !errors.As(err, &none) || !strings.Contains(err.Error(), v.want) {
			t.Errorf("%v, want %q", err, v.want)
		}
	}
	for _, f := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		_, err := mustNew(t, in).Transition(PeakOfLossFactor, f, math.NaN())
		var none *NoPeakError
		if err == nil || errors.As(err, &none) {
			t.Errorf("%g Hz: %v", f, err)
		}
	}
}

// The stretch of temperatures ends where the reduced frequency leaves the domain.
func TestTemperatures(t *testing.T) {
	c := mustNew(t, sample())
	lo, hi, err := c.Temperatures(100, math.NaN())
	if err != nil {
		t.Fatal(err)
	}
	l := math.Log10(1234567.8 / 100)
	if want := 23 + zeroC - 149.75*l/(6.01+l); math.Abs(lo-want) > 1e-6 {
		t.Errorf("coldest %.8f K, want %.8f", lo, want)
	}
	if hi != 80+zeroC {
		t.Errorf("warmest %.8f K", hi)
	}
	if lo, hi, err = c.Temperatures(1e9, math.NaN()); err != nil || !math.IsNaN(lo) || !math.IsNaN(hi) {
		t.Errorf("%g, %g, %v where there is none", lo, hi, err)
	}
}
