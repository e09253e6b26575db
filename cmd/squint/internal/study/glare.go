package study

import (
	"sync"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare"
	"squint/glare/verdict"
	"squint/scene"
	"squint/scene/project"
	"squint/scene/view"
	"squint/trace/annual"
	"squint/trace/coeff"
)

// ViewResult is one viewpoint's year. Series have one value per step; hours
// in use without daylight hold 0, hours in which its room is not in use NaN.
type ViewResult struct {
	Viewpoint scene.Viewpoint
	DGP       []float32
	StdErr    []float32 // of DGP, jackknife over the batches
	Ev        []float32 // lx
	EvErr     []float32 // of Ev, as StdErr
	// Coarse is DGP with pixels twice as wide, and Bias what that says of the
	// error that the pixels used leave, the same for all hours of one look.
	Coarse, Bias []float32
	InRange      []bool  // DGP within the range of its data
	Cause        []int16 // index into Causes, -1 where DGP is low
	Causes       []Cause

	// Refined is the number of further looks that hours near the limit got.
	Refined int

	Worst *Worst // nil where no hour in use has daylight
	Shots *Shots // nil where none were asked for

	// Levels holds the verdict of every EN 17037 level; Asked is the level
	// that the project asks for, -1 for none.
	Levels []verdict.Verdict
	Hours  []verdict.GlareHours
	Asked  int
	// When says in words when and why it glares at the asked level.
	When string
}

// Cause is what carries most of an hour's glare.
type Cause struct {
	Kind CauseKind
	Name string // of an opening or part; "" where it has none
	Via  string // opening looked through, "" for none
}

// CauseKind tells sun from sky from surfaces.
type CauseKind int

// The kinds of cause.
const (
	Brightness CauseKind = iota // no source stands out, the view as a whole is bright
	SunDisc
	MirroredSun
	SkySeen
	GroundSeen
	Sunlit  // sun on a surface
	Surface // a surface lit by sky or by other surfaces
)

// String is the cause in words, to follow "mostly".
func (c Cause) String() string {
	via := ""
	if c.Via != "" {
		via = " through " + c.Via
	}
	switch c.Kind {
	case SunDisc:
		return "the sun's disc" + via
	case MirroredSun:
		return "the sun mirrored in " + c.Name + via
	case SkySeen:
		return "the sky" + via
	case GroundSeen:
		return "the ground outside" + via
	case Sunlit:
		return "sun on " + c.Name + via
	case Surface:
		return c.Name + via
	}
	return "the brightness of the whole view"
}

// Worst is the hour of highest DGP with its picture.
type Worst struct {
	Moment   *scene.Moment
	DGP, Ev  float64
	StdErr   float64
	Result   glare.Result
	Lum      []float32 // pooled luminance, the sun's discs not in it
	Discs    []annual.Disc
	InsideOf *coeff.Eye
}

// causeFrom is the DGP from which an hour's cause is looked for: the strictest
// level's limit. Source: EN 17037:2018 annex E.
const causeFrom = 0.35

// glareSink turns frames into series as they come.
type glareSink struct {
	in    *Input
	once  sync.Once
	field *glare.Field
	wide  *glare.Field // of half as many pixels across; nil where the number is odd
	opt   glare.Options
	views []ViewResult
	mu    []sync.Mutex // by view
	cause []map[Cause]int16
	work  []sinkScratch    // by worker
	shots *shotPlan        // nil: no pictures are kept
	cells map[string][]int // by room and step; nil: one for all
	used  [][]bool         // by view and step; nil: eyes are open at every moment
	keep  func(view, hour int) bool
	near  float64          // the DGP next to which errors are found with all care
	tops  []map[int]*Worst // by view and cell
}

// standingSink serves the frames of one standing, which has eyes and parts of
// its own.
type standingSink struct {
	*glareSink
	scene *scene.Scene
	eyes  []*coeff.Eye
	seen  []*coeff.Eye // without samples, which worst hours would hold on to
}

func (g *glareSink) sink(s *scene.Scene, eyes []*coeff.Eye) annual.Sink {
	if len(eyes) > 0 {
		g.look(eyes[0].View)
	}
	seen := make([]*coeff.Eye, len(eyes))
	for i, e := range eyes {
		seen[i] = &coeff.Eye{View: e.View, Seen: e.Seen, Inside: e.Inside}
	}
	return (&standingSink{g, s, eyes, seen}).take
}

// look prepares for views of that size, which all of a study have.
func (g *glareSink) look(v view.View) {
	g.once.Do(func() {
		g.field = glare.NewField(v)
		if half, err := view.New(v.Position, v.Direction, v.Up, v.Projection, v.FOVRad, v.Width/2, v.Height/2); err == nil && v.Width%2 == 0 && v.Height%2 == 0 {
			g.wide = glare.NewField(half)
		}
	})
}

type sinkScratch struct {
	scratch glare.Scratch
	wide    []float32 // image of half as many pixels across
	coarse  glare.Scratch
	discs   []glare.Disc
	shot    shotScratch
}

func newGlareSink(in *Input, workers int) *glareSink {
	n := len(in.Scene.Viewpoints)
	g := &glareSink{in: in, views: make([]ViewResult, n), mu: make([]sync.Mutex, n),
		cause: make([]map[Cause]int16, n), work: make([]sinkScratch, workers), tops: make([]map[int]*Worst, n)}
	g.opt, g.near = sourceOptions(in.Project.Criteria), lowestLimit(in.Project)
	for i := range g.views {
		v := &g.views[i]
		v.Viewpoint = in.Scene.Viewpoints[i]
		n := len(in.Climate.SinAltitude)
		v.DGP, v.StdErr, v.Ev, v.EvErr = make([]float32, n), make([]float32, n), make([]float32, n), make([]float32, n)
		v.Coarse, v.Bias = make([]float32, n), make([]float32, n)
		v.InRange, v.Cause = make([]bool, n), make([]int16, n)
		for h := range v.DGP {
			v.DGP[h], v.StdErr[h], v.Ev[h], v.EvErr[h], v.Coarse[h], v.Cause[h] = nan32(), nan32(), nan32(), nan32(), nan32(), -1
		}
		use := in.UseOf(v.Viewpoint.Room)
		if !in.always {
			g.used = append(g.used, use.mask)
		}
		for _, h := range use.Hours {
			v.DGP[h], v.StdErr[h], v.Ev[h], v.EvErr[h] = 0, 0, 0, 0
		}
		g.cause[i], g.tops[i] = map[Cause]int16{}, map[int]*Worst{}
	}
	return g
}

// lowestLimit is the lowest DGP at which something is judged: the strictest
// level's, or that of a limit of the project's own.
func lowestLimit(p *project.Project) float64 {
	low := causeFrom
	for _, l := range p.Limits {
		for _, bound := range []*float64{l.AtLeast, l.AtMost} {
			if l.Metric == project.LimitDGP && bound != nil {
				low = min(low, *bound)
			}
		}
	}
	return low
}

// sourceOptions translates the project's rule for sources of glare.
func sourceOptions(c project.Criteria) glare.Options {
	o := glare.Options{ThresholdCdM2: c.SourceLuminance, Multiple: c.SourceMultiple}
	switch c.SourceRule {
	case "field mean":
		o.Method = glare.MultipleOfMean
	case "sight mean":
		o.Method = glare.MultipleOfTask
	}
	return o
}

// take evaluates one frame: DGP of the pooled image, its standard error over
// batches, and above causeFrom what carries it.
func (g *standingSink) take(worker int, f *annual.Frame) {
	w := &g.work[worker]
	e := g.eyes[f.Eye]
	v := &g.views[f.Eye]
	h := f.Moment.Step
	if !f.Moment.Occupied || g.used != nil && !g.used[f.Eye][h] { // or another room is in use
		g.keepShot(w, e, f)
		return
	}
	w.discs = toView(w.discs[:0], e.View, f.Discs)
	dgp, ev, se, evErr := glare.Pooled(g.field, f.Mean, f.Batch, w.discs, g.opt, g.near, &w.scratch)
	v.DGP[h], v.Ev[h], v.StdErr[h], v.EvErr[h] = float32(dgp), float32(ev), float32(se), float32(evErr)
	v.InRange[h] = glare.InRange(dgp, ev)
	v.Coarse[h] = float32(g.atHalf(w, e, f.Mean))
	g.keepShot(w, e, f)
	g.mu[f.Eye].Lock()
	defer g.mu[f.Eye].Unlock()
	cell := 0
	if g.cells != nil {
		cell = g.cells[v.Viewpoint.Room][h]
	}
	top := (g.keep == nil || g.keep(f.Eye, h)) && brighter(dgp, h, g.tops[f.Eye][cell])
	if dgp < causeFrom && !top {
		return
	}
	// What is kept of each cell is evaluated in full where it is read again.
	var full glare.Result
	if dgp >= causeFrom || g.cells == nil {
		full = glare.Evaluate(g.field, f.Mean, w.discs, g.opt, &w.scratch)
	}
	if dgp >= causeFrom {
		c := g.causeOf(e, f, &full)
		v.Cause[h] = g.causeID(f.Eye, c)
	}
	if top {
		w := &Worst{Moment: f.Moment, DGP: dgp, Ev: ev, StdErr: se,
			Lum: append([]float32(nil), f.Mean...), Discs: append([]annual.Disc(nil), f.Discs...), InsideOf: g.seen[f.Eye]}
		if g.cells == nil {
			w.Result = full
		}
		g.tops[f.Eye][cell] = w
		if brighter(dgp, h, v.Worst) {
			v.Worst = w
		}
	}
}

// brighter is whether an hour takes the place of what was the worst.
func brighter(dgp float64, hour int, w *Worst) bool {
	return w == nil || dgp > w.DGP || dgp == w.DGP && hour < w.Moment.Step
}

// causeID is the index of a cause among those of a view.
func (g *glareSink) causeID(view int, c Cause) int16 {
	id, ok := g.cause[view][c]
	if !ok {
		id = int16(len(g.cause[view]))
		g.cause[view][c] = id
		g.views[view].Causes = append(g.views[view].Causes, c)
	}
	return id
}

// toView appends discs as a view has them.
func toView(out []glare.Disc, v view.View, discs []annual.Disc) []glare.Disc {
	for _, d := range discs {
		out = append(out, glare.Disc{Dir: v.Local(d.Dir), OmegaSr: d.OmegaSr, Luminance: d.Luminance})
	}
	return out
}

// causeOf names what carries most of the glare.
func (g *standingSink) causeOf(e *coeff.Eye, f *annual.Frame, r *glare.Result) Cause {
	if len(r.Sources) == 0 {
		return Cause{Kind: Brightness}
	}
	// Without its sources the view may be over the limit all the same.
	if glare.DGP(r.EIndirect, 0) >= causeFrom {
		return Cause{Kind: Brightness}
	}
	top := &r.Sources[0]
	if top.Disc {
		return g.causeOfDisc(e, f, top)
	}
	// Within the source, the share of each thing seen, weighted by what it
	// sends to the eye. Both lists of pixels ascend.
	p := 0
	weight := map[Cause]float64{}
	var order []Cause
	for _, px := range top.Pixels {
		for e.Inside[p] < px {
			p++
		}
		c := g.causeOfPixel(e.Seen[p], f.Sunlit[px] > 0.5*f.Mean[px])
		if _, ok := weight[c]; !ok {
			order = append(order, c)
		}
		weight[c] += float64(f.Mean[px]) * g.field.Omega[px]
	}
	best := order[0]
	for _, c := range order {
		if weight[c] > weight[best] {
			best = c
		}
	}
	return best
}

func (g *standingSink) causeOfPixel(s coeff.Seen, sunlit bool) Cause {
	c := Cause{Via: g.openingOf(s.Via)}
	switch s.Part {
	case coeff.SkySeen:
		c.Kind = SkySeen
		return c
	case coeff.GroundSeen:
		c.Kind = GroundSeen
		return c
	}
	part := g.scene.Parts[s.Part]
	if part.Kind == scene.GroundPlane {
		c.Kind = GroundSeen
		return c
	}
	c.Kind, c.Name = Surface, part.Name
	if sunlit {
		c.Kind = Sunlit
	}
	return c
}

// openingOf names the opening that a part belongs to.
func (g *standingSink) openingOf(part int32) string {
	if part < 0 {
		return ""
	}
	p := g.scene.Parts[part]
	if p.Opening >= 0 {
		return g.scene.Openings[p.Opening].Name
	}
	return p.Name
}

// causeOfDisc names the disc that a source is: the sun itself or the mirror
// that shows it.
func (g *standingSink) causeOfDisc(e *coeff.Eye, f *annual.Frame, source *glare.Source) Cause {
	best, nearest := 0, -2.0
	for i, d := range f.Discs {
		if c := r3.Dot(e.View.Local(d.Dir), source.Dir); c > nearest {
			best, nearest = i, c
		}
	}
	d := f.Discs[best]
	c := Cause{Kind: SunDisc, Via: g.openingOf(d.Via)}
	if d.Mirror >= 0 {
		c.Kind, c.Name = MirroredSun, g.scene.Parts[d.Mirror].Name
	}
	return c
}

// judgeViews brackets each view's hours over the limits.
func (r *Result) judgeViews(y *year) {
	r.Views = y.glare.views
	z := r.zViews()
	r.Settings.ZViews = z
	for i := range r.Views {
		v := &r.Views[i]
		v.sortCauses()
		v.Asked = -1
		for k, l := range verdict.ProtectionLevels {
			hours := r.glareHours(v, l.DGP, z)
			when := v.when(r, l.DGP)
			told := when
			if verdict.AtMost(hours.Share, l.TimeShare) == verdict.Undecided {
				told = v.whenOpen(r, l.DGP, z)
			}
			out := verdict.Glare(r.subject(&v.Viewpoint), l, hours, told)
			v.Hours = append(v.Hours, hours)
			v.Levels = append(v.Levels, out)
			if l.Name == r.Project.Criteria.Glare {
				v.Asked, v.When = k, when
				r.Verdicts = append(r.Verdicts, out)
			}
		}
	}
}

// subject names a viewpoint and its direction, which is in the name already
// where it is one of a grid.
func (r *Result) subject(v *scene.Viewpoint) string {
	if v.Grid != "" {
		return v.Name
	}
	return v.Name + ", looking " + r.bearing(v.Direction)
}

// bearing is the compass direction of a line of sight in words.
func (r *Result) bearing(d r3.Vec) string {
	k := int(scene.AzimuthDeg(d, r.Project.Site.NorthDeg+22.5) / 45)
	return project.Winds[k]
}
