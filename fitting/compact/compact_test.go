package compact

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"

	"phaselag/fitting/lsq"
	"phaselag/models/linear"
)

func curve(m linear.Compact, sigma float64, rnd *rand.Rand) []Point {
	var out []Point
	for i := range 81 {
		w := math.Pow(10, -2+8*float64(i)/80)
		g := m.Modulus(w)
		if rnd != nil {
			g *= cmplx.Exp(complex(sigma*rnd.NormFloat64(), sigma*rnd.NormFloat64()))
		}
		out = append(out, Point{w, g, math.Max(sigma, 1e-6), math.Max(sigma, 1e-6)})
	}
	return out
}

var truths = []linear.Compact{
	linear.FractionalZener{G0: 1e6, Ginf: 1e9, Tau: 1e-6, Alpha: 0.5},
	linear.FiveParameter{G0: 1e6, G1: 3e8, Tau: 1e-5, Alpha: 0.6, Beta: 0.5},
	linear.HavriliakNegami{G0: 1e6, Ginf: 8e8, Tau: 1e-4, A: 0.7, B: 0.5},
}

func constants(m linear.Compact) []float64 {
	switch m := m.(type) {
	case linear.FractionalZener:
		return []float64{m.G0, m.Ginf, m.Tau, m.Alpha}
	case linear.FiveParameter:
		return []float64{m.G0, m.G1, m.Tau, m.Alpha, m.Beta}
	case linear.HavriliakNegami:
		return []float64{m.G0, m.Ginf, m.Tau, m.A, m.B}
	}
	return nil
}

// TestExact: exact curves give their constants back, and their own model is best.
func TestExact(t *testing.T) {
	for n, truth := range truths {
		fits, err := Candidates(curve(truth, 0, nil))
		if err != nil {
			t.Fatal(err)
		}
		if fits[n].Delta > 2 {
			t.Errorf("%s: AICc %.3g above the least", fits[n].Name, fits[n].Delta)
		}
		for i, want := range constants(truth) {
			if got := fits[n].Constants[i].Value; math.Abs(got/want-1) > 1e-5 {
				t.Errorf("%s, %s: %.9g, should be %.9g", fits[n].Name, fits[n].Constants[i].Name, got, want)
			}
		}
	}
}

// TestScatter: with noise the constants scatter as their uncertainties say.
func TestScatter(t *testing.T) {
	const draws = 60
	for n, truth := range truths {
		want := constants(truth)
		z2 := make([]float64, len(want))
		for d := range draws {
			rnd := rand.New(rand.NewPCG(uint64(d), uint64(n)))
			for i, c := range forms[n].fit(curve(truth, 0.005, rnd), 0.01, 1e6).Constants {
				z := (c.Value - want[i]) / c.U
				z2[i] += z * z
			}
		}
		for i := range z2 {
			// The root mean square of 60 is known to 9 %.
			if rms := math.Sqrt(z2[i] / draws); rms < 0.65 || rms > 1.4 {
				t.Errorf("%s, constant %d: rms of error over uncertainty %.2f", forms[n].name, i, rms)
			}
		}
	}
}

func TestDerivatives(t *testing.T) {
	for n := range forms {
		f := &forms[n]
		points := curve(truths[n], 0, nil)
		x := f.start(0.8e6, 2e9, -12, 0.55)
		d, err := lsq.CheckJacobian(f.problem(points), x)
		if err != nil || d.Worst > 1e-6 {
			t.Errorf("%s: Jacobian off by %g (%v)", f.name, d.Worst, err)
		}
	}
}

// TestFew: branches for six decades of a fractional Zener material, checked on a
// grid of their own; one branch fewer does not do.
func TestFew(t *testing.T) {
	m := truths[0]
	// A dense spectrum in the place of the compound's.
	var s linear.Spectrum
	s.Equilibrium = 1e6
	for k := -60; k <= 30; k++ {
		// The spectrum of the fractional Zener model over ln τ (closed form; derived).
		tau := math.Pow(10, float64(k)/6)
		u := math.Log(tau / 1e-6)
		h := 999e6 / (2 * math.Pi) * math.Sin(math.Pi*0.5) / (math.Cosh(0.5*u) + math.Cos(math.Pi*0.5))
		s.Times, s.Moduli = append(s.Times, tau), append(s.Moduli, h*math.Ln10/6)
	}
	for _, w := range []float64{0.1, 1, 1e3} {
		if d := cmplx.Abs(s.Modulus(w)/m.Modulus(w) - 1); d > 0.01 {
			t.Fatalf("the dense spectrum is off by %g at %g rad/s", d, w)
		}
	}
	f, mis, err := Few(s, 0.1, 1e5, Tolerance{})
	if err != nil {
		t.Fatal(err)
	}
	t.Logf("%d branches, worst %.2f %%, %.2f°", len(f.Times), 100*mis.WorstMagnitude, mis.WorstPhase*180/math.Pi)
	if len(f.Times) > 9 || len(f.Times) < 4 {
		t.Errorf("%d branches for six decades", len(f.Times))
	}
	for w := 0.1; w <= 1e5; w *= 1.037 {
		d := cmplx.Log(s.Modulus(w) / f.Modulus(w))
		if math.Abs(real(d)) > 0.0205 || math.Abs(imag(d)) > 1.02*math.Pi/180 {
			t.Errorf("off by %.3g and %.3g° at %g rad/s", real(d), imag(d)*180/math.Pi, w)
		}
	}
	fine, _, err := Few(s, 0.1, 1e5, Tolerance{0.005, 0.3 * math.Pi / 180})
	if err != nil || len(fine.Times) <= len(f.Times) {
		t.Errorf("a finer tolerance takes %d branches (%v)", len(fine.Times), err)
	}
}

func TestHostile(t *testing.T) {
	nan := math.NaN()
	for _, p := range [][]Point{
		nil, {{1, 1 + 1i, 0.01, 0.01}},
		{{nan, 1, 1, 1}, {1, complex(nan, 1), 1, 1}, {2, 0, 0, 0}, {3, 1, 1, 1}, {4, 1, 1, 1}, {50, 1, 1, 1}},
	} {
		if _, err := Candidates(p); err == nil {
			t.Errorf("no error for %v", p)
		}
	}
	// All points alike: no model, but no panic either.
	var flat []Point
	for i := range 20 {
		flat = append(flat, Point{math.Pow(10, float64(i)/4), 1e6 + 1e3i, 0.01, 0.01})
	}
	if _, err := Candidates(flat); err != nil {
		t.Error(err)
	}
	for _, w := range [][2]float64{{0, 1}, {2, 1}, {1, math.Inf(1)}, {nan, 1}} {
		if _, _, err := Few(linear.Spectrum{Equilibrium: 1}, w[0], w[1], Tolerance{}); err == nil {
			t.Errorf("no error for the window %v", w)
		}
	}
	if _, _, err := Few(linear.Spectrum{}, 1, 10, Tolerance{}); err == nil {
		t.Error("no error for no spectrum")
	}
}
