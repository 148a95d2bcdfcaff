package data

import (
	"fmt"
	"io"
	"math"
	"path"
	"path/filepath"
	"strings"

	"phaselag/data/place"
	"phaselag/data/table"
	"phaselag/data/unit"
)

// Inspection says how a table was understood, before anything is made of it.
type Inspection struct {
	File       string
	Encoding   string
	Separator  string // "," or ";", "tabulator", "blanks"
	Decimal    string // "." or ","
	HeaderLine int    // from 1; 0: none
	UnitsLine  int    // 0: none of its own
	FirstLine  int    // of the first row of numbers
	Rows       int
	Blocks     int // parts told apart by blank lines or repeated headings
	Columns    []InspectedColumn
	// Kind and Runs are what would be made of the file alone; Kind is "" and Refused
	// says why where it would be refused.
	Kind    Kind
	Runs    []Run
	Refused error
	// Signals holds the segments of a file of raw signals; nil otherwise. Its values
	// and ranges are then those of its first rows.
	Signals []Signal
	// First holds the first lines, split into cells, of a file without headings that
	// are understood; nil otherwise.
	First [][]string
	// Snippet is the entry of a campaign file that reads the file as it was
	// understood, to be corrected where that is wrong.
	Snippet     string
	Assumptions []string
}

// InspectedColumn is one column of the file.
type InspectedColumn struct {
	Number   int // from 1
	Heading  string
	Quantity string // "" if the heading was not understood
	Unit     string // as written; "" if none
	Known    bool   // the unit belongs to the quantity
	First    []string
	Empty    int     // cells without text
	Text     bool    // no numbers
	Min, Max float64 // of the numbers as they stand in the file; NaN if there are none
}

// firstValues is how many values of a column are shown.
const firstValues = 3

// Inspect reads one table, or each sheet of a workbook, and says how it was
// understood. The error is that of reading the table itself; what the headings do not
// say is in Refused.
func Inspect(name string) ([]*Inspection, error) {
	if isCampaign(name) {
		return nil, &place.Error{File: name, What: "is a campaign file by its name, not a table", Hint: "phaselag check shows how a campaign and its tables were understood"}
	}
	s := &source{}
	if in, err := inspectSignals(s, name); err != nil || in != nil {
		return []*Inspection{in}, err
	}
	content, err := s.read(name, path.Base(filepath.ToSlash(name)))
	if err != nil {
		return nil, err
	}
	tables, err := table.ReadAll(name, content, table.Settings{})
	if err != nil {
		in, err := rough(name, content, err)
		if err != nil {
			return nil, err
		}
		return []*Inspection{in}, nil
	}
	c, refused := Open(name)
	var out []*Inspection
	for _, t := range tables {
		out = append(out, inspectTable(name, t, c, refused))
	}
	return out, nil
}

// inspectTable says how one table was understood; c is the campaign that the file
// alone makes, nil where it is refused.
func inspectTable(name string, t *table.Table, c *Campaign, refused error) *Inspection {
	in := &Inspection{
		File: name, Encoding: t.Encoding, Separator: separatorName(t.Separator), Decimal: t.Decimal,
		HeaderLine: t.HeaderLine, UnitsLine: t.UnitsLine, Rows: len(t.Rows), FirstLine: t.Rows[0].Line,
		Blocks: t.Rows[len(t.Rows)-1].Block + 1, Assumptions: t.Assumptions,
	}
	for i := range t.Columns {
		in.Columns = append(in.Columns, inspectColumn(t, i))
	}
	if t.Sheet != "" {
		in.File = name + "[" + t.Sheet + "]"
	}
	in.Refused = refused
	if c != nil {
		in.Kind = c.Tests[0].Kind
		for _, r := range c.Tests[0].Runs {
			if t.Sheet == "" || len(r.Points) > 0 && strings.HasSuffix(r.Points[0].File, "["+t.Sheet+"]") {
				in.Runs = append(in.Runs, r)
			}
		}
		for _, a := range c.Assumptions {
			if !contains(in.Assumptions, a) && !contains(in.Assumptions, strings.TrimPrefix(a, path.Base(filepath.ToSlash(name))+": ")) {
				in.Assumptions = append(in.Assumptions, a)
			}
		}
	}
	in.Snippet = in.snippet(t)
	return in
}

// inspectSignals analyses a file of raw signals; nil without an error where it has
// none. Of a table of results with a time column the moduli come first.
func inspectSignals(s *source, name string) (in *Inspection, err error) {
	fault := s.stream(name, name, func(r io.Reader) error {
		st, e := table.NewStream(name, r, table.Settings{})
		if e != nil {
			return nil
		}
		cols, ok, e := signalColumnsOf(st.Table)
		if !ok || e != nil {
			return nil
		}
		for _, c := range []table.Concept{table.Frequency, table.Storage, table.Magnitude, table.Phase} {
			if len(st.Table.FindAll(c)) > 0 {
				return nil
			}
		}
		in = inspectTable(name, st.Table, nil, nil)
		in.Kind = "waveform"
		in.Signals, in.Refused = analyse(st, cols, math.NaN(), &signalSettings{segments: "auto"})
		in.Snippet = in.snippet(st.Table)
		return nil
	})
	if fault != nil {
		return nil, fault
	}
	return in, nil
}

// roughLines is how many lines of a file are shown that cannot be read.
const roughLines = 8

// rough shows a text that is not understood; what is no text at all is an error.
func rough(name string, content []byte, cause error) (*Inspection, error) {
	encoding, separator, rows, err := table.Rough(content, roughLines)
	if err != nil || len(rows) == 0 {
		return nil, cause
	}
	in := &Inspection{File: name, Encoding: encoding, Separator: separatorName(separator), Decimal: "?", Refused: cause}
	for _, r := range rows {
		cells := []string{fmt.Sprint(r[0].Line)}
		for _, c := range r {
			cells = append(cells, c.Text)
		}
		in.First = append(in.First, cells)
	}
	sep := strings.NewReplacer("\t", `\t`).Replace(separator)
	in.Snippet = fmt.Sprintf("tests:\n  - name: %s\n    kind: frequency sweep\n    file: %s\n    reading: {separator: \"%s\", header_row: %s}\n    columns:\n      frequency: {column: 1, unit: Hz}\n      storage modulus: {column: 2, unit: MPa}\n      loss modulus: {column: 3, unit: MPa}\n",
		table.Quote(stem(name)), table.Quote(path.Base(filepath.ToSlash(name))), sep, "none")
	return in, nil
}

func separatorName(s string) string {
	switch s {
	case "\t":
		return "tabulator"
	case " ":
		return "blanks"
	}
	return s
}

func inspectColumn(t *table.Table, i int) InspectedColumn {
	col := t.Columns[i]
	out := InspectedColumn{Number: i + 1, Heading: col.Heading, Quantity: string(col.Concept), Unit: col.UnitText, Known: col.HasUnit, Min: math.NaN(), Max: math.NaN()}
	numbers, texts := 0, 0
	for _, r := range t.Rows {
		text := t.Text(r, i)
		if text == "" {
			out.Empty++
			continue
		}
		if len(out.First) < firstValues {
			out.First = append(out.First, text)
		}
		x, err := t.Plain(r, i)
		if err != nil || math.IsNaN(x) || math.IsInf(x, 0) {
			texts++
			continue
		}
		numbers++
		if numbers == 1 {
			out.Min, out.Max = x, x
		}
		out.Min, out.Max = min(out.Min, x), max(out.Max, x)
	}
	out.Text = numbers == 0 && texts > 0
	return out
}

// readingOf begins the key reading of a text table.
func readingOf(t *table.Table) string {
	return fmt.Sprintf("    reading: {separator: \"%s\", decimal: %q", strings.ReplaceAll(t.Separator, "\t", `\t`), t.Decimal)
}

// snippet writes the campaign entry.
func (in *Inspection) snippet(t *table.Table) string {
	var b strings.Builder
	kind := in.Kind
	if kind == "" {
		kind = FrequencySweep
	}
	base := path.Base(filepath.ToSlash(t.File))
	fmt.Fprintf(&b, "tests:\n  - name: %s\n    kind: %s\n    file: %s\n", table.Quote(stem(t.File)), kind, table.Quote(base))
	if t.Sheet != "" {
		fmt.Fprintf(&b, "    reading: {sheet: %s", table.Quote(t.Sheet))
	} else {
		b.WriteString(readingOf(t))
	}
	if t.HeaderLine > 0 {
		fmt.Fprintf(&b, ", header_row: %d", t.HeaderLine)
	}
	if t.UnitsLine > 0 {
		fmt.Fprintf(&b, ", units_row: %d", t.UnitsLine)
	}
	b.WriteString("}\n")
	if len(in.Signals) > 0 {
		b.WriteString("    signals: {segments: auto, frequency: fitted}\n    temperature: 23 °C  # where no column has it\n    specimen: pair      # specimens: {pair: {shape: double shear, diameter: 25 mm, thickness: 5 mm}}\n")
	}
	b.WriteString("    columns:\n")
	known := map[string]bool{}
	for _, c := range table.Concepts() {
		known[c] = true
	}
	seen := map[string]bool{}
	lines := 0
	for i, c := range in.Columns {
		if t.Columns[i].Derived {
			continue
		}
		if !known[c.Quantity] || seen[c.Quantity] {
			continue
		}
		seen[c.Quantity] = true
		lines++
		q := table.Concept(c.Quantity).Quantity()
		switch {
		case q == "":
			fmt.Fprintf(&b, "      %s: %s\n", c.Quantity, table.Quote(c.Heading))
		case c.Known && c.Unit != "":
			fmt.Fprintf(&b, "      %s: {heading: %s, unit: %s}\n", c.Quantity, table.Quote(c.Heading), table.Quote(c.Unit))
		case c.Known:
			fmt.Fprintf(&b, "      %s: %s\n", c.Quantity, table.Quote(c.Heading))
		default:
			fmt.Fprintf(&b, "      %s: {heading: %s, unit: %s}  # which of %s?\n", c.Quantity, table.Quote(c.Heading), unit.Preferred(q).Symbol, strings.Join(unit.Symbols(q), ", "))
		}
	}
	if lines == 0 {
		b.WriteString("      # no heading was understood; quantities are " + strings.Join(table.Concepts(), ", ") + "\n")
	}
	return b.String()
}
