package main

import (
	"fmt"
	"io"
	"os"

	"github.com/spf13/cobra"
	"golang.org/x/term"

	"saddlebook/content/fault"
	"saddlebook/render"
)

// source finds the notebook that a command was given, and says so when it is
// the embedded one.
func source(cmd *cobra.Command, args []string) (render.Source, error) {
	name := ""
	if len(args) > 0 {
		name = args[0]
	}
	src, err := render.Locate(name)
	if err != nil {
		return src, status{lineWrong, err.Error()}
	}
	if src.Embedded {
		fmt.Fprintln(cmd.ErrOrStderr(), "saddlebook: no saddlebook.toml here or above; using the embedded demo notebook")
	}
	return src, nil
}

// report writes diagnostics, one a line.
func report(cmd *cobra.Command, faults fault.List) error {
	return faults.Write(cmd.ErrOrStderr())
}

// progress shows how far the work is, on a terminal only.
func progress(w io.Writer) func(done, total int) {
	f, ok := w.(*os.File)
	if !ok || !term.IsTerminal(int(f.Fd())) {
		return nil
	}
	return func(done, total int) {
		if done < total {
			fmt.Fprintf(f, "\r%d of %d blocks", done, total)
			return
		}
		fmt.Fprintf(f, "\r\x1b[K")
	}
}

func addJobs(cmd *cobra.Command, jobs *int) {
	cmd.PreRunE = func(*cobra.Command, []string) error {
		if *jobs < 0 {
			return status{lineWrong, fmt.Sprintf("--jobs %d makes no sense; give 1 or more, or leave it out", *jobs)}
		}
		return nil
	}
	cmd.Flags().IntVar(jobs, "jobs", 0, "how many blocks to compute at once (default: one for each processor)")
}
