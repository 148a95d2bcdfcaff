// Command phaselag turns dynamic test sweeps on a vulcanised compound into a
// compound model with honest intervals.
package main

import (
	"os"

	"phaselag/cmd/internal/cli"
)

func main() { os.Exit(cli.Main(os.Args[1:], os.Stdout, os.Stderr)) }
