package study

import (
	"fmt"
	"io/fs"
	"sort"
	"strings"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/daylight"
	"squint/scene"
	"squint/scene/project"
	"squint/trace"
)

// Standing is one way in which the movable systems stand, and when they do.
type Standing struct {
	Label   string // "blind 2: tilt 30.0, ..." ; "" where nothing moves
	Scene   *scene.Scene
	World   *trace.World
	Moments []*scene.Moment
}

// maxStandings bounds the scenes of a study: each is traced on its own.
const maxStandings = 64

// standings splits the year's moments by the states that following systems
// take; systems that follow nothing stand as the project says. first is the
// scene as the project has it, used where nothing moves.
func standings(fsys fs.FS, p *project.Project, first *scene.Scene, world *trace.World, moments []*scene.Moment, workers int) ([]Standing, error) {
	following := followers(p)
	if len(following) == 0 {
		return []Standing{{Scene: first, World: world, Moments: moments}}, nil
	}
	type group struct {
		choice  map[string]string
		label   string
		moments []*scene.Moment
	}
	groups := map[string]*group{}
	for _, m := range moments {
		choice, label := follow(following, first, m)
		g := groups[label]
		if g == nil {
			g = &group{choice: choice, label: label}
			groups[label] = g
		}
		g.moments = append(g.moments, m)
	}
	if len(groups) > maxStandings {
		return nil, fmt.Errorf("%s: got %d combinations of slat positions over the year, want at most %d; give the blinds fewer steps, or let those of one facade share their dimensions", p.File, len(groups), maxStandings)
	}
	labels := make([]string, 0, len(groups))
	for l := range groups {
		labels = append(labels, l)
	}
	sort.Strings(labels)
	var out []Standing
	for _, l := range labels {
		g := groups[l]
		s, err := scene.Build(fsys, project.WithStates(p, g.choice))
		if err != nil {
			return nil, err
		}
		out = append(out, Standing{Label: l, Scene: s, World: trace.Accelerate(s, workers), Moments: g.moments})
	}
	return out, nil
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

// follow is how followers stand at a moment, and that in words.
func follow(following []project.Movable, s *scene.Scene, m *scene.Moment) (choice map[string]string, label string) {
	choice = map[string]string{}
	var words []string
	for _, f := range following {
		k, ok := openingOf(s, f.Opening)
		if !ok {
			continue // scene.Build has said so
		}
		rect := s.Openings[k].Rect
		sun := m.Sun
		if m.SunNormalLx <= 0 {
			sun = r3.Scale(-1, rect.Outward) // no sun to follow: behind the glass
		}
		state := f.States[f.FollowFrom+f.Follow.Choose(sun, rect)]
		choice[f.Name] = state
		words = append(words, f.Name+": "+state)
	}
	return choice, strings.Join(words, ", ")
}

// hoursByStanding says in words how long each standing lasts.
func hoursByStanding(all []Standing) []string {
	var out []string
	for _, s := range all {
		if s.Label == "" {
			continue
		}
		used := 0
		for _, m := range s.Moments {
			if m.Occupied {
				used++
			}
		}
		out = append(out, fmt.Sprintf("%s: %d hours with daylight, %d of them in use.", s.Label, len(s.Moments), used))
	}
	return out
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
