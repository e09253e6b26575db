package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"reflect"
	"strings"
	"testing"
	"time"

	"github.com/spf13/cobra"
)

func testHost(out, err io.Writer) host {
	return host{out: out, err: err, cpus: 3, now: func() time.Time { return time.Time{} }, version: "v0"}
}

// parse runs one command with its work replaced and returns the options that
// the work was given.
func parse(t *testing.T, args []string, with func(h host, got *any) *cobra.Command) (any, error) {
	t.Helper()
	var sink bytes.Buffer
	h := testHost(&sink, &sink)
	var got any
	root := newRoot(h)
	root.ResetCommands()
	root.AddCommand(with(h, &got))
	root.SetArgs(args)
	return got, root.ExecuteContext(context.Background())
}

func TestFlags(t *testing.T) {
	two := uint64(2)
	check := func(h host, got *any) *cobra.Command {
		return newCheck(h, func(_ context.Context, _ host, o checkOptions) error { *got = o; return nil })
	}
	fresh := func(h host, got *any) *cobra.Command {
		return newNew(h, func(_ context.Context, _ host, o newOptions) error { *got = o; return nil })
	}
	guide := func(h host, got *any) *cobra.Command {
		return newGuide(h, func(_ context.Context, _ host, o guideOptions) error { *got = o; return nil })
	}
	images := func(h host, got *any) *cobra.Command {
		return newGlare(h, func(_ context.Context, _ host, o glareOptions) error { *got = o; return nil })
	}
	plain := glareOptions{Images: []string{"a.exr"}, LuxTolerance: 10, AgeYears: 40, Pigmentation: 0.5, Format: "text", Picture: "png"}
	plain.Sources = sourceFlags{Rule: "luminance", Luminance: 2000, Multiple: 4, GroupingDeg: 4, CoreLuminance: 50000}
	camera := plain
	camera.Camera = cameraFlags{Projection: "equisolid", FOVDeg: 185, Circle: "9,8,7", RollDeg: -3, Vignetting: "1,0,-1e-5", Factor: 179,
		Spots: []string{"3,4=350"}, circleGiven: true, factorGiven: true}
	camera.Lux, camera.Format, camera.Picture, camera.Out = 2450, "json", "tiff", "x"
	task := plain
	task.Images = []string{"a.exr", "b.exr"}
	task.Sources = sourceFlags{Rule: "sight-mean", Luminance: 2000, Multiple: 5, Task: "-10,-20,30", GroupingDeg: 0, LowLight: true}
	for _, c := range []struct {
		args string
		with func(host, *any) *cobra.Command
		want any // nil for a usage error
	}{
		{"check", check, checkOptions{Workers: 3}},
		{"check a.toml", check, checkOptions{pick: pick{Project: "a.toml"}, Workers: 3}},
		{"check --out x --workers 1 --require-met --seed 2 a.toml", check, checkOptions{pick: pick{Project: "a.toml"}, Out: "x", Workers: 1, RequireMet: true, Seed: &two}},
		{"check a.toml --sensitivity", check, checkOptions{pick: pick{Project: "a.toml"}, Workers: 3, Sensitive: true}},
		{"check a.toml --workers=7", check, checkOptions{pick: pick{Project: "a.toml"}, Workers: 7}},
		{"check a.toml --alternative bare --alternative b --state s=open", check, checkOptions{pick: pick{"a.toml", []string{"bare", "b"}, []string{"s=open"}}, Workers: 3}},
		{"check a.toml b.toml", check, nil},
		{"check --workers 0", check, nil},
		{"check --workers -1", check, nil},
		{"check --workers 1.5", check, nil},
		{"check --seed -1", check, nil},
		{"check --seed x", check, nil},
		{"check --out", check, nil},
		{"check --require-met=perhaps", check, nil},
		{"check --no-such", check, nil},
		{"new here", fresh, newOptions{Dir: "here"}},
		{"new", fresh, nil},
		{"new a b", fresh, nil},
		{"guide", guide, guideOptions{}},
		{"guide weather", guide, guideOptions{Topic: "weather"}},
		{"guide a b", guide, nil},
		{"guide --out g.html", guide, guideOptions{Out: "g.html"}},
		{"guide look --out g.html", guide, nil},
		{"guide --out=", guide, nil},
		{"other", guide, nil},
		{"glare a.exr", images, plain},
		{"glare a.exr --projection equisolid --fov-deg 185 --circle 9,8,7 --roll-deg -3 --vignetting 1,0,-1e-5 --luminance-factor 179 --spot 3,4=350 --lux 2450 --format json --picture tiff --out x", images, camera},
		{"glare a.exr b.exr --source-rule sight-mean --source-multiple 5 --task -10,-20,30 --grouping-deg 0 --core-luminance 0 --low-light", images, task},
		{"glare", images, nil},
		{"glare a.exr --format xml", images, nil},
		{"glare a.exr --picture gif", images, nil},
		{"glare a.exr --projection round", images, nil},
		{"glare a.exr --fov-deg 0", images, nil},
		{"glare a.exr --fov-deg NaN", images, nil},
		{"glare a.exr --circle 1,2", images, nil},
		{"glare a.exr --circle 1,2,0", images, nil},
		{"glare a.exr --circle 1,2,Inf", images, nil},
		{"glare a.exr --roll-deg 400", images, nil},
		{"glare a.exr --vignetting 1,x", images, nil},
		{"glare a.exr --vignetting 1 --vignetting-table t.csv", images, nil},
		{"glare a.exr --luminance-factor 0", images, nil},
		{"glare a.exr --luminance-factor -1", images, nil},
		{"glare a.exr --spot 1,2=0", images, nil},
		{"glare a.exr --spot 1=5", images, nil},
		{"glare a.exr --mask-polygon a=0,0", images, nil},
		{"glare a.exr --mask-polygon 0,0", images, nil},
		{"glare a.exr --lux 0", images, nil},
		{"glare a.exr --lux-tolerance -1", images, nil},
		{"glare a.exr --age 0", images, nil},
		{"glare a.exr --pigmentation 2", images, nil},
		{"glare a.exr --source-rule mean", images, nil},
		{"glare a.exr --source-luminance 0", images, nil},
		{"glare a.exr --source-multiple 0", images, nil},
		{"glare a.exr --task 0,0,0", images, nil},
		{"glare a.exr --grouping-deg NaN", images, nil},
		{"glare a.exr --core-luminance -5", images, nil},
	} {
		t.Run(c.args, func(t *testing.T) {
			got, err := parse(t, strings.Fields(c.args), c.with)
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

func TestStatusOf(t *testing.T) {
	for _, c := range []struct {
		err  error
		want status
	}{
		{nil, statusDone},
		{errors.New("disk full"), statusFailed},
		{usageError{errors.New("x")}, statusUsage},
		{inputError{errors.New("x")}, statusUsage},
		{fmt.Errorf("more: %w", inputError{errors.New("x")}), statusUsage},
		{verdictError{statusNotMet}, statusNotMet},
		{verdictError{statusUndecided}, statusUndecided},
		{context.Canceled, statusCancelled},
		// A run that was stopped is stopped, whatever it was that noticed.
		{inputError{context.Canceled}, statusCancelled},
	} {
		if got := statusOf(c.err); got != c.want {
			t.Errorf("%v: got %d, want %d", c.err, got, c.want)
		}
	}
}

// Every status is in the table once, so that help and guide are whole.
func TestStatusTable(t *testing.T) {
	want := []status{statusDone, statusFailed, statusUsage, statusNotMet, statusUndecided, statusCancelled}
	if len(statuses) != len(want) {
		t.Fatalf("the table has %d statuses, want %d", len(statuses), len(want))
	}
	for i, s := range statuses {
		if s.Code != int(want[i]) {
			t.Errorf("row %d is %d, want %d", i, s.Code, want[i])
		}
	}
}
