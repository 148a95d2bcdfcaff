package fitting

import (
	"bytes"
	"encoding/json"
	"fmt"
	"io"

	"phaselag/models"
)

// JSON is the content of result.json, the same bytes for the same Result.
func (r *Result) JSON() ([]byte, error) {
	b, err := json.MarshalIndent(r, "", " ")
	if err != nil {
		return nil, err
	}
	return append(b, '\n'), nil
}

// ReadResult restores what JSON wrote, bit for bit. Unknown keys, a later
// format and a compound that breaks its contract are errors.
func ReadResult(b []byte) (*Result, error) {
	dec := json.NewDecoder(bytes.NewReader(b))
	dec.DisallowUnknownFields()
	var r Result
	if err := dec.Decode(&r); err != nil {
		return nil, fmt.Errorf("not a result of this program: %w", err)
	}
	if _, err := dec.Token(); err != io.EOF {
		return nil, fmt.Errorf("not a result of this program: something follows the closing brace")
	}
	if r.Format < 1 || r.Format > FormatVersion {
		return nil, fmt.Errorf("result format %d is not known; this program reads 1 to %d", r.Format, FormatVersion)
	}
	if r.Compound != nil {
		c, err := models.New(*r.Compound)
		if err != nil {
			return nil, fmt.Errorf("the result's compound: %w", err)
		}
		r.Compound = c
	}
	r.noNil()
	return &r, nil
}
