package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"runtime"
	"strings"
	"time"

	"github.com/spf13/cobra"
	"golang.org/x/term"
)

// host is what the program knows of the machine it runs on.
type host struct {
	out, err io.Writer
	terminal bool // err is a terminal
	cpus     int
	now      func() time.Time
	version  string
}

func machine() host {
	return host{
		out: os.Stdout, err: os.Stderr,
		terminal: term.IsTerminal(int(os.Stderr.Fd())),
		cpus:     runtime.NumCPU(),
		now:      time.Now,
		version:  version(),
	}
}

// run is the whole program. It alone prints errors.
func run(ctx context.Context, h host, args []string) status {
	root := newRoot(h)
	root.SetArgs(args)
	cmd, err := root.ExecuteContextC(ctx)
	st := statusOf(err)
	switch st {
	case statusDone, statusNotMet, statusUndecided:
		return st
	case statusCancelled:
		text := "stopped; no results were written"
		if kept := (stopError{}); errors.As(err, &kept) {
			text = kept.Error()
		}
		fmt.Fprintf(h.err, "squint: %s.\n", text)
		return st
	}
	text := err.Error()
	if strings.Contains(text, "\n") {
		text = fmt.Sprintf("%d problems:\n%s", strings.Count(text, "\n")+1, text)
	}
	fmt.Fprintln(h.err, "squint: "+text)
	if isUsage(err) {
		fmt.Fprintf(h.err, "\n%s", cmd.UsageString())
	}
	return st
}

func newRoot(h host) *cobra.Command {
	root := &cobra.Command{
		Use:   "squint",
		Short: "Checks daylighting designs for daylight and glare over a year",
		Long: `squint checks a daylighting design: for every workstation and every hour of a
year, whether a light shelf or blind brings enough daylight without glare.

Without a project, "squint check" runs the demo that comes with the program;
"squint guide" explains everything.`,
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) == 0 {
				return nil
			}
			hint := ""
			if near := cmd.SuggestionsFor(args[0]); len(near) > 0 {
				hint = fmt.Sprintf("; did you mean %q?", near[0])
			}
			return usageError{fmt.Errorf("unknown command %q%s", args[0], hint)}
		},
		RunE:          func(cmd *cobra.Command, _ []string) error { return cmd.Help() },
		SilenceUsage:  true,
		SilenceErrors: true,
		Version:       h.version,
	}
	root.SetVersionTemplate("squint {{.Version}}\n")
	root.SuggestionsMinimumDistance = 2
	root.CompletionOptions.HiddenDefaultCmd = true
	root.SetOut(h.out)
	root.SetErr(h.err)
	root.SetFlagErrorFunc(func(_ *cobra.Command, err error) error { return usageError{err} })
	root.AddCommand(newCheck(h, runCheck), newLook(h, runLook), newNew(h, runNew), newExport(h, runExport), newGlare(h, runGlare), newReport(h, runReport), newGuide(h, runGuide))
	return root
}

// arguments turns cobra's complaint about the number of arguments into a usage
// error.
func arguments(check cobra.PositionalArgs, want string) cobra.PositionalArgs {
	return func(cmd *cobra.Command, args []string) error {
		if check(cmd, args) != nil {
			return usageError{fmt.Errorf("%s: got %d arguments, want %s", cmd.Name(), len(args), want)}
		}
		return nil
	}
}
