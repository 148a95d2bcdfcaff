package figure

import (
	"strconv"
	"time"

	"phaselag/reports/table"
)

// Document is a paper of sections, written once and rendered as PDF or HTML.
// All its texts may carry _{…} and ^{…}.
type Document struct {
	Title    string
	Subtitle string // "" for none
	// Running stands at the foot of every page; "": the title.
	Running string
	Author  string // laboratory or person, for the file's properties
	Subject string
	// Date is the date of the content, which goes into the file's properties.
	// The zero time stands for 1 January 2000, so that nothing depends on a
	// clock.
	Date     time.Time
	Paper    Paper
	Logo     []byte  // PNG; nil: none
	Lead     []Block // in front of the first section
	Sections []Section
}

// Paper is a size of paper.
type Paper int

// The papers; A4 is the zero value.
const (
	A4 Paper = iota
	Letter
)

// Section is a heading with what stands below it. Two levels are used; deeper
// ones look like the second.
type Section struct {
	Heading  string
	NewPage  bool // begin on a new page where there are pages
	Blocks   []Block
	Sections []Section
}

// Block is one of Paragraph, List, Facts, Grid, Picture, Row and Callout.
type Block interface{ block() }

// Paragraph is running text.
type Paragraph struct {
	Lead  string // in bold in front; "" for none
	Text  string
	Small bool
}

// List is a list of short texts.
type List struct {
	Items    []string
	Numbered bool
}

// Fact is a name with its value.
type Fact struct{ Name, Value string }

// Facts is a list of names with their values, in two columns.
type Facts struct{ Items []Fact }

// Grid is a table.
type Grid struct {
	Caption string // "" for none; else it is numbered: "Table 1. …"
	Columns []GridColumn
	Rows    [][]string // shorter rows end with empty cells
}

// GridColumn is one column of a Grid.
type GridColumn struct {
	Heading, Unit string
	Number        bool // set flush right, decimal points one below the other
}

// Picture is a figure with a caption.
type Picture struct {
	Figure  Figure
	Caption string // numbered: "Figure 1. …"
}

// Row is pictures side by side, for those that are not as wide as the page.
type Row struct{ Pictures []Picture }

// Grade says how serious a Callout is.
type Grade string

// The grades.
const (
	Note   Grade = "note"
	Doubt  Grade = "doubt"
	Severe Grade = "severe"
)

// Colour returns the colour of a grade; the word always stands beside it.
func (g Grade) Colour() Colour {
	switch g {
	case Severe:
		return Vermillion
	case Doubt:
		return Orange
	}
	return Blue
}

// Callout is something that the reader must not miss.
type Callout struct {
	Grade Grade
	Title string
	Text  string // "" for none
	Facts []Fact // nil for none
}

func (Paragraph) block() {}
func (List) block()      {}
func (Facts) block()     {}
func (Grid) block()      {}
func (Picture) block()   {}
func (Row) block()       {}
func (Callout) block()   {}

// When returns the date of the document's properties, in UTC.
func (d Document) When() time.Time {
	if d.Date.IsZero() {
		return time.Date(2000, time.January, 1, 0, 0, 0, 0, time.UTC)
	}
	return d.Date.UTC()
}

// GridOf returns a table of results as a block: headings and units for people,
// numbers rounded by their intervals.
func GridOf(t table.Table, caption string) Grid {
	headings, units := t.Headings()
	numeric := t.Numeric()
	g := Grid{Caption: caption, Rows: t.Strings()}
	for j := range headings {
		g.Columns = append(g.Columns, GridColumn{Heading: headings[j], Unit: units[j], Number: numeric[j]})
	}
	for _, row := range g.Rows {
		for j, s := range row {
			if numeric[j] {
				row[j] = Readable(s)
			}
		}
	}
	return g
}

// Readable turns a plain number into one for paper: a true minus sign, and
// powers of ten raised ("1.2e-7" becomes "1.2·10^{−7}").
func Readable(s string) string {
	for i := 1; i < len(s); i++ {
		if s[i] == 'e' && s[i-1] >= '0' && s[i-1] <= '9' {
			exponent := s[i+1:]
			if n, err := strconv.Atoi(exponent); err == nil {
				exponent = strconv.Itoa(n) // no plus sign, no leading zeros
			}
			return minus(s[:i]) + "·10^{" + minus(exponent) + "}"
		}
	}
	return minus(s)
}
