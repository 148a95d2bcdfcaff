package reports

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"phaselag/fitting"
	"phaselag/models"
	"phaselag/reports/table"
)

const zeroC = 273.15

// ModulusTable answers at every condition. A condition outside the domain
// keeps its row, without numbers and with the reason, unless extrapolate is
// set; outside counts such rows. An error is a condition that is none.
func ModulusTable(c *models.Compound, q []models.Condition, extrapolate bool) (t table.Table, outside int, err error) {
	s := symbol(c)
	t = table.Table{Name: "modulus 1", Columns: []table.Column{
		{Key: "frequency_Hz", Heading: "f", Unit: "Hz"}, {Key: "temperature_C", Heading: "T", Unit: "°C"}, {Key: "strain_amplitude_percent", Heading: "strain", Unit: "%"},
		{Key: "modulus"},
		{Key: "storage_MPa", Heading: s + "'", Unit: "MPa", Interval: "storage_U95_MPa"}, {Key: "loss_MPa", Heading: s + "''", Unit: "MPa", Interval: "loss_U95_MPa"},
		{Key: "magnitude_MPa", Heading: "|" + s + "*|", Unit: "MPa", Interval: "magnitude_U95_MPa"}, {Key: "loss_factor", Heading: "tan δ", Interval: "loss_factor_U95"},
		{Key: "storage_U95_MPa", Heading: "± " + s + "'", Unit: "MPa"}, {Key: "loss_U95_MPa", Heading: "± " + s + "''", Unit: "MPa"},
		{Key: "magnitude_U95_MPa", Heading: "± |" + s + "*|", Unit: "MPa"}, {Key: "loss_factor_U95", Heading: "± tan δ"},
		{Key: "domain"},
	}}
	for _, v := range q {
		m, err := c.Modulus(v)
		if extrapolate {
			m, err = c.Extrapolate(v)
		}
		var out *models.OutsideError
		row := []table.Cell{table.Number(v.Frequency), table.Number(celsius(v.Temperature)), table.Number(100 * ownStrain(c, v.Strain)), table.Text(c.ModulusKind)}
		switch {
		case errors.As(err, &out):
			outside++
			nan := table.Number(math.NaN())
			t.Rows = append(t.Rows, append(row, nan, nan, nan, nan, nan, nan, nan, nan, table.Text(out.Error())))
		case err != nil:
			return table.Table{}, 0, err
		default:
			mpa := func(x float64) table.Cell { return table.Number(x / 1e6) }
			t.Rows = append(t.Rows, append(row, mpa(m.Storage), mpa(m.Loss), mpa(m.Magnitude), table.Number(m.LossFactor),
				mpa(m.StorageU95), mpa(m.LossU95), mpa(m.MagnitudeU95), table.Number(m.LossFactorU95), table.Text(m.Domain)))
		}
	}
	return t, outside, nil
}

// celsius is the temperature in °C without the noise of the subtraction.
func celsius(T float64) float64 { return math.Round((T-zeroC)*1e9) / 1e9 }

func symbol(c *models.Compound) string {
	if c.ModulusKind == "young" {
		return "E"
	}
	return "G"
}

// ownStrain is the strain, or the isotherms' own where none was asked for.
func ownStrain(c *models.Compound, s float64) float64 {
	if math.IsNaN(s) {
		return float64(c.Domain.OwnStrain) / 100
	}
	return s
}

// propertyFrequencies are those of the property table, Hz (a set in common use
// for rubber mounts; common practice, no source).
var propertyFrequencies = []float64{1, 5, 10, 15, 30, 50, 100, 150, 200}

// Properties is the property table of the datasheet: the compound at the
// standard temperatures inside the domain and common frequencies, at the
// isotherms' own amplitude.
func Properties(r *fitting.Result) table.Table { return propertiesAt(r, propertyFrequencies) }

// sheetFrequencies are the few of them that a printed table has room for, Hz.
var sheetFrequencies = []float64{1, 10, 30, 100}

func propertiesAt(r *fitting.Result, frequencies []float64) table.Table {
	c := r.Compound
	temps := fitting.Preferred(c.Domain.Temperature[0], c.Domain.Temperature[1])
	if len(temps) == 0 {
		temps = []float64{c.ReferenceTempC}
	}
	var q []models.Condition
	for _, T := range temps {
		for _, f := range frequencies {
			v := models.Condition{Frequency: f, Temperature: T + zeroC, Strain: math.NaN()}
			if c.Inside(v) == nil {
				q = append(q, v)
			}
		}
	}
	t, _, err := ModulusTable(c, q, false)
	if err != nil { // every condition was found inside
		panic("reports: " + err.Error())
	}
	return t
}

// Footnotes replaces the reasons in the column "domain" of a table of answers by
// numbers, for a terminal, and gives the reasons as lines of at most 80 columns.
func Footnotes(t table.Table) (table.Table, []string) {
	last := slices.IndexFunc(t.Columns, func(c table.Column) bool { return c.Key == "domain" })
	if last < 0 {
		return t, nil
	}
	numbers := map[string]int{}
	var lines []string
	rows := make([][]table.Cell, len(t.Rows))
	texts := t.Strings()
	for i, row := range t.Rows {
		rows[i] = append([]table.Cell{}, row...)
		text := texts[i][last]
		reason, outside := strings.CutPrefix(text, "outside: ")
		if !outside {
			continue
		}
		n, seen := numbers[reason]
		if !seen {
			n = len(numbers) + 1
			numbers[reason] = n
			for k, l := range wrap(fmt.Sprintf("[%d] %s", n, reason), 76) {
				if k > 0 {
					l = "    " + l
				}
				lines = append(lines, l)
			}
		}
		rows[i][last] = table.Text(fmt.Sprintf("outside [%d]", n))
	}
	t.Rows = rows
	if len(lines) > 0 {
		lines = append([]string{""}, lines...)
	}
	return t, lines
}
