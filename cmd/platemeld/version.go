package main

import (
	"fmt"
	"runtime"

	"github.com/spf13/cobra"
)

// version is raised with each entry of the README's change log.
const version = "0.1.0"

func newVersionCommand() *cobra.Command {
	return &cobra.Command{
		Use:     "version",
		Short:   "Print the version",
		Example: "  platemeld version",
		Args:    cobra.NoArgs,
		RunE: func(command *cobra.Command, _ []string) error {
			_, err := fmt.Fprintf(command.OutOrStdout(), "platemeld %s (%s)\n", version, runtime.Version())
			return err
		},
	}
}
