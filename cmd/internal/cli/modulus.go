package cli

import (
	"fmt"
	"math"

	"github.com/spf13/cobra"

	"phaselag/data/unit"
	"phaselag/models"
	"phaselag/reports"
	"phaselag/reports/table"
)

type modulusOptions struct {
	file                           string
	frequency, temperature, strain string
	extrapolate, curves            bool
	format                         string
}

func (a *app) modulusCmd() *cobra.Command {
	var o modulusOptions
	cmd := &cobra.Command{
		Use:   "modulus COMPOUND --frequency LIST --temperature LIST [--strain LIST]",
		Short: "Complex modulus with 95 % intervals at conditions, from the compound file alone",
		Long: `modulus answers at every combination of the listed conditions. A list has items
separated by commas; an item is a number, a:b:step or a:b:N/decade; the unit
stands once, last: 1:100:5/decade,200Hz or -20:60:10C or 0.5%.

A condition outside the domain is refused, with the reason and the nearest
allowed value, and the exit code is 1; --extrapolate answers and marks it.`,
		Example: `  phaselag modulus compound.yaml --frequency 1:100:5/decade,200Hz --temperature -20:60:10C --strain 0.5%`,
		Args:    exactly("COMPOUND"),
		RunE: func(_ *cobra.Command, args []string) error {
			o.file = args[0]
			return a.modulus(o)
		},
	}
	conditionFlags(cmd, &o.frequency, &o.temperature)
	cmd.Flags().StringVar(&o.strain, "strain", "", "strain amplitudes, zero to peak (default: the isotherms' own)")
	cmd.Flags().BoolVar(&o.extrapolate, "extrapolate", false, "answer outside the domain, marked")
	curvesFlag(cmd, &o.curves)
	formatFlag(cmd, &o.format)
	return cmd
}

func conditionFlags(cmd *cobra.Command, frequency, temperature *string) {
	cmd.Flags().StringVar(frequency, "frequency", "", "frequencies, for example 1:100:5/decade,200Hz (required)")
	cmd.Flags().StringVar(temperature, "temperature", "", "temperatures, for example -20:60:10C (required)")
}

// list parses a list of a flag.
func list(flag, text string, q unit.Quantity) ([]float64, error) {
	if text == "" {
		return nil, usagef("--%s is missing", flag)
	}
	v, err := unit.ParseList(text, q)
	if err != nil {
		return nil, hintedAt("--"+flag, err)
	}
	return v, nil
}

// conditionLists parses the lists that every answering command has.
func conditionLists(frequency, temperature string) (f, T []float64, err error) {
	if f, err = list("frequency", frequency, unit.Frequency); err != nil {
		return nil, nil, err
	}
	T, err = list("temperature", temperature, unit.Temperature)
	return f, T, err
}

// maxConditions bounds the answers of one call.
const maxConditions = 1_000_000

// conditions are all combinations of the lists of three flags, at the isotherms'
// own strain where there is none.
func conditions(frequency, temperature, strain string) ([]models.Condition, error) {
	f, T, err := conditionLists(frequency, temperature)
	if err != nil {
		return nil, err
	}
	strains := []float64{math.NaN()}
	if strain != "" {
		if strains, err = list("strain", strain, unit.Strain); err != nil {
			return nil, err
		}
	}
	if n := len(f) * len(T) * len(strains); n > maxConditions {
		return nil, usagef("%d conditions are more than %d", n, maxConditions)
	}
	var q []models.Condition
	for _, t := range T {
		for _, s := range strains {
			for _, v := range f {
				q = append(q, models.Condition{Frequency: v, Temperature: t, Strain: s})
			}
		}
	}
	return q, nil
}

func (a *app) modulus(o modulusOptions) error {
	q, err := conditions(o.frequency, o.temperature, o.strain)
	if err != nil {
		return err
	}
	c, err := models.Open(o.file)
	if err != nil {
		return err
	}
	t, outside, err := reports.ModulusTable(c, q, o.extrapolate)
	if err != nil {
		return err
	}
	if o.strain == "" {
		t.Assumptions = append(t.Assumptions, reports.OwnStrainNote(c))
	}
	if err := a.answer(t, o.format); err != nil {
		return err
	}
	if err := a.plot(o.curves, o.format, func(w int) error { return reports.PlotModulus(a.out, c, q, w) }); err != nil {
		return err
	}
	if outside > 0 {
		return errNo
	}
	return nil
}

// answer prints a table on stdout; assumptions go with it in JSON, and to
// stderr otherwise. On a terminal, long reasons stand below the table.
func (a *app) answer(t table.Table, format string) error {
	if table.Format(format) == table.JSON {
		return table.Write(a.out, table.JSON, t)
	}
	for _, s := range t.Assumptions {
		a.note(s)
	}
	t.Assumptions = nil
	if table.Format(format) != table.Terminal {
		return table.Write(a.out, table.Format(format), t)
	}
	t, reasons := reports.Footnotes(t)
	if err := table.Write(a.out, table.Terminal, t); err != nil {
		return err
	}
	for _, line := range reasons {
		if _, err := fmt.Fprintln(a.out, line); err != nil {
			return err
		}
	}
	return nil
}
