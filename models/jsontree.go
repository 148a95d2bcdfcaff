package models

import (
	"bytes"
	"encoding/json"
	"sort"
	"strings"
	"unicode/utf8"

	"gopkg.in/yaml.v3"
)

// jsonTree parses JSON into the tree that YAML gives, with lines and columns;
// nil where b is not JSON. YAML reads most JSON, but not all of it: tabs as
// indentation, some characters and escaped pairs of surrogates fail.
func jsonTree(b []byte) *yaml.Node {
	if t := bytes.TrimSpace(b); len(t) == 0 || t[0] != '{' || !json.Valid(b) {
		return nil
	}
	p := jsonParser{b: b, dec: json.NewDecoder(bytes.NewReader(b)), places: newPlaces(b)}
	p.dec.UseNumber()
	return p.value()
}

type jsonParser struct {
	b      []byte
	dec    *json.Decoder
	places places
}

// value reads one value; b is known to be valid JSON, so that no error comes.
func (p *jsonParser) value() *yaml.Node {
	at := int(p.dec.InputOffset())
	for at < len(p.b) && bytes.IndexByte([]byte(" \t\r\n,:"), p.b[at]) >= 0 {
		at++
	}
	n := &yaml.Node{Kind: yaml.ScalarNode}
	n.Line, n.Column = p.places.at(at)
	token, err := p.dec.Token()
	if err != nil {
		panic("models: valid JSON does not parse: " + err.Error())
	}
	switch v := token.(type) {
	case json.Delim:
		n.Kind = yaml.MappingNode
		if v == '[' {
			n.Kind = yaml.SequenceNode
		}
		for p.dec.More() {
			n.Content = append(n.Content, p.value())
		}
		if _, err := p.dec.Token(); err != nil {
			panic("models: valid JSON does not parse: " + err.Error())
		}
	case string:
		n.Tag, n.Value, n.Style = "!!str", v, yaml.DoubleQuotedStyle
	case json.Number:
		n.Tag, n.Value = "!!int", v.String()
		if strings.ContainsAny(n.Value, ".eE") {
			n.Tag = "!!float"
		}
	case bool:
		n.Tag, n.Value = "!!bool", "false"
		if v {
			n.Value = "true"
		}
	case nil:
		n.Tag, n.Value = "!!null", "null"
	}
	return n
}

// places turns offsets in bytes into lines and columns.
type places struct {
	b     []byte
	start []int // of every line
}

func newPlaces(b []byte) places {
	p := places{b: b, start: []int{0}}
	for i, c := range b {
		if c == '\n' {
			p.start = append(p.start, i+1)
		}
	}
	return p
}

// at gives line and column, from 1; a column counts characters.
func (p places) at(offset int) (line, column int) {
	line = sort.SearchInts(p.start, offset+1)
	return line, 1 + utf8.RuneCount(p.b[p.start[line-1]:offset])
}
