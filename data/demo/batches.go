package demo

// Batch is what differs in a batch from the compound.
type Batch struct {
	Warmer    float64 // K by which the glass transition lies higher
	Stiffness float64 // factor on everything; 0: 1
	Filler    float64 // factor on the filler's moduli; 0: 1
	Critical  float64 // factor on the filler's critical strain; 0: 1
}

// moved is a shift law of a compound whose glass transition lies higher.
type moved struct {
	law    Shift
	warmer float64
}

// Log10 is that of the law as many kelvins lower, at the old reference.
func (m moved) Log10(kelvin float64) float64 { return m.law.Log10(kelvin - m.warmer) }

// Changed is the truth of a batch: at T its polymer relaxes as the compound's at T less
// the shift.
func (t Truth) Changed(b Batch) Truth {
	factor := func(x float64) float64 {
		if x == 0 {
			return 1
		}
		return x
	}
	s := factor(b.Stiffness)
	t.Equilibrium *= s
	processes := append([]Process{}, t.Processes...)
	for i := range processes {
		processes[i].Strength *= s
		if processes[i].Shift != nil {
			processes[i].Shift = moved{processes[i].Shift, b.Warmer}
		}
	}
	t.Processes = processes
	if t.Shift != nil {
		t.Shift = moved{t.Shift, b.Warmer}
	}
	if t.Filler != (Filler{}) {
		t.Filler.Storage *= s * factor(b.Filler)
		t.Filler.Loss *= s * factor(b.Filler)
		t.Filler.Strain *= factor(b.Critical)
	}
	return t
}

// ReleaseSeed and ReleasedBatch make the release test in the folder release-test: a batch
// whose glass transition lies 2 K higher, 4 % stiffer.
const ReleaseSeed = 61

// ReleasedBatch is what was done to that batch.
func ReleasedBatch() Batch { return Batch{Warmer: 2, Stiffness: 1.04} }

// ReleasePlan is a short release test: three temperatures near the transition, where a
// shift of it shows, five frequencies, one strain sweep, one piece.
func ReleasePlan() Plan {
	const conditioned = "{cycles: 6, strain: 20 %, rest: 1 h}"
	noise := Noise{Magnitude: 0.005, Phase: 0.3}
	p := HM60Plan()
	p.Title, p.Batch = "HM-60 release test", "2612-01"
	p.Specimens = p.Specimens[:1]
	p.Tests = []Test{
		{
			Name: "isotherms", Kind: FrequencySweep, File: "isotherms.csv", Specimen: "pair-1", Tested: "2026-12-03", Dwell: "15 min", Conditioning: conditioned,
			Temperatures: []float64{-40, -30, -20}, Frequencies: Decades(1, 30, 5), Strains: []float64{0.2}, Noise: noise,
		},
		{
			Name: "strain sweep", Kind: StrainSweep, File: "strain-sweep.csv", Specimen: "pair-1", Tested: "2026-12-03", Dwell: "15 min", Conditioning: conditioned,
			Temperatures: []float64{23}, Frequencies: []float64{10}, Strains: Decades(0.1, 20, 15), Noise: noise,
		},
	}
	return p
}
