package picture_test

import (
	"context"
	"io/fs"
	"math"
	"runtime"
	"strings"
	"testing"
	"testing/fstest"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/demo"
	"squint/scene"
	"squint/scene/project"
	"squint/scene/view"
	"squint/trace"
	"squint/trace/picture"
)

// mirroredDemo is the demo with polished tops on its light shelves.
func mirroredDemo(t testing.TB) (*trace.World, *scene.Climate) {
	t.Helper()
	toml, err := fs.ReadFile(demo.FS(), demo.Project)
	if err != nil {
		t.Fatal(err)
	}
	text := strings.ReplaceAll(string(toml), `top = "white paint"`, `top = "polished"`)
	if text == string(toml) {
		t.Fatal("the demo has no shelf with a white top")
	}
	text = strings.Replace(text, "[[opening]]", "[[finish]]\nname = \"polished\"\ntype = \"mirror\"\nspecular_reflectance = 0.85\ndiffuse_reflectance = 0.03\n\n[[opening]]", 1)
	files := fstest.MapFS{demo.Project: {Data: []byte(text)}}
	return built(t, overlay{files, demo.FS()}, demo.Project)
}

// overlay looks into the first file system and then into the other.
type overlay struct{ first, other fs.FS }

func (o overlay) Open(name string) (fs.File, error) {
	if f, err := o.first.Open(name); err == nil {
		return f, nil
	}
	return o.other.Open(name)
}

func built(t testing.TB, fsys fs.FS, name string) (*trace.World, *scene.Climate) {
	t.Helper()
	p, err := project.Load(fsys, name)
	if err != nil {
		t.Fatal(err)
	}
	s, err := scene.Build(fsys, p)
	if err != nil {
		t.Fatal(err)
	}
	c, err := scene.ReadClimate(fsys, p, nil)
	if err != nil {
		t.Fatal(err)
	}
	return trace.Accelerate(s, runtime.NumCPU()), c
}

// sunniest is the moment around noon of a month with the most sun.
func sunniest(c *scene.Climate, month time.Month) *scene.Moment {
	var best *scene.Moment
	for _, m := range c.Moments {
		if m.Time.Month() == month && m.Time.Hour() == 12 && (best == nil || m.SunNormalLx > best.SunNormalLx) {
			best = m
		}
	}
	return best
}

func fisheye(t testing.TB, v scene.Viewpoint, pixels int) view.View {
	t.Helper()
	vw, err := view.New(v.Position, v.Direction, r3.Vec{Z: 1}, view.Equidistant, math.Pi, pixels, pixels)
	if err != nil {
		t.Fatal(err)
	}
	return vw
}

// BenchmarkDemo is the demo with polished shelves in the sun, a fisheye of 512
// pixels to a median relative error of 5 %: from the built scene to the picture.
func BenchmarkDemo(b *testing.B) {
	w, c := mirroredDemo(b)
	m := sunniest(c, time.March)
	v := fisheye(b, w.Scene.Viewpoints[9], 512)
	cfg := picture.Config{TexelSamples: 256, Seed: 1, Workers: runtime.NumCPU()}
	for b.Loop() {
		start := time.Now()
		stage, err := picture.Prepare(context.Background(), w, []picture.Camera{v}, cfg, nil)
		if err != nil {
			b.Fatal(err)
		}
		b.Logf("prepared %v", time.Since(start))
		light, err := stage.Light(context.Background(), m)
		if err != nil {
			b.Fatal(err)
		}
		b.Logf("solved %v", time.Since(start))
		p, err := light.Render(context.Background(), v, picture.Options{Error: 0.05, Progress: func(p *picture.Picture) {
			b.Logf("%v %d samples, %.3f", time.Since(start), p.Samples, p.MedianError)
		}})
		if err != nil {
			b.Fatal(err)
		}
		b.ReportMetric(p.MedianError, "median-error")
		b.ReportMetric(float64(p.Samples), "samples/px")
	}
}
