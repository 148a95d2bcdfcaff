package fitting

import (
	"errors"
	"fmt"
	"math"
	"runtime"

	"phaselag/data"
	"phaselag/fitting/superpose"
)

// Settings of Characterize. The zero value is what everyone should use.
type Settings struct {
	// Replicates of the bootstrap test of superposition. Default 0: 199.
	// Negative: none, the F test alone.
	Replicates int
	// Bootstrap is the number of campaigns that are drawn from the fitted compound
	// to check the intervals. Default 0: none.
	Bootstrap int
	// Progress is called after each draw of Bootstrap, from several goroutines at
	// once; nil for nobody.
	Progress func()
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
	a.separate, a.causality = superpose.Separate{}, nil
}

// answer gathers the fits.
type answer struct {
	*task
	set       Settings
	amp       amplitudeData
	reference float64
	poisson   float64 // of the compound file; NaN: not known

	final       *superpose.Solution
	noise       []superpose.GroupNoise
	free        *superpose.Solution // law Factors, same noise
	laws        []rival
	vertical    []rival
	amplitude   []rival
	separate    superpose.Separate
	freeUp      *superpose.Solution // with free vertical shifts, where superposition fails
	freeUpPhase float64
	causality   []Causality
}

func (a *answer) fit() error {
	a.pickReference()
	a.poisson = a.campaign.PoissonRatio
	if math.IsNaN(a.poisson) && a.campaign.Modulus == data.Shear {
		a.poisson = 0.5
		a.assume("Poisson ratio 0.5, not stated; no number here depends on it")
	}
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
	a.judgeCausality()
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

func (a *answer) symbol() string {
	if a.campaign.Modulus == data.Young {
		return "E"
	}
	return "G"
}
