package fitting

import (
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"fmt"
	"math"
	"sort"

	"phaselag/data"
	"phaselag/data/unit"
	"phaselag/fitting/superpose"
	"phaselag/models"
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
	empty(&r.Causality)
	empty(&r.Bootstrap.Rows)
	empty(&r.Compact)
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
		p := Parameter{Name: name, Unit: u, Value: number(value), U: number(dev), U95: number(t95 * dev), Low: unit.NaN(), High: unit.NaN(), Determined: dev <= limit}
		r.Parameters = append(r.Parameters, p)
	}
	idx := s.Indices()
	switch s.Form.Law {
	case superpose.WLF, superpose.Crossover:
		c1, c2 := s.Theta[idx.Law], s.Theta[idx.Law+1]
		common := a.campaign.Uncertainty.TemperatureCommon
		if math.IsNaN(common) {
			common = 0
		}
		param("C1", "", c1, math.Hypot(cov.Theta(idx.Law).Deviation(), c1/c2*common), math.Abs(c1)/2)
		a.profile(r, idx.Law, cov.Theta(idx.Law).Deviation(), c1/c2*common, t95)
		param("C2", "K", c2, math.Hypot(cov.Theta(idx.Law+1).Deviation(), common), math.Abs(c2)/2)
		a.profile(r, idx.Law+1, cov.Theta(idx.Law+1).Deviation(), common, t95)
		if s.Form.Law == superpose.Crossover {
			param("crossover temperature", "°C", degreesC(s.Theta[idx.Law+2]), math.Hypot(cov.Theta(idx.Law+2).Deviation(), common), 10)
		}
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
		g := commonFactor(a.problem, a.campaign.Uncertainty)
		withScale := func(root superpose.Root, value float64) float64 { return math.Hypot(dev(root)/1e6, g*value) }
		st, lo := s.FillerStorage/1e6, s.FillerLoss/1e6
		if s.Form.Scaling {
			st, lo = s.FillerStorage, s.FillerLoss
			param("filler storage ratio α", "", st, cov.Theta(idx.Alpha).Deviation(), st/2)
			param("filler loss ratio β", "", lo, cov.Theta(idx.Beta).Deviation(), lo/2)
		} else {
			param("filler storage ΔG′", "MPa", st, withScale(cov.Modulus(1+nl), st), st/2)
			param("filler loss ΔG″", "MPa", lo, withScale(cov.Modulus(2+nl), lo), lo/2)
		}
		param("critical strain", "%", 100*critical, 100*critical*cov.Theta(idx.Critical).Deviation(), 50*critical)
		if idx.Exponent >= 0 {
			param("Kraus exponent m", "", exponent, cov.Theta(idx.Exponent).Deviation(), exponent/2)
		}
		if idx.Extra >= 0 {
			x, at := s.FillerExtra/1e6, 100*s.ExtraStrain()
			param("extra loss modulus", "MPa", x, withScale(cov.Modulus(3+nl), x), x/2)
			param("extra loss strain", "%", at, at*cov.Theta(idx.Extra).Deviation(), at/2)
		}
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
		out := Noise{Kind: string(kind), Magnitude: number(100 * n.Magnitude), MagnitudeDOF: number(n.MagnitudeDOF), Phase: number(deg(n.Phase)), PhaseDOF: number(n.PhaseDOF), PhaseShare: number(n.Share)}
		if kind == data.Relaxation {
			out.Phase, out.PhaseDOF, out.PhaseShare = unit.NaN(), unit.NaN(), unit.NaN()
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
				BeyondDeg: number(deg(k.BeyondPhase)), BeyondPercent: number(100 * k.BeyondRelative), P: number(k.P),
			})
		}
	}
	r.Causality = a.causality
	a.bootstrap(r)
	a.compacted(r)
	if a.freeUp != nil {
		span, u := a.freeSpan()
		r.Common.FreeVertical, r.Common.FreeVerticalU = number(span), number(u)
		r.Common.FreeVerticalFit = number(deg(a.freeUpPhase))
	}
}

// profile gives the last parameter of the result, θ_i, its interval by profile
// likelihood. common is what the calibration of temperature adds to it, a
// standard uncertainty; it widens both halves in quadrature.
func (a *answer) profile(r *Result, i int, u, common, t95 float64) {
	p := &r.Parameters[len(r.Parameters)-1]
	low, high := a.final.Profile(i, u, t95*t95)
	value := a.final.Theta[i]
	if !math.IsInf(low, 0) {
		p.Low = number(value - math.Hypot(value-low, t95*common))
	}
	if !math.IsInf(high, 0) {
		p.High = number(value + math.Hypot(high-value, t95*common))
	}
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
					MassShare: number(100 * p.MassShare), FrameShare: number(100 * p.FrameShare),
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
	if w := s.Form.Weights; w != nil {
		row.Weight = number(w[n])
	}
	if r.Relaxation {
		row.ReducedFrequency = number(al / (2 * math.Pi * r.Time))
		return
	}
	row.ReducedFrequency = number(r.Omega / (2 * math.Pi) * al)
	row.FittedLoss = number(imag(m) / 1e6)
	row.ResidualDeg = number(deg(imag(d)))
}
