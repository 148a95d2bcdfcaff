package data

// Kind says what was varied in a test. The values are those of the campaign
// file.
type Kind string

// The kinds of test.
const (
	FrequencySweep   Kind = "frequency sweep"
	StrainSweep      Kind = "strain sweep"
	TemperatureSweep Kind = "temperature sweep"
	Relaxation       Kind = "relaxation"
	Static           Kind = "static"
)

// Modulus names the modulus in which a campaign's numbers are kept.
type Modulus string

// The moduli.
const (
	Shear Modulus = "shear"
	Young Modulus = "young"
)

// Deformation is how a specimen was strained. The values are those of the
// campaign file.
type Deformation string

// The deformations. Bonded compression and torsion need a specimen to become a
// shear modulus and an energy-equivalent shear strain.
const (
	SimpleShear Deformation = "shear"
	Tension     Deformation = "tension"
	Compression Deformation = "compression"
	Torsion     Deformation = "torsion"
)

// Campaign is everything one qualification measured on one compound, in SI
// units. Open makes it; nothing changes it afterwards.
type Campaign struct {
	Name       string // the campaign's title; the file's stem where it has none
	Laboratory string
	Operator   string
	Vulcanised string // ISO 8601 date as written, "" if not stated
	Compound   Compound
	Specimens  []Specimen
	Tests      []Test
	Analysis   Analysis
	// Uncertainty holds the standard uncertainties that repeats cannot show.
	Uncertainty Uncertainty

	Modulus      Modulus // in which Points are kept: Shear unless the material is cellular
	PoissonRatio float64 // used in the conversion; NaN where none was needed or known

	Inputs      []Input   // every file read, in the order of reading, campaign file first
	Assumptions []string  // each once, in the order in which they were made
	Findings    []Finding // doubts that reading itself raised
}

// Compound says what was tested.
type Compound struct {
	Name     string
	Polymer  string  // ISO 1629 symbol, "" if not stated
	Batch    string  // "" if not stated
	Hardness string  // as written, for example "60 IRHD"; "" if not stated
	Density  float64 // kg/m³, NaN if not stated
	Cellular bool    // a foam or sponge: its Young's modulus is not turned into shear unless a Poisson ratio is given
}

// Specimen is one test piece.
type Specimen struct {
	Name      string
	Shape     string  // as in the campaign file, for example "double shear"
	Diameter  float64 // m, NaN if not stated
	Width     float64 // m, NaN if not stated
	Length    float64 // m, NaN if not stated
	Thickness float64 // m, of one rubber layer; NaN if not stated
	// The rest is NaN if not stated.
	InnerDiameter float64 // m, of a hollow cylinder
	Poisson       float64 // for lubricated compression, tension and bending
	Coefficient   float64 // k of bonded compression
	Bulk          float64 // Pa, of bonded compression
	ShearFactor   float64 // shear coefficient of bending
	Bending       bool    // the bending of sheared layers is taken off
	// Uncertainty holds the relative standard uncertainties of the dimensions by their
	// names ("thickness"); nil if none is stated.
	Uncertainty map[string]float64
	Measured    bool // dimensions measured on this piece, not taken from the drawing
}

// Test is one entry of the campaign's list of tests.
type Test struct {
	Name        string
	Kind        Kind
	Files       []string // as written in the campaign file
	Specimen    string   // name of a Specimen; the test's own name where none was stated
	Mounting    string   // "1" where none was stated
	Tested      string   // ISO 8601 date as written, "" if not stated
	Deformation Deformation
	Direction   string  // "ascending", "descending", "both" or ""
	Control     string  // "displacement", "force" or ""
	Rate        float64 // temperature rate, K/s, signed by Direction; NaN if not stated
	RampTime    float64 // s, of the step of a relaxation test; NaN if not stated

	StaticStrain float64      // m/m, NaN if not stated
	StaticForce  float64      // N, NaN if not stated
	Dwell        float64      // s, NaN if not stated
	Conditioning Conditioning // zero value: not stated
	Apparatus    string       // name, "" if not stated

	// Columns says how each used column was understood, for people.
	Columns []Column
	Runs    []Run
	// Signals holds what was found in the segments of a test of raw signals.
	Signals []Signal
	// StaticValues holds the rows of a Static test; Runs is then empty.
	StaticValues []StaticValue
}

// Conditioning is the mechanical conditioning before a test.
type Conditioning struct {
	Cycles int     // 0: not stated
	Strain float64 // m/m, NaN if not stated
	Rest   float64 // s, NaN if not stated
}

// Column says how one column of a file was understood.
type Column struct {
	File     string
	Heading  string // as it stands in the file
	Quantity string // for example "storage modulus"
	Unit     string // for example "MPa"
}

// Run is one pass of a test without interruption: an isotherm, one strain
// sweep at one frequency and temperature, one temperature sweep at one
// frequency, one relaxation. Within a run the error of the temperature is
// common to all points.
type Run struct {
	Name        string  // for people: "isotherms, −40 °C"
	Temperature float64 // K, nominal: stated, or the mean of the points rounded to 0.1 K; NaN in a temperature sweep
	Frequency   float64 // Hz; NaN where it varies or does not exist
	Strain      float64 // energy-equivalent single amplitude, m/m; NaN where it varies or is not known
	Points      []Point
}

// Point is one row of a table.
type Point struct {
	File string // as in Test.Files
	Row  int    // 1-based line in the file

	Frequency   float64 // Hz; NaN in a relaxation test
	Temperature float64 // K, measured where the file has it
	Strain      float64 // energy-equivalent shear strain, single amplitude, m/m; NaN if not known
	Time        float64 // s since the step; NaN in an oscillatory test

	Storage float64 // Pa; the relaxation modulus in a relaxation test
	Loss    float64 // Pa; NaN in a relaxation test
	// MassShare is what the force on the moving mass was of the specimen's, and
	// FrameShare what the frame took of the displacement, where the machine was
	// corrected for; NaN elsewhere.
	MassShare, FrameShare float64
	// StatedLossFactor is the file's own loss factor where the moduli were
	// taken from other columns; NaN where there is none. For the check only.
	StatedLossFactor float64
	// StatedViscosity is the file's own magnitude of the complex viscosity, Pa·s, NaN
	// where there is none. |η*| = |G*|/ω tells a frequency in Hz from one in rad/s. For
	// the check only.
	StatedViscosity float64

	Used   bool
	Reason string // why it is left out, "" if Used
}

// StaticValue is a modulus from a static test.
type StaticValue struct {
	File        string
	Row         int
	Modulus     float64 // Pa
	U           float64 // standard uncertainty, Pa; NaN if not stated
	Strain      float64 // energy-equivalent shear strain, m/m; NaN if not stated
	Time        float64 // s after loading; NaN if not stated
	Temperature float64 // K; NaN if not stated
}

// Analysis holds the wishes of the campaign file. Zero values mean "auto".
type Analysis struct {
	ReferenceTemperature float64 // K; NaN: the tested temperature nearest 23 °C
	ShiftLaw             string  // "auto", "WLF", "Arrhenius", "WLF+Arrhenius", "none"
	VerticalShift        string  // "auto", "none", "density", "bounded", "free"
	Expansion            float64 // volume expansion for the density law, 1/K; NaN: assumed
	AmplitudeLaw         string  // "auto", "kraus", "kraus_extra_loss", "maier_goritz", "none"
	AmplitudeCoupling    string  // "auto", "overlay", "scaling"
	FillerFrequency      string  // "auto", "causal", "rate_independent"
}

// Uncertainty holds standard uncertainties; NaN where not stated.
type Uncertainty struct {
	TemperatureScatter float64 // K, from run to run
	TemperatureCommon  float64 // K, calibration
	Geometry           float64 // relative, of one specimen's geometry factor
	Phase              float64 // rad, common to all measurements
	Force              float64 // relative
	Displacement       float64 // relative
}

// Input is a file that was read.
type Input struct {
	File   string // as written, relative to the campaign file
	SHA256 string // lower-case hexadecimal
}
