package fitting

import (
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"fmt"
	"math"
	"sort"
	"strings"

	"phaselag/data"
	"phaselag/data/unit"
	"phaselag/fitting/superpose"
	"phaselag/models"
	"phaselag/models/thermal"
)

// Version is the version of this program in what it writes.
const Version = "phaselag 1"

// result assembles what was found.
func (a *answer) result() (*Result, error) {
	c := a.campaign
	r := &Result{
		Format: FormatVersion, Version: Version,
		Campaign: Header{
			Name: c.Name, Laboratory: c.Laboratory, Operator: c.Operator, Vulcanised: c.Vulcanised,
			Compound: a.identity(), Cellular: c.Compound.Cellular, Modulus: string(c.Modulus),
		},
		Inputs: a.inputs(),
		Uncertainty: StatedUncertainty{
			TemperatureScatter: number(c.Uncertainty.TemperatureScatter),
			TemperatureCommon:  number(c.Uncertainty.TemperatureCommon),
			Geometry:           number(100 * c.Uncertainty.Geometry),
			Phase:              number(deg(c.Uncertainty.Phase)),
			ScatterUsed:        unit.NaN(),
		},
		Common: Misfit{PhaseDeg: unit.NaN(), PhaseFloorDeg: unit.NaN(), Percent: unit.NaN(), PercentFloor: unit.NaN(), P: unit.NaN(), FreeVertical: unit.NaN(), FreeVerticalFit: unit.NaN(), FreeVerticalU: unit.NaN()},
		Fit:    Counts{DOF: unit.NaN()},
	}
	r.Tests = a.testSummaries()
	r.Fixed = a.fixed()
	a.fixedFindings(r.Fixed)
	if a.final != nil {
		compound, err := a.compound()
		if err != nil {
			return nil, fmt.Errorf("the fitted compound does not hold its own contract: %w", err)
		}
		r.Compound = compound
		r.Uncertainty.ScatterUsed = number(a.scatter)
		a.fill(r)
	}
	r.Points = a.points()
	r.Findings = append([]data.Finding{}, c.Findings...)
	known := map[string]bool{}
	for _, f := range c.Findings {
		known[f.Code] = true
	}
	for _, f := range a.found {
		// What the tables alone showed is not said twice.
		if !known[f.Code] {
			r.Findings = append(r.Findings, f)
		}
	}
	sort.SliceStable(r.Findings, func(i, j int) bool { return rank(r.Findings[i].Severity) < rank(r.Findings[j].Severity) })
	r.Assumptions = a.assumptions()
	r.noNil()
	if r.Compound != nil {
		return r, r.sign()
	}
	return r, nil
}

func rank(s data.Severity) int {
	switch s {
	case data.Severe:
		return 0
	case data.Doubt:
		return 1
	}
	return 2
}

// sign puts the hash of the result, without the hash, into the compound's
// provenance.
func (r *Result) sign() error {
	b, err := json.Marshal(r)
	if err != nil {
		return err
	}
	sum := sha256.Sum256(b)
	c := *r.Compound
	c.Provenance.ResultSHA256 = hex.EncodeToString(sum[:])
	signed, err := models.New(c)
	if err != nil {
		return err
	}
	r.Compound = signed
	return nil
}

func (r *Result) noNil() {
	empty(&r.Tests)
	empty(&r.Shifts)
	empty(&r.Laws)
	empty(&r.Constants)
	empty(&r.Vertical)
	empty(&r.Amplitude)
	empty(&r.Parameters)
	empty(&r.Specimens)
	empty(&r.Runs)
	empty(&r.Noise)
	empty(&r.Isotherms)
	empty(&r.Fixed)
	empty(&r.Points)
	empty(&r.Findings)
	empty(&r.Assumptions)
	empty(&r.Inputs)
	empty(&r.Files)
}

func empty[T any](s *[]T) {
	if *s == nil {
		*s = []T{}
	}
}

func (a *answer) testSummaries() []TestSummary {
	var out []TestSummary
	for _, t := range a.campaign.Tests {
		s := TestSummary{
			Name: t.Name, Kind: string(t.Kind), Files: append([]string{}, t.Files...), Specimen: t.Specimen, Mounting: t.Mounting,
			Tested: t.Tested, Deformation: string(t.Deformation), Conditioning: conditioning(t.Conditioning),
			Runs: len(t.Runs), Points: len(t.StaticValues), Used: len(t.StaticValues),
		}
		temp, freq, strain := noRange(), noRange(), noRange()
		for _, run := range t.Runs {
			for _, p := range run.Points {
				s.Points++
				if p.Used {
					s.Used++
				}
				temp, freq, strain = widen(temp, p.Temperature), widen(freq, p.Frequency), widen(strain, p.Strain)
			}
		}
		for _, v := range t.StaticValues {
			temp, strain = widen(temp, v.Temperature), widen(strain, v.Strain)
		}
		s.Temperature = pairOf(temp, degreesC)
		s.Frequency = pairOf(freq, func(x float64) float64 { return x })
		s.Strain = pairOf(strain, func(x float64) float64 { return 100 * x })
		out = append(out, s)
	}
	return out
}

func noRange() [2]float64 { return [2]float64{math.Inf(1), math.Inf(-1)} }

func pairOf(r [2]float64, f func(float64) float64) [2]unit.Number {
	if r[0] > r[1] {
		return [2]unit.Number{unit.NaN(), unit.NaN()}
	}
	return [2]unit.Number{number(f(r[0])), number(f(r[1]))}
}

// fill writes everything that comes from the fits.
func (a *answer) fill(r *Result) {
	s := a.final
	cov := s.Covariance()
	t95 := models.Quantile(a.dof())
	r.Fit = Counts{
		Rows: len(a.problem.Rows), Columns: 1 + len(s.Form.Lattice), Nonlinear: len(s.Theta),
		Iterations: s.Iterations, Evaluations: s.Evaluations, DOF: number(a.dof()),
	}
	a.fillShifts(r, cov)
	r.Laws = candidates(a.laws)
	r.Vertical = candidates(a.vertical)
	r.Amplitude = candidates(a.amplitude)

	param := func(name, u string, value, dev, limit float64) {
		p := Parameter{Name: name, Unit: u, Value: number(value), U: number(dev), U95: number(t95 * dev), Determined: dev <= limit}
		r.Parameters = append(r.Parameters, p)
	}
	idx := s.Indices()
	switch s.Form.Law {
	case superpose.WLF:
		c1, c2 := s.Theta[idx.Law], s.Theta[idx.Law+1]
		common := a.campaign.Uncertainty.TemperatureCommon
		if math.IsNaN(common) {
			common = 0
		}
		param("C1", "", c1, math.Hypot(cov.Theta(idx.Law).Deviation(), c1/c2*common), math.Abs(c1)/2)
		param("C2", "K", c2, math.Hypot(cov.Theta(idx.Law+1).Deviation(), common), math.Abs(c2)/2)
	case superpose.Arrhenius:
		e := s.Theta[idx.Law]
		// A common error δ of all temperatures changes E_a by −2δ/T of itself.
		common := a.campaign.Uncertainty.TemperatureCommon
		if math.IsNaN(common) {
			common = 0
		}
		param("activation energy of the shift", "kJ/mol", e, math.Hypot(cov.Theta(idx.Law).Deviation(), 2*e*common/a.reference), math.Abs(e)/2)
	}
	if s.Form.Filler {
		critical, exponent := s.Kraus()
		nl := len(s.Form.Lattice)
		dev := func(root superpose.Root) float64 {
			if root == nil {
				return math.NaN()
			}
			return root.Deviation()
		}
		g := a.problem.UGeometry / math.Sqrt(float64(a.problem.Factors))
		withScale := func(root superpose.Root, value float64) float64 { return math.Hypot(dev(root)/1e6, g*value) }
		st, lo := s.FillerStorage/1e6, s.FillerLoss/1e6
		param("filler storage ΔG′", "MPa", st, withScale(cov.Modulus(1+nl), st), st/2)
		param("filler loss ΔG″", "MPa", lo, withScale(cov.Modulus(2+nl), lo), lo/2)
		param("critical strain", "%", 100*critical, 100*critical*cov.Theta(idx.Critical).Deviation(), 50*critical)
		param("Kraus exponent m", "", exponent, cov.Theta(idx.Exponent).Deviation(), exponent/2)
		if idx.Activation >= 0 {
			param("filler activation energy", "kJ/mol", s.Activation(), cov.Theta(idx.Activation).Deviation(), 5)
		}
	}
	if root := cov.PhaseRoot(); root != nil {
		param("common phase error", "°", deg(s.Phase()), deg(root.Deviation()), math.Inf(1))
	}
	for i, p := range a.pieces {
		f := SpecimenFactor{Specimen: p.specimen, Mounting: p.mounting, Factor: number(s.Factor(i)), U: number(a.problem.UGeometry)}
		if root := cov.FactorRoot(i); root != nil {
			f.U = number(root.Deviation())
		}
		r.Specimens = append(r.Specimens, f)
	}
	for j, ref := range a.runs {
		run := a.task.run(ref)
		o := RunOffset{
			Test: a.campaign.Tests[ref.test].Name, Run: run.Name, TemperatureC: number(degreesC(run.Temperature)),
			Offset: number(s.Offset(j)), U: unit.NaN(), PriorU: number(a.problem.Runs[j].U),
		}
		if root := cov.OffsetRoot(j); root != nil {
			o.U = number(root.Deviation())
		}
		r.Runs = append(r.Runs, o)
	}
	for g, kind := range a.kinds {
		n := a.noise[g]
		out := Noise{Kind: string(kind), Magnitude: number(100 * n.Magnitude), MagnitudeDOF: number(n.MagnitudeDOF), Phase: number(deg(n.Phase)), PhaseDOF: number(n.PhaseDOF)}
		if kind == data.Relaxation {
			out.Phase, out.PhaseDOF = unit.NaN(), unit.NaN()
		}
		r.Noise = append(r.Noise, out)
	}
	if sep := a.separate; len(sep.Knots) > 0 {
		r.Common.PhaseDeg, r.Common.PhaseFloorDeg = number(deg(sep.Phase.Joint)), number(deg(sep.Phase.Floor))
		r.Common.Percent, r.Common.PercentFloor = number(100*sep.Relative.Joint), number(100*sep.Relative.Floor)
		r.Common.P, r.Common.Replicates = number(sep.P), sep.Draws
		for _, k := range sep.Knots {
			r.Isotherms = append(r.Isotherms, IsothermMisfit{
				TemperatureC: number(degreesC(k.T)), Points: k.Points, PhaseDeg: number(deg(k.Phase)), Percent: number(100 * k.Relative),
				BeyondDeg: number(deg(k.BeyondPhase)), BeyondPercent: number(100 * k.BeyondRelative),
			})
		}
	}
	if a.freeUp != nil {
		span, u := a.freeSpan()
		r.Common.FreeVertical, r.Common.FreeVerticalU = number(span), number(u)
		r.Common.FreeVerticalFit = number(deg(a.freeUpPhase))
	}
}

// commonShift is what the calibration of temperature adds to the uncertainty of
// log a_T: it moves T and T_ref together.
func (a *answer) commonShift(T float64) float64 {
	u, law := a.campaign.Uncertainty.TemperatureCommon, a.final.Law()
	if law == nil || !(u > 0) {
		return 0
	}
	return u * math.Abs(law.Slope(T)-law.Slope(a.reference))
}

// preferredC are the temperatures of ISO 23529 and ASTM D1349-09, °C, at which
// constants and properties are stated (ASTM list: its public summary).
var preferredC = []float64{-75, -70, -55, -40, -25, -10, 0, 23, 35, 40, 50, 55, 70, 85, 90, 100, 105, 120, 125, 130, 135, 150, 155, 160, 175, 180, 200, 225, 250, 275, 300}

// Preferred lists the standard test temperatures of ISO 23529 and ASTM D1349
// within [lo, hi], °C.
func Preferred(lo, hi float64) []float64 {
	var out []float64
	for _, t := range preferredC {
		if t >= lo && t <= hi {
			out = append(out, t)
		}
	}
	return out
}

func (a *answer) fillShifts(r *Result, cov *superpose.Covariance) {
	s := a.final
	if a.free == nil {
		return
	}
	freeCov := a.free.Covariance()
	overlap := a.overlapShifts()
	for i, T := range a.problem.Knots {
		u := freeCov.LogShift(T).Deviation()
		u = math.Hypot(u, a.commonShift(T))
		row := Shift{
			TemperatureC: number(degreesC(T)), Log: number(a.free.LogShift(T)), U: number(u),
			Overlap: number(overlap.Log[i]), Law: unit.NaN(), LawU: unit.NaN(),
			Offset: number(a.knotOffset(i)), B: number(s.Vertical(i)), Determined: u <= notDetermined,
		}
		if !row.Determined {
			row.U = unit.NaN()
			a.find("shift-factor-not-determined", data.Doubt, "",
				fmt.Sprintf("log a_T at %s has a standard uncertainty of %.2g decades", celsius(T), u),
				"the isotherm hardly depends on frequency", "test lower temperatures or a wider range of frequencies")
		}
		if s.Form.Law != superpose.Factors {
			row.Law = number(s.LogShift(T))
			row.LawU = number(math.Hypot(cov.LogShift(T).Deviation(), a.commonShift(T)))
		}
		r.Shifts = append(r.Shifts, row)
	}
	w, ok := s.Law().(thermal.WLF)
	if !ok {
		return
	}
	i := s.Indices().Law
	r1, r2 := cov.Theta(i), cov.Theta(i+1)
	lo, hi := degreesC(a.problem.Knots[0]), degreesC(a.problem.Knots[len(a.problem.Knots)-1])
	at := append([]float64{degreesC(a.reference)}, Preferred(lo, hi)...)
	seen := map[float64]bool{}
	for _, tc := range at {
		if seen[tc] {
			continue
		}
		seen[tc] = true
		v := w.At(tc + zeroC)
		j := w.AtJacobian(tc + zeroC)
		b1, b2 := make(superpose.Root, len(r1)+1), make(superpose.Root, len(r1)+1)
		// A common error δ of all temperatures moves the pole: C2 falls by δ and
		// C1C2 stays.
		if u := a.campaign.Uncertainty.TemperatureCommon; u > 0 {
			b1[len(r1)], b2[len(r1)] = v.C1/v.C2*u, -u
		}
		var dot float64
		for k := range r1 {
			b1[k] = j[0][0]*r1[k] + j[0][1]*r2[k]
			b2[k] = j[1][0]*r1[k] + j[1][1]*r2[k]
			dot += b1[k] * b2[k]
		}
		u1, u2 := b1.Deviation(), b2.Deviation()
		r.Constants = append(r.Constants, Constants{
			ReferenceC: tc, C1: number(v.C1), C1U: number(u1), C2: number(v.C2), C2U: number(u2), Correlation: number(dot / (u1 * u2)),
		})
	}
}

func candidates(rivals []rival) []Candidate {
	var out []Candidate
	best := math.Inf(1)
	for _, v := range rivals {
		best = min(best, v.s.AICc())
	}
	for _, v := range rivals {
		n := v.s.Constants()
		out = append(out, Candidate{Name: v.name, Constants: n, AICc: number(v.s.AICc()), Delta: number(v.s.AICc() - best), Chosen: v.chosen, Note: v.note})
	}
	return out
}

// points lists every row with what became of it.
func (a *answer) points() []Point {
	at := map[origin]int{}
	for i, o := range a.origin {
		at[o] = i
	}
	var out []Point
	nan := unit.NaN()
	for i, t := range a.campaign.Tests {
		for j, run := range t.Runs {
			for k, p := range run.Points {
				o := origin{i, j, k}
				row := Point{
					Test: t.Name, Kind: string(t.Kind), File: p.File, Row: p.Row, Specimen: t.Specimen, Run: run.Name,
					Frequency: number(p.Frequency), TemperatureC: number(degreesC(p.Temperature)), Nominal: number(degreesC(run.Temperature)),
					Offset: nan, Strain: number(100 * p.Strain), Time: number(p.Time),
					Storage: number(p.Storage / 1e6), Loss: number(p.Loss / 1e6),
					ReducedFrequency: nan, FittedStorage: nan, FittedLoss: nan, ResidualPercent: nan, ResidualDeg: nan, Weight: nan,
					Used: p.Used, Reason: p.Reason,
				}
				if why := a.reason[o]; row.Used && why != "" {
					row.Used, row.Reason = false, why
				}
				if n, ok := at[o]; ok && a.final != nil {
					a.fitted(&row, n)
				}
				out = append(out, row)
			}
		}
	}
	return out
}

func (a *answer) fitted(row *Point, n int) {
	s := a.final
	r := a.problem.Rows[n]
	m, d := s.Model(n), s.Misfit(n)
	off := s.Offset(r.Run)
	row.Offset = number(off)
	al := math.Pow(10, s.LogShift(r.T+off))
	row.FittedStorage = number(real(m) / 1e6)
	row.ResidualPercent = number(100 * real(d))
	row.Weight = 1
	if r.Relaxation {
		row.ReducedFrequency = number(al / (2 * math.Pi * r.Time))
		return
	}
	row.ReducedFrequency = number(r.Omega / (2 * math.Pi) * al)
	row.FittedLoss = number(imag(m) / 1e6)
	row.ResidualDeg = number(deg(imag(d)))
}

// fixed averages the oscillatory measurements at one temperature, frequency
// and amplitude, as far as the temperature dependence at one frequency needs:
// for every frequency of temperature sweeps and of single-frequency tests.
func (a *answer) fixed() []FixedFrequency {
	type key struct{ f, T float64 } // Hz, °C
	type sums struct {
		n                      int
		st, lo, eta, st2, eta2 float64
		strain                 float64
	}
	groups := map[key]*sums{}
	a.eachRun(func(ref runRef, test *data.Test, run *data.Run) {
		if test.Kind != data.TemperatureSweep && (test.Kind != data.FrequencySweep || distinctFrequencies(run) > 1) {
			return
		}
		for _, p := range run.Points {
			if !p.Used {
				continue
			}
			T := math.Round((run.Temperature-zeroC)*10) / 10
			if math.IsNaN(T) {
				T = math.Round(p.Temperature - zeroC)
			}
			k := key{f: round6(p.Frequency), T: T}
			g := groups[k]
			if g == nil {
				g = &sums{}
				groups[k] = g
			}
			eta := p.Loss / p.Storage
			g.n++
			g.st, g.lo, g.eta = g.st+p.Storage, g.lo+p.Loss, g.eta+eta
			g.st2, g.eta2 = g.st2+p.Storage*p.Storage, g.eta2+eta*eta
			g.strain += p.Strain
		}
	})
	var keys []key
	for k := range groups {
		keys = append(keys, k)
	}
	sort.Slice(keys, func(i, j int) bool {
		if keys[i].f != keys[j].f {
			return keys[i].f < keys[j].f
		}
		return keys[i].T < keys[j].T
	})
	var out []FixedFrequency
	for _, k := range keys {
		g := groups[k]
		n := float64(g.n)
		half := func(sum, sum2 float64) float64 {
			if g.n < 2 {
				return math.NaN()
			}
			v := max(0, sum2-sum*sum/n) / (n - 1)
			return models.Quantile(n-1) * math.Sqrt(v/n)
		}
		out = append(out, FixedFrequency{
			TemperatureC: number(k.T), Frequency: number(k.f), Strain: number(100 * g.strain / n), Points: g.n,
			Storage: number(g.st / n / 1e6), Loss: number(g.lo / n / 1e6), LossFactor: number(g.eta / n),
			StorageU95: number(half(g.st, g.st2) / 1e6), LossFactorU95: number(half(g.eta, g.eta2)),
		})
	}
	return out
}

func round6(x float64) float64 { return math.Round(x*1e6) / 1e6 }

// fixedFindings doubts a modulus that falls on cooling, and names the peak of
// the loss factor.
func (a *answer) fixedFindings(rows []FixedFrequency) {
	for i := 0; i < len(rows); {
		j := i
		for j < len(rows) && rows[j].Frequency == rows[i].Frequency {
			j++
		}
		a.coldSoft(rows[i:j])
		a.lossPeak(rows[i:j])
		i = j
	}
}

// coldDrop is by how much a colder modulus must lie below a warmer one to be
// doubted, relative.
const coldDrop = 0.02

func (a *answer) coldSoft(rows []FixedFrequency) {
	stiffest := -1
	var soft []string
	for i := range rows {
		if stiffest < 0 || rows[i].Storage > rows[stiffest].Storage {
			stiffest = i
		}
	}
	for i := 0; i < stiffest; i++ {
		if float64(rows[i].Storage) < (1-coldDrop)*float64(rows[stiffest].Storage) {
			soft = append(soft, fmt.Sprintf("%.4g MPa at %s", float64(rows[i].Storage), celsius(float64(rows[i].TemperatureC)+zeroC)))
		}
	}
	if len(soft) > 0 {
		a.find("softer-when-colder", data.Doubt, "",
			fmt.Sprintf("%s′ is %s, below %.4g MPa at %s", a.symbol(), strings.Join(soft, " and "), float64(rows[stiffest].Storage), celsius(float64(rows[stiffest].TemperatureC)+zeroC)),
			"slip, loss of contact or preload at the cold end, another specimen, or a load cell at its limit; a rubber does not soften on cooling",
			"look at contact and static load at these temperatures and test again")
	}
}

func (a *answer) lossPeak(rows []FixedFrequency) {
	at := -1
	for i := range rows {
		if at < 0 || rows[i].LossFactor > rows[at].LossFactor {
			at = i
		}
	}
	if at <= 0 || at >= len(rows)-1 || len(rows) < 5 {
		return
	}
	r := rows[at]
	a.find("loss-factor-peak", data.Note, "",
		fmt.Sprintf("the loss factor at %.4g Hz is largest, %.3f, at %s (peak among the tested temperatures)", float64(r.Frequency), float64(r.LossFactor), celsius(float64(r.TemperatureC)+zeroC)),
		"glass transition at this frequency, by the peak of tan δ", "")
}
