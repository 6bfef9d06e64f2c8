package main

import (
	"errors"
	"fmt"

	"github.com/spf13/cobra"

	"saddlebook/render"
)

func beginCommand() *cobra.Command {
	return &cobra.Command{
		Use:     "begin DIR",
		Short:   "A small notebook to start from",
		Example: "  saddlebook begin group-notes",
		Args:    takes(1, 1, "one new folder"),
		RunE: func(cmd *cobra.Command, args []string) error {
			written, err := render.Begin(args[0])
			switch {
			case errors.Is(err, render.ErrNotEmpty):
				return status{lineWrong, err.Error()}
			case err != nil:
				return status{machineFails, err.Error()}
			}
			for _, f := range written {
				fmt.Fprintln(cmd.OutOrStdout(), f)
			}
			fmt.Fprintf(cmd.OutOrStdout(), "Next: saddlebook publish %s\n", args[0])
			return nil
		},
	}
}
