package models

import (
	"bytes"
	"encoding/json"
	"errors"
	"io"
	"io/fs"
	"os"
	"reflect"
	"regexp"
	"strconv"
	"unicode/utf8"

	"gopkg.in/yaml.v3"

	"phaselag/data/place"
)

// sizeLimit is the greatest compound file that is read, bytes: a thousand
// parameters with their covariance take a third of it.
const sizeLimit = 32 << 20

// YAML is the compound file as YAML, the same bytes for the same Compound.
func (c *Compound) YAML() ([]byte, error) {
	var buf bytes.Buffer
	enc := yaml.NewEncoder(&buf)
	enc.SetIndent(2)
	if err := enc.Encode(encode(reflect.ValueOf(*c))); err != nil {
		return nil, err
	}
	return buf.Bytes(), enc.Close()
}

// JSON is the compound file as JSON, with the same keys and numbers as YAML.
func (c *Compound) JSON() ([]byte, error) {
	b, err := json.MarshalIndent(c, "", "  ")
	if err != nil {
		return nil, err
	}
	return append(b, '\n'), nil
}

// Open reads a compound file, YAML or JSON. Faults in it are *place.Error.
func Open(path string) (*Compound, error) {
	f, err := os.Open(path)
	if err != nil {
		var p *fs.PathError
		if errors.As(err, &p) {
			err = p.Err
		}
		return nil, &place.Error{File: path, What: "cannot read the compound file", Err: err}
	}
	defer f.Close()
	b, err := io.ReadAll(io.LimitReader(f, sizeLimit+1))
	if err != nil {
		return nil, &place.Error{File: path, What: "cannot read the compound file", Err: err}
	}
	return read(path, b)
}

// Read reads the bytes of a compound file, YAML or JSON. Every key of the
// format must be there, and no other; numbers come back bit for bit, a null
// number as NaN. Faults are *place.Error with line and column, under the name
// "compound file".
func Read(b []byte) (*Compound, error) { return read("compound file", b) }

func read(file string, b []byte) (*Compound, error) {
	root, err := tree(file, b)
	if err != nil {
		return nil, err
	}
	d := decoder{file: file}
	if err := d.version(root); err != nil {
		return nil, err
	}
	var c Compound
	if err := d.compound(root, &c); err != nil {
		return nil, err
	}
	out, err := New(c)
	if ke, ok := err.(*KeyError); ok {
		n := deepest(root, ke.Key)
		return nil, &place.Error{File: file, Line: n.Line, Column: n.Column, Path: ke.Key, What: ke.What}
	}
	return out, err
}

// tree parses b into a mapping.
func tree(file string, b []byte) (*yaml.Node, error) {
	b = bytes.TrimPrefix(b, []byte("\ufeff"))
	fault := func(line, column int, what string) error {
		return &place.Error{File: file, Line: line, Column: column, What: "not a compound file: " + what,
			Hint: "a compound file is what characterize writes as compound.yaml or compound.json"}
	}
	if len(b) > sizeLimit {
		return nil, fault(1, 1, "it is longer than 32 MiB")
	}
	for i, r := range string(b) {
		if r == utf8.RuneError && !utf8.FullRune(b[i:]) || r == utf8.RuneError && b[i] != 0xEF {
			line, column := newPlaces(b).at(i)
			return nil, fault(line, column, "it is not text in UTF-8")
		}
		if r < ' ' && r != '\n' && r != '\r' && r != '\t' {
			line, column := newPlaces(b).at(i)
			return nil, fault(line, column, "it has a control character")
		}
	}
	if len(bytes.TrimSpace(b)) == 0 {
		return nil, fault(1, 1, "it is empty")
	}
	root := jsonTree(b)
	if root == nil {
		var doc, second yaml.Node
		dec := yaml.NewDecoder(bytes.NewReader(b))
		if err := dec.Decode(&doc); err == io.EOF {
			return nil, fault(1, 1, "it is empty")
		} else if err != nil {
			line, what := yamlSyntax(err)
			return nil, fault(line, 1, what)
		}
		switch err := dec.Decode(&second); {
		case err == nil:
			return nil, fault(second.Line, second.Column, "a second document follows")
		case err != io.EOF:
			line, what := yamlSyntax(err)
			return nil, fault(line, 1, what)
		}
		root = doc.Content[0]
	}
	if root.Kind != yaml.MappingNode {
		return nil, fault(root.Line, root.Column, "it has no keys")
	}
	return root, nil
}

var yamlLine = regexp.MustCompile(`^yaml: (?:line (\d+): )?`)

// yamlSyntax takes the line out of the YAML reader's own error; 1 where it
// knows none.
func yamlSyntax(err error) (line int, what string) {
	text := err.Error()
	line = 1
	if m := yamlLine.FindStringSubmatch(text); m != nil && m[1] != "" {
		line, _ = strconv.Atoi(m[1])
	}
	return line, yamlLine.ReplaceAllString(text, "")
}
