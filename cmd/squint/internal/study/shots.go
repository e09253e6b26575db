package study

import (
	"context"
	"math"
	"slices"

	"squint/cmd/squint/internal/film"
	"squint/scene"
	"squint/scene/view"
	"squint/trace/annual"
	"squint/trace/coeff"
)

// Shots are small pictures of a view's hours with daylight, for display only:
// luminance, cd/m2, without the sun's discs. Hours out of use are among them
// where the views are few, from one batch of samples.
type Shots struct {
	View    view.View // of the pictures
	Inside  []int32   // by point of the film: pixel, row-major
	Records []int     // by frame
	Film    *film.Film
	Discs   [][]annual.Disc // by frame

	// Small are pictures of the hours in use, of half as many pixels across and
	// with fewer patterns; nil where the pixels are few already.
	Small *Small

	// Stood says what stands in the pixels of Eye, by position in SeenInside: in
	// the first standings of which there are pictures.
	Eye        view.View
	Stood      []Stood
	SeenInside []int32

	roll    *film.Roll
	shrinks []shrink
}

// Small are smaller pictures.
type Small struct {
	View    view.View
	Inside  []int32 // by point of the film: pixel, row-major
	Records []int   // by frame
	Film    *film.Film
	Discs   [][]annual.Disc // by frame
}

// leastHalved is the width from which pictures are halved, in pixels. Own choice.
const leastHalved = 32

// smallRank is the number of their patterns. Own choice.
const smallRank = 6

// Stood is what a view sees in one standing. The numbers of parts are those of
// its scene; another standing's scene has others.
type Stood struct {
	Scene *scene.Scene
	Seen  []coeff.Seen
}

// shrink moves a share of a pixel of the eye to a point of the picture.
type shrink struct {
	from, to int32
	weight   float32
}

// shotScratch are one worker's small images.
type shotScratch struct{ all, sun []float32 }

// The range of luminance that the pictures show, cd/m2: from what is dark in
// a dim room to sunlit white, which a few parts of the sky beside the sun
// exceed. Own choice.
const (
	leastShown = 0.05
	mostShown  = 1e6
)

// Sizes of the pictures by the number of views, times the steps in an hour:
// across, in pixels, the patterns that they are made of, of how many standings it
// is kept what is seen, and whether there are pictures of hours out of use. What
// they are kept in must fit beside the rest, and the page must not grow without
// bound. Own choice.
var shotSizes = []struct {
	views, pixels, rank, stood int
	always                     bool
}{
	{16, 48, 12, 16, true},
	{48, 32, 10, 8, true},
	{math.MaxInt, 24, 8, 2, false},
}

// shotPlan says which frames there are and how large they are.
type shotPlan struct {
	pixels, rank, stood int
	always              bool // at hours out of use too
	records             []int
	frame               []int          // by record, -1 for none
	used                []bool         // by record
	kept                []*Shots       // by view; nil where it has no frame yet
	of                  []*scene.Scene // by frame: of which standing the picture is
}

// newShotPlan plans for the moments in use, and where the views are few for all.
func newShotPlan(in *Input) *shotPlan {
	n := len(in.Climate.SinAltitude)
	s := &shotPlan{frame: make([]int, n), used: make([]bool, n)}
	for _, size := range shotSizes {
		if len(in.Scene.Viewpoints)*in.Climate.PerHour() <= size.views {
			s.pixels, s.rank, s.stood = min(size.pixels, in.Project.Simulation.FisheyePixels), size.rank, size.stood
			s.always = size.always
			break
		}
	}
	for _, m := range in.Climate.Moments {
		s.used[m.Step] = m.Occupied
	}
	s.enlist(in, func(int) bool { return s.always })
	return s
}

// enlist numbers the frames of an input's moments: those in use, and others that
// are wanted too.
func (s *shotPlan) enlist(in *Input, wanted func(step int) bool) {
	for i := range s.frame {
		s.frame[i] = -1
	}
	for _, m := range in.Climate.Moments {
		if m.Occupied || wanted(m.Step) {
			s.frame[m.Step] = len(s.records)
			s.records = append(s.records, m.Step)
		}
	}
	s.kept, s.of = make([]*Shots, len(in.Scene.Viewpoints)), make([]*scene.Scene, len(s.records))
}

// open makes room for one view's pictures.
func (s *shotPlan) open(e *coeff.Eye) *Shots {
	x := &Shots{Records: s.records, Discs: make([][]annual.Disc, len(s.records)), Eye: e.View, SeenInside: e.Inside, View: e.View}
	x.View.Width, x.View.Height = s.pixels, s.pixels
	x.shrink(e)
	x.roll = film.NewRoll(len(x.Inside), len(s.records), leastShown, mostShown)
	return x
}

// shrink spreads the eye's pixels over the picture's by the area they share.
func (x *Shots) shrink(e *coeff.Eye) {
	from, to := e.View.Width, x.View.Width
	scale := float64(to) / float64(from)
	// overlap lists the pixels of the picture along one axis and the length of i in each.
	overlap := func(i int) (first int, share []float64) {
		lo, hi := float64(i)*scale, float64(i+1)*scale
		first = int(lo + 1e-9)
		for k := first; float64(k) < hi-1e-9; k++ {
			share = append(share, math.Min(hi, float64(k+1))-math.Max(lo, float64(k)))
		}
		return first, share
	}
	point := make([]int32, to*to)
	for i := range point {
		point[i] = -1
	}
	var sum []float32
	for _, px := range e.Inside {
		x0, sx := overlap(int(px) % from)
		y0, sy := overlap(int(px) / from)
		for j, wy := range sy {
			for i, wx := range sx {
				at := (y0+j)*to + x0 + i
				if point[at] < 0 {
					point[at] = int32(len(x.Inside))
					x.Inside = append(x.Inside, int32(at))
					sum = append(sum, 0)
				}
				x.shrinks = append(x.shrinks, shrink{px, point[at], float32(wx * wy)})
				sum[point[at]] += float32(wx * wy)
			}
		}
	}
	for i := range x.shrinks {
		x.shrinks[i].weight /= sum[x.shrinks[i].to]
	}
}

// keep stores a frame; different frames may be kept at the same time.
func (x *Shots) keep(frame int, f *annual.Frame, w *shotScratch) {
	n := len(x.Inside)
	if len(w.all) < n {
		w.all, w.sun = make([]float32, n), make([]float32, n)
	}
	all, sun := w.all[:n], w.sun[:n]
	clear(all)
	clear(sun)
	for _, s := range x.shrinks {
		all[s.to] += f.Mean[s.from] * s.weight
		sun[s.to] += f.Sunlit[s.from] * s.weight
	}
	x.roll.Keep(frame, all, sun, SunFrom(f.Moment)/math.Pi)
	x.Discs[frame] = append([]annual.Disc(nil), f.Discs...)
}

// What of the sun's illuminance on a plane that faces it is kept apart from the
// rest, for suns of so many lx: less is what half a pixel's edge catches, or a
// cloudy sky hides. Own choice.
const (
	sunPart = 0.02
	sunnyLx = 1000
)

// SunFrom is the illuminance, lx, from which pictures keep the sun's part at a
// moment apart; none of it where the sun is weak.
func SunFrom(m *scene.Moment) float64 {
	if m.SunNormalLx < sunnyLx {
		return math.Inf(1)
	}
	return sunPart * m.SunNormalLx
}

// half makes the smaller pictures.
func (x *Shots) half(used []bool) *Small {
	if x.View.Width%2 != 0 || x.View.Width < leastHalved {
		return nil
	}
	s := &Small{View: x.View}
	s.View.Width, s.View.Height = x.View.Width/2, x.View.Height/2
	place := map[int32]int{}
	var groups [][]uint16
	for p, px := range x.Inside {
		at := px/int32(x.View.Width)/2*int32(s.View.Width) + px%int32(x.View.Width)/2
		g, ok := place[at]
		if !ok {
			g = len(groups)
			place[at], groups, s.Inside = g, append(groups, nil), append(s.Inside, at)
		}
		groups[g] = append(groups[g], uint16(p))
	}
	var frames []int
	for i, h := range x.Records {
		if used[h] {
			frames = append(frames, i)
			s.Records, s.Discs = append(s.Records, h), append(s.Discs, x.Discs[i])
		}
	}
	s.Film = x.roll.Merged(frames, groups).Develop(smallRank, film.Coarse)
	return s
}

// keepShot stores a frame where pictures are asked for; a later one of the same
// hour, with other systems closed, takes its place.
func (g *standingSink) keepShot(w *sinkScratch, e *coeff.Eye, f *annual.Frame) {
	if g.shots == nil {
		return
	}
	frame := g.shots.frame[f.Moment.Step]
	if frame < 0 {
		return
	}
	g.mu[f.Eye].Lock()
	x := g.shots.opened(f.Eye, e, g.scene)
	g.shots.of[frame] = g.scene
	g.mu[f.Eye].Unlock()
	x.keep(frame, f, &w.shot)
}

// opened are the pictures of a view, which begin with its first frame.
func (s *shotPlan) opened(view int, e *coeff.Eye, of *scene.Scene) *Shots {
	if s.kept[view] == nil {
		s.kept[view] = s.open(e)
	}
	x := s.kept[view]
	if len(x.Stood) < s.stood && !slices.ContainsFunc(x.Stood, func(k Stood) bool { return k.Scene == of }) {
		x.Stood = append(x.Stood, Stood{of, e.Seen})
	}
	return x
}

// develop reduces the pictures and lets go of what they were kept in.
func (g *glareSink) develop(ctx context.Context, opt Options) error {
	if opt.shots == nil {
		return nil
	}
	return each(ctx, opt, StageShots, len(g.views), func(i int) error {
		x := opt.shots.kept[i]
		g.views[i].Shots = x
		if x != nil {
			x.Film, x.Small = x.roll.Develop(opt.shots.rank, film.Fine), x.half(opt.shots.used)
			x.roll, x.shrinks = nil, nil
		}
		return nil
	})
}

// part is the plan for some views and moments of the plan's own, in use or not as
// they are asked for there.
func (s *shotPlan) part(in *Input) *shotPlan {
	few := &shotPlan{pixels: s.pixels, rank: s.rank, stood: s.stood, always: true, frame: make([]int, len(s.frame)), used: s.used}
	few.enlist(in, func(step int) bool { return s.frame[step] >= 0 })
	return few
}
