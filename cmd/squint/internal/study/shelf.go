package study

import (
	"context"
	"sync"

	"squint/scene"
	"squint/trace/bvh"
)

// shelf is what a store holds for one standing.
type shelf struct {
	opt    Options
	in     *Input
	st     *Standing
	hours  []int // of the standing's moments
	clear  []*scene.Moment
	views  []*viewRecord
	planes []*planeRecord
	// lackViews and lackPlanes are to be computed, for lackHours.
	lackViews, lackPlanes []int
	lackHours             map[int]bool
	seenHours             map[int]bool // those of lackHours that views lack
}

// newShelf reads what is known of standing k and finds what is missing.
func newShelf(in *Input, k int, opt Options) *shelf {
	s := &shelf{opt: opt, in: in, st: &in.Standings[k], lackHours: map[int]bool{}, seenHours: map[int]bool{}}
	for _, m := range s.st.Moments {
		s.hours = append(s.hours, m.Step)
	}
	for _, m := range in.Clear {
		if in.standingAt(m.Step) == k {
			s.clear = append(s.clear, m)
		}
	}
	// What receivers are, is in their own keys; the project is in the scene,
	// but for how it is simulated. Workers change nothing.
	bare := *s.st.Scene
	bare.Project, bare.Viewpoints, bare.WorkPlanes, bare.Meshes, bare.Notes = nil, nil, nil, nil, nil
	room := digest(opt.Program, bvh.Kernel(), bare, in.Project.Simulation, opt.skies)
	if room == "" || opt.skies == "" || digest(in.Clear) == "" {
		s.opt.Store = nowhere{} // something has no digest
	}
	for i, v := range s.st.Scene.Viewpoints {
		x := &viewRecord{}
		load(s, digest("viewpoint", room, v.Position, v.Direction, sourceOptions(in.Project.Criteria), lowestLimit(in.Project)), x, &x.Key)
		s.views = append(s.views, x)
		s.missingView(i)
	}
	for i, w := range s.st.Scene.WorkPlanes {
		x := &planeRecord{}
		load(s, digest("work plane", room, w.Sensors), x, &x.Key)
		s.planes = append(s.planes, x)
		s.missingPlane(i)
	}
	return s
}

// pixels is the width of the small pictures that are asked for.
func (s *shelf) pixels() int {
	if s.opt.shots == nil {
		return 0
	}
	return s.opt.shots.pixels
}

// used are the hours in which the room of a view is in use.
func (s *shelf) used(view int) []int {
	use := s.in.UseOf(s.st.Scene.Viewpoints[view].Room)
	var list []int
	for _, h := range s.hours {
		if use.mask[h] {
			list = append(list, h)
		}
	}
	return list
}

// pictured are the hours in use of which a picture of a view may be kept.
func (s *shelf) pictured(view int) []int {
	used := s.used(view)
	if s.opt.keep == nil {
		return used
	}
	var list []int
	for _, h := range used {
		if s.opt.keep(view, h) {
			list = append(list, h)
		}
	}
	return list
}

func (s *shelf) missingView(i int) {
	x := s.views[i]
	missing, used := false, s.used(i)
	for _, h := range used {
		if !x.known(h, s.pixels(), true) {
			missing, s.lackHours[h], s.seenHours[h] = true, true, true
		}
	}
	for _, h := range s.hours {
		if s.opt.shots != nil && s.opt.shots.frame[h] >= 0 && !x.known(h, s.pixels(), false) {
			missing, s.lackHours[h] = true, true
		}
	}
	if pictured := s.pictured(i); !missing && !s.opt.anyWorst && len(pictured) > 0 && x.top(pictured) == nil {
		missing = true
		for _, h := range used {
			s.lackHours[h], s.seenHours[h] = true, true
		}
	}
	if missing {
		s.lackViews = append(s.lackViews, i)
	}
}

func (s *shelf) missingPlane(i int) {
	x := s.planes[i]
	missing := x.Factor == nil && len(s.st.Scene.WorkPlanes[i].Sensors) > 0
	for _, h := range s.hours {
		if x.at(h) == nil {
			missing, s.lackHours[h] = true, true
		}
	}
	for _, m := range s.clear {
		missing = missing || x.clear(clearName(s.in, m)) == nil
	}
	if missing {
		s.lackPlanes = append(s.lackPlanes, i)
	}
}

// compute fills what is missing and saves it.
func (s *shelf) compute(ctx context.Context, r *Result) error {
	if len(s.lackViews)+len(s.lackPlanes) == 0 {
		return nil
	}
	sub := *s.in
	c := *s.in.Climate
	c.Moments = nil
	for _, m := range s.st.Moments {
		if s.lackHours[m.Step] {
			open := *m
			open.Occupied = s.seenHours[m.Step]
			c.Moments = append(c.Moments, &open)
		}
	}
	sub.Climate, sub.Clear, sub.always = &c, nil, true
	if len(s.lackPlanes) > 0 {
		sub.Clear = s.clear
	}
	sub.Scene = some(s.st.Scene, s.lackViews, s.lackPlanes)
	sub.Standings = []Standing{{Label: s.st.Label, World: s.st.World, Scene: sub.Scene, Moments: c.Moments}}
	opt := s.opt
	opt.Store = nil
	if opt.keep != nil {
		opt.keep = func(j, h int) bool { return s.opt.keep(s.lackViews[j], h) }
	}
	if opt.shots != nil {
		opt.shots = opt.shots.part(&sub)
	}
	var own Result
	y, err := traceYear(ctx, &sub, opt, &own)
	if err != nil {
		return err
	}
	r.Settings.Workers = own.Settings.Workers
	if r.traced.views == nil {
		r.traced = traced{map[int]bool{}, map[int]bool{}}
	}
	var one sync.Mutex
	quiet := opt
	quiet.Progress = func(Stage, int, int) {}
	err = each(ctx, quiet, StageYear, len(s.lackViews), func(j int) error {
		x := s.views[s.lackViews[j]]
		x.learn(y, j, c.Moments, opt.shots, &own.Settings)
		// A year of pictures is large: what is learnt is let go of.
		y.glare.tops[j] = nil
		if opt.shots != nil {
			opt.shots.kept[j] = nil
		}
		save(s, x.Key, x, r, &one)
		return nil
	})
	if err != nil {
		return err
	}
	for _, i := range s.lackViews {
		r.traced.views[i] = true
	}
	first := 0
	var clear []string
	for _, m := range sub.Clear {
		clear = append(clear, clearName(s.in, m))
	}
	for _, i := range s.lackPlanes {
		r.traced.planes[i] = true
		n := len(s.st.Scene.WorkPlanes[i].Sensors)
		s.planes[i].learn(y, first, n, c.Moments, clear, &own.Settings)
		first += n
		save(s, s.planes[i].Key, s.planes[i], r, &one)
	}
	return nil
}

// some is a scene with some of its viewpoints and work planes.
func some(s *scene.Scene, views, planes []int) *scene.Scene {
	few := reduced(s, views)
	for _, i := range planes {
		few.WorkPlanes = append(few.WorkPlanes, s.WorkPlanes[i])
	}
	return few
}
