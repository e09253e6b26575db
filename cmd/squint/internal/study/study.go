package study

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"math"
	"time"

	"squint/glare/control"
	"squint/glare/daylight"
	"squint/glare/verdict"
	"squint/scene"
	"squint/scene/project"
	"squint/trace"
	"squint/trace/soundness"
)

// Options steer a run apart from the project.
type Options struct {
	Workers int // threads; results do not depend on it
	// Progress, if not nil, hears of each stage's work done.
	Progress func(stage Stage, done, total int)
	// Shots keeps small pictures of every view's hours, for display.
	Shots bool
	// Bare leaves out what no verdict needs: what systems take of the view out,
	// and sun that mirrors concentrate.
	Bare  bool
	shots *shotPlan

	// Store, if not nil, keeps what was computed for later runs, under names
	// that stand for everything it depends on. Program, the program itself
	// down to its last byte, is part of that.
	Store   Store
	Program string
	skies   string           // digest of all moments
	cells   map[string][]int // by room and step: the brightest frame of each cell is kept
	// anyWorst lets the worst hour's picture be missing where the rest is known.
	anyWorst bool
	// keep, if not nil, says of which hours of a view a picture may be kept.
	keep func(view, hour int) bool
}

// Stage names a part of the run.
type Stage string

// The stages, in order.
const (
	StageViews    Stage = "looking out of the viewpoints"
	StageSurfaces Stage = "linking the surfaces"
	StageSensors  Stage = "gathering at the sensors"
	StageYear     Stage = "the year"
	StageShots    Stage = "keeping pictures of any hour"
	StageAgain    Stage = "a closer look at close hours"
	StagePicture  Stage = "the pictures"
	StageHazard   Stage = "looking for sun that mirrors concentrate"
)

// Result is a finished study.
type Result struct {
	Project *project.Project
	Scene   *scene.Scene
	Climate *scene.Climate

	Calendar                  daylight.Calendar
	Occupied, Clock, Daylight daylight.Hours // Occupied: any room is in use
	// Uses are those of the rooms; none of a project without [[room]].
	Uses []Use

	Views    []ViewResult
	Planes   []PlaneResult
	Openings []OpeningResult

	// GlareAutonomy is the share of the viewpoints that keep
	// verdict.DefaultAutonomy.
	GlareAutonomy verdict.Bracket
	// ClearNames name the moments under a clear sky, if asked for.
	ClearNames []string

	// Reused says what was taken over instead of computed; "" for nothing.
	Reused string
	traced traced

	// Positions says how long what moves stands in each of its positions.
	Positions []string
	// Sights are what systems take of the view out.
	Sights []Sight
	// Operation is the year of each group of openings whose systems move; nil
	// where nothing does.
	Operation *control.Report
	// Standings are the labels of the combinations of positions, and Standing
	// the index among them by record; -1 without daylight. Stood are their scenes.
	Standings []string
	Stood     []*scene.Scene
	Standing  []int16

	// Hazard is nil where nothing but panes mirrors or shines.
	Hazard *Hazard

	// Outcome combines the asked criteria; Verdicts are those, first what
	// fails. Further are those of them that are neither levels of glare nor of
	// daylight provision, criterion by criterion.
	Outcome  verdict.Outcome
	Verdicts []verdict.Verdict
	Further  []verdict.Verdict

	// Warnings change how far a verdict may be trusted; Notes do not.
	Warnings, Notes []string

	Settings Settings
}

// Settings are the sizes of a run.
type Settings struct {
	Workers    int
	TexelSides int
	Coarsen    float64
	Confidence float64
	ZViews     float64 // standard errors by which a view's hours are bracketed
	ZSensors   float64
	Kernel     string
}

// confidence of the verdicts over all views together.
const confidence = 0.95

// Input is a project that was read, built and found sound: what is left can
// be computed.
type Input struct {
	Project *project.Project
	Scene   *scene.Scene
	Climate *scene.Climate
	World   *trace.World
	// Standings are the ways in which the movable systems stand; each has its
	// own moments, and where glare decides they change as the year is computed.
	// Scene and World are those of the project as it is written.
	Standings []Standing
	fsys      fs.FS
	always    bool       // eyes are open at every moment, in use or not
	operation *operation // nil where everything stands as the project says
	// Clear are moments under a clear sky, on work planes alone.
	Clear []*scene.Moment
	Notes []string

	Calendar                  daylight.Calendar
	Occupied, Clock, Daylight daylight.Hours // Occupied: any room is in use
	Uses                      []Use          // none of a project without [[room]]
}

// Prepare reads everything that a project names and checks it. Errors are the
// user's to mend, all of them joined.
func Prepare(fsys fs.FS, p *project.Project, workers int) (*Input, error) {
	s, err := scene.Build(fsys, p)
	if err != nil {
		return nil, err
	}
	in := &Input{Project: p, Scene: s, World: trace.Accelerate(s, workers), fsys: fsys}
	if err := in.leaveOut(); err != nil {
		return nil, err
	}
	p = in.Project
	// The year decides the weekday of 1 January, so it is read before the
	// hours are chosen; the moments are marked afterwards.
	c, err := scene.ReadClimate(fsys, p, nil)
	if err != nil {
		return nil, err
	}
	in.Climate = c
	in.Calendar = calendar(p, c)
	if in.Uses, err = uses(p, c, s); err != nil {
		return nil, err
	}
	in.Occupied = in.Calendar.Occupied()
	if len(in.Uses) > 0 {
		in.Occupied = anyOf(in.Uses)
	}
	if len(in.Occupied) == 0 {
		return nil, noUse(p)
	}
	in.Clock = in.Calendar.Clock(8, 18)
	in.Daylight = daylight.SunHighest(c.SinAltitude, daylight.DaylightHoursPerYear*c.PerHour())
	used := in.Occupied.Mask(in.Calendar.Steps())
	for _, m := range c.Moments {
		m.Occupied = used[m.Step]
	}
	if in.Clear, err = clearMoments(p, c, in.Calendar); err != nil {
		return nil, err
	}
	in.Notes = append(in.Notes, clockNotes(p, s)...)
	in.Standings = []Standing{{Scene: s, World: in.World, Moments: c.Moments}}
	if in.operation, err = newOperation(in, fsys, workers); err != nil {
		return nil, err
	}
	if in.operation != nil {
		if in.Standings, err = in.operation.standings(); err != nil {
			return nil, err
		}
	}
	errs, notes := soundness.Receivers(in.World)
	if len(errs) > 0 {
		return nil, errors.Join(errs...)
	}
	notes = append(notes, soundness.Openings(in.World)...)
	in.Notes = append(append(append(in.Notes, s.Notes...), c.Notes...), notes...)
	return in, nil
}

// calendar is that of the project's own hours of use.
func calendar(p *project.Project, c *scene.Climate) daylight.Calendar {
	return calendarOf(&p.Occupancy, c)
}

// calendarOf translates an occupancy.
func calendarOf(o *project.Occupancy, c *scene.Climate) daylight.Calendar {
	first := c.Year.Moment(0, -0.5)
	jan1 := time.Date(first.Year(), 1, 1, 0, 0, 0, 0, time.UTC)
	k := daylight.Calendar{
		PerHour:      c.PerHour(),
		FirstWeekday: (int(jan1.Weekday()) + 6) % 7,
		Days:         o.Days,
		FromH:        o.FromH,
		ToH:          o.ToH,
	}
	for _, h := range o.Holidays {
		k.Holidays = append(k.Holidays, daylight.MonthDay(h))
	}
	if f := o.DaylightSavingFrom; f != nil {
		d := daylight.MonthDay(*f)
		k.SavingFrom = &d
	}
	if f := o.DaylightSavingTo; f != nil {
		d := daylight.MonthDay(*f)
		k.SavingTo = &d
	}
	return k
}

// Run computes the study.
func Run(ctx context.Context, in *Input, opt Options) (*Result, error) {
	if opt.Workers < 1 {
		opt.Workers = 1
	}
	if opt.Progress == nil {
		opt.Progress = func(Stage, int, int) {}
	}
	r := &Result{
		Project: in.Project, Scene: in.Scene, Climate: in.Climate,
		Calendar: in.Calendar, Occupied: in.Occupied, Clock: in.Clock, Daylight: in.Daylight, Uses: in.Uses,
		Notes: in.Notes,
	}
	for i := range in.Clear {
		r.ClearNames = append(r.ClearNames, fmt.Sprintf("%d h", equinoxClockH[i]))
	}
	if opt.Shots {
		opt.shots = newShotPlan(in)
	}
	if opt.Store != nil {
		opt.skies, opt.cells = skies(in.Climate.Moments), cellsOf(in)
	}
	y, err := operatedYear(ctx, in, opt, r)
	if err != nil {
		return nil, err
	}
	if err := y.glare.develop(ctx, opt); err != nil {
		return nil, err
	}
	if in.operation != nil {
		report := in.operation.report(y)
		r.Operation = &report
		r.Positions = positions(r.Operation)
	}
	if opt.Store != nil {
		r.Reused = r.traced.words(in.Scene)
	}
	r.Standings, r.Standing = standingByStep(in.Standings, in.Calendar.Steps())
	for _, s := range in.Standings {
		r.Stood = append(r.Stood, s.Scene)
	}
	if err := r.refine(ctx, in, opt, y); err != nil {
		return nil, err
	}
	if err := r.lookCloser(ctx, in, opt, y); err != nil {
		return nil, err
	}
	if !opt.Bare {
		if r.Sights, err = sights(ctx, in.fsys, in, opt); err != nil {
			return nil, err
		}
		if r.Hazard, err = hazard(ctx, in, opt); err != nil {
			return nil, err
		}
	}
	if err := r.findSun(ctx, in, opt); err != nil {
		return nil, err
	}
	r.judgeViews(y)
	r.judgeAutonomy()
	sun, err := in.openSun(ctx, opt, y)
	if err != nil {
		return nil, err
	}
	r.judgePlanes(y, sun, in.exposureShading())
	if err := r.judgeViewsOut(ctx, in, opt); err != nil {
		return nil, err
	}
	if err := r.judgeOpenings(in); err != nil {
		return nil, err
	}
	r.judgeLimits()
	r.combine()
	return r, nil
}

// Forget lets go of the series and pictures of a study that was written; what
// sums them up stays, for comparing.
func (r *Result) Forget() {
	for i := range r.Views {
		v := &r.Views[i]
		v.DGP, v.StdErr, v.Ev, v.EvErr, v.Coarse, v.Bias = nil, nil, nil, nil, nil, nil
		v.InRange, v.Cause, v.Worst, v.Shots = nil, nil, nil, nil
	}
	r.Stood = nil
	for i := range r.Planes {
		p := &r.Planes[i]
		p.E, p.StdErr, p.Direct, p.Clear = nil, nil, nil, daylight.Plane{}
	}
	for i := range r.Openings {
		r.Openings[i].Sunlit = nil
	}
}

// combine orders the asked verdicts, failing ones first, and sums them up.
func (r *Result) combine() {
	var ordered []verdict.Verdict
	for _, o := range []verdict.Outcome{verdict.NotMet, verdict.Undecided, verdict.Met} {
		for _, v := range r.Verdicts {
			if v.Outcome == o {
				ordered = append(ordered, v)
			}
		}
	}
	r.Verdicts = ordered
	r.Outcome = verdict.Combine(ordered)
}

// nan32 marks an hour that was not evaluated.
func nan32() float32 { return float32(math.NaN()) }
