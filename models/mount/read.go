package mount

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"unicode/utf8"

	"gopkg.in/yaml.v3"

	"phaselag/data/place"
	"phaselag/data/unit"
)

// limit is the greatest mount file that is read; a page of text is a hundredth
// of it.
const limit = 1 << 20

// Open reads a mount file. Faults in it are *place.Error, several of them a
// place.List.
func Open(file string) (*Mount, error) {
	f, err := os.Open(file)
	if err != nil {
		return nil, cannotRead(file, err)
	}
	defer f.Close()
	return Read(file, f)
}

// OpenFS is Open in a file system.
func OpenFS(fsys fs.FS, file string) (*Mount, error) {
	f, err := fsys.Open(file)
	if err != nil {
		return nil, cannotRead(file, err)
	}
	defer f.Close()
	return Read(file, f)
}

func cannotRead(file string, err error) error {
	var p *fs.PathError
	if errors.As(err, &p) {
		err = p.Err
	}
	return &place.Error{File: file, What: "cannot read the mount file", Err: err}
}

// Read reads a mount file from r; file is its name in errors.
func Read(file string, r io.Reader) (*Mount, error) {
	text, err := io.ReadAll(io.LimitReader(r, limit+1))
	if err != nil {
		return nil, cannotRead(file, err)
	}
	fault := func(what, hint string) error { return &place.Error{File: file, What: what, Hint: hint} }
	switch {
	case len(text) > limit:
		return nil, fault("the file is longer than 1 MiB", "a mount file is a page of YAML")
	case !utf8.Valid(text):
		return nil, fault("the file is not text in UTF-8", "a mount file is a page of YAML")
	}
	var doc yaml.Node
	d := yaml.NewDecoder(strings.NewReader(string(text)))
	if err := d.Decode(&doc); err == io.EOF {
		return nil, fault("the file is empty", "it needs elements, for example {pad: {shape: shear pad, area: 1200 mm2, thickness: 12 mm}}")
	} else if err != nil {
		return nil, syntax(file, err)
	}
	var second yaml.Node
	if err := d.Decode(&second); err == nil {
		return nil, &place.Error{File: file, Line: second.Line, Column: second.Column, What: "a second document", Hint: "one mount a file"}
	} else if err != io.EOF {
		return nil, syntax(file, err)
	}
	w := &reader{file: file}
	m := w.mount(doc.Content[0])
	if err := w.faults.Err(); err != nil {
		return nil, err
	}
	if m.Name == "" {
		base := filepath.Base(file)
		m.Name = strings.TrimSuffix(base, filepath.Ext(base))
	}
	return m, nil
}

var yamlLine = regexp.MustCompile(`^yaml: (?:line (\d+): )?`)

// syntax places the YAML reader's own error.
func syntax(file string, err error) error {
	text := err.Error()
	e := &place.Error{File: file, What: "not YAML: " + yamlLine.ReplaceAllString(text, "")}
	if found := yamlLine.FindStringSubmatch(text); found != nil && found[1] != "" {
		e.Line, _ = strconv.Atoi(found[1])
	}
	return e
}

// reader walks the tree of one file and gathers faults.
type reader struct {
	file   string
	faults place.List
	names  []string // of the elements
	// across: the direction is horizontal; upright: it is vertical.
	across, upright bool
	direction       string // as written
	pressed         []bool // by element: an inclined pair uses it
	// notes are assumptions that the keys themselves make, in the order of the file.
	notes []string
	// unloaded is the end of the assumption on a pressed pad that has no static load.
	unloaded string
}

func (r *reader) fault(n *yaml.Node, path, what, hint string) {
	r.faults.Add(&place.Error{File: r.file, Line: n.Line, Column: n.Column, Path: path, What: what, Hint: hint})
}

// entry is one key of a mapping.
type entry struct {
	key, value *yaml.Node
	path       string
}

// mapping returns the entries of a mapping by key after checking them against
// the known keys; nil where n is no mapping.
func (r *reader) mapping(n *yaml.Node, path string, known ...string) map[string]entry {
	if n.Kind != yaml.MappingNode {
		r.fault(n, path, "want keys and values, not "+kind(n), "known keys: "+strings.Join(known, ", "))
		return nil
	}
	entries := map[string]entry{}
	for i := 0; i+1 < len(n.Content); i += 2 {
		k, v := n.Content[i], n.Content[i+1]
		e := entry{k, v, join(path, k.Value)}
		switch {
		case k.Kind != yaml.ScalarNode:
			r.fault(k, path, "a key must be a word", "")
			continue
		case len(known) > 0 && !contains(known, k.Value):
			hint := "known keys: " + strings.Join(known, ", ")
			if near := place.Nearest(k.Value, known); near != "" {
				hint = "did you mean " + near + "?"
			}
			r.fault(k, e.path, "unknown key", hint)
			continue
		}
		if _, twice := entries[k.Value]; twice {
			r.fault(k, e.path, "the key stands twice", "")
			continue
		}
		entries[k.Value] = e
	}
	return entries
}

func join(path, key string) string {
	if path == "" {
		return key
	}
	return path + "." + key
}

func contains(list []string, s string) bool {
	for _, l := range list {
		if l == s {
			return true
		}
	}
	return false
}

func kind(n *yaml.Node) string {
	switch n.Kind {
	case yaml.SequenceNode:
		return "a list"
	case yaml.MappingNode:
		return "keys and values"
	case yaml.AliasNode:
		return "an alias"
	}
	if n.Tag == "!!null" {
		return "nothing"
	}
	return fmt.Sprintf("%q", n.Value)
}

// text returns a scalar as written.
func (r *reader) text(e entry) string {
	if e.value.Kind != yaml.ScalarNode || e.value.Tag == "!!null" {
		r.fault(e.value, e.path, "want a text, not "+kind(e.value), "")
		return ""
	}
	return strings.TrimSpace(e.value.Value)
}

// amount returns a quantity that must be positive (or, where zero is true, at
// least not negative), NaN where the key is missing or faulty.
func (r *reader) amount(keys map[string]entry, key string, q unit.Quantity, zero bool) float64 {
	e, ok := keys[key]
	if !ok {
		return math.NaN()
	}
	x, good := r.quantity(e, q)
	if !good {
		return math.NaN()
	}
	if x < 0 || x == 0 && !zero {
		r.fault(e.value, e.path, "must be positive, not "+e.value.Value, "")
		return math.NaN()
	}
	return x
}

// quantity returns a number with its unit.
func (r *reader) quantity(e entry, q unit.Quantity) (float64, bool) {
	if e.value.Kind != yaml.ScalarNode || e.value.Tag == "!!null" {
		r.fault(e.value, e.path, fmt.Sprintf("want %s with its unit, not %s", q, kind(e.value)), "for example "+example(q))
		return 0, false
	}
	x, err := unit.Parse(e.value.Value, q)
	if err != nil {
		r.faults.Add(place.At(err, r.file, e.value.Line, e.value.Column, e.path))
		return 0, false
	}
	return x, true
}

// example is a number with the usual unit of a quantity.
func example(q unit.Quantity) string {
	return "1 " + unit.Symbols(q)[0]
}

// flag returns a yes or no.
func (r *reader) flag(keys map[string]entry, key string) bool {
	e, ok := keys[key]
	if !ok {
		return false
	}
	var b bool
	if e.value.Kind != yaml.ScalarNode || e.value.Decode(&b) != nil {
		r.fault(e.value, e.path, "want true or false, not "+kind(e.value), "")
	}
	return b
}

// number returns a plain positive number, NaN where the key is missing or faulty.
func (r *reader) number(keys map[string]entry, key string) float64 {
	e, ok := keys[key]
	if !ok {
		return math.NaN()
	}
	if e.value.Kind == yaml.ScalarNode {
		if x, err := unit.ParseNumber(e.value.Value); err == nil && x > 0 {
			return x
		}
	}
	r.fault(e.value, e.path, "want a positive number without a unit, not "+kind(e.value), "")
	return math.NaN()
}
