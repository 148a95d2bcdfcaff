package reports

import (
	"math"
	"math/cmplx"
	"strings"
	"testing"

	"phaselag/models"
	"phaselag/models/mount"
)

func readMount(t *testing.T, text string) *mount.Mount {
	t.Helper()
	m, err := mount.Read("mount.yaml", strings.NewReader(text))
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// column finds a number of a row by its key.
func column(t *testing.T, c *models.Compound, m *mount.Mount, q, ref StiffnessQuery, key string) float64 {
	t.Helper()
	tab, outside, err := StiffnessTable(c, m, []StiffnessQuery{q}, ref, false)
	if err != nil || outside != 0 {
		t.Fatalf("%v, %d outside: %v", err, outside, tab.Strings())
	}
	for i, col := range tab.Columns {
		if col.Key == key {
			return tab.Rows[0][i].Float()
		}
	}
	t.Fatalf("no column %s", key)
	return 0
}

func near(t *testing.T, what string, got, want, relative float64) {
	t.Helper()
	if !(math.Abs(got-want) <= relative*math.Abs(want)) {
		t.Errorf("%s is %.9g, want %.9g", what, got, want)
	}
}

// TestShearPadStiffness: K* = n·G*A/t at the strain x/t (simple shear, exact),
// with the relative interval of G*; a part factor's uncertainty is added to the
// stiffness and cancels in the ratio, and so does the specimens' geometry.
func TestShearPadStiffness(t *testing.T) {
	c := demoResult(t, 3).Compound
	m := readMount(t, "elements:\n  pad: {shape: shear pad, area: 1200 mm2, thickness: 12 mm}\narrangement: pad\ncount: 4\nexcitation: {displacement: 0.06 mm}\n")
	q := StiffnessQuery{Frequency: 15, Temperature: 263.15, Displacement: math.NaN()}
	ref := StiffnessQuery{Frequency: 10, Temperature: 296.15, Displacement: math.NaN()}
	cond := models.Condition{Frequency: 15, Temperature: 263.15, Strain: 0.005}
	g, err := c.Modulus(cond)
	if err != nil {
		t.Fatal(err)
	}
	scale := 4 * 1200e-6 / 0.012 / 1e3 // N/mm per Pa
	near(t, "K'", column(t, c, m, q, ref, "storage_N_per_mm"), scale*g.Storage, 1e-12)
	near(t, "K''", column(t, c, m, q, ref, "loss_N_per_mm"), scale*g.Loss, 1e-12)
	near(t, "U95 of K'", column(t, c, m, q, ref, "storage_U95_N_per_mm"), scale*g.StorageU95, 1e-9)
	near(t, "U95 of the loss factor", column(t, c, m, q, ref, "loss_factor_U95"), g.LossFactorU95, 1e-9)
	near(t, "strain", column(t, c, m, q, ref, "strain_amplitude_percent"), 0.5, 1e-12)
	ratio, u, _ := c.Ratio(cond, models.Condition{Frequency: 10, Temperature: 296.15, Strain: 0.005})
	near(t, "ratio", column(t, c, m, q, ref, "ratio_to_reference"), cmplx.Abs(ratio), 1e-12)
	near(t, "U95 of the ratio", column(t, c, m, q, ref, "ratio_U95"), u, 1e-9)
	if rel := u / cmplx.Abs(ratio); rel > 0.6*g.MagnitudeU95/g.Magnitude {
		t.Errorf("the ratio's interval %.3f is not much narrower than the stiffness's %.3f", rel, g.MagnitudeU95/g.Magnitude)
	}

	uncertain := readMount(t, "elements:\n  pad: {shape: shear pad, area: 1200 mm2, thickness: 12 mm}\narrangement: pad\ncount: 4\nexcitation: {displacement: 0.06 mm}\npart_factor: {value: 1.1, u: 5 %}\n")
	k := column(t, c, uncertain, q, ref, "magnitude_N_per_mm")
	near(t, "|K*| with a part factor", k, 1.1*scale*g.Magnitude, 1e-12)
	want := math.Hypot(1.1*scale*g.MagnitudeU95, c.Quantile()*0.05*k)
	near(t, "its U95", column(t, c, uncertain, q, ref, "magnitude_U95_N_per_mm"), want, 1e-9)
	near(t, "the ratio's U95 beside it", column(t, c, uncertain, q, ref, "ratio_U95"), u, 1e-9)
}

// TestMeasuredStiffness: a measured element has its own stiffness at its own
// condition, and follows the compound elsewhere: K*(c) = K*(c0)·G*(c)/G*(c0).
func TestMeasuredStiffness(t *testing.T) {
	c := demoResult(t, 3).Compound
	m := readMount(t, `
elements:
  bush: {measured: {stiffness: 420 N/mm, part: magnitude, loss_factor: 0.12, frequency: 15 Hz, temperature: 23 °C, amplitude: 0.5 mm, u: 3 %}, strain_per_displacement: 4 %/mm}
arrangement: bush
excitation: {displacement: 0.5 mm}
`)
	ref := StiffnessQuery{Frequency: 15, Temperature: 296.15, Displacement: 0.0005}
	near(t, "|K*| as measured", column(t, c, m, ref, ref, "magnitude_N_per_mm"), 420, 1e-12)
	near(t, "loss factor as measured", column(t, c, m, ref, ref, "loss_factor"), 0.12, 1e-12)
	near(t, "its U95", column(t, c, m, ref, ref, "magnitude_U95_N_per_mm"), c.Quantile()*0.03*420, 1e-6)
	q := StiffnessQuery{Frequency: 25, Temperature: 253.15, Displacement: 0.00005}
	ratio, u, _ := c.Ratio(models.Condition{Frequency: 25, Temperature: 253.15, Strain: 0.002}, models.Condition{Frequency: 15, Temperature: 296.15, Strain: 0.02})
	near(t, "|K*| elsewhere", column(t, c, m, q, ref, "magnitude_N_per_mm"), 420*cmplx.Abs(ratio), 1e-12)
	near(t, "ratio", column(t, c, m, q, ref, "ratio_to_reference"), cmplx.Abs(ratio), 1e-12)
	near(t, "U95 of the ratio", column(t, c, m, q, ref, "ratio_U95"), u, 1e-9)
}

// TestStiffnessOutside keeps the conditions and drops the numbers.
func TestStiffnessOutside(t *testing.T) {
	c := demoResult(t, 3).Compound
	m := readMount(t, "elements:\n  pad: {shape: shear pad, area: 1200 mm2, thickness: 12 mm}\narrangement: pad\nexcitation: {displacement: 0.06 mm}\n")
	ref := StiffnessQuery{Frequency: 10, Temperature: 296.15, Displacement: math.NaN()}
	q := ref
	q.Temperature = 200
	tab, outside, err := StiffnessTable(c, m, []StiffnessQuery{q}, ref, false)
	if err != nil || outside != 1 || !strings.HasPrefix(tab.Strings()[0][len(tab.Columns)-1], "outside: ") {
		t.Errorf("%v, %d, %v", err, outside, tab.Strings())
	}
	if _, _, err := StiffnessTable(c, readMount(t, "elements:\n  pad: {shape: shear pad, area: 1200 mm2, thickness: 12 mm}\n"), []StiffnessQuery{ref}, ref, false); err == nil {
		t.Error("no amplitude, and no error")
	}
	static, err := StaticTable(c, m, StaticChoice{})
	if err != nil || len(static.Rows) != 2 {
		t.Fatalf("%v: %v", err, static.Rows)
	}
	near(t, "static stiffness", static.Rows[0][4].Float(), c.Static[0].Modulus*1e6*1200e-6/0.012/1e3, 1e-9)
}
