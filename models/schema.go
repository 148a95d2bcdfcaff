package models

import (
	_ "embed"
	"slices"
)

//go:embed compound.schema.json
var schema []byte

// Schema is the JSON Schema (draft 2020-12) of the compound file, for other
// programs that read or check it. A test keeps it equal to the fields of
// Compound, and every file that is written is tested against it. It knows
// types, keys and signs; what one number says of another (rising ranges, the
// length of a triangle) New checks alone.
func Schema() []byte { return slices.Clone(schema) }
