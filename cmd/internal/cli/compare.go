package cli

import (
	"fmt"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"phaselag/data"
	"phaselag/fitting"
	"phaselag/fitting/changes"
	"phaselag/models"
	"phaselag/reports"
	"phaselag/reports/figure"
	"phaselag/reports/table"
)

type compareOptions struct {
	registerOptions
	sharedOptions
	with, picture string
}

// sharedOptions say what a batch and its reference have in common.
type sharedOptions struct {
	thermometer, phase, gauge bool
}

func (o *sharedOptions) flags(cmd *cobra.Command) {
	cmd.Flags().BoolVar(&o.thermometer, "same-thermometer", false, "one calibration of temperature for both: it cancels")
	cmd.Flags().BoolVar(&o.phase, "same-phase", false, "one calibration of the phase for both: it cancels")
	cmd.Flags().BoolVar(&o.gauge, "same-gauge", false, "one error of geometry and force for both: it cancels")
}

func (o sharedOptions) settings() *changes.Settings {
	return &changes.Settings{SameThermometer: o.thermometer, SamePhase: o.phase, SameGauge: o.gauge}
}

func (a *app) batchCompareCmd() *cobra.Command {
	var o compareOptions
	cmd := &cobra.Command{
		Use:   "compare BATCH --with REFERENCE",
		Short: "What changed between a batch and a reference, and whether it is real",
		Long: `compare says what changed between a batch and a reference, each change with its 95 %
interval, whether it is real (Holm's correction over all of them), and how small a
change would have been seen: the shift of the glass transition in K, factors on
stiffness, loss factor, filler network and critical strain.

A batch or a reference is a compound file, the folder of a result, a registered batch,
or a campaign. A campaign, for instance a short release test, is compared point by
point with a reference compound. Two campaigns that give no compound, such as sweeps
over temperature at one frequency, are compared by their loss peaks.`,
		Example: `  phaselag batch compare release-test.yaml --with hm60 --same-thermometer --same-phase
  phaselag batch compare 2612-01 --with 2611-02`,
		Args: exactly("BATCH"),
		RunE: func(_ *cobra.Command, args []string) error {
			if o.with == "" {
				return usagef("--with is missing: the reference batch or approved compound")
			}
			return a.compare(args[0], o)
		},
	}
	o.registerOptions.flags(cmd)
	o.sharedOptions.flags(cmd)
	cmd.Flags().StringVar(&o.with, "with", "", "reference: compound file, folder of a result, registered batch, or campaign (required)")
	cmd.Flags().StringVar(&o.picture, "picture", "", "write both as this SVG file")
	return cmd
}

// measured opens a name that is a campaign or a table, and gives nil for one that is a
// compound or a batch.
func measured(name string) (*data.Campaign, error) {
	switch strings.ToLower(filepath.Ext(name)) {
	case ".csv", ".tsv", ".txt", ".xlsx", ".ods":
		return data.Open(name)
	case ".yaml", ".yml", ".json":
		if _, err := models.Open(name); err == nil {
			return nil, nil
		}
		return data.Open(name)
	}
	return nil, nil
}

// compare chooses by what there is.
func (a *app) compare(batch string, o compareOptions) error {
	campaign, err := measured(batch)
	if err != nil {
		return err
	}
	reference, err := measured(o.with)
	if err != nil {
		return err
	}
	if reference != nil {
		if campaign == nil {
			return usagef("a compound is compared with a compound, or a campaign with either; exchange the two")
		}
		return a.comparePeaks(campaign, reference, o)
	}
	approved, err := o.compound(o.with)
	if err != nil {
		return err
	}
	c, err := o.against(approved, batch, campaign)
	if err != nil {
		return err
	}
	return a.changed(c, approved, campaign, o)
}

// changed prints a comparison and draws it.
func (a *app) changed(c *changes.Comparison, approved *models.Compound, campaign *data.Campaign, o compareOptions) error {
	format := o.format
	if o.picture != "" {
		f, caption := reports.ChangesFigure(c, approved, campaign)
		svg, err := figure.SVG(f)
		if err != nil {
			return err
		}
		if err := writeWhole(o.picture, svg); err != nil {
			return err
		}
		fmt.Fprintf(a.err, "written: %s: %s\n", o.picture, caption)
	}
	if err := a.answer(reports.ChangesTable(c), format); err != nil {
		return err
	}
	if table.Format(format) != table.Terminal {
		return nil
	}
	fmt.Fprintln(a.out)
	return reports.ChangesVerdict(a.out, c)
}

// against compares a campaign, or else the compound of a batch, with an approved compound.
func (o *compareOptions) against(approved *models.Compound, batch string, campaign *data.Campaign) (*changes.Comparison, error) {
	if campaign != nil {
		return changes.Points(approved, campaign, o.settings())
	}
	c, err := o.compound(batch)
	if err != nil {
		return nil, err
	}
	return changes.Compounds(approved, c, o.settings())
}

// comparePeaks compares two campaigns that need not give a compound.
func (a *app) comparePeaks(batch, reference *data.Campaign, o compareOptions) error {
	var r [2]*fitting.Result
	for i, c := range []*data.Campaign{reference, batch} {
		var err error
		if r[i], err = fitting.Characterize(c, &fitting.Settings{Replicates: -1}); err != nil {
			return err
		}
	}
	if r[0].Compound != nil {
		c, err := changes.Points(r[0].Compound, batch, o.settings())
		if err != nil {
			return err
		}
		return a.changed(c, r[0].Compound, batch, o)
	}
	s, f, err := fitting.LossPeaks(r[0], r[1])
	if err != nil {
		return hinted("both batches need the loss factor at one frequency and six temperatures or more about its peak", "%v", err)
	}
	if err := a.answer(reports.PeakTable(s, f), o.format); err != nil {
		return err
	}
	if table.Format(o.format) == table.Terminal {
		fmt.Fprintln(a.out)
		return reports.PeakVerdict(a.out, s)
	}
	return nil
}
