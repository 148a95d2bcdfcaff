package specimen

// Shape is a test piece and how it is strained.
type Shape interface {
	// Name is what the campaign file calls the shape: "double shear".
	Name() string
	// Validate returns an error with a hint for the first impossible dimension,
	// nil if there is none. The other methods need a valid shape.
	Validate() error
	// Rotates reports whether stiffness is in N·m/rad and displacement in rad,
	// instead of N/m and m.
	Rotates() bool
	// Stiffness returns K* at the shear modulus g in Pa.
	Stiffness(g complex128) complex128
	// Modulus returns G* in Pa at the stiffness k; NaN where no modulus gives k.
	Modulus(k complex128) complex128
	// Strain returns the energy-equivalent shear strain (m/m) at a displacement
	// amplitude in m, or rad.
	Strain(displacement float64) float64
	// Displacement is the inverse of Strain.
	Displacement(strain float64) float64
	// Sensitivity lists what the modulus was computed from, in a fixed order. g
	// in Pa is where: it matters for bonded compression with a bulk modulus only.
	Sensitivity(g complex128) []Dimension
	// Checks lists the limits that the dimensions break and the assumptions that
	// the relation makes about them; nil if there is nothing to say.
	Checks() []Check
}

// Dimension is one number that the modulus was computed from.
type Dimension struct {
	Name  string  // "thickness"
	Value float64 // in Unit
	Unit  string  // "m", "Pa" or "1"
	// Sensitivity is ∂ln|G*|/∂ln(dimension) at constant measured stiffness: the
	// relative error of the modulus for a relative error of the dimension.
	Sensitivity float64
}

// Severity grades a Check.
type Severity string

// The severities: a note states an assumption or a limit that the relation
// still copes with, a doubt wants a look before the modulus is used.
const (
	Note  Severity = "note"
	Doubt Severity = "doubt"
)

// Check is one limit that a test piece breaks, or one assumption.
type Check struct {
	What     string  // "diameter over thickness"
	Found    float64 // the number found
	Wanted   string  // "at least 4"
	Source   string  // where the limit comes from
	Severity Severity
}

// The names of dimensions, as in the campaign file.
const (
	thickness     = "thickness"
	length        = "length"
	width         = "width"
	diameter      = "diameter"
	innerDiameter = "inner diameter"
	poisson       = "Poisson ratio"
	coefficient   = "compression coefficient"
	bulk          = "bulk modulus"
	shearFactor   = "shear coefficient"
)

// Sources that several checks share.
const (
	commonPractice = "common practice, no source"
	derived        = "derived from the relation itself"
)

// linear is a stiffness proportional to the shear modulus, K* = c·G*, and a
// strain proportional to the displacement. It keeps the algebra in one place.
type linear struct{ c, strain float64 }

func (l linear) stiffness(g complex128) complex128 { return complex(l.c*real(g), l.c*imag(g)) }
func (l linear) modulus(k complex128) complex128   { return complex(real(k)/l.c, imag(k)/l.c) }
