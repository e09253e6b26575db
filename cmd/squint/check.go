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

	"squint/cmd/squint/internal/report"
	"squint/cmd/squint/internal/study"
	"squint/glare/verdict"
)

// checkOptions are the command line of check.
type checkOptions struct {
	pick
	Out        string // "" for the default
	Workers    int
	RequireMet bool
	Sensitive  bool    // also with finishes varied
	Seed       *uint64 // nil for the project's
	Fresh      bool    // computes all anew
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
an invented drawing office without and with daylighting systems. Of a project
with alternatives it checks each and compares them.

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
	o.pick.flags(f, "by default all")
	f.StringVar(&o.Out, "out", "", "`folder` of the results; else results/NAME beside\nthe project file, results/demo here for the demo")
	f.IntVar(&o.Workers, "workers", h.cpus, "`number` of threads, by default one for each CPU; the\nresults do not depend on it")
	f.BoolVar(&o.RequireMet, "require-met", false, "end with another exit status where a criterion is\nnot met or undecided")
	f.BoolVar(&o.Fresh, "fresh", false, "compute everything anew, also what earlier runs kept\nin the folder "+reuseDir+" of the results")
	f.BoolVar(&o.Sensitive, "sensitivity", false, "also check with finishes varied within usual\ntolerances, one group at a time: which verdicts turn")
	f.Uint64Var(&seed, "seed", 0, "`number` from which all random numbers follow, instead\nof the project's")
	return cmd
}

func runCheck(ctx context.Context, h host, o checkOptions) error {
	start := h.now()
	out := o.Out
	if out == "" {
		out = defaultOut(o.Project)
	}
	if err := canHold(out); err != nil {
		return inputError{err}
	}
	d, err := o.open()
	if err != nil {
		return err
	}
	inputs, err := o.prepare(d)
	if err != nil {
		return err
	}
	names := make([]string, len(inputs))
	for i, in := range inputs {
		names[i] = in.Project.Alternative
	}
	folders := report.Folders(names)
	if !compares(inputs) {
		folders[0] = ""
	}
	// A program that cannot read itself reuses nothing.
	program, programErr := programHash()
	var store study.Store
	if programErr == nil {
		store = newReuseFolder(out, o.Fresh, h.now)
	}
	var headers report.Headers
	var done []report.Design
	for i, in := range inputs {
		if err := headers.Print(h.out, in); err != nil {
			return err
		}
		began := h.now()
		r, err := runStudy(ctx, h, in, d, study.Options{Workers: o.Workers, Shots: true, Store: store, Program: program})
		if len(done) > 0 && errors.Is(err, context.Canceled) {
			return stopError{out}
		}
		if err != nil {
			return err
		}
		inputs[i] = nil // what was traced is not needed any more
		variants, err := variantsOf(ctx, h, r, o, d)
		if err != nil {
			return err
		}
		folder := filepath.Join(out, folders[i])
		weather, err := hashOf(d.fsys, r.Project.Weather.File)
		if err != nil {
			return err
		}
		if err := report.Write(folder, r, report.Options{Version: h.version, WeatherSHA256: weather, Variants: variants}); err != nil {
			return fmt.Errorf("results: %w", err)
		}
		done = append(done, report.Design{Result: r, Folder: folders[i]})
		if folders[i] == "" {
			// An earlier check of the same project may have had several.
			if err := report.RemoveComparison(out); err != nil {
				return fmt.Errorf("results: %w", err)
			}
			if err := report.WriteSheet(out, folders, ""); err != nil {
				return fmt.Errorf("results: %w", err)
			}
			err = report.Terminal(h.out, r, folder, h.now().Sub(start))
		} else {
			err = report.Brief(h.out, r, folder, h.now().Sub(began))
			r.Forget()
		}
		if err != nil {
			return err
		}
		if o.Sensitive {
			if err := report.Sensitivity(h.out, r, variants); err != nil {
				return err
			}
		}
	}
	if folders[0] != "" {
		if err := report.WriteComparison(out, done); err != nil {
			return fmt.Errorf("results: %w", err)
		}
		if err := report.WriteSheet(out, folders, ""); err != nil {
			return fmt.Errorf("results: %w", err)
		}
		if err := report.Compare(h.out, done, out, h.now().Sub(start)); err != nil {
			return err
		}
	}
	if o.RequireMet {
		return required(done)
	}
	return nil
}

// compares is whether there is more than one design, or one of several.
func compares(inputs []*study.Input) bool { return inputs[0].Project.Alternative != "" }

// prepare reads all designs before the first is computed.
func (o checkOptions) prepare(d designs) ([]*study.Input, error) {
	var inputs []*study.Input
	for _, p := range d.all {
		in, err := study.Prepare(d.fsys, p, o.Workers)
		if err != nil {
			return nil, inputError{d.explain(err)}
		}
		if o.Seed != nil {
			in.Project.Simulation.Seed = *o.Seed
		}
		inputs = append(inputs, in)
	}
	return inputs, nil
}

func runStudy(ctx context.Context, h host, in *study.Input, d designs, opt study.Options) (*study.Result, error) {
	// The collector works harder as the project's own limit comes near; a
	// sixteenth is for the program itself, which it does not count.
	debug.SetMemoryLimit(int64(in.Project.Simulation.MemoryMiB) << 20 / 16 * 15)
	bar := newProgress(h)
	opt.Progress = bar.Report
	r, err := study.Run(ctx, in, opt)
	bar.Close(err == nil)
	// A stop in the last moments of a run counts as well.
	if stopped := ctx.Err(); stopped != nil {
		return nil, stopped
	}
	if err != nil {
		return nil, inputError{d.explain(err)}
	}
	return r, nil
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

// required is the end of a run that must be met, by every design.
func required(all []report.Design) error {
	worst := verdict.Met
	for _, d := range all {
		switch o := d.Result.Outcome; {
		case o == verdict.NotMet:
			return verdictError{statusNotMet}
		case o != verdict.Met:
			worst = o
		}
	}
	if worst != verdict.Met {
		return verdictError{statusUndecided}
	}
	return nil
}

func hashOf(fsys fs.FS, name string) (string, error) {
	data, err := fs.ReadFile(fsys, name)
	if err != nil {
		return "", err
	}
	sum := sha256.Sum256(data)
	return hex.EncodeToString(sum[:]), nil
}
