package page

import (
	"cmp"
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/cmd/squint/internal/film"
	"squint/cmd/squint/internal/study"
	"squint/scene/view"
	"squint/trace/annual"
	"squint/trace/coeff"
)

// noOutcome is that of a viewpoint of which no level is asked.
const noOutcome = "none"

// Series are packed in these steps; noValue marks hours that were not
// evaluated.
const (
	dgpScale   = 1e4
	errorScale = 2e3
	noValue    = math.MaxUint16
)

// mostThreshold stands for a threshold that nothing exceeds, which JSON cannot
// hold.
const mostThreshold = 1e12

// mostSources is how many sources of a worst hour are numbered: as in the
// other pictures of it.
const mostSources = 6

// mostDiscs is the number of discs that a picture shows: the strongest ones. A
// blind of mirrored slats has an image in each. Own choice.
const mostDiscs = 12

// view packs a viewpoint's year and its pictures.
func (a *Archive) view(b *build, r *study.Result, v *study.ViewResult) View {
	out := View{Name: v.Viewpoint.Name, Subject: v.Viewpoint.Name, Grid: v.Viewpoint.Grid != "", Position: vec(v.Viewpoint.Position),
		Outcome: noOutcome, When: v.When, Over: -1, Causes: []string{}, Worst: -1, Seen: []Blob{}}
	if len(v.Levels) > 0 && v.Levels[0].Subject != "" {
		out.Subject = v.Levels[0].Subject
	}
	if v.Asked >= 0 && v.Asked < len(v.Levels) {
		l := v.Levels[v.Asked]
		out.Outcome, out.Text, out.Over = l.Outcome.String(), l.Text, l.Estimate
	}
	for _, c := range v.Causes {
		out.Causes = append(out.Causes, c.String())
	}
	out.Series = a.series(v)
	forward := v.Viewpoint.Direction
	if s := v.Shots; s != nil {
		f, l, u := s.Eye.Frame()
		out.Axes = [3][3]float64{vec(f), vec(l), vec(u)}
		out.HasShots = true
		out.Shots = a.shots(s.Film, &s.View, s.Inside, s.Records, s.Discs, perHour(r))
		if s.Small != nil {
			out.Small = a.shots(s.Small.Film, &s.Small.View, s.Small.Inside, s.Small.Records, s.Small.Discs, perHour(r))
		}
		out.WorstPx = s.Eye.Width
		for _, of := range r.Stood {
			seen := Blob{Parts: []Part{}}
			for _, k := range s.Stood {
				if k.Scene == of {
					seen = a.seen(b, s, k)
				}
			}
			out.Seen = append(out.Seen, seen)
		}
	} else {
		up := r3.Vec{Z: 1}
		if math.Abs(forward.Z) > 0.999 {
			up = r3.Vec{Y: 1}
		}
		left := r3.Unit(r3.Cross(up, forward))
		out.Axes = [3][3]float64{vec(forward), vec(left), vec(r3.Cross(forward, left))}
	}
	if w := v.Worst; w != nil && w.InsideOf != nil {
		out.Worst, out.WorstPx, out.Threshold = w.Moment.Step, w.InsideOf.View.Width, math.Min(w.Result.ThresholdCdM2, mostThreshold)
		code := make([]uint16, len(w.Lum))
		for i, l := range w.Lum {
			if l > 0 {
				code[i] = uint16(math.Max(1, math.Min(noValue, math.Round(worstScale*math.Log(float64(l)/worstLeast)))))
			}
		}
		var p packer
		pack(&p, "lum", "u16", code)
		packDiscs(&p, &w.InsideOf.View, [][]annual.Disc{w.Discs})
		var x, y []uint16
		for i, s := range w.Result.Sources {
			if px, py, ok := w.InsideOf.View.LocalProject(s.Dir); ok && i < mostSources {
				x, y = append(x, part16(px/float64(out.WorstPx))), append(y, part16(py/float64(out.WorstPx)))
			}
		}
		pack(&p, "source_x", "u16", x)
		pack(&p, "source_y", "u16", y)
		out.WorstShot = a.add(&p)
	}
	return out
}

// The full picture of a worst hour: luminance is worstLeast times
// exp(code/worstScale), good to 0.8 %, half of what a step of its colours is.
// Own choice.
const (
	worstScale = 60
	worstLeast = 1e-3
)

func (a *Archive) series(v *study.ViewResult) Blob {
	n := len(v.DGP)
	dgp, se, ev, cause := make([]uint16, n), make([]uint16, n), make([]uint32, n), make([]uint8, n)
	for h := range n {
		dgp[h], se[h], cause[h] = noValue, noValue, math.MaxUint8
		if x := float64(v.DGP[h]); x == x {
			dgp[h] = uint16(math.Max(0, math.Min(noValue-1, math.Round(x*dgpScale))))
			ev[h] = uint32(math.Round(float64(v.Ev[h])))
		}
		if x := float64(v.StdErr[h]); x == x {
			se[h] = uint16(math.Min(noValue-1, math.Round(x*errorScale)))
		}
		if c := v.Cause[h]; c >= 0 && c < math.MaxUint8 {
			cause[h] = uint8(c)
		}
	}
	var p packer
	pack(&p, "dgp", "u16", dgp)
	pack(&p, "error", "u16", se)
	pack(&p, "ev", "u32", ev)
	pack(&p, "cause", "u8", cause)
	return a.add(&p)
}

// shots packs a film; v, inside and discs are of a view's, nil for a plane.
func (a *Archive) shots(f *film.Film, v *view.View, inside []int32, records []int, discs [][]annual.Disc, perHour int) Shots {
	out := Shots{Grain: int(f.Grain), Least: f.Least, StepLn: f.StepLn, Frames: f.Frames, Points: f.Points}
	var p packer
	if v != nil {
		out.Pixels = v.Width
		pack(&p, "inside", "u16", narrow(inside))
	}
	rises := make([]uint32, len(records))
	for i, before := 0, 0; i < len(records); i++ {
		rises[i], before = uint32(records[i]-before), records[i]
	}
	pack(&p, "rise", "u32", rises)
	packSmall(&p, "mean", f.Mean)
	sunny, changes := litChanges(f, records, 24*perHour)
	pack(&p, "sunny", "u8", sunny)
	pack(&p, "lit", "u8", changes)
	packSmall(&p, "lit_point", f.LitPoint)
	packSmall(&p, "lit_frame", f.LitFrame)
	if v != nil {
		packDiscs(&p, v, discs)
	}
	out.Numbers = a.add(&p)
	from := 0
	for _, s := range f.Steps {
		p = packer{}
		pack(&p, "basis", "i8", f.Basis[from*f.Points:s.Rank*f.Points])
		packSmall(&p, "weight", f.Weight[from*f.Frames:s.Rank*f.Frames])
		out.Steps = append(out.Steps, Step{s.Rank, s.Median, s.Wide, a.add(&p)})
		from = s.Rank
	}
	return out
}

// litChanges are masks of what the sun lights that pack well: frames in order of
// the time of day and then of the day, each as the bits in which it differs from
// the sunny one before. sunny are those, in that order, of which any bit is set;
// the others are not there.
func litChanges(f *film.Film, records []int, perDay int) (sunny, changes []uint8) {
	order := make([]int, len(records))
	for i := range order {
		order[i] = i
	}
	slices.SortFunc(order, func(a, b int) int {
		x, y := records[a], records[b]
		return cmp.Or(cmp.Compare(x%perDay, y%perDay), cmp.Compare(x, y))
	})
	row := (f.Points + 7) / 8
	before := make([]uint8, row)
	for _, i := range order {
		mask := f.Lit[i*row : (i+1)*row]
		if !slices.ContainsFunc(mask, func(b uint8) bool { return b != 0 }) {
			sunny = append(sunny, 0)
			continue
		}
		sunny = append(sunny, 1)
		for k, b := range mask {
			changes = append(changes, b^before[k])
		}
		before = mask
	}
	return sunny, changes
}

func narrow[T int | int32](v []T) []uint16 {
	out := make([]uint16, len(v))
	for i, x := range v {
		out[i] = uint16(x)
	}
	return out
}

// packDiscs packs the sun's discs by frame: where they are seen, in parts of the
// picture's width.
func packDiscs(p *packer, v *view.View, discs [][]annual.Disc) {
	count := make([]uint8, len(discs))
	var x, y []uint8
	for i, list := range discs {
		list = slices.Clone(list)
		slices.SortStableFunc(list, func(a, b annual.Disc) int { return cmp.Compare(b.OmegaSr*b.Luminance, a.OmegaSr*a.Luminance) })
		for _, d := range list {
			px, py, ok := v.Project(d.Dir)
			if !ok || count[i] == mostDiscs || !(d.OmegaSr > 0) || !(d.Luminance > 0) {
				continue
			}
			count[i]++
			x, y = append(x, part8(px/float64(v.Width))), append(y, part8(py/float64(v.Height)))
		}
	}
	pack(p, "discs", "u8", count)
	pack(p, "disc_x", "u8", x)
	pack(p, "disc_y", "u8", y)
}

// part8 is a part of a width, 0 to 1, in 8 bits: a pixel or two of the drawing.
func part8(t float64) uint8 { return uint8(math.Round(math.Max(0, math.Min(1, t)) * math.MaxUint8)) }

// part16 is a part of a width, 0 to 1, in 16 bits.
func part16(t float64) uint16 {
	return uint16(math.Round(math.Max(0, math.Min(1, t)) * math.MaxUint16))
}

// What stands in a pixel of the eye's picture.
const (
	outsidePixel = iota
	surfacePixel
	skyPixel
	groundPixel
	mirroredPixel = 16 // added where a mirror is looked into
)

// seen packs what each pixel shows in one standing: its kind, the page's number
// of the part and the opening looked through, 0 for none.
func (a *Archive) seen(b *build, s *study.Shots, k study.Stood) Blob {
	n := s.Eye.Width * s.Eye.Height
	kind, part, via := make([]uint8, n), make([]uint16, n), make([]uint8, n)
	opening := func(name string) int {
		return slices.IndexFunc(a.Design.Room.Openings, func(o Opening) bool { return o.Name == name })
	}
	for i, x := range k.Seen {
		px := s.SeenInside[i]
		switch x.Part {
		case coeff.SkySeen:
			kind[px] = skyPixel
		case coeff.GroundSeen:
			kind[px] = groundPixel
		default:
			kind[px], part[px] = surfacePixel, uint16(min(b.part(&a.Design.Room, k.Scene, x.Part), math.MaxUint16-1)+1)
		}
		if x.Via >= 0 {
			via[px] = math.MaxUint8 // no opening's, or one of too many
			if o := k.Scene.Parts[x.Via].Opening; o >= 0 {
				via[px] = uint8(min(opening(k.Scene.Openings[o].Name), math.MaxUint8-2) + 1)
			}
		}
		if x.Mirrored {
			kind[px] |= mirroredPixel
		}
	}
	var p packer
	pack(&p, "kind", "u8", kind)
	pack(&p, "part", "u16", part)
	pack(&p, "via", "u8", via)
	return a.add(&p)
}

// planeRank is the number of patterns of a work plane. Own choice.
const planeRank = 12

// The range of illuminance that plane pictures show, lx: from dusk to the sun.
// Own choice.
const (
	leastLx = 1
	mostLx  = 2e5
)

// planeShots makes the pictures of a plane's hours; none of a plane with more
// sensors than a film has points.
func (a *Archive) planeShots(r *study.Result, p *study.PlaneResult) Shots {
	n := len(p.E)
	if n > film.MostPoints {
		return Shots{}
	}
	moments := r.Climate.Moments
	roll := film.NewRoll(n, len(moments), leastLx, mostLx)
	all, sun := make([]float32, n), make([]float32, n)
	records := make([]int, len(moments))
	for k, m := range moments {
		records[k] = m.Step
		for i := range n {
			all[i], sun[i] = p.E[i][m.Step], p.Direct[i][m.Step]
		}
		roll.Keep(k, all, sun, study.SunFrom(m))
	}
	return a.shots(roll.Develop(planeRank, film.Fine), nil, nil, records, nil, perHour(r))
}
