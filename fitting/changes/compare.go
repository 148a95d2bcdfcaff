package changes

import (
	"fmt"
	"math"
	"math/cmplx"

	"gonum.org/v1/gonum/stat/distuv"

	"phaselag/data"
	"phaselag/models"
)

// Settings say what the batch and the approved compound have in common. Nil and the zero
// value: nothing.
type Settings struct {
	SameThermometer bool // one calibration of temperature for both
	SamePhase       bool // one calibration of the phase for both
	SameGauge       bool // one error of geometry for both, and of force and displacement
}

// assumed uncertainties where the campaign states none.
const (
	assumedScatter  = 0.3   // K
	assumedGeometry = 0.015 // relative
	assumedCommon   = 0.3   // K, calibration of a thermometer of its own
	assumedPhase    = 0.1   // degrees, calibration of the phase of its own
)

// begin starts a comparison with what cancels taken out of the approved compound.
func begin(approved *models.Compound, s *Settings) (*Comparison, *Settings) {
	if s == nil {
		s = &Settings{}
	}
	c := &Comparison{approved: approved, Misfit: math.NaN()}
	c.lower = root(approved, map[string]bool{
		models.ParamTemperature: s.SameThermometer, models.ParamPhase: s.SamePhase, models.ParamSpecimen: s.SameGauge,
	})
	say := func(same bool, yes, no string) {
		if same {
			c.Assumptions = append(c.Assumptions, yes)
		} else {
			c.Assumptions = append(c.Assumptions, no)
		}
	}
	say(s.SameThermometer, "one thermometer for both: its calibration cancels", "the thermometers of both were calibrated apart")
	say(s.SamePhase, "one calibration of the phase for both: its error cancels", "the phases of both were calibrated apart")
	if s.SameGauge {
		c.Assumptions = append(c.Assumptions, "one gauge and one load cell for both: their errors cancel")
	}
	return c, s
}

// Points compares a campaign, for instance a short release test of a few temperatures,
// frequencies and one strain sweep, with an approved compound. Points outside the approved
// compound's domain are passed over. The error is ErrNothing where too few are left, or
// says why the points cannot be compared.
func Points(approved *models.Compound, campaign *data.Campaign, settings *Settings) (*Comparison, error) {
	c, s := begin(approved, settings)
	if string(campaign.Modulus) != approved.ModulusKind {
		return nil, fmt.Errorf("the batch has %s moduli, the approved compound %s ones", campaign.Modulus, approved.ModulusKind)
	}
	u := campaign.Uncertainty
	p := priors{scatter: u.TemperatureScatter, geometry: u.Geometry}
	if math.IsNaN(p.scatter) {
		p.scatter = assumedScatter
		c.Assumptions = append(c.Assumptions, fmt.Sprintf("temperature scatter of the batch's runs %g K: not stated", assumedScatter))
	}
	if math.IsNaN(p.geometry) {
		p.geometry = assumedGeometry
		c.Assumptions = append(c.Assumptions, fmt.Sprintf("geometry of the batch's specimens %s: not stated", percentOf(assumedGeometry)))
	}
	if !s.SameGauge {
		for _, v := range []float64{u.Force, u.Displacement} {
			if v > 0 {
				// Common to the batch's specimens: held by each, which errs on the safe side.
				p.geometry = math.Hypot(p.geometry, v)
			}
		}
	}
	if !s.SameThermometer {
		if p.common = u.TemperatureCommon; math.IsNaN(p.common) {
			p.common = assumedCommon
			c.Assumptions = append(c.Assumptions, fmt.Sprintf("calibration of the batch's thermometer %g K: not stated", assumedCommon))
		}
	}
	if !s.SamePhase {
		if p.phase = u.Phase; math.IsNaN(p.phase) {
			p.phase = assumedPhase * math.Pi / 180
			c.Assumptions = append(c.Assumptions, fmt.Sprintf("calibration of the batch's phase %g°: not stated", assumedPhase))
		}
	}
	list, strains, skipped := observe(c, campaign, &p)
	if skipped > 0 {
		c.Assumptions = append(c.Assumptions, fmt.Sprintf("%d points outside the approved compound's domain were passed over", skipped))
	}
	c.choose(strains)
	noise := [2]float64{0.005, 0.005}
	if v := float64(approved.Fit.SigmaMagnitude) / 100; v > 0 {
		noise[0] = v
	}
	if v := float64(approved.Fit.SigmaPhase) * math.Pi / 180; v > 0 {
		noise[1] = v
	}
	if err := c.solve(list, p, noise, [2]float64{1e-7, 1e-7}); err != nil {
		return nil, err
	}
	c.misfit()
	return c, c.weak(func() error { return c.solve(list, p, noise, [2]float64{1e-7, 1e-7}) })
}

// observe gathers the points that can be compared.
func observe(c *Comparison, campaign *data.Campaign, p *priors) (list []observation, strains [2]float64, skipped int) {
	strains = [2]float64{math.Inf(1), 0}
	pieces := map[[2]string]int{}
	for _, test := range campaign.Tests {
		if test.Kind != data.FrequencySweep && test.Kind != data.StrainSweep && test.Kind != data.TemperatureSweep {
			continue
		}
		key := [2]string{test.Specimen, test.Mounting}
		for _, run := range test.Runs {
			any := false
			for _, pt := range run.Points {
				if !pt.Used || !(pt.Storage > 0) || !(pt.Loss > 0) {
					continue
				}
				q := models.Condition{Frequency: pt.Frequency, Temperature: pt.Temperature, Strain: pt.Strain}
				if c.approved.Domain.Strain == nil {
					q.Strain = math.NaN()
				}
				if c.approved.Inside(q) != nil {
					skipped++
					continue
				}
				if _, ok := pieces[key]; !ok {
					pieces[key] = len(pieces)
				}
				any = true
				if q.Strain > 0 {
					strains = [2]float64{min(strains[0], q.Strain), max(strains[1], q.Strain)}
				}
				list = append(list, observation{q: q, ln: cmplx.Log(complex(pt.Storage, pt.Loss)), run: p.runs, specimen: pieces[key]})
			}
			if any {
				p.runs++
			}
		}
	}
	p.specimens = len(pieces)
	return list, strains, skipped
}

// choose says which changes can be told at all.
func (c *Comparison) choose(strains [2]float64) {
	why := map[Kind]string{}
	switch {
	case c.approved.Amplitude.Law == models.AmplitudeNone:
		why[Filler] = "the approved compound has no filler term"
	case !(strains[1] > 5*strains[0]):
		why[Filler] = "the batch has no strain sweep"
	}
	if why[Filler] != "" {
		why[Critical] = why[Filler]
	}
	c.Changes, c.active = all(why), nil
	for _, k := range kinds {
		if why[k] == "" {
			c.active = append(c.active, k)
		}
	}
}

// weak drops changes that came out so uncertain that they are not told, and solves again
// without them.
func (c *Comparison) weak(again func() error) error {
	for range len(kinds) {
		worst, at := 1.0, -1
		for i, k := range c.active {
			limit := 0.7 // of a logarithm: a factor of two
			v := c.change(k)
			u := v.U95 / v.Value
			if k == Temperature {
				limit, u = 15, v.U95
			}
			if r := u / limit; r > worst || math.IsNaN(r) {
				worst, at = r, i
			}
		}
		if at < 0 {
			return nil
		}
		k := c.active[at]
		active := append(append([]Kind{}, c.active[:at]...), c.active[at+1:]...)
		why := map[Kind]string{}
		for _, v := range c.Changes {
			why[v.Kind] = v.Reason
		}
		why[k] = "the points do not tell it"
		c.Changes, c.active = all(why), active
		if err := again(); err != nil {
			return err
		}
	}
	return nil
}

// misfit compares the noise with the approved compound's.
func (c *Comparison) misfit() {
	f := c.approved.Fit
	known := float64(c.approved.Uncertainty.DegreesOfFreedom)
	if math.IsNaN(known) || known < 1 || !(float64(f.SigmaMagnitude) > 0) || !(float64(f.SigmaPhase) > 0) {
		return
	}
	ratio := (math.Pow(100*c.SigmaM/float64(f.SigmaMagnitude), 2) + math.Pow(c.SigmaPhase*180/math.Pi/float64(f.SigmaPhase), 2)) / 2
	c.Misfit = distuv.F{D1: max(c.Freedom, 1), D2: known}.Survival(ratio)
}

// Compounds compares two compounds on a grid of conditions inside both domains.
func Compounds(approved, other *models.Compound, settings *Settings) (*Comparison, error) {
	c, s := begin(approved, settings)
	if approved.ModulusKind != other.ModulusKind {
		return nil, fmt.Errorf("one compound has %s moduli, the other %s ones", other.ModulusKind, approved.ModulusKind)
	}
	c.OfCompounds = true
	lower := root(other, map[string]bool{models.ParamTemperature: s.SameThermometer, models.ParamPhase: s.SamePhase, models.ParamSpecimen: s.SameGauge})
	var list []pair
	strains := [2]float64{math.Inf(1), 0}
	add := func(q models.Condition) {
		if approved.Inside(q) != nil || other.Inside(q) != nil {
			return
		}
		if q.Strain > 0 {
			strains = [2]float64{min(strains[0], q.Strain), max(strains[1], q.Strain)}
		}
		list = append(list, pair{q, cmplx.Log(other.Value(q)), whitened(other, lower, q)})
	}
	lo := max(approved.Domain.Temperature[0], other.Domain.Temperature[0])
	hi := min(approved.Domain.Temperature[1], other.Domain.Temperature[1])
	strain := math.NaN()
	if a, b := float64(approved.Domain.OwnStrain), float64(other.Domain.OwnStrain); a > 0 && b > 0 {
		strain = math.Sqrt(a*b) / 100
		strains = [2]float64{strain, strain}
	}
	const steps = 12
	for i := range steps + 1 {
		T := lo + (hi-lo)*float64(i)/steps + 273.15
		for _, f := range []float64{0.5, 1, 3, 10, 30, 50} {
			add(models.Condition{Frequency: f, Temperature: T, Strain: strain})
		}
	}
	if a := approved.Domain.AmplitudeMeasuredAt; a != nil {
		for _, T := range []float64{a.Temperature[0], (a.Temperature[0] + a.Temperature[1]) / 2, a.Temperature[1]} {
			for k := range 10 {
				add(models.Condition{Frequency: math.Sqrt(a.Frequency[0] * a.Frequency[1]), Temperature: T + 273.15, Strain: 0.001 * math.Pow(200, float64(k)/9)})
			}
		}
	}
	c.choose(strains)
	// The smaller number of degrees of freedom bounds both files' intervals.
	freedom := math.Inf(1)
	for _, v := range []float64{float64(approved.Uncertainty.DegreesOfFreedom), float64(other.Uncertainty.DegreesOfFreedom)} {
		if v > 0 {
			freedom = min(freedom, v)
		}
	}
	if math.IsInf(freedom, 1) {
		freedom = 1e6
	}
	run := func() error { return c.project(list, freedom) }
	if err := run(); err != nil {
		return nil, err
	}
	c.Assumptions = append(c.Assumptions, fmt.Sprintf("two compound files were compared at %d conditions inside both domains", len(list)))
	return c, c.weak(run)
}
