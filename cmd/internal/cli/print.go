package cli

import (
	"fmt"

	"phaselag/data/place"
)

// note prints an assumption or a remark on stderr.
func (a *app) note(s string) { fmt.Fprintf(a.err, "note: %s\n", s) }

// hintedAt names the flag in front of an error and keeps its hint.
func hintedAt(where string, err error) error {
	return &place.Error{Path: where, What: err.Error(), Hint: place.Hint(err)}
}
