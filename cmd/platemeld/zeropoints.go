package main

import (
	"encoding/json"
	"fmt"

	"github.com/spf13/cobra"

	"platemeld/harmonize"
	"platemeld/harmonize/bundle"
	"platemeld/harmonize/plan"
)

type zeroPointsOptions struct {
	planPath string
	json     bool
	strict   bool
}

func newZeroPointsCommand() *cobra.Command {
	var o zeroPointsOptions
	command := &cobra.Command{
		Use:   "zeropoints PLAN",
		Short: "Fit the zero points and jitters and print them; write nothing",
		Long: `Read the plan's tables and fit the zero points and jitters as a merge does, and
print the table. With --json also their covariance, in km/s.`,
		Example: "  platemeld zeropoints testdata/demo/plan.toml\n  platemeld zeropoints plan.toml --json",
		Args:    cobra.ExactArgs(1),
		RunE: func(command *cobra.Command, arguments []string) error {
			o.planPath = arguments[0]
			return runZeroPoints(command, o)
		},
	}
	command.Flags().BoolVar(&o.json, "json", false, "print JSON at full precision")
	command.Flags().BoolVar(&o.strict, "strict", false, "exit with 3 when something needs a human")
	return command
}

func runZeroPoints(command *cobra.Command, o zeroPointsOptions) error {
	p, err := plan.Load(o.planPath)
	if err != nil {
		return err
	}
	progress := newProgress(command.ErrOrStderr())
	series, err := harmonize.Merge(command.Context(), p, progress.report)
	progress.finish()
	if err != nil {
		return shorten(err, o.planPath)
	}
	out := command.OutOrStdout()
	if o.json {
		encoder := json.NewEncoder(out)
		encoder.SetIndent("", "  ")
		if err := encoder.Encode(bundle.NewZeroPointReport(series)); err != nil {
			return err
		}
	} else {
		fmt.Fprint(out, bundle.ZeroPointTable(series), bundle.Findings(series))
	}
	return strictly(o.strict, series)
}
