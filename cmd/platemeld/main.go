// Command platemeld merges a century of published radial velocities of a star
// into one series. Each command is a file of this folder; the work is done by
// package harmonize and the packages below it.
package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/signal"
	"syscall"

	"github.com/spf13/cobra"
)

// The exit codes.
const (
	exitDone     = 0
	exitInput    = 1 // the input cannot be merged; the message says why
	exitUsage    = 2 // wrong usage
	exitFindings = 3 // done, but with findings that need a human, under --strict
)

// errFindings is returned by a command that did its work and was asked to be
// strict about findings.
var errFindings = errors.New("there are findings that need a human, listed under TO LOOK AT or NIGHT TEST")

func main() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	code := run(ctx, os.Args[1:], os.Stdin, os.Stdout, os.Stderr)
	stop()
	os.Exit(code)
}

// run executes one command line and returns the exit code.
func run(ctx context.Context, arguments []string, in io.Reader, out, remarks io.Writer) int {
	root := newRootCommand()
	begun := false // an error before that is one of usage
	root.PersistentPreRun = func(*cobra.Command, []string) { begun = true }
	root.SetArgs(arguments)
	root.SetIn(in)
	root.SetOut(out)
	root.SetErr(remarks)
	err := root.ExecuteContext(ctx)
	if err == nil {
		return exitDone
	}
	fmt.Fprintf(remarks, "platemeld: %v\n", err)
	switch {
	case errors.Is(err, errFindings):
		return exitFindings
	case !begun || errors.Is(err, errUsage):
		fmt.Fprintln(remarks, "platemeld --help lists the commands, platemeld COMMAND --help explains one")
		return exitUsage
	}
	return exitInput
}

// errUsage marks an error of usage that only a running command can find.
var errUsage = errors.New("wrong usage")

func newRootCommand() *cobra.Command {
	root := &cobra.Command{
		Use:   "platemeld",
		Short: "Merge a century of published radial velocities into one series",
		Long: `platemeld reads the published tables of a star's radial velocities as they are,
turns every date into BJD_TDB and every velocity to the barycentre, fits each
instrument's zero point and jitter, and writes one merged series in which each
row can be traced back to its printed cell.

What is merged, and how each table is read, stands in a plan (a TOML file).`,
		Example:       "  platemeld merge plan.toml\n  platemeld check plan.toml",
		SilenceUsage:  true,
		SilenceErrors: true,
	}
	root.AddCommand(newMergeCommand(), newCheckCommand(), newEpochsCommand(), newZeroPointsCommand(),
		newPlanReferenceCommand(), newVersionCommand())
	return root
}
