package study

import (
	"squint/glare/daylight"
	"squint/scene"
	"squint/trace"
)

// Standing is one way in which the movable systems stand, and when they do.
type Standing struct {
	Label   string // "blind 2: tilt 30.0, ..." ; "" where nothing moves
	Scene   *scene.Scene
	World   *trace.World
	Moments []*scene.Moment
}

// standingByHour are the labels and which of them holds at each record.
func standingByHour(all []Standing) (labels []string, at []int16) {
	at = make([]int16, daylight.HoursPerYear)
	for h := range at {
		at[h] = -1
	}
	for k, s := range all {
		labels = append(labels, s.Label)
		for _, m := range s.Moments {
			at[m.Hour] = int16(k)
		}
	}
	return labels, at
}

func openingOf(s *scene.Scene, name string) (int, bool) {
	for i := range s.Openings {
		if s.Openings[i].Name == name {
			return i, true
		}
	}
	return 0, false
}
