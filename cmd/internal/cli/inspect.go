package cli

import (
	"github.com/spf13/cobra"

	"phaselag/data"
	"phaselag/reports"
	"phaselag/reports/table"
)

func (a *app) inspectCmd() *cobra.Command {
	var format string
	cmd := &cobra.Command{
		Use:   "inspect FILE",
		Short: "Show how a table was understood, and what to paste where that is wrong",
		Long: `inspect reads one table of results and shows its encoding, separator and decimal
sign, where headings and units were found, every column with its heading, quantity,
unit, first values and range, how the rows fall into runs, and the entry of a
campaign file that reads it so. Where the file would be refused as it stands, it
says why.`,
		Args: exactly("FILE"),
		RunE: func(_ *cobra.Command, args []string) error {
			in, err := data.Inspect(args[0])
			if err != nil {
				return err
			}
			if f := table.Format(format); f != table.Terminal {
				return table.Write(a.out, f, reports.InspectionTable(in))
			}
			return reports.Inspection(a.out, in)
		},
	}
	formatFlag(cmd, &format)
	return cmd
}
