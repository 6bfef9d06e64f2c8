package main

import (
	"fmt"

	"github.com/spf13/cobra"

	"saddlebook/render"
)

func publishCommand() *cobra.Command {
	var to string
	var o render.Options
	cmd := &cobra.Command{
		Use:   "publish [NOTEBOOK]",
		Short: "Write the site",
		Long: `Write the site of a notebook, all or nothing: the old site stands untouched
until the new one is whole. A claim that does not hold does not stop it, and
gives status 1.`,
		Example: "  saddlebook publish group-notes --to /srv/www/notes",
		Args:    takes(0, 1, "at most one notebook"),
		RunE: func(cmd *cobra.Command, args []string) error {
			src, err := source(cmd, args)
			if err != nil {
				return err
			}
			o.Progress = progress(cmd.ErrOrStderr())
			done, err := render.Publish(cmd.Context(), src, to, o)
			if werr := report(cmd, done.Faults); werr != nil {
				return status{machineFails, werr.Error()}
			}
			switch {
			case err != nil:
				return status{machineFails, err.Error()}
			case done.Broken:
				return status{sourceWrong, "nothing was written"}
			}
			if done.Note != nil {
				fmt.Fprintf(cmd.ErrOrStderr(), "saddlebook: the cache was not written (%v); set SADDLEBOOK_CACHE to another folder, or to off\n", done.Note)
			}
			if _, err := fmt.Fprintln(cmd.OutOrStdout(), done.Summary()); err != nil {
				return status{machineFails, err.Error()}
			}
			if done.Tally.Open() {
				return status{claimFails, ""}
			}
			return nil
		},
	}
	cmd.Flags().StringVar(&to, "to", "", "the folder of the site (default: published beside saddlebook.toml; for the embedded notebook, in the current folder)")
	cmd.Flags().BoolVar(&o.Fresh, "fresh", false, "compute everything anew, without the cache")
	addJobs(cmd, &o.Jobs)
	return cmd
}
