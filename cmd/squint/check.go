package main

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"runtime/debug"
	"strings"

	"github.com/spf13/cobra"

	"squint/cmd/squint/demo"
	"squint/cmd/squint/internal/report"
	"squint/cmd/squint/internal/study"
	"squint/glare/verdict"
)

// checkOptions are the command line of check.
type checkOptions struct {
	Project    string // "" for the demo
	Out        string // "" for the default
	Workers    int
	RequireMet bool
	Seed       *uint64 // nil for the project's
}

func newCheck(h host, run func(context.Context, host, checkOptions) error) *cobra.Command {
	var o checkOptions
	var seed uint64
	cmd := &cobra.Command{
		Use:   "check [PROJECT.toml]",
		Short: "Check a project over a year; without one, the demo",
		Long: `Check computes a year of daylight at every work plane and of glare at every
viewpoint, holds them against the project's criteria, and writes the evidence
into a folder. Without a project it checks the demo that comes with the program,
an invented drawing office with light shelves.

Exit status:
` + strings.TrimRight(statusTable(), "\n"),
		Example: `  squint check
  squint check office.toml
  squint check office.toml --out results/deeper-shelf --require-met`,
		Args: arguments(cobra.MaximumNArgs(1), "at most one project file"),
		RunE: func(cmd *cobra.Command, args []string) error {
			if len(args) == 1 {
				if o.Project = args[0]; o.Project == "" {
					return usageError{errors.New("check: got an empty path, want a project file")}
				}
			}
			if cmd.Flags().Changed("seed") {
				o.Seed = &seed
			}
			if cmd.Flags().Changed("out") && o.Out == "" {
				return usageError{errors.New("--out: got an empty path, want a folder")}
			}
			if o.Workers < 1 {
				return usageError{fmt.Errorf("--workers: got %d, want 1 or more", o.Workers)}
			}
			return run(cmd.Context(), h, o)
		},
	}
	f := cmd.Flags()
	f.StringVar(&o.Out, "out", "", "`folder` of the results; else results/NAME beside\nthe project file, results/demo here for the demo")
	f.IntVar(&o.Workers, "workers", h.cpus, "`number` of threads, by default one for each CPU; the\nresults do not depend on it")
	f.BoolVar(&o.RequireMet, "require-met", false, "end with another exit status where a criterion is\nnot met or undecided")
	f.Uint64Var(&seed, "seed", 0, "`number` from which all random numbers follow, instead\nof the project's")
	return cmd
}

func runCheck(ctx context.Context, h host, o checkOptions) error {
	start := h.now()
	fsys, name, explain := demo.FS(), demo.Project, func(err error) error { return err }
	if o.Project != "" {
		s, err := openSource(o.Project)
		if err != nil {
			return inputError{err}
		}
		fsys, name, explain = s, s.name, s.explain
	}
	out := o.Out
	if out == "" {
		out = defaultOut(o.Project)
	}
	if err := canHold(out); err != nil {
		return inputError{err}
	}
	in, err := study.Prepare(fsys, name, o.Workers)
	if err != nil {
		return inputError{explain(err)}
	}
	if o.Seed != nil {
		in.Project.Simulation.Seed = *o.Seed
	}
	if err := report.Header(h.out, in); err != nil {
		return err
	}
	// The collector works harder as the project's own limit comes near.
	debug.SetMemoryLimit(int64(in.Project.Simulation.MemoryMiB) << 20)
	bar := newProgress(h)
	r, err := study.Run(ctx, in, study.Options{Workers: o.Workers, Progress: bar.Report})
	bar.Close(err == nil)
	// A stop in the last moments of a run counts as well.
	if stopped := ctx.Err(); stopped != nil {
		return stopped
	}
	if err != nil {
		return inputError{explain(err)}
	}
	weather, err := hashOf(fsys, in.Project.Weather.File)
	if err != nil {
		return err
	}
	if err := report.Write(out, r, report.Options{Version: h.version, WeatherSHA256: weather}); err != nil {
		return fmt.Errorf("results: %w", err)
	}
	if err := report.Terminal(h.out, r, out, h.now().Sub(start)); err != nil {
		return err
	}
	if o.RequireMet {
		return required(r.Outcome)
	}
	return nil
}

// canHold refuses a folder for results that cannot be made, before the work
// rather than after it.
func canHold(dir string) error {
	for d := filepath.Clean(dir); ; d = filepath.Dir(d) {
		info, err := os.Stat(d)
		switch {
		case err == nil && !info.IsDir():
			return fmt.Errorf("%s: got a file, want a folder for the results; choose another with --out", d)
		case err == nil, d == filepath.Dir(d):
			return nil
		}
	}
}

// defaultOut is the folder of the results where none is given.
func defaultOut(project string) string {
	if project == "" {
		return filepath.Join("results", "demo")
	}
	name := filepath.Base(project)
	if bare := strings.TrimSuffix(name, filepath.Ext(name)); bare != "" {
		name = bare
	}
	return filepath.Join(filepath.Dir(project), "results", name)
}

// required is the end of a run that must be met.
func required(o verdict.Outcome) error {
	switch o {
	case verdict.Met:
		return nil
	case verdict.NotMet:
		return verdictError{statusNotMet}
	}
	return verdictError{statusUndecided}
}

func hashOf(fsys fs.FS, name string) (string, error) {
	data, err := fs.ReadFile(fsys, name)
	if err != nil {
		return "", err
	}
	sum := sha256.Sum256(data)
	return hex.EncodeToString(sum[:]), nil
}
