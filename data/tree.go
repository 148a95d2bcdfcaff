package data

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"
	"time"

	"gopkg.in/yaml.v3"

	"phaselag/data/place"
	"phaselag/data/unit"
)

// maxVisits bounds the work that a campaign file with aliases inside aliases
// can ask for.
const maxVisits = 200_000

// tree reads a campaign file node by node, so that every fault has its line,
// column and key path. Faults are gathered; values that are faulty read as not
// stated.
type tree struct {
	file   string
	faults place.List
	visits int
}

var yamlLine = regexp.MustCompile(`^yaml: (?:line (\d+): )?`)

// parseYAML gives the root of a YAML document. The library promises errors, but
// a panic in it must not become ours.
func parseYAML(file string, content []byte) (root *yaml.Node, err error) {
	defer func() {
		if r := recover(); r != nil {
			root, err = nil, &place.Error{File: file, What: fmt.Sprintf("not readable as YAML: %v", r)}
		}
	}()
	var doc yaml.Node
	if e := yaml.Unmarshal(content, &doc); e != nil {
		text := e.Error()
		line := 0
		if m := yamlLine.FindStringSubmatch(text); m != nil {
			line, _ = strconv.Atoi(m[1])
			text = text[len(m[0]):]
		}
		return nil, &place.Error{File: file, Line: line, What: "not readable as YAML: " + text,
			Hint: "check the indentation, and quote texts with a colon, a brace or a leading special character"}
	}
	if len(doc.Content) == 0 {
		return nil, &place.Error{File: file, What: "the file is empty", Hint: "a campaign file needs at least tests: [{kind: frequency sweep, file: …}]"}
	}
	return doc.Content[0], nil
}

func (t *tree) fault(n *yaml.Node, path, hint, format string, args ...any) {
	if len(t.faults) >= 100 {
		return
	}
	e := &place.Error{File: t.file, Path: path, What: fmt.Sprintf(format, args...), Hint: hint}
	if n != nil {
		e.Line, e.Column = n.Line, n.Column
	}
	t.faults.Add(e)
}

// follow resolves aliases, and gives nil for null and beyond the limit.
func (t *tree) follow(n *yaml.Node, path string) *yaml.Node {
	for hops := 0; n != nil; hops++ {
		t.visits++
		if t.visits == maxVisits {
			t.fault(n, path, "write the tests out instead of nesting aliases", "too much in this file, or aliases inside aliases")
		}
		if t.visits >= maxVisits || hops > 100 {
			return nil
		}
		if n.Kind != yaml.AliasNode {
			break
		}
		n = n.Alias
	}
	if n == nil || n.Kind == yaml.ScalarNode && n.ShortTag() == "!!null" {
		return nil
	}
	return n
}

// mapping is one mapping of the file whose keys are known.
type mapping struct {
	t      *tree
	node   *yaml.Node // nil: not stated
	path   string
	keys   map[string]*yaml.Node
	values map[string]*yaml.Node
}

// mapping reads n as a mapping with no other keys than those known; with no
// known keys at all, every key is accepted (and order gives their sequence).
func (t *tree) mapping(n *yaml.Node, path string, known ...string) (m mapping, order []string) {
	m = mapping{t: t, path: path, keys: map[string]*yaml.Node{}, values: map[string]*yaml.Node{}}
	n = t.follow(n, path)
	if n == nil {
		return m, nil
	}
	if n.Kind != yaml.MappingNode {
		hint := "write key: value pairs"
		if len(known) > 0 {
			hint += "; keys here: " + strings.Join(known, ", ")
		}
		t.fault(n, path, hint, "%s where key: value pairs are needed", kindName(n))
		return m, nil
	}
	m.node = n
	for i := 0; i+1 < len(n.Content); i += 2 {
		k := n.Content[i]
		name := k.Value
		switch {
		case k.Kind != yaml.ScalarNode:
			t.fault(k, path, "", "a key must be a plain word")
			continue
		case m.keys[name] != nil:
			t.fault(k, m.sub(name), "", "the key stands twice, first in line %d", m.keys[name].Line)
			continue
		case len(known) > 0 && !contains(known, name):
			hint := "keys here: " + strings.Join(known, ", ")
			if near := place.Nearest(name, known); near != "" {
				hint = fmt.Sprintf("%s was perhaps meant; %s", near, hint)
			}
			t.fault(k, m.sub(name), hint, "unknown key")
			continue
		}
		m.keys[name], m.values[name] = k, n.Content[i+1]
		order = append(order, name)
	}
	return m, order
}

func contains(list []string, s string) bool {
	for _, x := range list {
		if x == s {
			return true
		}
	}
	return false
}

func kindName(n *yaml.Node) string {
	switch n.Kind {
	case yaml.MappingNode:
		return "key: value pairs"
	case yaml.SequenceNode:
		return "a list"
	}
	return fmt.Sprintf("the text %q", clip(n.Value))
}

func clip(s string) string {
	if r := []rune(s); len(r) > 60 {
		return string(r[:60]) + "…"
	}
	return s
}

func (m mapping) sub(key string) string {
	if m.path == "" {
		return clip(key)
	}
	return m.path + "." + clip(key)
}

// get gives a key's value and path; nil where it is not stated.
func (m mapping) get(key string) (*yaml.Node, string) {
	return m.t.follow(m.values[key], m.sub(key)), m.sub(key)
}

func (m mapping) has(key string) bool {
	n, _ := m.get(key)
	return n != nil
}

// at is the node to blame for a key: the value, else the mapping.
func (m mapping) at(key string) *yaml.Node {
	if n := m.values[key]; n != nil {
		return n
	}
	return m.node
}

// text reads a scalar as it is written.
func (m mapping) text(key string) string {
	n, path := m.get(key)
	return m.t.text(n, path)
}

func (t *tree) text(n *yaml.Node, path string) string {
	if n == nil {
		return ""
	}
	if n.Kind != yaml.ScalarNode {
		t.fault(n, path, "", "%s where one value is needed", kindName(n))
		return ""
	}
	return strings.TrimSpace(n.Value)
}

// choice reads one of several words; fallback where not stated.
func (m mapping) choice(key, fallback string, options ...string) string {
	s := m.text(key)
	if s == "" {
		return fallback
	}
	for _, o := range options {
		if strings.EqualFold(s, o) || strings.EqualFold(strings.ReplaceAll(s, "_", " "), strings.ReplaceAll(o, "_", " ")) {
			return o
		}
	}
	hint := "one of: " + strings.Join(options, ", ")
	if near := place.Nearest(s, options); near != "" {
		hint = fmt.Sprintf("%s was perhaps meant; %s", near, hint)
	}
	m.t.fault(m.at(key), m.sub(key), hint, "%q is not known here", clip(s))
	return fallback
}

// sign says which values of a quantity make sense.
type sign int

const (
	anySign sign = iota
	notNegative
	positive
)

// quantity reads a quantity in SI; NaN where it is not stated or faulty.
func (m mapping) quantity(key string, q unit.Quantity, s sign) float64 {
	n, path := m.get(key)
	if n == nil {
		return math.NaN()
	}
	text := m.t.text(n, path)
	if text == "" && n.Kind != yaml.ScalarNode {
		return math.NaN()
	}
	v, err := unit.Parse(text, q)
	if err != nil {
		m.t.faults.Add(place.At(err, m.t.file, n.Line, n.Column, path))
		return math.NaN()
	}
	return m.checked(n, path, v, s, text)
}

func (m mapping) checked(n *yaml.Node, path string, v float64, s sign, text string) float64 {
	switch {
	case s == positive && !(v > 0):
		m.t.fault(n, path, "", "%q must be greater than zero", clip(text))
	case s == notNegative && !(v >= 0):
		m.t.fault(n, path, "", "%q must not be negative", clip(text))
	default:
		return v
	}
	return math.NaN()
}

// number reads a pure number; NaN where it is not stated or faulty.
func (m mapping) number(key string) float64 {
	n, path := m.get(key)
	if n == nil {
		return math.NaN()
	}
	v, err := unit.ParseNumber(m.t.text(n, path))
	if err != nil {
		if n.Kind == yaml.ScalarNode {
			m.t.faults.Add(place.At(err, m.t.file, n.Line, n.Column, path))
		}
		return math.NaN()
	}
	return v
}

// count reads a whole number from 1 to a million; 0 where it is not stated.
func (m mapping) count(key string) int {
	n, path := m.get(key)
	if n == nil {
		return 0
	}
	s := m.t.text(n, path)
	v, err := strconv.Atoi(s)
	if err != nil || v < 1 || v > 1_000_000 {
		if n.Kind == yaml.ScalarNode {
			m.t.fault(n, path, "", "%q is not a whole number from 1", clip(s))
		}
		return 0
	}
	return v
}

// flag reads true or false.
func (m mapping) flag(key string) bool {
	s := m.text(key)
	switch strings.ToLower(s) {
	case "true", "yes":
		return true
	case "", "false", "no":
		return false
	}
	m.t.fault(m.at(key), m.sub(key), "write true or false", "%q is neither true nor false", clip(s))
	return false
}

// date reads an ISO 8601 date and keeps it as written.
func (m mapping) date(key string) string {
	s := m.text(key)
	if s == "" {
		return ""
	}
	if _, err := time.Parse("2006-01-02", s); err != nil {
		m.t.fault(m.at(key), m.sub(key), "write it as 2026-11-01", "%q is not a date", clip(s))
		return ""
	}
	return s
}

// list gives the items of a list; one value alone is a list of one.
func (m mapping) list(key string) []*yaml.Node {
	n, _ := m.get(key)
	if n == nil {
		return nil
	}
	if n.Kind == yaml.SequenceNode {
		return n.Content
	}
	return []*yaml.Node{n}
}
