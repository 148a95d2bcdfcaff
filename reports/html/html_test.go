package html_test

import (
	"bytes"
	"flag"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"phaselag/reports/figure"
	"phaselag/reports/figure/figuretest"
	"phaselag/reports/html"
)

var (
	samples = flag.String("samples", "", "write the sample page to this folder, to be looked at")
	update  = flag.Bool("update", false, "rewrite the golden file; look at the difference")
)

func render(t *testing.T, d figure.Document) string {
	t.Helper()
	var b bytes.Buffer
	if err := html.Write(&b, d); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

func TestSample(t *testing.T) {
	dir := *samples
	if dir == "" {
		dir = t.TempDir()
	}
	s := render(t, figuretest.Document())
	if err := os.WriteFile(filepath.Join(dir, "sample.html"), []byte(s), 0o644); err != nil {
		t.Fatal(err)
	}
	if s != render(t, figuretest.Document()) {
		t.Error("two runs give different bytes")
	}
	for _, want := range []string{`<html lang="en">`, "<h2 id=\"s1\">Master curve</h2>", "<h3 id=\"s2-1\">Files</h3>", "Figure 1.", "Table 2.",
		"severe: phase-common-part-not-stated", "T<sub>ref</sub>", `role="img"`, `<link rel="icon" href="data:,">`, "@media print"} {
		if !strings.Contains(s, want) {
			t.Errorf("no %s", want)
		}
	}
}

// The page fetches nothing: no address stands in it but the name space of SVG.
func TestNeedsNothingElse(t *testing.T) {
	s := render(t, figuretest.Document())
	s = strings.ReplaceAll(s, "http://www.w3.org/2000/svg", "")
	for _, bad := range []string{"http://", "https://", "<script", "@import", "url(", "<img", " src="} {
		if strings.Contains(s, bad) {
			t.Errorf("the page holds %q", bad)
		}
	}
	ids := map[string]bool{}
	for _, m := range regexp.MustCompile(` id="([^"]*)"`).FindAllStringSubmatch(s, -1) {
		if ids[m[1]] {
			t.Errorf("identifier %q twice", m[1])
		}
		ids[m[1]] = true
	}
}

func TestGolden(t *testing.T) {
	got := render(t, figure.Document{
		Title: "a & b", Subtitle: "G_{e}", Author: "\"nobody\"", Lead: []figure.Block{figure.Paragraph{Lead: "First.", Text: "10^{−3} < f\nnext line"}},
		Sections: []figure.Section{{Heading: "One <b>", Blocks: []figure.Block{
			figure.List{Items: []string{"x"}}, figure.List{Numbered: true, Items: []string{"y"}},
			figure.Facts{Items: []figure.Fact{{Name: "n", Value: "v"}}},
			figure.Callout{Grade: figure.Severe, Title: "t", Text: "text", Facts: []figure.Fact{{Name: "n", Value: "v"}}},
			figure.Grid{Caption: "c", Columns: []figure.GridColumn{{Heading: "name"}, {Heading: "G′", Unit: "MPa", Number: true}}, Rows: [][]string{{"a", "1.25"}, {"b", "12"}, {"c", "–"}, {}}},
			figure.Grid{Columns: []figure.GridColumn{{Heading: "none"}}},
		}, Sections: []figure.Section{{Heading: "Two", Blocks: []figure.Block{figure.Paragraph{Small: true, Text: "small"}}}}}},
	})
	got = regexp.MustCompile(`(?s)<style>.*</style>`).ReplaceAllString(got, "<style></style>")
	const file = "testdata/small.html"
	if *update {
		if err := os.WriteFile(file, []byte(got), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if got != string(want) {
		t.Errorf("%s differs; run the test with -update and look at the difference", file)
	}
}

// Nothing that a file says becomes markup.
func TestNothingSlipsThrough(t *testing.T) {
	evil := `</title></style><script>alert(1)</script>"'><svg onload=x> \x00` + "\x00\xff"
	grid := figure.Grid{Caption: evil, Columns: []figure.GridColumn{{Heading: evil, Unit: evil, Number: true}}, Rows: [][]string{{evil}, {"1" + evil}}}
	s := render(t, figure.Document{Title: evil, Subtitle: evil, Running: evil, Author: evil, Subject: evil,
		Sections: []figure.Section{{Heading: evil, Blocks: []figure.Block{figure.Paragraph{Lead: evil, Text: evil}, figure.List{Items: []string{evil, "_{" + evil + "}"}},
			figure.Facts{Items: []figure.Fact{{Name: evil, Value: evil}}}, grid, figure.Callout{Grade: figure.Grade(evil), Title: evil, Text: evil},
			figure.Picture{Caption: evil, Figure: figure.Figure{Alt: evil, Panels: []figure.Panel{{Title: evil, Notes: []string{evil}}}}}}}, {}}})
	for _, bad := range []string{"<script", "<svg onload", "\x00", "\xff"} {
		if strings.Contains(s, bad) {
			t.Errorf("the page holds %q", bad)
		}
	}
}

func TestEmpty(t *testing.T) {
	if s := render(t, figure.Document{}); !strings.Contains(s, "</html>") {
		t.Error("no page")
	}
}
