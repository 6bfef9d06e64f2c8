package main

import (
	"errors"
	"fmt"
	"path/filepath"

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
		Args:    takes(2, 2, "a note and the id of a figure"),
		RunE: func(cmd *cobra.Command, args []string) error {
			if filepath.Ext(to) != ".svg" {
				return status{lineWrong, fmt.Sprintf("draw writes an SVG, and --to is %q; write --to FILE.svg", to)}
			}
			src, err := source(cmd, args[:1])
			if err != nil {
				return err
			}
			if src.Only == "" {
				return status{lineWrong, fmt.Sprintf("%s is no note; name the Markdown file of one, such as addition.md", args[0])}
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
