package study

import (
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/trace"
)

// TestWorldUnder: the scene is that of the moment with the nearest shining sun.
func TestWorldUnder(t *testing.T) {
	var in Input
	var worlds []*trace.World
	add := func(moments ...*scene.Moment) {
		worlds = append(worlds, &trace.World{})
		in.Standings = append(in.Standings, Standing{World: worlds[len(worlds)-1], Moments: moments})
	}
	low, high := r3.Unit(r3.Vec{Y: -1, Z: .2}), r3.Unit(r3.Vec{Y: -1, Z: 2})
	add(&scene.Moment{Sun: low, SunNormalLx: 1})
	if in.WorldUnder(high) != worlds[0] {
		t.Error("the only standing is not the one")
	}
	add(&scene.Moment{Sun: high, SunNormalLx: 1}, &scene.Moment{Sun: low})
	for _, c := range []struct {
		name string
		sun  r3.Vec
		want int
	}{{"low", low, 0}, {"high", high, 1}, {"nearer to low, a cloudy moment aside", r3.Unit(r3.Vec{Y: -1, Z: .3}), 0}, {"zenith", r3.Vec{Z: 1}, 1}} {
		if in.WorldUnder(c.sun) != worlds[c.want] {
			t.Errorf("%s: got another standing than %d", c.name, c.want)
		}
	}
}
