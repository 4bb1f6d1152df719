package main

import (
	"github.com/spf13/cobra"

	"platemeld/harmonize/plan"
)

func newPlanReferenceCommand() *cobra.Command {
	return &cobra.Command{
		Use:     "plan-reference",
		Short:   "Print every key of a plan with its unit, default and meaning",
		Example: "  platemeld plan-reference | less",
		Args:    cobra.NoArgs,
		RunE: func(command *cobra.Command, _ []string) error {
			return plan.WriteReference(command.OutOrStdout())
		},
	}
}
