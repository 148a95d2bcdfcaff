package cli

import (
	"fmt"

	"github.com/spf13/cobra"

	"phaselag/reports"
)

func (a *app) datasheetCmd() *cobra.Command {
	return &cobra.Command{
		Use:   "datasheet DIR",
		Short: "Write the datasheets of a result again, after checking its files",
		Args:  exactly("DIR"),
		RunE: func(_ *cobra.Command, args []string) error {
			r, err := reports.ReadResultDir(args[0])
			if err != nil {
				return hinted("characterize again", "%v", err)
			}
			if err := reports.WriteResult(args[0], r); err != nil {
				return err
			}
			fmt.Fprintf(a.err, "written to %s\n", args[0])
			return nil
		},
	}
}
