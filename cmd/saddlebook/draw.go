package main

import (
	"errors"

	"github.com/spf13/cobra"

	"saddlebook/render"
)

func drawCommand() *cobra.Command {
	var to string
	var o render.Options
	cmd := &cobra.Command{
		Use:     "draw NOTE ID",
		Short:   "One figure as a stand-alone SVG for a paper",
		Example: "  saddlebook draw addition.md hills --to hills.svg",
		Args:    cobra.ExactArgs(2),
		RunE: func(cmd *cobra.Command, args []string) error {
			if to == "" {
				return status{lineWrong, "draw needs --to FILE.svg"}
			}
			src, err := source(cmd, args[:1])
			if err != nil {
				return err
			}
			faults, err := render.Draw(cmd.Context(), src, args[1], to, o)
			if werr := report(cmd, faults); werr != nil {
				return status{machineFails, werr.Error()}
			}
			var none *render.NoFigure
			switch {
			case errors.As(err, &none):
				return status{lineWrong, err.Error()}
			case err != nil:
				return status{machineFails, err.Error()}
			case faults.Failed():
				return status{sourceWrong, "nothing was written"}
			}
			return nil
		},
	}
	cmd.Flags().StringVar(&to, "to", "", "the file to write")
	return cmd
}
