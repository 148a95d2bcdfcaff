package cli

import (
	"fmt"

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
campaign file that reads it so. Raw signals (force and displacement, or torque and
angle, against time) are analysed segment by segment. Where the file would be refused as it stands, it
says why.`,
		Args: exactly("FILE"),
		RunE: func(_ *cobra.Command, args []string) error {
			all, err := data.Inspect(args[0])
			if err != nil {
				return err
			}
			for i, in := range all {
				switch f := table.Format(format); {
				case f != table.Terminal && in.Signals != nil:
					err = table.Write(a.out, f, reports.SignalTable(in.Signals))
				case f != table.Terminal:
					err = table.Write(a.out, f, reports.InspectionTable(in))
				default:
					if i > 0 {
						fmt.Fprintln(a.out)
					}
					err = reports.Inspection(a.out, in)
				}
				if err != nil {
					return err
				}
			}
			return nil
		},
	}
	formatFlag(cmd, &format)
	return cmd
}
