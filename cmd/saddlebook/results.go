package main

import (
	"fmt"

	"github.com/spf13/cobra"

	"saddlebook/render"
)

func resultsCommand() *cobra.Command {
	var format string
	var o render.Options
	cmd := &cobra.Command{
		Use:   "results [NOTEBOOK | NOTE]",
		Short: "One stable line per result",
		Long: `List every computed value of a notebook or of one note. Text and CSV print six
significant digits; JSON is one array of objects with key, value, unit, low,
high, file and line, at full precision.`,
		Example: "  saddlebook results addition.md --format csv",
		Args:    takes(0, 1, "at most one notebook or note"),
		RunE: func(cmd *cobra.Command, args []string) error {
			if format != "text" && format != "csv" && format != "json" {
				return status{lineWrong, fmt.Sprintf("%q is not a format; write text, csv or json", format)}
			}
			src, err := source(cmd, args)
			if err != nil {
				return err
			}
			o.Progress = progress(cmd.ErrOrStderr())
			lines, faults, err := render.Results(cmd.Context(), src, o)
			if err != nil {
				return status{machineFails, err.Error()}
			}
			if err := report(cmd, faults); err != nil {
				return status{machineFails, err.Error()}
			}
			if faults.Failed() {
				return status{sourceWrong, ""}
			}
			if err := render.WriteResults(cmd.OutOrStdout(), lines, format); err != nil {
				return status{machineFails, err.Error()}
			}
			return nil
		},
	}
	cmd.Flags().StringVar(&format, "format", "text", "text, csv or json")
	addJobs(cmd, &o.Jobs)
	return cmd
}
