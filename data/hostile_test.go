package data

import (
	"archive/zip"
	"bytes"
	"compress/flate"
	"io"
	"io/fs"
	"runtime"
	"strings"
	"testing"
	"testing/fstest"
	"time"
)

// endless is a file of a size that nobody wants in memory; it repeats a line.
type endless struct {
	name string
	line string
	size int64
	at   int64
}

func (e *endless) Open(name string) (fs.File, error) {
	if name != e.name {
		return nil, fs.ErrNotExist
	}
	return &endless{e.name, e.line, e.size, 0}, nil
}
func (e *endless) Stat() (fs.FileInfo, error) { return e, nil }
func (e *endless) Close() error               { return nil }
func (e *endless) Name() string               { return e.name }
func (e *endless) Size() int64                { return e.size }
func (e *endless) Mode() fs.FileMode          { return 0o444 }
func (e *endless) ModTime() time.Time         { return time.Time{} }
func (e *endless) IsDir() bool                { return false }
func (e *endless) Sys() any                   { return nil }
func (e *endless) Read(b []byte) (int, error) {
	if e.at >= e.size {
		return 0, io.EOF
	}
	n := 0
	for n < len(b) && e.at < e.size {
		k := int(e.at % int64(len(e.line)))
		m := copy(b[n:], e.line[k:])
		n += m
		e.at += int64(m)
	}
	return n, nil
}

// inUse runs f and returns how much more memory was in use at once, watched from
// outside.
func inUse(f func()) uint64 {
	var m runtime.MemStats
	runtime.GC()
	runtime.ReadMemStats(&m)
	before, most := m.HeapAlloc, m.HeapAlloc
	done := make(chan struct{})
	go func() { defer close(done); f() }()
	for {
		select {
		case <-done:
			return most - before
		case <-time.After(20 * time.Millisecond):
			runtime.ReadMemStats(&m)
			most = max(most, m.HeapAlloc)
		}
	}
}

// bomb is a workbook whose part of the given name unpacks to size bytes of padding.
func bomb(t *testing.T, part string, size int64, before string, others map[string]string) []byte {
	t.Helper()
	var b bytes.Buffer
	z := zip.NewWriter(&b)
	z.RegisterCompressor(zip.Deflate, func(w io.Writer) (io.WriteCloser, error) { return flate.NewWriter(w, flate.BestSpeed) })
	for _, name := range []string{"mimetype", "[Content_Types].xml", "_rels/.rels", "xl/workbook.xml", "xl/_rels/workbook.xml.rels"} {
		if text, ok := others[name]; ok {
			w, err := z.Create(name)
			if err != nil {
				t.Fatal(err)
			}
			if _, err := io.WriteString(w, text); err != nil {
				t.Fatal(err)
			}
		}
	}
	w, err := z.Create(part)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := io.WriteString(w, before); err != nil {
		t.Fatal(err)
	}
	padding := strings.Repeat(" ", 1<<20)
	for n := int64(0); n < size; n += int64(len(padding)) {
		if _, err := io.WriteString(w, padding); err != nil {
			t.Fatal(err)
		}
	}
	if err := z.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// Hostile files end with a clear error, soon, and in bounded memory.
func TestHostileFiles(t *testing.T) {
	if testing.Short() {
		t.Skip("unpacks gigabytes")
	}
	const mb = 1 << 20
	xlsx := map[string]string{
		"[Content_Types].xml":        `<?xml version="1.0"?><Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types"><Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/><Default Extension="xml" ContentType="application/xml"/><Override PartName="/xl/workbook.xml" ContentType="application/vnd.openxmlformats-officedocument.spreadsheetml.sheet.main+xml"/><Override PartName="/xl/worksheets/sheet1.xml" ContentType="application/vnd.openxmlformats-officedocument.spreadsheetml.worksheet+xml"/></Types>`,
		"_rels/.rels":                `<?xml version="1.0"?><Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="r1" Type="http://schemas.openxmlformats.org/officeDocument/2006/relationships/officeDocument" Target="xl/workbook.xml"/></Relationships>`,
		"xl/workbook.xml":            `<?xml version="1.0"?><workbook xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main" xmlns:r="http://schemas.openxmlformats.org/officeDocument/2006/relationships"><sheets><sheet name="a" sheetId="1" r:id="r1"/></sheets></workbook>`,
		"xl/_rels/workbook.xml.rels": `<?xml version="1.0"?><Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="r1" Type="http://schemas.openxmlformats.org/officeDocument/2006/relationships/worksheet" Target="worksheets/sheet1.xml"/></Relationships>`,
	}
	ods := map[string]string{"mimetype": "application/vnd.oasis.opendocument.spreadsheet"}
	line := "1.000;23.00;2.1234;0.21234\n"
	head := "f / Hz;T / °C;G' / MPa;G'' / MPa\n"
	for _, v := range []struct {
		name string
		fsys fs.FS
		file string
		want string
		most uint64
	}{
		{"a workbook of 1 GB", fstest.MapFS{"a.xlsx": {Data: bomb(t, "xl/worksheets/sheet1.xml", 1024*mb, `<worksheet xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"><sheetData>`, xlsx)}}, "a.xlsx", "a.xlsx", 256 * mb},
		{"an open document of 1 GB", fstest.MapFS{"a.ods": {Data: bomb(t, "content.xml", 1024*mb, "<a>", ods)}}, "a.ods", "a.ods", 256 * mb},
		{"a row of a million cells", fstest.MapFS{"a.csv": {Data: []byte(strings.Repeat("f / Hz;", 1_000_000) + "\n1;2\n")}}, "a.csv", "more than 2000 cells", 128 * mb},
		{"a million commas in a row of results", fstest.MapFS{"a.csv": {Data: []byte(head + line + strings.Repeat(";", 1_000_000))}}, "a.csv", "more than 2000 cells", 128 * mb},
		{"a table of 500 MB", &endless{name: "a.csv", line: line, size: 500 * mb}, "a.csv", "larger than 64 MB", 400 * mb},
		{"one line of 500 MB", &endless{name: "a.csv", line: "x", size: 500 * mb}, "a.csv", "larger than 64 MB", 400 * mb},
	} {
		start := time.Now()
		var err error
		used := inUse(func() { _, err = OpenFS(v.fsys, v.file) })
		if err == nil || !strings.Contains(err.Error(), v.want) {
			t.Errorf("%s: %.200v, should say %q", v.name, err, v.want)
		}
		if used > v.most {
			t.Errorf("%s: %d MB in use", v.name, used>>20)
		}
		t.Logf("%s: %.1f s, %d MB: %.120v", v.name, time.Since(start).Seconds(), used>>20, err)
	}
	// Signals of any length are read; a line without end is not.
	c := doublePiece + "tests: [{kind: waveform, file: a.csv}]\n"
	both := func(e *endless) fs.FS { return two{fstest.MapFS{"c.yaml": {Data: []byte(c)}}, e} }
	used := inUse(func() {
		_, err := OpenFS(both(&endless{name: "a.csv", line: strings.Repeat("x", 999) + " ", size: 500 * mb}), "c.yaml")
		if err == nil || !strings.Contains(err.Error(), "no line ends") {
			t.Errorf("signals without line ends: %.200v", err)
		}
	})
	if used > 64*mb {
		t.Errorf("signals without line ends: %d MB in use", used>>20)
	}
}

// two looks for files in one place, then in another.
type two struct{ a, b fs.FS }

func (f two) Open(name string) (fs.File, error) {
	if file, err := f.a.Open(name); err == nil {
		return file, nil
	}
	return f.b.Open(name)
}
