package fitting

import (
	"phaselag/data"
	"phaselag/data/unit"
	"phaselag/models"
)

// FormatVersion is the version of result.json that this program writes.
const FormatVersion = 1

// Result is everything that Characterize found. It is the content of
// result.json; reports are made from it alone. Numbers are in the units of
// their JSON keys; NaN stands for "not measured" and "not determined".
type Result struct {
	Format   int    `json:"phaselag_result"`
	Version  string `json:"version"`
	Campaign Header `json:"campaign"`
	// Compound is null where the measurements support no compound.
	Compound    *models.Compound   `json:"compound"`
	Tests       []TestSummary      `json:"tests"`
	Shifts      []Shift            `json:"shift_factors"`
	Laws        []Candidate        `json:"shift_laws"`
	Constants   []Constants        `json:"shift_constants"` // WLF at several reference temperatures
	Vertical    []Candidate        `json:"vertical_shifts"`
	Amplitude   []Candidate        `json:"amplitude_laws"`
	Parameters  []Parameter        `json:"parameters"`
	Specimens   []SpecimenFactor   `json:"specimen_factors"`
	Runs        []RunOffset        `json:"runs"`
	Noise       []Noise            `json:"noise"`
	Isotherms   []IsothermMisfit   `json:"superposition_misfit"`
	Common      Misfit             `json:"common_curve_misfit"`
	Causality   []Causality        `json:"causality"`
	Bootstrap   Bootstrap          `json:"bootstrap"`
	Compact     []CompactModel     `json:"compact_models"`
	Few         *FewBranches       `json:"few_branches"` // null where there is no master curve
	Fixed       []FixedFrequency   `json:"fixed_frequency"`
	Points      []Point            `json:"points"`
	Findings    []data.Finding     `json:"findings"`
	Assumptions []string           `json:"assumptions"`
	Inputs      []models.InputFile `json:"inputs"`
	Uncertainty StatedUncertainty  `json:"stated_uncertainty"`
	Fit         Counts             `json:"fit"`
	// Files lists what was written beside result.json, with hashes; empty
	// until it is written.
	Files []models.InputFile `json:"files"`
}

// Header says what was tested by whom.
type Header struct {
	Name       string          `json:"name"`
	Laboratory string          `json:"laboratory"`
	Operator   string          `json:"operator"`
	Vulcanised string          `json:"vulcanised"`
	Compound   models.Identity `json:"compound"`
	Cellular   bool            `json:"cellular"`
	Modulus    string          `json:"modulus"` // "shear" or "young"
}

// Symbol is the letter of the campaign's modulus: G or E.
func (h Header) Symbol() string {
	if h.Modulus == string(data.Young) {
		return "E"
	}
	return "G"
}

// TestSummary says how a test was understood and used.
type TestSummary struct {
	Name         string         `json:"name"`
	Kind         string         `json:"kind"`
	Files        []string       `json:"files"`
	Specimen     string         `json:"specimen"`
	Mounting     string         `json:"mounting"`
	Tested       string         `json:"tested"`
	Deformation  string         `json:"deformation"`
	Conditioning string         `json:"conditioning"`
	Runs         int            `json:"runs"`
	Points       int            `json:"points"`
	Used         int            `json:"used"`
	Temperature  [2]unit.Number `json:"temperature_C"`
	Frequency    [2]unit.Number `json:"frequency_Hz"`
	Strain       [2]unit.Number `json:"strain_percent"`
}

// Shift is one tested temperature: the factor free of any law, its standard
// uncertainty, and what the overlap and the law say.
type Shift struct {
	TemperatureC unit.Number `json:"temperature_C"`
	Log          unit.Number `json:"log10_aT"` // null where not determined
	U            unit.Number `json:"u_log10_aT"`
	Overlap      unit.Number `json:"overlap_log10_aT"` // null where no overlap
	Law          unit.Number `json:"law_log10_aT"`
	LawU         unit.Number `json:"u_law_log10_aT"`
	Offset       unit.Number `json:"offset_K"`
	B            unit.Number `json:"b_T"`
	Determined   bool        `json:"determined"`
}

// Candidate is one of several rival forms with its AICc: Delta above the best.
type Candidate struct {
	Name      string      `json:"name"`
	Constants int         `json:"constants"`
	AICc      unit.Number `json:"aicc"`
	Delta     unit.Number `json:"delta"`
	Chosen    bool        `json:"chosen"`
	Note      string      `json:"note"`
}

// Constants are the constants of WLF at one reference temperature.
type Constants struct {
	ReferenceC  float64     `json:"reference_temperature_C"`
	C1          unit.Number `json:"c1"`
	C1U         unit.Number `json:"u_c1"`
	C2          unit.Number `json:"c2_K"`
	C2U         unit.Number `json:"u_c2_K"`
	Correlation unit.Number `json:"correlation"`
}

// Parameter is a constant of the compound with its standard uncertainty and
// the half-width of its 95 % interval.
type Parameter struct {
	Name  string      `json:"name"`
	Unit  string      `json:"unit"`
	Value unit.Number `json:"value"`
	U     unit.Number `json:"u"`
	U95   unit.Number `json:"U95"`
	// Low and High bound the 95 % interval by profile likelihood, with the common
	// error of temperature; null where it was not made or is open.
	Low  unit.Number `json:"profile_low"`
	High unit.Number `json:"profile_high"`
	// Determined is false where the data cannot tell the constant.
	Determined bool `json:"determined"`
}

// SpecimenFactor is the fitted factor of a specimen in a mounting against the
// mean of all.
type SpecimenFactor struct {
	Specimen string      `json:"specimen"`
	Mounting string      `json:"mounting"`
	Factor   unit.Number `json:"factor"`
	U        unit.Number `json:"u_factor"`
}

// RunOffset is the fitted temperature offset of a run.
type RunOffset struct {
	Test         string      `json:"test"`
	Run          string      `json:"run"`
	TemperatureC unit.Number `json:"temperature_C"`
	Offset       unit.Number `json:"offset_K"`
	U            unit.Number `json:"u_offset_K"`
	PriorU       unit.Number `json:"prior_u_K"`
}

// Noise is the estimated noise of one kind of test.
type Noise struct {
	Kind         string      `json:"kind"`
	Magnitude    unit.Number `json:"sigma_magnitude_percent"`
	MagnitudeDOF unit.Number `json:"magnitude_dof"`
	Phase        unit.Number `json:"sigma_phase_deg"`
	PhaseDOF     unit.Number `json:"phase_dof"`
	// PhaseShare is the part of the phase's variance that goes with the square
	// of sin 2δ, as that of relative errors of storage and loss modulus does; 0:
	// the error of the angle is constant.
	PhaseShare unit.Number `json:"phase_share_of_sine_term"`
}

// Misfit compares a common curve with isotherms of their own, rms.
type Misfit struct {
	PhaseDeg        unit.Number `json:"phase_deg"`
	PhaseFloorDeg   unit.Number `json:"phase_floor_deg"`
	Percent         unit.Number `json:"magnitude_percent"`
	PercentFloor    unit.Number `json:"magnitude_floor_percent"`
	P               unit.Number `json:"p"`
	Replicates      int         `json:"replicates"`              // 0: p is that of the F test
	FreeVertical    unit.Number `json:"free_vertical_decades"`   // span of b_T if it were free; null if not tried
	FreeVerticalFit unit.Number `json:"free_vertical_phase_deg"` // rms phase misfit then
	FreeVerticalU   unit.Number `json:"free_vertical_u_decades"` // largest standard uncertainty of log10 b_T then
}

// IsothermMisfit is the misfit of the common curve at one temperature.
type IsothermMisfit struct {
	TemperatureC  unit.Number `json:"temperature_C"`
	Points        int         `json:"points"`
	PhaseDeg      unit.Number `json:"phase_deg"`
	Percent       unit.Number `json:"magnitude_percent"`
	BeyondDeg     unit.Number `json:"beyond_noise_deg"`
	BeyondPercent unit.Number `json:"beyond_noise_percent"`
	// P is the probability of such a misfit at this temperature by chance, from the
	// draws; null where none were needed.
	P unit.Number `json:"p"`
}

// FixedFrequency is what was measured at one temperature and one frequency:
// means over repeats, with half-widths of 95 % intervals of the means.
type FixedFrequency struct {
	TemperatureC  unit.Number `json:"temperature_C"`
	Frequency     unit.Number `json:"frequency_Hz"`
	Strain        unit.Number `json:"strain_percent"`
	Points        int         `json:"points"`
	Storage       unit.Number `json:"storage_MPa"`
	Loss          unit.Number `json:"loss_MPa"`
	LossFactor    unit.Number `json:"loss_factor"`
	StorageU95    unit.Number `json:"storage_U95_MPa"` // of the mean, from repeats; null for a single point
	LossFactorU95 unit.Number `json:"loss_factor_U95"`
}

// Point is one measured row with what the fit made of it.
type Point struct {
	Test             string      `json:"test"`
	Kind             string      `json:"kind"`
	File             string      `json:"file"`
	Row              int         `json:"row"`
	Specimen         string      `json:"specimen"`
	Run              string      `json:"run"`
	Frequency        unit.Number `json:"frequency_Hz"`
	TemperatureC     unit.Number `json:"temperature_C"`
	Nominal          unit.Number `json:"nominal_temperature_C"`
	Offset           unit.Number `json:"temperature_offset_K"`
	Strain           unit.Number `json:"strain_amplitude_percent"`
	Time             unit.Number `json:"time_s"`
	Storage          unit.Number `json:"storage_MPa"`
	Loss             unit.Number `json:"loss_MPa"`
	ReducedFrequency unit.Number `json:"reduced_frequency_Hz"`
	FittedStorage    unit.Number `json:"fitted_storage_MPa"`
	FittedLoss       unit.Number `json:"fitted_loss_MPa"`
	ResidualPercent  unit.Number `json:"residual_magnitude_percent"`
	ResidualDeg      unit.Number `json:"residual_phase_deg"`
	Weight           unit.Number `json:"weight"`
	// What was taken off for the moving mass, of the force, and for the frame, of
	// the displacement; null where nothing was.
	MassShare  unit.Number `json:"inertia_percent"`
	FrameShare unit.Number `json:"compliance_percent"`
	Used       bool        `json:"used"`
	Reason     string      `json:"reason"`
}

// StatedUncertainty repeats the campaign's standard uncertainties; null: not
// stated.
type StatedUncertainty struct {
	TemperatureScatter unit.Number `json:"temperature_scatter_K"`
	TemperatureCommon  unit.Number `json:"temperature_common_K"`
	Geometry           unit.Number `json:"geometry_percent"`
	Phase              unit.Number `json:"phase_deg"`
	// ScatterUsed is what the fit used: stated, or estimated from the runs.
	ScatterUsed unit.Number `json:"temperature_scatter_used_K"`
}

// Counts say how large the fit was.
type Counts struct {
	Rows        int         `json:"rows"`
	Columns     int         `json:"columns"`
	Nonlinear   int         `json:"nonlinear"`
	Iterations  int         `json:"iterations"`
	Evaluations int         `json:"evaluations"`
	DOF         unit.Number `json:"degrees_of_freedom"`
}
