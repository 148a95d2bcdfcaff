package cli

import (
	"context"
	"fmt"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"phaselag/data/register"
	"phaselag/models"
	"phaselag/reports"
	"phaselag/reports/table"
)

// defaultRegister is where batches are kept if nothing else is said.
const defaultRegister = "batches.register"

// registerOptions are the flags that all commands on the register share.
type registerOptions struct {
	where, format string
}

func (o *registerOptions) flags(cmd *cobra.Command) {
	where := os.Getenv("PHASELAG_REGISTER")
	if where == "" {
		where = defaultRegister
	}
	// The default is not shown: an address may hold a password.
	cmd.Flags().StringVar(&o.where, "register", where, "register: a file, or postgres://… (default: $PHASELAG_REGISTER, else "+defaultRegister+")")
	cmd.Flags().Lookup("register").DefValue = ""
	formatFlag(cmd, &o.format)
}

// open opens a register; to read it must be there.
func (o *registerOptions) open(mustExist bool) (*register.Register, error) {
	if mustExist && !strings.Contains(o.where, "://") {
		if _, err := os.Stat(o.where); err != nil {
			return nil, hinted("phaselag batch add begins a register; --register names another one", "no register at %s", o.where)
		}
	}
	return register.Open(o.where)
}

func (a *app) batchCmd() *cobra.Command {
	cmd := &cobra.Command{
		Use:   "batch",
		Short: "Register, compare and release batches",
		Long: `batch keeps tested batches in a register, compares a batch with an approved
compound, holds it against a specification and follows its values over time.

The register is one file, or a PostgreSQL database that a laboratory shares. It never
forgets: a correction is a new entry that names the old one.`,
		Args: cobra.NoArgs,
		RunE: func(cmd *cobra.Command, _ []string) error { return cmd.Help() },
	}
	cmd.AddCommand(a.batchAddCmd(), a.batchListCmd(), a.batchShowCmd(), a.batchCompareCmd(), a.batchReleaseCmd(), a.batchTrendCmd(), a.batchCheckCmd(), a.batchFilesCmd(true), a.batchFilesCmd(false))
	return cmd
}

func (a *app) batchAddCmd() *cobra.Command {
	var o registerOptions
	var e register.Entry
	cmd := &cobra.Command{
		Use:   "add COMPOUND|DIR --who NAME",
		Short: "Register a tested batch: its compound file, key values and the hashes of its inputs",
		Example: `  phaselag batch add hm60 --who "A. Bench"
  phaselag batch add hm60-again/compound.yaml --who "A. Bench" --corrects 12 --why "wrong thickness"`,
		Args: exactly("COMPOUND|DIR"),
		RunE: func(_ *cobra.Command, args []string) error {
			if e.Who == "" {
				return usagef("--who is missing: who registers the batch")
			}
			name := args[0]
			if info, err := os.Stat(name); err == nil && info.IsDir() {
				if _, err := reports.ReadResultDir(name); err != nil {
					return hinted("characterize again", "%v", err)
				}
				name = filepath.Join(name, "compound.yaml")
			}
			content, err := os.ReadFile(name)
			if err != nil {
				return hinted("name a compound file, or the folder of a result", "%v", err)
			}
			c, err := models.Open(name)
			if err != nil {
				return err
			}
			fill(&e, c, content)
			if e.Batch == "" {
				return usagef("--batch is missing: the compound file names no batch")
			}
			r, err := o.open(false)
			if err != nil {
				return err
			}
			defer r.Close()
			id, err := r.Add(context.Background(), &e)
			if err != nil {
				return err
			}
			fmt.Fprintf(a.out, "entry %d: batch %s of %s, %d values\n", id, e.Batch, e.Compound, len(e.Values))
			return nil
		},
	}
	o.flags(cmd)
	cmd.Flags().StringVar(&e.Who, "who", "", "who registers the batch (required)")
	cmd.Flags().StringVar(&e.Batch, "batch", "", "name of the batch (default: the compound file's)")
	cmd.Flags().Int64Var(&e.Corrects, "corrects", 0, "number of the entry that this one corrects")
	cmd.Flags().StringVar(&e.Why, "why", "", "reason of a correction")
	return cmd
}

// fill takes what a compound file says of itself.
func fill(e *register.Entry, c *models.Compound, content []byte) {
	e.File, e.Compound, e.Tested = content, c.Compound.Name, c.Compound.Tested
	if e.Batch == "" {
		e.Batch = c.Compound.Batch
	}
	if e.Compound == "" {
		e.Compound = "not named"
	}
	now := time.Now()
	if s, err := strconv.ParseInt(os.Getenv("SOURCE_DATE_EPOCH"), 10, 64); err == nil {
		now = time.Unix(s, 0)
	}
	e.Added = now.UTC().Format(time.RFC3339)
	if e.Tested == "" {
		e.Tested = now.UTC().Format(time.DateOnly)
	}
	e.Values = reports.KeyValues(c)
	for _, in := range c.Provenance.Inputs {
		e.Inputs = append(e.Inputs, register.Input{File: in.File, SHA256: in.SHA256})
	}
}

func (a *app) batchListCmd() *cobra.Command {
	var o registerOptions
	var q register.Query
	cmd := &cobra.Command{
		Use:     "list",
		Short:   "List the registered batches",
		Example: `  phaselag batch list --compound HM-60 --from 2026-01-01 --limit 20`,
		Args:    cobra.NoArgs,
		RunE: func(*cobra.Command, []string) error {
			r, err := o.open(true)
			if err != nil {
				return err
			}
			defer r.Close()
			list, damaged, err := r.List(context.Background(), q)
			if err != nil {
				return err
			}
			if err := a.answer(reports.RegisterTable(list), o.format); err != nil {
				return err
			}
			return a.damage(damaged)
		},
	}
	o.flags(cmd)
	cmd.Flags().StringVar(&q.Batch, "batch", "", "pattern of batch names, * and ?")
	cmd.Flags().StringVar(&q.Compound, "compound", "", "name of the compound")
	cmd.Flags().StringVar(&q.From, "from", "", "tested on this day or later, 2026-03-31")
	cmd.Flags().StringVar(&q.To, "to", "", "tested on this day or earlier")
	cmd.Flags().BoolVar(&q.Corrected, "corrected", false, "with the entries that were corrected")
	cmd.Flags().BoolVar(&q.Thorough, "thorough", false, "check every file and value on the way")
	cmd.Flags().IntVar(&q.Limit, "limit", 0, "the newest so many (default: all)")
	return cmd
}

// damage names what cannot be trusted; the answer is then no.
func (a *app) damage(list []register.Damage) error {
	for _, d := range list {
		fmt.Fprintf(a.err, "damaged: entry %d, batch %q: %s\n", d.ID, d.Batch, d.What)
	}
	if len(list) > 0 {
		return errNo
	}
	return nil
}

// entry finds an entry by its number or by the batch's name.
func entry(r *register.Register, name string) (*register.Entry, error) {
	if id, err := strconv.ParseInt(name, 10, 64); err == nil {
		if e, err := r.Get(context.Background(), id); err == nil {
			return e, nil
		}
	}
	return r.GetBatch(context.Background(), name)
}

func (a *app) batchShowCmd() *cobra.Command {
	var o registerOptions
	var file bool
	cmd := &cobra.Command{
		Use:   "show BATCH|NUMBER",
		Short: "Show a registered batch with its values, or its compound file as it was written",
		Args:  exactly("BATCH|NUMBER"),
		RunE: func(_ *cobra.Command, args []string) error {
			r, err := o.open(true)
			if err != nil {
				return err
			}
			defer r.Close()
			e, err := entry(r, args[0])
			if err != nil {
				return err
			}
			if file {
				_, err := a.out.Write(e.File)
				return err
			}
			if table.Format(o.format) == table.Terminal {
				if err := reports.EntryLines(a.out, e); err != nil {
					return err
				}
			}
			return a.answer(reports.EntryTable(e), o.format)
		},
	}
	o.flags(cmd)
	cmd.Flags().BoolVar(&file, "file", false, "write the compound file instead")
	return cmd
}

// batchCheckCmd reads the whole register through.
func (a *app) batchCheckCmd() *cobra.Command {
	var o registerOptions
	cmd := &cobra.Command{
		Use: "check", Short: "Read the whole register through and name what is damaged", Args: cobra.NoArgs,
		RunE: func(*cobra.Command, []string) error {
			r, err := o.open(true)
			if err != nil {
				return err
			}
			defer r.Close()
			damaged, err := r.Check(context.Background())
			if err != nil {
				return err
			}
			if len(damaged) == 0 {
				fmt.Fprintln(a.out, "the register is sound")
			}
			return a.damage(damaged)
		},
	}
	o.flags(cmd)
	return cmd
}

// batchFilesCmd is export, or import.
func (a *app) batchFilesCmd(out bool) *cobra.Command {
	var o registerOptions
	use, short := "import FOLDER", "Take the entries of an export over"
	if out {
		use, short = "export FOLDER", "Write the whole register as plain files"
	}
	cmd := &cobra.Command{
		Use: use, Short: short, Args: exactly("FOLDER"),
		RunE: func(_ *cobra.Command, args []string) error {
			r, err := o.open(out)
			if err != nil {
				return err
			}
			defer r.Close()
			if out {
				n, damaged, err := r.Export(context.Background(), args[0])
				if err != nil {
					return err
				}
				fmt.Fprintf(a.out, "%d entries written to %s\n", n, args[0])
				return a.damage(damaged)
			}
			in, err := r.Import(context.Background(), args[0])
			if err != nil {
				return err
			}
			fmt.Fprintf(a.out, "%d entries added, %d were here already\n", in.Added, in.Skipped)
			return a.damage(in.Damaged)
		},
	}
	o.flags(cmd)
	return cmd
}
