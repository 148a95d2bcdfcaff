package fitting

import (
	"fmt"
	"math"
	"sort"

	"phaselag/data"
	"phaselag/fitting/superpose"
)

// zeroC is 0 °C in K.
const zeroC = 273.15

const (
	// sameTemperature is how far apart the nominal temperatures of two runs
	// may lie to be one tested temperature, K.
	sameTemperature = 0.8
	// rampTimes: relaxation rows earlier than this many ramp times after the
	// step are not yet a relaxation.
	rampTimes = 10
	// lagTime and lagBase give the prior of a temperature sweep's lag:
	// rate·25 s + 0.5 K, our own rule.
	lagTime = 25.0
	lagBase = 0.5
)

// layoutOf is a campaign laid out for the estimator: rows, and where each came
// from.
type task struct {
	campaign *data.Campaign
	problem  *superpose.Problem
	origin   []origin // per row of the problem
	runs     []runRef // per run of the problem
	pieces   []piece  // per specimen factor
	kinds    []data.Kind
	isotherm []bool // per row: it belongs to a frequency sweep
	shared   []bool // per run: its offset has the common scatter
	scatter  float64
	stated   bool // scatter was stated

	knots     []knot // all tested temperatures with frequency sweeps, cold to warm
	pairs     []superpose.Pair
	component [2]int // first and last knot that hang together with the reference

	reason map[origin]string // why a point is left out
	found  []data.Finding
	notes  []string // assumptions
}

type origin struct{ test, run, point int }
type runRef struct{ test, run int }
type piece struct{ specimen, mounting string }

type knot struct {
	T    float64
	runs []runRef
}

func (t *task) find(code string, severity data.Severity, test, evidence, cause, remedy string) {
	t.found = append(t.found, data.Finding{Code: code, Severity: severity, Test: test, Evidence: evidence, Cause: cause, Remedy: remedy})
}

func (t *task) assume(format string, a ...any) {
	t.notes = append(t.notes, fmt.Sprintf(format, a...))
}

func (t *task) eachRun(f func(ref runRef, test *data.Test, run *data.Run)) {
	for i := range t.campaign.Tests {
		test := &t.campaign.Tests[i]
		for j := range test.Runs {
			f(runRef{i, j}, test, &test.Runs[j])
		}
	}
}

func (t *task) run(r runRef) *data.Run { return &t.campaign.Tests[r.test].Runs[r.run] }

func used(run *data.Run) int {
	n := 0
	for _, p := range run.Points {
		if p.Used {
			n++
		}
	}
	return n
}

// gatherKnots groups the frequency sweeps by tested temperature.
func (t *task) gatherKnots() {
	t.eachRun(func(ref runRef, test *data.Test, run *data.Run) {
		if test.Kind != data.FrequencySweep || used(run) < 2 || distinctFrequencies(run) < 2 {
			return
		}
		t.knots = append(t.knots, knot{run.Temperature, []runRef{ref}})
	})
	sort.SliceStable(t.knots, func(i, j int) bool { return t.knots[i].T < t.knots[j].T })
	var out []knot
	for _, k := range t.knots {
		if n := len(out); n > 0 && k.T-out[n-1].T <= sameTemperature {
			m := float64(len(out[n-1].runs))
			out[n-1].T = (out[n-1].T*m + k.T) / (m + 1)
			out[n-1].runs = append(out[n-1].runs, k.runs...)
			continue
		}
		out = append(out, k)
	}
	t.knots = out
}

func distinctFrequencies(run *data.Run) int {
	seen := map[float64]bool{}
	for _, p := range run.Points {
		if p.Used {
			seen[p.Frequency] = true
		}
	}
	return len(seen)
}

// isotherms gives the curves of the knots, sorted by frequency.
func (t *task) isotherms() []superpose.Isotherm {
	var out []superpose.Isotherm
	for _, k := range t.knots {
		var pts []data.Point
		for _, r := range k.runs {
			for _, p := range t.run(r).Points {
				if p.Used {
					pts = append(pts, p)
				}
			}
		}
		sort.SliceStable(pts, func(i, j int) bool { return pts[i].Frequency < pts[j].Frequency })
		s := superpose.Isotherm{T: k.T}
		for i := 0; i < len(pts); {
			// Repeats at one frequency count as their mean.
			j, sum := i, complex(0, 0)
			for ; j < len(pts) && pts[j].Frequency <= pts[i].Frequency*(1+1e-6); j++ {
				sum += complex(pts[j].Storage, pts[j].Loss)
			}
			s.Frequency = append(s.Frequency, pts[i].Frequency)
			s.Modulus = append(s.Modulus, sum/complex(float64(j-i), 0))
			i = j
		}
		out = append(out, s)
	}
	return out
}

// connect finds the neighbours that overlap and the stretch of knots that
// hangs together with the reference temperature.
func (t *task) connect(reference float64) {
	t.pairs = superpose.Neighbours(t.isotherms())
	at := 0
	for i, k := range t.knots {
		if math.Abs(k.T-reference) < math.Abs(t.knots[at].T-reference) {
			at = i
		}
	}
	lo, hi := at, at
	for lo > 0 && !math.IsNaN(t.pairs[lo-1].LogA) {
		lo--
	}
	for hi < len(t.knots)-1 && !math.IsNaN(t.pairs[hi].LogA) {
		hi++
	}
	t.component = [2]int{lo, hi}
	for i, p := range t.pairs {
		if math.IsNaN(p.LogA) {
			t.find("isotherms-do-not-overlap", data.Severe, "",
				noOverlapText(t.knots[i].T, t.knots[i+1].T, -p.Window),
				"steps of temperature too wide for the range of frequencies",
				"test a temperature between them, or a wider range of frequencies")
		}
	}
	if lo > 0 || hi < len(t.knots)-1 {
		t.find("isotherms-left-out", data.Severe, "",
			fmt.Sprintf("only %s to %s hang together by overlap with the reference temperature; the other isotherms are left out", celsius(t.knots[lo].T), celsius(t.knots[hi].T)),
			"no overlap", "close the gap with a temperature between")
	}
}

func noOverlapText(cold, warm, gap float64) string {
	text := fmt.Sprintf("the moduli at %s and %s have no common range", celsius(cold), celsius(warm))
	if !math.IsInf(gap, 0) {
		text += fmt.Sprintf(": the nearest pair misses by %.2g decades", gap)
	}
	return text
}

// celsius prints a temperature for people.
func celsius(T float64) string {
	c := math.Round((T-zeroC)*10) / 10
	if c < 0 {
		return fmt.Sprintf("−%g °C", -c)
	}
	return fmt.Sprintf("%g °C", c+0)
}

// known counts what the strain sweeps can carry.
type amplitudeData struct {
	sweeps bool
	f0     float64
	range_ [2]float64 // strain
	temps  [2]float64
	freqs  [2]float64
}

// amplitude looks whether the strain sweeps can carry an amplitude law.
func (t *task) amplitude() amplitudeData {
	a := amplitudeData{
		range_: [2]float64{math.Inf(1), 0}, temps: [2]float64{math.Inf(1), 0}, freqs: [2]float64{math.Inf(1), 0},
	}
	if t.campaign.Analysis.AmplitudeLaw == "none" {
		return a
	}
	points, runs := 0, 0
	var logF float64
	unknown := 0
	t.eachRun(func(ref runRef, test *data.Test, run *data.Run) {
		for _, p := range run.Points {
			if !p.Used {
				continue
			}
			switch test.Kind {
			case data.FrequencySweep, data.TemperatureSweep:
				if math.IsNaN(p.Strain) {
					unknown++
				}
			case data.StrainSweep:
				points++
				logF += math.Log(p.Frequency)
				a.range_ = widen(a.range_, p.Strain)
				a.temps = widen(a.temps, run.Temperature)
				a.freqs = widen(a.freqs, p.Frequency)
			}
		}
		if test.Kind == data.StrainSweep {
			runs++
		}
	})
	switch {
	case runs == 0:
		t.find("no-strain-sweep", data.Note, "", "no strain sweep was tested",
			"", "the strain dependence of the modulus (Payne effect) is not known: test strain sweeps at three temperatures if the compound is filled")
		return a
	case points < 5 || a.range_[1] < 3*a.range_[0]:
		t.find("strain-sweep-too-short", data.Doubt, "",
			fmt.Sprintf("%d points from %.3g to %.3g %% strain", points, 100*a.range_[0], 100*a.range_[1]),
			"too few amplitudes for an amplitude law", "test at least five amplitudes over a factor of ten; the amplitude law is left out")
		return a
	case unknown > 0:
		t.find("isotherm-strain-unknown", data.Doubt, "",
			fmt.Sprintf("%d points of frequency or temperature sweeps have no strain amplitude", unknown),
			"the strain of the sweeps is not stated", "state `strain:` for these tests; the amplitude law is left out, since it could not be tied to the isotherms")
		return a
	}
	a.sweeps, a.f0 = true, math.Exp(logF/float64(points))
	return a
}

func widen(r [2]float64, x float64) [2]float64 {
	if math.IsNaN(x) {
		return r
	}
	return [2]float64{min(r[0], x), max(r[1], x)}
}

// build lays out all rows that the estimator takes.
func (t *task) build(reference float64, amp amplitudeData) {
	c := t.campaign
	p := &superpose.Problem{Reference: reference, F0: amp.f0}
	t.origin, t.runs, t.pieces, t.kinds, t.isotherm, t.shared = nil, nil, nil, nil, nil, nil
	if p.F0 == 0 {
		p.F0 = 1
	}
	lo, hi := math.Inf(-1), math.Inf(1)
	if len(t.knots) > 0 {
		lo, hi = t.knots[t.component[0]].T, t.knots[t.component[1]].T
		for _, k := range t.knots[t.component[0] : t.component[1]+1] {
			p.Knots = append(p.Knots, k.T)
		}
	} else {
		p.Knots = []float64{reference}
	}
	p.UGeometry = c.Uncertainty.Geometry
	if math.IsNaN(p.UGeometry) {
		p.UGeometry = 0
	}
	if u := c.Uncertainty.Phase; u > 0 {
		p.UPhase = u
	}
	pieceOf := map[piece]int{}
	kindOf := map[data.Kind]int{}
	t.eachRun(func(ref runRef, test *data.Test, run *data.Run) {
		why := ""
		switch {
		case test.Kind == data.FrequencySweep && len(t.knots) > 0 && !t.inKnots(ref):
			why = "isotherm without overlap, or with fewer than two frequencies"
		case test.Kind == data.StrainSweep && !amp.sweeps:
			why = "no amplitude law is fitted"
		case len(t.knots) == 0 && test.Kind != data.Relaxation:
			why = "no spectrum can be fitted without frequency sweeps"
		}
		index := -1
		for k, pt := range run.Points {
			o := origin{ref.test, ref.run, k}
			if !pt.Used {
				continue
			}
			reason := why
			T := pt.Temperature
			switch {
			case reason != "":
			case test.Kind != data.FrequencySweep && (T < lo-sameTemperature || T > hi+sameTemperature):
				reason = "temperature outside the superposed isotherms"
			case amp.sweeps && math.IsNaN(pt.Strain):
				reason = "strain not known"
			case test.Kind == data.Relaxation && pt.Time < rampTimes*test.RampTime:
				reason = fmt.Sprintf("earlier than %d ramp times after the step", rampTimes)
			}
			if reason != "" {
				t.reason[o] = reason
				continue
			}
			if index < 0 {
				index = len(p.Runs)
				p.Runs = append(p.Runs, superpose.Run{U: t.offsetPrior(test)})
				t.runs = append(t.runs, ref)
				t.shared = append(t.shared, test.Kind != data.TemperatureSweep)
			}
			pc := piece{test.Specimen, test.Mounting}
			if _, ok := pieceOf[pc]; !ok {
				pieceOf[pc] = len(t.pieces)
				t.pieces = append(t.pieces, pc)
			}
			if _, ok := kindOf[test.Kind]; !ok {
				kindOf[test.Kind] = len(t.kinds)
				t.kinds = append(t.kinds, test.Kind)
			}
			row := superpose.Row{
				Relaxation: test.Kind == data.Relaxation,
				Group:      kindOf[test.Kind], Run: index, Factor: pieceOf[pc],
				T: T, Strain: pt.Strain, G: complex(pt.Storage, pt.Loss),
			}
			if row.Relaxation {
				row.Time, row.G = pt.Time, complex(pt.Storage, 0)
			} else {
				row.Omega = 2 * math.Pi * pt.Frequency
			}
			p.Rows = append(p.Rows, row)
			t.origin = append(t.origin, o)
			t.isotherm = append(t.isotherm, test.Kind == data.FrequencySweep)
		}
	})
	p.Factors, p.Groups = max(1, len(t.pieces)), max(1, len(t.kinds))
	t.problem = p
}

func (t *task) inKnots(ref runRef) bool {
	for _, k := range t.knots[t.component[0] : t.component[1]+1] {
		for _, r := range k.runs {
			if r == ref {
				return true
			}
		}
	}
	return false
}

// offsetPrior is the standard deviation of a run's temperature offset.
func (t *task) offsetPrior(test *data.Test) float64 {
	u := t.scatter
	if test.Kind == data.TemperatureSweep {
		rate := math.Abs(test.Rate)
		if math.IsNaN(rate) {
			rate = 0
		}
		return math.Hypot(u, rate*lagTime+lagBase)
	}
	return u
}

// setScatter changes the scatter of all runs.
func (t *task) setScatter(u float64) {
	t.scatter = u
	for j, r := range t.runs {
		t.problem.Runs[j].U = t.offsetPrior(&t.campaign.Tests[r.test])
	}
}

// window is the range of reduced frequencies of the rows, Hz, with shift
// factors logA(T); a relaxation row at t counts as 1/(2πt).
func (t *task) window(logA func(T float64) float64) (lo, hi float64) {
	lo, hi = math.Inf(1), 0
	for _, r := range t.problem.Rows {
		a := math.Pow(10, logA(r.T))
		f := r.Omega / (2 * math.Pi) * a
		if r.Relaxation {
			f = a / (2 * math.Pi * r.Time)
		}
		lo, hi = min(lo, f), max(hi, f)
	}
	return lo, hi
}

// The lattice of relaxation times, τ_k = 10^(k/3) s with integer k, and twice as
// dense where the measurements ask for it (10^(k/6) s has all times of the
// other).
const (
	perDecade  = 3
	beyondFast = 1.5 // decades beyond the fast end of the window
	beyondSlow = 1.0 // decades beyond the slow end
)

// lattice covers a window of reduced frequencies with density times perDecade
// relaxation times a decade.
func lattice(lo, hi float64, density int) []float64 {
	n := float64(perDecade * density)
	first := int(math.Floor(n * (math.Log10(1/(2*math.Pi*hi)) - beyondFast)))
	last := int(math.Ceil(n * (math.Log10(1/(2*math.Pi*lo)) + beyondSlow)))
	var out []float64
	for k := first; k <= last; k++ {
		out = append(out, math.Pow(10, float64(k)/n))
	}
	return out
}

// commonFactor is the relative standard uncertainty of the modulus that all
// measurements share: what is left of the geometry in the mean over specimens whose
// factors are held to mean one, and the calibrations of force and displacement, of
// whose ratio every modulus is made.
func commonFactor(p *superpose.Problem, u data.Uncertainty) float64 {
	sum := p.UGeometry * p.UGeometry / float64(p.Factors)
	for _, v := range []float64{u.Force, u.Displacement} {
		if v > 0 {
			sum += v * v
		}
	}
	return math.Sqrt(sum)
}
