package screen

import (
	"bytes"
	"encoding/csv"
	"math"
	"slices"
	"strconv"
	"testing"

	"phaselag/data"
	"phaselag/data/demo"
)

// campaign makes what the reader would make of a simulated laboratory's files.
func campaign(t *testing.T, truth demo.Truth, plan demo.Plan, seed uint64) *data.Campaign {
	t.Helper()
	return read(t, plan, demo.Campaign(truth, plan, seed))
}

// read makes what the reader would make of a simulated laboratory's files, which
// may have been spoiled.
func read(t *testing.T, plan demo.Plan, files demo.Files) *data.Campaign {
	t.Helper()
	nan := math.NaN()
	c := &data.Campaign{Modulus: data.Shear, Uncertainty: data.Uncertainty{Phase: 1e-3, TemperatureScatter: plan.Errors.TemperatureScatter}}
	for _, s := range plan.Specimens {
		c.Specimens = append(c.Specimens, data.Specimen{
			Name: s.Name, Shape: "double shear", Diameter: s.Diameter / 1000, Width: nan, Length: nan, Thickness: s.Thickness / 1000,
			InnerDiameter: nan, Poisson: nan, Coefficient: nan, Bulk: nan, ShearFactor: nan,
		})
	}
	for _, p := range plan.Tests {
		test := data.Test{Name: p.Name, Kind: data.Kind(p.Kind), Files: []string{p.File}, Specimen: p.Specimen, Mounting: "1", Tested: p.Tested, Deformation: data.SimpleShear}
		if p.Mounting != "" {
			test.Mounting = p.Mounting
		}
		if p.Conditioning != "" {
			test.Conditioning = data.Conditioning{Cycles: 6, Strain: 0.2, Rest: 3600}
		}
		if p.Kind == demo.Static {
			c.Tests = append(c.Tests, test)
			continue
		}
		for _, q := range points(t, p, files.Bytes(p.File)) {
			n := len(test.Runs) - 1
			fresh := n < 0
			if !fresh {
				last := test.Runs[n].Points[0]
				switch p.Kind {
				// A jump from the run's mean temperature parts runs, as it does for the reader.
				case demo.FrequencySweep, demo.Relaxation:
					fresh = math.Abs(mean(temperaturesOf(test.Runs[n].Points))-q.Temperature) > 1
				case demo.StrainSweep:
					fresh = math.Abs(mean(temperaturesOf(test.Runs[n].Points))-q.Temperature) > 1 || last.Frequency != q.Frequency
				case demo.TemperatureSweep:
					fresh = last.Frequency != q.Frequency
				}
			}
			if fresh {
				r := data.Run{Name: p.Name + ", " + celsius(q.Temperature), Temperature: q.Temperature, Frequency: q.Frequency, Strain: q.Strain}
				switch p.Kind {
				case demo.FrequencySweep, demo.Relaxation:
					r.Frequency = math.NaN()
				case demo.StrainSweep:
					r.Strain = math.NaN()
				case demo.TemperatureSweep:
					r.Temperature = math.NaN()
				}
				test.Runs = append(test.Runs, r)
				n = len(test.Runs) - 1
			}
			test.Runs[n].Points = append(test.Runs[n].Points, q)
		}
		c.Tests = append(c.Tests, test)
	}
	return c
}

// points reads the rows of a simulated table.
func points(t *testing.T, p demo.Test, table []byte) (list []data.Point) {
	t.Helper()
	r := csv.NewReader(bytes.NewReader(table))
	r.Comment = '#'
	if _, err := r.Read(); err != nil {
		t.Fatal(err)
	}
	for {
		cells, err := r.Read()
		if err != nil {
			return list
		}
		x := make([]float64, len(cells))
		for i := range cells {
			if x[i], err = strconv.ParseFloat(cells[i], 64); err != nil {
				t.Fatal(err)
			}
		}
		line, _ := r.FieldPos(0)
		q := data.Point{
			File: p.File, Row: line, Used: true,
			Frequency: x[0], Temperature: x[1] + 273.15, Strain: x[2] / 100, Time: math.NaN(),
			Storage: x[3] * 1e6, Loss: math.NaN(), StatedLossFactor: math.NaN(),
			StatedViscosity: math.NaN(), MassShare: math.NaN(), FrameShare: math.NaN(),
		}
		if p.Kind == demo.Relaxation {
			q.Time, q.Frequency = x[0], math.NaN()
		} else {
			q.Loss = x[4] * 1e6
			if p.LossFactor {
				q.StatedLossFactor = x[5]
			}
		}
		q.Used = q.Storage > 0 && !(q.Loss <= 0)
		list = append(list, q)
	}
}

// isothermsOf is a campaign of isotherms alone.
func isothermsOf(t *testing.T, truth demo.Truth, celsius, hertz []float64) *data.Campaign {
	plan := demo.IsothermPlan()
	plan.Tests[0].Temperatures, plan.Tests[0].Frequencies = celsius, hertz
	return campaign(t, truth, plan, 1)
}

// each calls f on every point of a test.
func each(test *data.Test, f func(*data.Point)) {
	for i := range test.Runs {
		for j := range test.Runs[i].Points {
			f(&test.Runs[i].Points[j])
		}
	}
}

// codes returns the codes found, each once, in the order found.
func codes(list []data.Finding) (found []string) {
	for _, f := range list {
		if !slices.Contains(found, f.Code) {
			found = append(found, f.Code)
		}
	}
	return found
}

// find returns the first finding with a code, and fails the test without one.
func find(t *testing.T, list []data.Finding, code string) data.Finding {
	t.Helper()
	for _, f := range list {
		if f.Code == code {
			if f.Evidence == "" || f.Cause == "" || f.Remedy == "" || f.Severity == "" {
				t.Errorf("%s is incomplete: %+v", code, f)
			}
			return f
		}
	}
	t.Errorf("%s was not found; found %v", code, codes(list))
	return data.Finding{}
}

// clean fails the test for any finding but those named.
func clean(t *testing.T, what string, list []data.Finding, but ...string) {
	t.Helper()
	for _, f := range list {
		if !slices.Contains(but, f.Code) {
			t.Errorf("%s: %s %s: %s", what, f.Code, f.Rows, f.Evidence)
		}
	}
}
