package study

import (
	"bytes"
	"context"
	"fmt"
	"maps"
	"math"
	"slices"
	"strings"
	"testing"
	"testing/fstest"

	"squint/scene"
)

// memory is a store in memory.
type memory map[string][]byte

func (m memory) Load(key string) ([]byte, bool) { d, ok := m[key]; return d, ok }

func (m memory) Save(key string, data []byte) error { m[key] = data; return nil }

// secondView is a viewpoint beside that of tinyProject.
const secondView = `
[[viewpoint]]
name = "couch"
position_m = [1, 3, 1.2]
azimuth_deg = 180
`

// kept is one check of the tiny room with two viewpoints, its text edited by
// pairs of old and new, from what a store holds.
type kept struct {
	r   *Result
	ran map[Stage]int // receivers or sides of each stage
	in  *Input
}

func check(t *testing.T, store Store, opt Options, edits ...string) kept {
	t.Helper()
	text := fmt.Sprintf(tinyProject, 0.5) + secondView
	for i := 0; i < len(edits); i += 2 {
		text = replaceOnce(text, edits[i], edits[i+1])
	}
	return runKept(t, store, opt, prepared(t, fstest.MapFS{"project.toml": {Data: []byte(text)}, "room.obj": {Data: []byte(tinyRoom())}}))
}

// prepared is a project in the tiny room's year.
func prepared(t *testing.T, fsys fstest.MapFS) *Input {
	t.Helper()
	fsys["site.epw"] = &fstest.MapFile{Data: tinyYear(t)}
	in, err := prepareFile(fsys, "project.toml", "", 1)
	if err != nil {
		t.Fatal(err)
	}
	return in
}

func runKept(t *testing.T, store Store, opt Options, in *Input) kept {
	t.Helper()
	k := kept{ran: map[Stage]int{}, in: in}
	opt.Store, opt.Shots = store, true
	if opt.Program == "" {
		opt.Program = "this program"
	}
	opt.Workers = max(opt.Workers, 1)
	if opt.Workers == 1 {
		opt.Progress = func(s Stage, _, total int) { k.ran[s] = max(k.ran[s], total) }
	}
	var err error
	if k.r, err = Run(context.Background(), in, opt); err != nil {
		t.Fatal(err)
	}
	return k
}

// engine is whether anything was traced.
func (k kept) engine() bool { return k.ran[StageSurfaces]+k.ran[StageViews]+k.ran[StageAgain] > 0 }

// view is all that a result says of a viewpoint, as a digest.
func (k kept) view(i int) string {
	v := k.r.Views[i]
	worst := *v.Worst
	worst.Moment, worst.InsideOf = nil, nil
	return digest(v.Viewpoint.Name, v.DGP, v.StdErr, v.Ev, v.EvErr, v.Coarse, v.Bias, v.InRange, v.Cause, v.Causes,
		worst, v.Worst.Moment.Step, v.Worst.InsideOf.View, v.Shots.Inside, v.Shots.Records, v.Shots.Film, v.Shots.Discs, v.Shots.Stood[0].Seen, v.Shots.SeenInside)
}

func (k kept) plane(i int) string {
	p := k.r.Planes[i]
	return digest(p.E, p.StdErr, p.Direct, p.Factor, p.FactorError)
}

// noRefine keeps the further looks out of what is counted.
const noRefine = `glare = "medium"`

// TestReuse: what an edit does not touch is not computed again and stays bit
// by bit as it was; what it touches is.
func TestReuse(t *testing.T) {
	store := memory{}
	first := check(t, store, Options{}, noRefine, `glare = "none"`)
	if !first.engine() || first.ran[StageViews] != 2 || first.ran[StageSensors] == 0 {
		t.Fatalf("the first run traced %v, want all", first.ran)
	}
	if first.r.Reused != "" {
		t.Errorf("got %q reused of nothing", first.r.Reused)
	}
	none := []string{noRefine, `glare = "none"`}
	for _, c := range []struct {
		name          string
		opt           Options
		edits         []string
		views, planes int // traced
		same          []bool
		plane         bool
	}{
		{"nothing", Options{}, none, 0, 0, []bool{true, true}, true},
		{"a criterion", Options{}, []string{noRefine, "provision = \"high\"\nglare = \"none\""}, 0, 0, []bool{true, true}, true},
		{"a name and a title", Options{}, append([]string{`"couch"`, `"sofa"`, `Tiny room`, "Little room"}, none...), 0, 0, []bool{true, false}, true},
		{"more hours of use", Options{}, append([]string{`["wed"]`, `["mon", "wed"]`, `to = "12:00"`, `to = "15:00"`}, none...), 2, 0, []bool{false, false}, true},
		{"a viewpoint's place", Options{}, append([]string{"[1, 3, 1.2]", "[1, 2.5, 1.2]"}, none...), 1, 0, []bool{true, false}, true},
		{"the plane's spacing", Options{}, append([]string{"spacing_m = 1.5", "spacing_m = 1"}, none...), 0, 1, []bool{true, true}, false},
		{"a finish", Options{}, append([]string{"reflectance = 0.6", "reflectance = 0.61"}, none...), 2, 1, []bool{false, false}, false},
		{"the glazing", Options{}, append([]string{"transmittance = 0.78", "transmittance = 0.77"}, none...), 2, 1, []bool{false, false}, false},
		{"the ground", Options{}, append([]string{"level_m = -0.5", "level_m = -0.4"}, none...), 2, 1, []bool{false, false}, false},
		{"the seed", Options{}, append([]string{"photons = 64", "photons = 64\nseed = 2"}, none...), 2, 1, []bool{false, false}, false},
		{"the way north", Options{}, append([]string{"[ground]", "[site]\nnorth_deg = 20\n\n[ground]"}, none...), 2, 1, []bool{false, false}, false},
		{"what counts as a source", Options{}, []string{noRefine, "glare = \"none\"\nsource_rule = \"luminance\"\nsource_luminance = 1500"}, 2, 0, []bool{false, false}, true},
		{"the program", Options{Program: "another"}, none, 2, 1, []bool{true, true}, true},
	} {
		// Each starts from what the first run left.
		got := check(t, maps.Clone(store), c.opt, c.edits...)
		if got.ran[StageViews] != c.views || (got.ran[StageSensors] > 0) != (c.planes > 0) || got.engine() != (c.views+c.planes > 0) {
			t.Errorf("%s: traced %v, want %d viewpoints and %d planes", c.name, got.ran, c.views, c.planes)
		}
		want := map[[2]int]string{
			{0, 0}: "2 of 2 viewpoints and 1 of 1 work plane reused",
			{1, 0}: "1 of 2 viewpoints and 1 of 1 work plane reused",
			{0, 1}: "2 of 2 viewpoints reused",
			{2, 0}: "1 of 1 work plane reused",
			{2, 1}: "",
		}[[2]int{c.views, c.planes}]
		if got.r.Reused != want {
			t.Errorf("%s: got %q, want %q", c.name, got.r.Reused, want)
		}
		for i, same := range c.same {
			if (got.view(i) == first.view(i)) != same {
				t.Errorf("%s: viewpoint %d as before: %v, want %v", c.name, i, !same, same)
			}
		}
		if (got.plane(0) == first.plane(0)) != c.plane {
			t.Errorf("%s: plane as before: %v, want %v", c.name, !c.plane, c.plane)
		}
	}
}

// TestReuseOtherHours: with other hours of use a run from the store says what
// a run from nothing says: hours out of use count nowhere. Fewer hours cost
// nothing; new ones are traced for the viewpoints alone, on surfaces cut for
// them, so that they agree within the errors of both.
func TestReuseOtherHours(t *testing.T) {
	const errors = 10 // few batches: Student's quantile
	store := memory{}
	check(t, store, Options{}, `["wed"]`, `["mon", "tue", "wed"]`, `"11:00"`, `"08:00"`, `to = "12:00"`, `to = "16:00"`)
	if less := check(t, maps.Clone(store), Options{}); less.engine() {
		t.Errorf("fewer hours of use: traced %v, want nothing", less.ran)
	}
	for _, edits := range [][]string{
		{`["wed"]`, `["mon", "wed"]`, `to = "12:00"`, `to = "15:00"`},
		{`["wed"]`, `["sun"]`, `"11:00"`, `"08:00"`},
		{`to = "12:00"`, `to = "18:00"` + "\nholidays = [\"01-03\"]"},
	} {
		want := check(t, memory{}, Options{}, edits...)
		got := check(t, maps.Clone(store), Options{}, edits...)
		for i := range want.r.Views {
			other := 0
			for h, d := range got.r.Views[i].DGP {
				a, b := &got.r.Views[i], &want.r.Views[i]
				if math.Abs(float64(d-b.DGP[h])) > errors*math.Hypot(float64(a.StdErr[h]), float64(b.StdErr[h])) {
					t.Fatalf("%v: viewpoint %d, hour %d: got DGP %v, want %v from nothing", edits, i, h, d, b.DGP[h])
				}
				// The twin: the other viewpoint's year does not pass.
				if math.Abs(float64(d-want.r.Views[1-i].DGP[h])) > errors*math.Hypot(float64(a.StdErr[h]), float64(b.StdErr[h])) {
					other++
				}
			}
			if other == 0 {
				t.Errorf("%v: the year of the other viewpoint passes for that of viewpoint %d", edits, i)
			}
			if w := got.r.Views[i].Worst; !slices.Contains(got.in.Occupied, w.Moment.Step) {
				t.Errorf("%v: the worst hour, %d, is out of use", edits, w.Moment.Step)
			}
			used := got.in.Occupied.Mask(got.in.Calendar.Steps())
			for h, d := range got.r.Views[i].DGP {
				if (d == d) != used[h] {
					t.Fatalf("%v: hour %d: got DGP %v, in use %v", edits, h, d, used[h])
				}
			}
		}
		if got.plane(0) != want.plane(0) {
			t.Errorf("%v: the plane differs from a run from nothing", edits)
		}
	}
}

// TestReuseAgreesWithout: a run with a store says what one without says,
// within the rounding of sums over other blocks of moments.
func TestReuseAgreesWithout(t *testing.T) {
	with, without := check(t, memory{}, Options{}), check(t, nil, Options{})
	for i, v := range with.r.Views {
		w := without.r.Views[i]
		if v.Worst.Moment.Step != w.Worst.Moment.Step || !slices.Equal(v.InRange, w.InRange) {
			t.Errorf("viewpoint %d: the worst hour or the range differs", i)
		}
		for h := range v.DGP {
			a, b := v.DGP[h], w.DGP[h]
			if (a == a) != (b == b) || a == a && (a-b > 1e-5 || b-a > 1e-5) {
				t.Fatalf("viewpoint %d, hour %d: got %v with a store, %v without", i, h, a, b)
			}
			if v.Cause[h] >= 0 != (w.Cause[h] >= 0) || v.Cause[h] >= 0 && v.Causes[v.Cause[h]] != w.Causes[w.Cause[h]] {
				t.Errorf("viewpoint %d, hour %d: the cause differs", i, h)
			}
		}
	}
}

// TestReuseSpoiled: entries that are cut, changed or another's are computed
// again, with the same numbers.
func TestReuseSpoiled(t *testing.T) {
	whole := memory{}
	first := check(t, whole, Options{}, noRefine, `glare = "none"`)
	keys := slices.Sorted(maps.Keys(whole))
	for name, spoil := range map[string]func([]byte) []byte{
		"empty":   func([]byte) []byte { return nil },
		"cut":     func(d []byte) []byte { return d[:len(d)/2] },
		"changed": func(d []byte) []byte { d = bytes.Clone(d); d[len(d)/2] ^= 1; return d },
		"foreign": func([]byte) []byte { return []byte(strings.Repeat("no record of ours ", 9)) },
	} {
		store := maps.Clone(whole)
		for _, k := range keys {
			store[k] = spoil(store[k])
		}
		got := check(t, store, Options{}, noRefine, `glare = "none"`)
		if got.ran[StageViews] != 2 || got.view(0) != first.view(0) || got.view(1) != first.view(1) || got.plane(0) != first.plane(0) {
			t.Errorf("%s: traced %v, want all again with the same numbers", name, got.ran)
		}
		for _, k := range keys {
			if !bytes.Equal(store[k], whole[k]) {
				t.Errorf("%s: entry %s is not as it was", name, k[:8])
			}
		}
	}
	// Entries under each other's names are whole, but not what was asked for.
	store := maps.Clone(whole)
	store[keys[0]], store[keys[1]], store[keys[2]] = store[keys[1]], store[keys[2]], store[keys[0]]
	if got := check(t, store, Options{}, noRefine, `glare = "none"`); got.ran[StageViews] != 2 || got.view(0) != first.view(0) || got.plane(0) != first.plane(0) {
		t.Errorf("exchanged: traced %v, want all again with the same numbers", got.ran)
	}
}

// TestReuseWorkers: one thread and seven leave the same entries and results.
func TestReuseWorkers(t *testing.T) {
	one, seven := memory{}, memory{}
	a, b := check(t, one, Options{}), check(t, seven, Options{Workers: 7})
	if !maps.EqualFunc(one, seven, bytes.Equal) {
		t.Errorf("the entries differ")
	}
	for i := range a.r.Views {
		if a.view(i) != b.view(i) {
			t.Errorf("viewpoint %d differs", i)
		}
	}
}

// TestDigestSees: the digest changes with every field of a scene and of a
// moment behind pointers and interfaces, and not with where they are stored.
func TestDigestSees(t *testing.T) {
	a, b := tiny(t, 0.5, 64), tiny(t, 0.5, 64)
	of := func(in *Input) string {
		s := *in.Scene
		s.Project = nil
		return digest(s, in.Climate.Moments)
	}
	want := of(a)
	if want == "" || of(b) != want {
		t.Fatalf("the same room has the digests %q and %q", want, of(b))
	}
	for name, change := range map[string]func(*Input){
		"triangle": func(in *Input) { in.Scene.Triangles[3].V[1].Y += 1e-12 },
		"finish": func(in *Input) {
			in.Scene.Finishes[0], in.Scene.Finishes[1] = in.Scene.Finishes[1], in.Scene.Finishes[0]
		},
		"part":    func(in *Input) { in.Scene.Parts[0].TexelM *= 1.0001 },
		"grid":    func(in *Input) { in.Scene.Parts[0].Grid = &scene.Grid{} },
		"opening": func(in *Input) { in.Scene.Openings[0].Rect.WidthM += 1e-9 },
		"month":   func(in *Input) { in.Scene.GroundReflectance[7] += 1e-9 },
		"sun":     func(in *Input) { in.Climate.Moments[5].SunNormalLx += 1e-6 },
		"sky":     func(in *Input) { in.Climate.Moments[5].Sky = in.Climate.Moments[6].Sky },
	} {
		in := tiny(t, 0.5, 64)
		change(in)
		if of(in) == want {
			t.Errorf("%s: the digest does not see the change", name)
		}
	}
	if digest(func() {}) != "" {
		t.Errorf("got a digest of a function")
	}
}

// TestReuseOperated: where a roller closes for glare, whose positions show in
// rounds, a second run traces nothing and says the same; with another limit
// for closing the first position is reused, and the year is that of a run
// from nothing but for the rounding of other blocks of moments.
func TestReuseOperated(t *testing.T) {
	room := func(limit string) *Input {
		in := prepared(t, operatedRoom(operatedRoller+"[[control]]\nname = \"by glare\"\nsystems = [\"roller\"]\nrule = \"glare\"\ndgp_limit = "+limit+"\nhysteresis = 0\n"))
		in.Project.Criteria.Glare = "none"
		return in
	}
	store := memory{}
	first := runKept(t, store, Options{}, room("0.4"))
	again := runKept(t, maps.Clone(store), Options{}, room("0.4"))
	if again.engine() || again.r.Reused == "" {
		t.Errorf("the second run traced %v, reused %q", again.ran, again.r.Reused)
	}
	if again.view(0) != first.view(0) || again.plane(0) != first.plane(0) {
		t.Errorf("the second run differs from the first")
	}
	want, got := runKept(t, memory{}, Options{}, room("0.5")), runKept(t, store, Options{}, room("0.5"))
	if w, g := want.r.Views[0].Worst.Moment.Step, got.r.Views[0].Worst.Moment.Step; w != g {
		t.Errorf("another limit: the worst hour is %d, want %d", g, w)
	}
	moved := 0
	for h, d := range got.r.Views[0].DGP {
		w := want.r.Views[0].DGP[h]
		if (d == d) != (w == w) || d == d && (d-w > 1e-5 || w-d > 1e-5) {
			t.Fatalf("another limit, hour %d: got DGP %v, want %v", h, d, w)
		}
		if d != first.r.Views[0].DGP[h] && d == d {
			moved++
		}
	}
	if moved == 0 {
		t.Errorf("another limit changes no hour: the test sees nothing")
	}
}

// TestReuseRefined: the closer looks are kept too, under the samples and seeds
// of their own.
func TestReuseRefined(t *testing.T) {
	store := memory{}
	run := func() kept {
		in := evenRoom(t, 23000)
		in.Project.Simulation.Batches = 2
		return runKept(t, store, Options{}, in)
	}
	first := run()
	again := run()
	if first.r.Views[0].Refined == 0 || !first.engine() {
		t.Fatalf("no hour was looked at again: the test sees nothing")
	}
	if again.engine() || again.view(0) != first.view(0) || again.r.Views[0].Refined != first.r.Views[0].Refined {
		t.Errorf("the second run traced %v, or differs", again.ran)
	}
}
