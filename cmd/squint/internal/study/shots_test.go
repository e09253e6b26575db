package study

import (
	"context"
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"
	"testing/fstest"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/internal/film"
	"squint/scene"
	"squint/scene/view"
	"squint/trace/annual"
	"squint/trace/coeff"
)

// The pictures of a view must show its worst hour, which is kept at full size
// by another way, within the errors that they state.
func TestShotsShowTheWorstHour(t *testing.T) {
	// In use from 8 to 18 h every day, for hours that differ.
	text := strings.NewReplacer(`["wed"]`, `["mon", "tue", "wed", "thu", "fri", "sat", "sun"]`, `"11:00"`, `"08:00"`, `"12:00"`, `"18:00"`).
		Replace(fmt.Sprintf(tinyProject, 2.0))
	in, err := prepareFile(fstest.MapFS{
		"project.toml": {Data: []byte(text)},
		"room.obj":     {Data: []byte(tinyRoom())},
		"site.epw":     {Data: tinyYear(t)},
	}, "project.toml", "", 1)
	if err != nil {
		t.Fatal(err)
	}
	r, err := Run(context.Background(), in, Options{Workers: 2, Shots: true})
	if err != nil {
		t.Fatal(err)
	}
	v := &r.Views[0]
	s := v.Shots
	if s == nil || s.Film == nil {
		t.Fatal("got no pictures, want those of one view")
	}
	frame := slices.Index(s.Records, v.Worst.Moment.Step)
	if frame < 0 {
		t.Fatalf("record %d has no picture", v.Worst.Moment.Step)
	}
	if s.View.Width != v.Worst.InsideOf.View.Width {
		t.Fatalf("got pictures of %d pixels, want the view's own %d, as it has fewer than the pictures may have", s.View.Width, v.Worst.InsideOf.View.Width)
	}
	shown := make([]float64, len(s.Inside))
	s.Film.At(frame, shown)
	var off []float64
	for p, px := range s.Inside {
		if l := float64(v.Worst.Lum[px]); l > 1 {
			off = append(off, math.Abs(shown[p]-l)/l)
		}
	}
	slices.Sort(off)
	// The film's own error, and half a step of the scale in which it was kept.
	bound := s.Film.Exact().Wide + math.Expm1(s.Film.StepLn/2)
	if got := off[len(off)/2]; got > bound {
		t.Errorf("worst hour: half of the points are off by %.3f or more, want at most %.3f", got, bound)
	}
	if len(s.Discs[frame]) != len(v.Worst.Discs) {
		t.Errorf("got %d discs, want %d", len(s.Discs[frame]), len(v.Worst.Discs))
	}
	// The twin: another hour's picture is not this one.
	other := slices.IndexFunc(s.Records, func(h int) bool { return v.Ev[h] > 0 && v.Ev[h] < v.Ev[v.Worst.Moment.Step]/2 })
	if other < 0 {
		t.Fatal("all hours are alike in this year: the twin sees nothing")
	}
	s.Film.At(other, shown)
	bad := 0
	for p, px := range s.Inside {
		if l := float64(v.Worst.Lum[px]); math.Abs(shown[p]-l)/l > bound {
			bad++
		}
	}
	if bad < len(s.Inside)/2 {
		t.Errorf("a darker hour's picture passes for the worst hour's at all but %d of %d points", bad, len(s.Inside))
	}
}

// Shrinking keeps a constant, and light in its place. exact: areas.
func TestShotsShrink(t *testing.T) {
	v, err := view.New(r3.Vec{}, r3.Vec{X: 1}, r3.Vec{Z: 1}, view.Equidistant, math.Pi, 8, 8)
	if err != nil {
		t.Fatal(err)
	}
	e := &coeff.Eye{View: v}
	for i := range 64 {
		e.Inside = append(e.Inside, int32(i)) // a square keeps the sums plain
	}
	x := (&shotPlan{pixels: 6, records: []int{0}}).open(e)
	f := &annual.Frame{Moment: &scene.Moment{}, Mean: make([]float32, 64), Sunlit: make([]float32, 64)}
	for i := range f.Mean {
		f.Mean[i] = 100
	}
	f.Mean[0] = 500
	x.keep(0, f, &shotScratch{})
	out := make([]float64, 36)
	x.roll.Develop(4, film.Fine).At(0, out)
	step := math.Log(mostShown/leastShown) / 255
	for p, px := range x.Inside {
		want := 100.0
		if px == 0 { // 4/3 pixels wide: 9/16 of it is the bright pixel
			want = 100 + 400*9.0/16
		}
		if math.Abs(math.Log(out[p]/want)) > 0.6*step {
			t.Errorf("pixel %d: got %.1f, want %.1f", px, out[p], want)
		}
	}
}

// A roller that is drawn at some hours has parts that the raised one lacks: what
// a view sees is told for each standing, in the numbers of that standing's own
// scene. Hours out of use have pictures too, with a store and without.
func TestShotsOfWhatMoves(t *testing.T) {
	fsys := operatedRoom(operatedRoller + "[[control]]\nname = \"by glare\"\nsystems = [\"roller\"]\nrule = \"glare\"\ndgp_limit = 0.4\nhysteresis = 0\n")
	fsys["site.epw"] = &fstest.MapFile{Data: tinyYear(t)}
	for _, store := range []Store{nil, memory{}} {
		in, err := prepareFile(fsys, "project.toml", "", 2)
		if err != nil {
			t.Fatal(err)
		}
		in.Project.Criteria.Glare = "none" // no closer looks
		r, err := Run(t.Context(), in, Options{Workers: 2, Shots: true, Store: store, Program: "test", Bare: true})
		if err != nil {
			t.Fatal(err)
		}
		s := r.Views[0].Shots
		if len(r.Stood) != 2 || len(s.Stood) != 2 {
			t.Fatalf("got %d standings and what is seen in %d of them, want 2", len(r.Stood), len(s.Stood))
		}
		drawn := 0
		for _, k := range s.Stood {
			i := slices.Index(r.Stood, k.Scene)
			if i < 0 {
				t.Fatal("got a scene that is none of the result's")
			}
			found := false
			for _, x := range k.Seen {
				// The cloth lets some of the sight through: it is looked at or looked through.
				for _, part := range []int32{x.Part, x.Via} {
					found = found || part >= 0 && strings.HasPrefix(k.Scene.Parts[part].Name, "roller")
				}
			}
			if want := r.Standings[i] == "roller: drawn"; found != want {
				t.Errorf("%s: the roller is seen: got %v, want %v", r.Standings[i], found, want)
			} else if want {
				drawn++
			}
		}
		if drawn != 1 {
			t.Errorf("got %d standings with the roller drawn, want 1", drawn)
		}
		want := len(r.Climate.Moments)
		if len(s.Records) != want {
			t.Errorf("got pictures of %d hours, want %d", len(s.Records), want)
		}
		for i, h := range s.Records {
			if f := s.Film; f.Frames != want || f.Points == 0 {
				t.Fatalf("film: got %d frames of %d points, want %d", f.Frames, f.Points, want)
			}
			shown := make([]float64, s.Film.Points)
			s.Film.At(i, shown)
			if slices.Max(shown) <= 1 && r.Climate.SinAltitude[h] > 0.2 {
				t.Errorf("record %d: got a black picture, want one of a room in daylight", h)
			}
		}
	}
}

// Of a standing that no hour in use has, the records hold pictures alone: they
// show the room all the same, and what is seen in it.
func TestShotsOfNobody(t *testing.T) {
	text := fmt.Sprintf(tinyProject, 0.8) + operatedRoller + "[[control]]\nname = \"c\"\nsystems = [\"roller\"]\nrule = \"timetable\"\ntimetable = [{ from = \"10:00\", to = \"13:00\", state = \"drawn\" }]\n"
	text = replaceOnce(text, `glare = "medium"`, `glare = "none"`)
	in := prepared(t, fstest.MapFS{"project.toml": {Data: []byte(text)}, "room.obj": {Data: []byte(tinyRoom())}})
	r, err := Run(t.Context(), in, Options{Workers: 2, Shots: true, Store: memory{}, Program: "test", Bare: true})
	if err != nil {
		t.Fatal(err)
	}
	s := r.Views[0].Shots
	if len(s.Stood) != 2 || len(s.Stood[0].Seen) == 0 || len(s.Stood[1].Seen) == 0 || s.Film.Points == 0 {
		t.Fatalf("got pictures of %d points and %d standings, want both standings seen", s.Film.Points, len(s.Stood))
	}
	shown := make([]float64, s.Film.Points)
	for i, h := range s.Records {
		if s.Film.At(i, shown); slices.Max(shown) <= 1 && r.Climate.SinAltitude[h] > 0.2 {
			t.Fatalf("record %d: got a black picture, want one of a room in daylight", h)
		}
	}
}

// A part of a plan keeps the whole's frames whatever its own size, for moments in
// use and out of use.
func TestShotPlanPart(t *testing.T) {
	in := tiny(t, 2, 1024)
	whole := newShotPlan(in)
	few := *in
	few.Climate = &scene.Climate{SinAltitude: in.Climate.SinAltitude, Moments: in.Climate.Moments[3:9]}
	few.Scene = &scene.Scene{Viewpoints: make([]scene.Viewpoint, 100)} // more than have pictures out of use
	part := whole.part(&few)
	if len(part.records) != 6 || part.pixels != whole.pixels {
		t.Errorf("got %d frames of %d pixels, want 6 of %d", len(part.records), part.pixels, whole.pixels)
	}
	for k, m := range few.Climate.Moments {
		if part.frame[m.Step] != k {
			t.Errorf("moment %d: got frame %d, want %d", k, part.frame[m.Step], k)
		}
	}
}
