package workbook

import (
	"math"

	"github.com/xuri/excelize/v2"
)

// Write makes a workbook (.xlsx) of one sheet: a row of headings, which stays in
// view, and rows of numbers (float64; NaN is an empty cell) and texts (string).
func Write(sheet string, headings []string, rows [][]any) ([]byte, error) {
	f := excelize.NewFile()
	defer f.Close()
	if err := f.SetSheetName("Sheet1", sheet); err != nil {
		return nil, err
	}
	w, err := f.NewStreamWriter(sheet)
	if err != nil {
		return nil, err
	}
	if err := w.SetPanes(&excelize.Panes{Freeze: true, YSplit: 1, TopLeftCell: "A2", ActivePane: "bottomLeft"}); err != nil {
		return nil, err
	}
	head := make([]any, len(headings))
	for i, h := range headings {
		head[i] = h
	}
	if err := w.SetRow("A1", head); err != nil {
		return nil, err
	}
	for i, r := range rows {
		cells := make([]any, len(r))
		for k, v := range r {
			if x, ok := v.(float64); !ok || !math.IsNaN(x) {
				cells[k] = v
			}
		}
		if err := w.SetRow(Cell(i+2, 1), cells); err != nil {
			return nil, err
		}
	}
	if err := w.Flush(); err != nil {
		return nil, err
	}
	b, err := f.WriteToBuffer()
	if err != nil {
		return nil, err
	}
	return b.Bytes(), nil
}
