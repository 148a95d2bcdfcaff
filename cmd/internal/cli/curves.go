package cli

import (
	"fmt"
	"os"
	"strconv"

	"github.com/spf13/cobra"

	"phaselag/reports/table"
)

// curvesFlag adds --curves to a command that answers with numbers.
func curvesFlag(cmd *cobra.Command, to *bool) {
	cmd.Flags().BoolVar(to, "curves", false, "draw the answer below the table, in $COLUMNS columns (80)")
}

// width is that of the terminal as the shell says it, 80 where it does not.
func width() int {
	if n, err := strconv.Atoi(os.Getenv("COLUMNS")); err == nil && n >= 40 && n <= 400 {
		return n
	}
	return 80
}

// plot draws curves below a table on a terminal.
func (a *app) plot(wanted bool, format string, draw func(width int) error) error {
	if !wanted {
		return nil
	}
	if table.Format(format) != table.Terminal {
		return usagef("--curves are for --format table")
	}
	fmt.Fprintln(a.out)
	return draw(width())
}
