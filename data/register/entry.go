package register

// Entry is one tested batch as the register keeps it. Texts are UTF-8 without
// control characters (Why may have line breaks) and at most 500 bytes long
// (Why: 10 000).
type Entry struct {
	ID       int64   // ascending from 1; given by Add, 0 before
	Batch    string  // obligatory
	Compound string  // the compound's name, obligatory
	Tested   string  // date of the test, ISO 8601: 2026-03-31
	Added    string  // time of registration, RFC 3339, from the caller
	Who      string  // who registers it, obligatory
	Corrects int64   // the entry that this one corrects; 0: none
	Why      string  // the reason, obligatory for a correction
	File     []byte  // the compound file as it was written; up to 64 MiB
	SHA256   string  // of File, in hexadecimal; "" for Add: not known to the caller
	Inputs   []Input // the measured files behind it
	Values   []Value // one for each pair of name and condition

	// CorrectedBy is the entry that corrects this one; 0: none. Get fills it in,
	// Add and Export leave it alone.
	CorrectedBy int64
}

// Input is a measured file that the compound file was made from.
type Input struct {
	File   string `json:"file"`   // as the user named it
	SHA256 string `json:"sha256"` // of its bytes, 64 hexadecimal digits
}

// Value is a number of a batch that a trend can be drawn from.
type Value struct {
	Name      string  // of the quantity, for example "storage modulus"
	Condition string  // at which it holds, for example "23 °C, 10 Hz, 1 %"; may be ""
	Value     float64 // in Unit; NaN: not measured
	U95       float64 // half width of the 95 % interval, in Unit; NaN: not stated
	Unit      string  // may be ""
}

// Summary is an entry in a list: all of it but the bytes and the values.
type Summary struct {
	ID          int64
	Batch       string
	Compound    string
	Tested      string
	Added       string
	Who         string
	Corrects    int64 // 0: none
	CorrectedBy int64 // 0: none
	Why         string
	SHA256      string // of the compound file
	Size        int64  // of the compound file, in bytes
	Inputs      []Input
	Values      int // how many
}

// Damage names an entry that cannot be trusted.
type Damage struct {
	ID    int64  // of the entry, as far as it is readable; 0: of no single entry
	Batch string // as far as it is readable, else ""
	What  string // what is wrong with it
}
