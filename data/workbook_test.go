package data

import (
	"archive/zip"
	"bytes"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"testing/fstest"
	"time"

	"github.com/xuri/excelize/v2"

	"phaselag/data/table"
	"phaselag/data/workbook"
)

// rowsOf is a table with numbers that no display shows in full.
var rowsOf = [][4]float64{
	{1.0 / 3, 20, 1.2345678901234567, 1.2345678901234567e-7}, {1, 20, 1.3, 0.11234567890123456}, {10, 20, 1.5, 0.2},
	{1.0 / 3, 40, 1.1, 0.05}, {1, 40, 1.15, 0.06}, {10, 40, 1.3, 0.1},
}

// xlsx is a workbook of a cover sheet, a sheet with a preamble, a row of units and
// dates, and the same without.
func xlsx(t *testing.T) []byte {
	t.Helper()
	f := excelize.NewFile()
	check := func(err error) {
		t.Helper()
		if err != nil {
			t.Fatal(err)
		}
	}
	check(f.SetCellValue("Sheet1", "A1", "report of the laboratory"))
	check(f.SetCellValue("Sheet1", "B3", 12))
	_, err := f.NewSheet("Data")
	check(err)
	check(f.SetCellValue("Data", "A1", "invented measurements"))
	for i, h := range []string{"f", "T", "G'", "G''", "date"} {
		cell, _ := excelize.CoordinatesToCellName(i+1, 3)
		check(f.SetCellValue("Data", cell, h))
		cell, _ = excelize.CoordinatesToCellName(i+1, 4)
		check(f.SetCellValue("Data", cell, []string{"Hz", "°C", "MPa", "MPa", ""}[i]))
	}
	style, err := f.NewStyle(&excelize.Style{NumFmt: 2}) // two digits shown
	check(err)
	for r, row := range rowsOf {
		for i, v := range row {
			cell, _ := excelize.CoordinatesToCellName(i+1, 5+r)
			// SetCellValue would write 15 digits; spreadsheets write 17.
			check(f.SetCellDefault("Data", cell, fmt.Sprintf("%.17g", v)))
			check(f.SetCellStyle("Data", cell, cell, style))
		}
		check(f.SetCellValue("Data", fmt.Sprintf("E%d", 5+r), time.Date(2026, 11, 12, 9, r, 0, 0, time.UTC)))
	}
	b, err := f.WriteToBuffer()
	check(err)
	return b.Bytes()
}

// ods is the same table as an OpenDocument spreadsheet, with repeated cells and the
// thousands of empty ones that end rows.
func ods(t *testing.T) []byte {
	t.Helper()
	var c strings.Builder
	c.WriteString(`<?xml version="1.0" encoding="UTF-8"?><office:document-content xmlns:office="urn:oasis:names:tc:opendocument:xmlns:office:1.0" xmlns:table="urn:oasis:names:tc:opendocument:xmlns:table:1.0" xmlns:text="urn:oasis:names:tc:opendocument:xmlns:text:1.0"><office:body><office:spreadsheet><table:table table:name="Data">`)
	row := func(cells string) {
		c.WriteString(`<table:table-row>` + cells + `<table:table-cell table:number-columns-repeated="16379"/></table:table-row>`)
	}
	text := func(s string) string {
		return `<table:table-cell office:value-type="string"><text:p>` + s + `</text:p></table:table-cell>`
	}
	row(text("f / Hz") + text("T / °C") + text("G&apos; / MPa") + text("G&apos;&apos; / MPa"))
	for _, r := range rowsOf {
		cells := ""
		for _, v := range r {
			cells += fmt.Sprintf(`<table:table-cell office:value-type="float" office:value="%.17g"><text:p>%.2f</text:p></table:table-cell>`, v, v)
		}
		row(cells)
	}
	c.WriteString(`<table:table-row table:number-rows-repeated="1048000"><table:table-cell table:number-columns-repeated="16384"/></table:table-row>`)
	c.WriteString(`</table:table></office:spreadsheet></office:body></office:document-content>`)
	var b bytes.Buffer
	z := zip.NewWriter(&b)
	for name, content := range map[string]string{"content.xml": c.String()} {
		w, err := z.Create(name)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := w.Write([]byte(content)); err != nil {
			t.Fatal(err)
		}
	}
	if err := z.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// TestWorkbooks: both kinds of workbook give every digit of the numbers, whatever is
// displayed, and the sheets that are no tables are passed over.
func TestWorkbooks(t *testing.T) {
	for name, content := range map[string][]byte{"a.xlsx": xlsx(t), "a.ods": ods(t)} {
		c, err := OpenFS(fstest.MapFS{name: {Data: content}}, name)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		var got [][4]float64
		for _, r := range c.Tests[0].Runs {
			for _, p := range r.Points {
				got = append(got, [4]float64{p.Frequency, p.Temperature - 273.15, p.Storage / 1e6, p.Loss / 1e6})
			}
		}
		if len(got) != len(rowsOf) {
			t.Errorf("%s: %d points", name, len(got))
			continue
		}
		for i, r := range rowsOf {
			for k := range r {
				if d := got[i][k] - r[k]; d > 1e-15*(1+math.Abs(r[k])) && k != 1 || d < -1e-12 || d > 1e-12 || k == 3 && math.Abs(d) > 1e-15*r[k] {
					t.Errorf("%s: %.17g, should be %.17g", name, got[i][k], r[k])
				}
			}
		}
		if p := c.Tests[0].Runs[0].Points[0]; !strings.HasSuffix(p.File, "[Data]") {
			t.Errorf("%s: the point stands in %q", name, p.File)
		}
	}
}

// TestWorkbookSheets: a sheet can be named; a wrong name, an old workbook, a damaged one
// and a wrong cell are told with their place.
func TestWorkbookSheets(t *testing.T) {
	campaign := func(sheet string) []byte {
		return []byte("campaign: x\ntests:\n  - {name: a, kind: frequency sweep, file: a.xlsx, deformation: shear, reading: {sheet: " + sheet + "}}\n")
	}
	book := xlsx(t)
	if _, err := OpenFS(fstest.MapFS{"c.yaml": {Data: campaign("Data")}, "a.xlsx": {Data: book}}, "c.yaml"); err != nil {
		t.Error(err)
	}
	f, err := excelize.OpenReader(bytes.NewReader(book))
	if err != nil {
		t.Fatal(err)
	}
	if err := f.SetCellValue("Data", "C7", "slipped"); err != nil {
		t.Fatal(err)
	}
	wrong, err := f.WriteToBuffer()
	if err != nil {
		t.Fatal(err)
	}
	for _, v := range []struct {
		name, sheet string
		content     []byte
		want        string
	}{
		{"sheet", "Dta", book, `no sheet has the name "Dta"`},
		{"cover", "Sheet1", book, "[Sheet1"},
		{"old", "Data", []byte("\xD0\xCF\x11\xE0\xA1\xB1\x1A\xE1 rest"), "old binary workbook"},
		{"damaged", "Data", book[:len(book)/2], "damaged"},
		{"cell", "Data", wrong.Bytes(), "a.xlsx[Data!C7]"},
	} {
		_, err := OpenFS(fstest.MapFS{"c.yaml": {Data: campaign(v.sheet)}, "a.xlsx": {Data: v.content}}, "c.yaml")
		if err == nil || !strings.Contains(err.Error(), v.want) {
			t.Errorf("%s: %v, should say %q", v.name, err, v.want)
		}
	}
	if _, err := OpenFS(fstest.MapFS{"a.zip": {Data: []byte("PK\x03\x04 nothing")}}, "a.zip"); err == nil {
		t.Error("no error for a damaged archive")
	}
}

// TestInspectWorkbook: the entry proposed for a sheet reads it.
func TestInspectWorkbook(t *testing.T) {
	dir := t.TempDir()
	file := filepath.Join(dir, "a.xlsx")
	if err := os.WriteFile(file, xlsx(t), 0o666); err != nil {
		t.Fatal(err)
	}
	all, err := Inspect(file)
	if err != nil || len(all) != 1 || len(all[0].Runs) != 2 || !strings.Contains(all[0].Snippet, `sheet: "Data"`) {
		t.Fatalf("%+v, %v", all, err)
	}
	if err := os.WriteFile(filepath.Join(dir, "c.yaml"), []byte("campaign: x\n"+all[0].Snippet), 0o666); err != nil {
		t.Fatal(err)
	}
	if _, err := Open(filepath.Join(dir, "c.yaml")); err != nil {
		t.Errorf("%v\n%s", err, all[0].Snippet)
	}
}

// FuzzWorkbook: whatever the bytes, no panic.
func FuzzWorkbook(f *testing.F) {
	f.Add([]byte("PK\x03\x04"))
	f.Add([]byte("\xD0\xCF\x11\xE0\xA1\xB1\x1A\xE1"))
	f.Fuzz(func(t *testing.T, content []byte) {
		_, _ = OpenFS(fstest.MapFS{"a.xlsx": {Data: content}}, "a.xlsx")
	})
}

// BenchmarkWorkbook reads a workbook of 30 000 rows of six columns; the rows are
// counted.
func BenchmarkWorkbook(b *testing.B) {
	var rows [][]any
	for i := range 30_000 {
		rows = append(rows, []any{math.Pow(10, float64(i%20)/10), 20 + float64(i/20%9), 0.2, 2 + 0.01*float64(i%20), 0.2, 0.1})
	}
	content, err := workbook.Write("Results", []string{"f / Hz", "T / °C", "strain / %", "G' / MPa", "G'' / MPa", "tan δ"}, rows)
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		tables, err := table.ReadAll("a.xlsx", content, table.Settings{})
		if err != nil || len(tables) != 1 || len(tables[0].Rows) != 30_000 {
			b.Fatal(err)
		}
	}
	b.ReportMetric(30_000*float64(b.N)/b.Elapsed().Seconds(), "rows/s")
}
