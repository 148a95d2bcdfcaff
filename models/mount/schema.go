package mount

import (
	_ "embed"
	"slices"
)

//go:embed mount.schema.json
var schema []byte

// Schema is the JSON Schema (draft 2020-12) of the mount file, for editors and other
// programs that write or check one. It knows keys, types, shapes and which of their
// keys belong together; units, signs and what one quantity says of another Read checks
// alone. A test keeps it equal to the keys that Read knows.
func Schema() []byte { return slices.Clone(schema) }
