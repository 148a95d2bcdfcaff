package screen

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"phaselag/data"
)

// records reads a table of the reference data, which the project does not hold.
func records(t *testing.T, name ...string) (column map[string]int, list [][]string) {
	t.Helper()
	f, err := os.Open(filepath.Join(append([]string{"..", "..", "..", "shared", "data"}, name...)...))
	if err != nil {
		t.Skip("the reference data are not here")
	}
	defer f.Close()
	all, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	column = map[string]int{}
	for i, h := range all[0] {
		column[h] = i
	}
	return column, all[1:]
}

func number(t *testing.T, s string) float64 {
	t.Helper()
	x, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return x
}

// A foam in compression at 10 rad/s, −30 to 60 °C (A. K. Landauer et al.,
// Materials & Design (2023) 112381; data doi 10.18434/mds2-2989, NIST): its
// moduli at −30 and −25 °C lie below that at −20 °C, and its first readings at
// 25 to 40 °C, taken while it cools, creep.
func TestFoam(t *testing.T) {
	column, list := records(t, "foam-temperature-steps", "temperature-steps.csv")
	run := data.Run{Name: "steps", Temperature: math.NaN(), Frequency: 10 / (2 * math.Pi), Strain: math.NaN()}
	for i, r := range list {
		if r[column["dose_group"]] != "0DA" {
			continue
		}
		x := func(h string) float64 { return number(t, r[column[h]]) }
		run.Points = append(run.Points, data.Point{
			File: "temperature-steps.csv", Row: i + 2, Used: true,
			Frequency: 10 / (2 * math.Pi), Temperature: x("temperature_C") + 273.15, Strain: x("strain_percent") / 100, Time: math.NaN(),
			Storage: x("storage_modulus_MPa") * 1e6, Loss: x("loss_modulus_MPa") * 1e6, StatedLossFactor: x("tan_delta"),
		})
	}
	c := &data.Campaign{Modulus: data.Young, Uncertainty: data.Uncertainty{Phase: math.NaN()},
		Tests: []data.Test{{Name: "steps", Kind: data.TemperatureSweep, Runs: []data.Run{run}}}}
	found := Check(c)
	f := find(t, found, "softer-when-colder")
	if !strings.HasPrefix(f.Evidence, "at −30 °C, −25 °C the material") {
		t.Errorf("%s", f.Evidence)
	}
	find(t, found, "modulus-drifts")
	find(t, found, "one-frequency-only")
	clean(t, "foam", found, "softer-when-colder", "modulus-drifts", "one-frequency-only", "strain-not-constant", "phase-uncertainty-not-stated")
}

// Five asphalt binders, with loss angles up to 90° (US FHWA): they are liquids,
// not rubbers with exchanged columns. What is found is in the numbers: strain
// that starts low, and replicates that differ.
func TestBinders(t *testing.T) {
	column, list := records(t, "binder-sweeps", "frequency-sweeps.csv")
	tests := map[string]*data.Test{}
	var order []string
	runs := map[string]int{} // a replicate's rows stand apart
	for i, r := range list {
		x := func(h string) float64 { return number(t, r[column[h]]) }
		lane := r[column["lane_condition"]]
		if tests[lane] == nil {
			tests[lane] = &data.Test{Name: lane, Kind: data.FrequencySweep}
			order = append(order, lane)
		}
		test := tests[lane]
		kelvin := x("temperature_C") + 273.15
		key := lane + ";" + r[column["rep"]] + ";" + r[column["temperature_C"]]
		if _, ok := runs[key]; !ok {
			runs[key] = len(test.Runs)
			test.Runs = append(test.Runs, data.Run{Name: celsius(kelvin) + ", " + r[column["rep"]], Temperature: kelvin, Frequency: math.NaN(), Strain: math.NaN()})
		}
		run := &test.Runs[runs[key]]
		run.Points = append(run.Points, data.Point{
			File: "frequency-sweeps.csv", Row: i + 2, Used: true,
			Frequency: x("angular_frequency_rad_s") / (2 * math.Pi), Temperature: kelvin, Strain: x("strain_percent") / 100, Time: math.NaN(),
			Storage: x("storage_modulus_Pa"), Loss: x("loss_modulus_Pa"), StatedLossFactor: math.NaN(),
		})
	}
	for _, lane := range order {
		c := &data.Campaign{Modulus: data.Shear, Tests: []data.Test{*tests[lane]}}
		clean(t, lane, Check(c), "strain-not-constant", "repeats-disagree", "isotherms-barely-overlap")
	}
}
