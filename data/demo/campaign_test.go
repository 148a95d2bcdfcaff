package demo

import (
	"bytes"
	"encoding/csv"
	"flag"
	"io/fs"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
	"testing/fstest"

	"gonum.org/v1/gonum/stat"
	"gopkg.in/yaml.v3"
)

var update = flag.Bool("update", false, "write the committed files anew")

// rows reads a written table: comments skipped, heading apart.
func rows(t *testing.T, data []byte) (heading []string, values [][]float64) {
	t.Helper()
	r := csv.NewReader(bytes.NewReader(data))
	r.Comment = '#'
	all, err := r.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	for _, cells := range all[1:] {
		row := make([]float64, len(cells))
		for i, c := range cells {
			if row[i], err = strconv.ParseFloat(c, 64); err != nil {
				t.Fatal(err)
			}
		}
		values = append(values, row)
	}
	return all[0], values
}

func TestCommittedFiles(t *testing.T) {
	files := Campaign(HM60(), HM60Plan(), HM60Seed)
	want := map[string][]byte{"sifter.yaml": SifterMount()}
	for _, n := range files.Names() {
		want[n] = files.Bytes(n)
	}
	for _, n := range append(files.Names(), "sifter.yaml") {
		if *update {
			if err := os.WriteFile(n, want[n], 0o644); err != nil {
				t.Fatal(err)
			}
		}
		got, err := os.ReadFile(n)
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(got, want[n]) {
			t.Errorf("%s is not what the simulator writes; run with -update and look at the difference", n)
		}
		if !strings.HasPrefix(string(got), "# Invented data") {
			t.Errorf("%s does not say that it is invented", n)
		}
	}
}

func TestCommittedReleaseTest(t *testing.T) {
	files := Campaign(HM60().Changed(ReleasedBatch()), ReleasePlan(), ReleaseSeed)
	for _, n := range files.Names() {
		name := "release-test/" + n
		if *update {
			if err := os.WriteFile(name, files.Bytes(n), 0o644); err != nil {
				t.Fatal(err)
			}
		}
		got, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(got, files.Bytes(n)) || !strings.HasPrefix(string(got), "# Invented data") {
			t.Errorf("%s is not what the simulator writes, or does not say that it is invented", name)
		}
	}
}

func TestCampaignFileIsYAML(t *testing.T) {
	files := Campaign(HM60(), HM60Plan(), 1)
	var doc struct {
		Campaign, Laboratory string
		Tests                []struct{ Name, Kind, File string }
		Uncertainty          map[string]string
	}
	if err := yaml.Unmarshal(files.Bytes(CampaignFile), &doc); err != nil {
		t.Fatal(err)
	}
	if len(doc.Tests) != 5 || doc.Tests[1].Kind != "strain sweep" || doc.Tests[1].File != "strain-sweeps.csv" {
		t.Errorf("tests: %+v", doc.Tests)
	}
	if !strings.Contains(doc.Laboratory, "invented") {
		t.Errorf("laboratory: %q", doc.Laboratory)
	}
	if doc.Uncertainty["geometry"] != "1.5 %" || doc.Uncertainty["phase"] != "0.05 deg" {
		t.Errorf("uncertainty: %v", doc.Uncertainty)
	}
}

func TestSameSeedSameBytes(t *testing.T) {
	a, b, c := Campaign(HM60(), HM60Plan(), 7), Campaign(HM60(), HM60Plan(), 7), Campaign(HM60(), HM60Plan(), 8)
	for _, n := range a.Names() {
		if !bytes.Equal(a.Bytes(n), b.Bytes(n)) {
			t.Errorf("%s differs between two runs", n)
		}
		if bytes.Equal(a.Bytes(n), c.Bytes(n)) {
			t.Errorf("%s does not depend on the seed", n)
		}
	}
}

func TestFilesAreAFolder(t *testing.T) {
	files := Campaign(HM60(), HM60Plan(), 1)
	if err := fstest.TestFS(files, files.Names()...); err != nil {
		t.Error(err)
	}
	if _, err := fs.ReadFile(files, "absent.csv"); err == nil {
		t.Error("a file from nowhere")
	}
	other := files.With("isotherms.csv", []byte("x")).With("new.csv", []byte("y"))
	if string(other.Bytes("isotherms.csv")) != "x" || string(other.Bytes("new.csv")) != "y" || len(files.Bytes("isotherms.csv")) < 2 {
		t.Error("With does not replace, or changes the original")
	}
	if files.Bytes("absent.csv") != nil {
		t.Error("bytes from nowhere")
	}
}

func TestNoiselessIsExact(t *testing.T) {
	truth := HM60()
	files := Campaign(truth, HM60Plan().Noiseless(), 3)
	if bytes.Contains(files.Bytes(CampaignFile), []byte("uncertainty")) {
		t.Error("a noiseless plan states uncertainties")
	}
	for _, n := range []string{"isotherms.csv", "strain-sweeps.csv", "temperature-sweep.csv"} {
		_, table := rows(t, files.Bytes(n))
		for _, r := range table {
			g := truth.Modulus(r[0], r[1]+273.15, r[2]/100)
			near(t, n+" storage", r[3]*1e6, real(g), 1e-14)
			near(t, n+" loss", r[4]*1e6, imag(g), 1e-14)
		}
	}
	_, table := rows(t, files.Bytes("relaxation.csv"))
	for _, r := range table {
		near(t, "relaxation", r[3]*1e6, truth.Relaxation(r[0], r[1]+273.15, r[2]/100), 1e-14)
	}
}

// Every way of writing a modulus says the same.
func TestPairs(t *testing.T) {
	plan := IsothermPlan().Noiseless()
	_, want := rows(t, Campaign(HM60(), plan, 1).Bytes("isotherms.csv"))
	for _, pair := range []Pair{StorageLossFactor, MagnitudePhase} {
		plan.Tests[0].Pair = pair
		plan.Tests[0].OmitStrain = true
		heading, got := rows(t, Campaign(HM60(), plan, 1).Bytes("isotherms.csv"))
		if len(heading) != 4 {
			t.Errorf("heading %q", heading)
		}
		for i, r := range got {
			storage, loss := r[2], r[2]*r[3]
			if pair == MagnitudePhase {
				sin, cos := math.Sincos(r[3] * math.Pi / 180)
				storage, loss = r[2]*cos, r[2]*sin
			}
			near(t, "storage", storage, want[i][3], 1e-12)
			near(t, "loss", loss, want[i][4], 1e-12)
		}
	}
}

func TestDigits(t *testing.T) {
	plan := IsothermPlan()
	plan.Digits = 3
	_, table := rows(t, Campaign(HM60(), plan, 1).Bytes("isotherms.csv"))
	for _, r := range table {
		for _, x := range r {
			if y, _ := strconv.ParseFloat(strconv.FormatFloat(x, 'e', 2, 64), 64); y != x {
				t.Fatalf("%v has more than three digits", x)
			}
		}
	}
}

// What is drawn has the standard deviations of the plan, and acts on the
// moduli as it says. Seeds 1 to 300; the bars are four standard errors wide.
func TestErrorsHaveTheirSize(t *testing.T) {
	plan := HM60Plan().Only("isotherms", "strain sweeps")
	plan.Tests[0].Temperatures = []float64{0, 23}
	plan.Tests[0].Frequencies = []float64{1, 5}
	plan.Tests[1].Temperatures = []float64{23}
	plan.Tests[1].Strains = []float64{1}
	plan.Digits = 0
	truth := HM60()
	var common, phase, factor, scatter, magnitude, angle []float64
	for seed := uint64(1); seed <= 300; seed++ {
		files := Campaign(truth, plan, seed)
		d := files.Drawn
		if len(d.Factors) != 2 || len(d.Runs) != 3 {
			t.Fatalf("%d factors, %d runs", len(d.Factors), len(d.Runs))
		}
		common, phase = append(common, d.TemperatureCommon), append(phase, d.Phase*180/math.Pi)
		for _, f := range d.Factors {
			factor = append(factor, math.Log(f.Value))
		}
		for _, r := range d.Runs {
			scatter = append(scatter, r.Offset)
		}
		_, table := rows(t, files.Bytes("isotherms.csv"))
		for i, r := range table {
			kelvin := r[1] + 273.15 + d.TemperatureCommon + d.Runs[i/2].Offset
			g := truth.Modulus(r[0], kelvin, r[2]/100)
			magnitude = append(magnitude, math.Log(math.Hypot(r[3], r[4])*1e6/math.Hypot(real(g), imag(g))/d.Factors[0].Value))
			angle = append(angle, (math.Atan2(r[4], r[3])-math.Atan2(imag(g), real(g))-d.Phase)*180/math.Pi)
		}
	}
	for _, c := range []struct {
		name  string
		draws []float64
		want  float64
	}{
		{"common temperature", common, 0.2}, {"common phase", phase, 0.05}, {"factor", factor, 0.015},
		{"scatter", scatter, 0.3}, {"magnitude", magnitude, 0.005}, {"phase", angle, 0.3},
	} {
		mean, sd := stat.MeanStdDev(c.draws, nil)
		n := float64(len(c.draws))
		if math.Abs(mean) > 4*c.want/math.Sqrt(n) || math.Abs(sd/c.want-1) > 4/math.Sqrt(2*n) {
			t.Errorf("%s: mean %g, standard deviation %g, want 0 and %g", c.name, mean, sd, c.want)
		}
	}
}

// A noise on storage and loss acts on each alone, and one seed is one chance:
// halving a noise halves every deviation.
func TestStorageAndLossNoise(t *testing.T) {
	plan := IsothermPlan().Noiseless()
	_, exact := rows(t, Campaign(HM60(), plan, 5).Bytes("isotherms.csv"))
	deviations := func(n Noise) (storage, loss []float64) {
		plan.Tests[0].Noise = n
		_, table := rows(t, Campaign(HM60(), plan, 5).Bytes("isotherms.csv"))
		for i, r := range table {
			storage, loss = append(storage, r[3]/exact[i][3]-1), append(loss, r[4]/exact[i][4]-1)
		}
		return
	}
	s1, l1 := deviations(Noise{Storage: 0.01})
	s2, l2 := deviations(Noise{Storage: 0.005, Loss: 0.02})
	for i := range s1 {
		if math.Abs(s1[i]-2*s2[i]) > 1e-12 || l1[i] != 0 {
			t.Fatalf("row %d: %g, %g, %g", i, s1[i], s2[i], l1[i])
		}
	}
	if sd := stat.StdDev(l2, nil); math.Abs(sd-0.02) > 0.003 {
		t.Errorf("loss scatters by %g", sd)
	}
}

func TestPanicsSayWhy(t *testing.T) {
	for _, broken := range []Test{
		{Name: "a", Kind: FrequencySweep, Temperatures: []float64{23}, Frequencies: []float64{1}},
		{Name: "b", Kind: "no such kind"},
	} {
		func() {
			defer func() {
				if s, _ := recover().(string); !strings.HasPrefix(s, "demo: ") {
					t.Errorf("%s: recovered %q", broken.Name, s)
				}
			}()
			Campaign(Gum(), Plan{Tests: []Test{broken}}, 1)
		}()
	}
}

func TestLists(t *testing.T) {
	d := Decades(0.5, 50, 21)
	if len(d) != 21 || d[0] != 0.5 || d[20] != 50 || math.Abs(d[10]-5) > 1e-12 {
		t.Errorf("%v", d)
	}
	s := Steps(-40, 80, 10)
	if len(s) != 13 || s[12] != 80 {
		t.Errorf("%v", s)
	}
	for _, p := range []Plan{NarrowPlan(), LiquidPlan()} {
		if len(p.Tests) != 1 {
			t.Errorf("%s: %d tests", p.Title, len(p.Tests))
		}
	}
	if HM60Plan().Tests[0].Temperatures[0] != -40 {
		t.Error("a derived plan changed the demonstration's")
	}
}
