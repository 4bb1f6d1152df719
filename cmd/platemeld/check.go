package main

import (
	"errors"
	"fmt"

	"github.com/spf13/cobra"

	"platemeld/harmonize"
	"platemeld/harmonize/bundle"
	"platemeld/harmonize/plan"
)

// maxListed is how many problems a merge lists; a check lists all.
const maxListed = 20

func newCheckCommand() *cobra.Command {
	return &cobra.Command{
		Use:   "check PLAN",
		Short: "Read and convert everything, list every problem, fit nothing",
		Long: `Read every table of the plan and convert every date and velocity, as a merge
does, and list every problem with its file, sheet, row and column. Nothing is
fitted and nothing is written.`,
		Example: "  platemeld check testdata/demo/plan.toml",
		Args:    cobra.ExactArgs(1),
		RunE: func(command *cobra.Command, arguments []string) error {
			return runCheck(command, arguments[0])
		},
	}
}

func runCheck(command *cobra.Command, planPath string) error {
	p, err := plan.Load(planPath)
	if err != nil {
		return err
	}
	progress := newProgress(command.ErrOrStderr())
	collection, err := harmonize.Collect(command.Context(), p, progress.report)
	progress.finish()
	if err != nil {
		return err
	}
	if len(collection.Problems) > 0 {
		return fmt.Errorf("%s: %s\n%w", planPath, countProblems(len(collection.Problems)), collection.Problems)
	}
	duplicates := collection.SettleDuplicates()
	out := command.OutOrStdout()
	fmt.Fprint(out, bundle.Reading(collection, duplicates))
	fmt.Fprintln(out, "No problem found.")
	return nil
}

// shorten cuts a long list of problems and says where all of them are listed.
func shorten(err error, planPath string) error {
	var problems harmonize.Problems
	if !errors.As(err, &problems) {
		return err
	}
	heading := planPath + ": " + countProblems(len(problems)) + "; nothing was written"
	if len(problems) <= maxListed {
		return fmt.Errorf("%s\n%w", heading, problems)
	}
	return fmt.Errorf("%s\n%w\n... and %d more; platemeld check %s lists them all", heading,
		problems[:maxListed], len(problems)-maxListed, planPath)
}

func countProblems(n int) string {
	if n == 1 {
		return "1 problem"
	}
	return fmt.Sprintf("%d problems", n)
}
