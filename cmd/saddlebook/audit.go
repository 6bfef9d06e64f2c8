package main

import (
	"fmt"

	"github.com/spf13/cobra"

	"saddlebook/render"
)

func auditCommand() *cobra.Command {
	var format string
	var o render.Options
	cmd := &cobra.Command{
		Use:     "audit [NOTEBOOK]",
		Short:   "Check sources, links and claims; write nothing",
		Example: "  saddlebook audit --format json",
		Args:    takes(0, 1, "at most one notebook"),
		RunE: func(cmd *cobra.Command, args []string) error {
			if format != "text" && format != "json" {
				return status{lineWrong, fmt.Sprintf("%q is not a format; write text or json", format)}
			}
			src, err := source(cmd, args)
			if err != nil {
				return err
			}
			o.Progress = progress(cmd.ErrOrStderr())
			a, err := render.Audit(cmd.Context(), src, o)
			if err != nil {
				return status{machineFails, err.Error()}
			}
			if format == "json" {
				err = a.WriteJSON(cmd.OutOrStdout())
			} else if err = report(cmd, a.Faults); err == nil {
				_, err = fmt.Fprintln(cmd.OutOrStdout(), a.Summary())
			}
			switch {
			case err != nil:
				return status{machineFails, err.Error()}
			case a.Broken:
				return status{sourceWrong, ""}
			case a.Tally.Open():
				return status{claimFails, ""}
			}
			return nil
		},
	}
	cmd.Flags().StringVar(&format, "format", "text", "text or json")
	addJobs(cmd, &o.Jobs)
	return cmd
}
