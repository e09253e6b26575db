package control

import (
	"math"
	"testing"

	"squint/scene"
	"squint/scene/project"
	"squint/scene/system"
)

// TestViewLeft by hand, for openings 2 m high.
func TestViewLeft(t *testing.T) {
	top := 1.5
	slats := project.Slats{Name: "b", Opening: "o", SlatWidthMM: 80, PitchMM: 100, ThicknessMM: 1, Steps: 8,
		States: []project.SlatState{{Name: "level", TiltDeg: 0}, {Name: "half", TiltDeg: -30}, {Name: "shut", TiltDeg: 90}}}
	louvres := slats
	louvres.Name = "l"
	s := &scene.Scene{
		Project: &project.Project{
			Finishes: []project.Finish{{Name: "woven", Openness: .03}, {Name: "holes", OpenShare: .2}},
			Rollers: []project.Roller{
				{Name: "r", Opening: "o", Openness: .1, Drop: .5},
				{Name: "woven", Opening: "o", Cloth: "woven", Drop: 1},
				{Name: "holes", Opening: "o", Cloth: "holes", Drop: 1},
			},
			Blinds:           []project.Blind{{Slats: slats, Drop: .5}},
			Louvres:          []project.Louvres{{Slats: louvres, BottomM: 1, TopM: &top}},
			AnidolicCeilings: []project.AnidolicCeiling{{Name: "a", Opening: "o", Roller: "woven"}},
		},
		Openings: []scene.Opening{{Name: "o", Rect: system.Rect{HeightM: 2}}},
	}
	units := Units(s.Project)
	left := ViewLeft(s, units)
	half := (80*0.5 + math.Sqrt(3)/2) / 100 // of the pitch, at 30 degrees
	want := map[string][]float64{
		"r":     {1, 1 - .5*.9},
		"woven": {1, .03},
		"holes": {1, .2},
		"b":     {1, 1 - .5*.01, 1 - .5*half, 1 - .5*.8},
		"l":     {1 - .25*.01, 1 - .25*half, 1 - .25*.8},
		"a":     {0, 0},
	}
	if len(units) != len(want) {
		t.Fatalf("got %d units, want %d", len(units), len(want))
	}
	for k, u := range units {
		for i := range u.States {
			if got, want := left(k, i), want[u.Name][i]; math.Abs(got-want) > 1e-12 {
				t.Errorf("%s, %s: got %g, want %g", u.Name, u.States[i], got, want)
			}
		}
	}
}
