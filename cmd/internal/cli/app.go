// Package cli turns flags into calls of the front doors and their answers into
// output. It computes nothing.
//
// Results go to stdout, everything else to stderr. Exit codes: 0 done; 1 done
// and the answer is no (a severe finding, a row outside the domain); 2 wrong
// usage or unusable input, nothing written; 3 internal fault.
package cli

import (
	"errors"
	"fmt"
	"io"
	"os"
	"runtime/debug"
	"strings"

	"github.com/spf13/cobra"

	"phaselag/data/place"
)

// The exit codes.
const (
	exitDone     = 0
	exitNo       = 1
	exitUsage    = 2
	exitInternal = 3
)

// errNo says that the work is done and the answer is no; everything was
// printed already.
var errNo = errors.New("the answer is no")

// usageError is a fault of the command line.
type usageError struct{ err error }

func (e usageError) Error() string { return e.err.Error() }
func (e usageError) Unwrap() error { return e.err }

func usagef(format string, a ...any) error { return usageError{fmt.Errorf(format, a...)} }

// hinted is an error with what would be right.
func hinted(hint, format string, a ...any) error {
	return &place.Error{What: fmt.Sprintf(format, a...), Hint: hint}
}

// app carries the streams.
type app struct {
	out, err io.Writer
}

// Main runs one command line and returns the exit code.
func Main(args []string, stdout, stderr io.Writer) (code int) {
	a := &app{out: stdout, err: stderr}
	defer func() {
		if v := recover(); v != nil {
			fmt.Fprintf(stderr, "error: internal fault: %v\nhint: this is a mistake of the program; please report it with the input\n", v)
			if os.Getenv("PHASELAG_TRACE") != "" {
				fmt.Fprintf(stderr, "%s", debug.Stack())
			}
			code = exitInternal
		}
	}()
	root := a.root()
	root.SetArgs(args)
	root.SetOut(stdout)
	root.SetErr(stderr)
	err := root.Execute()
	switch {
	case err == nil:
		return exitDone
	case errors.Is(err, errNo):
		return exitNo
	}
	a.fail(err)
	return exitUsage
}

func (a *app) fail(err error) {
	text := err.Error()
	fmt.Fprintf(a.err, "error: %s\n", text)
	if h := place.Hint(err); h != "" {
		fmt.Fprintf(a.err, "hint: %s\n", h)
		return
	}
	var u usageError
	if errors.As(err, &u) || strings.HasPrefix(text, "unknown ") {
		fmt.Fprintln(a.err, "hint: phaselag COMMAND --help shows what is understood")
	}
}

func (a *app) root() *cobra.Command {
	root := &cobra.Command{
		Use:   "phaselag",
		Short: "Dynamic properties of a rubber compound from test sweeps, with honest intervals",
		Long: `phaselag turns dynamic test sweeps on a vulcanised compound into a compound
model G*(frequency, temperature, strain amplitude) that says how sure it is,
and answers from it.

Amplitudes are single amplitudes (zero to peak). Numbers hold for the tested
batch and conditions; design of supports that people depend on stays with a
qualified engineer and the codes in force.`,
		SilenceUsage: true, SilenceErrors: true,
		Args: cobra.NoArgs,
		RunE: func(cmd *cobra.Command, _ []string) error { return cmd.Help() },
	}
	root.SetFlagErrorFunc(func(_ *cobra.Command, err error) error { return usageError{err} })
	root.CompletionOptions.HiddenDefaultCmd = true
	root.AddCommand(a.inspectCmd(), a.checkCmd(), a.characterizeCmd(), a.modulusCmd(), a.stiffnessCmd(), a.responseCmd(), a.exportCmd(), a.datasheetCmd(), a.batchCmd())
	return root
}

// exactly wants n arguments and names them when they are not there.
func exactly(names ...string) cobra.PositionalArgs {
	return func(_ *cobra.Command, args []string) error {
		if len(args) != len(names) {
			return usagef("%s expected, %d arguments given", strings.Join(names, " "), len(args))
		}
		return nil
	}
}

func atLeastOne(name string) cobra.PositionalArgs {
	return func(_ *cobra.Command, args []string) error {
		if len(args) == 0 {
			return usagef("%s expected", name)
		}
		return nil
	}
}
