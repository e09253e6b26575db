package main

import (
	"context"
	"errors"
	"image/png"
	"io"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"
	"time"

	"github.com/spf13/cobra"
	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/demo"
	"squint/cmd/squint/internal/report"
	"squint/cmd/squint/internal/study"
	"squint/glare"
	"squint/glare/falsecolour"
	"squint/glare/luminance"
	"squint/scene/project"
	"squint/scene/view"
	"squint/trace/picture"
)

// galleryFS is the gallery with the invented year that comes with the program.
type galleryFS struct{ fs.FS }

func (g galleryFS) Open(name string) (fs.File, error) {
	if name == "weather.epw" {
		return demo.Starter().Open("site.epw")
	}
	return g.FS.Open(name)
}

// TestGalleryPictures: pictures of projects are made by one call each, with a
// system that follows the sun among them, and their files hold what they say.
func TestGalleryPictures(t *testing.T) {
	files := galleryFS{os.DirFS(galleryFolder)}
	o := study.LookOptions{Projection: view.Equidistant, FOVDeg: 180, Width: 48, Height: 48, Workers: 2,
		When: []study.When{study.AtHour(study.ClockTime{Month: 3, Day: 21, Hour: 11})}}
	for _, name := range []string{"light-shelf-flat", "blind-cut-off", "anidolic-symmetric"} {
		t.Run(name, func(t *testing.T) {
			p, err := project.Load(files, name+".toml")
			if err != nil {
				t.Fatal(err)
			}
			shots, err := study.TakeAll(context.Background(), files, []study.Design{{Project: p}}, o, picture.Options{Samples: 8})
			if err != nil {
				t.Fatal(err)
			}
			if name == "blind-cut-off" && shots[0].Stands == "" {
				t.Error("the blind follows the sun; got no words for how it stands")
			}
			dir := t.TempDir()
			written, err := report.WriteLook(dir, shots, report.LookOptions{Formats: []string{"exr", "png"}})
			if err != nil || len(written) != 2 {
				t.Fatalf("got files %v, %v, want an EXR and a PNG", written, err)
			}
			checkEXR(t, filepath.Join(dir, written[0]), shots[0])
			f, err := os.Open(filepath.Join(dir, written[1]))
			if err != nil {
				t.Fatal(err)
			}
			defer f.Close()
			if _, err := png.Decode(f); err != nil {
				t.Error(err)
			}
		})
	}
}

// checkEXR reads a picture back and evaluates its glare: the file alone must
// give the DGP that was stated.
func checkEXR(t *testing.T, name string, s *study.Shot) {
	t.Helper()
	f, err := os.Open(name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	im, err := luminance.ReadEXR(f)
	if err != nil {
		t.Fatal(err)
	}
	v, err := im.View()
	if err != nil {
		t.Fatal(err)
	}
	var discs []glare.Disc
	for _, d := range im.Attr.Discs {
		discs = append(discs, glare.Disc{Dir: r3.Vec{X: d.Direction[0], Y: d.Direction[1], Z: d.Direction[2]}, OmegaSr: d.OmegaSr, Luminance: d.Luminance})
	}
	got := glare.Evaluate(glare.NewField(v), im.Lum, discs, glare.Options{}, nil)
	// Attributes keep angles in single precision: rounding only.
	if math.Abs(got.DGP-s.Glare.DGP) > 1e-5 || math.Abs(got.Ev/s.Glare.Ev-1) > 1e-5 {
		t.Errorf("%s: got DGP %.6f and %.3f lx from the file, want %.6f and %.3f", name, got.DGP, got.Ev, s.Glare.DGP, s.Glare.Ev)
	}
}

// TestLookStopped: a stop after the first samples keeps and writes the picture;
// before them it is a stop like any other.
func TestLookStopped(t *testing.T) {
	dir := t.TempDir()
	if err := writeSmall(dir); err != nil {
		t.Fatal(err)
	}
	o := lookOptions{pick: pick{Project: filepath.Join(dir, "project.toml")}, Out: filepath.Join(dir, "out"), Workers: 2, Pixels: 16,
		At: []study.ClockTime{usualAt}, Error: 1e-9, Formats: []string{"exr"}}
	h := testHost(io.Discard, io.Discard)
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if err := runLook(ctx, h, o); !errors.Is(err, context.Canceled) {
		t.Errorf("stopped at once: got %v, want context.Canceled", err)
	}
	if _, err := os.Stat(o.Out); !errors.Is(err, fs.ErrNotExist) {
		t.Errorf("stopped at once: got %v for the folder, want none", err)
	}
	// The clock is asked after each round, so that the stop comes after some.
	ctx, cancel = context.WithCancel(context.Background())
	defer cancel()
	o.Limit = 1 << 62
	now, asked := h.now, 0
	h.now = func() time.Time {
		if asked++; asked > 20 {
			cancel()
		}
		return now()
	}
	if err := runLook(ctx, h, o); err != nil {
		t.Fatalf("stopped between: got %v, want the picture so far", err)
	}
	list, err := filepath.Glob(filepath.Join(o.Out, "*.exr"))
	if err != nil || len(list) != 1 {
		t.Errorf("got %v, %v, want one picture", list, err)
	}
}

func TestLookFlags(t *testing.T) {
	look := func(h host, got *any) *cobra.Command {
		return newLook(h, func(_ context.Context, _ host, o lookOptions) error { *got = o; return nil })
	}
	usual := lookOptions{Workers: 3, At: []study.ClockTime{{Month: 3, Day: 21, Hour: 12}}, Sky: skyChoice{DiffuseLx: usualSkyLx},
		Pixels: 512, Error: 0.05, Limit: 2 * time.Minute, Formats: []string{"exr", "png"}}
	with := func(change func(o *lookOptions)) lookOptions {
		o := usual
		change(&o)
		return o
	}
	cut := 1.2
	for _, c := range []struct {
		args []string
		want any // nil for a usage error
	}{
		{[]string{}, usual},
		{[]string{"a.toml", "--view", "desk 3", "--at", "12-01 08:30"}, with(func(o *lookOptions) {
			o.Project, o.Views, o.At = "a.toml", []string{"desk 3"}, []study.ClockTime{{Month: 12, Day: 1, Hour: 8, Minute: 30}}
		})},
		{[]string{"--sky", "cie 12", "--sun-lx", "5e4"}, with(func(o *lookOptions) { o.Sky.Kind, o.Sky.CIE, o.Sky.SunLx = cieSky, 12, 5e4 })},
		{[]string{"--sky", "clear", "--diffuse", "90", "--direct", "0"}, with(func(o *lookOptions) { o.Sky.Kind, o.Sky.DiffuseWM2 = clearSky, 90 })},
		{[]string{"--plan", "luminance", "--cut", "1.2"}, with(func(o *lookOptions) { o.Plan, o.CutM = "luminance", &cut })},
		{[]string{"--scale", "linear:0:500", "--format", "png,png"}, with(func(o *lookOptions) {
			o.Scale, o.Formats = &falsecolour.Scale{Max: 500}, []string{"png"}
		})},
		{[]string{"--sun-path", "--opening", "window 1", "--form", "ahead"}, with(func(o *lookOptions) {
			o.SunPath, o.Opening, o.Form = true, "window 1", "ahead"
		})},
		{[]string{"--opening", "window 1"}, nil},
		{[]string{"--sun-path", "--plan", "illuminance"}, nil},
		{[]string{"--sun-path", "--at", "03-21 12:00"}, nil},
		{[]string{"--sun-path", "--view", "a", "--view", "b"}, nil},
		{[]string{"--contours", "500,2000", "--point", "10,20"}, with(func(o *lookOptions) {
			o.Overlay = report.Overlay{Contours: []float64{500, 2000}, Points: [][2]float64{{10, 20}}}
		})},
		{[]string{"--contours", "bright"}, nil},
		{[]string{"--point", "10"}, nil},
		{[]string{"--point", "-1,2"}, nil},
		{[]string{"--error", "1"}, nil},
		{[]string{"--error", "-0.1"}, nil},
		{[]string{"--error", "NaN"}, nil},
		{[]string{"--pixels", "7"}, nil},
		{[]string{"--pixels", "5000"}, nil},
		{[]string{"--samples", "-1"}, nil},
		{[]string{"--limit", "-1s"}, nil},
		{[]string{"--sky", "cie 0"}, nil},
		{[]string{"--sky", "overcast", "--direct", "5"}, nil},
		{[]string{"--sky", "clear", "--diffuse", "Inf", "--direct", "5"}, nil},
		{[]string{"--scale", "0:10"}, nil},
		{[]string{"--scale", "10:1"}, nil},
		{[]string{"--map", "rainbow"}, nil},
		{[]string{"--format", ""}, nil},
		{[]string{"--workers", "0"}, nil},
		{[]string{"a.toml", "b.toml"}, nil},
	} {
		t.Run(strings.Join(c.args, " "), func(t *testing.T) {
			got, err := parse(t, append([]string{"look"}, c.args...), look)
			if c.want == nil {
				var usage usageError
				if !errors.As(err, &usage) || got != nil {
					t.Errorf("got %+v and error %v, want a usage error", got, err)
				}
				return
			}
			if err != nil || !reflect.DeepEqual(got, c.want) {
				t.Errorf("got %+v and error %v, want %+v", got, err, c.want)
			}
		})
	}
}
