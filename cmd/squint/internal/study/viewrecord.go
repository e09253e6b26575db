package study

import (
	"cmp"
	"slices"

	"squint/cmd/squint/internal/film"
	"squint/glare"
	"squint/scene"
	"squint/scene/view"
	"squint/trace/annual"
	"squint/trace/coeff"
)

// viewRecord is what is known of one viewpoint in one scene.
type viewRecord struct {
	Key     string
	Sides   int // texel sides of the surfaces, and how coarsely they were cut
	Coarsen float64

	View   view.View
	Seen   []coeff.Seen
	Inside []int32

	Hours  []viewHour // by rising record
	Causes []Cause
	Pixels int // across the small pictures; 0: none are kept
	Tops   []topFrame
}

// viewHour is one record of the year.
type viewHour struct {
	Hour                           int
	Judged                         bool // else the picture alone is known
	DGP, StdErr, Ev, EvErr, Coarse float32
	InRange                        bool
	Cause                          int16 // of Causes, -1 for none
	Shot                           film.Frame
	Discs                          []annual.Disc // of Shot
}

// topFrame is the picture of an hour that was the worst of some.
type topFrame struct {
	Hour            int
	DGP, Ev, StdErr float64
	Lum             []float32 // cd/m2, by pixel of Inside
	Discs           []annual.Disc
}

// mostTops bounds the pictures kept of a view: those of all cells of a few
// occupancies. Own choice.
const mostTops = 600

func (v *viewRecord) at(hour int) *viewHour {
	i, ok := slices.BinarySearchFunc(v.Hours, hour, func(x viewHour, h int) int { return cmp.Compare(x.Hour, h) })
	if !ok {
		return nil
	}
	return &v.Hours[i]
}

// known is whether an hour needs no computing: for one in use its numbers, and
// its small picture where those have so many pixels (0: none are asked for).
func (v *viewRecord) known(hour, pixels int, used bool) bool {
	x := v.at(hour)
	return x != nil && (x.Judged || !used) && (pixels == 0 || v.Pixels == pixels && x.Shot.Rest != nil)
}

// top is the worst of some hours, nil where its picture is not kept.
func (v *viewRecord) top(hours []int) *topFrame {
	most := float32(-1)
	for _, h := range hours {
		if x := v.at(h); x != nil {
			most = max(most, x.DGP)
		}
	}
	var best *topFrame
	for i := range v.Tops {
		t := &v.Tops[i]
		if x := v.at(t.Hour); x == nil || x.DGP != most || !slices.Contains(hours, t.Hour) {
			continue
		}
		if best == nil || t.DGP > best.DGP || t.DGP == best.DGP && t.Hour < best.Hour {
			best = t
		}
	}
	return best
}

// learn adds what was computed of view j; what was known stays.
func (v *viewRecord) learn(y *year, j int, moments []*scene.Moment, shots *shotPlan, how *Settings) {
	v.Sides, v.Coarsen = max(v.Sides, how.TexelSides), max(v.Coarsen, how.Coarsen)
	from := &y.glare.views[j]
	ids := map[Cause]int16{}
	for i, c := range v.Causes {
		ids[c] = int16(i)
	}
	var kept *Shots
	if shots != nil {
		kept = shots.kept[j]
		if kept != nil { // no hour in use may be among the moments
			v.View, v.Seen, v.Inside = kept.Eye, kept.Stood[0].Seen, kept.SeenInside
		}
		if v.Pixels != shots.pixels {
			for i := range v.Hours {
				v.Hours[i].Shot, v.Hours[i].Discs = film.Frame{}, nil
			}
			v.Pixels = shots.pixels
		}
	}
	var news []viewHour
	for _, m := range moments {
		h := m.Step
		if !m.Occupied && (kept == nil || shots.frame[h] < 0) { // for work planes alone
			continue
		}
		x := v.at(h)
		if x == nil {
			news = append(news, viewHour{Hour: h})
			x = &news[len(news)-1]
		}
		if m.Occupied && !x.Judged {
			x.Judged, x.DGP, x.StdErr, x.Ev, x.EvErr = true, from.DGP[h], from.StdErr[h], from.Ev[h], from.EvErr[h]
			x.Coarse, x.InRange, x.Cause = from.Coarse[h], from.InRange[h], -1
			if c := from.Cause[h]; c >= 0 {
				id, ok := ids[from.Causes[c]]
				if !ok {
					id = int16(len(v.Causes))
					ids[from.Causes[c]] = id
					v.Causes = append(v.Causes, from.Causes[c])
				}
				x.Cause = id
			}
		}
		if kept != nil {
			frame := shots.frame[h]
			x.Shot, x.Discs = kept.roll.Frame(frame), kept.Discs[frame]
		}
	}
	v.Hours = append(v.Hours, news...)
	slices.SortFunc(v.Hours, func(a, b viewHour) int { return a.Hour - b.Hour })
	v.learnTops(y.glare.tops[j])
}

// learnTops adds pictures, new ones first, and drops what is too many.
func (v *viewRecord) learnTops(tops map[int]*Worst) {
	var list []topFrame
	for _, w := range tops {
		e := w.InsideOf
		v.View, v.Seen, v.Inside = e.View, e.Seen, e.Inside
		t := topFrame{Hour: w.Moment.Step, DGP: w.DGP, Ev: w.Ev, StdErr: w.StdErr, Discs: w.Discs}
		for _, px := range e.Inside {
			t.Lum = append(t.Lum, w.Lum[px])
		}
		list = append(list, t)
	}
	slices.SortFunc(list, func(a, b topFrame) int { return a.Hour - b.Hour })
	for _, t := range v.Tops {
		if !slices.ContainsFunc(list, func(n topFrame) bool { return n.Hour == t.Hour }) {
			list = append(list, t)
		}
	}
	v.Tops = list[:min(len(list), mostTops)]
}

// readView takes the hours in use of a view into the year.
func (y *year) readView(s *shelf, i int, r *Result) {
	x, v, g := s.views[i], &y.glare.views[i], y.glare
	r.tell(s.in, x.Sides, x.Coarsen)
	use := s.in.UseOf(v.Viewpoint.Room)
	var eye *coeff.Eye
	for _, m := range s.st.Moments {
		h := m.Step
		a := x.at(h)
		if a == nil {
			continue
		}
		if eye == nil {
			eye = &coeff.Eye{View: x.View, Seen: x.Seen, Inside: x.Inside}
		}
		y.readShot(s, i, eye, a)
		if use.mask[h] && a.Judged {
			v.DGP[h], v.StdErr[h], v.Ev[h], v.EvErr[h], v.InRange[h], v.Coarse[h] = a.DGP, a.StdErr, a.Ev, a.EvErr, a.InRange, a.Coarse
			if a.Cause >= 0 {
				v.Cause[h] = g.causeID(i, x.Causes[a.Cause])
			}
		}
	}
	t := x.top(s.pictured(i))
	if t == nil || v.Worst != nil && !brighter(float64(v.DGP[t.Hour]), t.Hour, v.Worst) {
		return
	}
	w := &Worst{DGP: t.DGP, Ev: t.Ev, StdErr: t.StdErr, Discs: t.Discs, InsideOf: eye, Lum: make([]float32, x.View.Width*x.View.Height)}
	for k, px := range x.Inside {
		w.Lum[px] = t.Lum[k]
	}
	for _, m := range s.st.Moments {
		if m.Step == t.Hour {
			w.Moment = m
		}
	}
	if float32(t.DGP) != v.DGP[t.Hour] { // the picture was made again, alone
		w.DGP, w.Ev, w.StdErr = float64(v.DGP[t.Hour]), float64(v.Ev[t.Hour]), float64(v.StdErr[t.Hour])
	}
	g.look(x.View)
	w.Result = glare.Evaluate(g.field, w.Lum, toView(nil, eye.View, w.Discs), g.opt, &glare.Scratch{})
	v.Worst = w
}

// readShot takes the small picture of an hour into the year, where it is asked for.
func (y *year) readShot(s *shelf, i int, eye *coeff.Eye, a *viewHour) {
	plan := y.glare.shots
	if plan == nil || plan.frame[a.Hour] < 0 {
		return
	}
	frame := plan.frame[a.Hour]
	plan.of[frame] = s.st.Scene
	if shots := plan.opened(i, eye, s.st.Scene); shots.roll.Put(frame, a.Shot) {
		shots.Discs[frame] = a.Discs
	}
}
