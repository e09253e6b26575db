package main

import (
	"context"
	"errors"
	"fmt"
	"os/exec"
	"path/filepath"
	"runtime"

	"github.com/spf13/cobra"

	"squint/cmd/squint/internal/page"
	"squint/cmd/squint/internal/report"
)

// reportOptions are the command line of report.
type reportOptions struct {
	Results     string // folder
	Alternative string // "" for the one that does best
	Open        bool
}

func newReport(h host, run func(context.Context, host, reportOptions) error) *cobra.Command {
	var o reportOptions
	cmd := &cobra.Command{
		Use:   "report [RESULTS]",
		Short: "Make the interactive report anew from a folder of results",
		Long: `Report writes ` + report.SheetFile + ` into a folder of results that check has made, from
the numbers there; nothing is computed again. Without a folder it takes
results/demo. The page holds the finest pictures of any hour for one design.`,
		Example: `  squint report results/office --open
  squint report results/office --alternative "deeper shelf"`,
		Args: arguments(cobra.MaximumNArgs(1), "at most one folder of results"),
		RunE: func(cmd *cobra.Command, args []string) error {
			o.Results = defaultOut("")
			if len(args) == 1 {
				if o.Results = args[0]; o.Results == "" {
					return usageError{errors.New("report: got an empty path, want a folder of results")}
				}
			}
			return run(cmd.Context(), h, o)
		},
	}
	f := cmd.Flags()
	f.StringVar(&o.Alternative, "alternative", "", "`name` of the alternative that the page opens with and\nhas the finest pictures of any hour for; else the one\nthat does best")
	f.BoolVar(&o.Open, "open", false, "open the page when it is made")
	return cmd
}

func runReport(ctx context.Context, h host, o reportOptions) error {
	if err := report.RemakeSheet(o.Results, o.Alternative); err != nil {
		if errors.Is(err, page.ErrNoAlternative) {
			return usageError{fmt.Errorf("--alternative: %w", err)}
		}
		return inputError{err}
	}
	path := filepath.Join(o.Results, report.SheetFile)
	if _, err := fmt.Fprintln(h.out, path); err != nil {
		return err
	}
	if o.Open {
		return open(ctx, path)
	}
	return nil
}

// open shows a file with the program that the system has for it.
func open(ctx context.Context, path string) error {
	full, err := filepath.Abs(path)
	if err != nil {
		return err
	}
	name, args := "xdg-open", []string{full}
	switch runtime.GOOS {
	case "darwin":
		name = "open"
	case "windows":
		name, args = "rundll32", []string{"url.dll,FileProtocolHandler", full}
	}
	if err := exec.CommandContext(ctx, name, args...).Run(); err != nil {
		return fmt.Errorf("%s: was made, but %s could not open it (%w); open it with a browser", path, name, err)
	}
	return nil
}
