package unit

import (
	"encoding/json"
	"math"

	"gopkg.in/yaml.v3"
)

// Number is a float64 for files: NaN, which stands for "not measured" or "not
// determined", is written as null and read back as NaN. Finite values are
// written with the shortest digits that read back bit for bit.
type Number float64

// NaN is the Number that is written as null.
func NaN() Number { return Number(math.NaN()) }

// MarshalJSON writes null for NaN; infinities are an error of encoding/json.
func (n Number) MarshalJSON() ([]byte, error) {
	if math.IsNaN(float64(n)) {
		return []byte("null"), nil
	}
	return json.Marshal(float64(n))
}

// UnmarshalJSON reads null as NaN.
func (n *Number) UnmarshalJSON(b []byte) error {
	if string(b) == "null" {
		*n = NaN()
		return nil
	}
	return json.Unmarshal(b, (*float64)(n))
}

// MarshalYAML writes null for NaN.
func (n Number) MarshalYAML() (any, error) {
	if math.IsNaN(float64(n)) {
		return nil, nil
	}
	return float64(n), nil
}

// UnmarshalYAML reads null as NaN.
func (n *Number) UnmarshalYAML(node *yaml.Node) error {
	if node.Tag == "!!null" {
		*n = NaN()
		return nil
	}
	return node.Decode((*float64)(n))
}
