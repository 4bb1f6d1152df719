package main

import (
	"fmt"

	"github.com/spf13/cobra"

	"platemeld/harmonize"
	"platemeld/harmonize/bundle"
	"platemeld/harmonize/plan"
)

type mergeOptions struct {
	planPath string
	folder   string
	strict   bool
	quiet    bool
}

func newMergeCommand() *cobra.Command {
	var o mergeOptions
	command := &cobra.Command{
		Use:   "merge PLAN",
		Short: "Merge the tables of a plan and write the bundle",
		Long: `Read every table of the plan, convert dates and velocities, settle repeated
exposures, fit the zero points, and write the bundle. Nothing is written unless
every cell can be read.`,
		Example: "  platemeld merge testdata/demo/plan.toml\n  platemeld merge plan.toml --bundle first-try --strict",
		Args:    cobra.ExactArgs(1),
		RunE: func(command *cobra.Command, arguments []string) error {
			o.planPath = arguments[0]
			return runMerge(command, o)
		},
	}
	command.Flags().StringVar(&o.folder, "bundle", "", "folder for the bundle, instead of the plan's")
	command.Flags().BoolVar(&o.strict, "strict", false, "exit with 3 when something needs a human")
	command.Flags().BoolVar(&o.quiet, "quiet", false, "print no summary (it is in the bundle)")
	return command
}

func runMerge(command *cobra.Command, o mergeOptions) error {
	p, err := plan.Load(o.planPath)
	if err != nil {
		return err
	}
	folder := o.folder
	if folder == "" {
		folder = p.BundleFolder()
	}
	progress := newProgress(command.ErrOrStderr())
	series, err := harmonize.Merge(command.Context(), p, progress.report)
	progress.finish()
	if err != nil {
		return shorten(err, o.planPath)
	}
	if err := command.Context().Err(); err != nil {
		return err
	}
	if err := bundle.Write(folder, series); err != nil {
		return err
	}
	if !o.quiet {
		fmt.Fprintf(command.OutOrStdout(), "%sBUNDLE\n%s\n", bundle.Summary(series), folder)
	}
	return strictly(o.strict, series)
}

// strictly returns errFindings when findings matter and there are some: those
// of the fit, and sources whose dates fit the nights better in another reading.
func strictly(strict bool, series *harmonize.Series) error {
	found := len(series.Solution.Findings) > 0
	for _, verdict := range series.Nights {
		found = found || verdict.Doubtful
	}
	if strict && found {
		return errFindings
	}
	return nil
}
