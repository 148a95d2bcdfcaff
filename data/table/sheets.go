package table

import (
	"errors"
	"fmt"
	"strings"

	"phaselag/data/place"
	"phaselag/data/workbook"
)

// ReadAll understands a text table, or the sheets of a workbook: the one that
// Settings.Sheet names, else every sheet that has headings which are understood.
// Sheets that are passed over stand among the assumptions of the first table.
func ReadAll(name string, content []byte, s Settings) ([]*Table, error) {
	if !workbook.Is(content) {
		if s.Sheet != "" {
			return nil, &place.Error{File: name, What: fmt.Sprintf("the sheet %q of a file that is no workbook", clip(s.Sheet)), Hint: "leave sheet out"}
		}
		t, err := Read(name, content, s)
		if err != nil {
			return nil, err
		}
		return []*Table{t}, nil
	}
	sheets, err := workbook.Read(content)
	if err != nil {
		return nil, place.At(err, name, 0, 0, "")
	}
	var names []string
	for _, sh := range sheets {
		names = append(names, sh.Name)
	}
	if s.Sheet != "" {
		for _, sh := range sheets {
			if sh.Name == s.Sheet {
				t, err := readSheet(name, sh, s)
				if err != nil {
					return nil, err
				}
				return []*Table{t}, nil
			}
		}
		hint := "sheets: " + strings.Join(names, ", ")
		if near := place.Nearest(s.Sheet, names); near != "" {
			hint = fmt.Sprintf("did you mean %q?", near)
		}
		return nil, &place.Error{File: name, What: fmt.Sprintf("no sheet has the name %q", clip(s.Sheet)), Hint: hint}
	}
	var out []*Table
	var first error
	var passed []string
	for _, sh := range sheets {
		t, err := readSheet(name, sh, s)
		if err != nil {
			if first == nil {
				first = err
			}
			passed = append(passed, fmt.Sprintf("%q", sh.Name))
			continue
		}
		out = append(out, t)
	}
	if len(out) == 0 {
		if first == nil {
			first = &place.Error{File: name, What: "a workbook without a sheet"}
		}
		return nil, first
	}
	if len(passed) > 0 {
		out[0].Assumptions = append(out[0].Assumptions, fmt.Sprintf("sheets without headings that are understood were passed over: %s", strings.Join(passed, ", ")))
	}
	return out, nil
}

// readSheet understands one sheet.
func readSheet(name string, sheet workbook.Sheet, s Settings) (*Table, error) {
	t := &Table{File: name, Sheet: sheet.Name, Encoding: "workbook", Separator: "cells"}
	var cells [][]Cell
	for i, r := range sheet.Rows {
		var row []Cell
		for j, text := range r {
			row = append(row, Cell{Text: tidy(text), Line: i + 1, Column: j + 1})
		}
		for len(row) > 0 && row[len(row)-1].Text == "" {
			row = row[:len(row)-1]
		}
		cells = append(cells, row)
	}
	fail := func(err error) (*Table, error) {
		return nil, t.Placed(place.At(err, name, 0, 0, ""))
	}
	body, err := t.head(cells, s)
	if err != nil {
		return fail(err)
	}
	if err := t.body(body, s); err != nil {
		return fail(err)
	}
	if t.Decimal, err = findDecimal(t.Rows, s.Decimal); err != nil {
		return fail(err)
	}
	if err := t.unpivot(t.wide); err != nil {
		return fail(err)
	}
	return t, nil
}

// Placed writes the places in a table of a workbook as sheet and cell.
func (t *Table) Placed(err error) error {
	if t.Sheet == "" || err == nil {
		return err
	}
	for _, one := range place.All(err) {
		var e *place.Error
		if !errors.As(one, &e) || e.File != t.File || e.Sheet != "" {
			continue
		}
		e.Sheet = t.Sheet
		if e.Line > 0 {
			e.Cell = workbook.Cell(e.Line, max(e.Column, 1))
		}
		e.Line, e.Column = 0, 0
	}
	return err
}
