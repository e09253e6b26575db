package trace_test

import (
	"math"
	"testing"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/scene/sky"
	"squint/scene/system"
	"squint/trace"
)

// TestAnidolicMeasured sets a published measurement beside our own numbers. It
// neither passes nor fails by them: the source, of which only the abstract was
// at hand, leaves too much open, and nothing here was adjusted to it.
//
// Courret, Scartezzini, Francioli, Meyer, 1998, Design and assessment of an
// anidolic light-duct, Energy and Buildings 28, 79-99: under an overcast sky
// the daylight factor on the work plane 5 m from the window of a room 6.6 m
// deep is more than doubled against a conventional facade of full size, by a
// light duct in the suspended ceiling that leads midway into the room, with
// non-imaging elements at both ends.
//
// From the source: depth of the room, place of the reading, duct in the
// suspended ceiling, its end at the middle of the room. From memory: duct of
// anodised aluminium, reflectance 0.9; collector double glazed, turned to the
// zenith. Assumed before the first run: room 3 m wide, 2.8 m high below the
// suspended ceiling; window of the whole width from 0.9 m to the ceiling, double
// glazing 0.78; floor 0.2, walls 0.5, ceiling 0.7, ground 0.2 (common practice,
// no published source); duct 0.5 m high and as wide as the room; collector from
// 20 degrees to the zenith, half of its reach kept; outlet as long as fits the
// duct, 1 m, its middle at 3.3 m, open; no obstruction; CIE standard overcast
// sky (type 1). The conventional facade is the same window without the duct.
func TestAnidolicMeasured(t *testing.T) {
	if testing.Short() {
		t.Skip("a comparison, not a check")
	}
	without, with := anidolicRoom(t, false), anidolicRoom(t, true)
	overcast, err := sky.NewCIE(1, vec(0, 0, 1), sky.ByHorizontalIlluminance(100))
	if err != nil {
		t.Fatal(err)
	}
	m := &scene.Moment{Sun: vec(0, 0, 1), Sky: overcast, DiffuseLx: 100, GlobalLx: 100}
	factor := func(r *room, y float64, number uint64) (float64, float64) {
		tr := trace.NewTracer(r.world(), []*scene.Moment{m})
		tr.Portals = true
		var a tally
		out := make([]float64, 1)
		for k := range 40000 {
			s := sampling.Stream3(1, number, uint64(k))
			out[0] = 0
			tr.Illuminance(vec(1.5, y, .75), vec(0, 0, 1), &s, out)
			a.add(out[0])
		}
		return a.mean(), a.stdErr()
	}
	for i, y := range []float64{3.3, 5} {
		a, sa := factor(without, y, uint64(2*i))
		b, sb := factor(with, y, uint64(2*i+1))
		ratio := b / a
		if math.IsNaN(ratio) {
			t.Errorf("%g m: no daylight factor", y)
		}
		t.Logf("%g m from the window: daylight factor %.2f +- %.2f %% without, %.2f +- %.2f %% with: ratio %.2f +- %.2f", y, a, sa, b, sb, ratio, ratio*math.Hypot(sa/a, sb/b))
	}
	t.Log("published, 5 m from the window: more than 2")
}

// anidolicRoom has its facade in the plane y = 0.
func anidolicRoom(t *testing.T, duct bool) *room {
	const w, d, h, top, sill = 3., 6.6, 2.8, 3.4, .9
	r := newRoom(t)
	r.s.GroundReflectance[0] = .2
	floor, walls, ceiling := r.matte(.2), r.matte(.5), r.matte(.7)
	glass, err := materials.NewGlazing(.78, 2)
	double := r.finish(glass, err)
	p := r.part("room")
	r.rect(p, floor, vec(0, 0, 0), vec(w, 0, 0), vec(0, d, 0))
	r.rect(p, walls, vec(0, 0, 0), vec(0, d, 0), vec(0, 0, top))
	r.rect(p, walls, vec(w, 0, 0), vec(0, 0, top), vec(0, d, 0))
	r.rect(p, walls, vec(0, d, 0), vec(w, 0, 0), vec(0, 0, top))
	r.rect(p, walls, vec(0, 0, 0), vec(w, 0, 0), vec(0, 0, sill))
	r.rect(p, ceiling, vec(0, 0, top), vec(0, d, 0), vec(w, 0, 0))
	r.rect(r.part("window"), double, vec(0, 0, sill), vec(w, 0, 0), vec(0, 0, h-sill))
	r.opening(vec(w, 0, sill), vec(-w, 0, 0), vec(0, 0, h-sill))
	ground := r.part("ground")
	r.s.Parts[ground].Kind = scene.GroundPlane
	r.rect(ground, r.matte(1), vec(-30, -30, -.01), vec(60, 0, 0), vec(0, 60, 0))
	if !duct {
		r.rect(p, ceiling, vec(0, 0, h), vec(0, d, 0), vec(w, 0, 0))
		r.rect(p, walls, vec(0, 0, h), vec(w, 0, 0), vec(0, 0, top-h))
		return r
	}
	mouth := system.Rect{Origin: vec(w, 0, h), Across: vec(-1, 0, 0), Up: vec(0, 0, 1), Outward: vec(0, -1, 0), WidthM: w, HeightM: .52}
	r.rect(p, walls, vec(0, 0, h+.52), vec(w, 0, 0), vec(0, 0, top-h-.52))
	a := anidolicCeiling()
	a.KeepShare, a.DuctLengthM, a.EntranceGlazing = .5, 3.8, "double"
	faces, err := a.Build(mouth)
	if err != nil {
		t.Fatal(err)
	}
	outlet, err := a.Outlet(mouth)
	if err != nil {
		t.Fatal(err)
	}
	r.faces(faces, map[string]int32{"mirror": r.mirror(.9), "casing": ceiling, "double": double})
	r.s.Openings = append(r.s.Openings, scene.Opening{Name: "outlet", Rect: outlet})
	// The suspended ceiling, open below the outlet from 2.8 m to 3.8 m.
	r.rect(p, ceiling, vec(0, 0, h), vec(0, 2.8, 0), vec(w, 0, 0))
	r.rect(p, ceiling, vec(0, 3.8, h), vec(0, d-3.8, 0), vec(w, 0, 0))
	return r
}
