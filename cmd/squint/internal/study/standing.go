package study

import (
	"strings"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/control"
	"squint/scene"
	"squint/scene/project"
	"squint/scene/system"
	"squint/trace"
)

// Standing is one way in which the movable systems stand, and when they do.
type Standing struct {
	Label   string // "blind 2: tilt 30.0, ..." ; "" where nothing moves
	Scene   *scene.Scene
	World   *trace.World
	Moments []*scene.Moment
}

// followers are the systems that follow a law.
func followers(p *project.Project) []project.Movable {
	var list []project.Movable
	for _, m := range project.Movables(p) {
		if m.Follow != nil && m.Standing != project.RaisedState {
			list = append(list, m)
		}
	}
	return list
}

// follow is how followers stand at a moment, a key of that, and words for it.
func follow(following []project.Movable, s *scene.Scene, m *scene.Moment) (choice map[string]string, key, words string) {
	choice = map[string]string{}
	var names, states []string
	for _, f := range following {
		k, ok := openingOf(s, f.Opening)
		if !ok {
			continue // scene.Build has said so
		}
		rect := s.Openings[k].Rect
		state := stateUnder(f, rect, m)
		choice[f.Name] = state
		names, states = append(names, f.Name), append(states, state)
	}
	return choice, strings.Join(states, "\n"), control.Words(names, states)
}

// stateUnder is the state of a follower that suits a moment's sun.
func stateUnder(f project.Movable, rect system.Rect, m *scene.Moment) string {
	sun := m.Sun
	if m.SunNormalLx <= 0 {
		sun = r3.Scale(-1, rect.Outward) // no sun to follow: behind the glass
	}
	return f.States[f.FollowFrom+f.Follow.Choose(sun, rect)]
}

// standingByStep are the labels and which of them holds at each of the year's n
// steps.
func standingByStep(all []Standing, n int) (labels []string, at []int16) {
	at = make([]int16, n)
	for h := range at {
		at[h] = -1
	}
	for k, s := range all {
		labels = append(labels, s.Label)
		for _, m := range s.Moments {
			at[m.Step] = int16(k)
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
