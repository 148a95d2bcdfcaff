package reports

import (
	"math"

	"phaselag/data/workbook"
	"phaselag/models"
	"phaselag/reports/table"
)

// RelaxationSeries lists the polymer term's relaxation times and moduli at a
// temperature, K, as they stand and normalised with the instantaneous modulus
// (G_e + Σ G_k) and with the long-time one (G_e). The first row, without a time, is
// the equilibrium.
func RelaxationSeries(c *models.Compound, kelvin float64) table.Table {
	s := symbol(c)
	t := table.Table{Name: "relaxation-series 1", Columns: []table.Column{
		{Key: "relaxation_time_s", Heading: "τ", Unit: "s"}, {Key: "modulus_MPa", Heading: s + "_k", Unit: "MPa"},
		{Key: "share_of_instantaneous", Heading: "of instantaneous"}, {Key: "share_of_long_time", Heading: "of long-time"},
	}, Assumptions: []string{
		"the polymer term at small strain alone; a filler term is no relaxation series and stands in the compound file",
		"the equilibrium modulus is a constant of the fit: the long-time modulus holds within the window of the measurements only",
	}}
	a := math.Pow(10, c.LogShift(kelvin))
	// b_T by the ratio of the polymer terms of a compound without filler.
	bare := *c
	bare.Amplitude.Law = models.AmplitudeNone
	b := 1.0
	if v, err := models.New(stripped(bare)); err == nil {
		T0 := c.ReferenceTempC + zeroC
		b = real(v.Value(models.Condition{Frequency: 1 / a, Temperature: kelvin, Strain: math.NaN()})) / real(v.Value(models.Condition{Frequency: 1, Temperature: T0, Strain: math.NaN()}))
	}
	equilibrium := c.Linear.Equilibrium * b
	all := equilibrium
	for _, k := range c.Linear.Branches {
		all += k.Modulus * b
	}
	long := func(g float64) table.Cell {
		if equilibrium <= 0 {
			return table.Number(math.NaN())
		}
		return table.Number(g / equilibrium)
	}
	t.Rows = append(t.Rows, []table.Cell{table.Number(math.NaN()), table.Number(equilibrium), table.Number(equilibrium / all), long(equilibrium)})
	for _, k := range c.Linear.Branches {
		g := k.Modulus * b
		t.Rows = append(t.Rows, []table.Cell{table.Number(k.Time * a), table.Number(g), table.Number(g / all), long(g)})
	}
	return t
}

// stripped is a compound without filler and covariance.
func stripped(c models.Compound) models.Compound {
	c.Amplitude = models.Amplitude{Law: models.AmplitudeNone, Coupling: models.Overlay, Frequency: models.RateIndependent}
	c.Uncertainty.Parameters, c.Uncertainty.Cholesky = nil, nil
	return c
}

// Workbook writes a table as a workbook of one sheet with the keys as headings.
func Workbook(t table.Table, sheet string) ([]byte, error) {
	var headings []string
	for _, c := range t.Columns {
		headings = append(headings, c.Key)
	}
	var rows [][]any
	for _, r := range t.Rows {
		var cells []any
		for _, c := range r {
			cells = append(cells, c.Value())
		}
		rows = append(rows, cells)
	}
	return workbook.Write(sheet, headings, rows)
}
