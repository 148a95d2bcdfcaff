package pdf_test

import (
	"bytes"
	"flag"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"phaselag/reports/figure"
	"phaselag/reports/figure/figuretest"
	"phaselag/reports/pdf"
)

var samples = flag.String("samples", "", "write the sample document to this folder, to be looked at")

func sample(t *testing.T, d figure.Document) string {
	t.Helper()
	dir := *samples
	if dir == "" {
		dir = t.TempDir()
	}
	var b bytes.Buffer
	if err := pdf.Write(&b, d); err != nil {
		t.Fatal(err)
	}
	file := filepath.Join(dir, t.Name()+".pdf")
	if err := os.WriteFile(file, b.Bytes(), 0o644); err != nil {
		t.Fatal(err)
	}
	return file
}

func run(t *testing.T, name string, args ...string) string {
	t.Helper()
	if _, err := exec.LookPath(name); err != nil {
		t.Skipf("%s is not installed", name)
	}
	out, err := exec.Command(name, args...).CombinedOutput()
	if err != nil {
		t.Fatalf("%s: %v\n%s", name, err, out)
	}
	return string(out)
}

func TestSound(t *testing.T) {
	if out := run(t, "qpdf", "--check", sample(t, figuretest.Document())); !strings.Contains(out, "No syntax or stream encoding errors") {
		t.Error(out)
	}
}

// Everything that was written can be found again.
func TestSearchable(t *testing.T) {
	text := run(t, "pdftotext", "-layout", sample(t, figuretest.Document()), "-")
	flat := strings.Join(strings.Fields(text), " ")
	for _, want := range []string{
		"HM-00 (invented compound): dynamic properties", "αβγδεζηθ κλμν πρσ τφχψω ΓΔΘΛΣΦΩ", "′ ″", "≤", "√3·ε", "Příliš žluťoučký kůň",
		"Table 1. Files that were read", "Figure 1. Storage modulus G′", "page 2 of ", "severe: phase-common-part-not-stated",
		"storage modulus G′ (MPa)", "extrapolated: frequency", "invented numbers for a test of the layout", "−10 °C", "3. Doubt.",
	} {
		if !strings.Contains(flat, want) {
			t.Errorf("not found: %q", want)
		}
	}
	if n := strings.Count(text, "tan δ"); n < 5 {
		t.Errorf("tan δ occurs %d times; the heading of the long table should be repeated", n)
	}
	long := strings.Join(strings.Fields(text), "")
	for _, part := range []string{"0123456789abcdef", "strain_sweep_at_", "23_degrees.csv"} {
		if !strings.Contains(long, part) {
			t.Errorf("cut off: %q", part)
		}
	}
}

func TestBookmarksAndProperties(t *testing.T) {
	b, err := pdf.Bytes(figuretest.Document())
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"/Outlines", "D:20261112000000"} {
		if !bytes.Contains(b, []byte(want)) {
			t.Errorf("no %s", want)
		}
	}
	again, _ := pdf.Bytes(figuretest.Document())
	if !bytes.Equal(b, again) {
		t.Error("two runs give different bytes")
	}
	if len(b) > 400_000 {
		t.Errorf("%d bytes: are the fonts embedded whole?", len(b))
	}
}

func TestHostileDocuments(t *testing.T) {
	long := strings.Repeat("x", 3000)
	for _, d := range []figure.Document{
		{}, {Title: long, Running: long, Subtitle: long},
		{Sections: []figure.Section{{Heading: long, Blocks: []figure.Block{
			figure.Paragraph{}, figure.Paragraph{Text: "\x00\xff\u200b\U0001F600 漢字 a\nb\n\nc _{" + long + "} ^{x"}, figure.List{}, figure.List{Items: []string{"", long}},
			figure.Facts{}, figure.Facts{Items: []figure.Fact{{Name: long, Value: long}, {}}}, figure.Grid{}, figure.Row{}, figure.Picture{},
			figure.Grid{Caption: long, Columns: []figure.GridColumn{{Heading: "a"}, {Number: true}, {}}, Rows: [][]string{nil, {long + " " + long, long}, {"", "−1.5e-3", ""}}},
			figure.Callout{}, figure.Callout{Grade: "unknown", Title: long, Text: strings.Repeat("word ", 5000), Facts: []figure.Fact{{Name: "n", Value: strings.Repeat("v ", 4000)}}},
			figure.Picture{Figure: figure.Figure{Width: 2000, Height: 3000}, Caption: long},
		}, Sections: []figure.Section{{}, {Heading: "empty", NewPage: true, Sections: []figure.Section{{Heading: "deep", Sections: []figure.Section{{Heading: "deeper"}}}}}}}}},
		{Sections: []figure.Section{{Blocks: []figure.Block{figure.Grid{Columns: make([]figure.GridColumn, 80), Rows: [][]string{make([]string, 80)}}}}}},
	} {
		b, err := pdf.Bytes(d)
		if err != nil {
			t.Error(err)
		}
		if !bytes.HasPrefix(b, []byte("%PDF-")) {
			t.Error("no PDF")
		}
	}
}
