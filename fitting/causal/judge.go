package causal

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// The isotherm must have this much to be judged at all (common practice, no
// source), and the floor of the method must stay below what is worth judging.
const (
	fewestFrequencies = 6
	narrowestSpan     = 1.0  // decades
	highestMagnitude  = 0.01 // of the floor
	highestPhase      = 0.01 // rad
)

// significance is the level of each of the three decisions: free fit,
// non-negative fit, hypotheses. Together they raise at most 3 % false alarms.
const significance = 0.01

// Judge tests whether storage and loss modulus of an isotherm belong together.
// It returns an error for data that no isotherm can have, with the row, and
// the outcome Undecided for one that is too short.
func Judge(s Isotherm) (Verdict, error) {
	if err := s.check(); err != nil {
		return Verdict{}, err
	}
	n := len(s.Frequency)
	// Half a thousandth of slack: ten times rounded frequencies are a decade.
	if n < fewestFrequencies || s.span() < narrowestSpan-5e-4 {
		return Verdict{Outcome: Undecided, Reason: fmt.Sprintf(
			"%d frequencies over %.2g decades; the test needs %d over %.2g",
			n, s.span(), fewestFrequencies, narrowestSpan)}, nil
	}
	v := Verdict{NoiseMagnitude: s.Magnitude, NoisePhase: s.Phase}
	if !s.noiseKnown() {
		v.NoiseEstimated = true
		v.NoiseMagnitude, v.NoisePhase = estimate(s)
	}
	l, ok := newLattice(s.Frequency, s.Modulus, v.NoiseMagnitude, v.NoisePhase)
	if !ok {
		return unfit(v), nil
	}
	v.RelaxationTimes, v.FloorMagnitude, v.FloorPhase = l.tau, l.magnitude, l.phase
	sm, sd := math.Hypot(v.NoiseMagnitude, l.magnitude), math.Hypot(v.NoisePhase, l.phase)
	y := newSystem(s.Frequency, s.Modulus, l.basis, sm, sd)
	free := y.linear()
	bound, ok := y.nonNegative(nil, 0)
	if !ok || math.IsNaN(free.sum) || math.IsInf(free.sum, 0) {
		return unfit(v), nil
	}
	v.Free = describe(free)
	v.NonNegative = describe(bound)
	test(&v.Free, v.NoiseEstimated)
	test(&v.NonNegative, false)
	if v.NoiseEstimated {
		compare(&v.NonNegative, v.Free)
	}
	dof := math.Inf(1)
	if v.NoiseEstimated {
		dof = float64(v.Free.DegreesOfFreedom)
	}
	for i := range hypotheses {
		v.Suspicions = append(v.Suspicions, y.suspect(&hypotheses[i], bound.sum, dof))
	}
	v.Likely, v.Others = likely(v.Suspicions)
	if l.magnitude > highestMagnitude || l.phase > highestPhase {
		v.Outcome = Undecided
		v.Reason = fmt.Sprintf("%d frequencies over %.2g decades carry %d relaxation times, which alone leave up to %.2g %% and %.2g deg; measure more frequencies",
			n, s.span(), len(l.tau), 100*l.magnitude, degrees(l.phase))
		v.Likely, v.Others = "", nil
		return v, nil
	}
	v.CausalFree = !(v.Free.P < significance)
	v.CausalNonNegative = !(v.NonNegative.P < significance)
	v.Outcome = Consistent
	if !v.CausalFree || !v.CausalNonNegative || v.Likely != "" {
		v.Outcome = Inconsistent
	}
	return v, nil
}

func unfit(v Verdict) Verdict {
	v.Outcome, v.Reason = Undecided, "the moduli span too many powers of ten to be fitted"
	return v
}

// describe turns a solution into figures for people.
func describe(s solution) Fit {
	n := len(s.model)
	f := Fit{Modulus: s.model, ChiSquare: s.sum, Parameters: s.rank, DegreesOfFreedom: 2*n - s.rank}
	for i := range n {
		f.MagnitudePercent = append(f.MagnitudePercent, 100*s.residual[i])
		f.PhaseDegrees = append(f.PhaseDegrees, degrees(s.residual[n+i]))
	}
	f.RMSMagnitudePercent, f.RMSPhaseDegrees = rms(f.MagnitudePercent), rms(f.PhaseDegrees)
	f.WorstMagnitudePercent, f.WorstPhaseDegrees = worst(f.MagnitudePercent), worst(f.PhaseDegrees)
	f.RunsMagnitude, f.RunsPhase = countRuns(s.residual[:n]), countRuns(s.residual[n:])
	return f
}

// test fills the probabilities of a fit. With a known noise S of a linear fit
// is chi-square distributed with rows − rank degrees of freedom; that of the
// non-negative fit nearly so, with rows − positive parameters.
func test(f *Fit, own bool) {
	f.ChiSquareP = math.NaN()
	if !own {
		f.ChiSquareP = distuv.ChiSquared{K: float64(f.DegreesOfFreedom)}.Survival(f.ChiSquare)
	}
	f.combine()
}

// compare replaces the chi-square test of the non-negative fit by an F test of
// what the signs cost, for a noise that comes from the free fit:
//
//	F = [(S_nonneg − S_free)/(q_free − q_nonneg)] / [S_free/dof_free]
func compare(f *Fit, free Fit) {
	extra := float64(free.Parameters - f.Parameters)
	f.ChiSquareP = 1
	if extra > 0 && free.ChiSquare > 0 && f.ChiSquare > free.ChiSquare {
		dof := float64(free.DegreesOfFreedom)
		x := (f.ChiSquare - free.ChiSquare) / extra / (max(free.ChiSquare/dof, 1e-300))
		f.ChiSquareP = distuv.F{D1: extra, D2: dof}.Survival(x)
	}
	f.combine()
}

func (f *Fit) combine() {
	least, count := 1.0, 0.0
	for _, p := range []float64{f.ChiSquareP, f.RunsMagnitude.P, f.RunsPhase.P} {
		if !math.IsNaN(p) {
			least, count = min(least, p), count+1
		}
	}
	f.P = min(1, count*least)
}

// estimate finds the noise from the free fit: each part's sum of squares over
// its rows less their leverages, which depend on the weights and are therefore
// iterated ten times.
func estimate(s Isotherm) (magnitude, phase float64) {
	n := len(s.Frequency)
	sm, sd := 0.01, 0.01
	for range 10 {
		l, ok := newLattice(s.Frequency, s.Modulus, sm, sd)
		if !ok {
			break
		}
		sol := newSystem(s.Frequency, s.Modulus, l.basis, sm, sd).linear()
		a, b := part(sol.residual[:n], sol.leverage[:n]), part(sol.residual[n:], sol.leverage[n:])
		if math.IsNaN(a) || math.IsNaN(b) {
			break
		}
		// Exact data leave nothing; weights stay finite and comparable.
		sm, sd = max(a, 1e-3*b, 1e-9), max(b, 1e-3*a, 1e-9)
	}
	return sm, sd
}

func part(residual, leverage []float64) float64 {
	sum, dof := 0.0, 0.0
	for i, r := range residual {
		sum += r * r
		dof += 1 - leverage[i]
	}
	return math.Sqrt(sum / max(dof, 0.5))
}

func rms(x []float64) float64 {
	s := 0.0
	for _, v := range x {
		s += v * v
	}
	return math.Sqrt(s / float64(len(x)))
}

func worst(x []float64) float64 {
	w := 0.0
	for _, v := range x {
		w = max(w, math.Abs(v))
	}
	return w
}

func degrees(rad float64) float64 { return rad * 180 / math.Pi }
