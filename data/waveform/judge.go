package waveform

import (
	"fmt"
	"math"
	"math/cmplx"
)

// judge writes the doubts.
func (s *segment) judge(r *Result, sol *solution) {
	add := func(d Doubt) { r.Doubts = append(r.Doubts, d) }
	s.judgeSamples(r, add)
	if s.restLeftOut > 0 {
		add(Doubt{Code: RestLeftOut, Severity: Note, Value: float64(s.restLeftOut),
			Evidence: fmt.Sprintf("%d samples before the first in which a sine could be found", s.restLeftOut),
			Cause:    "the record begins before the motion", Remedy: "none needed, unless it was meant to be fitted"})
	}
	switch o := s.onset; {
	case o.cycles > 0 && 3*o.cycles > o.compared && s.set.LeaveOut == 0:
		add(Doubt{Code: TransientLong, Severity: Suspect, Channel: o.channel, Value: float64(o.cycles), Limit: float64(o.compared) / 3,
			Evidence: fmt.Sprintf("%d of the first %d cycles differ from the later ones, the first by %.2g %%; none was left out", o.cycles, o.compared, 100*o.worst),
			Cause:    "the record is too short for its transient, or the specimen changes throughout", Remedy: "record longer, or say how many cycles to leave out"})
	case o.cycles > 0 && s.set.LeaveOut == 0:
		add(Doubt{Code: TransientLeftOut, Severity: Note, Channel: o.channel, Value: float64(o.cycles),
			Evidence: fmt.Sprintf("%d leading cycles left out; the first differed by %.2g %%", o.cycles, 100*o.worst),
			Cause:    "the onset of the motion, or the first loading cycles of the specimen", Remedy: "none needed"})
	}
	s.judgeFrequency(r, sol, add)
	s.judgeBlocks(sol, add)
	if u := r.ULossAngle; !(u <= math.Pi/180) {
		add(Doubt{Code: Noisy, Severity: Suspect, Value: u, Limit: math.Pi / 180,
			Evidence: fmt.Sprintf("the loss angle has a standard uncertainty of %.2g°", u*180/math.Pi),
			Cause:    "noise against a small signal", Remedy: "use a larger amplitude, more cycles or a smaller transducer"})
	}
	uncertain := 5 * r.UEnergy / math.Abs(r.Energy)
	if e := r.LoopEnergy/r.Energy - 1; math.Abs(e) > math.Max(0.02, uncertain) {
		add(Doubt{Code: LoopDiffers, Severity: Note, Value: e, Limit: 0.02,
			Evidence: fmt.Sprintf("the loop holds %.4g N·m, its fundamental %.4g N·m", r.LoopEnergy, r.Energy),
			Cause:    "both channels have harmonics", Remedy: "quote the energy of the loop, and drive with a purer sine"})
	}
}

func (s *segment) judgeSamples(r *Result, add func(Doubt)) {
	if r.PerCycle < 10 {
		add(Doubt{Code: SlowSampling, Severity: Suspect, Value: r.PerCycle, Limit: 10,
			Evidence: fmt.Sprintf("%.3g samples a cycle: harmonics up to %d could be told apart", r.PerCycle, r.Harmonics),
			Cause:    "the sampling rate is too low for the frequency", Remedy: "sample at least ten times a cycle"})
	}
	if r.Cycles < 2.99 {
		add(Doubt{Code: FewCycles, Severity: Suspect, Value: r.Cycles, Limit: 3,
			Evidence: fmt.Sprintf("%.3g cycles were fitted", r.Cycles),
			Cause:    "the record is short", Remedy: "record three cycles or more"})
	}
	for c, name := range []string{"force", "displacement"} {
		if e, value, limit, yes := s.rails[c].clipped(r.PerCycle, r.Cycles); yes {
			add(Doubt{Code: Clipped, Severity: Severe, Channel: name, Value: float64(e.longest), Limit: float64(limit),
				Evidence: fmt.Sprintf("the %s stands at %.6g for up to %d samples, in %d runs, %d samples in all", name, value, e.longest, e.runs, e.samples),
				Cause:    "the channel met the end of its range", Remedy: "choose a larger range and measure again"})
		}
	}
	if c := s.clock; c.steps > 0 {
		if share := float64(c.uneven) / float64(c.steps); share > 0.001 {
			add(Doubt{Code: TimeUneven, Severity: Suspect, Value: share, Limit: 0.001,
				Evidence: fmt.Sprintf("%.3g %% of the steps of time are more than 10 %% from %.6g s, by up to %.3g %%", 100*share, c.dt, 100*c.worst),
				Cause:    "times were rounded, or sampling was uneven", Remedy: "write the time with more digits; the fit takes the times as given"})
		}
	}
	if n := r.Counts.Backward; n > 0 {
		sev := Suspect
		if 100*n > r.Counts.Given {
			sev = Severe
		}
		add(Doubt{Code: TimeBackward, Severity: sev, Value: float64(n),
			Evidence: fmt.Sprintf("%d samples have an earlier time than the one before and were left out", n),
			Cause:    "two records were joined, or lines changed places", Remedy: "split the record, or sort it"})
	}
	if n := r.Counts.Missing + r.Counts.Lost; n > 0 {
		share := float64(n) / float64(r.Counts.Given+r.Counts.Lost)
		sev := Note
		if share > 0.1 {
			sev = Suspect
		}
		add(Doubt{Code: SamplesMissing, Severity: sev, Value: share,
			Evidence: fmt.Sprintf("%d samples are not numbers and %d are lacking in %d gaps of time", r.Counts.Missing, r.Counts.Lost, s.clock.gaps),
			Cause:    "the recorder lost samples", Remedy: "none needed for a few: the fit does without them"})
	}
}

func (s *segment) judgeFrequency(r *Result, sol *solution, add func(Doubt)) {
	differ := func(ratio float64, how string) {
		add(Doubt{Code: FrequenciesDiffer, Severity: Severe, Value: ratio - 1,
			Evidence: fmt.Sprintf("the force's frequency is %.6g of the displacement's (%s)", ratio, how),
			Cause:    "the columns belong to different records, or the clocks of two recorders differ", Remedy: "record both channels with one clock"})
	}
	told := false
	if s.fF > 0 && s.fx > 0 {
		ratio := s.fF / s.fx
		// The force's largest line may be a harmonic.
		off := math.Abs(ratio-math.Max(1, math.Round(ratio))) * s.fx * s.headTime
		if off > 1 && r.Force.Amplitude < 10*r.Force.Residual {
			differ(ratio, "largest lines of the spectra")
			told = true
		}
	}
	f := sol.frame
	dF, dx := sol.alone[0], sol.alone[1]
	if d, u := dF-dx, math.Hypot(sol.uAlone[0], sol.uAlone[1]); !told && math.Abs(d) > math.Max(5*u, 0.05) {
		differ(1+d/(f.scale*f.omega), fmt.Sprintf("%.2g rad apart over half the record, standard uncertainty %.2g rad", d, u))
	}
	if d := sol.step; s.set.Known && math.Abs(d) > math.Max(5*math.Hypot(sol.uAlone[0], sol.uAlone[1]), 0.05) {
		e := d / (f.scale * f.omega)
		add(Doubt{Code: FrequencyOffNominal, Severity: Suspect, Value: e,
			Evidence: fmt.Sprintf("the record's frequency is about %.3g %% from the one given: %.2g rad over half the record", 100*e, d),
			Cause:    "the generator's frequency is not the nominal one", Remedy: "let the frequency be fitted"})
	}
	if e := math.Max(s.stream.worst, s.stream.strain(sol)); r.Streamed && e > 0.01 {
		add(Doubt{Code: FrequencyFixedEarly, Severity: Suspect, Value: e, Limit: 0.01,
			Evidence: fmt.Sprintf("phase moved by %.2g rad over half a block: the amplitudes may be low by %.2g %%", e, 100*e*e/6),
			Cause:    "the frequency changed after the first samples", Remedy: "split the record, or give a larger buffer"})
	}
}

// judgeBlocks looks at the phase and amplitude of each channel from block to block.
func (s *segment) judgeBlocks(sol *solution, add func(Doubt)) {
	type point struct{ u, phase, uPhase, size, uSize float64 }
	var points [2][]point
	var angles []angle
	whole := derivation{s: sol}
	f := sol.frame
	var turn, last [2]float64
	s.stream.each(func(b block, one *solution) {
		if b.last-b.first+1.5*s.step() < 2*math.Pi/f.omega {
			return
		}
		one.sigma = sol.sigma
		d := derivation{s: one}
		F, x := d.phasor(0, 1), d.phasor(1, 1)
		if v := cmplx.Phase(F / x / whole.phasor(0, 1) * whole.phasor(1, 1)); finite(v) {
			angles = append(angles, angle{v, d.u(append(d.phaseTerms(0, 1), d.phaseTerms(1, -1)...)...)})
		}
		for c := range points {
			z := d.phasor(c, 1) * cmplx.Rect(1, f.omega*(f.center-b.frame.center)) / whole.phasor(c, 1)
			_, u := d.amplitude(c, 1)
			uPhase := d.u(d.phaseTerms(c, 1)...)
			p := cmplx.Phase(z)
			if len(points[c]) > 0 {
				turn[c] += math.Round((last[c]-p-turn[c])/(2*math.Pi)) * 2 * math.Pi
			}
			last[c] = p + turn[c]
			points[c] = append(points[c], point{(b.frame.center - f.center) / f.scale, last[c], math.Min(uPhase, 1), cmplx.Abs(z), u / cmplx.Abs(whole.phasor(c, 1))})
		}
	})
	s.judgeScatter(angles, add)
	for c, name := range []string{"force", "displacement"} {
		n := float64(len(points[c]))
		if n < 3 {
			continue
		}
		var mu, mp, ms, uu, up, us, noise, noisePhase float64
		for _, p := range points[c] {
			mu += p.u / n
			mp += p.phase / n
			ms += p.size / n
		}
		for _, p := range points[c] {
			uu += (p.u - mu) * (p.u - mu)
			up += (p.u - mu) * p.phase
			us += (p.u - mu) * p.size
			noise += p.uSize * p.uSize / n
			noisePhase += p.uPhase * p.uPhase / n
		}
		var off, curve, fourth float64
		for _, p := range points[c] {
			e := p.phase - mp - up/uu*(p.u-mu)
			off += e * e / (n - 2)
			w := (p.u-mu)*(p.u-mu) - uu/n
			curve += w * e
			fourth += w * w
		}
		if excess := math.Sqrt(math.Max(off-noisePhase, 0)); c == 1 && excess > 0.01 && off > 4*noisePhase {
			// φ = κ u² is a change of ω by 4κ/scale from end to end.
			change := 4 * curve / fourth / f.scale / (2 * math.Pi)
			add(Doubt{Code: FrequencyDrifts, Severity: Suspect, Channel: name, Value: excess, Limit: 0.01,
				Evidence: fmt.Sprintf("the phases of %.0f blocks leave the straight line by %.2g rad rms beyond noise; the frequency changes by about %.2g Hz over the record", n, excess, change),
				Cause:    "the frequency drifts or wanders", Remedy: "check the generator; the uncertainties stated are too small"})
		}
		change := 2 * us / uu / ms
		if u := 2 * math.Sqrt(noise/uu); math.Abs(change) > math.Max(0.01, 5*u) {
			add(Doubt{Code: AmplitudeDrifts, Severity: Suspect, Channel: name, Value: change, Limit: 0.01,
				Evidence: fmt.Sprintf("the amplitude of the %s changes by %.2g %% over the record, standard uncertainty %.1g %%", name, 100*change, 100*u),
				Cause:    "the specimen warms up or softens, or the control settles", Remedy: "condition longer, or fit a later part of the record"})
		}
	}
}

// angle is the loss angle of a block less that of the whole, and its standard
// uncertainty under white noise.
type angle struct{ v, u float64 }

// judgeScatter compares the scatter of the blocks' loss angles with that of white
// noise. Differences of neighbours are taken, so that a slow change does not count.
func (s *segment) judgeScatter(a []angle, add func(Doubt)) {
	const least, limit = 12, 2
	if len(a) < least {
		return
	}
	var got, want float64
	for i := 1; i < len(a); i++ {
		d := a[i].v - a[i-1].v
		got += d * d
		want += a[i].u*a[i].u + a[i-1].u*a[i-1].u
	}
	n := 2 * float64(len(a)-1)
	ratio := math.Sqrt(got / want)
	got, want = math.Sqrt(got/n), math.Sqrt(want/n)
	if !(ratio > limit) || got < 0.001 {
		return
	}
	add(Doubt{Code: BlocksScatter, Severity: Suspect, Value: ratio, Limit: limit,
		Evidence: fmt.Sprintf("the loss angles of %d blocks scatter by %.2g°; white noise of the same size would give %.2g°", len(a), got*180/math.Pi, want*180/math.Pi),
		Cause:    "hum, or a motion that is not steady from cycle to cycle", Remedy: fmt.Sprintf("take the standard uncertainties %.2g times as large, and look for the disturbance", ratio)})
}
