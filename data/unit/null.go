package unit

import (
	"reflect"
	"strings"

	"gopkg.in/yaml.v3"
)

// NullsToNaN prepares a YAML tree for decoding into a value of the type of
// model (or what model points to): wherever that type has a Number, a null in
// the tree, or a missing key of a mapping, becomes .nan.
//
// It is needed because the YAML library never shows a null to UnmarshalYAML:
// without it a Number that is null, or absent, would be read as 0, which is a
// plausible value and a wrong one. (encoding/json does show nulls, but not
// absent keys.)
func NullsToNaN(node *yaml.Node, model any) {
	nullsToNaN(node, reflect.TypeOf(model), 0)
}

var numberType = reflect.TypeFor[Number]()

func nullsToNaN(node *yaml.Node, t reflect.Type, depth int) {
	if node == nil || t == nil || depth > 100 {
		return
	}
	if node.Kind == yaml.DocumentNode {
		for _, n := range node.Content {
			nullsToNaN(n, t, depth+1)
		}
		return
	}
	if t == numberType {
		if node.Kind == yaml.ScalarNode && node.ShortTag() == "!!null" {
			node.Tag, node.Value, node.Style = "!!float", ".nan", 0
		}
		return
	}
	switch t.Kind() {
	case reflect.Pointer:
		nullsToNaN(node, t.Elem(), depth+1)
	case reflect.Slice, reflect.Array:
		if node.Kind == yaml.SequenceNode {
			for _, n := range node.Content {
				nullsToNaN(n, t.Elem(), depth+1)
			}
		}
	case reflect.Map:
		if node.Kind == yaml.MappingNode {
			for i := 1; i < len(node.Content); i += 2 {
				nullsToNaN(node.Content[i], t.Elem(), depth+1)
			}
		}
	case reflect.Struct:
		if node.Kind == yaml.MappingNode {
			fieldsToNaN(node, t, depth)
		}
	}
}

func fieldsToNaN(node *yaml.Node, t reflect.Type, depth int) {
	for f := range t.Fields() {
		if !f.IsExported() {
			continue
		}
		name, options, _ := strings.Cut(f.Tag.Get("yaml"), ",")
		if strings.Contains(options, "inline") {
			nullsToNaN(node, f.Type, depth+1)
			continue
		}
		if name == "-" {
			continue
		}
		if name == "" {
			name = strings.ToLower(f.Name)
		}
		if v := value(node, name); v != nil {
			nullsToNaN(v, f.Type, depth+1)
		} else if f.Type == numberType {
			node.Content = append(node.Content,
				&yaml.Node{Kind: yaml.ScalarNode, Tag: "!!str", Value: name},
				&yaml.Node{Kind: yaml.ScalarNode, Tag: "!!float", Value: ".nan"})
		}
	}
}

func value(mapping *yaml.Node, key string) *yaml.Node {
	for i := 0; i+1 < len(mapping.Content); i += 2 {
		if mapping.Content[i].Value == key {
			return mapping.Content[i+1]
		}
	}
	return nil
}
