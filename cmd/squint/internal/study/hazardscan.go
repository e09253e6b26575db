package study

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials/sampling"
	"squint/scene/photometry"
	"squint/trace"
)

// The kinds of start that the first search hands on.
const (
	airOutdoors = iota
	airIndoors
	surfaceOutdoors
	surfaceIndoors
	chained
	scanKinds
)

const (
	// hazardCellM is the edge of a cell of the air; where mirrors are large,
	// cells are larger, so that a photon adds no more than photonTimes.
	hazardCellM   = 0.15
	photonTimes   = 0.2
	hazardPhotons = 2000
	leastPhotons  = 250
	// hazardReachM bounds every straight piece of a photon's way.
	hazardReachM = 30.0
	// perSun starts are kept of each kind and sun.
	perSun = 3
	// nearStarts are the places close before lit mirrors that are tried.
	nearStarts = 6
	// chainGain is the factor by which an estimate takes more photons.
	chainGain = 16
)

// start is a cell in which the first search found much light.
type start struct {
	kind          int
	sun           int
	single, other float64 // by one sharp mirror; by several or by glossy surfaces
	rank          float64
	point, normal r3.Vec
	part          int32
	cellM         float64
}

// scan holds the best cells of one sun.
type scan struct{ best [scanKinds][]start }

// scan shoots photons at the mirrors from sun i and keeps the fullest cells.
func (s *hazardSearch) scan(i int) scan {
	sun := s.suns[i].Sun
	aimed := s.world.Aim(sun)
	area := aimed.Only(false).WeightM2()
	if area <= 0 {
		return scan{}
	}
	n := min(max(int(area/(photonTimes*hazardCellM*hazardCellM)), leastPhotons), hazardPhotons)
	c := newCells(math.Max(hazardCellM, math.Sqrt(area/(photonTimes*float64(n)))))
	s.shoot(c, aimed, sun, n, uint64(i), 0)
	var out scan
	for _, k := range c.used {
		e := &c.slots[k]
		b := start{sun: i, single: float64(e.single), other: float64(e.other), point: c.middle(e.key), part: -1, cellM: c.edgeM}
		indoors := e.key>>indoorsBit&1 == 1
		switch {
		case e.at >= 0:
			b.kind = surfaceOutdoors
			b.point, b.normal, b.part = c.spots[e.at].point, c.spots[e.at].normal, c.spots[e.at].part
		default:
			b.kind = airOutdoors
			if e.other > 0 {
				x := b
				x.kind, x.rank = chained, x.other
				out.keep(x)
			}
		}
		if indoors {
			b.kind++
		}
		if b.rank = b.single; b.rank > 0 {
			out.keep(b)
		}
	}
	// Before a mirror that is lit there is always the sun and its image, which
	// no cell of a few photons tells from its neighbours.
	for k, p := range c.near {
		if k == nearStarts {
			break
		}
		out.best[airOutdoors] = append(out.best[airOutdoors], start{sun: i, point: p, part: -1, cellM: c.edgeM})
	}
	f := s.world.Focus(sun, s.hidden)
	for kind := range chained {
		for k := range out.best[kind] {
			b := &out.best[kind][k]
			x := f.Rough(b.point, b.normal)
			b.rank = x.Sun + math.Max(x.Mirrors, b.single) // a focus is finer than its cell
		}
	}
	return out
}

// keep inserts a start among the best of its kind.
func (o *scan) keep(b start) {
	l := o.best[b.kind]
	if len(l) == perSun && l[perSun-1].rank >= b.rank {
		return
	}
	at := len(l)
	for at > 0 && l[at-1].rank < b.rank {
		at--
	}
	l = append(l, start{})
	copy(l[at+1:], l[at:])
	l[at] = b
	o.best[b.kind] = l[:min(len(l), perSun)]
}

// shoot fills the cells: n photons at mirrors and a quarter of it at panes. In
// the air a cell holds flux x length / volume, on surfaces flux over the cell's
// face, both per unit of the sun's normal irradiance.
func (s *hazardSearch) shoot(c *cells, aimed *trace.Photons, sun r3.Vec, n int, number, round uint64) {
	stream := sampling.NewStream(s.in.Project.Simulation.Seed, hazardKey, uint64(s.number), number, round)
	draw := func(bits uint64) (r3.Vec, bool) {
		u, v := float64(bits>>32)/(1<<32), float64(bits&0xffffffff)/(1<<32)
		d := trace.ConeDirection(sun, photometry.SunDiameterRad/2, u, v)
		return d, !s.hidden(d)
	}
	face := c.edgeM * c.edgeM
	inside := map[uint64]bool{} // by the first mirror's part and place
	indoors := false
	report := func(b *trace.Beam) {
		if b.Mirrors == 1 && b.Panes == 0 {
			p := r3.Add(b.From, r3.Scale(0.02, b.Dir))
			key := c.key(p, b.SourceBack, b.Source)
			known, ok := inside[key]
			if !ok {
				known = s.indoors(p)
				inside[key] = known
				c.near = append(c.near, p)
			}
			indoors = known
		}
		in := indoors != (b.Panes%2 == 1) // every pane leads to the other side
		single := b.Mirrors == 1 && b.Glossy == 0
		// Points a cell's edge apart stand for that length each.
		x := b.FluxM2 / face
		from, to := c.clip(b, math.Min(b.LengthM, hazardReachM))
		for t := from + stream.Float64()*c.edgeM; t < to; t += c.edgeM {
			c.add(c.key(r3.Add(b.From, r3.Scale(t, b.Dir)), in, -1), x, single)
		}
		if h := b.Hit; h != nil && b.LengthM < hazardReachM {
			e, fresh := c.add(c.key(h.Point, in, h.Part), x, single)
			if fresh {
				e.at = int32(len(c.spots))
				c.spots = append(c.spots, spot{h.Point, h.Facing(), h.Part})
			}
		}
	}
	aimed.Only(false).Beams(n, draw, &stream, report)
	aimed.Only(true).Beams(n/4, draw, &stream, report)
}

// hazardKey sets this search's random streams apart from others.
const hazardKey = 0x6861

// indoors reports whether a point has a roof: of 64 directions over the upper
// half space at most 2 meet nothing, panes counting as something. Our choice, no
// published source.
func (s *hazardSearch) indoors(p r3.Vec) bool {
	const n, open = 64, 2
	escaped := 0
	for i := range n {
		u, v := sampling.OwenSobol2(uint32(i), 0)
		d := trace.ConeDirection(r3.Vec{Z: 1}, math.Pi/2*0.999, u, v)
		if _, hit := s.world.Closest(p, d); !hit {
			if escaped++; escaped > open {
				return false
			}
		}
	}
	return true
}

// chain measures a cell's light by many mirrors: one run with more photons
// picks the fullest cell near the start, another, independent one fills it.
func (s *hazardSearch) chain(b start) *Peak {
	m := s.suns[b.sun]
	aimed := s.world.Aim(m.Sun)
	n := chainGain * hazardPhotons
	var best cell
	reach := b.cellM + 2*hazardCellM
	pick, fill := newCells(hazardCellM), newCells(hazardCellM)
	pick.about, pick.withinM = b.point, reach+hazardCellM
	fill.about, fill.withinM = pick.about, pick.withinM
	s.shoot(pick, aimed, m.Sun, n, uint64(b.sun), 1)
	for _, k := range pick.used {
		e := pick.slots[k]
		far := r3.Norm(r3.Sub(pick.middle(e.key), b.point))
		if e.at < 0 && far <= reach && e.other > best.other {
			best = e
		}
	}
	s.shoot(fill, aimed, m.Sun, n, uint64(b.sun), 2)
	e, fresh := fill.find(best.key)
	// Less than a tenth of the sun is not worth a line.
	if fresh || e.other < 0.1 {
		return nil
	}
	p := fill.middle(best.key)
	c := s.world.Focus(m.Sun, s.hidden).At(p, r3.Vec{})
	peak := &Peak{Times: c.Sun + float64(e.single+e.other), DirectTimes: c.Sun, CellM: hazardCellM,
		Moment: m, Time: m.Time, Sun: m.Sun, Point: p}
	s.describe(peak, c, airOutdoors)
	return peak
}
