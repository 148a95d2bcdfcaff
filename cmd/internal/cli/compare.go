package cli

import (
	"fmt"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"phaselag/data"
	"phaselag/fitting"
	"phaselag/reports"
	"phaselag/reports/table"
)

type compareOptions struct {
	registerOptions
	with string
}

func (a *app) batchCompareCmd() *cobra.Command {
	var o compareOptions
	cmd := &cobra.Command{
		Use:   "compare BATCH --with REFERENCE",
		Short: "What changed between a batch and a reference, and whether it is real",
		Args:  exactly("BATCH"),
		RunE: func(_ *cobra.Command, args []string) error {
			if o.with == "" {
				return usagef("--with is missing: the reference batch or approved compound")
			}
			return a.compare(args[0], o)
		},
	}
	o.flags(cmd)
	cmd.Flags().StringVar(&o.with, "with", "", "reference: a compound file, a registered batch, or a campaign (required)")
	return cmd
}

// isMeasured reports whether a name is a campaign or a table rather than a compound or
// a batch.
func isMeasured(name string) bool {
	switch strings.ToLower(filepath.Ext(name)) {
	case ".csv", ".tsv", ".txt", ".xlsx", ".ods":
		return true
	case ".yaml", ".yml", ".json":
		_, err := data.Open(name)
		return err == nil
	}
	return false
}

// compare chooses by what there is.
func (a *app) compare(batch string, o compareOptions) error {
	if isMeasured(batch) && isMeasured(o.with) {
		return a.comparePeaks(batch, o)
	}
	return usagef("a batch and its reference must both be campaigns")
}

// comparePeaks compares two campaigns that need not give a compound.
func (a *app) comparePeaks(batch string, o compareOptions) error {
	var r [2]*fitting.Result
	for i, name := range []string{o.with, batch} {
		c, err := data.Open(name)
		if err != nil {
			return err
		}
		if r[i], err = fitting.Characterize(c, &fitting.Settings{Replicates: -1}); err != nil {
			return err
		}
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
