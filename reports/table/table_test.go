package table_test

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"math"
	"strconv"
	"strings"
	"testing"

	"phaselag/reports/table"

	"pgregory.net/rapid"
)

func sample() table.Table {
	return table.Table{
		Name:        "modulus 1",
		Assumptions: []string{"strain amplitude not stated: 0.2 % of the isotherms <used>"},
		Columns: []table.Column{
			{Key: "frequency_Hz", Heading: "f", Unit: "Hz"},
			{Key: "storage_MPa", Heading: "G′", Unit: "MPa", Interval: "storage_U95_MPa"},
			{Key: "storage_U95_MPa", Heading: "U95", Unit: "MPa"},
			{Key: "domain"},
		},
		Rows: [][]table.Cell{
			{table.Number(1), table.Number(1.234567), table.Number(0.0449), table.Text("inside")},
			{table.Number(31.622776601683793), table.Number(123.4567), table.Number(12.3), table.Text("extrapolated: frequency")},
			{table.Number(1e-7), table.Number(math.NaN()), table.Number(math.NaN()), table.Text("outside: \"cold\", 漢")},
		},
	}
}

func write(t *testing.T, f table.Format, tab table.Table) string {
	t.Helper()
	var b bytes.Buffer
	if err := table.Write(&b, f, tab); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

func TestTerminal(t *testing.T) {
	want := `    f       G′     U95  domain
   Hz      MPa     MPa
-----  -------  ------  -----------------------
 1       1.235   0.045  inside
31.62  123      12      extrapolated: frequency
 1e-7        –       –  outside: "cold", 漢

assumptions:
  - strain amplitude not stated: 0.2 % of the isotherms <used>
`
	if got := write(t, table.Terminal, sample()); got != want {
		t.Errorf("got\n%swant\n%s", got, want)
	}
}

func TestCSV(t *testing.T) {
	want := `frequency_Hz,storage_MPa,storage_U95_MPa,domain
1,1.234567,0.0449,inside
31.622776601683793,123.4567,12.3,extrapolated: frequency
1e-07,,,"outside: ""cold"", 漢"
`
	if got := write(t, table.CSV, sample()); got != want {
		t.Errorf("got\n%swant\n%s", got, want)
	}
}

func TestJSON(t *testing.T) {
	want := `{"phaselag": "modulus 1", "assumptions": ["strain amplitude not stated: 0.2 % of the isotherms <used>"], "rows": [
  {"frequency_Hz": 1, "storage_MPa": 1.234567, "storage_U95_MPa": 0.0449, "domain": "inside"},
  {"frequency_Hz": 31.622776601683793, "storage_MPa": 123.4567, "storage_U95_MPa": 12.3, "domain": "extrapolated: frequency"},
  {"frequency_Hz": 1e-07, "storage_MPa": null, "storage_U95_MPa": null, "domain": "outside: \"cold\", 漢"}
]}
`
	if got := write(t, table.JSON, sample()); got != want {
		t.Errorf("got\n%swant\n%s", got, want)
	}
	empty := sample()
	empty.Rows, empty.Assumptions = nil, nil
	if got, want := write(t, table.JSON, empty), `{"phaselag": "modulus 1", "assumptions": [], "rows": []}`+"\n"; got != want {
		t.Errorf("got %s, want %s", got, want)
	}
}

// Results rounded as in JCGM 100:2008, 7.2.6: the interval with two digits, the
// value to the same place. The pairs are worked by hand.
func TestRounding(t *testing.T) {
	for _, c := range []struct {
		v, u    float64
		result  string
		isAlone string // without the interval, four digits
	}{
		{10.05762, 0.027, "10.058", "10.06"},
		{100.02147, 0.00035, "100.02147", "100.0"},
		{0.0996, 0.0199, "0.100", "0.0996"},
		{12345, 230, "12340", "12345"},
		{12355, 230, "12360", "12355"},
		{12355, 995, "12400", "12355"}, // 995 is 1.0e3 with two digits
		{4, 230, "0", "4"},
		{6, 230, "10", "6"},
		{-6, 230, "-10", "-6"},
		{-0.001, 0.5, "0.00", "-0.001"},
		{2.5, 1.2, "2.5", "2.5"},
		{0.15, 2.4, "0.1", "0.15"}, // the double nearest 0.15 lies below it
		{1234567, 4.3, "1.2345670e6", "1.235e6"},
		{1.5e-7, 2e-9, "1.500e-7", "1.5e-7"},
		{5, math.NaN(), "5", "5"},
		{math.NaN(), 0.1, "–", "–"},
		{0, 0.013, "0.000", "0"},
		{999.97, 0, "1000", "1000"},
	} {
		if got := table.WithInterval(c.v, c.u, 0); got != c.result {
			t.Errorf("%v ± %v: %s, want %s", c.v, c.u, got, c.result)
		}
		if got := table.Significant(c.v, 4); got != c.isAlone {
			t.Errorf("%v: %s, want %s", c.v, got, c.isAlone)
		}
	}
}

func TestInterval(t *testing.T) {
	for _, c := range []struct {
		u    float64
		want string
	}{{0.1, "0.10"}, {0.0995, "0.10"}, {0.0449, "0.045"}, {12.3, "12"}, {230, "230"}, {1234, "1200"}, {2.04e-6, "2.0e-6"}, {0, "0"}, {math.NaN(), "–"}} {
		if got := table.Interval(c.u); got != c.want {
			t.Errorf("%v: %s, want %s", c.u, got, c.want)
		}
	}
}

// What people read differs from the number by no more than half of the last
// place shown, and never has a longer way than the interval supports.
func TestRoundingIsNear(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		v := rapid.Float64Range(-1e9, 1e9).Draw(t, "v")
		u := math.Pow(10, rapid.Float64Range(-8, 8).Draw(t, "log u"))
		got, err := strconv.ParseFloat(table.WithInterval(v, u, 0), 64)
		if err != nil {
			t.Fatal(err)
		}
		// the second digit of u is at most a tenth of u, half of it a twentieth;
		// fifteen digits are the most that are written
		if math.Abs(got-v) > 0.05*u*(1+1e-9)+1e-14*math.Abs(v) {
			t.Fatalf("%v ± %v is written %v", v, u, got)
		}
	})
}

func TestMachineFormsKeepEveryBit(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		v := rapid.Float64().Filter(func(v float64) bool { return !math.IsInf(v, 0) && !math.IsNaN(v) }).Draw(t, "v")
		s := rapid.String().Draw(t, "s")
		tab := table.Table{Name: "x", Columns: []table.Column{{Key: "a"}, {Key: "b"}}, Rows: [][]table.Cell{{table.Number(v), table.Text(s)}}}
		var b bytes.Buffer
		if err := table.Write(&b, table.JSON, tab); err != nil {
			t.Fatal(err)
		}
		var back struct {
			Rows []struct {
				A float64
				B string
			}
		}
		if err := json.Unmarshal(b.Bytes(), &back); err != nil {
			t.Fatal(err)
		}
		if math.Float64bits(back.Rows[0].A) != math.Float64bits(v) || back.Rows[0].B != strings.ToValidUTF8(s, "\uFFFD") {
			t.Fatalf("%v %q came back as %v", v, s, back.Rows[0])
		}
		b.Reset()
		if err := table.Write(&b, table.CSV, tab); err != nil {
			t.Fatal(err)
		}
		rows, err := csv.NewReader(&b).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		if x, _ := strconv.ParseFloat(rows[1][0], 64); math.Float64bits(x) != math.Float64bits(v) {
			t.Fatalf("%v came back as %v", v, x)
		}
	})
}

func TestRefusals(t *testing.T) {
	tab := sample()
	if err := table.Write(&bytes.Buffer{}, "xml", tab); err == nil || !strings.Contains(err.Error(), "table, csv or json") {
		t.Errorf("unknown format: %v", err)
	}
	tab.Rows[1][1] = table.Number(math.Inf(1))
	var b bytes.Buffer
	if err := table.Write(&b, table.CSV, tab); err == nil || b.Len() > 0 || !strings.Contains(err.Error(), "row 2, column storage_MPa") {
		t.Errorf("infinite number: %v, %d bytes written", err, b.Len())
	}
	for name, bad := range map[string]table.Table{
		"short row": {Columns: []table.Column{{Key: "a"}}, Rows: [][]table.Cell{{}}},
		"twice":     {Columns: []table.Column{{Key: "a"}, {Key: "a"}}},
		"interval":  {Columns: []table.Column{{Key: "a", Interval: "b"}}},
	} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("%s: no panic", name)
				}
			}()
			_ = table.Write(&bytes.Buffer{}, table.CSV, bad)
		}()
	}
}

func TestOneEmptyColumn(t *testing.T) {
	tab := table.Table{Name: "x", Columns: []table.Column{{Key: "a"}}, Rows: [][]table.Cell{{table.Number(math.NaN())}, {table.Number(1)}}}
	rows, err := csv.NewReader(strings.NewReader(write(t, table.CSV, tab))).ReadAll()
	if err != nil || len(rows) != 3 {
		t.Errorf("rows %q, error %v", rows, err)
	}
}
