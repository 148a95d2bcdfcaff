package workbook

import (
	"archive/zip"
	"bytes"
	"fmt"
	"strings"

	"github.com/xuri/excelize/v2"

	"phaselag/data/place"
)

// Sheet is one sheet: the texts of its cells by row and column, from the first.
type Sheet struct {
	Name string
	Rows [][]string
}

// Limits against hostile files.
const (
	maxUnzipped = 512 << 20
	maxRows     = 1_000_000
	maxColumns  = 2_000
	maxCells    = 4_000_000
)

var (
	zipMagic = []byte("PK\x03\x04")
	oleMagic = []byte("\xD0\xCF\x11\xE0\xA1\xB1\x1A\xE1")
)

// Is reports whether content is a workbook of any kind, read here or not.
func Is(content []byte) bool {
	return bytes.HasPrefix(content, zipMagic) || bytes.HasPrefix(content, oleMagic)
}

// Read gives the sheets of a workbook in their order. The error says how to convert
// what is not read.
func Read(content []byte) (sheets []Sheet, err error) {
	if bytes.HasPrefix(content, oleMagic) {
		return nil, &place.Error{What: "this is an old binary workbook (.xls)", Hint: "open it and save it as .xlsx, as .ods, or its sheet as CSV"}
	}
	z, err := zip.NewReader(bytes.NewReader(content), int64(len(content)))
	if err != nil {
		return nil, &place.Error{What: "a damaged workbook", Err: err, Hint: "open it and save it again"}
	}
	for _, f := range z.File {
		switch f.Name {
		case "xl/workbook.xml":
			return readXLSX(content)
		case "content.xml":
			return readODS(f)
		}
	}
	return nil, &place.Error{What: "a ZIP archive that is no workbook", Hint: "unpack it and name the table in it"}
}

// readXLSX reads every sheet twice: raw for the digits of numbers, displayed for
// dates.
func readXLSX(content []byte) (sheets []Sheet, err error) {
	damaged := func(cause any) error {
		return &place.Error{What: fmt.Sprintf("a damaged workbook: %v", cause), Hint: "open it and save it again"}
	}
	defer func() {
		if v := recover(); v != nil {
			sheets, err = nil, damaged(v)
		}
	}()
	f, err := excelize.OpenReader(bytes.NewReader(content), excelize.Options{UnzipSizeLimit: maxUnzipped, UnzipXMLSizeLimit: maxUnzipped})
	if err != nil {
		return nil, damaged(err)
	}
	defer f.Close()
	cells := 0
	for _, name := range f.GetSheetList() {
		s := Sheet{Name: name}
		raw, err := f.Rows(name)
		if err != nil {
			// A chart has no rows.
			continue
		}
		shown, err := f.Rows(name)
		if err != nil {
			continue
		}
		for raw.Next() && shown.Next() {
			a, err := raw.Columns(excelize.Options{RawCellValue: true})
			if err != nil {
				return nil, damaged(err)
			}
			b, err := shown.Columns()
			if err != nil {
				return nil, damaged(err)
			}
			for i := range a {
				if i < len(b) && isDate(b[i]) {
					a[i] = b[i]
				}
			}
			cells += len(a)
			if len(a) > maxColumns || cells > maxCells || len(s.Rows) >= maxRows {
				return nil, tooLarge(name)
			}
			s.Rows = append(s.Rows, a)
		}
		raw.Close()
		shown.Close()
		sheets = append(sheets, s)
	}
	return sheets, nil
}

func tooLarge(sheet string) error {
	return &place.Error{Sheet: sheet, What: fmt.Sprintf("more than %d rows, %d columns or %d cells", maxRows, maxColumns, maxCells), Hint: "is this a table of results?"}
}

// isDate reports whether a displayed number is a date or a time of day.
func isDate(s string) bool {
	digits, marks := 0, 0
	for _, r := range s {
		switch {
		case r >= '0' && r <= '9':
			digits++
		case r == '/' || r == ':':
			marks++
		}
	}
	return digits >= 3 && (marks > 0 || strings.Count(s, "-") == 2 && !strings.HasPrefix(s, "-"))
}

// Cell is the name of a cell: B7 for row 7, column 2, both from 1.
func Cell(row, column int) string {
	name, err := excelize.CoordinatesToCellName(column, row)
	if err != nil {
		return fmt.Sprintf("row %d, column %d", row, column)
	}
	return name
}
