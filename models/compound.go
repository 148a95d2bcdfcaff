package models

import (
	"phaselag/data/unit"
)

// FormatVersion is the version of the compound file that this program writes.
// It reads every version up to this one.
const FormatVersion = 1

// Compound is a compound file in memory. Its fields are the file's numbers in
// the file's units and are its only state; the SI values that Modulus needs
// are derived once, by New or by reading. Do not change a Compound that has
// been made: make another.
type Compound struct {
	Format         int          `yaml:"phaselag_compound" json:"phaselag_compound"`
	Compound       Identity     `yaml:"compound" json:"compound"`
	ModulusKind    string       `yaml:"modulus" json:"modulus"` // "shear" or "young"
	PoissonRatio   unit.Number  `yaml:"poisson_ratio" json:"poisson_ratio"`
	Strain         StrainNote   `yaml:"strain" json:"strain"`
	State          State        `yaml:"state" json:"state"`
	ReferenceTempC float64      `yaml:"reference_temperature_C" json:"reference_temperature_C"`
	Linear         Linear       `yaml:"linear" json:"linear"`
	Shift          Shift        `yaml:"shift" json:"shift"`
	Vertical       Vertical     `yaml:"vertical" json:"vertical"`
	Amplitude      Amplitude    `yaml:"amplitude" json:"amplitude"`
	Static         []StaticItem `yaml:"static" json:"static"`
	Domain         Domain       `yaml:"domain" json:"domain"`
	Fit            Fit          `yaml:"fit" json:"fit"`
	Uncertainty    Uncertainty  `yaml:"uncertainty" json:"uncertainty"`
	Provenance     Provenance   `yaml:"provenance" json:"provenance"`
	derived        derived
}

// Identity names the compound and the batch that was tested.
type Identity struct {
	Name     string      `yaml:"name" json:"name"`
	Polymer  string      `yaml:"polymer" json:"polymer"`
	Batch    string      `yaml:"batch" json:"batch"`
	Hardness string      `yaml:"hardness" json:"hardness"`
	Density  unit.Number `yaml:"density_g_per_cm3" json:"density_g_per_cm3"`
	Tested   string      `yaml:"tested" json:"tested"` // ISO 8601 date, "" if not stated
}

// StrainNote says what a strain amplitude in this file means.
type StrainNote struct {
	Measure   string `yaml:"measure" json:"measure"`     // "shear"; "compression" or "tension" where Young's modulus is kept
	Amplitude string `yaml:"amplitude" json:"amplitude"` // "zero to peak"
}

// State is the state of the specimens in which the numbers hold.
type State struct {
	Conditioning  string      `yaml:"conditioning" json:"conditioning"`
	StaticPercent unit.Number `yaml:"static_strain_percent" json:"static_strain_percent"`
	Deformation   string      `yaml:"deformation" json:"deformation"`
}

// Linear is the relaxation spectrum at the reference temperature.
type Linear struct {
	// Equilibrium is a constant of the fit, not a property of the material.
	Equilibrium float64  `yaml:"equilibrium_modulus_MPa" json:"equilibrium_modulus_MPa"`
	Branches    []Branch `yaml:"branches" json:"branches"`
}

// Branch is one relaxation time with its modulus.
type Branch struct {
	Time    float64 `yaml:"relaxation_time_s" json:"relaxation_time_s"`
	Modulus float64 `yaml:"modulus_MPa" json:"modulus_MPa"`
}

// The shift laws of a compound file.
const (
	LawWLF       = "WLF"
	LawArrhenius = "Arrhenius"
	LawCrossover = "WLF+Arrhenius" // WLF above a temperature, Arrhenius below
	LawNone      = "none"          // the factors themselves, interpolated
)

// Shift is the horizontal shift law with the factors of the tested
// temperatures.
type Shift struct {
	Law        string      `yaml:"law" json:"law"`
	C1         unit.Number `yaml:"c1" json:"c1"`
	C2         unit.Number `yaml:"c2_K" json:"c2_K"`
	Activation unit.Number `yaml:"activation_kJ_per_mol" json:"activation_kJ_per_mol"`
	// Crossover is the temperature of the law WLF+Arrhenius; no other law has the
	// key.
	Crossover *float64      `yaml:"crossover_C,omitempty" json:"crossover_C,omitempty"`
	Factors   []ShiftFactor `yaml:"factors" json:"factors"`
}

// ShiftFactor is the shift of one tested temperature as measured, free of any
// law. Where the law is "none" these are the compound's parameters.
type ShiftFactor struct {
	TemperatureC float64     `yaml:"temperature_C" json:"temperature_C"`
	LogShift     unit.Number `yaml:"log10_aT" json:"log10_aT"`
	U            unit.Number `yaml:"u_log10_aT" json:"u_log10_aT"` // standard uncertainty; null: not determined
	Offset       unit.Number `yaml:"offset_K" json:"offset_K"`     // fitted temperature offset of the run
}

// The vertical laws of a compound file.
const (
	VerticalNone    = "none"
	VerticalDensity = "density"
	VerticalFactors = "factors" // bounded or free: the factors themselves
)

// Vertical is the vertical shift of the polymer term.
type Vertical struct {
	Law       string           `yaml:"law" json:"law"`
	Expansion unit.Number      `yaml:"expansion_per_K" json:"expansion_per_K"`
	Factors   []VerticalFactor `yaml:"factors" json:"factors"`
}

// VerticalFactor multiplies the polymer's modulus at one temperature.
type VerticalFactor struct {
	TemperatureC float64     `yaml:"temperature_C" json:"temperature_C"`
	B            unit.Number `yaml:"b_T" json:"b_T"`
}

// The amplitude laws and couplings of a compound file.
const (
	AmplitudeNone  = "none"
	AmplitudeKraus = "kraus"
	// AmplitudeExtraLoss is Kraus with a loss that falls exponentially with strain.
	AmplitudeExtraLoss   = "kraus_extra_loss"
	AmplitudeMaierGoritz = "maier_goritz"

	Overlay = "overlay" // the filler term is added to the polymer term
	Scaling = "scaling" // the polymer term is multiplied by one plus the filler term

	Causal          = "causal"
	RateIndependent = "rate_independent"
)

// Amplitude is the filler term.
type Amplitude struct {
	Law                string      `yaml:"law" json:"law"`
	Coupling           string      `yaml:"coupling" json:"coupling"`
	Storage            unit.Number `yaml:"storage_MPa" json:"storage_MPa"`
	Loss               unit.Number `yaml:"loss_MPa" json:"loss_MPa"`
	Critical           unit.Number `yaml:"critical_strain_percent" json:"critical_strain_percent"`
	Exponent           unit.Number `yaml:"exponent" json:"exponent"`
	Activation         unit.Number `yaml:"activation_kJ_per_mol" json:"activation_kJ_per_mol"`
	Frequency          string      `yaml:"frequency_dependence" json:"frequency_dependence"`
	ReferenceFrequency unit.Number `yaml:"reference_frequency_Hz" json:"reference_frequency_Hz"`
	// Only the law kraus_extra_loss has these two keys.
	ExtraLoss   *float64 `yaml:"extra_loss_MPa,omitempty" json:"extra_loss_MPa,omitempty"`
	ExtraStrain *float64 `yaml:"extra_loss_strain_percent,omitempty" json:"extra_loss_strain_percent,omitempty"`
	// Only the coupling "scaling" has these two keys, in the place of the moduli.
	StorageRatio *float64 `yaml:"storage_ratio,omitempty" json:"storage_ratio,omitempty"`
	LossRatio    *float64 `yaml:"loss_ratio,omitempty" json:"loss_ratio,omitempty"`
}

// StaticItem is a modulus from a static or relaxation test.
type StaticItem struct {
	Modulus      float64     `yaml:"modulus_MPa" json:"modulus_MPa"`
	U95          unit.Number `yaml:"U95_MPa" json:"U95_MPa"`
	Strain       unit.Number `yaml:"strain_percent" json:"strain_percent"`
	Time         unit.Number `yaml:"time_s" json:"time_s"`
	TemperatureC unit.Number `yaml:"temperature_C" json:"temperature_C"`
	Source       string      `yaml:"source" json:"source"`
}

// Domain is where the compound answers.
type Domain struct {
	Temperature      Range  `yaml:"temperature_C,flow" json:"temperature_C"`
	ReducedFrequency Range  `yaml:"reduced_frequency_Hz,flow" json:"reduced_frequency_Hz"`
	Strain           *Range `yaml:"strain_amplitude_percent,flow" json:"strain_amplitude_percent"` // null: no strain was ever stated
	// OwnStrain is the isotherms' own amplitude, %, at which an answer is
	// given when no strain is asked for; null where it was never stated.
	OwnStrain           unit.Number          `yaml:"own_strain_amplitude_percent" json:"own_strain_amplitude_percent"`
	AmplitudeMeasuredAt *AmplitudeMeasuredAt `yaml:"amplitude_measured_at" json:"amplitude_measured_at"`
}

// AmplitudeMeasuredAt is where strain sweeps were made.
type AmplitudeMeasuredAt struct {
	Temperature Range `yaml:"temperature_C,flow" json:"temperature_C"`
	Frequency   Range `yaml:"frequency_Hz,flow" json:"frequency_Hz"`
}

// Fit says how well the model meets the measurements.
type Fit struct {
	Points         int           `yaml:"points" json:"points"`
	SigmaMagnitude unit.Number   `yaml:"sigma_magnitude_percent" json:"sigma_magnitude_percent"`
	SigmaPhase     unit.Number   `yaml:"sigma_phase_deg" json:"sigma_phase_deg"`
	Superposition  Superposition `yaml:"superposition" json:"superposition"`
}

// The verdicts on superposition.
const (
	HoldsYes       = "yes"
	HoldsNo        = "no"
	HoldsUndecided = "undecided"
)

// Superposition is the verdict on time–temperature superposition.
type Superposition struct {
	Holds         string      `yaml:"holds" json:"holds"`
	P             unit.Number `yaml:"p" json:"p"`
	MisfitDeg     unit.Number `yaml:"misfit_deg" json:"misfit_deg"`
	MisfitPercent unit.Number `yaml:"misfit_percent" json:"misfit_percent"`
}

// Uncertainty is the joint covariance of the parameters.
type Uncertainty struct {
	Coverage         float64     `yaml:"coverage" json:"coverage"`
	DegreesOfFreedom unit.Number `yaml:"degrees_of_freedom" json:"degrees_of_freedom"`
	// Parameters names the rows of Cholesky by their keys in this file, and
	// the common errors "specimen_factor" (relative), "temperature_common_K"
	// and "phase_common_deg".
	Parameters []string `yaml:"parameters,flow" json:"parameters"`
	// Cholesky is the lower triangle, row by row; row i has i+1 numbers.
	Cholesky []Row `yaml:"cholesky" json:"cholesky"`
}

// Row is one row of a triangle, written on one line.
type Row []float64

// Provenance says from what the compound was made.
type Provenance struct {
	Version      string      `yaml:"version" json:"version"`
	Inputs       []InputFile `yaml:"inputs" json:"inputs"`
	Assumptions  []string    `yaml:"assumptions" json:"assumptions"`
	ResultSHA256 string      `yaml:"result_sha256" json:"result_sha256"`
}

// InputFile is a file that was read.
type InputFile struct {
	File   string `yaml:"file" json:"file"`
	SHA256 string `yaml:"sha256" json:"sha256"`
}
