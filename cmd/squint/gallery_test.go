package main

import (
	"fmt"
	"io/fs"
	"maps"
	"math"
	"os"
	"runtime"
	"slices"
	"strings"
	"testing"
	"testing/fstest"

	"squint/cmd/squint/demo"
	"squint/cmd/squint/guide"
	"squint/cmd/squint/internal/study"
	"squint/scene"
	"squint/scene/project"
	"squint/scene/system"
)

const (
	galleryFolder = "../../testdata/gallery"
	// galleryStride keeps every so many moments with daylight, about 73 of the
	// year, of all hours of the day as days grow and shrink.
	galleryStride = 60
)

// gallery lists every project of the folder. shows is whether the project is
// of the variant that its name says; run marks those that are run by default.
var gallery = []struct {
	name  string
	run   bool
	shows func(p *project.Project) bool
}{
	{"light-shelf-flat", false, shelf(func(p *project.Project, s project.LightShelf) bool {
		return s.OutsideShape.Profile == "flat" && s.InsideShape.Profile == "flat" && s.OutsideDepthM > 0 && s.InsideDepthM > 0 &&
			s.OutsideTiltDeg == 0 && s.InsideTiltDeg == 0 && s.Stack == 1 && finish(p, s.Top).Type == "mirror"
	})},
	{"light-shelf-tilted", false, shelf(func(_ *project.Project, s project.LightShelf) bool {
		return s.OutsideTiltDeg > 0 && s.InsideTiltDeg > 0
	})},
	{"light-shelf-arc", false, shelf(func(p *project.Project, s project.LightShelf) bool {
		return s.OutsideShape.Profile == "arc" && s.OutsideShape.SagittaM > 0 && finish(p, s.Top).Type == "mirror"
	})},
	{"light-shelf-parabola", true, shelf(func(p *project.Project, s project.LightShelf) bool {
		return s.OutsideShape.Profile == "parabola" && s.OutsideShape.FocusM > 0 && finish(p, s.Top).Type == "mirror"
	})},
	{"light-shelf-polyline", false, shelf(func(_ *project.Project, s project.LightShelf) bool { return len(s.OutsideShape.PolylineM) > 2 })},
	{"light-shelf-stack", false, shelf(func(_ *project.Project, s project.LightShelf) bool { return s.Stack > 1 })},
	{"light-shelf-wide", false, shelf(func(_ *project.Project, s project.LightShelf) bool { return s.ExtendM > 0 })},
	{"sill", false, func(p *project.Project) bool {
		return len(p.Sills) == 1 && finish(p, p.Sills[0].Finish).Type == "mirror"
	}},
	{"blind-plane", false, blind(func(p *project.Project, b project.Blind) bool {
		return b.Position == system.Inside && b.SagittaMM == 0 && b.Follow == "" && len(b.States) == 0 && finish(p, b.Upper).Type == "matte"
	})},
	{"blind-cambered", false, blind(func(_ *project.Project, b project.Blind) bool { return b.Position == system.Outside && b.SagittaMM > 0 })},
	{"blind-mirrored", false, blind(func(p *project.Project, b project.Blind) bool {
		return finish(p, b.Upper).Type == "mirror" && finish(p, b.Lower).Type == "matte" && b.Follow == ""
	})},
	{"blind-perforated", false, blind(func(p *project.Project, b project.Blind) bool { return finish(p, b.Upper).Type == "perforated" })},
	{"blind-between", false, blind(func(p *project.Project, b project.Blind) bool {
		return b.Position == system.Between && p.Openings[0].InnerGlazing != "" && p.Openings[0].CavityM > 0
	})},
	{"blind-states", false, blind(func(_ *project.Project, b project.Blind) bool { return len(b.States) == 3 })},
	{"blind-cut-off", true, blind(func(_ *project.Project, b project.Blind) bool { return b.Follow == system.CutOff })},
	{"blind-redirect", false, blind(func(p *project.Project, b project.Blind) bool {
		return b.Follow == system.Redirect && finish(p, b.Upper).Type == "mirror"
	})},
	{"louvres", false, func(p *project.Project) bool { return len(p.Louvres) == 1 && p.Louvres[0].BottomM > 0 }},
	{"anidolic-symmetric", false, ceiling(func(c project.AnidolicCeiling) bool {
		return c.AcceptanceBelowDeg == c.AcceptanceDeg && c.CollectorShare == 1 && c.OutletGlazing == ""
	})},
	{"anidolic-asymmetric", false, ceiling(func(c project.AnidolicCeiling) bool {
		return c.AcceptanceBelowDeg != c.AcceptanceDeg && c.RollerFollow == ""
	})},
	{"anidolic-truncated", false, ceiling(func(c project.AnidolicCeiling) bool { return c.CollectorShare < 1 && c.CollectorSpaceM > 0 })},
	{"anidolic-roller", false, ceiling(func(c project.AnidolicCeiling) bool { return c.RollerFollow == "acceptance" })},
	{"anidolic-outlet-glazing", true, ceiling(func(c project.AnidolicCeiling) bool { return c.OutletGlazing != "" })},
	{"roller-inside", false, roller(func(_ *project.Project, r project.Roller) bool { return r.Position == system.Inside && r.Cloth == "" })},
	{"roller-outside", false, roller(func(_ *project.Project, r project.Roller) bool {
		return r.Position == system.Outside && r.Cloth == ""
	})},
	{"roller-cloth", true, roller(func(p *project.Project, r project.Roller) bool { return finish(p, r.Cloth).Type == "cloth" })},
	{"finish-glossy", false, shelf(func(p *project.Project, s project.LightShelf) bool { return finish(p, s.Top).Type == "glossy" })},
	{"finish-diffuser", false, roller(func(p *project.Project, r project.Roller) bool { return finish(p, r.Cloth).Type == "diffuser" })},
	{"finish-perforated", false, roller(func(p *project.Project, r project.Roller) bool {
		f := finish(p, r.Cloth)
		return f.Type == "perforated" && f.Back != ""
	})},
	{"finish-table", false, func(p *project.Project) bool { return len(finish(p, p.Openings[0].Glazing).Table) > 2 }},
}

func shelf(is func(*project.Project, project.LightShelf) bool) func(*project.Project) bool {
	return func(p *project.Project) bool { return len(p.LightShelves) == 1 && is(p, p.LightShelves[0]) }
}

func blind(is func(*project.Project, project.Blind) bool) func(*project.Project) bool {
	return func(p *project.Project) bool { return len(p.Blinds) == 1 && is(p, p.Blinds[0]) }
}

func ceiling(is func(project.AnidolicCeiling) bool) func(*project.Project) bool {
	return func(p *project.Project) bool { return len(p.AnidolicCeilings) == 1 && is(p.AnidolicCeilings[0]) }
}

func roller(is func(*project.Project, project.Roller) bool) func(*project.Project) bool {
	return func(p *project.Project) bool { return len(p.Rollers) == 1 && is(p, p.Rollers[0]) }
}

func finish(p *project.Project, name string) project.Finish {
	for _, f := range p.Finishes {
		if f.Name == name {
			return f
		}
	}
	return project.Finish{}
}

// galleryFiles is the folder with the demo's year in it, as its README says,
// and the same with light on every tenth day only, which is read faster.
func galleryFiles(t *testing.T) (whole, thinned fstest.MapFS) {
	t.Helper()
	whole = fstest.MapFS{}
	folder := os.DirFS(galleryFolder)
	err := fs.WalkDir(folder, ".", func(name string, d fs.DirEntry, err error) error {
		switch {
		case err != nil:
			return err
		case name == "start" || name == "results":
			return fs.SkipDir // made by the README's commands
		case d.IsDir():
			return nil
		}
		data, err := fs.ReadFile(folder, name)
		whole[name] = &fstest.MapFile{Data: data}
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	thinned = maps.Clone(whole)
	// A copy of the year that somebody has left in the folder does not count.
	year, err := fs.ReadFile(demo.Starter(), "site.epw")
	if err != nil {
		t.Fatal(err)
	}
	whole["weather.epw"] = &fstest.MapFile{Data: year}
	some, err := thinYear()
	if err != nil {
		t.Fatal(err)
	}
	thinned["weather.epw"] = &fstest.MapFile{Data: []byte(some)}
	return whole, thinned
}

// unlisted tells which projects of a folder are not listed, and which listed
// ones are not there.
func unlisted(files fstest.MapFS) (problems []string) {
	for name := range files {
		bare, is := strings.CutSuffix(name, ".toml")
		if is && !slices.ContainsFunc(galleryNames(), func(n string) bool { return n == bare }) {
			problems = append(problems, name+" is not listed")
		}
	}
	for _, n := range galleryNames() {
		if files[n+".toml"] == nil {
			problems = append(problems, n+".toml is missing")
		}
		if readme := files["README.md"]; readme == nil || !strings.Contains(string(readme.Data), "`"+n+"`") {
			problems = append(problems, "README.md does not name "+n)
		}
	}
	slices.Sort(problems)
	return problems
}

func galleryNames() (names []string) {
	for _, g := range gallery {
		names = append(names, g.name)
	}
	return names
}

// thin leaves some of the moments, in the climate and in every standing.
func thin(in *study.Input, stride int) {
	kept := map[*scene.Moment]bool{}
	var all []*scene.Moment
	for i, m := range in.Climate.Moments {
		if i%stride == 0 {
			kept[m] = true
			all = append(all, m)
		}
	}
	in.Climate.Moments = all
	for i := range in.Standings {
		st := &in.Standings[i]
		var some []*scene.Moment
		for _, m := range st.Moments {
			if kept[m] {
				some = append(some, m)
			}
		}
		st.Moments = some
	}
	in.Standings = slices.DeleteFunc(in.Standings, func(s study.Standing) bool { return len(s.Moments) == 0 })
}

// unsound tells what in a result cannot be: values at the moments that are
// infinite, negative or no numbers, and a year without light at the eye or on
// the plane.
func unsound(r *study.Result) (problems []string) {
	if len(r.Views) != 1 || len(r.Planes) != 1 || len(r.Climate.Moments) == 0 {
		return []string{fmt.Sprintf("got %d views, %d planes, %d moments; want 1, 1 and some", len(r.Views), len(r.Planes), len(r.Climate.Moments))}
	}
	want := func(x float64, place, what string) {
		if !(x >= 0) || math.IsInf(x, 1) {
			problems = append(problems, fmt.Sprintf("%s: %s is %g", place, what, x))
		}
	}
	v, p := r.Views[0], r.Planes[0]
	var eye, plane float32
	for _, m := range r.Climate.Moments {
		if m.Occupied {
			place := fmt.Sprintf("hour %d", m.Step)
			want(float64(v.DGP[m.Step]), place, "DGP")
			want(float64(v.StdErr[m.Step]), place, "the error of DGP")
			want(float64(v.Ev[m.Step]), place, "Ev")
			eye = max(eye, v.Ev[m.Step])
		}
		for k := range p.E {
			place := fmt.Sprintf("hour %d, sensor %d", m.Step, k)
			want(float64(p.E[k][m.Step]), place, "illuminance")
			want(float64(p.StdErr[k][m.Step]), place, "the error of illuminance")
			plane = max(plane, p.E[k][m.Step])
		}
	}
	for k, f := range p.Factor {
		if !(f >= 0 && f <= 1) {
			problems = append(problems, fmt.Sprintf("sensor %d: the daylight factor is %g", k, f))
		}
	}
	if eye == 0 {
		problems = append(problems, "no light at the eye")
	}
	if plane == 0 {
		problems = append(problems, "no light on the work plane")
	}
	return problems
}

// TestGallery builds every project of the folder, without a note, and runs four
// through a thinned year; all of them with SQUINT_LONG=1.
func TestGallery(t *testing.T) {
	whole, thinned := galleryFiles(t)
	for _, p := range unlisted(whole) {
		t.Error(p)
	}
	long := os.Getenv("SQUINT_LONG") != ""
	for _, g := range gallery {
		t.Run(g.name, func(t *testing.T) {
			run, files := long || g.run && !testing.Short(), thinned
			if run {
				files = whole
			}
			p, err := project.Load(files, g.name+".toml")
			if err != nil {
				t.Fatal(err)
			}
			in, err := study.Prepare(files, p, runtime.NumCPU())
			if err != nil {
				t.Fatal(err)
			}
			for _, n := range in.Notes {
				t.Errorf("want no note, got %q", n)
			}
			if !run {
				return
			}
			thin(in, galleryStride)
			r, err := study.Run(t.Context(), in, study.Options{Workers: runtime.NumCPU()})
			if err != nil {
				t.Fatal(err)
			}
			for _, p := range unsound(r) {
				t.Error(p)
			}
		})
	}
}

// The page on systems lists every project: a path, or a path with a star and
// what stands for it.
func TestGuideListsTheGallery(t *testing.T) {
	page, err := guide.Page("systems", nil)
	if err != nil {
		t.Fatal(err)
	}
	_, section, _ := strings.Cut(page, "## Gallery")
	var listed []string
	stem := ""
	for _, word := range strings.Fields(section) {
		if p, ok := strings.CutPrefix(word, "testdata/gallery/"); ok {
			var star bool
			if stem, star = strings.CutSuffix(p, "*.toml"); !star {
				listed, stem = append(listed, strings.TrimSuffix(p, ".toml")), ""
			}
		} else if stem != "" {
			listed = append(listed, stem+strings.TrimSuffix(word, ","))
		}
	}
	if want := galleryNames(); !slices.Equal(listed, want) {
		t.Errorf("the guide lists %q, want %q", listed, want)
	}
}

// Every project has its picture in the guide, and no other picture is there.
func TestGuideShowsTheGallery(t *testing.T) {
	want := slices.Sorted(slices.Values(galleryNames()))
	if got := guide.Pictures(); !slices.Equal(got, want) {
		t.Errorf("pictures of %q, want of %q; run go generate ./cmd/squint/guide", got, want)
	}
	page, err := guide.HTML(nil)
	if err != nil {
		t.Fatal(err)
	}
	if n := strings.Count(string(page), "<img src=\"data:image/png;base64,"); n != len(want)+2 {
		t.Errorf("the page has %d pictures, want those of the gallery, the demo's sheet and the plots of scale: %d", n, len(want)+2)
	}
	for _, topic := range guide.Names() {
		if !strings.Contains(string(page), "<section id=\""+topic+"\"") {
			t.Errorf("the page lacks %s", topic)
		}
	}
	// Nothing is fetched.
	for _, from := range []string{"src=\"http", "href=\"http", "url("} {
		if strings.Contains(string(page), from) {
			t.Errorf("the page fetches something: %s", from)
		}
	}
}

// Each project is of the variant that its name says, and of no other.
func TestGalleryShowsEachVariant(t *testing.T) {
	_, files := galleryFiles(t)
	for _, g := range gallery {
		p, err := project.Load(files, g.name+".toml")
		if err != nil {
			t.Error(err)
			continue
		}
		for _, variant := range gallery {
			if got, want := variant.shows(p), variant.name == g.name; got != want {
				t.Errorf("%s.toml shows %s: got %t, want %t", g.name, variant.name, got, want)
			}
		}
	}
}

// Planted faults in the folder and in results are found.
func TestGalleryFindsFaults(t *testing.T) {
	_, files := galleryFiles(t)
	first := gallery[0].name + ".toml"
	files["new.toml"] = files[first]
	delete(files, first)
	readme := strings.ReplaceAll(string(files["README.md"].Data), "`"+gallery[1].name+"`", "")
	files["README.md"] = &fstest.MapFile{Data: []byte(readme)}
	want := []string{"README.md does not name " + gallery[1].name, first + " is missing", "new.toml is not listed"}
	if got := unlisted(files); !slices.Equal(got, want) {
		t.Errorf("got %q, want %q", got, want)
	}

	result := func() *study.Result {
		return &study.Result{
			Climate: &scene.Climate{Moments: []*scene.Moment{{Step: 0, Occupied: true}, {Step: 1}}},
			Views:   []study.ViewResult{{DGP: []float32{0.3, 0}, StdErr: []float32{0.01, 0}, Ev: []float32{900, 0}}},
			Planes: []study.PlaneResult{{
				E: [][]float32{{400, 300}}, StdErr: [][]float32{{4, 3}}, Factor: []float64{0.02},
			}},
		}
	}
	nan, inf := float32(math.NaN()), float32(math.Inf(1))
	for _, c := range []struct {
		name  string
		plant func(r *study.Result)
		want  string // "" for sound
	}{
		{"sound", func(*study.Result) {}, ""},
		{"DGP", func(r *study.Result) { r.Views[0].DGP[0] = nan }, "hour 0: DGP is NaN"},
		{"DGP's error", func(r *study.Result) { r.Views[0].StdErr[0] = inf }, "hour 0: the error of DGP is +Inf"},
		{"eye", func(r *study.Result) { r.Views[0].Ev[0] = -1 }, "hour 0: Ev is -1"},
		{"sensor", func(r *study.Result) { r.Planes[0].E[0][1] = nan }, "hour 1, sensor 0: illuminance is NaN"},
		{"sensor's error", func(r *study.Result) { r.Planes[0].StdErr[0][1] = inf }, "hour 1, sensor 0: the error of illuminance is +Inf"},
		{"factor", func(r *study.Result) { r.Planes[0].Factor[0] = 2 }, "sensor 0: the daylight factor is 2"},
		{"dark eye", func(r *study.Result) { r.Views[0].Ev[0] = 0 }, "no light at the eye"},
		{"dark plane", func(r *study.Result) { r.Planes[0].E[0] = []float32{0, 0} }, "no light on the work plane"},
		{"no view", func(r *study.Result) { r.Views = nil }, "got 0 views"},
		{"no moments", func(r *study.Result) { r.Climate.Moments = nil }, "0 moments"},
	} {
		t.Run(c.name, func(t *testing.T) {
			r := result()
			c.plant(r)
			got := strings.Join(unsound(r), "; ")
			if c.want == "" && got != "" || c.want != "" && !strings.Contains(got, c.want) {
				t.Errorf("got %q, want %q", got, c.want)
			}
		})
	}
}
