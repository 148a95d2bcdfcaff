package demo

// Kind says what a planned test varies. The values are those of the campaign
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

// Pair says which two columns an oscillatory test's table holds.
type Pair string

// The pairs. The zero value is StorageLoss.
const (
	StorageLoss       Pair = ""
	StorageLossFactor Pair = "storage modulus and loss factor"
	MagnitudePhase    Pair = "magnitude and phase"
)

// Plan is what a laboratory does and how wrong it is.
type Plan struct {
	Title      string
	Laboratory string
	Head       []string // comment lines at the top of every file
	Vulcanised string   // ISO 8601 date, "" for none
	Polymer    string   // ISO 1629 symbol, "" for none
	Batch      string
	Hardness   string // "60 IRHD"
	Density    string // "1.12 g/cm3"
	Specimens  []Specimen
	Tests      []Test
	Analysis   []string // lines of the campaign file's analysis, "key: value"
	Errors     Errors
	// Unstated leaves the standard uncertainties out of the campaign file.
	Unstated bool
	// Digits is the number of significant digits of every number written; 0
	// writes what reads back bit for bit.
	Digits int
}

// Specimen is a double-shear test piece of two round rubber layers.
type Specimen struct {
	Name      string
	Diameter  float64 // mm
	Thickness float64 // mm, of one layer
}

// Test is one entry of the list of tests. Which lists are used, and in which
// nesting, follows from Kind:
//
//	frequency sweep    run: temperature          points: frequencies   (one strain)
//	strain sweep       run: temperature, frequency   points: strains
//	temperature sweep  run: frequency            points: temperatures  (one strain)
//	relaxation         run: temperature          points: times         (one strain)
//	static             one value at the first of each list
type Test struct {
	Name         string
	Kind         Kind
	File         string // "" for a static test
	Specimen     string
	Mounting     string    // "" is "1"
	Tested       string    // ISO 8601 date, "" for none
	Temperatures []float64 // °C
	Frequencies  []float64 // Hz
	Strains      []float64 // %, single amplitude
	Times        []float64 // s
	Rate         float64   // K/min, of a temperature sweep
	RampTime     float64   // s, of a relaxation test's step
	Dwell        string    // "10 min"
	Conditioning string    // "{cycles: 6, strain: 20 %, rest: 1 h}"
	Pair         Pair
	LossFactor   bool // a further column tan δ beside StorageLoss
	// OmitStrain leaves the strain out of table and campaign file.
	OmitStrain bool
	Noise      Noise
}

// Noise is the standard deviation of what scatters from row to row. Either
// Magnitude and Phase are used, as an instrument measures, or Storage and Loss;
// both may be set, then both act.
type Noise struct {
	Magnitude float64 // relative, of |G*|, of G(t) and of a static modulus
	Phase     float64 // degrees
	Storage   float64 // relative, of G'
	Loss      float64 // relative, of G”
}

// Errors are the standard uncertainties of what a laboratory does not see in
// its rows.
type Errors struct {
	TemperatureScatter float64 // K, one draw for every run
	TemperatureCommon  float64 // K, one draw for the campaign
	Geometry           float64 // relative, one draw for every specimen and mounting
	Phase              float64 // degrees, one draw for the campaign
	// Lag is the standard deviation of a temperature sweep's lag, in K, one
	// draw for every run, besides its scatter.
	Lag float64
}

// Noiseless returns a copy of the plan in which nothing errs and every number
// is written with all its digits: the laboratory of one's dreams.
func (p Plan) Noiseless() Plan {
	p.Errors = Errors{}
	p.Unstated = true
	p.Digits = 0
	tests := make([]Test, len(p.Tests))
	copy(tests, p.Tests)
	for i := range tests {
		tests[i].Noise = Noise{}
	}
	p.Tests = tests
	return p
}

// Only returns a copy of the plan with the named tests alone.
func (p Plan) Only(names ...string) Plan {
	var tests []Test
	for _, t := range p.Tests {
		for _, n := range names {
			if t.Name == n {
				tests = append(tests, t)
			}
		}
	}
	p.Tests = tests
	return p
}
