package fitting

import (
	"math"
	"slices"
	"strings"
	"testing"

	"phaselag/data"
	"phaselag/data/demo"
	"phaselag/models"
)

// partial characterizes the simulated campaign with its isotherm table, the
// only test, changed.
func partial(t *testing.T, plan demo.Plan, change func(row []string) []string) *Result {
	t.Helper()
	files := demo.Campaign(demo.Gum(), plan, 5)
	if change != nil {
		var out []string
		for _, line := range strings.Split(string(files.Bytes("isotherms.csv")), "\n") {
			if line == "" || line[0] == '#' || line[0] == 'f' {
				out = append(out, line)
				continue
			}
			if row := change(strings.Split(line, ",")); row != nil {
				out = append(out, strings.Join(row, ","))
			}
		}
		files = files.With("isotherms.csv", []byte(strings.Join(out, "\n")))
	}
	c, err := data.OpenFS(files, "campaign.yaml")
	if err != nil {
		t.Fatal(err)
	}
	r, err := Characterize(c, &Settings{Replicates: 19})
	if err != nil {
		t.Fatal(err)
	}
	// Whatever was left out, the result can be written and read back.
	b, err := r.JSON()
	if err != nil {
		t.Fatal(err)
	}
	back, err := ReadResult(b)
	if err != nil {
		t.Fatal(err)
	}
	if again, _ := back.JSON(); string(again) != string(b) {
		t.Error("the result does not come back bit for bit")
	}
	return r
}

func wantFinding(t *testing.T, r *Result, code string, severity data.Severity) {
	t.Helper()
	if f, ok := finding(r, code); !ok || f.Severity != severity {
		t.Errorf("no finding %s (%s); findings: %v", code, severity, codes(r))
	}
}

func codes(r *Result) (out []string) {
	for _, f := range r.Findings {
		out = append(out, f.Code)
	}
	return out
}

// TestSwapped: exchanged columns give no compound, a finding and everything
// measured.
func TestSwapped(t *testing.T) {
	r := partial(t, demo.IsothermPlan(), func(row []string) []string {
		row[3], row[4] = row[4], row[3]
		return row
	})
	if r.Compound != nil {
		t.Error("a compound was made of exchanged columns")
	}
	wantFinding(t, r, "no-fit", data.Severe)
	if len(r.Points) != 13*21 {
		t.Errorf("%d points", len(r.Points))
	}
}

// TestNoOverlap: −40 °C alone at the cold end is left out, the rest is
// characterized.
func TestNoOverlap(t *testing.T) {
	r := partial(t, demo.IsothermPlan(), func(row []string) []string {
		switch row[1] {
		case "-30", "-20", "-10", "0", "10":
			return nil
		}
		return row
	})
	wantFinding(t, r, "isotherms-do-not-overlap", data.Severe)
	wantFinding(t, r, "isotherms-left-out", data.Severe)
	if r.Compound == nil || r.Compound.Domain.Temperature[0] != 20 {
		t.Fatalf("domain %v", r.Compound.Domain.Temperature)
	}
	for _, p := range r.Points {
		if left := p.TemperatureC < 0; left == p.Used || left != strings.Contains(p.Reason, "overlap") {
			t.Fatalf("%g °C: used %v, reason %q", float64(p.TemperatureC), p.Used, p.Reason)
		}
	}
}

func TestOneTemperature(t *testing.T) {
	r := partial(t, demo.IsothermPlan(), func(row []string) []string {
		if row[1] != "20" {
			return nil
		}
		return row
	})
	wantFinding(t, r, "one-temperature-only", data.Doubt)
	c := r.Compound
	if c == nil || c.Shift.Law != models.LawNone || c.Domain.Temperature != (models.Range{20, 20}) {
		t.Fatalf("compound %+v", c)
	}
	q := models.Condition{Frequency: 10, Temperature: 293.15, Strain: math.NaN()}
	m, err := c.Modulus(q)
	if err != nil || !(m.Storage > 1e6) || !(m.StorageU95 > 0) {
		t.Errorf("%+v, %v", m, err)
	}
	q.Temperature++
	if _, err := c.Modulus(q); err == nil {
		t.Error("another temperature was answered")
	}
}

func TestOneFrequency(t *testing.T) {
	r := partial(t, demo.IsothermPlan(), func(row []string) []string {
		if row[0] != "0.5" {
			return nil
		}
		return row
	})
	if r.Compound != nil {
		t.Error("a compound was made of one frequency")
	}
	wantFinding(t, r, "superposition-impossible", data.Severe)
	if len(r.Fixed) != 13 {
		t.Errorf("%d temperatures are reported", len(r.Fixed))
	}
}

// TestTwoAndThreeTemperatures: too few for WLF, enough for the factors.
func TestTwoAndThreeTemperatures(t *testing.T) {
	for n, temps := range map[int]string{2: "20 30", 3: "20 30 40"} {
		r := partial(t, demo.IsothermPlan(), func(row []string) []string {
			if !slices.Contains(strings.Fields(temps), row[1]) {
				return nil
			}
			return row
		})
		if r.Compound == nil || len(r.Shifts) != n {
			t.Errorf("%d temperatures: %d factors", n, len(r.Shifts))
			continue
		}
		want := math.Log10(demo.Gum().ShiftFactor(303.15)) - math.Log10(demo.Gum().ShiftFactor(293.15))
		got, half := r.Compound.LogShift(303.15)-r.Compound.LogShift(293.15), 0.0
		for _, s := range r.Shifts {
			if s.TemperatureC == 30 {
				half = 4 * float64(s.U)
			}
		}
		if math.Abs(got-want) > half && !math.IsNaN(half) {
			t.Errorf("%d temperatures: log a_T from 20 to 30 °C %.3f ± %.3f, simulated %.3f", n, got, half/2, want)
		}
	}
}

// TestNoStrainSweep: the compound refuses other amplitudes.
func TestNoStrainSweep(t *testing.T) {
	r := partial(t, demo.IsothermPlan(), nil)
	wantFinding(t, r, "no-strain-sweep", data.Note)
	c := r.Compound
	if c.Amplitude.Law != models.AmplitudeNone || c.Domain.Strain == nil {
		t.Fatalf("amplitude %+v, domain %+v", c.Amplitude, c.Domain)
	}
	q := models.Condition{Frequency: 10, Temperature: 293.15, Strain: 0.01}
	if _, err := c.Modulus(q); err == nil {
		t.Error("1 % strain was answered from isotherms at 0.2 %")
	}
	// Without a stated strain there is none to ask for.
	r = partial(t, demo.IsothermPlan(), func(row []string) []string { row[2] = ""; return row })
	if r.Compound.Domain.Strain != nil {
		t.Error("a strain domain of measurements without strain")
	}
	if _, err := r.Compound.Modulus(q); err == nil {
		t.Error("a strain was answered where none was ever stated")
	}
}

// TestDeterministic: the same campaign gives the same result whatever the
// number of workers, with draws of the bootstrap.
func TestDeterministic(t *testing.T) {
	var first string
	for workers := 1; workers <= 3; workers++ {
		c, err := data.OpenFS(demo.Campaign(demo.Complex(), demo.IsothermPlan(), 2), "campaign.yaml")
		if err != nil {
			t.Fatal(err)
		}
		r, err := Characterize(c, &Settings{Replicates: 30, Workers: workers})
		if err != nil {
			t.Fatal(err)
		}
		if r.Common.Replicates != 30 {
			t.Fatalf("%d replicates: the test of the bootstrap tests nothing", r.Common.Replicates)
		}
		b, err := r.JSON()
		if err != nil {
			t.Fatal(err)
		}
		if first == "" {
			first = string(b)
		}
		if string(b) != first {
			t.Errorf("%d workers give another result", workers)
		}
	}
}

// TestComplexMaterial: a third process with a temperature dependence of its own
// is seen.
func TestComplexMaterial(t *testing.T) {
	c, err := data.OpenFS(demo.Campaign(demo.Complex(), demo.IsothermPlan(), 2), "campaign.yaml")
	if err != nil {
		t.Fatal(err)
	}
	r, err := Characterize(c, nil)
	if err != nil {
		t.Fatal(err)
	}
	t.Logf("p %.3f, %.2f° beyond noise", float64(r.Common.P), float64(r.Compound.Fit.Superposition.MisfitDeg))
	if r.Compound.Fit.Superposition.Holds != models.HoldsNo {
		t.Errorf("superposition %s", r.Compound.Fit.Superposition.Holds)
	}
	wantFinding(t, r, "superposition-fails", data.Severe)
}

// TestVerticalShifts: a rubber whose polymer modulus follows temperature and
// density is found out; bounded and free are what was asked for, with a doubt.
func TestVerticalShifts(t *testing.T) {
	truth := demo.Gum()
	truth.Density, truth.Expansion = true, 6.6e-4
	for _, wish := range []string{"auto", "none", "bounded", "free"} {
		c, err := data.OpenFS(demo.Campaign(truth, demo.IsothermPlan(), 4), "campaign.yaml")
		if err != nil {
			t.Fatal(err)
		}
		c.Analysis.VerticalShift = wish
		r, err := Characterize(c, &Settings{Replicates: -1})
		if err != nil {
			t.Fatal(err)
		}
		want := map[string]string{"auto": models.VerticalDensity, "none": models.VerticalNone, "bounded": models.VerticalFactors, "free": models.VerticalFactors}[wish]
		if r.Compound.Vertical.Law != want {
			t.Errorf("%s: %s; candidates %+v", wish, r.Compound.Vertical.Law, r.Vertical)
		}
		if want == models.VerticalFactors {
			wantFinding(t, r, "vertical-shift-not-physical", data.Doubt)
		}
	}
}
