package workbook

import (
	"archive/zip"
	"encoding/xml"
	"errors"
	"io"
	"strconv"
	"strings"

	"phaselag/data/place"
)

// readODS reads content.xml: tables of rows of cells, where equal neighbours are
// written once with a count. A cell has its value in an attribute; what it shows
// stands in paragraphs inside.
func readODS(f *zip.File) ([]Sheet, error) {
	damaged := func(err error) error {
		return &place.Error{What: "a damaged workbook", Err: err, Hint: "open it and save it again"}
	}
	if f.UncompressedSize64 > maxUnzipped {
		return nil, tooLarge("")
	}
	r, err := f.Open()
	if err != nil {
		return nil, damaged(err)
	}
	defer r.Close()
	d := xml.NewDecoder(io.LimitReader(r, maxUnzipped))
	var sheets []Sheet
	var row []string
	cells, rowTimes, cellTimes := 0, 1, 1
	var value string
	var text strings.Builder
	inCell, stated := false, false
	for {
		t, err := d.Token()
		if errors.Is(err, io.EOF) {
			return trimmed(sheets), nil
		}
		if err != nil {
			return nil, damaged(err)
		}
		switch t := t.(type) {
		case xml.StartElement:
			switch t.Name.Local {
			case "table":
				sheets = append(sheets, Sheet{Name: attribute(t, "name")})
			case "table-row":
				row, rowTimes = nil, times(t, "number-rows-repeated")
			case "table-cell", "covered-table-cell":
				inCell, stated, value = true, false, ""
				text.Reset()
				cellTimes = times(t, "number-columns-repeated")
				for _, name := range []string{"value", "date-value", "time-value", "boolean-value"} {
					if v := attribute(t, name); v != "" && !stated {
						value, stated = v, true
					}
				}
			case "p":
				if inCell && text.Len() > 0 {
					text.WriteByte(' ')
				}
			case "s":
				if inCell {
					text.WriteByte(' ')
				}
			case "annotation":
				if err := d.Skip(); err != nil {
					return nil, damaged(err)
				}
			}
		case xml.CharData:
			if inCell {
				text.Write(t)
			}
		case xml.EndElement:
			switch t.Name.Local {
			case "table-cell", "covered-table-cell":
				inCell = false
				if !stated {
					value = strings.TrimSpace(text.String())
				}
				// Spreadsheets end rows with thousands of empty cells.
				if value == "" && cellTimes > maxColumns {
					continue
				}
				if len(row)+cellTimes > maxColumns {
					return nil, tooLarge(last(sheets))
				}
				for range cellTimes {
					row = append(row, value)
				}
			case "table-row":
				for len(row) > 0 && row[len(row)-1] == "" {
					row = row[:len(row)-1]
				}
				if len(sheets) == 0 {
					continue
				}
				s := &sheets[len(sheets)-1]
				if len(row) == 0 && rowTimes > 1000 {
					rowTimes = 1
				}
				cells += rowTimes * max(1, len(row))
				if cells > maxCells || len(s.Rows)+rowTimes > maxRows {
					return nil, tooLarge(s.Name)
				}
				for range rowTimes {
					s.Rows = append(s.Rows, row)
				}
			}
		}
	}
}

func last(sheets []Sheet) string {
	if len(sheets) == 0 {
		return ""
	}
	return sheets[len(sheets)-1].Name
}

// trimmed takes off the empty rows at the end of each sheet.
func trimmed(sheets []Sheet) []Sheet {
	for i := range sheets {
		for n := len(sheets[i].Rows); n > 0 && len(sheets[i].Rows[n-1]) == 0; n-- {
			sheets[i].Rows = sheets[i].Rows[:n-1]
		}
	}
	return sheets
}

func attribute(t xml.StartElement, name string) string {
	for _, a := range t.Attr {
		if a.Name.Local == name {
			return a.Value
		}
	}
	return ""
}

func times(t xml.StartElement, name string) int {
	n, err := strconv.Atoi(attribute(t, name))
	if err != nil || n < 1 {
		return 1
	}
	return min(n, 1<<24)
}
