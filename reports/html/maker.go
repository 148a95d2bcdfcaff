package html

import (
	"bytes"
	"fmt"
	"html/template"

	"phaselag/reports/figure"
	"phaselag/reports/table"
)

// section and block are what the template reads: numbered, with figures drawn
// and cells padded.
type section struct {
	ID       string
	Level    int
	Heading  string
	Blocks   []block
	Sections []section
}

type block struct {
	Kind     string // paragraph, list, facts, callout, picture, row or grid
	Lead     string
	Text     string
	Title    string
	Small    bool
	Numbered bool
	Grade    figure.Grade
	Items    []string
	Facts    []figure.Fact
	Pictures []picture
	Label    string // of a grid, for screen readers
	Caption  *caption
	Columns  []figure.GridColumn
	Rows     [][]cell
}

type caption struct{ Number, Text string }

type picture struct {
	SVG     template.HTML
	Caption *caption
}

type cell struct {
	Text   string
	Number bool
	Gap    string // width that brings the decimal point into its line, for CSS
}

type maker struct {
	figures, tables int
	err             error
}

func (m *maker) section(s figure.Section, id string, level int) section {
	out := section{ID: id, Level: level, Heading: s.Heading, Blocks: m.blocks(s.Blocks)}
	for i, sub := range s.Sections {
		out.Sections = append(out.Sections, m.section(sub, fmt.Sprintf("%s-%d", id, i+1), level+1))
	}
	return out
}

func (m *maker) blocks(list []figure.Block) []block {
	var out []block
	for _, k := range list {
		switch k := k.(type) {
		case figure.Paragraph:
			if k.Lead != "" || k.Text != "" {
				out = append(out, block{Kind: "paragraph", Lead: k.Lead, Text: k.Text, Small: k.Small})
			}
		case figure.List:
			if len(k.Items) > 0 {
				out = append(out, block{Kind: "list", Items: k.Items, Numbered: k.Numbered})
			}
		case figure.Facts:
			if len(k.Items) > 0 {
				out = append(out, block{Kind: "facts", Facts: k.Items})
			}
		case figure.Picture:
			out = append(out, block{Kind: "picture", Pictures: []picture{m.picture(k)}})
		case figure.Row:
			b := block{Kind: "row"}
			for _, p := range k.Pictures {
				b.Pictures = append(b.Pictures, m.picture(p))
			}
			if len(b.Pictures) > 0 {
				out = append(out, b)
			}
		case figure.Callout:
			out = append(out, block{Kind: "callout", Grade: figure.Grade(clean(string(k.Grade))), Title: head(k), Text: k.Text, Facts: k.Facts})
		case figure.Grid:
			if len(k.Columns) > 0 {
				out = append(out, m.grid(k))
			}
		}
	}
	return out
}

// head puts the grade in words in front of a callout's title.
func head(c figure.Callout) string {
	switch {
	case c.Title == "":
		return string(c.Grade)
	case c.Grade == "":
		return c.Title
	}
	return string(c.Grade) + ": " + c.Title
}

func (m *maker) picture(p figure.Picture) picture {
	svg, err := figure.SVG(p.Figure)
	if err != nil && m.err == nil {
		m.err = err
	}
	// the text is our own renderer's, which escapes all that it is given
	out := picture{SVG: template.HTML(bytes.TrimSpace(svg)) + "\n"}
	if p.Caption != "" {
		m.figures++
		out.Caption = &caption{fmt.Sprintf("Figure %d.", m.figures), p.Caption}
	}
	return out
}

func (m *maker) grid(g figure.Grid) block {
	b := block{Kind: "grid", Columns: g.Columns, Label: "table"}
	if g.Caption != "" {
		m.tables++
		b.Caption = &caption{fmt.Sprintf("Table %d.", m.tables), g.Caption}
		b.Label = clean(figure.Plain(b.Caption.Number + " " + g.Caption))
	}
	longest := make([]float64, len(g.Columns))
	for j := range g.Columns {
		for _, row := range g.Rows {
			if rest, ok := behind(row, j); ok {
				longest[j] = max(longest[j], figure.Em(rest))
			}
		}
	}
	for _, row := range g.Rows {
		cells := make([]cell, len(g.Columns))
		for j, c := range g.Columns {
			if j < len(row) {
				cells[j].Text = row[j]
			}
			cells[j].Number = c.Number
			if rest, ok := behind(row, j); ok && c.Number {
				if d := longest[j] - figure.Em(rest); d > 0.005 {
					cells[j].Gap = fmt.Sprintf("%.2fem", d)
				}
			}
		}
		b.Rows = append(b.Rows, cells)
	}
	return b
}

// behind returns what stands right of the line of the decimal points.
func behind(row []string, j int) (string, bool) {
	if j >= len(row) {
		return "", false
	}
	_, rest, ok := table.SplitPoint(row[j])
	return rest, ok
}
