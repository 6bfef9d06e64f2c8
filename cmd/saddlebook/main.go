// Command saddlebook publishes notebooks of reaction mechanisms: Markdown
// notes whose numbers are computed from the blocks they show.
package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/signal"
	"strings"
	"syscall"

	"github.com/spf13/cobra"
)

// Exit statuses, as the reference of the command line states them.
const (
	good         = 0
	claimFails   = 1 // a claim does not hold
	sourceWrong  = 2 // a source is wrong; nothing is written
	machineFails = 3 // disk, port, git
	lineWrong    = 4 // a wrong command line
)

// status is an error that carries its exit status. An empty text prints nothing.
type status struct {
	code int
	text string
}

func (s status) Error() string { return s.text }

func main() { os.Exit(run(os.Args[1:], os.Stdout, os.Stderr)) }

// run is the whole program but for the process itself.
func run(args []string, out, errs io.Writer) int {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	defer stop()
	root := rootCommand(out, errs)
	root.SetArgs(args)
	err := root.ExecuteContext(ctx)
	var s status
	switch {
	case err == nil:
		return good
	case ctx.Err() != nil:
		fmt.Fprintln(errs, "saddlebook: interrupted; what stood before stands")
		return machineFails
	case errors.As(err, &s):
		if s.text != "" {
			fmt.Fprintln(errs, "saddlebook: "+s.text)
		}
		return s.code
	}
	fmt.Fprintf(errs, "saddlebook: %s; see: saddlebook --help\n", plainly(err))
	return lineWrong
}

// plainly words what cobra says of a wrong command line without the terms of
// the library.
func plainly(err error) string {
	text, _, _ := strings.Cut(err.Error(), "\n")
	if before, _, ok := strings.Cut(text, ": strconv."); ok {
		text = before
	}
	return strings.TrimSuffix(text, ` for "saddlebook"`)
}

// takes refuses more arguments than most, or fewer than least, saying what the
// command takes.
func takes(least, most int, what string) cobra.PositionalArgs {
	return func(cmd *cobra.Command, args []string) error {
		if len(args) >= least && len(args) <= most {
			return nil
		}
		return status{lineWrong, fmt.Sprintf("%s takes %s, and %d were given; see: saddlebook %s --help", cmd.Name(), what, len(args), cmd.Name())}
	}
}

func rootCommand(out, errs io.Writer) *cobra.Command {
	root := &cobra.Command{
		Use:   "saddlebook",
		Short: "Mechanism reports from notes whose numbers are computed",
		Long: `Saddlebook turns a folder of Markdown notes with TOML blocks into pages whose
every number is computed from the block it stands by, and checks every stated
conclusion again each time anything changes.

Exit status: 0 good; 1 a claim does not hold or is undecided; 2 a source is
wrong and nothing is written; 3 the machine failed (disk, port, git) or the
target was refused; 4 a wrong command line.`,
		SilenceErrors: true,
		SilenceUsage:  true,
	}
	root.SetOut(out)
	root.SetErr(errs)
	root.AddCommand(publishCommand(), auditCommand(), resultsCommand(), drawCommand(), referenceCommand(), beginCommand())
	return root
}
