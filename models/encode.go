package models

import (
	"math"
	"reflect"
	"strconv"
	"strings"
	"unicode"

	"gopkg.in/yaml.v3"
)

// encode makes the tree of a compound file, the counterpart of decoder: lists
// of numbers and names on one line, numbers with the shortest digits that read
// back bit for bit, NaN as null.
//
// It does not leave texts to the YAML library, which loses line breaks of some
// texts, fails on others with tabs, and takes << for an order to merge.
func encode(v reflect.Value) *yaml.Node {
	scalar := func(tag, value string) *yaml.Node {
		return &yaml.Node{Kind: yaml.ScalarNode, Tag: tag, Value: value}
	}
	switch v.Kind() {
	case reflect.Pointer:
		if v.IsNil() {
			return scalar("!!null", "null")
		}
		return encode(v.Elem())
	case reflect.Float64:
		x := v.Float()
		if math.IsNaN(x) {
			return scalar("!!null", "null")
		}
		text := strconv.FormatFloat(x, 'g', -1, 64)
		if strings.ContainsAny(text, ".e") {
			return scalar("!!float", text)
		}
		return scalar("!!int", text) // or YAML writes the tag before the number
	case reflect.Int:
		return scalar("!!int", strconv.FormatInt(v.Int(), 10))
	case reflect.String:
		n := scalar("!!str", v.String())
		if !plain(n.Value) {
			n.Style = yaml.DoubleQuotedStyle
		}
		return n
	case reflect.Slice, reflect.Array:
		n := &yaml.Node{Kind: yaml.SequenceNode}
		for i := range v.Len() {
			n.Content = append(n.Content, encode(v.Index(i)))
		}
		if k := v.Type().Elem().Kind(); k == reflect.Float64 || v.Len() == 0 {
			n.Style = yaml.FlowStyle
		}
		return n
	case reflect.Struct:
		n := &yaml.Node{Kind: yaml.MappingNode}
		for i := range v.NumField() {
			key, options, _ := strings.Cut(v.Type().Field(i).Tag.Get("yaml"), ",")
			if key == "" || options == "omitempty" && v.Field(i).IsNil() {
				continue
			}
			item := encode(v.Field(i))
			if options == "flow" {
				item.Style = yaml.FlowStyle
			}
			n.Content = append(n.Content, scalar("!!str", key), item)
		}
		return n
	}
	panic("models: no rule for " + v.Type().String())
}

// plain reports whether YAML may write a text its own way: one line of
// characters that print. The YAML library then quotes what needs it, but not
// the words that were truth values once.
func plain(text string) bool {
	switch strings.ToLower(text) {
	case "<<", "y", "n", "yes", "no", "on", "off":
		return false
	}
	return !strings.ContainsFunc(text, func(r rune) bool {
		return r != ' ' && !unicode.IsGraphic(r) || r == '\u2028' || r == '\u2029'
	})
}
