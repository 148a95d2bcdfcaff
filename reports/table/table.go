package table

import (
	"fmt"
	"io"
	"math"
)

// Table is a table of results.
type Table struct {
	// Name and version, which open the JSON form: "modulus 1".
	Name        string
	Assumptions []string // nil: none
	Columns     []Column
	Rows        [][]Cell // each as long as Columns
}

// Column is one column.
type Column struct {
	// Key stands at the head of the column in CSV and names the value in JSON,
	// unit included: "storage_MPa".
	Key string
	// Heading and Unit are for people; "" heading: the key.
	Heading, Unit string
	// Digits is the number of significant digits for people where no interval
	// says better; 0: four.
	Digits int
	// Interval is the key of the column with the half length of the 95 %
	// interval of this one. People then see the value to the place of the
	// second significant digit of its interval. "" for none.
	Interval string
}

// Cell is a number or a text. The zero Cell is an empty text.
type Cell struct {
	number  float64
	text    string
	numeric bool
}

// Number is a cell with a number; NaN for "not measured".
func Number(v float64) Cell { return Cell{number: v, numeric: true} }

// Text is a cell with a text.
func Text(s string) Cell { return Cell{text: s} }

// Format is how a table is written.
type Format string

// The formats.
const (
	Terminal Format = "table"
	CSV      Format = "csv"
	JSON     Format = "json"
)

// Write writes t. It returns an error for an unknown format, for an infinite
// number, before anything is written, and whatever w returns.
func Write(w io.Writer, format Format, t Table) error {
	t.check()
	for i, row := range t.Rows {
		for j, c := range row {
			if c.numeric && math.IsInf(c.number, 0) {
				return fmt.Errorf("table %s: row %d, column %s: the number is infinite", t.Name, i+1, t.Columns[j].Key)
			}
		}
	}
	var b []byte
	switch format {
	case Terminal:
		b = t.terminal()
	case CSV:
		b = t.csv()
	case JSON:
		b = t.json()
	default:
		return fmt.Errorf("unknown table format %q: use table, csv or json", format)
	}
	_, err := w.Write(b)
	return err
}

// check panics where the program built a table that is none.
func (t Table) check() {
	seen := map[string]bool{}
	for _, c := range t.Columns {
		if c.Key == "" || seen[c.Key] {
			panic(fmt.Sprintf("table: %s: key %q is empty or used twice", t.Name, c.Key))
		}
		seen[c.Key] = true
	}
	for _, c := range t.Columns {
		if c.Interval != "" && !seen[c.Interval] {
			panic(fmt.Sprintf("table: %s: column %s names the interval %q, which is no column", t.Name, c.Key, c.Interval))
		}
	}
	for i, row := range t.Rows {
		if len(row) != len(t.Columns) {
			panic(fmt.Sprintf("table: %s: row %d has %d cells for %d columns", t.Name, i+1, len(row), len(t.Columns)))
		}
	}
}

// Strings returns the cells as people read them.
func (t Table) Strings() [][]string {
	t.check()
	index := map[string]int{}
	isInterval := make([]bool, len(t.Columns))
	for j, c := range t.Columns {
		index[c.Key] = j
	}
	for _, c := range t.Columns {
		if c.Interval != "" {
			isInterval[index[c.Interval]] = true
		}
	}
	out := make([][]string, len(t.Rows))
	for i, row := range t.Rows {
		out[i] = make([]string, len(row))
		for j, c := range row {
			switch {
			case !c.numeric:
				out[i][j] = c.text
			case isInterval[j]:
				out[i][j] = Interval(c.number)
			case t.Columns[j].Interval != "":
				u := row[index[t.Columns[j].Interval]]
				out[i][j] = WithInterval(c.number, u.number, t.Columns[j].Digits)
			default:
				out[i][j] = Significant(c.number, t.Columns[j].Digits)
			}
		}
	}
	return out
}

// Headings returns heading and unit of each column for people.
func (t Table) Headings() (headings, units []string) {
	for _, c := range t.Columns {
		h := c.Heading
		if h == "" {
			h = c.Key
		}
		headings, units = append(headings, h), append(units, c.Unit)
	}
	return headings, units
}

// Numeric says for each column whether it holds numbers only (and at least
// one, or no rows at all is false).
func (t Table) Numeric() []bool {
	out := make([]bool, len(t.Columns))
	for j := range t.Columns {
		for i, row := range t.Rows {
			out[j] = row[j].numeric && (i == 0 || out[j])
			if !out[j] {
				break
			}
		}
	}
	return out
}

// Float gives a cell's number, NaN for a text.
func (c Cell) Float() float64 {
	if !c.numeric {
		return math.NaN()
	}
	return c.number
}

// Value is the cell's number as a float64 or its text as a string.
func (c Cell) Value() any {
	if c.numeric {
		return c.number
	}
	return c.text
}
