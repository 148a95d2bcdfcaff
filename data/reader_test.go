package data

import (
	"fmt"
	"math"
	"strings"
	"testing"
	"testing/fstest"
	"time"

	"phaselag/data/place"
)

// memory makes files of pairs of names and contents.
func memory(pairs ...string) fstest.MapFS {
	fs := fstest.MapFS{}
	for i := 0; i+1 < len(pairs); i += 2 {
		fs[pairs[i]] = &fstest.MapFile{Data: []byte(pairs[i+1])}
	}
	return fs
}

const sweep = "f / Hz,T / °C,strain / %,G' / MPa,G'' / MPa\n1,23,0.2,1.0,0.10\n2,23,0.2,1.1,0.11\n4,23,0.2,1.2,0.12\n1,40,0.2,0.9,0.08\n2,40,0.2,0.95,0.085\n"

func mustOpen(t *testing.T, yaml string, pairs ...string) *Campaign {
	t.Helper()
	c, err := OpenFS(memory(append([]string{"c.yaml", yaml}, pairs...)...), "c.yaml")
	if err != nil {
		t.Fatalf("%v\nhint: %s", err, place.Hint(err))
	}
	return c
}

func near(t *testing.T, what string, got, want float64) {
	t.Helper()
	if math.IsNaN(got) != math.IsNaN(want) || math.Abs(got-want) > 1e-12*math.Abs(want) {
		t.Errorf("%s is %v, want %v", what, got, want)
	}
}

// TestEveryKey reads a campaign file with every key of the contract.
func TestEveryKey(t *testing.T) {
	c := mustOpen(t, `
campaign: HM-60 qualification
laboratory: lab
operator: me
vulcanised: 2026-11-01
compound: {name: HM-60, polymer: NR, batch: 2611-04, hardness: 60 IRHD, density: 1.12 g/cm3, poisson_ratio: 0.499, cellular: false}
specimens:
  pair: {shape: double shear, diameter: 25 mm, thickness: 5 mm, measured: true}
tests:
  - name: isotherms
    kind: frequency sweep
    file: a.csv
    rows: {lane: "1", rep: "?"}
    columns: {storage modulus: "G' / MPa", loss modulus: {heading: "G'' / MPa", unit: MPa}}
    reading: {separator: ";", decimal: ",", header_row: 2}
    temperature: 23 °C
    strain: 0.4 %
    amplitude: peak to peak
    strain_source: nominal
    control: displacement
    direction: ascending
    static_strain: 5 %
    static_force: 10 N
    dwell: 10 min
    rate: 2 K/min
    conditioning: {cycles: 6, strain: 20 %, rest: 1 h}
    deformation: shear
    specimen: pair
    mounting: 2
    tested: 2026-11-12
    apparatus: {name: A, moving_mass: 0.2 kg, frame_stiffness: 5 kN/mm, corrected: [inertia, compliance]}
    leave_out: [{where: {frequency: 4 Hz}, because: slipped}]
  - {name: static, kind: static, specimen: pair, deformation: shear, values: [{modulus: 0.6 MPa, u: 2 %, strain: 10 %, time: 1 min, temperature: 23 °C}]}
analysis: {reference_temperature: 73.4 °F, shift_law: wlf, vertical_shift: density, expansion: 6.6e-4 1/K, amplitude_law: kraus, filler_frequency_dependence: causal}
uncertainty: {temperature_scatter: 0.3 K, temperature_common: 0.2 K, geometry: 1.5 %, phase: 0.05 deg, force: 0.5 %, displacement: 0.4 %}
`, "a.csv", "invented\nlane;rep;f / Hz;G' / MPa;G'' / MPa\n1;1;1;1,0;0,10\n1;1;2;1,1;0,11\n1;1;4;1,2;0,12\n2;1;1;9,0;0,9\n")
	if c.Name != "HM-60 qualification" || c.Laboratory != "lab" || c.Operator != "me" || c.Vulcanised != "2026-11-01" || c.Compound.Hardness != "60 IRHD" || c.Compound.Batch != "2611-04" {
		t.Errorf("%+v", c)
	}
	near(t, "density", c.Compound.Density, 1120)
	near(t, "Poisson ratio", c.PoissonRatio, 0.499)
	near(t, "reference", c.Analysis.ReferenceTemperature, 296.15)
	if a := c.Analysis; a.ShiftLaw != "WLF" || a.VerticalShift != "density" || a.AmplitudeLaw != "kraus" || a.FillerFrequency != "causal" {
		t.Errorf("%+v", a)
	}
	near(t, "phase", c.Uncertainty.Phase, 0.05*math.Pi/180)
	near(t, "geometry", c.Uncertainty.Geometry, 0.015)
	sp := c.Specimens[0]
	near(t, "thickness", sp.Thickness, 0.005)
	if !sp.Measured || sp.Shape != "double shear" {
		t.Errorf("%+v", sp)
	}
	test := c.Tests[0]
	if test.Mounting != "2" || test.Specimen != "pair" || test.Conditioning.Cycles != 6 || test.Apparatus != "A" {
		t.Errorf("%+v", test)
	}
	near(t, "rate", test.Rate, 2.0/60)
	near(t, "dwell", test.Dwell, 600)
	if len(test.Runs) != 1 || len(test.Runs[0].Points) != 3 {
		t.Fatalf("runs %+v", test.Runs)
	}
	pts := test.Runs[0].Points
	near(t, "strain, peak to peak", pts[0].Strain, 0.002)
	near(t, "storage", pts[0].Storage, 1e6)
	near(t, "loss", pts[1].Loss, 0.11e6)
	if pts[2].Used || !strings.Contains(pts[2].Reason, "slipped") || pts[0].Row != 3 {
		t.Errorf("%+v", pts)
	}
	v := c.Tests[1].StaticValues[0]
	near(t, "static", v.Modulus, 0.6e6)
	near(t, "its uncertainty", v.U, 0.012e6)
	near(t, "its time", v.Time, 60)
}

// TestFaults: position, what, and a hint, for everything that a person can get
// wrong in a campaign file or a table.
func TestFaults(t *testing.T) {
	one := func(test string) string { return "tests:\n  - {kind: frequency sweep, file: a.csv, " + test + "}\n" }
	for _, c := range []struct{ name, yaml, table, want string }{
		{"empty", "", sweep, "c.yaml"},
		{"no tests", "campaign: x\n", sweep, "c.yaml:1:1: tests"},
		{"unknown key", "campain: x\ntests: []\n", sweep, "c.yaml:1:1: campain: unknown key"},
		{"unknown key in a test", one("kidn: x"), sweep, "c.yaml:2:42: tests[1].kidn: unknown key"},
		{"wrong unit", one("temperature: 23 Hz"), sweep, "c.yaml:2:55: tests[1].temperature"},
		{"below zero", one("temperature: -300 °C"), sweep, "below absolute zero"},
		{"no unit", one("frequency: 10"), sweep, "the unit is missing"},
		{"wrong kind", "tests: [{kind: frequency sweeep, file: a.csv}]\n", sweep, "c.yaml:1:16: tests[1].kind"},
		{"waveform", "tests: [{kind: waveform, file: a.csv}]\n", sweep, "no column for the signals"},
		{"no file", "tests: [{kind: frequency sweep}]\n", sweep, "names no file"},
		{"missing file", "tests: [{kind: frequency sweep, file: b.csv}]\n", sweep, "b.csv: no such file"},
		{"not YAML", "tests: [", sweep, "not readable as YAML"},
		{"a list", "- a\n", sweep, "key: value pairs"},
		{"twice", "campaign: a\ncampaign: b\ntests: []\n", sweep, "c.yaml"},
		{"unknown specimen", "specimens: {pair: {}}\n" + one("specimen: piar"), sweep, "no specimen has the name"},
		{"two of a name", "tests:\n  - {name: a, kind: frequency sweep, file: a.csv}\n  - {name: a, kind: frequency sweep, file: a.csv}\n", sweep, "two tests"},
		{"bad date", one("tested: 12.11.2026"), sweep, "is not a date"},
		{"Poisson", "compound: {poisson_ratio: 0.7}\n" + one("mounting: 1"), sweep, "Poisson"},
		{"columns", one("columns: {storge modulus: x}"), sweep, "storge modulus"},
		{"column unit", one("columns: {storage modulus: {heading: x, unit: kg}}"), sweep, "not a unit"},
		{"no such heading", one(`columns: {storage modulus: "K"}`), sweep, "K"},
		{"no such row", one(`rows: {lane: "1"}`), sweep, `no column of a.csv has the heading "lane"`},
		{"no row left", one(`rows: {"f / Hz": "77"}`), sweep, "no row of a.csv"},
		{"sheet", one("reading: {sheet: 1}"), sweep, "no workbook"},
		{"leave out without reason", one("leave_out: [{where: {row: 3}}]"), sweep, "the reason is missing"},
		{"empty table", one("mounting: 1"), "", "a.csv: the file is empty"},
		{"headings only", one("mounting: 1"), "f / Hz,T / °C,G' / MPa,G'' / MPa\n", "headings, but no row"},
		{"binary", one("mounting: 1"), "\x00\x01\x02\xff\xfe\x00", "a.csv"},
		{"unit in the table", one("mounting: 1"), "f / Hz,T / °C,G' / kg,G'' / MPa\n1,23,1,1\n", `a.csv:1:15: "kg" is not a unit`},
		{"no modulus", one("mounting: 1"), "f / Hz,T / °C,G' / MPa\n1,23,1\n", "two of storage modulus"},
		{"no frequency", one("mounting: 1"), "T / °C,G' / MPa,G'' / MPa\n23,1,1\n", "no column for the frequency"},
		{"no temperature", one("mounting: 1"), "f / Hz,G' / MPa,G'' / MPa\n1,1,1\n", "no column for the temperature"},
		{"zero frequency", one("mounting: 1"), "f / Hz,T / °C,G' / MPa,G'' / MPa\n0,23,1,1\n", `a.csv:2:1: the frequency "0"`},
		{"cold", one("mounting: 1"), "f / Hz,T / °C,G' / MPa,G'' / MPa\n1,-280,1,1\n", "a.csv:2:3: -280 °C is below absolute zero"},
		{"word", one("mounting: 1"), "f / Hz,T / °C,G' / MPa,G'' / MPa\n1,23,one,1\n", `a.csv:2:6: "one" is not a number`},
		{"nothing usable", one("mounting: 1"), "f / Hz,T / °C,G' / MPa,G'' / MPa\n1,23,-1,1\n2,23,nan,1\n", "no row can be used"},
		{"duplicate columns", one("mounting: 1"), "f / Hz,T / °C,G' / MPa,G'' / MPa,G' / kPa\n1,23,1,1,1\n", "two columns with the storage modulus"},
		{"G and E", one("mounting: 1"), "f / Hz,T / °C,G' / MPa,E'' / MPa\n1,23,1,1\n", "G and E in one test"},
		{"G of a foam", "compound: {cellular: true}\n" + one("mounting: 1"), sweep, "cellular"},
	} {
		t.Run(c.name, func(t *testing.T) {
			camp, err := OpenFS(memory("c.yaml", c.yaml, "a.csv", c.table), "c.yaml")
			if err == nil {
				t.Fatalf("accepted: %+v", camp)
			}
			if camp != nil {
				t.Error("a campaign beside an error")
			}
			if !strings.Contains(err.Error(), c.want) {
				t.Errorf("%q does not have %q", err, c.want)
			}
		})
	}
	// Aliases inside aliases end with an error, and soon.
	bomb := "a: &a [x,x,x,x,x,x,x,x,x]\n"
	for c := 'b'; c <= 'i'; c++ {
		bomb += fmt.Sprintf("%c: &%c [*%c,*%c,*%c,*%c,*%c,*%c,*%c,*%c,*%c]\n", c, c, c-1, c-1, c-1, c-1, c-1, c-1, c-1, c-1, c-1)
	}
	if _, err := OpenFS(memory("c.yaml", bomb+"tests: *i\n"), "c.yaml"); err == nil {
		t.Error("an alias bomb was accepted")
	}
	// Several faults come at once.
	_, err := OpenFS(memory("c.yaml", "tests: [{kind: x, file: a.csv, strain: 1 K, dwell: 3 Hz}]\n"), "c.yaml")
	if n := len(place.All(err)); n != 3 {
		t.Errorf("%d faults at once: %v", n, err)
	}
	// A directory, and nothing at all.
	if _, err := OpenFS(memory("d/x", "1"), "d"); err == nil || !strings.Contains(err.Error(), "director") {
		t.Errorf("a directory: %v", err)
	}
	if _, err := OpenFS(memory(), "gone.csv"); err == nil || !strings.Contains(err.Error(), "no such file") {
		t.Errorf("a missing file: %v", err)
	}
	if _, err := Open(); err == nil {
		t.Error("no file was accepted")
	}
}

func TestBadPointsAreNamed(t *testing.T) {
	c := mustOpen(t, "tests: [{name: s, kind: frequency sweep, file: a.csv}]\n", "a.csv",
		"f / Hz,T / °C,G' / MPa,G'' / MPa\n1,23,1,0.1\n2,23,nan,0.1\n3,23,-1,0.1\n4,23,inf,0.1\n5,23,1,-0.1\n6,23,1.2,0.1\n")
	if len(c.Findings) != 1 || c.Findings[0].Code != "rows-not-usable" || c.Findings[0].Rows != "a.csv:3, 4, 5, 6" {
		t.Fatalf("%+v", c.Findings)
	}
	used := 0
	for _, p := range c.Tests[0].Runs[0].Points {
		if p.Used {
			used++
		} else if p.Reason == "" {
			t.Errorf("row %d is left out without a reason", p.Row)
		}
	}
	if used != 2 {
		t.Errorf("%d points are used", used)
	}
}

// TestPairs: every sufficient pair gives the same G*.
func TestPairs(t *testing.T) {
	g := complex(1.25, 0.5) // MPa
	eta := imag(g) / real(g)
	mag, delta := math.Hypot(real(g), imag(g)), math.Atan(eta)*180/math.Pi
	cols := map[string]float64{"G' / MPa": real(g), "G'' / MPa": imag(g), "|G*| / MPa": mag, "δ / deg": delta, "tan δ": eta}
	for _, p := range [][2]string{{"G' / MPa", "G'' / MPa"}, {"G' / MPa", "tan δ"}, {"G' / MPa", "δ / deg"}, {"G'' / MPa", "tan δ"}, {"G'' / MPa", "δ / deg"}, {"|G*| / MPa", "δ / deg"}, {"|G*| / MPa", "tan δ"}, {"|G*| / MPa", "G' / MPa"}, {"|G*| / MPa", "G'' / MPa"}} {
		csv := fmt.Sprintf("f / Hz;T / °C;%s;%s\n1;23;%.15g;%.15g\n2;23;%.15g;%.15g\n", p[0], p[1], cols[p[0]], cols[p[1]], cols[p[0]], cols[p[1]])
		c := mustOpen(t, "tests: [{kind: frequency sweep, file: a.csv}]\n", "a.csv", csv)
		pt := c.Tests[0].Runs[0].Points[0]
		if math.Abs(pt.Storage/1e6-real(g)) > 1e-12 || math.Abs(pt.Loss/1e6-imag(g)) > 1e-12 {
			t.Errorf("%s and %s give %g and %g", p[0], p[1], pt.Storage, pt.Loss)
		}
	}
	c := mustOpen(t, "tests: [{kind: frequency sweep, file: a.csv}]\n", "a.csv", "f / Hz,T / °C,G' / MPa,G'' / MPa,tan δ\n1,23,1,0.1,0.3\n")
	near(t, "the file's own loss factor", c.Tests[0].Runs[0].Points[0].StatedLossFactor, 0.3)
}

func TestUnitsAndModuli(t *testing.T) {
	c := mustOpen(t, "tests: [{kind: frequency sweep, file: a.csv, deformation: tension}]\n", "a.csv", "ω / rad/s,T / K,strain / %,E' / psi,E'' / psi\n6.283185307179586,300,1,100,10\n")
	p := c.Tests[0].Runs[0].Points[0]
	near(t, "frequency", p.Frequency, 1)
	if math.Abs(p.Storage-100*6894.757293168361/3) > 1e-6 {
		t.Errorf("G' from E' in psi is %v Pa", p.Storage)
	}
	near(t, "strain", p.Strain, math.Sqrt(3)*0.01)
	if c.Modulus != Shear || c.PoissonRatio != 0.5 {
		t.Errorf("%s, ν %g", c.Modulus, c.PoissonRatio)
	}
	all := strings.Join(c.Assumptions, "\n")
	for _, want := range []string{"Poisson ratio 0.5", "√3"} {
		if !strings.Contains(all, want) {
			t.Errorf("no assumption about %s in %s", want, all)
		}
	}
	c = mustOpen(t, "compound: {cellular: true}\ntests: [{kind: frequency sweep, file: a.csv, deformation: compression}]\n", "a.csv", "f / Hz,T / °C,strain / %,E' / MPa,E'' / MPa\n1,20,1,3,0.3\n")
	if p := c.Tests[0].Runs[0].Points[0]; c.Modulus != Young || p.Storage != 3e6 || p.Strain != 0.01 {
		t.Errorf("a foam became %s %+v", c.Modulus, p)
	}
}

// TestRuns parts tables into runs.
func TestRuns(t *testing.T) {
	join := func(lines ...string) string { return strings.Join(lines, "\n") + "\n" }
	head := "f / Hz,T / °C,G' / MPa,G'' / MPa"
	for _, c := range []struct {
		name, kind, table string
		want              []int
	}{
		{"temperature jumps", "frequency sweep", join(head, "1,20,1,.1", "2,20,1,.1", "1,30,1,.1", "2,30,1,.1", "4,30,1,.1"), []int{2, 3}},
		{"temperature wobbles", "frequency sweep", join(head, "1,20.0,1,.1", "2,20.2,1,.1", "4,19.9,1,.1", "8,20.3,1,.1"), []int{4}},
		{"repeat at one temperature", "frequency sweep", join(head, "1,20,1,.1", "2,20,1,.1", "4,20,1,.1", "8,20,1,.1", "1,20,1,.1", "2,20,1,.1", "4,20,1,.1", "8,20,1,.1"), []int{4, 4}},
		{"up and down", "frequency sweep", join(head, "1,20,1,.1", "2,20,1,.1", "4,20,1,.1", "2,20,1,.1", "1,20,1,.1"), []int{5}},
		{"blocks", "frequency sweep", join(head, "1,20,1,.1", "2,20,1,.1", "", head, "1,20,1,.1", "3,20,1,.1"), []int{2, 2}},
		{"rep column", "frequency sweep", join("rep,"+head, "1,1,20,1,.1", "1,2,20,1,.1", "1,4,20,1,.1", "2,1,20,1,.1", "2,2,20,1,.1", "2,4,20,1,.1"), []int{3, 3}},
		{"interleaved repeats", "frequency sweep", join("rep,"+head, "1,1,20,1,.1", "2,1,20,1,.1", "1,2,20,1,.1", "2,2,20,1,.1", "1,4,20,1,.1", "2,4,20,1,.1", "1,1,40,1,.1", "1,2,40,1,.1", "1,4,40,1,.1"), []int{3, 3, 3}},
		{"frequencies numbered", "frequency sweep", join("step,"+head, "1,1,20,1,.1", "2,2,20,1,.1", "3,4,20,1,.1", "1,1,40,1,.1", "2,2,40,1,.1", "3,4,40,1,.1", "1,1,60,1,.1", "2,2,60,1,.1", "3,4,60,1,.1"), []int{3, 3, 3}},
		{"points numbered", "frequency sweep", join("step,"+head, "1,1,20,1,.1", "2,2,20,1,.1", "3,4,20,1,.1", "4,8,20,1,.1"), []int{4}},
		{"one frequency", "frequency sweep", join(head, "1,20,1,.1", "1,20,1,.1", "1,20,1,.1", "1,40,1,.1"), []int{3, 1}},
		{"temperature sweep", "temperature sweep", join(head, "1,20,1,.1", "10,20,1,.1", "1,22,1,.1", "10,22,1,.1", "1,24,1,.1"), []int{3, 2}},
		{"strain sweeps", "strain sweep", join("strain / %,"+head, "1,10,20,1,.1", "2,10,20,1,.1", "4,10,20,1,.1", "1,10,60,1,.1", "2,10,60,1,.1", "1,30,60,1,.1"), []int{3, 2, 1}},
		{"relaxations", "relaxation", join("t / s,T / °C,G(t) / MPa", "1,20,1", "10,20,.9", "1,20,1", "10,20,.9", "1,40,.8"), []int{2, 2, 1}},
	} {
		campaign := mustOpen(t, "tests: [{kind: "+c.kind+", file: a.csv}]\n", "a.csv", c.table)
		var got []int
		for _, r := range campaign.Tests[0].Runs {
			got = append(got, len(r.Points))
		}
		if fmt.Sprint(got) != fmt.Sprint(c.want) {
			t.Errorf("%s: runs of %v points, want %v", c.name, got, c.want)
		}
	}
	r := mustOpen(t, "tests: [{kind: frequency sweep, file: a.csv}]\n", "a.csv", join("set temperature / °C,"+head, "20,1,21.6,1,.1", "20,2,21.7,1,.1", "40,1,40.0,1,.1")).Tests[0].Runs
	if len(r) != 2 || r[0].Temperature != 293.15 || r[0].Points[0].Temperature != 294.75 {
		t.Errorf("set and measured temperature: %+v", r)
	}
	r = mustOpen(t, "tests: [{kind: frequency sweep, file: a.csv}]\n", "a.csv", sweep).Tests[0].Runs
	if r[0].Temperature != 296.15 || !strings.Contains(r[0].Name, "23 °C") {
		t.Errorf("%+v", r[0])
	}
}

// TestLongTable: a hundred thousand rows of one run take linear time.
func TestLongTable(t *testing.T) {
	var b strings.Builder
	b.WriteString("f / Hz,T / °C,G' / MPa,G'' / MPa\n")
	for i := range 100_000 {
		fmt.Fprintf(&b, "%.6f,20,1,.1\n", 1+0.001*float64(i))
	}
	start := time.Now()
	c := mustOpen(t, "tests: [{kind: frequency sweep, file: a.csv}]\n", "a.csv", b.String())
	if n := len(c.Tests[0].Runs); n != 1 || time.Since(start) > 20*time.Second {
		t.Errorf("%d runs after %v", n, time.Since(start))
	}
}

// TestBare reads tables without a campaign file, and says what it assumed.
func TestBare(t *testing.T) {
	fs := memory("a.csv", sweep, "b.csv", "strain / %,f / Hz,T / °C,G' / MPa,G'' / MPa\n0.1,10,23,2,.1\n0.3,10,23,1.9,.2\n1,10,23,1.7,.2\n", "c.txt", "t / s\tT / °C\tE(t) / MPa\n1\t23\t3\n10\t23\t2\n")
	c, err := OpenFS(fs, "a.csv", "b.csv", "c.txt")
	if err != nil {
		t.Fatal(err)
	}
	for i, want := range []Kind{FrequencySweep, StrainSweep, Relaxation} {
		if c.Tests[i].Kind != want || c.Tests[i].Specimen == "" {
			t.Errorf("test %d: %+v", i, c.Tests[i])
		}
	}
	if c.Tests[0].Specimen == c.Tests[1].Specimen {
		t.Error("two bare files share a specimen")
	}
	if math.Abs(c.Tests[2].Runs[0].Points[0].Storage-1e6) > 1e-6 {
		t.Errorf("E(t) 3 MPa became %g Pa", c.Tests[2].Runs[0].Points[0].Storage)
	}
	if len(c.Inputs) != 3 || len(c.Inputs[0].SHA256) != 64 {
		t.Errorf("%+v", c.Inputs)
	}
	if len(c.Assumptions) < 3 {
		t.Errorf("assumptions %q", c.Assumptions)
	}
}

func FuzzCampaign(f *testing.F) {
	f.Add("tests: [{kind: frequency sweep, file: a.csv}]\n", sweep)
	f.Add("tests: [{kind: strain sweep, file: a.csv, columns: {strain: {column: 3}}, rows: {a: b}}]\n", "a;b\n1;2\n")
	f.Add("a: &a [*a]\n", "\xff\xfe1\x00")
	f.Fuzz(func(t *testing.T, yaml, table string) {
		for _, name := range []string{"c.yaml", "a.csv"} {
			c, err := OpenFS(memory("c.yaml", yaml, "a.csv", table), name)
			if (c == nil) == (err == nil) {
				t.Fatalf("campaign %v, error %v", c, err)
			}
		}
	})
}
