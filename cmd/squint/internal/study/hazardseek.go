package study

import (
	"context"
	"math"
	"sort"
	"time"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/trace"
)

const (
	// seekEndM is the step at which a search in space ends; the sun's image
	// blurs any focus to 0.009 of its distance, so this resolves mirrors from
	// 0.1 m on.
	seekEndM = 0.0005
	// rounds bounds how often a peak is followed.
	rounds = 16
	// settled is the relative growth in a round below which a peak counts as
	// found: what is asked is 2 %, which several rounds may make up.
	settled = 0.004
)

// place is where a search stands: a point, on a surface also its normal.
type place struct{ point, normal r3.Vec }

// seeker searches the places of one kind for the greatest concentration.
type seeker struct {
	s    *hazardSearch
	kind int
	part int32 // surface
}

func (k *seeker) onSurface() bool { return k.kind == surfaceOutdoors || k.kind == surfaceIndoors }

// steps are the directions in which a search moves: along edges and diagonals.
func (k *seeker) steps(at place) []r3.Vec {
	if k.kind == fixed {
		return nil
	}
	u, v, w := r3.Vec{X: 1}, r3.Vec{Y: 1}, r3.Vec{Z: 1}
	depth := 1
	if k.onSurface() {
		u = r3.Unit(r3.Cross(at.normal, axisAcross(at.normal)))
		v = r3.Cross(at.normal, u)
		depth = 0
	}
	var out []r3.Vec
	for a := -1; a <= 1; a++ {
		for b := -1; b <= 1; b++ {
			for c := -depth; c <= depth; c++ {
				if a != 0 || b != 0 || c != 0 {
					out = append(out, r3.Add(r3.Scale(float64(a), u), r3.Add(r3.Scale(float64(b), v), r3.Scale(float64(c), w))))
				}
			}
		}
	}
	return out
}

// axisAcross is the axis furthest from n.
func axisAcross(n r3.Vec) r3.Vec {
	switch x, y, z := math.Abs(n.X), math.Abs(n.Y), math.Abs(n.Z); {
	case x <= y && x <= z:
		return r3.Vec{X: 1}
	case y <= z:
		return r3.Vec{Y: 1}
	}
	return r3.Vec{Z: 1}
}

// move is the place a step away: in the air the way must be free; on a surface
// the place is set down on the same part.
func (k *seeker) move(from place, by r3.Vec, check bool) (place, bool) {
	w := k.s.world
	p := r3.Add(from.point, by)
	if !k.onSurface() {
		d := r3.Norm(by)
		if check && d > 0 && w.Transmittance(from.point, r3.Scale(1/d, by), d) < 1 {
			return place{}, false
		}
		return place{point: p}, true
	}
	const lift = 0.03 // what a curved surface may rise or fall over a step
	h, ok := w.Closest(r3.Add(p, r3.Scale(lift, from.normal)), r3.Scale(-1, from.normal))
	if !ok || h.T > 2*lift || h.Part != k.part {
		return place{}, false
	}
	return place{w.Offset(h.Point, h.Facing()), h.Facing()}, true
}

// climb walks to the greatest concentration nearby in steps from h down to end.
func (k *seeker) climb(f *trace.Focus, at place, h, end float64) (place, float64) {
	best := f.Rough(at.point, at.normal).Total()
	for ; h >= end; h /= 2 {
		steps := k.steps(at)
		for moved, tries := true, 0; moved && tries < 8; tries++ {
			moved = false
			for _, d := range steps {
				// What is worth moving for saves many small moves.
				next, ok := k.move(at, r3.Scale(h, d), false)
				if !ok {
					continue
				}
				if x := f.Rough(next.point, next.normal).Total(); x > best*1.001 {
					if next, ok = k.move(at, r3.Scale(h, d), true); ok {
						at, best, moved = next, x, true
					}
				}
			}
		}
	}
	return at, best
}

// approach refines a start of the first search at its own sun.
func (s *hazardSearch) approach(b start) *Peak {
	m := s.suns[b.sun]
	f := s.world.Focus(m.Sun, s.hidden)
	k := &seeker{s: s, kind: b.kind, part: b.part}
	at := place{b.point, b.normal}
	if k.onSurface() {
		at.point = s.world.Offset(at.point, at.normal)
	}
	// A grid over the cell and its rim first.
	steps, h := k.steps(at), b.cellM/4
	best, from := f.Rough(at.point, at.normal).Total(), at
	for _, d := range steps {
		for i := 1.0; i <= 2; i++ {
			if p, ok := k.move(from, r3.Scale(i*h, d), false); ok {
				if x := f.Rough(p.point, p.normal).Total(); x > best {
					at, best = p, x
				}
			}
		}
	}
	at, _ = k.climb(f, at, h, seekEndM)
	return s.peak(k, f, at, m, m.Time, m.Sun)
}

// peak states what is at a place; nil where no mirror adds anything.
func (s *hazardSearch) peak(k *seeker, f *trace.Focus, at place, m *scene.Moment, t time.Time, sun r3.Vec) *Peak {
	c := f.At(at.point, at.normal)
	if c.Mirrors <= 0 {
		return nil
	}
	p := &Peak{Times: c.Total(), DirectTimes: c.Sun, Moment: m, Time: t, Sun: sun, Point: at.point}
	p.normal, p.part = at.normal, k.part
	s.describe(p, c, k.kind)
	return p
}

// describe names what is around a peak.
func (s *hazardSearch) describe(p *Peak, c trace.Concentration, kind int) {
	p.Via = s.label
	p.Indoors = s.indoors(p.Point)
	if c.Part >= 0 {
		p.Mirror, p.FromM = s.scene.Parts[c.Part].Name, c.DistanceM
	}
	if kind == surfaceOutdoors || kind == surfaceIndoors {
		p.On = s.scene.Parts[p.part].Name
	}
	p.Ground, p.AboveM = true, p.Point.Z-s.scene.GroundLevelM
	if h, ok := s.world.Closest(p.Point, r3.Vec{Z: -1}); ok {
		part := s.scene.Parts[h.Part]
		p.Ground, p.Below, p.AboveM = part.Kind == scene.GroundPlane, part.Name, h.T
	}
}

// follow takes a peak to other times of the day and other days, for as long as
// it grows, each time to the greatest concentration near where it was.
func (s *hazardSearch) follow(ctx context.Context, opt Options, p *Peak, kind int) (*Peak, error) {
	type step struct {
		m   *scene.Moment
		t   time.Time
		sun r3.Vec
		at  place
		x   float64
	}
	k := &seeker{s: s, kind: kind, part: p.part}
	now := step{m: p.Moment, t: p.Time, sun: p.Sun, at: place{p.Point, p.normal}}
	now.x = s.world.Focus(now.sun, s.hidden).Rough(now.at.point, now.at.normal).Total()
	for range rounds {
		found := make([]step, len(followSteps))
		if err := each(ctx, opt, StageHazard, len(found), func(i int) error {
			next := step{t: now.t.Add(followSteps[i])}
			ok := false
			if next.m, next.sun, ok = s.momentAt(next.t); !ok {
				return nil
			}
			// A focus wanders by up to twice what the sun does.
			h := math.Max(0.01, 2*p.FromM*r3.Norm(r3.Sub(next.sun, now.sun)))
			next.at, next.x = k.climb(s.world.Focus(next.sun, s.hidden), now.at, h, math.Min(h/8, 0.004))
			found[i] = next
			return nil
		}); err != nil {
			return nil, err
		}
		was := now.x
		for _, next := range found {
			if next.x > now.x {
				now = next
			}
		}
		if now.x-was < settled*was {
			break
		}
	}
	f := s.world.Focus(now.sun, s.hidden)
	at, _ := k.climb(f, now.at, 0.004, seekEndM)
	if q := s.peak(k, f, at, now.m, now.t, now.sun); q != nil && q.Times > p.Times && (kind > airIndoors || q.Indoors == p.Indoors) {
		return q, nil
	}
	return p, nil
}

// followSteps are the times that a peak is taken to: minutes, an hour, days.
var followSteps = []time.Duration{
	-2 * time.Minute, 2 * time.Minute, -6 * time.Minute, 6 * time.Minute, -20 * time.Minute, 20 * time.Minute, -time.Hour, time.Hour,
	-24 * time.Hour, 24 * time.Hour, -72 * time.Hour, 72 * time.Hour, -216 * time.Hour, 216 * time.Hour,
}

// momentAt is the sun at a time and the nearest moment of the standing; false
// where there is none within the half hour or the sun is too low.
func (s *hazardSearch) momentAt(t time.Time) (*scene.Moment, r3.Vec, bool) {
	i := sort.Search(len(s.moments), func(i int) bool { return !s.moments[i].Time.Before(t) })
	var best *scene.Moment
	least := 31 * time.Minute
	for _, j := range []int{i - 1, i} {
		if j < 0 || j >= len(s.moments) {
			continue
		}
		if d := s.moments[j].Time.Sub(t).Abs(); d < least {
			best, least = s.moments[j], d
		}
	}
	if best == nil {
		return nil, r3.Vec{}, false
	}
	sun, up := s.sunAt(t)
	return best, sun, up
}

// fixed is the kind of a place that does not move: an eye.
const fixed = scanKinds

// eyes is the greatest concentration at a viewpoint, nil where none sees the
// sun in a mirror.
func (s *hazardSearch) eyes(ctx context.Context, opt Options, h *Hazard) (*Peak, error) {
	views := s.scene.Viewpoints
	if len(views) == 0 || len(s.moments) == 0 {
		return nil, nil
	}
	work := float64(len(s.moments)) * float64(s.world.Focus(s.moments[len(s.moments)/2].Sun, s.hidden).Lit()) * float64(len(views)+5)
	every := max(1, int(math.Ceil(work*float64(s.among)/eyeWork)))
	h.EveryMoments = max(h.EveryMoments, every)
	n := (len(s.moments) + every - 1) / every
	type seen struct {
		x    float64
		view int
	}
	best := make([]seen, n)
	if err := each(ctx, opt, StageHazard, n, func(i int) error {
		f := s.world.Focus(s.moments[i*every].Sun, s.hidden)
		if f.Empty() {
			return nil
		}
		for v := range views {
			if c := f.Rough(views[v].Position, r3.Vec{}); c.Mirrors > 0 && c.Total() > best[i].x {
				best[i] = seen{c.Total(), v}
			}
		}
		return nil
	}); err != nil {
		return nil, err
	}
	top := 0
	for i := range best {
		if best[i].x > best[top].x {
			top = i
		}
	}
	if best[top].x <= 0 {
		return nil, nil
	}
	m, v := s.moments[top*every], views[best[top].view]
	k := &seeker{s: s, kind: fixed, part: -1}
	p := s.peak(k, s.world.Focus(m.Sun, s.hidden), place{point: v.Position}, m, m.Time, m.Sun)
	if p == nil {
		return nil, nil
	}
	p, err := s.follow(ctx, opt, p, fixed)
	if err != nil {
		return nil, err
	}
	p.On, p.Eye = v.Name, true
	return p, nil
}
