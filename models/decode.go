package models

import (
	"fmt"
	"math"
	"reflect"
	"regexp"
	"strconv"
	"strings"

	"gopkg.in/yaml.v3"

	"phaselag/data/place"
	"phaselag/data/unit"
)

// decoder fills a Compound from a tree of YAML nodes. It is stricter than the
// YAML library's own decoder, and says line and column:
//
//   - every key must be there but the optional ones, no other, none twice, no
//     alias;
//   - a number is written in decimal digits and finite; it is read by
//     strconv.ParseFloat and so bit for bit, the sign of −0 included;
//   - null stands only where a number may be unknown (unit.Number → NaN) or a
//     part of the file is optional (pointer → nil);
//   - a text is a text, or a date, which YAML would take for a time.
type decoder struct{ file string }

var (
	numberType = reflect.TypeFor[unit.Number]()
	decimal    = regexp.MustCompile(`^[-+]?([0-9]+\.?[0-9]*|\.[0-9]+)([eE][-+]?[0-9]+)?$`)
)

func (d decoder) fault(n *yaml.Node, path, hint, format string, a ...any) error {
	return &place.Error{File: d.file, Line: n.Line, Column: n.Column, Path: path, What: fmt.Sprintf(format, a...), Hint: hint}
}

// version looks at the format's version before anything else, because a later
// version has keys that this program does not know.
func (d decoder) version(root *yaml.Node) error {
	const key = "phaselag_compound"
	n := find(root, key)
	if n == nil {
		return d.fault(root, "", "a compound file is what characterize writes as compound.yaml or compound.json", "not a compound file: it has no key %s", key)
	}
	var v int
	if err := d.value(n, reflect.ValueOf(&v).Elem(), key); err != nil {
		return err
	}
	if v < 1 || v > FormatVersion {
		return d.fault(n, key, "read it with the version of this program that wrote it, or a later one", "format version %d is not known; this program reads versions 1 to %d", v, FormatVersion)
	}
	return nil
}

func (d decoder) compound(root *yaml.Node, c *Compound) error {
	return d.value(root, reflect.ValueOf(c).Elem(), "")
}

func (d decoder) value(n *yaml.Node, v reflect.Value, path string) error {
	if n.Kind == yaml.AliasNode {
		return d.fault(n, path, "write it out", "an alias cannot stand here")
	}
	if v.Type() == numberType {
		if isNull(n) {
			v.SetFloat(math.NaN())
			return nil
		}
		return d.number(n, v, path, "a number or null")
	}
	switch v.Kind() {
	case reflect.Pointer:
		if isNull(n) {
			return nil
		}
		v.Set(reflect.New(v.Type().Elem()))
		return d.value(n, v.Elem(), path)
	case reflect.Float64:
		return d.number(n, v, path, "a number")
	case reflect.Int:
		i, err := strconv.Atoi(n.Value)
		if n.Kind != yaml.ScalarNode || n.ShortTag() != "!!int" || err != nil {
			return d.fault(n, path, "", "must be a whole number, not %s", describeNode(n))
		}
		v.SetInt(int64(i))
	case reflect.String:
		if n.Kind != yaml.ScalarNode || n.ShortTag() != "!!str" && n.ShortTag() != "!!timestamp" {
			return d.fault(n, path, `put it in quotation marks; "" where nothing is stated`, "must be a text, not %s", describeNode(n))
		}
		v.SetString(n.Value)
	case reflect.Slice:
		if n.Kind != yaml.SequenceNode {
			return d.fault(n, path, "[] is the empty list", "must be a list, not %s", describeNode(n))
		}
		v.Set(reflect.MakeSlice(v.Type(), len(n.Content), len(n.Content)))
		return d.items(n, v, path)
	case reflect.Array:
		if n.Kind != yaml.SequenceNode || len(n.Content) != v.Len() {
			return d.fault(n, path, "for example [1, 2]", "must be a list of %d numbers", v.Len())
		}
		return d.items(n, v, path)
	case reflect.Struct:
		return d.mapping(n, v, path)
	default:
		panic("models: no rule for " + v.Type().String())
	}
	return nil
}

func (d decoder) items(n *yaml.Node, v reflect.Value, path string) error {
	for i, item := range n.Content {
		if err := d.value(item, v.Index(i), join(path, strconv.Itoa(i))); err != nil {
			return err
		}
	}
	return nil
}

func (d decoder) number(n *yaml.Node, v reflect.Value, path, what string) error {
	tag := n.ShortTag()
	if n.Kind != yaml.ScalarNode || tag != "!!int" && tag != "!!float" || n.Style&(yaml.SingleQuotedStyle|yaml.DoubleQuotedStyle) != 0 || !decimal.MatchString(n.Value) {
		return d.fault(n, path, "", "must be %s, not %s", what, describeNode(n))
	}
	x, err := strconv.ParseFloat(n.Value, 64)
	if err != nil {
		return d.fault(n, path, "", "%s is beyond the range of numbers", clip(n.Value))
	}
	v.SetFloat(x)
	return nil
}

func (d decoder) mapping(n *yaml.Node, v reflect.Value, path string) error {
	if n.Kind != yaml.MappingNode {
		return d.fault(n, path, "", "must be a mapping of keys, not %s", describeNode(n))
	}
	var names []string
	index, optional := map[string]int{}, map[string]bool{}
	for i := range v.NumField() {
		if key, options, _ := strings.Cut(v.Type().Field(i).Tag.Get("json"), ","); key != "" {
			names, index[key] = append(names, key), i
			optional[key] = options == "omitempty"
		}
	}
	seen := map[string]bool{}
	for i := 0; i+1 < len(n.Content); i += 2 {
		k := n.Content[i]
		field, known := index[k.Value]
		switch {
		case k.Kind != yaml.ScalarNode || !known:
			hint := ""
			if near := place.Nearest(k.Value, names); near != "" {
				hint = "perhaps " + near
			}
			return d.fault(k, join(path, clip(k.Value)), hint, "is no key of a compound file")
		case seen[k.Value]:
			return d.fault(k, join(path, k.Value), "", "stands twice")
		}
		seen[k.Value] = true
		if err := d.value(n.Content[i+1], v.Field(field), join(path, k.Value)); err != nil {
			return err
		}
	}
	for _, key := range names {
		if !seen[key] && !optional[key] {
			return d.fault(n, join(path, key), "write null where a number is not known", "is missing")
		}
	}
	return nil
}

func isNull(n *yaml.Node) bool { return n.Kind == yaml.ScalarNode && n.ShortTag() == "!!null" }

func join(path, key string) string {
	if path == "" {
		return key
	}
	return path + "." + key
}

// describeNode says what stands there, for an error.
func describeNode(n *yaml.Node) string {
	switch n.Kind {
	case yaml.MappingNode:
		return "a mapping of keys"
	case yaml.SequenceNode:
		return "a list"
	}
	switch {
	case n.Style&(yaml.SingleQuotedStyle|yaml.DoubleQuotedStyle) != 0:
		return fmt.Sprintf("the text %q", clip(n.Value))
	case n.Value == "":
		return "nothing"
	}
	return clip(n.Value)
}

// clip shortens a word for an error.
func clip(s string) string {
	if r := []rune(s); len(r) > 40 {
		return string(r[:40]) + "…"
	}
	return s
}

// find is the value of a key of a mapping, nil if it has none.
func find(m *yaml.Node, key string) *yaml.Node {
	for i := 0; i+1 < len(m.Content); i += 2 {
		if m.Content[i].Value == key {
			return m.Content[i+1]
		}
	}
	return nil
}

// deepest follows a key's path as far as it exists.
func deepest(n *yaml.Node, path string) *yaml.Node {
	for _, part := range strings.Split(path, ".") {
		var next *yaml.Node
		switch n.Kind {
		case yaml.MappingNode:
			next = find(n, part)
		case yaml.SequenceNode:
			if i, err := strconv.Atoi(part); err == nil && i >= 0 && i < len(n.Content) {
				next = n.Content[i]
			}
		}
		if next == nil {
			break
		}
		n = next
	}
	return n
}
