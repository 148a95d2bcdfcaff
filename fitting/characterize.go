package fitting

import (
	"errors"
	"fmt"
	"math"
	"runtime"

	"phaselag/data"
	"phaselag/fitting/superpose"
	"phaselag/models/thermal"
)

// Settings of Characterize. The zero value is what everyone should use.
type Settings struct {
	// Replicates of the bootstrap test of superposition. Default 0: 199.
	// Negative: none, the F test alone.
	Replicates int
	// Workers that share the replicates. Default 0: one a processor. The
	// answer does not depend on it.
	Workers int
}

func (s *Settings) orDefault() Settings {
	var out Settings
	if s != nil {
		out = *s
	}
	if out.Replicates == 0 {
		out.Replicates = 199
	}
	if out.Workers <= 0 {
		out.Workers = runtime.GOMAXPROCS(0)
	}
	return out
}

// ErrNothing says that a campaign has no usable measurement at all.
var ErrNothing = errors.New("nothing to characterize: no usable point in any test")

// Characterize fits a compound to everything in the campaign. Whatever the
// measurements cannot support is left out with a finding that says why; the
// Result then has no Compound, or a Compound with a smaller domain. The error
// is ErrNothing.
func Characterize(c *data.Campaign, settings *Settings) (*Result, error) {
	set := settings.orDefault()
	t := &task{campaign: c, reason: map[origin]string{}, scatter: c.Uncertainty.TemperatureScatter, stated: !math.IsNaN(c.Uncertainty.TemperatureScatter)}
	if !t.anything() {
		return nil, ErrNothing
	}
	t.gatherKnots()
	t.state()
	a := &answer{task: t, set: set}
	if t.canFit() {
		if err := a.fit(); err != nil {
			a.giveUp(err)
		}
	}
	return a.result()
}

func (t *task) anything() bool {
	ok := false
	t.eachRun(func(_ runRef, _ *data.Test, run *data.Run) { ok = ok || used(run) > 0 })
	for _, test := range t.campaign.Tests {
		ok = ok || len(test.StaticValues) > 0
	}
	return ok
}

// defaultGeometry is assumed where nothing is stated and specimens differ.
const defaultGeometry = 0.02

// startScatter is the first guess of an unstated temperature scatter, K.
const startScatter = 0.3

// state says what the uncertainties do not.
func (t *task) state() {
	u := &t.campaign.Uncertainty
	if math.IsNaN(u.Phase) {
		t.find("phase-uncertainty-not-stated", data.Note, "",
			"the standard uncertainty of the phase that all measurements share is not stated",
			"no repeat and no superposition can show it", "state `uncertainty: {phase: …}`; without it the intervals of loss modulus and loss factor are those of repeatability only")
	}
	if math.IsNaN(u.TemperatureCommon) {
		t.find("temperature-calibration-not-stated", data.Note, "",
			"the standard uncertainty of the temperature calibration is not stated",
			"", "state `uncertainty: {temperature_common: …}`; the intervals do not contain it")
	}
	if math.IsNaN(u.Geometry) {
		t.find("geometry-uncertainty-not-stated", data.Note, "",
			fmt.Sprintf("the standard uncertainty of the specimens' geometry is not stated; %g %% is assumed", 100*defaultGeometry),
			"", "state `uncertainty: {geometry: …}`")
		t.assume("standard uncertainty of a specimen's geometry factor: %g %%, not stated (common practice, no source)", 100*defaultGeometry)
		// The campaign stays as it was read: the copy is the task's own.
		copied := *t.campaign
		copied.Uncertainty.Geometry = defaultGeometry
		t.campaign = &copied
	}
	if !t.stated {
		t.scatter = startScatter
	}
}

// canFit says whether a spectrum can be had at all, with findings if not.
func (t *task) canFit() bool {
	relaxation := 0
	frequencies := map[float64]bool{}
	oscillatory := 0
	t.eachRun(func(_ runRef, test *data.Test, run *data.Run) {
		for _, p := range run.Points {
			switch {
			case !p.Used:
			case test.Kind == data.Relaxation:
				relaxation++
			default:
				oscillatory++
				if test.Kind != data.StrainSweep {
					frequencies[p.Frequency] = true
				}
			}
		}
	})
	if len(t.knots) == 0 && relaxation < 5 {
		switch {
		case oscillatory == 0:
			t.find("no-dynamic-test", data.Severe, "", "no oscillatory test and no relaxation test with at least five points",
				"", "test isotherms over frequency at several temperatures")
		case len(frequencies) <= 1:
			t.find("superposition-impossible", data.Severe, "",
				"everything was measured at one frequency",
				"time–temperature superposition compares curves over frequency; at one frequency there is none",
				"test isotherms over at least one and a half decades of frequency; the moduli as measured are reported by temperature, and no compound model is made")
		default:
			t.find("no-isotherm", data.Severe, "",
				"no frequency sweep at a constant temperature has two frequencies or more",
				"", "test isotherms over frequency; the moduli as measured are reported, and no compound model is made")
		}
		return false
	}
	if n := len(t.knots); n == 1 || n == 0 {
		t.find("one-temperature-only", data.Doubt, "", "frequency sweeps or relaxation at one temperature only",
			"", "test isotherms at several temperatures; the compound answers at this temperature only, and no shift law is fitted")
	}
	return true
}

// giveUp drops what was fitted so far: measurements that no model of this kind
// meets, such as exchanged columns, are reported as they are.
func (a *answer) giveUp(err error) {
	a.find("no-fit", data.Severe, "",
		fmt.Sprintf("the joint fit failed: %v", err),
		"moduli that no relaxation spectrum can give: exchanged or wrong columns, wrong units, rows of different materials",
		"look at the other findings and at the isotherms; the moduli as measured are reported, and no compound model is made")
	a.final, a.free, a.freeUp = nil, nil, nil
	a.laws, a.vertical, a.amplitude = nil, nil, nil
	a.separate = superpose.Separate{}
}

// answer gathers the fits.
type answer struct {
	*task
	set       Settings
	amp       amplitudeData
	reference float64

	final       *superpose.Solution
	noise       []superpose.GroupNoise
	free        *superpose.Solution // law Factors, same noise
	laws        []rival
	vertical    []rival
	amplitude   []rival
	separate    superpose.Separate
	freeUp      *superpose.Solution // with free vertical shifts, where superposition fails
	freeUpPhase float64
}

type rival struct {
	name   string
	s      *superpose.Solution
	chosen bool
	note   string
}

func (a *answer) pickReference() {
	wished := a.campaign.Analysis.ReferenceTemperature
	if !math.IsNaN(wished) && wished != 0 {
		a.reference = wished
		return
	}
	const standard = 23 + zeroC
	best := math.NaN()
	for _, k := range a.knots {
		if math.IsNaN(best) || math.Abs(k.T-standard) < math.Abs(best-standard) {
			best = k.T
		}
	}
	if math.IsNaN(best) {
		a.eachRun(func(_ runRef, test *data.Test, run *data.Run) {
			if test.Kind == data.Relaxation && (math.IsNaN(best) || math.Abs(run.Temperature-standard) < math.Abs(best-standard)) {
				best = run.Temperature
			}
		})
	}
	// A tenth of a degree is finer than any nominal temperature.
	a.reference = math.Round((best-zeroC)*10)/10 + zeroC
	a.assume("reference temperature: the tested temperature nearest 23 °C, %s", celsius(a.reference))
}

func (a *answer) fit() error {
	a.pickReference()
	if len(a.knots) > 0 {
		a.connect(a.reference)
	} else {
		// Only relaxation: one temperature, the reference's.
		a.leaveOtherRelaxations()
	}
	a.amp = a.task.amplitude()
	a.build(a.reference, a.amp)
	if len(a.problem.Rows) < 3 {
		a.find("too-few-points", data.Severe, "", fmt.Sprintf("%d usable points", len(a.problem.Rows)), "", "measure more; no compound model is made")
		return nil
	}
	start, err := a.start()
	if err != nil {
		return err
	}
	if err := a.chooseAmplitude(start); err != nil {
		return err
	}
	if err := a.credible(); err != nil {
		return err
	}
	if err := a.chooseLaw(); err != nil {
		return err
	}
	if err := a.chooseVertical(); err != nil {
		return err
	}
	if err := a.settleScatter(); err != nil {
		return err
	}
	return a.judge()
}

// A misfit beyond these is no noise: the model is not that of the measurements.
const (
	incredibleMagnitude = 0.25
	incrediblePhase     = 10 * math.Pi / 180
)

// credible refuses a fit that misses the measurements by more than any noise.
func (a *answer) credible() error {
	for g, n := range a.noise {
		if n.Magnitude > incredibleMagnitude || a.kinds[g] != data.Relaxation && n.Phase > incrediblePhase {
			return fmt.Errorf("the best non-negative spectrum misses the %s by %.2g %% and %.2g° rms", a.kinds[g], 100*n.Magnitude, deg(n.Phase))
		}
	}
	return nil
}

func (a *answer) leaveOtherRelaxations() {
	a.eachRun(func(ref runRef, test *data.Test, run *data.Run) {
		if test.Kind != data.Relaxation || math.Abs(run.Temperature-a.reference) <= sameTemperature {
			return
		}
		for k := range run.Points {
			a.reason[origin{ref.test, ref.run, k}] = "relaxation at another temperature than the reference, without isotherms to shift by"
		}
	})
}

// oneTemperature tells whether there is anything to shift.
func (a *answer) oneTemperature() bool { return len(a.problem.Knots) < 2 }

func (a *answer) form(law superpose.Law, kappa float64) superpose.Form {
	f := superpose.Form{Law: law, Kappa: kappa, Filler: a.amp.sweeps}
	f.Activation = f.Filler && !a.oneTemperature()
	for range a.problem.Groups {
		f.Sigma = append(f.Sigma, superpose.Sigma{Magnitude: 0.01, Phase: 0.01})
	}
	return f
}

// overlapShifts adds up the closed-form shifts of neighbours, zero at the
// reference.
func (a *answer) overlapShifts() thermal.Factors {
	lo, hi := a.component[0], a.component[1]
	f := thermal.Factors{T: a.problem.Knots, Log: make([]float64, len(a.problem.Knots))}
	for i := lo + 1; i <= hi; i++ {
		f.Log[i-lo] = f.Log[i-lo-1] + a.pairs[i-1].LogA
	}
	zero := f.LogShift(a.reference)
	for i := range f.Log {
		f.Log[i] -= zero
	}
	return f
}

// start finds a first fit: WLF from the overlap, several poles and several
// activation energies of the filler, on a lattice that is laid anew until the
// window stays. It is the law Factors where WLF has too few temperatures.
func (a *answer) start() (*superpose.Solution, error) {
	n := len(a.problem.Knots)
	law := superpose.WLF
	switch {
	case n < 2:
		law = superpose.OneTemp
	case n < 4:
		law = superpose.Factors
	}
	kappas := a.kappas()
	form := a.form(law, kappas[0])
	var starts []superpose.Start
	logA := func(float64) float64 { return 0 }
	if n >= 2 {
		overlap := a.overlapShifts()
		logA = overlap.LogShift
		w := superpose.BestWLF(overlap.T, overlap.Log, a.reference)
		starts = append(starts, superpose.Start{WLF: w, LogShift: overlap.Log})
		for _, below := range []float64{25, 60, 110} {
			c2 := a.reference - overlap.T[0] + below
			v := superpose.WLFWithPole(overlap.T, overlap.Log, a.reference, c2)
			starts = append(starts, superpose.Start{WLF: v, LogShift: overlap.Log})
		}
		if law == superpose.Factors {
			starts = starts[:1]
		}
	} else {
		starts = append(starts, superpose.Start{LogShift: make([]float64, n)})
	}
	var best *superpose.Solution
	for round := range 4 {
		lo, hi := a.window(logA)
		form.Lattice = lattice(lo, hi, 1)
		var tries []superpose.Start
		for _, s := range starts {
			if !form.Filler {
				tries = append(tries, s)
				continue
			}
			for _, ea := range []float64{4, 12} {
				s.Filler = superpose.FillerStart{Activation: ea, Critical: math.Sqrt(a.amp.range_[0] * a.amp.range_[1]), Exponent: 0.6}
				tries = append(tries, s)
			}
		}
		if best != nil {
			tries = []superpose.Start{best.Start()}
		}
		best = nil
		for _, s := range tries {
			if fit, err := superpose.Fit(a.problem, form, s); err == nil && (best == nil || fit.Objective < best.Objective) {
				best = fit
			}
		}
		if best == nil {
			return nil, fmt.Errorf("%w from any start", superpose.ErrNoFit)
		}
		logA = best.LogShift
		if lo2, hi2 := a.window(logA); round > 0 && math.Abs(math.Log10(lo2/lo)) < 0.3 && math.Abs(math.Log10(hi2/hi)) < 0.3 {
			break
		}
	}
	return best, nil
}

func (a *answer) kappas() []float64 {
	if !a.amp.sweeps {
		return []float64{0}
	}
	switch a.campaign.Analysis.FillerFrequency {
	case "causal":
		return []float64{1}
	case "rate_independent":
		return []float64{0}
	}
	return []float64{1, 0}
}

// coarse is by how much a lattice twice as dense must lower the objective to be
// taken: the two units of AIC for each of five more moduli.
const coarse = 10

// densify refines the first fit, and takes a lattice twice as dense where three
// relaxation times a decade are too few at the noise that was found: sharp
// transitions, the terminal zone of a liquid, measurements without noise. A
// lattice that is too coarse tilts shift factors by more than their
// uncertainty.
func (a *answer) densify(first *superpose.Solution) (*superpose.Solution, []superpose.GroupNoise, error) {
	best, noise, err := first.Refine(6)
	if err != nil {
		return nil, nil, err
	}
	lo, hi := a.window(best.LogShift)
	dense, err := best.OnLattice(lattice(lo, hi, 2))
	if err != nil || best.Objective-dense.Objective < coarse {
		return best, noise, nil
	}
	return dense.Refine(6)
}

// chooseAmplitude fits the filler term with both frequency laws and without,
// and keeps the best by AICc.
func (a *answer) chooseAmplitude(first *superpose.Solution) error {
	best, noise, err := a.densify(first)
	if err != nil {
		return err
	}
	a.final, a.noise = best, noise
	if !a.amp.sweeps {
		return nil
	}
	name := map[float64]string{1: "Kraus, causal", 0: "Kraus, rate independent"}
	rivals := []rival{{name: name[best.Form.Kappa], s: best}}
	for _, k := range a.kappas() {
		if k == best.Form.Kappa {
			continue
		}
		f := best.Form
		f.Kappa = k
		if s, err := best.Rival(f, best.Start()); err == nil {
			rivals = append(rivals, rival{name: name[k], s: s})
		}
	}
	if a.campaign.Analysis.AmplitudeLaw != "kraus" {
		f := best.Form
		f.Filler, f.Activation = false, false
		if s, err := best.Rival(f, best.Start()); err == nil {
			rivals = append(rivals, rival{name: "none", s: s})
		}
	}
	at := leastAICc(rivals)
	a.amplitude = rivals
	if rivals[at].name == "none" {
		a.find("no-strain-dependence", data.Note, "", "the amplitude law does not improve the fit", "the compound is not filled, or the amplitudes are small", "")
	}
	if rivals[at].s == best {
		return nil
	}
	a.final, a.noise, err = rivals[at].s.Refine(6)
	return err
}

// indistinguishable is the difference of AICc within which two forms are no
// different.
const indistinguishable = 2

// leastAICc chooses the rival with the least AICc, and of those that are no
// different from it the one with the fewest constants.
func leastAICc(r []rival) int {
	best := 0
	value := make([]float64, len(r))
	for i := range r {
		value[i] = r[i].s.AICc()
		if value[i] < value[best] {
			best = i
		}
	}
	at := best
	for i := range r {
		if value[i] <= value[best]+indistinguishable && r[i].s.Constants() < r[at].s.Constants() {
			at = i
		}
	}
	for i := range r {
		if i != at && value[i] <= value[at]+indistinguishable && r[i].note == "" {
			r[i].note = "no different from the one used"
		}
	}
	r[at].chosen = true
	return at
}

// chooseLaw compares the shift laws by marginal likelihood.
func (a *answer) chooseLaw() error {
	if a.oneTemperature() {
		return nil
	}
	base := a.final
	f := base.Form
	f.Law = superpose.Factors
	free, err := base.Rival(f, base.Start())
	if err != nil {
		return err
	}
	a.free = free
	a.laws = []rival{{name: "none", s: free, note: "the factors themselves, interpolated"}}
	n := len(a.problem.Knots)
	try := func(law superpose.Law, least int) {
		if n < least {
			return
		}
		f.Law = law
		if s, err := base.Rival(f, free.Start()); err == nil {
			a.laws = append(a.laws, rival{name: law.String(), s: s})
		}
	}
	try(superpose.WLF, 4)
	try(superpose.Arrhenius, 3)
	at := leastAICc(a.laws)
	if wish := a.campaign.Analysis.ShiftLaw; wish != "" && wish != "auto" {
		found := false
		for i := range a.laws {
			a.laws[i].chosen = a.laws[i].name == wish
			if a.laws[i].chosen {
				at, found = i, true
			}
		}
		if !found {
			at = 0
			a.laws[0].chosen = true
			a.find("shift-law-not-supported", data.Doubt, "",
				fmt.Sprintf("%s was wished for, with %d tested temperatures", wish, n),
				"too few temperatures, or a law that this version does not fit", "the factors themselves are used")
		}
	}
	a.final, a.noise, err = a.laws[at].s.Refine(6)
	return err
}

// glassy is the modulus above which a density law has no meaning, Pa.
const glassy = 100e6

// defaultExpansion is the volume expansion of gum rubber, 1/K (6 to 7e-4 in
// handbooks; value from memory).
const defaultExpansion = 6.6e-4

func (a *answer) chooseVertical() error {
	wish := a.campaign.Analysis.VerticalShift
	if a.oneTemperature() {
		return nil
	}
	if wish == "" {
		wish = "auto"
	}
	expansion := a.campaign.Analysis.Expansion
	if math.IsNaN(expansion) || expansion == 0 {
		expansion = defaultExpansion
	}
	top := 0.0
	for _, r := range a.problem.Rows {
		top = max(top, math.Hypot(real(r.G), imag(r.G)))
	}
	base := a.final
	a.vertical = []rival{{name: "none", s: base, chosen: true}}
	fitVertical := func(v superpose.Vertical) *superpose.Solution {
		f := base.Form
		f.Vertical, f.Expansion = v, expansion
		s, err := base.Rival(f, base.Start())
		if err != nil {
			return nil
		}
		return s
	}
	choose := func(s *superpose.Solution, name string) error {
		a.vertical[0].chosen = false
		for i := range a.vertical {
			a.vertical[i].chosen = a.vertical[i].name == name
		}
		var err error
		a.final, a.noise, err = s.Refine(6)
		return err
	}
	if wish == "auto" || wish == "density" {
		if top > glassy {
			if wish == "density" {
				a.find("density-law-refused", data.Doubt, "",
					fmt.Sprintf("|%s*| reaches %.3g MPa", a.symbol(), top/1e6),
					"the density law belongs to rubber elasticity; above 100 MPa the material is near its glass", "no vertical shift is used")
			}
			return nil
		}
		s := fitVertical(superpose.Density)
		if s == nil {
			return nil
		}
		a.vertical = append(a.vertical, rival{name: "density", s: s, note: fmt.Sprintf("volume expansion %.3g /K", expansion)})
		// Within 2 the simpler stays.
		if wish == "density" || s.AICc() < base.AICc()-indistinguishable {
			if a.campaign.Analysis.Expansion != expansion {
				a.assume("volume expansion of the density law: %.3g /K, that of gum rubber (value from memory)", expansion)
			}
			return choose(s, "density")
		}
		return nil
	}
	v := map[string]superpose.Vertical{"bounded": superpose.Bounded, "free": superpose.Free}
	if kind, ok := v[wish]; ok {
		s := fitVertical(kind)
		if s == nil {
			return nil
		}
		a.vertical = append(a.vertical, rival{name: wish, s: s})
		a.find("vertical-shift-not-physical", data.Doubt, "",
			fmt.Sprintf("%s vertical shifts were asked for", wish),
			"on a stretch where the modulus is a power of frequency, vertical and horizontal shifts cannot be told apart",
			"do not read the vertical factors as a property; use none or density")
		return choose(s, wish)
	}
	return nil
}

func (a *answer) symbol() string {
	if a.campaign.Modulus == data.Young {
		return "E"
	}
	return "G"
}

// scatterLimit bounds the estimate of an unstated temperature scatter, K.
const scatterLimit = 3

// settleScatter estimates an unstated temperature scatter by restricted
// likelihood and fits again until it stays.
func (a *answer) settleScatter() error {
	if a.stated || a.oneTemperature() {
		return nil
	}
	if a.final.Form.Law == superpose.Factors {
		a.find("temperature-scatter-not-stated", data.Note, "",
			fmt.Sprintf("temperature scatter from run to run: %.2g K assumed; without a shift law the isotherms do not show it", a.scatter),
			"", "state `uncertainty: {temperature_scatter: …}`")
		a.assume("temperature scatter from run to run: %.2g K, not stated (common practice, no source)", a.scatter)
		return nil
	}
	for range 4 {
		u := a.final.Scatter(a.shared, scatterLimit)
		u = max(u, 0.01) // a hundredth of a kelvin holds the offsets as good as at zero
		moved := math.Abs(math.Log(u / a.scatter))
		a.setScatter(u)
		f := a.final.Form
		s, err := a.final.Rival(f, a.final.Start())
		if err != nil {
			return err
		}
		if a.final, a.noise, err = s.Refine(6); err != nil {
			return err
		}
		if moved < 0.05 {
			break
		}
	}
	a.find("temperature-scatter-not-stated", data.Note, "",
		fmt.Sprintf("temperature scatter from run to run: %.2g K, estimated from the misfit of the shift law by restricted likelihood", a.scatter),
		"", "state `uncertainty: {temperature_scatter: …}` if it is known")
	return nil
}
