package fitting

import (
	_ "embed"
	"slices"
)

//go:embed result.schema.json
var schema []byte

// Schema is the JSON Schema (draft 2020-12) of result.json, for other programs
// that read it. A test keeps it equal to the fields of Result, and written
// results are tested against it.
func Schema() []byte { return slices.Clone(schema) }
