package cli

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"time"

	"github.com/spf13/cobra"

	"phaselag/data"
	"phaselag/fitting/changes"
	"phaselag/fitting/quality"
	"phaselag/models"
	"phaselag/reports"
	"phaselag/reports/html"
	"phaselag/reports/pdf"
	"phaselag/reports/table"
)

type releaseOptions struct {
	compareOptions
	specification, settings, out string
}

func (a *app) batchReleaseCmd() *cobra.Command {
	var o releaseOptions
	cmd := &cobra.Command{
		Use:   "release BATCH --specification FILE",
		Short: "Hold a batch against a specification: accepted, rejected or undecided, with a certificate",
		Long: `release holds the values of a batch against the limits of a specification file, with
guard bands: accepted where a value keeps its uncertainty from the limits, rejected where
it lies beyond them by as much, undecided between (JCGM 106, ISO 14253-1).

BATCH is a compound file, the folder of a result, a registered batch, or the campaign of
a short release test, which is judged by what changed against the approved compound in
--approved. With --out it writes the certificate as NAME.pdf and NAME.html. The exit code
is 0 only for an accepted batch.`,
		Example: `  phaselag batch release hm60 --specification release.yaml --out HM-60-2611-02
  phaselag batch release release-test.yaml --approved hm60 --same-thermometer --specification release.yaml`,
		Args: exactly("BATCH"),
		RunE: func(_ *cobra.Command, args []string) error {
			if o.specification == "" {
				return usagef("--specification is missing")
			}
			return a.release(args[0], o)
		},
	}
	o.registerOptions.flags(cmd)
	o.sharedOptions.flags(cmd)
	cmd.Flags().StringVar(&o.with, "approved", "", "approved compound: compound file, folder of a result, or registered batch")
	cmd.Flags().StringVar(&o.specification, "specification", "", "specification file (YAML, required)")
	cmd.Flags().StringVar(&o.settings, "settings", "", "settings file of datasheets: laboratory, signatories, logo, paper")
	cmd.Flags().StringVar(&o.out, "out", "", "path and name of the certificate's files without extension")
	return cmd
}

// compound finds the compound of a batch: a compound file, the folder of a result, or a
// registered batch.
func (o *registerOptions) compound(name string) (*models.Compound, error) {
	info, err := os.Stat(name)
	switch {
	case err == nil && info.IsDir():
		if _, err := reports.ReadResultDir(name); err != nil {
			return nil, hinted("characterize again", "%v", err)
		}
		return models.Open(filepath.Join(name, "compound.yaml"))
	case err == nil:
		return models.Open(name)
	case !errors.Is(err, fs.ErrNotExist):
		return nil, err
	}
	r, err := o.open(true)
	if err != nil {
		return nil, hinted("name a compound file, the folder of a result, or a registered batch (--register)", "no file and no register for %q", name)
	}
	defer r.Close()
	e, err := entry(r, name)
	if err != nil {
		return nil, err
	}
	return models.Read(e.File)
}

func (a *app) release(name string, o releaseOptions) error {
	spec, err := data.OpenSpecification(o.specification)
	if err != nil {
		return err
	}
	var set *data.Sheet
	if o.settings != "" {
		if set, err = data.OpenSheet(o.settings); err != nil {
			return err
		}
	}
	campaign, err := measured(name)
	if err != nil {
		return err
	}
	if campaign != nil && o.with == "" {
		return usagef("--approved is missing: a release test is judged against an approved compound")
	}
	var approved *models.Compound
	var compared *changes.Comparison
	if o.with != "" {
		if approved, err = o.compound(o.with); err != nil {
			return err
		}
		if compared, err = o.against(approved, name, campaign); err != nil {
			return err
		}
	}
	if campaign != nil {
		return a.conclude(reports.ReleaseByPoints(campaign, approved, compared, spec), set, o)
	}
	c, err := o.compound(name)
	if err != nil {
		return err
	}
	return a.conclude(reports.ReleaseOf(c, spec, func(l data.Limit) reports.Found {
		if compared != nil && !l.Property.AtCondition() {
			return reports.FoundBy(compared, l)
		}
		return reports.ValueOf(c, l)
	}), set, o)
}

// conclude prints a release and writes its certificate.
func (a *app) conclude(r *reports.Release, set *data.Sheet, o releaseOptions) error {
	if o.out != "" {
		doc := reports.Certificate(r, set, time.Time{})
		p, err := pdf.Bytes(doc)
		if err != nil {
			return err
		}
		h, err := html.Bytes(doc)
		if err != nil {
			return err
		}
		if err := writeWhole(o.out+".pdf", p); err != nil {
			return err
		}
		if err := writeWhole(o.out+".html", h); err != nil {
			return err
		}
		fmt.Fprintf(a.err, "written: %s.pdf, %s.html\n", o.out, o.out)
	}
	if err := a.answer(reports.ReleaseTable(r), o.format); err != nil {
		return err
	}
	if table.Format(o.format) == table.Terminal {
		fmt.Fprintf(a.out, "\nbatch %s: %s\n", r.Batch, r.Decision)
	}
	for _, n := range r.Notes {
		a.note(n)
	}
	if r.Decision != quality.Accepted {
		return errNo
	}
	return nil
}
