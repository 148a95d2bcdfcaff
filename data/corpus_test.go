package data

import (
	"bytes"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"testing/fstest"
	"unicode/utf16"

	"golang.org/x/text/encoding/charmap"
	"pgregory.net/rapid"

	"phaselag/data/place"
)

// corpusTruth is the sweep that most files of the corpus hold, from its README: f in
// Hz, T in °C, moduli in Pa.
func corpusTruth(f, T float64) (storage, loss float64) {
	g := 2e6 * math.Pow(f, 0.1) * math.Exp(-0.01*(T-23))
	return g, g * (0.1 + 0.002*(23-T) + 0.01*math.Log10(f))
}

// TestCorpus reads every file of the corpus, invented for this test, and holds it
// against the formula it was written from, or against the refusal it deserves.
func TestCorpus(t *testing.T) {
	const dir = "testdata/corpus"
	sweep := func(file string, digits float64, extra ...string) corpusCase {
		return corpusCase{file: file, kind: FrequencySweep, points: []int{4, 4, 4}, tolerance: digits, truth: true, extra: extra}
	}
	cases := []corpusCase{
		sweep("comma.csv", 1e-5), sweep("tabs.tsv", 1e-5), sweep("semicolon-decimal-comma.csv", 1e-5), sweep("blanks.txt", 1e-5),
		sweep("utf16le-bom.txt", 1e-5), sweep("utf16le.txt", 1e-5), sweep("utf16be-bom.txt", 1e-5), sweep("windows-1252.csv", 1e-5), sweep("utf8-bom.csv", 1e-5),
		sweep("crlf.csv", 1e-5), sweep("cr-only.txt", 1e-5), sweep("preamble.csv", 1e-5),
		sweep("units-row.csv", 1e-5), sweep("units-bracket-row.csv", 1e-5), sweep("units-underscore.csv", 1e-5), sweep("units-parentheses.csv", 1e-5), sweep("broken-glyphs.csv", 1e-5),
		sweep("steps-column.csv", 1e-5), sweep("blank-lines.csv", 1e-5), sweep("repeated-headings.csv", 1e-5), sweep("step-titles.txt", 1e-5),
		sweep("wide-merged.csv", 1e-5, "a wide table: 3 blocks"), sweep("wide-plain-numbers.csv", 1e-5, "a wide table"), sweep("wide-inside.csv", 1e-5, "a wide table"), sweep("wide-own-frequency.csv", 1e-5, "a wide table"),
		sweep("wide-merged.xlsx", 1e-14, "a wide table"), sweep("table.xlsx", 1e-14), sweep("dates.xlsx", 1e-14), sweep("table.ods", 1e-14),
		sweep("sheet-per-temperature.xlsx", 1e-14, `passed over: "notes"`),
		sweep("omega.csv", 1e-8), sweep("angular-words.txt", 1e-8), sweep("magnitude-tan.csv", 1e-8), sweep("magnitude-phase.csv", 1e-8),
		sweep("scientific.csv", 1e-6), sweep("minus-sign.csv", 1e-5), sweep("psi-fahrenheit.csv", 1e-8), sweep("young-tension.csv", 1e-8, "Poisson ratio 0.5"),
		sweep("quoted.csv", 1e-5), sweep("french.csv", 1e-5), sweep("viscosity-column.csv", 1e-8), sweep("short-rows.csv", 1e-5),
		{file: "temperature-jump.csv", kind: FrequencySweep, points: []int{4, 4, 4}},
		{file: "set-temperature.csv", kind: FrequencySweep, points: []int{4, 4, 4}},
		{file: "transient-rows.csv", kind: FrequencySweep, points: []int{4, 4, 4}, tolerance: 1e-5, truth: true, finding: "rows-not-usable"},
		{file: "not-measured.csv", kind: FrequencySweep, points: []int{3, 4, 4}, tolerance: 1e-5, truth: true, finding: "rows-not-usable"},
		{file: "interleaved-repeats.csv", kind: FrequencySweep, points: []int{4, 4, 4, 4, 4, 4}},
		{file: "strain-sweep.csv", kind: StrainSweep, points: []int{10}, first: [3]float64{0.001, 1.5e6 + 1e6/1.1, 0.2e6 + 0.03e6/1.21}},
		{file: "strain-sweep-peak.csv", kind: StrainSweep, points: []int{10}, first: [3]float64{0.001, 1.5e6 + 1e6/1.1, 0.2e6 + 0.03e6/1.21}},
		{file: "temperature-sweep.csv", kind: TemperatureSweep, points: []int{21}, truth: true, tolerance: 1e-5},
		{file: "relaxation.txt", kind: Relaxation, points: []int{10}},
		{file: "signals.csv", refusal: "no column for"},
		{file: "refused-thousands.csv", refusal: `refused-thousands.csv:2:6: "1.234,5" is not a number`, hint: "without thousands separators"},
		{file: "refused-ambiguous-comma.csv", refusal: "may be a decimal comma or a thousands separator", hint: `decimal: ","`},
		{file: "refused-two-tables.csv", refusal: "refused-two-tables.csv:15:1: a second table", hint: "one table a file"},
		{file: "refused-no-headings.csv", refusal: "no row of headings was understood", hint: "header_row: none"},
		{file: "refused-no-units.csv", refusal: `refused-no-units.csv:1:1: the frequency in column "f" has no unit`, hint: "unit: Hz"},
		{file: "refused-omega-hz.csv", refusal: "is an angular frequency in Hz", hint: "rad/s"},
		{file: "refused-word.csv", refusal: `refused-word.csv:6:6: "two" is not a number`, hint: "leave the cell empty"},
		{file: "refused-beyond.csv", refusal: "stands beyond the last of the 4 headings", hint: "decimal commas"},
		{file: "refused-old.xls", refusal: "old binary workbook", hint: "save it as .xlsx"},
		{file: "refused-binary.dat", refusal: "not a text table"},
		{file: "refused-empty.csv", refusal: "the file is empty"},
	}
	covered := map[string]bool{"README.txt": true}
	for _, v := range cases {
		covered[v.file] = true
		t.Run(v.file, func(t *testing.T) {
			c, err := Open(filepath.Join(dir, v.file))
			v.check(t, c, err)
		})
	}
	files, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range files {
		if !covered[f.Name()] {
			t.Errorf("nothing is expected of %s", f.Name())
		}
	}
	if len(files) < 41 {
		t.Errorf("%d files", len(files))
	}
	// The signals, with the specimen that they need: K* = 400 N/mm, δ = 0.1, double shear.
	text, err := os.ReadFile(filepath.Join(dir, "signals.csv"))
	if err != nil {
		t.Fatal(err)
	}
	c := mustOpen(t, doublePiece+"tests: [{kind: waveform, file: s.csv}]\n", "s.csv", string(text))
	p := c.Tests[0].Runs[0].Points
	if want := 4e5 * 0.005 / (2 * math.Pi * 0.0125 * 0.0125); len(p) != 2 || math.Abs(math.Hypot(p[0].Storage, p[0].Loss)/want-1) > 1e-5 || math.Abs(math.Atan2(p[1].Loss, p[1].Storage)-0.1) > 1e-5 {
		t.Errorf("signals: %+v, |G*| should be %g", p, want)
	}
}

// corpusCase is what is expected of one file.
type corpusCase struct {
	file      string
	kind      Kind
	points    []int // used, of each run
	tolerance float64
	truth     bool       // the points are those of corpusTruth
	first     [3]float64 // strain, G', G'' of the first point, where not zero
	extra     []string   // parts of assumptions
	finding   string
	refusal   string
	hint      string
}

func (v corpusCase) check(t *testing.T, c *Campaign, err error) {
	if v.refusal != "" {
		if err == nil || !strings.Contains(err.Error(), v.refusal) || !strings.Contains(place.Hint(err), v.hint) {
			t.Fatalf("%v (hint %q), should say %q (%q)", err, place.Hint(err), v.refusal, v.hint)
		}
		return
	}
	if err != nil {
		t.Fatalf("%v\nhint: %s", err, place.Hint(err))
	}
	test := c.Tests[0]
	var got []int
	for _, r := range test.Runs {
		n := 0
		for _, p := range r.Points {
			if !p.Used {
				continue
			}
			n++
			if !v.truth {
				continue
			}
			a, b := corpusTruth(p.Frequency, p.Temperature-273.15)
			if !(math.Abs(p.Storage/a-1) < v.tolerance*1.5) || !(math.Abs(p.Loss/b-1) < v.tolerance*1.5) {
				t.Errorf("row %d: %g + %gi at %g Hz, %g K, should be %g + %gi", p.Row, p.Storage, p.Loss, p.Frequency, p.Temperature, a, b)
			}
		}
		got = append(got, n)
	}
	if test.Kind != v.kind || fmt.Sprint(got) != fmt.Sprint(v.points) {
		t.Errorf("%s with %v points used, should be %s with %v", test.Kind, got, v.kind, v.points)
	}
	if v.first[1] != 0 {
		p := test.Runs[0].Points[0]
		if math.Abs(p.Strain/v.first[0]-1) > 1e-5 || math.Abs(p.Storage/v.first[1]-1) > 1e-5 || math.Abs(p.Loss/v.first[2]-1) > 1e-5 {
			t.Errorf("first point %+v, should be %v", p, v.first)
		}
	}
	for _, e := range v.extra {
		if !strings.Contains(strings.Join(c.Assumptions, "\n"), e) {
			t.Errorf("no assumption says %q: %q", e, c.Assumptions)
		}
	}
	codes := ""
	for _, f := range c.Findings {
		codes += f.Code + " "
	}
	if v.finding != "" && !strings.Contains(codes, v.finding) || v.finding == "" && codes != "" {
		t.Errorf("findings %s, should be %s", codes, v.finding)
	}
}

// dialect is one way of writing a table.
type dialect struct {
	separator, decimal, encoding, ending string
	mark                                 bool // byte order mark
	preamble                             int
	units                                int // 0 slash, 1 brackets, 2 a row of their own
	parts                                int // 0 none, 1 blank lines, 2 repeated headings, 3 a column, 4 wide
	quoted                               bool
}

func (d dialect) number(x float64) string {
	s := fmt.Sprintf("%.9g", x)
	s = strings.Replace(s, ".", d.decimal, 1)
	if d.quoted {
		return `"` + s + `"`
	}
	return s
}

// write writes isotherms of G' and G” in the dialect.
func (d dialect) write(f, T []float64, g [][][2]float64) []byte {
	names, units := []string{"f", "T", "G'", "G''"}, []string{"Hz", "°C", "MPa", "MPa"}
	heads := func(names, units []string) string {
		var a []string
		for i, n := range names {
			switch d.units {
			case 0:
				n += " / " + units[i]
			case 1:
				n += " [" + units[i] + "]"
			}
			if d.separator == " " {
				n = strings.ReplaceAll(n, " ", "")
			}
			a = append(a, n)
		}
		text := strings.Join(a, d.separator) + "\n"
		if d.units == 2 {
			text += strings.Join(units, d.separator) + "\n"
		}
		return text
	}
	var b strings.Builder
	for i := range d.preamble {
		fmt.Fprintf(&b, "remark %d%sinvented\n", i, d.separator)
	}
	if d.parts == 4 {
		key, n, u := "", []string{"f"}, []string{"Hz"}
		for _, t := range T {
			key += d.separator + strings.Replace(fmt.Sprintf("%.9g °C", t), ".", d.decimal, 1) + d.separator
			n, u = append(n, "G'", "G''"), append(u, "MPa", "MPa")
		}
		b.WriteString(key + "\n" + heads(n, u))
		for i := range f {
			cells := []string{d.number(f[i])}
			for j := range T {
				cells = append(cells, d.number(g[j][i][0]), d.number(g[j][i][1]))
			}
			b.WriteString(strings.Join(cells, d.separator) + "\n")
		}
		return d.bytes(b.String())
	}
	if d.parts == 3 {
		names, units = append([]string{"step"}, names...), append([]string{""}, units...)
		if d.units != 2 {
			head := heads(names[1:], units[1:])
			b.WriteString("step" + d.separator + head)
		} else {
			units[0] = "-"
			b.WriteString(heads(names, units))
		}
	} else {
		b.WriteString(heads(names, units))
	}
	for j, t := range T {
		if j > 0 && d.parts == 1 {
			b.WriteString("\n")
		}
		if j > 0 && d.parts == 2 {
			b.WriteString(heads(names, units))
		}
		for i := range f {
			cells := []string{d.number(f[i]), d.number(t), d.number(g[j][i][0]), d.number(g[j][i][1])}
			if d.parts == 3 {
				cells = append([]string{fmt.Sprint(j + 1)}, cells...)
			}
			b.WriteString(strings.Join(cells, d.separator) + "\n")
		}
	}
	return d.bytes(b.String())
}

func (d dialect) bytes(s string) []byte {
	s = strings.ReplaceAll(s, "\n", d.ending)
	switch d.encoding {
	case "UTF-16LE", "UTF-16BE":
		var out bytes.Buffer
		u := utf16.Encode([]rune(s))
		if d.mark {
			u = append([]uint16{0xfeff}, u...)
		}
		for _, c := range u {
			if d.encoding == "UTF-16LE" {
				out.Write([]byte{byte(c), byte(c >> 8)})
			} else {
				out.Write([]byte{byte(c >> 8), byte(c)})
			}
		}
		return out.Bytes()
	case "Windows-1252":
		b, err := charmap.Windows1252.NewEncoder().Bytes([]byte(s))
		if err != nil {
			panic(err)
		}
		return b
	}
	if d.mark {
		s = "\ufeff" + s
	}
	return []byte(s)
}

// TestDialects: any table written in any supported dialect reads back the same.
func TestDialects(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := dialect{
			separator: rapid.SampledFrom([]string{",", ";", "\t", " "}).Draw(t, "separator"),
			decimal:   rapid.SampledFrom([]string{".", ","}).Draw(t, "decimal"),
			encoding:  rapid.SampledFrom([]string{"UTF-8", "UTF-16LE", "UTF-16BE", "Windows-1252"}).Draw(t, "encoding"),
			ending:    rapid.SampledFrom([]string{"\n", "\r\n", "\r"}).Draw(t, "ending"),
			mark:      rapid.Bool().Draw(t, "mark"),
			preamble:  rapid.IntRange(0, 60).Draw(t, "preamble"),
			units:     rapid.IntRange(0, 2).Draw(t, "units"),
			parts:     rapid.IntRange(0, 4).Draw(t, "parts"),
			quoted:    rapid.Bool().Draw(t, "quoted"),
		}
		if d.separator == "," && d.decimal == "," {
			d.decimal = "." // not a dialect: see refused-beyond.csv
		}
		if d.separator == " " {
			d.quoted = false
			if d.parts == 4 {
				d.parts = 0 // empty cells cannot be told among blanks
			}
		}
		nf, nT := rapid.IntRange(3, 8).Draw(t, "frequencies"), rapid.IntRange(2, 5).Draw(t, "temperatures")
		var f, T []float64
		for i := range nf {
			f = append(f, round9(0.37*math.Pow(2.3, float64(i))))
		}
		var g [][][2]float64
		for j := range nT {
			T = append(T, round9(rapid.Float64Range(-2, 2).Draw(t, "ΔT")-40+float64(20*j)))
			var row [][2]float64
			for range f {
				row = append(row, [2]float64{round9(rapid.Float64Range(0.1, 900).Draw(t, "G'")), round9(rapid.Float64Range(0.011, 90).Draw(t, "G''"))})
			}
			g = append(g, row)
		}
		content := d.write(f, T, g)
		c, err := OpenFS(fstest.MapFS{"a.csv": {Data: content}}, "a.csv")
		if err != nil && strings.Contains(err.Error(), "thousands separator") {
			t.Skip("ambiguous commas are refused")
		}
		if err != nil {
			t.Fatalf("%+v: %v\n%s", d, err, content)
		}
		runs := c.Tests[0].Runs
		if len(runs) != nT {
			t.Fatalf("%+v: %d runs of %d\n%s", d, len(runs), nT, content)
		}
		for j, r := range runs {
			if len(r.Points) != nf {
				t.Fatalf("%+v: run %d has %d points\n%s", d, j, len(r.Points), content)
			}
			for i, p := range r.Points {
				if p.Frequency != f[i] || p.Temperature != T[j]+273.15 || p.Storage != g[j][i][0]*1e6 || p.Loss != g[j][i][1]*1e6 {
					t.Fatalf("%+v: %+v, should be %v Hz, %v °C, %v MPa\n%s", d, p, f[i], T[j], g[j][i], content)
				}
			}
		}
	})
}

// round9 keeps the nine digits that the dialects write.
func round9(x float64) float64 {
	var y float64
	fmt.Sscanf(fmt.Sprintf("%.9g", x), "%g", &y)
	return y
}
