package study

import (
	"fmt"
	"hash/fnv"
	"io/fs"
	"math"
	"math/rand/v2"
	"os"
	"slices"
	"strings"
	"testing"
	"testing/fstest"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/demo"
	"squint/glare"
	"squint/materials"
	"squint/scene"
	"squint/scene/photometry"
	"squint/trace"
)

// hourlyViews are six eyes in the gallery's office of 4 by 6 m: towards the
// window from near and from far, along it, across the room and away from it.
const hourlyViews = `
[[viewpoint]]
name = "near"
position_m = [2, 2.5, 1.2]
azimuth_deg = 180

[[viewpoint]]
name = "far"
position_m = [2, 5, 1.2]
azimuth_deg = 180

[[viewpoint]]
name = "along"
position_m = [0.8, 1.6, 1.2]
azimuth_deg = 90

[[viewpoint]]
name = "across"
position_m = [1, 4, 1.2]
azimuth_deg = 135

[[viewpoint]]
name = "aslant"
position_m = [3.2, 1.8, 1.2]
azimuth_deg = 225

[[viewpoint]]
name = "away"
position_m = [3, 3.5, 1.2]
azimuth_deg = 330
`

// hourlyOffice is a project of the gallery with the six eyes, without work
// planes, with the default settings in place of the gallery's small ones.
func hourlyOffice(t testing.TB, name string) *Input {
	t.Helper()
	const gallery = "../../../../testdata/gallery"
	year, err := fs.ReadFile(demo.Starter(), "site.epw")
	if err != nil {
		t.Fatal(err)
	}
	files := fstest.MapFS{"weather.epw": {Data: year}}
	for _, f := range []string{name + ".toml", "room.obj"} {
		data, err := os.ReadFile(gallery + "/" + f)
		if err != nil {
			t.Fatal(err)
		}
		if f != "room.obj" {
			before, _, ok := strings.Cut(string(data), "[[viewpoint]]")
			if !ok {
				t.Fatalf("%s: got no [[viewpoint]], want one after which there are only receivers and settings", f)
			}
			data = []byte(before + hourlyViews)
		}
		files[f] = &fstest.MapFile{Data: data}
	}
	in, err := prepareFile(files, name+".toml", "", 1)
	if err != nil {
		t.Fatal(err)
	}
	in.Project.Criteria.Glare = "" // the year alone, without closer looks
	return in
}

// hourlyPicture is a view of an hour that both ways are held against a
// reference for.
type hourlyPicture struct {
	view          int
	moment        *scene.Moment
	sub           *Input // as the systems stand then
	discs         []glare.Disc
	partly, image bool // the disc is hidden in part; the sun is seen in a mirror
	want, wantErr float64
	year          float64
}

func (p *hourlyPicture) String() string {
	s := fmt.Sprintf("%-7s %s", p.sub.Scene.Viewpoints[p.view].Name, p.moment.Time.Format("01-02 15:04"))
	if p.partly {
		s += ", sun partly hidden"
	}
	if p.image {
		s += ", sun in a mirror"
	}
	return s
}

// hourlySample picks views and hours in use: at random, but of each view's
// hours up to a quarter have a partly hidden disc and a quarter the sun's image
// in a mirror, where such are found among 200 looked at.
func hourlySample(t testing.TB, in *Input, name string, views, hours int, seed uint64) []*hourlyPicture {
	t.Helper()
	const looked = 200
	own := fnv.New64a()
	own.Write([]byte(name))
	rng := rand.New(rand.NewPCG(seed, own.Sum64()))
	worlds := map[*scene.Moment]*Input{}
	var used []*scene.Moment
	for i := range in.Standings {
		st := &in.Standings[i]
		sub := &Input{Project: in.Project, Scene: st.Scene, World: st.World}
		for _, m := range st.Moments {
			if m.Occupied {
				worlds[m] = sub
				used = append(used, m)
			}
		}
	}
	var out []*hourlyPicture
	for _, v := range rng.Perm(len(in.Scene.Viewpoints))[:views] {
		var partly, image, rest []*hourlyPicture
		facets := map[*Input][]int32{}
		for _, k := range rng.Perm(len(used))[:min(looked, len(used))] {
			m := used[k]
			p := &hourlyPicture{view: v, moment: m, sub: worlds[m]}
			if _, ok := facets[p.sub]; !ok {
				facets[p.sub] = p.sub.World.MirrorsFrom(p.sub.Scene.Viewpoints[v].Position)
			}
			p.findDiscs(t, facets[p.sub])
			switch {
			case p.image:
				image = append(image, p)
			case p.partly:
				partly = append(partly, p)
			default:
				rest = append(rest, p)
			}
		}
		partly, image = partly[:min(len(partly), hours/4)], image[:min(len(image), hours/4)]
		out = append(append(append(out, partly...), image...), rest[:hours-len(partly)-len(image)]...)
	}
	return out
}

// findDiscs looks for the sun by many rays and for its images.
func (p *hourlyPicture) findDiscs(t testing.TB, facets []int32) {
	v, m, w := p.sub.Scene.Viewpoints[p.view], p.moment, p.sub.World
	vw, _ := fisheye(t, v, 16)
	sunOmega := photometry.DiscSolidAngle(photometry.SunDiameterRad)
	full := bruteDisc(p.sub, v, m)
	if full.OmegaSr > 0 {
		p.discs = append(p.discs, glare.Disc{Dir: vw.Local(full.Dir), OmegaSr: full.OmegaSr, Luminance: full.Luminance})
	}
	p.partly = full.OmegaSr > 0 && full.OmegaSr < 0.98*sunOmega
	if m.SunNormalLx <= 0 {
		return
	}
	hidden := func(d r3.Vec) bool { return d.Z <= 0 || p.sub.Scene.HasHorizon && p.sub.Scene.Horizon.Hides(d) }
	for _, im := range w.Images(v.Position, m.Sun, facets, hidden, nil) {
		if im.Share > 0 && r3.Dot(im.Dir, v.Direction) > 0 {
			p.discs = append(p.discs, glare.Disc{Dir: vw.Local(im.Dir), OmegaSr: im.Share * sunOmega, Luminance: im.Luminous * photometry.DiscLuminance(m.SunNormalLx, photometry.SunDiameterRad)})
			p.image = p.image || p.sub.Scene.Parts[im.Part].Kind != scene.Pane
		}
	}
}

// plain is whether the plain tracer finds all light: it does not find the sun
// by way of mirrors and glossy surfaces. What panes throw is left out.
func plain(w *trace.World) bool {
	for _, f := range w.Scene.Finishes {
		if f.BSDF.Gloss(materials.Front) != nil || f.BSDF.Gloss(materials.Back) != nil {
			return false
		}
	}
	return !w.Mirrors()
}

// errors are the root mean square and the largest difference.
func spread(list []*hourlyPicture, got func(p *hourlyPicture) float64) (rmse, worst float64) {
	var sum float64
	for _, p := range list {
		d := got(p) - p.want
		sum += d * d
		worst = math.Max(worst, math.Abs(d))
	}
	return math.Sqrt(sum / float64(len(list))), worst
}

// galleryProjects are the names of the gallery's projects, shuffled by a seed,
// then one of each kind before the second of any: the kind is the name's first
// word.
func galleryProjects(t testing.TB, seed uint64) []string {
	t.Helper()
	names, err := fs.Glob(os.DirFS("../../../../testdata/gallery"), "*.toml")
	if err != nil || len(names) == 0 {
		t.Fatalf("got %d projects of the gallery, want some: %v", len(names), err)
	}
	slices.Sort(names)
	rand.New(rand.NewPCG(seed, 51)).Shuffle(len(names), func(i, j int) { names[i], names[j] = names[j], names[i] })
	turn, seen := map[string]int{}, map[string]int{}
	for i := range names {
		names[i] = strings.TrimSuffix(names[i], ".toml")
		kind, _, _ := strings.Cut(names[i], "-")
		turn[names[i]] = seen[kind]
		seen[kind]++
	}
	slices.SortStableFunc(names, func(a, b string) int { return turn[a] - turn[b] })
	return names
}
