package fitting

import (
	"fmt"
	"math"
	"math/cmplx"
	"strings"
	"testing"

	"gonum.org/v1/gonum/mat"

	"phaselag/data"
	"phaselag/data/demo"
)

// The Cramér–Rao bound of a scenario: the least standard deviation that any
// unbiased estimator can have that knows the generating formulas, but none of
// their constants, and the noise. Measurements are y_i = ln G* of row i with
// the noise of its test; parameters p are the constants of the truth (logarithms
// of moduli and times, exponents, shift, filler), and with their priors the
// offset of every run, the factor of every specimen, the common phase and the
// common error of temperature. With J the Jacobian by central differences and F
// the information of rows and priors, a quantity with gradient g has the bound
// √(gᵀF⁺g).

// knob is one parameter of the truth.
type knob struct {
	get func(*demo.Truth) float64
	set func(*demo.Truth, float64)
}

func logKnob(at func(*demo.Truth) *float64) knob {
	return knob{
		get: func(t *demo.Truth) float64 { return math.Log(*at(t)) },
		set: func(t *demo.Truth, v float64) { *at(t) = math.Exp(v) },
	}
}

func plainKnob(at func(*demo.Truth) *float64) knob {
	return knob{
		get: func(t *demo.Truth) float64 { return *at(t) },
		set: func(t *demo.Truth, v float64) { *at(t) = v },
	}
}

func knobs(t demo.Truth) []knob {
	var out []knob
	if t.Equilibrium > 0 {
		out = append(out, logKnob(func(t *demo.Truth) *float64 { return &t.Equilibrium }))
	}
	for i := range t.Processes {
		out = append(out,
			logKnob(func(t *demo.Truth) *float64 { return &t.Processes[i].Strength }),
			logKnob(func(t *demo.Truth) *float64 { return &t.Processes[i].Time }),
			plainKnob(func(t *demo.Truth) *float64 { return &t.Processes[i].Alpha }))
		if t.Processes[i].Beta != 0 {
			out = append(out, plainKnob(func(t *demo.Truth) *float64 { return &t.Processes[i].Beta }))
		}
	}
	switch t.Shift.(type) {
	case demo.WLF:
		out = append(out,
			knob{func(t *demo.Truth) float64 { return t.Shift.(demo.WLF).C1 }, func(t *demo.Truth, v float64) { w := t.Shift.(demo.WLF); w.C1 = v; t.Shift = w }},
			knob{func(t *demo.Truth) float64 { return t.Shift.(demo.WLF).C2 }, func(t *demo.Truth, v float64) { w := t.Shift.(demo.WLF); w.C2 = v; t.Shift = w }})
	case demo.Arrhenius:
		out = append(out, knob{func(t *demo.Truth) float64 { return math.Log(t.Shift.(demo.Arrhenius).Energy) }, func(t *demo.Truth, v float64) { a := t.Shift.(demo.Arrhenius); a.Energy = math.Exp(v); t.Shift = a }})
	}
	if t.Filler.Storage > 0 {
		out = append(out,
			logKnob(func(t *demo.Truth) *float64 { return &t.Filler.Storage }), logKnob(func(t *demo.Truth) *float64 { return &t.Filler.Loss }),
			logKnob(func(t *demo.Truth) *float64 { return &t.Filler.Strain }), plainKnob(func(t *demo.Truth) *float64 { return &t.Filler.Exponent }),
			plainKnob(func(t *demo.Truth) *float64 { return &t.Filler.Energy }))
	}
	return out
}

// with is the truth with one parameter moved by d.
func with(t demo.Truth, k knob, d float64) demo.Truth {
	t.Processes = append([]demo.Process{}, t.Processes...)
	k.set(&t, k.get(&t)+d)
	return t
}

// step of a parameter for central differences.
func step(t demo.Truth, k knob) float64 { return 1e-5 * max(0.1, math.Abs(k.get(&t))) }

// quantities gives everything that is judged, by the names of judge.
func (sc scenario) quantities(truth demo.Truth, r *Result) map[string]float64 {
	out := map[string]float64{}
	Tref := r.Compound.ReferenceTempC + 273.15
	logA := func(T float64) float64 {
		return math.Log10(truth.ShiftFactor(T)) - math.Log10(truth.ShiftFactor(Tref))
	}
	for _, s := range r.Shifts {
		T := float64(s.TemperatureC)
		if math.Abs(T+273.15-Tref) > 0.01 {
			out[fmt.Sprintf("law/log aT %g", T)] = logA(T + 273.15)
		}
	}
	if w, ok := truth.Shift.(demo.WLF); ok {
		c2 := w.C2 + Tref - w.Reference
		out["constant/C2"], out["constant/C1"] = c2, w.C1*w.C2/c2
	}
	if a, ok := truth.Shift.(demo.Arrhenius); ok {
		out["constant/activation energy of the shift"] = a.Energy / 1e3
	}
	if f := truth.Filler; f.Storage > 0 {
		phi := math.Exp(f.Energy / 8.31446261815324 * (1/Tref - 1/truth.Reference))
		out["constant/filler storage ΔG′"], out["constant/filler loss ΔG″"] = phi*f.Storage/1e6, phi*f.Loss/1e6
		out["constant/critical strain"], out["constant/Kraus exponent m"], out["constant/filler activation energy"] = 100*f.Strain, f.Exponent, f.Energy/1e3
	}
	for i, q := range service {
		if r.Compound.Inside(q) != nil {
			continue
		}
		g := truth.Modulus(q.Frequency, q.Temperature, q.Strain)
		out[fmt.Sprintf("G'/condition %d", i+1)] = real(g)
		out[fmt.Sprintf("tan δ/condition %d", i+1)] = math.Tan(cmplx.Phase(g))
	}
	return out
}

// bound computes the Cramér–Rao bounds of a scenario.
func (sc scenario) bound(t *testing.T) map[string]float64 {
	t.Helper()
	c, err := data.OpenFS(demo.Campaign(sc.truth, sc.plan.Noiseless(), 1), "campaign.yaml")
	if err != nil {
		t.Fatal(err)
	}
	r, err := Characterize(c, &Settings{Replicates: -1})
	if err != nil {
		t.Fatal(err)
	}
	ks := knobs(sc.truth)
	noise := map[string]demo.Noise{}
	for _, test := range sc.plan.Tests {
		noise[test.Name] = test.Noise
	}
	e := sc.plan.Errors
	type row struct {
		pt         data.Point
		relaxed    bool
		n          demo.Noise
		run, piece int
	}
	var rows []row
	var runU []float64
	pieces := map[string]int{}
	for _, test := range c.Tests {
		for _, run := range test.Runs {
			u := e.TemperatureScatter
			if test.Kind == data.TemperatureSweep {
				u = math.Hypot(u, e.Lag)
			}
			if _, ok := pieces[test.Specimen]; !ok {
				pieces[test.Specimen] = len(pieces)
			}
			for _, pt := range run.Points {
				rows = append(rows, row{pt, test.Kind == data.Relaxation, noise[test.Name], len(runU), pieces[test.Specimen]})
			}
			runU = append(runU, u)
		}
	}
	nk := len(ks)
	n := nk + len(runU) + len(pieces) + 2
	phase, common := n-2, n-1
	value := func(truth demo.Truth, q row, dT float64) complex128 {
		if q.relaxed {
			return complex(math.Log(truth.Relaxation(q.pt.Time, q.pt.Temperature+dT, q.pt.Strain)), 0)
		}
		return cmplx.Log(truth.Modulus(q.pt.Frequency, q.pt.Temperature+dT, q.pt.Strain))
	}
	// Rows of the weighted Jacobian, two a measurement, then the priors.
	m := 2*len(rows) + n - nk
	j := mat.NewDense(m, n, nil)
	for i, q := range rows {
		put := func(k int, d complex128) {
			j.Set(2*i, k, real(d)/q.n.Magnitude)
			if !q.relaxed {
				j.Set(2*i+1, k, imag(d)/(q.n.Phase*math.Pi/180))
			}
		}
		for k, kn := range ks {
			h := step(sc.truth, kn)
			put(k, (value(with(sc.truth, kn, h), q, 0)-value(with(sc.truth, kn, -h), q, 0))/complex(2*h, 0))
		}
		byT := (value(sc.truth, q, 0.01) - value(sc.truth, q, -0.01)) / 0.02
		put(nk+q.run, byT)
		put(common, byT)
		put(nk+len(runU)+q.piece, 1)
		if !q.relaxed {
			put(phase, 1i)
		}
	}
	at := 2 * len(rows)
	prior := func(k int, u float64) {
		j.Set(at, k, 1/u)
		at++
	}
	for k, u := range runU {
		prior(nk+k, u)
	}
	for k := range len(pieces) {
		prior(nk+len(runU)+k, e.Geometry)
	}
	prior(phase, e.Phase*math.Pi/180)
	prior(common, e.TemperatureCommon)
	// Columns to unit length, then the pseudo-inverse by singular values.
	scale := make([]float64, n)
	for k := range n {
		scale[k] = mat.Norm(j.ColView(k), 2)
		for i := range m {
			j.Set(i, k, j.At(i, k)/scale[k])
		}
	}
	var svd mat.SVD
	if !svd.Factorize(j, mat.SVDThin) {
		t.Fatal("no singular values")
	}
	s := svd.Values(nil)
	var v mat.Dense
	svd.VTo(&v)
	out := map[string]float64{}
	for name := range sc.quantities(sc.truth, r) {
		g := make([]float64, n)
		for k, kn := range ks {
			h := step(sc.truth, kn)
			g[k] = (sc.quantities(with(sc.truth, kn, h), r)[name] - sc.quantities(with(sc.truth, kn, -h), r)[name]) / (2 * h) / scale[k]
		}
		var sum float64
		for i, si := range s {
			if si < 1e-9*s[0] {
				continue
			}
			var d float64
			for k := range n {
				d += v.At(k, i) * g[k]
			}
			sum += d * d / (si * si)
		}
		out[name] = math.Sqrt(sum)
	}
	return out
}

// TestEfficiency compares the scatter of the joint fit with the Cramér–Rao
// bound. The long form is run by hand:
//
//	go test ./fitting -run TestEfficiency -v -campaigns 1000 -timeout 0
//
// The short form only looks for gross losses. The two conditions at the edges of
// the window are shown and not judged: the bound knows that the truth is two smooth
// processes that go on beyond it, and a spectrum that knows only that it is smooth and
// not negative scatters up to twice as much at the warm edge.
func TestEfficiency(t *testing.T) {
	if testing.Short() {
		t.Skip("a simulation of its own, left out with -short")
	}
	n := *campaigns
	list := scenarios()[:4]
	meanBar, eachBar := 1.15, 1.3
	if n == 0 {
		n, list = 16, list[1:2]
		meanBar, eachBar = 1.6, 2.2
	}
	for _, sc := range list {
		bound := sc.bound(t)
		total := sc.simulate(t, n)
		sum, count := map[string]float64{}, map[string]int{}
		worst := map[string]float64{}
		for _, name := range sortedKeys(bound) {
			v := total[name]
			if v == nil || v.n < n/2 {
				continue
			}
			ratio := math.Sqrt(v.e2/float64(v.n)) / bound[name]
			c := className(name)
			edge := strings.HasSuffix(name, "condition 6") || strings.HasSuffix(name, "condition 7")
			if edge {
				c += ", edges"
			}
			sum[c] += ratio
			count[c]++
			worst[c] = max(worst[c], ratio)
			t.Logf("  %-42s scatter over bound %.3f of %d", name, ratio, v.n)
			if ratio > eachBar && !edge {
				t.Errorf("%s: %s scatters %.3f times as much as it must", sc.name, name, ratio)
			}
		}
		for _, c := range sortedKeys(sum) {
			mean := sum[c] / float64(count[c])
			t.Logf("| %s | %s | %d | %.3f | %.3f |", sc.name, c, n, mean, worst[c])
			if mean > meanBar && !strings.HasSuffix(c, "edges") {
				t.Errorf("%s: class %s scatters %.3f times as much as it must", sc.name, c, mean)
			}
		}
	}
}
