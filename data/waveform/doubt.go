package waveform

import "errors"

// Severity grades a Doubt.
type Severity string

// The severities: a note is for information, a doubt wants a look, and a severe
// one means that the number should not be used as it stands.
const (
	Note    Severity = "note"
	Suspect Severity = "doubt"
	Severe  Severity = "severe"
)

// Code names what a Doubt is about.
type Code string

// The codes. Beside each the number that Value holds, and in brackets the limit.
// The limits are this package's own rules where nothing else is said.
const (
	SlowSampling        Code = "sampling-slow"                // samples a cycle (10)
	FewCycles           Code = "few-cycles"                   // cycles (3)
	Clipped             Code = "channel-clipped"              // longest run of samples at the extreme value
	FrequencyDrifts     Code = "frequency-drifts"             // rad by which the blocks' phases leave the line, rms beyond noise (0.01)
	AmplitudeDrifts     Code = "amplitude-drifts"             // change over the record over the amplitude (0.01)
	TimeUneven          Code = "time-uneven"                  // share of the steps that are more than 10 % off (0.001)
	TimeBackward        Code = "time-runs-backward"           // samples left out (0)
	SamplesMissing      Code = "samples-missing"              // share of the samples (0)
	TransientLeftOut    Code = "transient-left-out"           // cycles (0)
	TransientLong       Code = "transient-long"               // cycles that differ (a third of those compared)
	RestLeftOut         Code = "rest-left-out"                // samples (0)
	FrequenciesDiffer   Code = "channels-differ-in-frequency" // force over displacement, minus 1
	FrequencyOffNominal Code = "frequency-off-nominal"        // over the known frequency, minus 1
	Noisy               Code = "loss-angle-uncertain"         // rad, standard uncertainty of δ (0.0175: 1°)
	BlocksScatter       Code = "blocks-scatter"               // scatter of the blocks' loss angles over that of white noise (2)
	LoopDiffers         Code = "loop-energy-differs"          // loop integral over π F0 x0 sin δ, minus 1 (0.02)
	FrequencyFixedEarly Code = "frequency-fixed-early"        // rad over half a block (0.01)
	ChangeFoundLate     Code = "change-found-late"            // samples of the next segment in this one (0)
)

// Doubt is one thing that makes a record doubtful, with the number that shows it.
type Doubt struct {
	Code     Code
	Severity Severity
	Channel  string // "force", "displacement" or "" for both
	Value    float64
	Limit    float64
	Evidence string // what was seen, in numbers
	Cause    string // the likely cause
	Remedy   string // what would be right
}

// What is refused. The errors returned wrap one of these, with the numbers, and
// carry a hint for people (place.Hint).
var (
	ErrTooFew   = errors.New("too few samples")
	ErrTime     = errors.New("the time does not advance")
	ErrTooSlow  = errors.New("too few samples a cycle")
	ErrTooShort = errors.New("less than one full cycle")
	ErrNoMotion = errors.New("no oscillation in the displacement")
	ErrNoForce  = errors.New("no force")
)
