package fitting

import (
	"flag"
	"fmt"
	"math"
	"math/cmplx"
	"runtime"
	"sort"
	"strings"
	"sync"
	"testing"

	"phaselag/data"
	"phaselag/data/demo"
	"phaselag/models"
)

var (
	campaigns = flag.Int("campaigns", 0, "simulated campaigns a scenario in TestCoverage (0: the short form)")
	workers   = flag.Int("workers", runtime.GOMAXPROCS(0), "goroutines of TestCoverage")
)

// scenario is one simulated laboratory with its compound.
type scenario struct {
	name  string
	truth demo.Truth
	plan  demo.Plan
	class bool // law and filler constants exist in the truth
}

func scenarios() []scenario {
	return []scenario{
		{"filled, strain sweeps", demo.HM60(), demo.HM60Plan(), true},
		{"gum, isotherms only", demo.Gum(), demo.IsothermPlan(), true},
		{"narrow transition", demo.Narrow(), demo.NarrowPlan(), true},
		{"liquid, Arrhenius", demo.Liquid(), demo.LiquidPlan(), true},
		{otherNoise, demo.HM60(), relativeNoise(demo.HM60Plan()), true},
	}
}

// otherNoise is the scenario whose noise is not that of the model: relative
// errors of storage and loss modulus.
const otherNoise = "filled, noise on G′ and G″"

func relativeNoise(p demo.Plan) demo.Plan {
	tests := append([]demo.Test{}, p.Tests...)
	for i := range tests {
		if n := tests[i].Noise; n.Phase != 0 {
			tests[i].Noise = demo.Noise{Storage: 0.005, Loss: 0.01}
		}
	}
	p.Tests = tests
	return p
}

// service are the conditions at which G' and tan δ are judged; those outside a
// scenario's domain are passed over.
var service = []models.Condition{
	{Frequency: 4, Temperature: 253.15, Strain: 0.002},
	{Frequency: 30, Temperature: 263.15, Strain: 0.002},
	{Frequency: 10, Temperature: 296.15, Strain: 0.002},
	{Frequency: 25, Temperature: 313.15, Strain: 0.002},
	{Frequency: 4, Temperature: 333.15, Strain: 0.002},
	// The edges of the window.
	{Frequency: 50, Temperature: 233.15, Strain: 0.002},
	{Frequency: 0.5, Temperature: 353.15, Strain: 0.002},
}

// tally counts how often an interval held the truth.
type tally struct {
	hit, n int
	z, z2  float64 // sums of error over standard uncertainty, and of its square
	e2     float64 // sum of the squared error
}

type score map[string]*tally

func (s score) add(name string, err, half float64) {
	t := s[name]
	if t == nil {
		t = &tally{}
		s[name] = t
	}
	t.n++
	if math.Abs(err) <= half {
		t.hit++
	}
	z := 1.96 * err / half
	t.z += z
	t.z2 += z * z
	t.e2 += err * err
}

func (s score) merge(o score) {
	for k, v := range o {
		if s[k] == nil {
			s[k] = &tally{}
		}
		s[k].hit += v.hit
		s[k].n += v.n
		s[k].z += v.z
		s[k].z2 += v.z2
		s[k].e2 += v.e2
	}
}

// judge scores one campaign.
func (sc scenario) judge(seed uint64) (score, error) {
	out := score{}
	campaign, err := data.OpenFS(demo.Campaign(sc.truth, sc.plan, seed), "campaign.yaml")
	if err != nil {
		return nil, err
	}
	r, err := Characterize(campaign, &Settings{Replicates: -1, Workers: 1})
	if err != nil {
		return nil, err
	}
	c := r.Compound
	Tref := c.ReferenceTempC + 273.15
	logA := func(T float64) float64 {
		return math.Log10(sc.truth.ShiftFactor(T)) - math.Log10(sc.truth.ShiftFactor(Tref))
	}
	for _, s := range r.Shifts {
		T := float64(s.TemperatureC)
		if s.Determined && float64(s.U) > 0 {
			out.add(fmt.Sprintf("factor/log aT %g", T), float64(s.Log)-logA(T+273.15), 1.96*float64(s.U))
		}
		if float64(s.LawU) > 0 {
			out.add(fmt.Sprintf("law/log aT %g", T), float64(s.Law)-logA(T+273.15), 1.96*float64(s.LawU))
		}
	}
	truth := map[string]float64{}
	// The constants that reproduce the truth's law at this reference.
	// (Arrhenius is WLF with C2 = T_ref; a fit that took WLF for it was misled
	// by its draw.)
	if a, ok := sc.truth.Shift.(demo.Arrhenius); ok {
		truth["activation energy of the shift"] = a.Energy / 1e3
	} else if w, ok := wlfOf(sc.truth, Tref); ok {
		truth["C1"], truth["C2"] = w[0], w[1]
	}
	if f := sc.truth.Filler; f.Storage > 0 {
		truth["filler storage ΔG′"], truth["filler loss ΔG″"] = f.Storage/1e6, f.Loss/1e6
		truth["critical strain"], truth["Kraus exponent m"], truth["filler activation energy"] = 100*f.Strain, f.Exponent, f.Energy/1e3
		// ΔG' of the truth holds at the truth's reference temperature.
		phi := math.Exp(f.Energy / 8.31446261815324 * (1/Tref - 1/sc.truth.Reference))
		truth["filler storage ΔG′"] *= phi
		truth["filler loss ΔG″"] *= phi
	}
	for _, p := range r.Parameters {
		if v, ok := truth[p.Name]; ok {
			out.add("constant/"+p.Name, float64(p.Value)-v, float64(p.U95))
		}
	}
	for i, q := range service {
		m, err := c.Modulus(q)
		if err != nil {
			continue
		}
		g := sc.truth.Modulus(q.Frequency, q.Temperature, q.Strain)
		out.add(fmt.Sprintf("G'/condition %d", i+1), m.Storage-real(g), m.StorageU95)
		out.add(fmt.Sprintf("tan δ/condition %d", i+1), m.LossFactor-math.Tan(cmplx.Phase(g)), m.LossFactorU95)
	}
	holds := 0.0
	if c.Fit.Superposition.Holds == models.HoldsNo {
		holds = 2
	}
	out.add("alarm/superposition (share without)", holds, 1)
	outlying, wrong := 0.0, 0.0
	for _, f := range r.Findings {
		switch f.Code {
		case "outlying-points":
			outlying = 2
		case "temperatures-exchanged", "isotherm-frequency-unit", "isotherm-off-the-law":
			wrong = 2
		}
	}
	out.add("alarm/outlying points (share without)", outlying, 1)
	out.add("alarm/wrong isotherm (share without)", wrong, 1)
	return out, nil
}

// wlfOf reads C1 and C2 off two shift factors; ok is false where a third does
// not lie on the same law.
func wlfOf(t demo.Truth, Tref float64) ([2]float64, bool) {
	l := func(d float64) float64 {
		return math.Log10(t.ShiftFactor(Tref+d)) - math.Log10(t.ShiftFactor(Tref))
	}
	// d/log a = −(C2 + d)/C1, a straight line in d.
	y1, y2, y3 := -30/l(-30), 30/l(30), 50/l(50)
	slope := (y2 - y1) / 60
	c1 := -1 / slope
	c2 := c1 * -(y1 + 30*slope)
	ok := math.Abs(y3-(y2+20*slope)) < 1e-6*math.Abs(y3) && c2 > 0
	return [2]float64{c1, c2}, ok
}

// TestCoverage simulates campaigns and counts how often the stated 95 %
// intervals hold the truth. The long form is run by hand:
//
//	go test ./fitting -run TestCoverage -v -campaigns 1000 -timeout 0
func TestCoverage(t *testing.T) {
	if testing.Short() {
		t.Skip("a simulation of its own, left out with -short")
	}
	n := *campaigns
	if n == 0 {
		n = 10
	}
	for _, sc := range scenarios() {
		report(t, sc.name, n, sc.simulate(t, n))
	}
}

// eachSeed calls do for n seeds from first on, on -workers goroutines.
func eachSeed(first uint64, n int, do func(seed uint64)) {
	var wg sync.WaitGroup
	next := make(chan uint64, n)
	for i := range n {
		next <- first + uint64(i)
	}
	close(next)
	for range *workers {
		wg.Add(1)
		go func() {
			defer wg.Done()
			for seed := range next {
				do(seed)
			}
		}()
	}
	wg.Wait()
}

// simulate scores n campaigns; the seeds are 1000, 1001, ….
func (sc scenario) simulate(t *testing.T, n int) score {
	total := score{}
	var mu sync.Mutex
	eachSeed(1000, n, func(seed uint64) {
		s, err := sc.judge(seed)
		mu.Lock()
		defer mu.Unlock()
		if err != nil {
			t.Errorf("%s, seed %d: %v", sc.name, seed, err)
			return
		}
		total.merge(s)
	})
	return total
}

func className(name string) string {
	c, _, _ := strings.Cut(name, "/")
	return c
}

func sortedKeys[T any](m map[string]T) []string {
	var keys []string
	for k := range m {
		keys = append(keys, k)
	}
	sort.Strings(keys)
	return keys
}

// bars are those of the long form: pooled over a class, and each number.
// TestCoverage's short form has few campaigns, whose numbers within a class are
// as good as one draw each, and only looks for gross errors.
var bars = map[bool]struct{ pooled, each [2]float64 }{
	true:  {[2]float64{0.93, 0.97}, [2]float64{0.915, 0.98}},
	false: {[2]float64{0.7, 1}, [2]float64{0.5, 1}},
}

func report(t *testing.T, name string, n int, total score) {
	long := n >= 300
	bar := bars[long]
	if name == otherNoise && long {
		bar.pooled, bar.each = [2]float64{0.90, 0.98}, [2]float64{0.90, 0.985}
	}
	keys := sortedKeys(total)
	class := map[string]*tally{}
	lowest, highest := map[string]float64{}, map[string]float64{}
	for _, k := range keys {
		v := total[k]
		c := className(k)
		if class[c] == nil {
			class[c] = &tally{}
			lowest[c], highest[c] = 1, 0
		}
		share := float64(v.hit) / float64(v.n)
		lowest[c], highest[c] = min(lowest[c], share), max(highest[c], share)
		class[c].hit += v.hit
		class[c].n += v.n
		class[c].z2 += v.z2
		t.Logf("  %-42s %6.3f of %5d   mean z %6.3f, rms z %.3f", k, share, v.n, v.z/float64(v.n), math.Sqrt(v.z2/float64(v.n)))
		if c != "alarm" && v.n >= n/2 && (share < bar.each[0] || share > bar.each[1]) {
			t.Errorf("%s: the intervals of %s hold the truth in %.3f of %d", name, k, share, v.n)
		}
	}
	for _, c := range []string{"factor", "law", "constant", "G'", "tan δ", "alarm"} {
		v := class[c]
		if v == nil {
			continue
		}
		share := float64(v.hit) / float64(v.n)
		t.Logf("| %s | %s | %d | %.3f | %.3f to %.3f | %.2f |", name, c, n, share, lowest[c], highest[c], math.Sqrt(v.z2/float64(v.n)))
		switch {
		case c == "alarm" && share < 0.96 && n > 20:
			t.Errorf("%s: something is denied in %.3f of %d sound campaigns", name, 1-share, v.n)
		case c != "alarm" && v.n >= 100 && (share < bar.pooled[0] || share > bar.pooled[1]):
			t.Errorf("%s: the intervals of class %s hold the truth in %.3f of %d", name, c, share, v.n)
		}
	}
}

// TestNoiseless: measurements without errors give the simulated shift factors
// to 0.002 decade and the complex modulus to 0.5 % everywhere in the domain.
func TestNoiseless(t *testing.T) {
	for _, sc := range scenarios() {
		campaign, err := data.OpenFS(demo.Campaign(sc.truth, sc.plan.Noiseless(), 1), "campaign.yaml")
		if err != nil {
			t.Fatal(err)
		}
		r, err := Characterize(campaign, nil)
		if err != nil {
			t.Fatal(err)
		}
		c := r.Compound
		Tref := c.ReferenceTempC + 273.15
		worst := 0.0
		for _, s := range r.Shifts {
			T := float64(s.TemperatureC) + 273.15
			want := math.Log10(sc.truth.ShiftFactor(T)) - math.Log10(sc.truth.ShiftFactor(Tref))
			worst = max(worst, math.Abs(c.LogShift(T)-want))
		}
		if worst > 0.002 {
			t.Errorf("%s: log a_T is off by %.4f", sc.name, worst)
		}
		worstG := 0.0
		own := float64(c.Domain.OwnStrain) / 100
		for T := c.Domain.Temperature[0]; T <= c.Domain.Temperature[1]; T += 5 {
			for f := 0.05; f < 200; f *= 1.3 {
				q := models.Condition{Frequency: f, Temperature: T + 273.15, Strain: own}
				if c.Inside(q) != nil {
					continue
				}
				g := sc.truth.Modulus(f, q.Temperature, own)
				worstG = max(worstG, cmplx.Abs(c.Value(q)-g)/cmplx.Abs(g))
			}
		}
		t.Logf("%s: law %s, log a_T within %.1e, G* within %.1e", sc.name, c.Shift.Law, worst, worstG)
		if worstG > 0.005 {
			t.Errorf("%s: G* is off by %.2f %%", sc.name, 100*worstG)
		}
		// Without noise the lattice itself is detectable, without weight.
		if c.Fit.Superposition.Holds == models.HoldsNo {
			t.Errorf("%s: superposition %s", sc.name, c.Fit.Superposition.Holds)
		}
	}
}
