package mount

// Mount is what a mount file says, in SI.
type Mount struct {
	Name        string // the file's stem where it has none
	Elements    []Element
	Arrangement Arrangement
	Count       int    // mounts side by side; 1 if not stated
	Direction   string // as written; "" if not stated
	Mass        float64
	StaticForce float64 // N, static load on all mounts together; 0 or NaN: the weight of Mass
	Excitation  Excitation
	PartFactor  float64 // 1 if not stated
	PartFactorU float64 // its relative standard uncertainty, NaN if not stated
	Tolerance   Tolerance
	// Resistance is the thermal resistance in K/W of the rubber of one mount to its
	// surroundings; 0 if not stated.
	Resistance  float64
	Assumptions []string // what was taken as given, in the order of the file
}

// Excitation is what shakes the mount, single amplitude; NaN where not stated.
// At most one of the two is stated.
type Excitation struct {
	Displacement float64 // m; of a mount that rotates rad
	Force        float64 // N, on all mounts together; of a mount that rotates N·m
}

// Tolerance is the spread of production.
type Tolerance struct {
	Hardness float64 // degrees of Scale, to either side; NaN if not stated
	Scale    string  // "IRHD" or "Shore A"
}

// Kind says how the members of an Arrangement are joined.
type Kind int

// The kinds. A Single and an InclinedPair name an element, the others hold
// members.
const (
	Single Kind = iota
	Parallel
	Series
	InclinedPair
)

// Arrangement is a node of the tree of elements.
type Arrangement struct {
	Kind    Kind
	Element int     // index into Mount.Elements, of a Single or InclinedPair
	Angle   float64 // rad, between the pads' normal and the vertical, of an InclinedPair
	// Across is true for an InclinedPair that is moved horizontally.
	Across bool
	// Stretch is the height of a pressed pad under the static load over its
	// unloaded one, of a Single or InclinedPair; 0 means unloaded. Loaded sets it.
	Stretch float64
	Members []Arrangement // of Parallel and Series, at least one
}

// Element is a pad, a bush, a disc or a measured part; exactly one of them is set.
type Element struct {
	Name     string
	Pad      *Pad
	Bush     *Bush
	Disc     *Disc
	Measured *Measured
	// Resistance is the element's own thermal resistance in K/W, in one mount; 0 if not
	// stated.
	Resistance float64
}
