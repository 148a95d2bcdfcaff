package table

import (
	"fmt"

	"phaselag/data/place"
)

// body takes the rows after the headings: parts them into blocks, passes over
// repeated headings and units and over lines of text between blocks, and
// refuses what does not belong to the table.
func (t *Table) body(rows [][]Cell, s Settings) error {
	headings := t.Headings()
	block := 0
	pending := false // a break was seen since the last row of numbers
	byBlank := true  // all breaks so far are blank lines
	for i := 0; i < len(rows); i++ {
		row := rows[i]
		switch {
		case len(row) == 0:
			pending = true
			continue
		case t.HeaderLine > 0 && sameTexts(row, headings):
			pending, byBlank = true, false
			if i+1 < len(rows) && t.UnitsLine > 0 && len(rows[i+1]) > 0 && !hasNumber(rows[i+1]) {
				i++
			}
			continue
		case !hasNumber(row) && len(row) == 1 && len(headings) > 1:
			pending, byBlank = true, false // "Step 2"
			continue
		case !hasNumber(row) && t.HeaderLine > 0 && concepts(row) >= 2:
			return &place.Error{Line: row[0].Line, Column: row[0].Column,
				What: "a second table with other headings in the same file",
				Hint: "keep one table a file"}
		}
		for _, c := range row[min(len(row), len(headings)):] {
			if c.Text != "" {
				e := &place.Error{Line: c.Line, Column: c.Column,
					What: fmt.Sprintf("%q stands beyond the last of the %d headings", clip(c.Text), len(headings)),
					Hint: "quote texts that have the separator in them"}
				if t.Separator == "," {
					e.Hint += "; with decimal commas, separate the columns by semicolons"
				}
				return e
			}
		}
		if pending && len(t.Rows) > 0 {
			block++
		}
		pending = false
		t.Rows = append(t.Rows, Row{Line: row[0].Line, Block: block, Cells: row[:min(len(row), len(headings))]})
	}
	if len(t.Rows) == 0 {
		return &place.Error{Line: t.HeaderLine, What: "headings, but no row of numbers after them"}
	}
	// Blank lines between all rows part nothing.
	if byBlank && block+1 == len(t.Rows) {
		for i := range t.Rows {
			t.Rows[i].Block = 0
		}
	}
	return nil
}

func sameTexts(row []Cell, headings []string) bool {
	if len(row) != len(headings) {
		return false
	}
	for i, c := range row {
		if c.Text != headings[i] {
			return false
		}
	}
	return true
}
