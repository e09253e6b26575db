package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"squint/cmd/squint/internal/report"
	"squint/scene"
	"squint/scene/export"
)

// Names of the files that export writes.
const (
	objFile        = "scene.obj"
	mtlFile        = "scene.mtl"
	stlFile        = "scene.stl"
	systemsSTLFile = "systems.stl"
	glbFile        = "scene.glb"
)

// exportFormats as --format names them.
var exportFormats = []string{"obj", "stl", "gltf"}

// exportOptions are the command line of export.
type exportOptions struct {
	pick
	Out     string // "" for the default
	Formats []string
	Ground  bool
}

func newExport(h host, run func(context.Context, host, exportOptions) error) *cobra.Command {
	var o exportOptions
	cmd := &cobra.Command{
		Use:   "export [PROJECT.toml]",
		Short: "Write the built scene for CAD and viewers: OBJ, STL, glTF",
		Long: `Export builds the scene of a project, with the light shelves and blinds that it
describes, and writes it as files for CAD programs and viewers. Without a
project it writes the demo. "squint guide export" says what the files hold.`,
		Example: `  squint export office.toml
  squint export office.toml --format stl --out to-cad`,
		Args: arguments(cobra.MaximumNArgs(1), "at most one project file"),
		RunE: func(cmd *cobra.Command, args []string) error {
			if len(args) == 1 {
				if o.Project = args[0]; o.Project == "" {
					return usageError{errors.New("export: got an empty path, want a project file")}
				}
			}
			if cmd.Flags().Changed("out") && o.Out == "" {
				return usageError{errors.New("--out: got an empty path, want a folder")}
			}
			if len(o.Alternatives) > 1 {
				return usageError{fmt.Errorf("--alternative: got %d, want one, as a folder holds one scene", len(o.Alternatives))}
			}
			if len(o.Formats) == 0 {
				return usageError{fmt.Errorf("--format: got none, want one or more of %s", strings.Join(exportFormats, ", "))}
			}
			for _, f := range o.Formats {
				if !slices.Contains(exportFormats, f) {
					return usageError{fmt.Errorf("--format: got %q, want one or more of %s", f, strings.Join(exportFormats, ", "))}
				}
			}
			return run(cmd.Context(), h, o)
		},
	}
	f := cmd.Flags()
	o.pick.flags(f, "by default the first")
	f.StringVar(&o.Out, "out", "", "`folder` of the files; else export/NAME beside the\nproject file, export/demo here for the demo")
	f.StringSliceVar(&o.Formats, "format", exportFormats, "`formats` to write, with commas between")
	f.BoolVar(&o.Ground, "ground", false, "also the ground, as far as the model shades it")
	return cmd
}

func runExport(ctx context.Context, h host, o exportOptions) error {
	out := o.Out
	if out == "" {
		// As check's, under another name.
		results := defaultOut(o.Project)
		out = filepath.Join(filepath.Dir(filepath.Dir(results)), "export", filepath.Base(results))
	}
	if err := canHold(out); err != nil {
		return inputError{err}
	}
	d, err := o.open()
	if err != nil {
		return err
	}
	if a := d.all[0].Alternative; a != "" && o.Out == "" {
		out = filepath.Join(out, report.Slug(a))
	}
	s, err := scene.Build(d.fsys, d.all[0])
	if err != nil {
		return inputError{d.explain(err)}
	}
	files, notes, err := exportFiles(s, o)
	if err != nil {
		return err
	}
	if err := writeTogether(ctx, out, files); err != nil {
		return err
	}
	for _, n := range append(s.Notes, notes...) {
		fmt.Fprintf(h.out, "Note: %s\n", n)
	}
	for _, f := range files {
		fmt.Fprintf(h.out, "%-12s %s\n", f.name, f.about)
	}
	old := left(out, files)
	if len(old) > 0 {
		fmt.Fprintf(h.out, "Note: %s there: left from before, not of this export.\n", strings.Join(old, ", "))
	}
	fmt.Fprintf(h.out, "Written to %s. Lengths are metres.\n", out)
	return nil
}

// exportFile is one file to write.
type exportFile struct {
	name, about string
	write       func(io.Writer) error
}

func exportFiles(s *scene.Scene, o exportOptions) (files []exportFile, notes []string, err error) {
	all, err := export.New(s, export.Options{Ground: o.Ground})
	if err != nil {
		return nil, nil, err
	}
	add := func(name, about string, write func(io.Writer) error) {
		files = append(files, exportFile{name, about, write})
	}
	asks := func(format string) bool { return slices.Contains(o.Formats, format) }
	size := fmt.Sprintf("%d parts, %d triangles", len(all.Pieces), all.Triangles())
	if asks("obj") {
		add(objFile, size+", z up", func(w io.Writer) error { return all.WriteOBJ(w, mtlFile) })
		add(mtlFile, fmt.Sprintf("%d finishes, as greys", len(all.Shades)), all.WriteMTL)
	}
	if asks("stl") {
		add(stlFile, fmt.Sprintf("%d triangles, z up", all.Triangles()-all.Flat), all.WriteSTL)
		systems, err := export.New(s, export.Options{SystemsOnly: true})
		switch {
		case errors.Is(err, export.ErrEmpty):
			notes = append(notes, "the project has no systems in place, so "+systemsSTLFile+" is not written.")
		case err != nil:
			return nil, nil, err
		default:
			add(systemsSTLFile, fmt.Sprintf("%d triangles, z up: the systems alone", systems.Triangles()-systems.Flat), systems.WriteSTL)
		}
	}
	if asks("gltf") {
		add(glbFile, size+", y up", all.WriteGLB)
	}
	if asks("stl") || asks("gltf") {
		const seen = 0.0005 // m; half a millimetre is what a drawing shows
		if all.RoundingM > seen {
			notes = append(notes, fmt.Sprintf("the model lies far from its origin: STL and glTF move its corners by up to %.2g m; OBJ does not.", all.RoundingM))
		}
		if all.Flat > 0 {
			notes = append(notes, fmt.Sprintf("%d triangles too thin for STL and glTF are left out there; OBJ has them.", all.Flat))
		}
	}
	return files, notes, nil
}

// writeTogether writes all files whole under temporary names, and then gives
// them their own. On an error or a stop before that, nothing has changed.
func writeTogether(ctx context.Context, dir string, files []exportFile) error {
	var list []report.File
	for _, f := range files {
		list = append(list, report.File{Name: f.name, Write: f.write})
	}
	err := report.WriteFiles(ctx, dir, list)
	var in *report.InTheWayError
	if errors.As(err, &in) {
		return inputError{err}
	}
	return err
}

// left names the files of an earlier export that this one did not replace.
func left(dir string, files []exportFile) []string {
	var old []string
	for _, name := range []string{objFile, mtlFile, stlFile, systemsSTLFile, glbFile} {
		ours := slices.ContainsFunc(files, func(f exportFile) bool { return f.name == name })
		if _, err := os.Stat(filepath.Join(dir, name)); err == nil && !ours {
			old = append(old, name)
		}
	}
	return old
}
