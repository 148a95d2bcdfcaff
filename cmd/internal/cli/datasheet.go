package cli

import (
	"fmt"

	"github.com/spf13/cobra"

	"phaselag/data"
	"phaselag/reports"
)

func (a *app) datasheetCmd() *cobra.Command {
	var settings, out string
	cmd := &cobra.Command{
		Use:   "datasheet DIR [--settings FILE --out NAME]",
		Short: "Write the datasheets of a result again, or as a laboratory wants them",
		Long: `datasheet checks the files of a result and writes its datasheets again.

With --settings it writes NAME.pdf and NAME.html as the settings file says: title,
laboratory, customer, signatories, logo, sections and their order, standard
conditions of the property table, units (SI or inch-pound) and paper (A4 or letter).`,
		Example: `  phaselag datasheet hm60
  phaselag datasheet hm60 --settings laboratory.yaml --out HM-60-2611-02`,
		Args: exactly("DIR"),
		RunE: func(_ *cobra.Command, args []string) error {
			r, err := reports.ReadResultDir(args[0])
			if err != nil {
				return hinted("characterize again", "%v", err)
			}
			if settings != "" || out != "" {
				if settings == "" || out == "" {
					return usagef("--settings and --out belong together")
				}
				set, err := data.OpenSheet(settings)
				if err != nil {
					return err
				}
				p, h, err := reports.Sheets(r, set)
				if err != nil {
					return err
				}
				if err := writeWhole(out+".pdf", p); err != nil {
					return err
				}
				if err := writeWhole(out+".html", h); err != nil {
					return err
				}
				fmt.Fprintf(a.err, "written: %s.pdf, %s.html\n", out, out)
				return nil
			}
			if err := reports.WriteResult(args[0], r); err != nil {
				return err
			}
			fmt.Fprintf(a.err, "written to %s\n", args[0])
			return nil
		},
	}
	cmd.Flags().StringVar(&settings, "settings", "", "settings file of datasheets (YAML)")
	cmd.Flags().StringVar(&out, "out", "", "path and name of the files without extension")
	return cmd
}
