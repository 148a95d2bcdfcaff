package reports

import (
	"encoding/xml"
	"errors"
	"flag"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"sync"
	"testing"

	"phaselag/data"
	"phaselag/data/demo"
	"phaselag/data/unit"
	"phaselag/fitting"
	"phaselag/models"
	"phaselag/reports/figure"
)

var lookAt = flag.String("look", "", "write the figures of the tests to this folder, to be looked at")

// look checks what every figure must keep, and writes it where it was asked for.
func look(t *testing.T, name string, f figure.Figure) string {
	t.Helper()
	b, err := figure.SVG(f)
	if err != nil {
		t.Fatal(err)
	}
	text := string(b)
	d := xml.NewDecoder(strings.NewReader(text))
	for {
		if _, err := d.Token(); errors.Is(err, io.EOF) {
			break
		} else if err != nil {
			t.Fatalf("%s: not well-formed: %v", name, err)
		}
	}
	for _, bad := range []string{"NaN", "Inf", "%!", "no data"} {
		if strings.Contains(text, bad) {
			t.Errorf("%s holds %q", name, bad)
		}
	}
	if raw := regexp.MustCompile(`>[^<]*[0-9]e[+-]?[0-9][^<]*<`).FindString(text); raw != "" {
		t.Errorf("%s has a raw exponent: %s", name, raw)
	}
	again, _ := figure.SVG(f)
	if string(again) != text {
		t.Errorf("%s: two runs differ", name)
	}
	if *lookAt != "" {
		if err := os.WriteFile(filepath.Join(*lookAt, name+".svg"), b, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	return text
}

var filledOnce = sync.OnceValue(func() *models.Compound {
	c, err := data.OpenFS(demo.Campaign(demo.HM60(), demo.HM60Plan(), 3), "campaign.yaml")
	if err != nil {
		return nil
	}
	r, err := fitting.Characterize(c, &fitting.Settings{Replicates: 19})
	if err != nil {
		return nil
	}
	return r.Compound
})

// filled is the compound of a simulated campaign, made once.
func filled(t *testing.T) *models.Compound {
	t.Helper()
	c := filledOnce()
	if c == nil {
		t.Fatal("the simulated campaign gives no compound")
	}
	return c
}

// damper is an invented unfilled compound whose glass transition lies inside its
// domain: a wedge of relaxation times that ends in a glass at 1 ns at 23 °C.
func damper(t *testing.T) *models.Compound {
	t.Helper()
	nan := unit.NaN()
	c := models.Compound{
		Format: 1, Compound: models.Identity{Name: "invented damper", Density: nan}, ModulusKind: "shear", PoissonRatio: 0.5,
		Strain: models.StrainNote{Measure: "shear", Amplitude: "zero to peak"}, State: models.State{StaticPercent: nan},
		ReferenceTempC: 23, Linear: models.Linear{Equilibrium: 0.7},
		Shift:     models.Shift{Law: models.LawWLF, C1: 7.5, C2: 120, Activation: nan},
		Vertical:  models.Vertical{Law: models.VerticalNone, Expansion: nan},
		Amplitude: models.Amplitude{Law: models.AmplitudeNone, Coupling: models.Overlay, Storage: nan, Loss: nan, Critical: nan, Exponent: nan, Activation: nan, Frequency: models.RateIndependent, ReferenceFrequency: nan},
		Domain:    models.Domain{Temperature: models.Range{-50, 70}, ReducedFrequency: models.Range{0.003, 1e11}, Strain: &models.Range{0.05, 0.2}, OwnStrain: 0.1},
		Fit:       models.Fit{Points: 300, SigmaMagnitude: 0.5, SigmaPhase: 0.3, Superposition: models.Superposition{Holds: models.HoldsYes, P: nan, MisfitDeg: nan, MisfitPercent: nan}},
		Uncertainty: models.Uncertainty{Coverage: 0.95, DegreesOfFreedom: 200,
			Parameters: []string{"shift.c1", "shift.c2_K", models.ParamSpecimen, models.ParamTemperature},
			Cholesky:   []models.Row{{0.15}, {2.5, 0.8}, {0, 0, 0.02}, {0, 0, 0, 0.3}}},
	}
	for k := -33; k <= 6; k++ {
		tau := math.Pow(10, float64(k)/3)
		c.Linear.Branches = append(c.Linear.Branches, models.Branch{Time: tau, Modulus: 260 / (1 + math.Pow(tau/1e-9, 0.62))})
		c.Uncertainty.Parameters = append(c.Uncertainty.Parameters, fmt.Sprintf("linear.branches.%d.modulus_MPa", k+33))
		row := make(models.Row, len(c.Uncertainty.Parameters))
		row[len(row)-1] = 0.03 * c.Linear.Branches[k+33].Modulus
		c.Uncertainty.Cholesky = append(c.Uncertainty.Cholesky, row)
	}
	out, err := models.New(c)
	if err != nil {
		t.Fatal(err)
	}
	return out
}
