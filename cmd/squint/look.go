package main

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"path/filepath"
	"slices"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"squint/cmd/squint/internal/report"
	"squint/cmd/squint/internal/study"
	"squint/glare/falsecolour"
	"squint/scene/project"
	"squint/scene/view"
	"squint/trace/picture"
)

// lookOptions are the command line of look.
type lookOptions struct {
	pick
	// Beside are further sets of states, each its own pictures, NAME=STATE with
	// semicolons between.
	Beside  []string
	Out     string // "" for the default
	Workers int
	Seed    *uint64 // nil for the project's

	Views    []string
	AllViews bool
	At       []study.ClockTime
	Sky      skyChoice

	Projection view.Projection
	FOVDeg     float64 // 0 for the projection's usual one
	Pixels     int
	// PixelsGiven tells a sun path, whose usual width is another.
	PixelsGiven bool

	Plan string // "", "illuminance" or "luminance"
	CutM *float64

	Error   float64 // 0 for none
	Samples int
	Limit   time.Duration

	// SunPath asks for the year's sun instead, at a viewpoint or an opening.
	SunPath bool
	Opening string
	Form    string // "ahead", "up" or ""

	Formats       []string
	StandardError bool
	Map           *falsecolour.Map
	Scale         *falsecolour.Scale
	Overlay       report.Overlay
}

func newLook(h host, run func(context.Context, host, lookOptions) error) *cobra.Command {
	var o lookOptions
	var seed uint64
	var f lookFlags
	cmd := &cobra.Command{
		Use:   "look [PROJECT.toml]",
		Short: "Make luminance pictures of viewpoints at moments, or a plan",
		Long: `Look makes luminance pictures: what a viewpoint sees at a moment, in cd/m2,
with its sources of glare outlined, or a plan of the room in lx. A picture grows
finer until its error is as asked, and Ctrl-C keeps what there is. With
--sun-path it shows when in the year the sun gets to a viewpoint or an opening.
Without a project it looks at the demo. "squint guide look" says more.`,
		Example: `  squint look
  squint look office.toml --view "desk 3" --at "03-21 09:00" --at "12-21 12:00"
  squint look office.toml --all-views --sky overcast
  squint look office.toml --plan illuminance --at "06-21 12:00"
  squint look office.toml --sun-path --view "desk 3"`,
		Args: arguments(cobra.MaximumNArgs(1), "at most one project file"),
		RunE: func(cmd *cobra.Command, args []string) error {
			if len(args) == 1 {
				if o.Project = args[0]; o.Project == "" {
					return usageError{errors.New("look: got an empty path, want a project file")}
				}
			}
			if cmd.Flags().Changed("seed") {
				o.Seed = &seed
			}
			if err := f.read(cmd.Flags().Changed, &o); err != nil {
				return usageError{err}
			}
			return run(cmd.Context(), h, o)
		},
	}
	f.bind(cmd.Flags(), &o)
	cmd.Flags().IntVar(&o.Workers, "workers", h.cpus, "`number` of threads, by default one for each CPU; the\nsamples do not depend on it")
	cmd.Flags().Uint64Var(&seed, "seed", 0, "`number` from which all random numbers follow, instead\nof the project's")
	return cmd
}

func runLook(ctx context.Context, h host, o lookOptions) error {
	if o.SunPath {
		return runSunPath(ctx, h, o.sunPath())
	}
	out := o.Out
	if out == "" {
		// As check's, under another name.
		results := defaultOut(o.Project)
		out = filepath.Join(filepath.Dir(filepath.Dir(results)), "look", filepath.Base(results))
	}
	if err := canHold(out); err != nil {
		return inputError{err}
	}
	fsys, explain, all, err := o.designs()
	if err != nil {
		return err
	}
	look, err := study.PrepareLook(fsys, all, o.study())
	if err != nil {
		return inputError{explain(err)}
	}
	if err := report.LookNotes(h.out, look.Notes); err != nil {
		return err
	}
	taken, times, err := take(ctx, h, o, look)
	if err != nil {
		return err
	}
	files, err := report.WriteLook(out, taken, report.LookOptions{Version: h.version, Formats: o.Formats, StandardError: o.StandardError, Map: o.Map, Scale: o.Scale, Overlay: o.Overlay})
	if err != nil {
		return fmt.Errorf("pictures: %w", err)
	}
	for i, s := range taken {
		if err := report.LookLine(h.out, s, times[i]); err != nil {
			return err
		}
	}
	if n := len(look.Shots) - len(taken); n > 0 {
		fmt.Fprintf(h.out, "Stopped: %d of %d pictures were not begun or had no samples yet.\n", n, len(look.Shots))
	}
	fmt.Fprintf(h.out, "Written to %s: %s\n", out, strings.Join(short(files), ", "))
	return nil
}

// designs are the projects to look at, each as it stands and with the states of
// each Beside; without --alternative the first alternative.
func (o lookOptions) designs() (fsys fs.FS, explain func(error) error, all []study.Design, err error) {
	d, err := o.open()
	if err != nil {
		return nil, nil, nil, err
	}
	if o.Alternatives == nil {
		d.all = d.all[:1]
	}
	add := func(p *project.Project, words string) {
		if p.Alternative != "" && words != "" {
			words = p.Alternative + ", " + words
		} else {
			words += p.Alternative
		}
		all = append(all, study.Design{Project: p, Words: words})
	}
	for _, p := range d.all {
		add(p, strings.Join(o.States, ", "))
		for _, text := range o.Beside {
			var states []string
			for s := range strings.SplitSeq(text, ";") {
				states = append(states, strings.TrimSpace(s))
			}
			held, err := hold([]*project.Project{p}, states)
			if err != nil {
				return nil, nil, nil, fmt.Errorf("--beside: %w", err)
			}
			add(held[0], strings.Join(states, ", "))
		}
	}
	return d.fsys, d.explain, all, nil
}

// short names the first of many files.
func short(files []string) []string {
	const most = 6
	if len(files) <= most {
		return files
	}
	return append(slices.Clone(files[:most]), fmt.Sprintf("and %d more", len(files)-most))
}

// take makes the pictures and says how long each took. A stop keeps those with
// samples; without any it is an error.
func take(ctx context.Context, h host, o lookOptions, look *study.Look) (taken []*study.Shot, times []time.Duration, err error) {
	bar := newProgress(h)
	defer func() { bar.Close(err == nil) }()
	for i, s := range look.Shots {
		start := h.now()
		opt := picture.Options{Error: o.Error, Samples: o.Samples, Progress: func(p *picture.Picture) {
			bar.Report(study.StagePicture, i*1000+progressOf(p, o), 1000*len(look.Shots))
		}}
		if o.Limit > 0 {
			opt.Enough = func() bool { return h.now().Sub(start) >= o.Limit }
		}
		if err := look.Take(ctx, s, opt, bar.Report); err != nil && ctx.Err() == nil {
			return nil, nil, err
		}
		if s.Picture == nil {
			break
		}
		taken, times = append(taken, s), append(times, h.now().Sub(start))
	}
	if len(taken) == 0 {
		return nil, nil, ctx.Err()
	}
	return taken, times, nil
}

// progressOf is about how far a picture is, in thousandths.
func progressOf(p *picture.Picture, o lookOptions) int {
	share := 0.0
	if o.Samples > 0 {
		share = float64(p.Samples) / float64(o.Samples)
	}
	if o.Error > 0 && p.MedianError > 0 {
		share = max(share, o.Error*o.Error/(p.MedianError*p.MedianError))
	}
	return int(1000 * min(share, 1))
}
