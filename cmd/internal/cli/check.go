package cli

import (
	"github.com/spf13/cobra"

	"phaselag/data"
	"phaselag/data/screen"
	"phaselag/reports"
	"phaselag/reports/table"
)

func (a *app) checkCmd() *cobra.Command {
	var format string
	cmd := &cobra.Command{
		Use:   "check CAMPAIGN|FILES…",
		Short: "Say how the measurements were understood and what is doubtful; fit no compound",
		Long: `check reads the measurements, prints tests, columns, units, points, ranges and
assumptions, and lists what is doubtful. It fits no compound. The exit code is
1 where a finding is severe.`,
		Args: atLeastOne("CAMPAIGN or FILES"),
		RunE: func(_ *cobra.Command, args []string) error {
			return a.check(args, table.Format(format))
		},
	}
	formatFlag(cmd, &format)
	return cmd
}

func (a *app) check(inputs []string, format table.Format) error {
	campaign, err := data.Open(inputs...)
	if err != nil {
		return err
	}
	findings := append(append([]data.Finding{}, campaign.Findings...), screen.Check(campaign)...)
	if format == table.Terminal {
		err = reports.Understood(a.out, campaign, findings)
	} else {
		t := reports.FindingsTable(findings)
		t.Assumptions = campaign.Assumptions
		err = table.Write(a.out, format, t)
	}
	if err != nil {
		return err
	}
	for _, f := range findings {
		if f.Severity == data.Severe {
			return errNo
		}
	}
	return nil
}

// formatFlag adds --format.
func formatFlag(cmd *cobra.Command, format *string) {
	*format = string(table.Terminal)
	cmd.Flags().Var(choice{format, []string{"table", "csv", "json"}}, "format", "table, csv or json")
}

// choice is a flag with a few allowed values.
type choice struct {
	value   *string
	allowed []string
}

func (c choice) String() string {
	if c.value == nil {
		return ""
	}
	return *c.value
}
func (c choice) Type() string { return "word" }
func (c choice) Set(s string) error {
	for _, v := range c.allowed {
		if v == s {
			*c.value = s
			return nil
		}
	}
	return usagef("%q is not one of %v", s, c.allowed)
}
