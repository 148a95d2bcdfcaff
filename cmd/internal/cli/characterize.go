package cli

import (
	"fmt"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"phaselag/data"
	"phaselag/data/screen"
	"phaselag/fitting"
	"phaselag/reports"
)

type characterizeOptions struct {
	inputs     []string
	out        string
	replicates int
	bootstrap  int
}

func (a *app) characterizeCmd() *cobra.Command {
	var o characterizeOptions
	cmd := &cobra.Command{
		Use:   "characterize CAMPAIGN|FILES… [--out DIR]",
		Short: "Fit a compound to everything measured, and write model, tables, figures and datasheets",
		Example: `  phaselag characterize campaign.yaml
  phaselag characterize isotherms.csv --out result`,
		Args: atLeastOne("CAMPAIGN or FILES"),
		RunE: func(_ *cobra.Command, args []string) error {
			o.inputs = args
			return a.characterize(o)
		},
	}
	cmd.Flags().StringVar(&o.out, "out", "", "directory of the result (default: the campaign's stem with -result)")
	cmd.Flags().IntVar(&o.replicates, "replicates", 199, "draws of the bootstrap test of superposition; 0 for the F test alone")
	cmd.Flags().IntVar(&o.bootstrap, "bootstrap", 0, "campaigns to draw from the fitted compound to check the intervals, for example 1000")
	return cmd
}

func (a *app) characterize(o characterizeOptions) error {
	dir := o.out
	if dir == "" {
		dir = strings.TrimSuffix(o.inputs[0], filepath.Ext(o.inputs[0])) + "-result"
	}
	if err := reports.CheckTarget(dir); err != nil {
		return hinted("name another directory with --out, or empty this one", "%v", err)
	}
	campaign, err := data.Open(o.inputs...)
	if err != nil {
		return err
	}
	campaign.Findings = append(campaign.Findings, screen.Check(campaign)...)
	settings := &fitting.Settings{Replicates: o.replicates}
	if o.replicates <= 0 {
		settings.Replicates = -1
	}
	if o.bootstrap > 0 {
		bar := a.progress("drawing campaigns", o.bootstrap)
		defer bar.end()
		settings.Bootstrap, settings.Progress = o.bootstrap, bar.step
	}
	result, err := fitting.Characterize(campaign, settings)
	if err != nil {
		return err
	}
	if err := reports.WriteResult(dir, result); err != nil {
		return err
	}
	if err := reports.Summary(a.out, result); err != nil {
		return err
	}
	fmt.Fprintf(a.err, "written to %s\n", dir)
	return nil
}
