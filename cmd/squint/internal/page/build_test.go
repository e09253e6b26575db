package page

import (
	"fmt"
	"math"
	"reflect"
	"slices"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/internal/study"
	"squint/glare/verdict"
	"squint/materials"
	"squint/scene"
	"squint/scene/sky"
	"squint/scene/view"
	"squint/scene/weather"
	"squint/trace/coeff"
)

// The middle of the sun crosses the horizon six hours before and after solar
// noon at an equinox, wherever one is; solar noon is then 7.5 minutes late, the
// equation of time of 20 March. Source of the number: from memory, good to half a
// minute. Bound: that; a minute of rounding; and the 0.4 degrees by which the
// sun's declination may differ from 0 on that day, times tan 50 degrees, of 4
// minutes to the degree: 2 minutes.
func TestHorizonCrossings(t *testing.T) {
	const bound = 0.5 + 1 + 2 // minutes
	year := &weather.Year{}
	for _, md := range [][2]int{{3, 20}, {6, 21}} {
		for h := range 24 {
			year.Records = append(year.Records, weather.Record{Month: md[0], Day: md[1], EndH: float64(h + 1)})
		}
	}
	for _, latitude := range []float64{-50, 0, 50} {
		c := &scene.Climate{Year: year, Site: sky.Site{LatitudeDeg: latitude}}
		rise, set := horizonCrossings(c, 0)
		if math.Abs(float64(rise)-367.5) > bound || math.Abs(float64(set)-1087.5) > bound {
			t.Errorf("latitude %g at the equinox: got %d and %d minutes, want about 367.5 and 1087.5", latitude, rise, set)
		}
	}
	// Beyond the polar circle there is a day without.
	c := &scene.Climate{Year: year, Site: sky.Site{LatitudeDeg: 75}}
	if rise, set := horizonCrossings(c, 1); rise != noTime || set != noTime {
		t.Errorf("latitude 75 in June: got %d and %d, want no crossing", rise, set)
	}
}

// Coordinates come back within half of a 16-bit step. exact: the step.
func TestMeshKeepsPlaces(t *testing.T) {
	a := &Archive{blobs: map[string]blobData{}}
	s := &scene.Scene{Finishes: []scene.Finish{{BSDF: grey(t)}}}
	var all []*scene.Triangle
	for i := range 40 {
		s.Parts = append(s.Parts, scene.Part{Name: fmt.Sprint(i)})
		// Legs at right angles that grow: so does the area.
		x, leg := float64(i)*0.37, 0.1+0.05*float64(i)
		tr := &scene.Triangle{Part: int32(i)}
		tr.V = [3]r3.Vec{{X: x, Y: -x, Z: 2 * x}, {X: x + leg, Y: -x, Z: 2 * x}, {X: x, Y: -x + leg, Z: 2 * x}}
		all = append(all, tr)
	}
	m := a.mesh(newBuild(), s, all)
	raw := a.blobs[m.Numbers.ID].raw
	for i, tr := range all {
		for k, v := range tr.V {
			for j, want := range vec(v) {
				at := 9*i + 3*k + j
				code := int(raw[at]) | int(raw[9*len(all)+at])<<8
				got := m.Min[j] + float64(code)/65535*(m.Max[j]-m.Min[j])
				if step := (m.Max[j] - m.Min[j]) / 65535; math.Abs(got-want) > step/2*1.0001 {
					t.Fatalf("corner %d of triangle %d: got %v, want %v", k, i, got, want)
				}
			}
		}
	}
	if kept := largest(all, 7); !slices.Equal(kept, all[33:]) {
		t.Errorf("largest: got %d triangles, want the last 7", len(kept))
	}
	if kept := largest(all, 40); !slices.Equal(kept, all) {
		t.Errorf("largest: got %d triangles, want all 40", len(kept))
	}
}

// grey is a matte finish.
func grey(t *testing.T) materials.BSDF {
	t.Helper()
	m, err := materials.NewMatte(0.5)
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// Scenes number parts anew: a cloth that is there in one standing only moves what
// comes after it. The page's numbers are those of names; what always stands is
// held once, and what moves by standing.
func TestStandingsShareNumbers(t *testing.T) {
	corner := func(z float64) [3]r3.Vec { return [3]r3.Vec{{Z: z}, {X: 1, Z: z}, {Y: 1, Z: z}} }
	wall, cloth, pane := scene.Part{Name: "wall", Opening: -1}, scene.Part{Name: "cloth", Kind: scene.System}, scene.Part{Name: "pane", Kind: scene.Pane}
	fin := []scene.Finish{{Name: "grey", BSDF: grey(t)}}
	open := []scene.Opening{{Name: "window"}}
	raised := &scene.Scene{Parts: []scene.Part{wall, pane}, Finishes: fin, Openings: open,
		Triangles: []scene.Triangle{{V: corner(0)}, {V: corner(1), Part: 1}}}
	drawn := &scene.Scene{Parts: []scene.Part{wall, cloth, pane}, Finishes: fin, Openings: open,
		Triangles: []scene.Triangle{{V: corner(0)}, {V: corner(1), Part: 2}, {V: corner(2), Part: 1}}}
	a := &Archive{blobs: map[string]blobData{}}
	b := a.addRoom(&study.Result{Scene: raised, Stood: []*scene.Scene{raised, drawn, raised}})
	g := &a.Design.Room
	if len(g.Systems) != 2 || !reflect.DeepEqual(g.Stands, [][]int{{0}, {1}, {0}}) || !slices.Equal(g.Left, []int{0, 0, 0}) {
		t.Errorf("got %d meshes of what moves, stands %v, left out %v; want 2, [[0] [1] [0]] and none", len(g.Systems), g.Stands, g.Left)
	}
	s := &study.Shots{Eye: view.View{Width: 2, Height: 2}, SeenInside: []int32{0, 1, 3}}
	for _, k := range []study.Stood{
		{Scene: raised, Seen: []coeff.Seen{{Part: 0, Via: 1}, {Part: coeff.SkySeen, Via: 1}, {Part: 1, Via: -1}}},
		{Scene: drawn, Seen: []coeff.Seen{{Part: 0, Via: 2}, {Part: coeff.SkySeen, Via: 2}, {Part: 2, Via: -1}}},
	} {
		raw := a.blobs[a.seen(b, s, k).ID].raw
		name := func(px int) string { return g.Parts[int(raw[4+px])-1].Name }
		if name(0) != "wall" || name(3) != "pane" || raw[1] != skyPixel || raw[2] != outsidePixel {
			t.Errorf("%d parts: got kinds %v, and %q and %q in the corners, want wall and pane", len(k.Scene.Parts), raw[:4], name(0), name(3))
		}
		if via := raw[12:]; !slices.Equal(via, []uint8{1, 1, 0, 0}) {
			t.Errorf("%d parts: got via %v, want the first opening in the first two", len(k.Scene.Parts), via)
		}
	}
}

// A viewpoint of which no level is asked is not undecided.
func TestNothingAsked(t *testing.T) {
	a := &Archive{blobs: map[string]blobData{}}
	v := &study.ViewResult{Asked: -1, Levels: []verdict.Verdict{{Outcome: verdict.NotMet}}, Viewpoint: scene.Viewpoint{Direction: r3.Vec{X: 1}}}
	if got := a.view(newBuild(), &study.Result{}, v).Outcome; got != noOutcome {
		t.Errorf("got %q, want %q", got, noOutcome)
	}
}
