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
	"phaselag/models/amplitude"
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

// draft is a compound on its way: its fields, and with every parameter the root
// of its covariance in the units of the file.
type draft struct {
	*answer
	models.Compound
	cov   *superpose.Covariance
	names []string
	roots []superpose.Root
}

// keep notes a parameter whose root is r times scale; a nil root is none.
func (d *draft) keep(name string, r superpose.Root, scale float64) {
	if r == nil {
		return
	}
	out := make(superpose.Root, len(r))
	for i, v := range r {
		out[i] = scale * v
	}
	d.names, d.roots = append(d.names, name), append(d.roots, out)
}

// compound makes the compound of the final fit.
func (a *answer) compound() (*models.Compound, error) {
	d := &draft{answer: a, cov: a.final.Covariance()}
	d.Compound = models.Compound{
		Format:         models.FormatVersion,
		Compound:       a.identity(),
		ModulusKind:    string(a.campaign.Modulus),
		PoissonRatio:   unit.Number(a.poisson),
		Strain:         models.StrainNote{Measure: a.strainMeasure(), Amplitude: "zero to peak"},
		State:          a.stateOf(),
		ReferenceTempC: degreesC(a.reference),
		Static:         a.static(),
		Domain:         a.domain(),
		Fit:            a.fitNote(),
		Provenance:     models.Provenance{Version: Version, Inputs: a.inputs(), Assumptions: a.assumptions()},
	}
	d.linear()
	d.shift()
	d.vertical()
	d.filler()
	d.common()
	d.Uncertainty = models.Uncertainty{Coverage: 0.95, DegreesOfFreedom: number(a.dof()), Parameters: append([]string{}, d.names...), Cholesky: []models.Row{}}
	for _, row := range superpose.Cholesky(d.roots) {
		for i := range row {
			row[i] = round15(row[i])
		}
		d.Uncertainty.Cholesky = append(d.Uncertainty.Cholesky, row)
	}
	return models.New(d.Compound)
}

func (d *draft) linear() {
	s := d.final
	d.Linear.Equilibrium = round15(s.Equilibrium / 1e6)
	d.keep("linear.equilibrium_modulus_MPa", d.cov.Modulus(0), 1e-6)
	d.Linear.Branches = []models.Branch{}
	for k, g := range s.Branches {
		r := d.cov.Modulus(1 + k)
		if g <= 0 || r == nil {
			continue
		}
		d.keep(fmt.Sprintf("linear.branches.%d.modulus_MPa", len(d.Linear.Branches)), r, 1e-6)
		d.Linear.Branches = append(d.Linear.Branches, models.Branch{Time: round15(s.Form.Lattice[k]), Modulus: round15(g / 1e6)})
	}
}

func (d *draft) shift() {
	s, law := d.final, d.final.Indices().Law
	d.Shift = models.Shift{Law: models.LawNone, C1: unit.NaN(), C2: unit.NaN(), Activation: unit.NaN(), Factors: d.factors()}
	switch s.Form.Law {
	case superpose.WLF:
		d.Shift.Law = models.LawWLF
		d.Shift.C1, d.Shift.C2 = number(s.Theta[law]), number(s.Theta[law+1])
		d.keep("shift.c1", d.cov.Theta(law), 1)
		d.keep("shift.c2_K", d.cov.Theta(law+1), 1)
	case superpose.Arrhenius:
		d.Shift.Law = models.LawArrhenius
		d.Shift.Activation = number(s.Theta[law])
		d.keep("shift.activation_kJ_per_mol", d.cov.Theta(law), 1)
	case superpose.Crossover:
		d.Shift.Law = models.LawCrossover
		at := degreesC(s.Theta[law+2])
		d.Shift.C1, d.Shift.C2, d.Shift.Crossover = number(s.Theta[law]), number(s.Theta[law+1]), &at
		d.keep("shift.c1", d.cov.Theta(law), 1)
		d.keep("shift.c2_K", d.cov.Theta(law+1), 1)
		d.keep("shift.crossover_C", d.cov.Theta(law+2), 1)
	case superpose.Factors:
		for i, T := range d.problem.Knots {
			r := d.cov.LogShift(T)
			d.Shift.Factors[i].LogShift, d.Shift.Factors[i].U = number(s.LogShift(T)), number(r.Deviation())
			if r.Deviation() > 0 {
				d.keep(fmt.Sprintf("shift.factors.%d.log10_aT", i), r, 1)
			}
		}
	}
}

func (d *draft) vertical() {
	s := d.final
	d.Vertical = models.Vertical{Law: models.VerticalNone, Expansion: unit.NaN(), Factors: []models.VerticalFactor{}}
	switch s.Form.Vertical {
	case superpose.Density:
		d.Vertical.Law, d.Vertical.Expansion = models.VerticalDensity, number(s.Form.Expansion)
	case superpose.Bounded, superpose.Free:
		d.Vertical.Law = models.VerticalFactors
		for i, T := range d.problem.Knots {
			b := s.Vertical(i)
			d.Vertical.Factors = append(d.Vertical.Factors, models.VerticalFactor{TemperatureC: degreesC(T), B: number(b)})
			if r := d.cov.Vertical(T); r.Deviation() > 0 {
				d.keep(fmt.Sprintf("vertical.factors.%d.b_T", i), r, b)
			}
		}
	}
}

func (d *draft) filler() {
	s, nan := d.final, unit.NaN()
	d.Amplitude = models.Amplitude{Law: models.AmplitudeNone, Coupling: models.Overlay, Storage: nan, Loss: nan, Critical: nan, Exponent: nan, Activation: nan, Frequency: models.RateIndependent, ReferenceFrequency: nan}
	if !s.Form.Filler {
		return
	}
	critical, exponent := s.Kraus()
	frequency := models.RateIndependent
	if s.Form.Kappa == 1 {
		frequency = models.Causal
	}
	d.Amplitude = models.Amplitude{
		Law: models.AmplitudeKraus, Coupling: models.Overlay, Storage: nan, Loss: nan,
		Critical: number(100 * critical), Exponent: number(exponent), Activation: number(s.Activation()),
		Frequency: frequency, ReferenceFrequency: number(d.problem.F0),
	}
	idx, nl := s.Indices(), len(s.Form.Lattice)
	if s.Form.Scaling {
		alpha, beta := round15(s.FillerStorage), round15(s.FillerLoss)
		d.Amplitude.Coupling, d.Amplitude.StorageRatio, d.Amplitude.LossRatio = models.Scaling, &alpha, &beta
		d.keep("amplitude.storage_ratio", d.cov.Theta(idx.Alpha), 1)
		d.keep("amplitude.loss_ratio", d.cov.Theta(idx.Beta), 1)
	} else {
		d.Amplitude.Storage, d.Amplitude.Loss = number(s.FillerStorage/1e6), number(s.FillerLoss/1e6)
		d.keep("amplitude.storage_MPa", d.cov.Modulus(1+nl), 1e-6)
		d.keep("amplitude.loss_MPa", d.cov.Modulus(2+nl), 1e-6)
	}
	d.keep("amplitude.critical_strain_percent", d.cov.Theta(idx.Critical), 100*critical)
	switch s.Form.Amplitude {
	case amplitude.MaierGoritz:
		d.Amplitude.Law = models.AmplitudeMaierGoritz
	case amplitude.ExtraLoss:
		extra, at := round15(s.FillerExtra/1e6), round15(100*s.ExtraStrain())
		d.Amplitude.Law, d.Amplitude.ExtraLoss, d.Amplitude.ExtraStrain = models.AmplitudeExtraLoss, &extra, &at
		d.keep("amplitude.extra_loss_MPa", d.cov.Modulus(3+nl), 1e-6)
		d.keep("amplitude.extra_loss_strain_percent", d.cov.Theta(idx.Extra), 100*s.ExtraStrain())
	}
	if idx.Exponent >= 0 {
		d.keep("amplitude.exponent", d.cov.Theta(idx.Exponent), 1)
	}
	if idx.Activation >= 0 {
		d.keep("amplitude.activation_kJ_per_mol", d.cov.Theta(idx.Activation), 1)
	}
}

// common adds the errors that all measurements share: that of the phase, which
// was fitted, and those of geometry and temperature, independent of the fit.
func (d *draft) common() {
	d.keep(models.ParamPhase, d.cov.PhaseRoot(), 180/math.Pi)
	for _, v := range []struct {
		name string
		u    float64
	}{
		{models.ParamSpecimen, commonFactor(d.problem, d.campaign.Uncertainty)},
		{models.ParamTemperature, d.campaign.Uncertainty.TemperatureCommon},
	} {
		if !(v.u > 0) {
			continue
		}
		n := 0
		for i := range d.roots {
			d.roots[i] = append(d.roots[i], 0)
			n = len(d.roots[i])
		}
		own := make(superpose.Root, max(n, 1))
		own[len(own)-1] = 1
		d.keep(v.name, own, v.u)
	}
}

// fitNote says how well the fit meets the sweeps.
func (a *answer) fitNote() models.Fit {
	f := models.Fit{Points: len(a.problem.Rows), SigmaMagnitude: unit.NaN(), SigmaPhase: unit.NaN(), Superposition: a.superposition()}
	for g, kind := range a.kinds {
		if kind == data.FrequencySweep || len(a.kinds) == 1 {
			f.SigmaMagnitude = number(100 * a.noise[g].Magnitude)
			if kind != data.Relaxation {
				f.SigmaPhase = number(deg(a.noise[g].Phase))
			}
		}
	}
	return f
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
