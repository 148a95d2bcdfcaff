package models

import (
	"bytes"
	"encoding/json"
	"fmt"
	"os"
	"reflect"
	"strings"

	"gopkg.in/yaml.v3"
)

// YAML is the compound file as YAML, the same bytes for the same Compound.
func (c *Compound) YAML() ([]byte, error) {
	var buf bytes.Buffer
	enc := yaml.NewEncoder(&buf)
	enc.SetIndent(2)
	if err := enc.Encode(c); err != nil {
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

// Open reads a compound file, YAML or JSON.
func Open(path string) (*Compound, error) {
	b, err := os.ReadFile(path)
	if err != nil {
		return nil, err
	}
	c, err := Read(b)
	if err != nil {
		return nil, fmt.Errorf("%s:%w", path, err)
	}
	return c, nil
}

// Read reads the bytes of a compound file, YAML or JSON. Every key of the
// format must be there, and no other; numbers come back bit for bit. Errors
// begin with line and column where a key is at fault.
func Read(b []byte) (*Compound, error) {
	var doc yaml.Node
	if err := yaml.Unmarshal(b, &doc); err != nil {
		return nil, fmt.Errorf(" not a compound file: %w", err)
	}
	if len(doc.Content) == 0 || doc.Content[0].Kind != yaml.MappingNode {
		return nil, fmt.Errorf(" not a compound file: it has no keys")
	}
	root := doc.Content[0]
	if find(root, "phaselag_compound") == nil {
		return nil, fmt.Errorf("%d:%d: not a compound file: it has no key phaselag_compound", root.Line, root.Column)
	}
	if err := checkKeys(root, reflect.TypeFor[Compound](), ""); err != nil {
		return nil, err
	}
	// Through JSON, because a JSON null reaches unit.Number while a YAML null
	// does not; float64 survives the way bit for bit.
	var value any
	if err := root.Decode(&value); err != nil {
		return nil, fmt.Errorf(" %w", err)
	}
	j, err := json.Marshal(value)
	if err != nil {
		return nil, fmt.Errorf(" not a compound file: %w", err)
	}
	var c Compound
	if err := json.Unmarshal(j, &c); err != nil {
		if te, ok := err.(*json.UnmarshalTypeError); ok {
			return nil, fmt.Errorf("%s %s: a %s cannot stand here", position(root, te.Field), te.Field, te.Value)
		}
		return nil, fmt.Errorf(" %w", err)
	}
	out, err := New(c)
	if ke, ok := err.(*KeyError); ok {
		return nil, fmt.Errorf("%s %w", position(root, ke.Key), ke)
	}
	return out, err
}

func find(m *yaml.Node, key string) *yaml.Node {
	for i := 0; i+1 < len(m.Content); i += 2 {
		if m.Content[i].Value == key {
			return m.Content[i+1]
		}
	}
	return nil
}

// position is "line:column:" of the deepest part of a key's path that exists.
func position(n *yaml.Node, path string) string {
	for _, part := range strings.Split(path, ".") {
		var next *yaml.Node
		switch n.Kind {
		case yaml.MappingNode:
			next = find(n, part)
		case yaml.SequenceNode:
			var i int
			if _, err := fmt.Sscanf(part, "%d", &i); err == nil && i >= 0 && i < len(n.Content) {
				next = n.Content[i]
			}
		}
		if next == nil {
			break
		}
		n = next
	}
	return fmt.Sprintf("%d:%d:", n.Line, n.Column)
}

// checkKeys compares the keys of a mapping with the fields of a struct type,
// recursively: all must be there and no other.
func checkKeys(n *yaml.Node, t reflect.Type, path string) error {
	for t.Kind() == reflect.Pointer {
		if n.Tag == "!!null" {
			return nil
		}
		t = t.Elem()
	}
	join := func(key string) string { return strings.TrimPrefix(path+"."+key, ".") }
	switch t.Kind() {
	case reflect.Slice:
		if n.Kind != yaml.SequenceNode {
			if n.Tag == "!!null" {
				return nil
			}
			return fmt.Errorf("%d:%d: %s: must be a list", n.Line, n.Column, path)
		}
		for i, item := range n.Content {
			if err := checkKeys(item, t.Elem(), join(fmt.Sprint(i))); err != nil {
				return err
			}
		}
	case reflect.Struct:
		if n.Kind != yaml.MappingNode {
			return fmt.Errorf("%d:%d: %s: must be a mapping", n.Line, n.Column, path)
		}
		known := map[string]bool{}
		for i := range t.NumField() {
			key, _, _ := strings.Cut(t.Field(i).Tag.Get("json"), ",")
			if key == "" {
				continue
			}
			known[key] = true
			value := find(n, key)
			if value == nil {
				return fmt.Errorf("%d:%d: %s: is missing", n.Line, n.Column, join(key))
			}
			if err := checkKeys(value, t.Field(i).Type, join(key)); err != nil {
				return err
			}
		}
		for i := 0; i < len(n.Content); i += 2 {
			if k := n.Content[i]; !known[k.Value] {
				return fmt.Errorf("%d:%d: %s: is no key of a compound file", k.Line, k.Column, join(k.Value))
			}
		}
	}
	return nil
}
