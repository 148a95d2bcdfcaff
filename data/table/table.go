package table

import (
	"fmt"
	"math"
	"strings"

	"phaselag/data/place"
	"phaselag/data/unit"
)

// Settings says how a file is to be read where its own text does not. The zero
// value reads everything from the file. They are the keys "reading" and
// "columns" of the campaign file.
type Settings struct {
	Separator string // ",", ";", "\t" or " " (any number of blanks); "": found
	Decimal   string // "." or ","; "": found
	Sheet     string // of a workbook; "": every sheet that is understood
	HeaderRow int    // line of the headings, from 1; 0: found; NoHeader: there is none
	UnitsRow  int    // line of the units, from 1; 0: found
	Wants     []Want // columns that are chosen by hand
}

// NoHeader as a HeaderRow says that the file has no headings: all columns are
// chosen by their numbers.
const NoHeader = -1

// Want chooses the column of one concept.
type Want struct {
	Concept Concept
	Heading string // as it stands in the file; "": the column's number counts
	Number  int    // of the column, from 1; 0: the heading counts, or the column as understood
	Unit    string // "": from the file
}

// Row is one row of numbers or text.
type Row struct {
	Line  int
	Block int // from 0; grows with blank lines and repeated headings
	Cells []Cell
}

// Table is a text table that was understood.
type Table struct {
	File        string
	Sheet       string // of a workbook, else ""
	Encoding    string // for people
	Separator   string // as in Settings
	Decimal     string // "." or ","
	HeaderLine  int    // 0: none
	UnitsLine   int    // 0: none of its own
	Columns     []Column
	Rows        []Row    // at least one
	Assumptions []string // what was assumed in reading, for people

	wide wide
}

// Read understands the bytes of a text table. The name is used in errors, which
// are *place.Error.
func Read(name string, content []byte, s Settings) (*Table, error) {
	t, err := read(name, content, s)
	if err != nil {
		return nil, place.At(err, name, 0, 0, "")
	}
	return t, nil
}

func read(name string, content []byte, s Settings) (*Table, error) {
	if len(content) > maxBytes {
		return nil, &place.Error{What: fmt.Sprintf("larger than %d MB", maxBytes>>20), Hint: "is this a table of results? raw signals are not read in this version"}
	}
	if len(content) == 0 {
		return nil, &place.Error{What: "the file is empty"}
	}
	text, encoding, err := decode(content)
	if err != nil {
		return nil, err
	}
	text = newlines(text)
	if strings.TrimSpace(text) == "" {
		return nil, &place.Error{What: "the file has no text in it"}
	}
	t := &Table{File: name, Encoding: encoding, Separator: s.Separator}
	switch s.Separator {
	case ",", ";", "\t", blanks, "|":
	case "":
		if t.Separator, err = sniff(text); err != nil {
			return nil, err
		}
	default:
		return nil, &place.Error{What: fmt.Sprintf("the separator %q", clip(s.Separator)), Hint: `write separator: "," or ";", "\t", "|" or " "`}
	}
	cells, err := grid(text, t.Separator)
	if err != nil {
		return nil, err
	}
	body, err := t.head(cells, s)
	if err != nil {
		return nil, err
	}
	if err := t.body(body, s); err != nil {
		return nil, err
	}
	if t.Decimal, err = findDecimal(t.Rows, s.Decimal); err != nil {
		return nil, err
	}
	if err := t.unpivot(t.wide); err != nil {
		return nil, err
	}
	return t, nil
}

// Value gives the number in a row's column in SI: NaN where the cell is empty,
// says that nothing was measured, or is beyond the end of the row; an infinity
// where the cell says so. The column must have a unit; see Require.
func (t *Table) Value(r Row, column int) (float64, error) {
	if column >= len(r.Cells) {
		return math.NaN(), nil
	}
	c := r.Cells[column]
	x, err := t.number(c)
	if err != nil || math.IsNaN(x) || math.IsInf(x, 0) {
		return x, err
	}
	v, err := unit.Convert(x, t.Columns[column].Unit)
	return v, place.At(err, t.File, c.Line, c.Column, "")
}

// Text gives a cell's text, "" beyond the end of the row.
func (t *Table) Text(r Row, column int) string {
	if column >= len(r.Cells) {
		return ""
	}
	return r.Cells[column].Text
}

// At is the place of a cell, for errors.
func (t *Table) At(r Row, column int) (line, col int) {
	if column < 0 || column >= len(r.Cells) {
		return r.Line, 0
	}
	return r.Cells[column].Line, r.Cells[column].Column
}

// Find gives the column with a concept, -1 if there is none, and an error if
// there are several, or if its unit is missing or of another quantity.
func (t *Table) Find(c Concept) (int, error) {
	found := -1
	for i, col := range t.Columns {
		if col.Concept != c {
			continue
		}
		if found >= 0 {
			return -1, &place.Error{File: t.File, Line: col.Line, Column: col.Place,
				What: fmt.Sprintf("two columns with the %s: %q and %q", c, clip(t.Columns[found].Heading), clip(col.Heading)),
				Hint: fmt.Sprintf("choose one in the campaign file: columns: {%s: %s}", c, Quote(t.Columns[found].Heading))}
		}
		found = i
	}
	if found < 0 {
		return -1, nil
	}
	return found, t.require(found)
}

// FindAll gives the columns with a concept, whatever their units.
func (t *Table) FindAll(c Concept) []int {
	var all []int
	for i, col := range t.Columns {
		if col.Concept == c {
			all = append(all, i)
		}
	}
	return all
}

// require checks that a column has a unit of its quantity.
func (t *Table) require(i int) error {
	col := t.Columns[i]
	q := col.Concept.Quantity()
	if q == "" || col.HasUnit {
		return nil
	}
	e := &place.Error{File: t.File, Line: col.Line, Column: col.Place}
	hint := fmt.Sprintf("columns: {%s: {heading: %s, unit: %s}}", col.Concept, Quote(col.Heading), unit.Preferred(q).Symbol)
	if col.Line == 0 {
		hint = fmt.Sprintf("columns: {%s: {column: %d, unit: %s}}", col.Concept, i+1, unit.Preferred(q).Symbol)
	}
	if col.UnitText == "" {
		e.What = fmt.Sprintf("the %s in column %q has no unit", col.Concept, clip(col.Heading))
		e.Hint = fmt.Sprintf("write the unit into the heading, or say in the campaign file %s; units: %s", hint, strings.Join(unit.Symbols(q), ", "))
		return e
	}
	if _, ok := unit.Lookup(col.UnitText, q); ok && col.Angular {
		e.What = fmt.Sprintf("%q is an angular frequency in %s", clip(col.Heading), clip(col.UnitText))
		e.Hint = fmt.Sprintf("say in the campaign file whether the numbers are in Hz or in rad/s: %s", hint)
		return e
	}
	e.What = fmt.Sprintf("%q is not a unit of the %s, in column %q", clip(col.UnitText), col.Concept, clip(col.Heading))
	e.Hint = fmt.Sprintf("units: %s; or say in the campaign file %s", strings.Join(unit.Symbols(q), ", "), hint)
	return e
}

// Headings lists the headings as they stand in the file.
func (t *Table) Headings() []string {
	h := make([]string, len(t.Columns))
	for i, c := range t.Columns {
		h[i] = c.Heading
	}
	return h
}

// Quote writes a heading as a YAML scalar for a hint.
func Quote(s string) string {
	return `"` + strings.NewReplacer(`\`, `\\`, `"`, `\"`).Replace(clip(s)) + `"`
}

// Plain gives the number in a row's column as it stands in the file, without its
// unit; NaN where the cell is empty or says that nothing was measured.
func (t *Table) Plain(r Row, column int) (float64, error) {
	if column >= len(r.Cells) {
		return math.NaN(), nil
	}
	return t.number(r.Cells[column])
}

// Rough splits the first lines of a text into cells without understanding them, for
// a look at what cannot be read.
func Rough(content []byte, lines int) (encoding, separator string, rows [][]Cell, err error) {
	text, encoding, err := decode(content)
	if err != nil {
		return "", "", nil, err
	}
	text = newlines(text)
	if separator, err = sniff(text); err != nil {
		return "", "", nil, err
	}
	all, err := grid(text, separator)
	if err != nil {
		return "", "", nil, err
	}
	for _, r := range all {
		if len(r) > 0 && len(rows) < lines {
			rows = append(rows, r)
		}
	}
	return encoding, separator, rows, nil
}
