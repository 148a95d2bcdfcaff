package cli

import (
	"context"
	"fmt"
	"math"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"phaselag/data/register"
	"phaselag/data/unit"
	"phaselag/fitting/quality"
	"phaselag/reports"
	"phaselag/reports/figure"
	"phaselag/reports/table"
)

type trendOptions struct {
	registerOptions
	property, at, compound, chart string
	lower, upper                  string
	base                          int
	patterns, picture, all        string
	known, curves                 bool
}

func (a *app) batchTrendCmd() *cobra.Command {
	var o trendOptions
	cmd := &cobra.Command{
		Use:   "trend --property NAME --at CONDITION",
		Short: "Control chart of a property over the registered batches, and capability",
		Long: `trend draws the control chart of a property over the registered batches in the order of
testing: individuals with moving range, or the exponentially weighted moving average. The
limits come from the first --base batches. Points beyond the limits and the pattern tests
that they complete are named. With --lower or --upper the capability of the process is
given with its interval. Entries that were corrected do not count.

--list shows what there are trends of.`,
		Example: `  phaselag batch trend --list
  phaselag batch trend --property "storage modulus" --at "10 Hz, 23 °C" --base 20 --upper 2.2MPa --picture trend.svg`,
		Args: cobra.NoArgs,
		RunE: func(*cobra.Command, []string) error { return a.trend(o) },
	}
	o.flags(cmd)
	cmd.Flags().StringVar(&o.property, "property", "", "name of the property (required without --list)")
	cmd.Flags().StringVar(&o.at, "at", "", "its condition, as --list has it")
	cmd.Flags().StringVar(&o.compound, "compound", "", "batches of this compound only")
	o.chart = "individuals"
	cmd.Flags().Var(choice{&o.chart, []string{"individuals", "moving-range", "ewma"}}, "chart", "individuals, moving-range or ewma")
	cmd.Flags().IntVar(&o.base, "base", 0, "batches at the beginning that set the limits (default: all)")
	o.patterns = "standard"
	cmd.Flags().Var(choice{&o.patterns, []string{"standard", "full", "none"}}, "patterns", "pattern tests: standard, full or none")
	cmd.Flags().StringVar(&o.lower, "lower", "", "lower limit of the property, for the capability")
	cmd.Flags().StringVar(&o.upper, "upper", "", "upper limit of the property")
	cmd.Flags().StringVar(&o.picture, "picture", "", "write the chart as this SVG file")
	cmd.Flags().StringVar(&o.all, "all", "", "write a chart of every property in the register into this folder, which must exist")
	curvesFlag(cmd, &o.curves)
	cmd.Flags().BoolVar(&o.known, "list", false, "list the properties and conditions in the register")
	return cmd
}

func (a *app) trend(o trendOptions) error {
	r, err := o.open(true)
	if err != nil {
		return err
	}
	defer r.Close()
	ctx := context.Background()
	if o.known {
		list, err := r.Quantities(ctx)
		if err != nil {
			return err
		}
		return a.answer(reports.QuantityTable(list), o.format)
	}
	if o.all != "" {
		return a.everyChart(ctx, r, o)
	}
	if o.property == "" {
		return usagef("--property is missing; --list shows what there are trends of")
	}
	points, damaged, err := r.Values(ctx, o.property, strings.ReplaceAll(o.at, "−", "-"), o.compound)
	if err != nil {
		return err
	}
	batches := make([]quality.Batch, len(points))
	for i, p := range points {
		batches[i] = quality.Batch{Name: p.Batch, Values: []float64{p.Value}, U95: p.U95}
		if p.Unit != points[0].Unit {
			return usagef("batch %s has its %s in %s, batch %s in %s", p.Batch, o.property, p.Unit, points[0].Batch, points[0].Unit)
		}
	}
	charts, err := o.charts(batches)
	if err != nil {
		return hinted("register more batches, or lower --base", "no chart: %v", err)
	}
	name := o.property
	if o.at != "" {
		name += " at " + o.at
	}
	limits, err := o.limits(points[0].Unit)
	if err != nil {
		return err
	}
	if o.picture != "" {
		f, _ := reports.ControlFigure(name, points[0].Unit, charts...)
		svg, err := figure.SVG(reports.WithSpecification(f, limits, len(points)))
		if err != nil {
			return err
		}
		if err := writeWhole(o.picture, svg); err != nil {
			return err
		}
		fmt.Fprintf(a.err, "written: %s\n", o.picture)
	}
	shown := charts[0]
	if o.chart == "moving-range" {
		shown = charts[1]
	}
	if err := a.answer(reports.ControlTable(name, points[0].Unit, shown), o.format); err != nil {
		return err
	}
	if err := a.plot(o.curves, o.format, func(w int) error { return reports.PlotControl(a.out, name, points[0].Unit, shown, w) }); err != nil {
		return err
	}
	if err := a.capability(o, batches, limits); err != nil {
		return err
	}
	if err := a.damage(damaged); err != nil {
		return err
	}
	if shown.Called() > 0 {
		return errNo
	}
	return nil
}

// everyChart writes a picture for each property; what cannot be charted is said.
func (a *app) everyChart(ctx context.Context, r *register.Register, o trendOptions) error {
	list, err := r.Quantities(ctx)
	if err != nil {
		return err
	}
	called := 0
	for i, q := range list {
		points, damaged, err := r.Values(ctx, q.Name, q.Condition, o.compound)
		if err != nil {
			return err
		}
		if err := a.damage(damaged); err != nil {
			return err
		}
		name := strings.TrimSuffix(q.Name+" at "+q.Condition, " at ")
		batches := make([]quality.Batch, len(points))
		for k, p := range points {
			batches[k] = quality.Batch{Name: p.Batch, Values: []float64{p.Value}, U95: p.U95}
		}
		charts, err := o.charts(batches)
		if err != nil {
			fmt.Fprintf(a.err, "note: %s: no chart: %v\n", name, err)
			continue
		}
		f, _ := reports.ControlFigure(name, points[0].Unit, charts...)
		svg, err := figure.SVG(f)
		if err != nil {
			return err
		}
		file := filepath.Join(o.all, fmt.Sprintf("%03d.svg", i+1))
		if err := writeWhole(file, svg); err != nil {
			return err
		}
		out := ""
		if n := charts[0].Called(); n > 0 {
			out = fmt.Sprintf(", %d points called out", n)
			called++
		}
		fmt.Fprintf(a.out, "%s: %s, %d batches%s\n", file, name, len(points), out)
	}
	if called > 0 {
		return errNo
	}
	return nil
}

func (o trendOptions) charts(batches []quality.Batch) ([]*quality.Chart, error) {
	s := quality.Settings{Base: o.base}
	switch o.patterns {
	case "full":
		s.Patterns = quality.FullSet()
	case "none":
		s.Patterns = []quality.Pattern{}
	}
	if o.chart == "ewma" {
		c, err := quality.EWMA(batches, s)
		return []*quality.Chart{c}, err
	}
	values, moving, err := quality.Individuals(batches, s)
	return []*quality.Chart{values, moving}, err
}

// limits are those of a specification; NaN where there is none.
func (o trendOptions) limits(symbol string) (quality.Limits, error) {
	limits := quality.Limits{Lower: math.NaN(), Upper: math.NaN()}
	for _, v := range []struct {
		flag, text string
		to         *float64
	}{{"--lower", o.lower, &limits.Lower}, {"--upper", o.upper, &limits.Upper}} {
		if v.text == "" {
			continue
		}
		x, err := limitIn(v.text, symbol)
		if err != nil {
			return limits, hintedAt(v.flag, err)
		}
		*v.to = x
	}
	return limits, nil
}

// capability prints how the process fits between limits, where there are limits.
func (a *app) capability(o trendOptions, batches []quality.Batch, limits quality.Limits) error {
	if o.lower == "" && o.upper == "" {
		return nil
	}
	c, err := quality.Capable(batches, limits, quality.MovingRange)
	if err != nil {
		return hinted("register more batches", "no capability: %v", err)
	}
	if table.Format(o.format) != table.Terminal {
		return nil
	}
	fmt.Fprintln(a.out)
	return reports.CapabilityLines(a.out, c)
}

// limitIn reads a limit in the unit in which the register keeps the property.
func limitIn(text, symbol string) (float64, error) {
	if symbol == "1" || symbol == "" {
		if x, err := unit.ParseNumber(text); err == nil {
			return x, nil
		}
		return unit.Parse(text, unit.Relative)
	}
	if known := unit.Known(symbol); len(known) > 0 {
		u, _ := unit.Lookup(symbol, known[0])
		x, err := unit.Parse(text, known[0])
		return u.From(x), err
	}
	return unit.ParseNumber(text)
}
