package fitting

import (
	"fmt"
	"math"
	"sort"
	"strconv"

	"phaselag/data"
	"phaselag/data/unit"
	"phaselag/fitting/superpose"
	"phaselag/models"
)

// round15 rounds to 15 significant digits, the precision in which a compound
// is created: Pa to MPa and back changes the last bit of some numbers, so
// whatever is reported comes from the rounded ones.
func round15(x float64) float64 {
	if math.IsNaN(x) || math.IsInf(x, 0) || x == 0 {
		return x
	}
	v, err := strconv.ParseFloat(strconv.FormatFloat(x, 'g', 15, 64), 64)
	if err != nil {
		return x
	}
	return v
}

// number is a rounded number for a file; an infinity, which a file cannot hold
// and which is no measurement, counts as not measured.
func number(x float64) unit.Number {
	if math.IsInf(x, 0) {
		return unit.NaN()
	}
	return unit.Number(round15(x))
}

// degreesC turns K into °C without the noise of the subtraction.
func degreesC(T float64) float64 { return math.Round((T-zeroC)*1e6) / 1e6 }

// notDetermined is the standard uncertainty of log a_T above which a factor is
// reported as not determined, decades.
const notDetermined = 0.1

// compound makes the compound of the final fit.
func (a *answer) compound() (*models.Compound, error) {
	s := a.final
	cov := s.Covariance()
	c := models.Compound{
		Format:         models.FormatVersion,
		Compound:       a.identity(),
		ModulusKind:    string(a.campaign.Modulus),
		PoissonRatio:   unit.Number(a.campaign.PoissonRatio),
		Strain:         models.StrainNote{Measure: a.strainMeasure(), Amplitude: "zero to peak"},
		State:          a.stateOf(),
		ReferenceTempC: degreesC(a.reference),
	}
	var names []string
	var roots []superpose.Root
	keep := func(name string, r superpose.Root) {
		names, roots = append(names, name), append(roots, r)
	}
	scaled := func(r superpose.Root, w float64) superpose.Root {
		out := make(superpose.Root, len(r))
		for i, v := range r {
			out[i] = w * v
		}
		return out
	}

	c.Linear.Equilibrium = round15(s.Equilibrium / 1e6)
	if r := cov.Modulus(0); r != nil {
		keep("linear.equilibrium_modulus_MPa", scaled(r, 1e-6))
	}
	c.Linear.Branches = []models.Branch{}
	for k, g := range s.Branches {
		r := cov.Modulus(1 + k)
		if g <= 0 || r == nil {
			continue
		}
		keep(fmt.Sprintf("linear.branches.%d.modulus_MPa", len(c.Linear.Branches)), scaled(r, 1e-6))
		c.Linear.Branches = append(c.Linear.Branches, models.Branch{Time: round15(s.Form.Lattice[k]), Modulus: round15(g / 1e6)})
	}

	idx := s.Indices()
	c.Shift = models.Shift{Law: models.LawNone, C1: unit.NaN(), C2: unit.NaN(), Activation: unit.NaN(), Factors: a.factors()}
	switch s.Form.Law {
	case superpose.WLF:
		c.Shift.Law = models.LawWLF
		c.Shift.C1, c.Shift.C2 = number(s.Theta[idx.Law]), number(s.Theta[idx.Law+1])
		keep("shift.c1", cov.Theta(idx.Law))
		keep("shift.c2_K", cov.Theta(idx.Law+1))
	case superpose.Arrhenius:
		c.Shift.Law = models.LawArrhenius
		c.Shift.Activation = number(s.Theta[idx.Law])
		keep("shift.activation_kJ_per_mol", cov.Theta(idx.Law))
	case superpose.Factors:
		for i := range c.Shift.Factors {
			T := a.problem.Knots[i]
			c.Shift.Factors[i].LogShift = number(s.LogShift(T))
			r := cov.LogShift(T)
			c.Shift.Factors[i].U = number(r.Deviation())
			if r.Deviation() > 0 {
				keep(fmt.Sprintf("shift.factors.%d.log10_aT", i), r)
			}
		}
	}

	c.Vertical = models.Vertical{Law: models.VerticalNone, Expansion: unit.NaN(), Factors: []models.VerticalFactor{}}
	switch s.Form.Vertical {
	case superpose.Density:
		c.Vertical.Law, c.Vertical.Expansion = models.VerticalDensity, number(s.Form.Expansion)
	case superpose.Bounded, superpose.Free:
		c.Vertical.Law = models.VerticalFactors
		for i, T := range a.problem.Knots {
			b := s.Vertical(i)
			c.Vertical.Factors = append(c.Vertical.Factors, models.VerticalFactor{TemperatureC: degreesC(T), B: number(b)})
			if r := cov.Vertical(T); r.Deviation() > 0 {
				keep(fmt.Sprintf("vertical.factors.%d.b_T", i), scaled(r, b))
			}
		}
	}

	nan := unit.NaN()
	c.Amplitude = models.Amplitude{Law: models.AmplitudeNone, Coupling: models.Overlay, Storage: nan, Loss: nan, Critical: nan, Exponent: nan, Activation: nan, Frequency: models.RateIndependent, ReferenceFrequency: nan}
	if s.Form.Filler {
		critical, exponent := s.Kraus()
		c.Amplitude.Law = models.AmplitudeKraus
		c.Amplitude.Storage, c.Amplitude.Loss = number(s.FillerStorage/1e6), number(s.FillerLoss/1e6)
		c.Amplitude.Critical, c.Amplitude.Exponent = number(100*critical), number(exponent)
		c.Amplitude.Activation = number(s.Activation())
		if s.Form.Kappa == 1 {
			c.Amplitude.Frequency = models.Causal
		}
		c.Amplitude.ReferenceFrequency = number(a.problem.F0)
		nl := len(s.Form.Lattice)
		if r := cov.Modulus(1 + nl); r != nil {
			keep("amplitude.storage_MPa", scaled(r, 1e-6))
		}
		if r := cov.Modulus(2 + nl); r != nil {
			keep("amplitude.loss_MPa", scaled(r, 1e-6))
		}
		keep("amplitude.critical_strain_percent", scaled(cov.Theta(idx.Critical), 100*critical))
		keep("amplitude.exponent", cov.Theta(idx.Exponent))
		if idx.Activation >= 0 {
			keep("amplitude.activation_kJ_per_mol", cov.Theta(idx.Activation))
		}
	}

	if r := cov.PhaseRoot(); r != nil {
		keep(models.ParamPhase, scaled(r, 180/math.Pi))
	}
	// Errors that all measurements share, independent of the fit.
	n := 0
	if len(roots) > 0 {
		n = len(roots[0])
	}
	common := []struct {
		name string
		u    float64
	}{
		{models.ParamSpecimen, a.problem.UGeometry / math.Sqrt(float64(a.problem.Factors))},
		{models.ParamTemperature, a.campaign.Uncertainty.TemperatureCommon},
	}
	var extra []int
	for k, u := range common {
		if u.u > 0 {
			extra = append(extra, k)
		}
	}
	for i := range roots {
		roots[i] = append(roots[i], make(superpose.Root, len(extra))...)
	}
	for j, k := range extra {
		r := make(superpose.Root, n+len(extra))
		r[n+j] = common[k].u
		keep(common[k].name, r)
	}

	c.Static = a.static()
	c.Domain = a.domain()
	c.Fit = models.Fit{
		Points:         len(a.problem.Rows),
		SigmaMagnitude: unit.NaN(), SigmaPhase: unit.NaN(),
		Superposition: a.superposition(),
	}
	for g, kind := range a.kinds {
		if kind == data.FrequencySweep || (len(a.kinds) == 1 && g == 0) {
			c.Fit.SigmaMagnitude = number(100 * a.noise[g].Magnitude)
			if kind != data.Relaxation {
				c.Fit.SigmaPhase = number(deg(a.noise[g].Phase))
			}
		}
	}
	c.Uncertainty = models.Uncertainty{Coverage: 0.95, DegreesOfFreedom: number(a.dof()), Parameters: names, Cholesky: []models.Row{}}
	if names == nil {
		c.Uncertainty.Parameters = []string{}
	}
	for _, row := range superpose.Cholesky(roots) {
		for i := range row {
			row[i] = round15(row[i])
		}
		c.Uncertainty.Cholesky = append(c.Uncertainty.Cholesky, row)
	}
	c.Provenance = models.Provenance{Version: Version, Inputs: a.inputs(), Assumptions: a.assumptions()}
	return models.New(c)
}

// dof is the number of degrees of freedom behind the noise of the sweeps.
func (a *answer) dof() float64 {
	var v float64
	for _, n := range a.noise {
		v += n.MagnitudeDOF + n.PhaseDOF
	}
	return math.Round(v)
}

func (a *answer) identity() models.Identity {
	c := a.campaign.Compound
	return models.Identity{
		Name: c.Name, Polymer: c.Polymer, Batch: c.Batch, Hardness: c.Hardness,
		Density: number(c.Density / 1000), Tested: a.tested(),
	}
}

// tested is the last date on which anything was tested.
func (a *answer) tested() string {
	last := ""
	for _, t := range a.campaign.Tests {
		last = max(last, t.Tested)
	}
	return last
}

func (a *answer) strainMeasure() string {
	if a.campaign.Modulus == data.Young {
		for _, t := range a.campaign.Tests {
			if t.Deformation != "" && t.Deformation != data.SimpleShear {
				return string(t.Deformation)
			}
		}
	}
	return "shear"
}

func (a *answer) stateOf() models.State {
	s := models.State{StaticPercent: unit.NaN()}
	for _, t := range a.campaign.Tests {
		if text := conditioning(t.Conditioning); s.Conditioning == "" {
			s.Conditioning = text
		}
		if s.Deformation == "" {
			s.Deformation = string(t.Deformation)
			for _, sp := range a.campaign.Specimens {
				if sp.Name == t.Specimen && sp.Shape != "" {
					s.Deformation = sp.Shape
				}
			}
		}
		if math.IsNaN(float64(s.StaticPercent)) && !math.IsNaN(t.StaticStrain) {
			s.StaticPercent = number(100 * t.StaticStrain)
		}
	}
	return s
}

func conditioning(c data.Conditioning) string {
	if c.Cycles == 0 {
		return ""
	}
	text := fmt.Sprintf("%d cycles", c.Cycles)
	if !math.IsNaN(c.Strain) && c.Strain != 0 {
		text += fmt.Sprintf(" at %.4g %%", 100*c.Strain)
	}
	if !math.IsNaN(c.Rest) && c.Rest != 0 {
		text += ", rest " + duration(c.Rest)
	}
	return text
}

func duration(s float64) string {
	switch {
	case s >= 3600 && math.Mod(s, 3600) == 0:
		return fmt.Sprintf("%g h", s/3600)
	case s >= 60 && math.Mod(s, 60) == 0:
		return fmt.Sprintf("%g min", s/60)
	}
	return fmt.Sprintf("%.4g s", s)
}

// factors lists the factors free of any law.
func (a *answer) factors() []models.ShiftFactor {
	out := []models.ShiftFactor{}
	s := a.free
	if s == nil {
		T := a.reference
		return append(out, models.ShiftFactor{TemperatureC: degreesC(T), LogShift: 0, U: 0, Offset: unit.NaN()})
	}
	cov := s.Covariance()
	for i, T := range a.problem.Knots {
		u := math.Hypot(cov.LogShift(T).Deviation(), a.commonShift(T))
		f := models.ShiftFactor{TemperatureC: degreesC(T), LogShift: number(s.LogShift(T)), U: number(u), Offset: number(a.knotOffset(i))}
		if !(u <= notDetermined) {
			f.U = unit.NaN()
		}
		out = append(out, f)
	}
	return out
}

// knotOffset is the mean fitted offset of the frequency sweeps of knot i.
func (a *answer) knotOffset(i int) float64 {
	var sum float64
	n := 0
	for _, r := range a.knots[a.component[0]+i].runs {
		for j, ref := range a.runs {
			if ref == r {
				sum += a.final.Offset(j)
				n++
			}
		}
	}
	if n == 0 {
		return math.NaN()
	}
	return sum / float64(n)
}

// static collects the moduli of static tests and the last of each relaxation.
func (a *answer) static() []models.StaticItem {
	out := []models.StaticItem{}
	u := a.campaign.Uncertainty
	for i, t := range a.campaign.Tests {
		for _, v := range t.StaticValues {
			out = append(out, models.StaticItem{
				Modulus: round15(v.Modulus / 1e6), U95: number(1.96 * v.U / 1e6), Strain: number(100 * v.Strain),
				Time: number(v.Time), TemperatureC: number(degreesC(v.Temperature)), Source: "static test " + t.Name,
			})
		}
		if t.Kind != data.Relaxation {
			continue
		}
		for j, run := range t.Runs {
			last := -1
			for k, p := range run.Points {
				if p.Used && a.reason[origin{i, j, k}] == "" && (last < 0 || p.Time > run.Points[last].Time) {
					last = k
				}
			}
			if last < 0 {
				continue
			}
			p := run.Points[last]
			rel := u.Geometry
			for g, kind := range a.kinds {
				if kind == data.Relaxation && g < len(a.noise) {
					rel = math.Hypot(rel, a.noise[g].Magnitude)
				}
			}
			out = append(out, models.StaticItem{
				Modulus: round15(p.Storage / 1e6), U95: number(1.96 * rel * p.Storage / 1e6), Strain: number(100 * p.Strain),
				Time: number(p.Time), TemperatureC: number(degreesC(p.Temperature)), Source: "relaxation test " + t.Name,
			})
		}
	}
	return out
}

// ownStrainSpread is how far an amplitude may lie from the isotherms' own and
// still be the same, where no strain sweep tells more.
const ownStrainSpread = 0.2

func (a *answer) domain() models.Domain {
	s := a.final
	lo, hi := math.Inf(1), math.Inf(-1)
	for i, r := range a.problem.Rows {
		if a.isotherm[i] || len(a.knots) == 0 {
			// Measured temperatures wobble about their nominal value; the domain
			// is that of the nominal ones.
			T := a.task.run(a.runs[r.Run]).Temperature
			lo, hi = min(lo, T), max(hi, T)
		}
	}
	fLo, fHi := math.Inf(1), 0.0
	for i, r := range a.problem.Rows {
		if !a.isotherm[i] && len(a.knots) > 0 {
			continue
		}
		al := math.Pow(10, s.LogShift(r.T))
		f := r.Omega / (2 * math.Pi) * al
		if r.Relaxation {
			f = al / (2 * math.Pi * r.Time)
		}
		fLo, fHi = min(fLo, f), max(fHi, f)
	}
	d := models.Domain{
		Temperature:      models.Range{degreesC(lo), degreesC(hi)},
		ReducedFrequency: models.Range{round15(fLo), round15(fHi)},
		OwnStrain:        number(100 * a.ownStrain()),
	}
	own := a.ownStrain()
	switch {
	case s.Form.Filler:
		r := a.amp.range_
		d.Strain = &models.Range{round15(100 * min(r[0], own)), round15(100 * max(r[1], own))}
		d.AmplitudeMeasuredAt = &models.AmplitudeMeasuredAt{
			Temperature: models.Range{degreesC(a.amp.temps[0]), degreesC(a.amp.temps[1])},
			Frequency:   models.Range{round15(a.amp.freqs[0]), round15(a.amp.freqs[1])},
		}
	case !math.IsNaN(own):
		d.Strain = &models.Range{round15(100 * own * (1 - ownStrainSpread)), round15(100 * own * (1 + ownStrainSpread))}
	}
	return d
}

// ownStrain is the median amplitude of the isotherms, m/m.
func (a *answer) ownStrain() float64 {
	var v []float64
	for i, r := range a.problem.Rows {
		if (a.isotherm[i] || len(a.knots) == 0) && !math.IsNaN(r.Strain) {
			v = append(v, r.Strain)
		}
	}
	if len(v) == 0 {
		return math.NaN()
	}
	sort.Float64s(v)
	return v[len(v)/2]
}

func (a *answer) superposition() models.Superposition {
	nan := unit.NaN()
	if a.final == nil || a.oneTemperature() {
		return models.Superposition{Holds: models.HoldsUndecided, P: nan, MisfitDeg: nan, MisfitPercent: nan}
	}
	return models.Superposition{
		Holds: a.verdict(), P: number(a.separate.P),
		MisfitDeg:     number(deg(a.separate.Phase.Beyond())),
		MisfitPercent: number(100 * a.separate.Relative.Beyond()),
	}
}

func (a *answer) inputs() []models.InputFile {
	out := []models.InputFile{}
	for _, in := range a.campaign.Inputs {
		out = append(out, models.InputFile{File: in.File, SHA256: in.SHA256})
	}
	return out
}

func (a *answer) assumptions() []string {
	return append(append([]string{}, a.campaign.Assumptions...), a.notes...)
}
