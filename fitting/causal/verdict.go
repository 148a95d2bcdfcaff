package causal

// Outcome is the answer in one word.
type Outcome string

// The outcomes.
const (
	Consistent   Outcome = "consistent"   // nothing speaks against causality
	Inconsistent Outcome = "inconsistent" // a fit fails, or a hypothesis helps significantly
	Undecided    Outcome = "undecided"    // the isotherm cannot carry the test: see Reason
)

// Fit is one of the two fits and the tests on its residuals.
type Fit struct {
	Modulus []complex128 // fitted, one a frequency

	// Residuals ln(measured/fitted), one a frequency: magnitude in %, phase in
	// degrees. Then their rms and the largest without sign.
	MagnitudePercent, PhaseDegrees           []float64
	RMSMagnitudePercent, RMSPhaseDegrees     float64
	WorstMagnitudePercent, WorstPhaseDegrees float64

	ChiSquare        float64 // weighted sum of squares, noise and floor as weights
	Parameters       int     // rank of the free fit, or parameters above zero
	DegreesOfFreedom int     // rows − Parameters
	ChiSquareP       float64 // of so large a sum by chance; NaN for the free fit when it gave the noise
	RunsMagnitude    Runs
	RunsPhase        Runs
	P                float64 // smallest of the three P times their number, at most 1
}

// Verdict is what Judge found. Every figure but Outcome and Reason is zero
// when the isotherm could not be fitted at all.
type Verdict struct {
	Outcome Outcome
	Reason  string // why undecided; "" otherwise

	// CausalFree: the fit with free signs, the Kramers–Kronig test proper, shows
	// no misfit at the level of 1 %. CausalNonNegative: nor does the fit that a
	// passive material at rest allows. Both false when undecided.
	CausalFree, CausalNonNegative bool

	// NoiseMagnitude (relative) and NoisePhase (rad) are the noise used, given
	// or estimated; FloorMagnitude and FloorPhase what the fixed relaxation times
	// cannot describe, added in quadrature.
	NoiseMagnitude, NoisePhase float64
	NoiseEstimated             bool
	FloorMagnitude, FloorPhase float64

	RelaxationTimes []float64 // s, of both fits

	Free, NonNegative Fit

	// Suspicions holds the four hypotheses in the order of the constants of
	// Kind. Likely is the one that removes most, "" when none removes a
	// significant part; Others cannot be told from it by this isotherm.
	Suspicions []Suspicion
	Likely     Kind
	Others     []Kind
}
