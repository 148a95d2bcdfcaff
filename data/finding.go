package data

// Severity grades a Finding.
type Severity string

// The severities: a note is for information, a doubt wants a look, and a
// severe finding means that a number should not be designed on as it stands.
const (
	Note   Severity = "note"
	Doubt  Severity = "doubt"
	Severe Severity = "severe"
)

// Finding is one doubt about the measurements or about what could be made of
// them. It is the only type for doubts in the whole program.
type Finding struct {
	Code     string   `json:"code"`     // short, stable, hyphenated: "isotherms-do-not-overlap"
	Severity Severity `json:"severity"` // Note, Doubt or Severe
	Test     string   `json:"test"`     // name of the test, "" for the campaign
	Rows     string   `json:"rows"`     // for people: "isotherms.csv:12-18, 40"; "" for none
	Evidence string   `json:"evidence"` // what was seen, in numbers
	Cause    string   `json:"cause"`    // the likely cause
	Remedy   string   `json:"remedy"`   // what would be right
}
