package cli

import (
	"bytes"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"phaselag/data/unit"
	"phaselag/models"
	"phaselag/models/mount"
	"phaselag/reports"
	"phaselag/reports/table"
)

type exportOptions struct {
	file, as, out                  string
	frequency, temperature, strain string
	mount, amplitude, accuracy     string
}

func (a *app) exportCmd() *cobra.Command {
	var o exportOptions
	cmd := &cobra.Command{
		Use:   "export COMPOUND --as grid|relaxation|c|state-space [--out FILE]",
		Short: "The compound for other tools: a grid, a relaxation series, C source, state space",
		Long: `export writes the compound for the sizing step and the tools beyond:

  grid        modulus with intervals at every combination of --frequency,
              --temperature and --strain, as CSV, or as a workbook where --out ends
              with .xlsx; a condition outside the domain has no numbers
  relaxation  relaxation times and moduli of the polymer term at one --temperature
              (default: the reference), also normalised with the instantaneous and
              with the long-time modulus, as CSV
  c           a C99 source file without dependencies that evaluates the compound
  state-space a linear model of the mount in --mount at one --temperature and
              --amplitude over the span of --frequency: matrices A, B, C and D from
              displacement to force, of the least order that keeps --accuracy, as JSON

Without --out the answer goes to standard output.`,
		Example: `  phaselag export compound.yaml --as grid --frequency 1:100:5/decade,200Hz --temperature -20:60:10C --out grid.xlsx
  phaselag export compound.yaml --as c --out compound.c
  phaselag export compound.yaml --as state-space --mount sifter.yaml --temperature 23C --frequency 2,40Hz`,
		Args: exactly("COMPOUND"),
		RunE: func(_ *cobra.Command, args []string) error {
			o.file = args[0]
			return a.export(o)
		},
	}
	cmd.Flags().Var(choice{&o.as, []string{"grid", "relaxation", "c", "state-space"}}, "as", "grid, relaxation, c or state-space (required)")
	cmd.Flags().StringVar(&o.out, "out", "", "file to write; an existing one is replaced as a whole")
	conditionFlags(cmd, &o.frequency, &o.temperature)
	cmd.Flags().StringVar(&o.strain, "strain", "", "strain amplitudes of a grid, zero to peak (default: the isotherms' own)")
	cmd.Flags().StringVar(&o.mount, "mount", "", "mount file of a state-space model")
	cmd.Flags().StringVar(&o.amplitude, "amplitude", "", "displacement amplitude of a state-space model, zero to peak (default: the mount file's excitation)")
	cmd.Flags().StringVar(&o.accuracy, "accuracy", "2%", "greatest error of a state-space model's stiffness")
	return cmd
}

func (a *app) export(o exportOptions) error {
	c, err := models.Open(o.file)
	if err != nil {
		return err
	}
	var content []byte
	outside := 0
	switch o.as {
	case "c":
		content, err = reports.CSource(c)
	case "relaxation":
		content, err = a.exportRelaxation(c, o)
	case "grid":
		content, outside, err = a.exportGrid(c, o)
	case "state-space":
		content, err = a.exportStateSpace(c, o)
	default:
		return usagef("--as is missing: grid, relaxation, c or state-space")
	}
	if err != nil {
		return err
	}
	if o.out == "" {
		_, err = a.out.Write(content)
	} else {
		err = writeWhole(o.out, content)
	}
	if err == nil && outside > 0 {
		return errNo
	}
	return err
}

func (a *app) exportRelaxation(c *models.Compound, o exportOptions) ([]byte, error) {
	T := c.ReferenceTempC + 273.15
	if o.temperature != "" {
		list, err := list("temperature", o.temperature, unit.Temperature)
		if err != nil {
			return nil, err
		}
		if len(list) != 1 {
			return nil, usagef("a relaxation series holds at one temperature")
		}
		T = list[0]
	}
	t := reports.RelaxationSeries(c, T)
	return a.asCSV(t)
}

func (a *app) exportStateSpace(c *models.Compound, o exportOptions) ([]byte, error) {
	if o.mount == "" {
		return nil, usagef("--mount is missing")
	}
	f, T, err := conditionLists(o.frequency, o.temperature)
	if err != nil {
		return nil, err
	}
	if len(T) != 1 {
		return nil, usagef("a state-space model holds at one temperature")
	}
	lo, hi := slices.Min(f), slices.Max(f)
	if !(hi > lo) {
		return nil, usagef("a state-space model needs a span of frequencies: --frequency 2,40Hz")
	}
	x := math.NaN()
	if o.amplitude != "" {
		if x, err = unit.Parse(o.amplitude, unit.Length); err != nil {
			return nil, hintedAt("--amplitude", err)
		}
	}
	accuracy, err := unit.Parse(o.accuracy, unit.Relative)
	if err != nil {
		return nil, hintedAt("--accuracy", err)
	}
	if !(accuracy > 1e-6 && accuracy < 0.5) {
		return nil, usagef("--accuracy must lie between 0.0001 %% and 50 %%")
	}
	m, err := mount.Open(o.mount)
	if err != nil {
		return nil, err
	}
	s, err := reports.StateSpaceModel(c, m, T[0], x, lo, hi, accuracy)
	if err != nil {
		return nil, err
	}
	return s.JSON()
}

func (a *app) exportGrid(c *models.Compound, o exportOptions) ([]byte, int, error) {
	q, err := conditions(o.frequency, o.temperature, o.strain)
	if err != nil {
		return nil, 0, err
	}
	t, outside, err := reports.ModulusTable(c, q, false)
	if err != nil {
		return nil, 0, err
	}
	if o.strain == "" {
		t.Assumptions = append(t.Assumptions, reports.OwnStrainNote(c))
	}
	if strings.EqualFold(filepath.Ext(o.out), ".xlsx") {
		for _, s := range t.Assumptions {
			a.note(s)
		}
		b, err := reports.Workbook(t, "modulus")
		return b, outside, err
	}
	b, err := a.asCSV(t)
	return b, outside, err
}

// asCSV writes a table as CSV; its assumptions are said on standard error.
func (a *app) asCSV(t table.Table) ([]byte, error) {
	for _, s := range t.Assumptions {
		a.note(s)
	}
	t.Assumptions = nil
	var b bytes.Buffer
	err := table.Write(&b, table.CSV, t)
	return b.Bytes(), err
}

// writeWhole replaces a file as a whole: written beside, synced, renamed.
func writeWhole(name string, content []byte) error {
	f, err := os.CreateTemp(filepath.Dir(name), ".phaselag-*")
	if err != nil {
		return err
	}
	defer os.Remove(f.Name())
	_, err = f.Write(content)
	if err == nil {
		err = f.Sync()
	}
	if cerr := f.Close(); err == nil {
		err = cerr
	}
	if err == nil {
		err = os.Chmod(f.Name(), 0o644)
	}
	if err == nil {
		err = os.Rename(f.Name(), name)
	}
	return err
}
