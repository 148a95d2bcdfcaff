package interactive_test

import (
	"encoding/json"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"phaselag/data/unit"
	"phaselag/models"
	"phaselag/reports"
	"phaselag/reports/interactive"
	"phaselag/reports/table"
)

// answerCells are the columns of the command's table that the page shows.
var answerCells = []string{"storage_MPa", "loss_MPa", "magnitude_MPa", "loss_factor", "storage_U95_MPa", "loss_U95_MPa", "magnitude_U95_MPa", "loss_factor_U95"}

// expected is what phaselag modulus prints at q: the cells, or its words alone.
func expected(t *testing.T, c *models.Compound, q models.Condition) (cells []string, words string) {
	t.Helper()
	tab, outside, err := reports.ModulusTable(c, []models.Condition{q}, false)
	if err != nil {
		return nil, err.Error()
	}
	row := tab.Strings()[0]
	if outside > 0 {
		return nil, row[len(row)-1]
	}
	for _, key := range answerCells {
		for j, col := range tab.Columns {
			if col.Key == key {
				cells = append(cells, row[j])
			}
		}
	}
	return cells, ""
}

// probe is an expression of the scripts, where its value goes, and what must hold then.
type probe struct {
	script string // a function body
	into   any
	check  func(*testing.T)
}

// The scripts against the program, in one start of the browser.
func TestEvaluation(t *testing.T) {
	chromium(t)
	tests := []struct {
		name string
		make func(*testing.T) probe
	}{{"answers", answersProbe}, {"digits", digitsProbe}, {"units", unitsProbe}}
	var probes []probe
	var bodies, found []string
	for _, v := range tests {
		p := v.make(t)
		probes, bodies = append(probes, p), append(bodies, "() => {"+p.script+"}")
	}
	run(t, &site{pages: map[string]string{"/": page(interactive.Evaluation(), "tried(() => ["+strings.Join(bodies, ",\n")+"].map((f) => JSON.stringify(f())))")}}, &found)
	for i, v := range tests {
		t.Run(v.name, func(t *testing.T) {
			if err := json.Unmarshal([]byte(found[i]), probes[i].into); err != nil {
				t.Fatal(err)
			}
			probes[i].check(t)
		})
	}
}

// The page's answers are those of phaselag modulus to the last printed digit, for every
// law, and its refusals have the same words.
func answersProbe(t *testing.T) probe {
	type query struct {
		F float64     `json:"f"`
		T float64     `json:"T"`
		S unit.Number `json:"s"`
	}
	var names []string
	var compounds []*models.Compound
	var conditions [][]models.Condition
	var blocks []string
	var queries [][]query
	random := rand.New(rand.NewPCG(3, 4))
	for _, v := range variants(t) {
		live, err := interactive.New(v.compound, interactive.Options{})
		if err != nil {
			t.Fatal(err)
		}
		q := someConditions(v.compound, 16, random)
		var list []query
		for _, c := range q {
			list = append(list, query{c.Frequency, c.Temperature, unit.Number(c.Strain)})
		}
		names, compounds, conditions = append(names, v.name), append(compounds, v.compound), append(conditions, q)
		blocks, queries = append(blocks, string(live.Data)), append(queries, list)
	}
	var got [][]struct {
		Words   string
		Cells   []string
		Numbers []float64
	}
	script := "const blocks = [" + strings.Join(blocks, ",\n") + "], queries = " + asJSON(t, queries) + `;
return blocks.map((b, i) => {
  const c = phaselagModel.open(b.compound, b.quantile), N = phaselagNumber;
  return queries[i].map((q) => {
    const m = c.modulus({ frequency: q.f, temperature: q.T, strain: q.s === null ? NaN : q.s });
    if (m.outside || m.fault) return { Words: m.outside || m.fault };
    const x = [m.storage / 1e6, m.loss / 1e6, m.magnitude / 1e6, m.eta], u = [m.storageU / 1e6, m.lossU / 1e6, m.magnitudeU / 1e6, m.etaU];
    return { Cells: x.map((v, k) => N.withInterval(v, u[k])).concat(u.map(N.interval)), Numbers: x.concat(u) };
  });
});`
	return probe{script, &got, func(t *testing.T) {
		answers, refusals, worst := 0, 0, 0.0
		for i, c := range compounds {
			for k, q := range conditions[i] {
				cells, words := expected(t, c, q)
				g := got[i][k]
				if strings.Join(cells, " ") != strings.Join(g.Cells, " ") || words != g.Words {
					t.Errorf("%s at %+v:\npage    %v %s\ncommand %v %s", names[i], q, g.Cells, g.Words, cells, words)
					continue
				}
				if words != "" {
					refusals++
					continue
				}
				answers++
				m, err := c.Modulus(q)
				if err != nil {
					t.Fatal(err)
				}
				for j, x := range []float64{m.Storage / 1e6, m.Loss / 1e6, m.Magnitude / 1e6, m.LossFactor, m.StorageU95 / 1e6, m.LossU95 / 1e6, m.MagnitudeU95 / 1e6, m.LossFactorU95} {
					worst = math.Max(worst, math.Abs(g.Numbers[j]/x-1))
				}
			}
		}
		if answers < 1000 || refusals < 800 {
			t.Errorf("only %d answers and %d refusals were compared", answers, refusals)
		}
		// The functions exp, log and the square root may differ in the last place.
		if worst > 1e-11 {
			t.Errorf("numbers differ by up to %.2g", worst)
		}
		t.Logf("%d compounds, %d answers, %d refusals; largest relative difference %.2g", len(compounds), answers, refusals, worst)
	}}
}

// Numbers are printed as package reports/table prints them, ties to even included.
func digitsProbe(t *testing.T) probe {
	random := rand.New(rand.NewPCG(5, 6))
	var list [][2]unit.Number
	special := []float64{0, 1, -1, 0.5, 1.5, 2.5, 0.125, 0.375, 0.0625, 9.995, 9.9949999, 99.95, 999.5, 1000, 12345, 99999, 123456, 999999.5, 1e6, 1.5e6, 1e-4, 9.99999e-5, 5e-324, 1.7976931348623157e308, 1e22, 0.1, 0.3, 2.0 / 3, -0.00001, 50, 250, 150, 1050}
	for _, x := range special {
		for _, u := range append(special, math.NaN(), math.Inf(1), -1, 0.02, 0.25, 0.095, 0.0995, 0.99, 0.994, 25, 95, 99.5, 250, 9950, 99499, 99500) {
			if !math.IsInf(u, 0) {
				list = append(list, [2]unit.Number{unit.Number(x), unit.Number(u)})
			}
		}
	}
	for range 2500 {
		x := math.Pow(10, 14*random.Float64()-6) * (2*random.Float64() - 0.5)
		u := math.Pow(10, 14*random.Float64()-8)
		if random.IntN(3) == 0 { // few binary digits: ties
			x, u = math.Round(x*64)/64, math.Round(u*64)/64
		}
		list = append(list, [2]unit.Number{unit.Number(x), unit.Number(u)})
	}
	var got [][]string
	script := "const list = " + asJSON(t, list) + `;
return list.map(([x, u]) => { x = x === null ? NaN : x; u = u === null ? NaN : u; const N = phaselagNumber; return [N.significant(x, 0), N.significant(x, 7), N.interval(u), N.withInterval(x, u)]; });`
	return probe{script, &got, func(t *testing.T) {
		bad := 0
		for i, p := range list {
			x, u := float64(p[0]), float64(p[1])
			want := []string{table.Significant(x, 0), table.Significant(x, 7), table.Interval(u), table.WithInterval(x, u, 0)}
			if strings.Join(want, " ") != strings.Join(got[i], " ") {
				if bad++; bad < 20 {
					t.Errorf("%v ± %v: the page has %q, the tables %q", x, u, got[i], want)
				}
			}
		}
	}}
}

// Typed quantities are read as the command's are: the same values, and faults where it
// has faults, with its words where the page has them.
func unitsProbe(t *testing.T) probe {
	kinds := []unit.Quantity{unit.Frequency, unit.Temperature, unit.Strain}
	texts := []string{"12 Hz", "12Hz", " 12  hz ", "1.5e3 mHz", "2 MHZ", "3 mhz", "0.1kHz", "60 rad/s", "60 rad per s", "60 rad s^-1", "60 rad·s⁻¹", "600 rpm", "600 1/min", "600 min-1", "12", "0", "-0", "", " ", "Hz", "1,5 Hz", "1 2 Hz", "1.2.3 Hz",
		"-20 °C", "−20 °C", "–20\u00a0°C", "-20C", "-20 degC", "-20 ℃", "20 celsius", "68 °F", "68 F", "300 K", "300 kelvin", "-300 °C", "-1 K", "-500 °F", "23 º C", "23 °", "1e400 °C", "1e308 °F",
		"0.5 %", "0.5%", "0.5 percent", "0.005", "0.005 m/m", "0.005 mm/mm", "0.005 1", "5 ‰", "5000 ppm", "5000 microstrain", "5000 µm/m", "5000 μm/m", "5 e-3 %", "5e-3 %", "+.5 %", "5. %", "nan %", "inf Hz", "0x10 Hz", "<b>1</b> Hz", "1 \"Hz\"", strings.Repeat("9", 60) + " Q", "12 N", "1 -", "100000 °C", "1e6 W"}
	type item struct{ Text, Kind string }
	var list []item
	var want []float64
	var faults []error
	for _, k := range kinds {
		for _, s := range texts {
			v, err := unit.Parse(s, k)
			list, want, faults = append(list, item{s, string(k)}), append(want, v), append(faults, err)
		}
	}
	live, err := interactive.New(invented(t), interactive.Options{})
	if err != nil {
		t.Fatal(err)
	}
	var got []struct {
		Value float64
		Fault string
	}
	script := "const data = " + string(live.Data) + ", list = " + asJSON(t, list) + `;
return list.map((q) => { const g = phaselagUnit.parse(q.Text, data.kinds.find((k) => k.name === q.Kind)); return { Value: g.fault ? 0 : g.value, Fault: g.fault || "" }; });`
	return probe{script, &got, func(t *testing.T) {
		for i, q := range list {
			g := got[i]
			switch {
			case faults[i] == nil && (g.Fault != "" || g.Value != want[i]):
				t.Errorf("%q as %s: the page has %v %s, the command %v", q.Text, q.Kind, g.Value, g.Fault, want[i])
			case faults[i] != nil && g.Fault == "":
				t.Errorf("%q as %s: the page has %v, the command refuses: %v", q.Text, q.Kind, g.Value, faults[i])
			case faults[i] != nil:
				what := faults[i].Error()
				// what belongs to another quantity is said in fewer words
				if !strings.HasPrefix(what, g.Fault) && !strings.Contains(what, "is a unit of") {
					t.Errorf("%q as %s: the page says %q, the command %q", q.Text, q.Kind, g.Fault, what)
				}
			}
		}
	}}
}
