package register

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math"
	"strings"
	"unicode/utf8"

	"phaselag/data/place"
)

// The plain files of a register:
//
//	register.json              which format, and how many entries
//	00000001/entry.json        everything of entry 1 but the compound file
//	00000001/compound.yaml     the compound file as it is
const (
	indexName    = "register.json"
	entryName    = "entry.json"
	compoundName = "compound.yaml"
	plainFormat  = 1
	largestEntry = 64 << 20 // bytes of entry.json
	largestIndex = 4096     // bytes of register.json
)

func folderOf(id int64) string { return fmt.Sprintf("%08d", id) }

// plainIndex is register.json. It is written last, so that an export that was
// cut short has none.
type plainIndex struct {
	Format  int `json:"phaselag_register"`
	Entries int `json:"entries"`
}

// plainEntry is entry.json.
type plainEntry struct {
	Format   int          `json:"phaselag_register_entry"`
	ID       int64        `json:"id"`
	Batch    string       `json:"batch"`
	Compound string       `json:"compound"`
	Tested   string       `json:"tested"`
	Added    string       `json:"added"`
	Who      string       `json:"who"`
	Corrects int64        `json:"corrects"`
	Why      string       `json:"why"`
	SHA256   string       `json:"sha256"` // of the compound file
	Inputs   []Input      `json:"inputs"`
	Values   []plainValue `json:"values"`
	Sum      string       `json:"entry_sha256"` // of the entry, as doc.go of the package says
}

type plainValue struct {
	Name      string   `json:"name"`
	Condition string   `json:"condition"`
	Value     *float64 `json:"value"` // null: not measured
	U95       *float64 `json:"u95"`   // null: not stated
	Unit      string   `json:"unit"`
}

// plainOf writes entry.json of a checked entry.
func plainOf(e *Entry) []byte {
	p := plainEntry{plainFormat, e.ID, e.Batch, e.Compound, e.Tested, e.Added, e.Who, e.Corrects, e.Why, e.SHA256,
		append([]Input{}, e.Inputs...), make([]plainValue, len(e.Values)), headOf(e).sum}
	for i, v := range e.Values {
		p.Values[i] = plainValue{v.Name, v.Condition, orNull(v.Value), orNull(v.U95), v.Unit}
	}
	return pretty(p)
}

func pretty(v any) []byte {
	var b bytes.Buffer
	w := json.NewEncoder(&b)
	w.SetEscapeHTML(false)
	w.SetIndent("", "  ")
	if err := w.Encode(v); err != nil {
		panic("register: " + err.Error()) // texts and finite numbers always marshal
	}
	return b.Bytes()
}

func orNull(x float64) *float64 {
	if math.IsNaN(x) {
		return nil
	}
	return &x
}

func orNaN(x *float64) float64 {
	if x == nil {
		return math.NaN()
	}
	return *x
}

// readPlain reads an entry from the bytes of entry.json and of its compound file
// and checks it as Add does, and against its sums. name is that of entry.json,
// for messages.
func readPlain(name string, text, compound []byte) (*Entry, error) {
	var p plainEntry
	if err := readJSON(name, text, &p); err != nil {
		return nil, err
	}
	if p.Format != plainFormat {
		return nil, unknownFormat(name, "phaselag_register_entry", p.Format)
	}
	if p.ID < 1 || p.Corrects >= p.ID {
		return nil, &place.Error{File: name, Path: "id", What: fmt.Sprintf("entry %d, which corrects %d, cannot be", p.ID, p.Corrects), Err: ErrDamaged}
	}
	e := &Entry{ID: p.ID, Batch: p.Batch, Compound: p.Compound, Tested: p.Tested, Added: p.Added, Who: p.Who,
		Corrects: p.Corrects, Why: p.Why, SHA256: p.SHA256, File: compound, Inputs: p.Inputs}
	for _, v := range p.Values {
		e.Values = append(e.Values, Value{v.Name, v.Condition, orNaN(v.Value), orNaN(v.U95), v.Unit})
	}
	if len(p.SHA256) != 64 {
		return nil, &place.Error{File: name, Path: "sha256", What: "is missing", Err: ErrDamaged}
	}
	c, err := checked(e)
	if err != nil {
		var l place.List
		for _, one := range place.All(err) {
			l.Add(place.At(one, name, 0, 0, ""))
		}
		return nil, l.Err()
	}
	if headOf(c).sum != p.Sum {
		return nil, &place.Error{File: name, Path: "entry_sha256", What: "the entry does not match its SHA-256",
			Hint: "it was changed or damaged after the export", Err: ErrDamaged}
	}
	return c, nil
}

// readIndex reads register.json.
func readIndex(name string, text []byte) (plainIndex, error) {
	var index plainIndex
	if err := readJSON(name, text, &index); err != nil {
		return index, err
	}
	if index.Format != plainFormat {
		return index, unknownFormat(name, "phaselag_register", index.Format)
	}
	return index, nil
}

func unknownFormat(name, path string, format int) error {
	e := &place.Error{File: name, Path: path, What: fmt.Sprintf("format %d, this program knows %d", format, plainFormat),
		Hint: "import it with the program that exported it, or a later one", Err: ErrDamaged}
	if format > plainFormat {
		e.Err = ErrNewer
	}
	return e
}

// readJSON reads one value with known keys only.
func readJSON(name string, text []byte, into any) error {
	if !utf8.Valid(text) {
		return &place.Error{File: name, What: "is not UTF-8", Err: ErrDamaged}
	}
	d := json.NewDecoder(bytes.NewReader(text))
	d.DisallowUnknownFields()
	err := d.Decode(into)
	if err == nil {
		if _, more := d.Token(); more != io.EOF {
			err = errors.New("something follows the end")
		}
	}
	if err == nil {
		return nil
	}
	e := &place.Error{File: name, What: strings.TrimPrefix(err.Error(), "json: "), Hint: "it is not as it was exported", Err: ErrDamaged}
	at := d.InputOffset()
	var syntax *json.SyntaxError
	var kind *json.UnmarshalTypeError
	switch {
	case errors.Is(err, io.EOF), errors.Is(err, io.ErrUnexpectedEOF):
		at, e.What = int64(len(text)), "ends in the middle"
	case errors.As(err, &syntax):
		at = syntax.Offset
	case errors.As(err, &kind):
		at, e.Path, e.What = kind.Offset, kind.Field, kind.Value+" cannot stand here"
	}
	before := string(text[:min(max(at, 0), int64(len(text)))])
	e.Line = 1 + strings.Count(before, "\n")
	e.Column = max(1, utf8.RuneCountInString(before[strings.LastIndexByte(before, '\n')+1:]))
	return e
}
