package main

import (
	"errors"

	"github.com/spf13/cobra"

	"saddlebook/render"
)

func referenceCommand() *cobra.Command {
	var asSchema bool
	cmd := &cobra.Command{
		Use:     "reference [KIND]",
		Short:   "What a block kind takes and gives",
		Example: "  saddlebook reference mechanism",
		Args:    takes(0, 1, "at most one kind"),
		ValidArgsFunction: func(*cobra.Command, []string, string) ([]string, cobra.ShellCompDirective) {
			return render.Kinds(), cobra.ShellCompDirectiveNoFileComp
		},
		RunE: func(cmd *cobra.Command, args []string) error {
			name := ""
			if len(args) > 0 {
				name = args[0]
			}
			err := render.Reference(cmd.OutOrStdout(), name, asSchema)
			var unknown *render.UnknownKind
			switch {
			case errors.As(err, &unknown):
				return status{lineWrong, err.Error()}
			case err != nil:
				return status{machineFails, err.Error()}
			}
			return nil
		},
	}
	cmd.Flags().BoolVar(&asSchema, "schema", false, "as JSON Schema")
	return cmd
}
