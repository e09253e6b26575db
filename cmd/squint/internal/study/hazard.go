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

// Hazard tells where mirrors concentrate the sun most, over the suns of the
// year. A peak is nil where mirrors reach no such place.
type Hazard struct {
	Outdoors, Indoors *Peak // in the air, by one mirror
	Surface           *Peak // on a surface, by one mirror
	Eye               *Peak // at a viewpoint, by one mirror
	// Chain is the greatest estimate, a mean over a cell of the air, that counts
	// light mirrored twice or more and light from glossy surfaces as well; nil
	// where there is little of that.
	Chain *Peak

	Suns         int // directions of the sun that were searched
	EveryMoments int // viewpoints were looked at every so many moments
}

// Greatest is the greatest of the peaks, nil if there is none.
func (h *Hazard) Greatest() *Peak {
	var best *Peak
	for _, p := range []*Peak{h.Outdoors, h.Indoors, h.Surface, h.Eye, h.Chain} {
		if p != nil && (best == nil || p.Times > best.Times) {
			best = p
		}
	}
	return best
}

// Peak is a concentration, its moment and its place.
type Peak struct {
	// Times is the light from all directions (on a surface: on its plane) in
	// multiples of the sun's normal irradiance, the sun's own light included:
	// DirectTimes of it.
	Times, DirectTimes float64
	CellM              float64 // edge of the cell that an estimate is a mean over; 0: no estimate

	Moment  *scene.Moment // the nearest of the weather file
	Time    time.Time     // standard time
	Sun     r3.Vec
	Point   r3.Vec
	Indoors bool
	On      string  // the surface or viewpoint, "" in the air
	Eye     bool    // it is a viewpoint
	Mirror  string  // the part that adds most
	FromM   float64 // distance from it, along the light
	AboveM  float64 // height above what lies below
	Below   string  // its name
	Ground  bool    // it is the ground
	Via     string  // standing of the movable systems, "" where nothing moves

	normal r3.Vec // of the surface
	part   int32
}

const (
	// hazardAltitudeRad: lower suns are left out, since less than half of their
	// light is left (air mass above 10, Kasten & Young 1989). Clouds are not
	// asked for: another year has others. Our choice, no published source.
	hazardAltitudeRad = 5 * math.Pi / 180
	// sunCellRad is the edge of the cells into which the suns are sorted for the
	// first search; a mirror's focus wanders by twice that.
	sunCellRad = 4 * math.Pi / 180
	// candidates are taken on from the first search, of each kind of place,
	// and followed of those through the year, fewer of each where systems stand
	// in several ways.
	candidates, leastCandidates = 30, 6
	chainCandidates             = 3
	followed                    = 2
	// eyeWork bounds the number of facets that viewpoints look at, over all
	// moments: some 3 s.
	eyeWork = 2e8
)

// hazardSearch is the search in one standing.
type hazardSearch struct {
	in      *Input
	world   *trace.World
	scene   *scene.Scene
	label   string
	moments []*scene.Moment // with the sun high enough
	suns    []*scene.Moment // one for each cell
	number  int
	among   int // standings that are searched, which share the work
}

// hazard looks for concentrated sun in every standing that has mirrors or
// glossy surfaces; nil if none has.
func hazard(ctx context.Context, in *Input, opt Options) (*Hazard, error) {
	var out *Hazard
	among := 0
	for k := range in.Standings {
		if in.Standings[k].World.Mirrors() {
			among++
		}
	}
	for k := range in.Standings {
		st := &in.Standings[k]
		if !st.World.Mirrors() {
			continue
		}
		if out == nil {
			out = &Hazard{EveryMoments: 1}
		}
		s := &hazardSearch{in: in, world: st.World, scene: st.Scene, label: st.Label, number: k, among: among}
		for _, m := range st.Moments {
			if m.Sun.Z >= math.Sin(hazardAltitudeRad) && !s.hidden(m.Sun) {
				s.moments = append(s.moments, m)
			}
		}
		s.suns = sunCells(s.moments)
		out.Suns += len(s.suns)
		if err := s.run(ctx, opt, out); err != nil {
			return nil, err
		}
	}
	return out, nil
}

// hidden tells directions without sky.
func (s *hazardSearch) hidden(dir r3.Vec) bool {
	return dir.Z <= 0 || (s.scene.HasHorizon && s.scene.Horizon.Hides(dir))
}

// sunCells picks, for each cell of the sky that the sun visits, the moment
// nearest to the cell's middle.
func sunCells(moments []*scene.Moment) []*scene.Moment {
	type choice struct {
		m   *scene.Moment
		far float64
	}
	best := map[[2]int]choice{}
	var order [][2]int
	for _, m := range moments {
		alt := math.Asin(math.Max(-1, math.Min(1, m.Sun.Z))) / sunCellRad
		row := math.Floor(alt)
		// Rows are cut into a whole number of cells about as wide as high.
		n := math.Max(1, math.Round(2*math.Pi*math.Cos((row+.5)*sunCellRad)/sunCellRad))
		az := (math.Atan2(m.Sun.X, m.Sun.Y)/(2*math.Pi) + .5) * n
		key := [2]int{int(row), int(az)}
		far := math.Hypot(alt-row-.5, az-math.Floor(az)-.5)
		c, ok := best[key]
		if !ok {
			order = append(order, key)
		}
		if !ok || far < c.far {
			best[key] = choice{m, far}
		}
	}
	out := make([]*scene.Moment, len(order))
	for i, key := range order {
		out[i] = best[key].m
	}
	return out
}

// run searches one standing and keeps what is greater than what is in h.
func (s *hazardSearch) run(ctx context.Context, opt Options, h *Hazard) error {
	scans := make([]scan, len(s.suns))
	if err := each(ctx, opt, StageHazard, len(s.suns), func(i int) error {
		scans[i] = s.scan(i)
		return nil
	}); err != nil {
		return err
	}
	var kinds [scanKinds][]start
	for i := range scans {
		for kind, found := range scans[i].best {
			for _, b := range found {
				if b.kind == airOutdoors && s.indoors(b.point) {
					kind = airIndoors
				}
				kinds[kind] = append(kinds[kind], b)
			}
		}
	}
	var starts []start
	for _, all := range kinds {
		starts = append(starts, foremost(all, max(candidates/s.among, leastCandidates))...)
	}
	quiet := opt
	quiet.Progress = func(Stage, int, int) {}
	peaks := make([]*Peak, len(starts))
	if err := each(ctx, quiet, StageHazard, len(starts), func(i int) error {
		if starts[i].kind == chained {
			peaks[i] = s.chain(starts[i])
		} else {
			peaks[i] = s.approach(starts[i])
		}
		return nil
	}); err != nil {
		return err
	}
	// The best of each kind are followed through the year.
	for _, slot := range []struct {
		to   **Peak
		fits func(k int, p *Peak) bool
	}{
		{&h.Outdoors, func(k int, p *Peak) bool { return starts[k].kind <= airIndoors && !p.Indoors }},
		{&h.Indoors, func(k int, p *Peak) bool { return starts[k].kind <= airIndoors && p.Indoors }},
		{&h.Surface, func(k int, p *Peak) bool {
			return starts[k].kind == surfaceOutdoors || starts[k].kind == surfaceIndoors
		}},
		{&h.Chain, func(k int, p *Peak) bool { return starts[k].kind == chained }},
	} {
		var order []int
		for k, p := range peaks {
			if p != nil && slot.fits(k, p) {
				order = append(order, k)
			}
		}
		sort.SliceStable(order, func(i, j int) bool { return peaks[order[i]].Times > peaks[order[j]].Times })
		for _, k := range order[:min(len(order), max(1, followed/s.among))] {
			p := peaks[k]
			if starts[k].kind != chained {
				var err error
				if p, err = s.follow(ctx, quiet, p, starts[k].kind); err != nil {
					return err
				}
			}
			keep(slot.to, p)
		}
	}
	eye, err := s.eyes(ctx, quiet, h)
	if err != nil {
		return err
	}
	keep(&h.Eye, eye)
	return nil
}

func keep(to **Peak, p *Peak) {
	if p != nil && (*to == nil || p.Times > (*to).Times) {
		*to = p
	}
}

// foremost are the greatest starts, one for each sun.
func foremost(all []start, n int) []start {
	sort.SliceStable(all, func(i, j int) bool { return all[i].rank > all[j].rank })
	var out []start
	taken := map[int]bool{}
	for _, a := range all {
		if len(out) == n || a.kind == chained && len(out) == chainCandidates {
			break
		}
		if !taken[a.sun] {
			taken[a.sun] = true
			out = append(out, a)
		}
	}
	return out
}

// sunAt is the sun at a moment near m, in the model's frame, lifted as by the
// usual air.
func (s *hazardSearch) sunAt(t time.Time) (r3.Vec, bool) {
	d, err := scene.SunAt(s.in.Climate.Site, s.in.Project.Site.NorthDeg, t)
	if err != nil {
		return r3.Vec{}, false
	}
	return d, d.Z >= math.Sin(hazardAltitudeRad) && !s.hidden(d)
}
