package cli

import (
	"fmt"
	"math"
	"slices"

	"github.com/spf13/cobra"

	"phaselag/data/unit"
	"phaselag/models"
	"phaselag/models/mount"
	"phaselag/reports"
	"phaselag/reports/figure"
	"phaselag/reports/table"
	"phaselag/reports/term"
)

type stiffnessOptions struct {
	file, mount                       string
	frequency, temperature, amplitude string
	reference                         [2]string
	extrapolate                       bool
	static                            staticOptions
	pictures                          string
	curves                            bool
	format                            string
}

func (a *app) stiffnessCmd() *cobra.Command {
	var o stiffnessOptions
	cmd := &cobra.Command{
		Use:   "stiffness COMPOUND --mount MOUNT --frequency LIST --temperature LIST",
		Short: "Dynamic stiffness and loss factor of a mount at conditions, with 95 % intervals",
		Long: `stiffness turns the compound into the dynamic stiffness of the mount in a mount
file, at every combination of frequency, temperature and displacement amplitude
(zero to peak; default: the mount file's excitation). The ratio is that of |K*|
to the reference condition; its interval comes from the joint covariance, in
which geometry cancels.

Numbers are for the tested compound and an idealised part. Design of supports
that people depend on stays with a qualified engineer and the codes in force.`,
		Example: `  phaselag stiffness compound.yaml --mount sifter.yaml --frequency 4:30:2Hz --temperature -20,23,60C`,
		Args:    exactly("COMPOUND"),
		RunE: func(_ *cobra.Command, args []string) error {
			o.file = args[0]
			return a.stiffness(o)
		},
	}
	cmd.Flags().StringVar(&o.mount, "mount", "", "mount file (required)")
	conditionFlags(cmd, &o.frequency, &o.temperature)
	cmd.Flags().StringVar(&o.amplitude, "amplitude", "", "displacement amplitudes, zero to peak (default: the mount file's excitation)")
	cmd.Flags().StringVar(&o.reference[0], "reference-frequency", "", "frequency of the reference condition (default: that of a measured element, else the first listed)")
	cmd.Flags().StringVar(&o.reference[1], "reference-temperature", "", "temperature of the reference condition (default: that of a measured element, else the compound's reference temperature)")
	cmd.Flags().BoolVar(&o.extrapolate, "extrapolate", false, "answer outside the domain, marked")
	o.static.flags(cmd)
	cmd.Flags().StringVar(&o.pictures, "pictures", "", "write NAME-curves.svg, NAME-stiffness-map.svg and NAME-loss-map.svg over the span of --frequency and --temperature")
	curvesFlag(cmd, &o.curves)
	formatFlag(cmd, &o.format)
	return cmd
}

// spanOf is the span of the asked conditions, at the first amplitude.
func spanOf(f, T, x []float64) reports.Spread {
	where := reports.AnySpread()
	if lo, hi := slices.Min(f), slices.Max(f); lo < hi {
		where.Low, where.High = lo, hi
	}
	if lo, hi := slices.Min(T), slices.Max(T); lo < hi {
		where.Cold, where.Warm = lo, hi
	}
	where.Displacement = x[0]
	return where
}

// draw writes the mount's pictures.
func (a *app) draw(c *models.Compound, m *mount.Mount, o stiffnessOptions, f, T, x []float64) error {
	where := spanOf(f, T, x)
	for _, v := range []struct {
		name string
		make func() (figure.Figure, string, error)
	}{
		{"curves", func() (figure.Figure, string, error) { return reports.StiffnessCurves(c, m, T, where) }},
		{"stiffness-map", func() (figure.Figure, string, error) { return reports.StiffnessMap(c, m, reports.MapStiffness, where) }},
		{"loss-map", func() (figure.Figure, string, error) { return reports.StiffnessMap(c, m, reports.MapLossFactor, where) }},
	} {
		fig, caption, err := v.make()
		if err != nil {
			return err
		}
		svg, err := figure.SVG(fig)
		if err != nil {
			return err
		}
		name := o.pictures + "-" + v.name + ".svg"
		if err := writeWhole(name, svg); err != nil {
			return err
		}
		fmt.Fprintf(a.err, "written: %s: %s\n", name, caption)
	}
	return nil
}

// staticOptions choose where a static modulus comes from if no test has it.
type staticOptions struct {
	model, table string
}

func (o *staticOptions) flags(cmd *cobra.Command) {
	cmd.Flags().StringVar(&o.model, "static-model", "", "static modulus from the model's relaxation at this time where no test has it, marked: 1h")
	cmd.Flags().StringVar(&o.table, "hardness-table", "", "static modulus from a handbook table where neither test nor model has it: Lindley or Gent")
}

func (o staticOptions) choice(c *models.Compound) (out reports.StaticChoice, err error) {
	if o.model != "" {
		if out.ModelTime, err = unit.Parse(o.model, unit.Time); err != nil {
			return out, hintedAt("--static-model", err)
		}
		if !(out.ModelTime > 0) {
			return out, usagef("--static-model must be a time greater than zero")
		}
	}
	if o.table != "" {
		out.Table = mount.Table(o.table)
		if out.Table != mount.Lindley && out.Table != mount.Gent {
			return out, usagef("--hardness-table is Lindley or Gent")
		}
		if out.Hardness, err = unit.Parse(c.Compound.Hardness, unit.Hardness); err != nil {
			return out, usagef("--hardness-table needs the compound's hardness, which is not stated")
		}
	}
	return out, nil
}

// amplitudes reads displacements, or angles of a mount that rotates.
func amplitudes(m *mount.Mount, text string) ([]float64, error) {
	if text == "" {
		return []float64{math.NaN()}, nil
	}
	if m.Rotates() {
		return list("amplitude", text, unit.Angle)
	}
	return list("amplitude", text, unit.Length)
}

func (a *app) stiffness(o stiffnessOptions) error {
	if o.mount == "" {
		return usagef("--mount is missing")
	}
	f, T, err := conditionLists(o.frequency, o.temperature)
	if err != nil {
		return err
	}
	c, err := models.Open(o.file)
	if err != nil {
		return err
	}
	m, err := mount.Open(o.mount)
	if err != nil {
		return err
	}
	x, err := amplitudes(m, o.amplitude)
	if err != nil {
		return err
	}
	choice, err := o.static.choice(c)
	if err != nil {
		return err
	}
	m, notes, err := reports.UnderLoad(c, m, choice)
	if err != nil {
		return err
	}
	ref, err := o.referenceOf(c, m, f[0])
	if err != nil {
		return err
	}
	var q []reports.StiffnessQuery
	for _, t := range T {
		for _, v := range x {
			for _, hz := range f {
				q = append(q, reports.StiffnessQuery{Frequency: hz, Temperature: t, Displacement: v})
			}
		}
	}
	if o.pictures != "" {
		if err := a.draw(c, m, o, f, T, x); err != nil {
			return err
		}
	}
	t, outside, err := reports.StiffnessTable(c, m, q, ref, o.extrapolate)
	if err != nil {
		return err
	}
	t.Assumptions = append(append(t.Assumptions, notes...), fmt.Sprintf("ratios are to %.4g Hz and %.4g °C", ref.Frequency, ref.Temperature-273.15))
	if err := a.answer(t, o.format); err != nil {
		return err
	}
	if table.Format(o.format) == table.Terminal {
		if err := a.static(c, m, choice); err != nil {
			return err
		}
		if err := a.heat(c, m, q); err != nil {
			return err
		}
	}
	err = a.plot(o.curves, o.format, func(w int) error {
		return reports.PlotStiffness(a.out, c, m, reports.MapStiffness, T[:min(len(T), term.MostSeries)], spanOf(f, T, x), w)
	})
	if err != nil {
		return err
	}
	if outside > 0 {
		return errNo
	}
	return nil
}

// heat writes how warm the mount gets, where its file has a thermal resistance.
func (a *app) heat(c *models.Compound, m *mount.Mount, q []reports.StiffnessQuery) error {
	t, err := reports.HeatTable(c, m, q)
	if err != nil || len(t.Rows) == 0 {
		return err
	}
	for _, note := range t.Assumptions {
		a.note(note)
	}
	t.Assumptions = nil
	fmt.Fprintln(a.out)
	return table.Write(a.out, table.Terminal, t)
}

func (a *app) static(c *models.Compound, m *mount.Mount, choice reports.StaticChoice) error {
	s, err := reports.StaticTable(c, m, choice)
	if err != nil {
		return err
	}
	for _, note := range s.Assumptions {
		a.note(note)
	}
	if len(s.Rows) == 0 {
		return nil
	}
	s.Assumptions = nil
	fmt.Fprintln(a.out)
	return table.Write(a.out, table.Terminal, s)
}

func (o stiffnessOptions) referenceOf(c *models.Compound, m *mount.Mount, first float64) (reports.StiffnessQuery, error) {
	ref := reports.StiffnessQuery{Frequency: first, Temperature: c.ReferenceTempC + 273.15, Displacement: math.NaN()}
	for _, e := range m.Elements {
		if e.Measured != nil {
			ref.Frequency, ref.Temperature = e.Measured.Frequency, e.Measured.Temperature
			if len(m.Elements) == 1 {
				ref.Displacement = e.Measured.Amplitude
			}
			break
		}
	}
	if o.reference[0] != "" {
		v, err := unit.Parse(o.reference[0], unit.Frequency)
		if err != nil {
			return ref, hintedAt("--reference-frequency", err)
		}
		ref.Frequency = v
	}
	if o.reference[1] != "" {
		v, err := unit.Parse(o.reference[1], unit.Temperature)
		if err != nil {
			return ref, hintedAt("--reference-temperature", err)
		}
		ref.Temperature = v
	}
	return ref, nil
}
