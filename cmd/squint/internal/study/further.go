package study

import (
	"context"
	"fmt"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/glare/daylight"
	"squint/glare/verdict"
	"squint/scene"
	"squint/scene/project"
	"squint/trace/annual"
	"squint/trace/outlook"
)

// further adds a verdict that is asked for beside the levels of glare and of
// daylight provision.
func (r *Result) further(v verdict.Verdict) {
	r.Further = append(r.Further, v)
	r.Verdicts = append(r.Verdicts, v)
}

// judgeFurther holds a work plane against the criteria asked for. z is that of
// the sensors.
func (r *Result) judgeFurther(p *PlaneResult, z float64) {
	c := &r.Project.Criteria
	if c.SDAAtLeast != nil {
		r.further(verdict.Spatial(p.Plane.Name, p.SDA, daylight.DefaultSpatial, *c.SDAAtLeast))
	}
	if c.ASEAtMost != nil {
		r.further(verdict.SunExposure(p.Plane.Name, p.ASE, daylight.DefaultExposure, *c.ASEAtMost))
	}
	for _, l := range provisionLevels(r.Project) {
		if l.Name == c.ProvisionFactor {
			f := daylight.ProvideByFactor(p.Factor, p.FactorError, z, r.medianDiffuse(), l)
			p.ByFactor = &f
			r.further(verdict.ProvisionByFactor(p.Plane.Name, f))
		}
	}
	if c.EquinoxAtLeast != nil && len(p.Clear.E) > 0 {
		p.ClearShares = nil
		for k := range r.ClearNames {
			p.ClearShares = append(p.ClearShares, p.Clear.SensorsWithin(daylight.Hours{k}, c.EquinoxLowLx, c.EquinoxHighLx, 1))
		}
		r.further(verdict.ClearSky(p.Plane.Name, r.ClearNames, p.ClearShares, c.EquinoxLowLx, c.EquinoxHighLx, *c.EquinoxAtLeast))
	}
}

// Of the planes of IES LM-83-12, with 1 % for the rounding of feet: 30 in above
// the floor, points 2 ft apart. From memory.
const (
	clockPlaneM   = 0.762
	clockSpacingM = 0.61 * 1.01
)

// clockNotes says where sDA and ASE are asked of planes that the standard lays
// otherwise.
func clockNotes(p *project.Project, s *scene.Scene) []string {
	if p.Criteria.SDAAtLeast == nil && p.Criteria.ASEAtMost == nil {
		return nil
	}
	var notes []string
	for _, w := range s.WorkPlanes {
		if w.SpacingM > clockSpacingM || math.Abs(w.HeightM-clockPlaneM) > 0.05 {
			notes = append(notes, fmt.Sprintf("work plane %q: sensors %.2g m apart at z = %.3g m; IES LM-83 asks for 0.6 m at most and 0.76 m above the floor.", w.Name, w.SpacingM, w.HeightM))
		}
	}
	return notes
}

// provisionLevels are those for the openings that the project names.
func provisionLevels(p *project.Project) []daylight.ProvisionLevel {
	if p.Criteria.ProvisionOpenings == "horizontal" {
		return daylight.RoofProvisionLevels
	}
	return daylight.ProvisionLevels
}

// medianDiffuse is the project's own or that of the weather file, lx.
func (r *Result) medianDiffuse() float64 {
	if m := r.Project.Criteria.MedianDiffuseLx; m != nil {
		return *m
	}
	return daylight.MedianDiffuse(r.Climate.DiffuseLx, r.Daylight)
}

// ViewOutResult is what the points of a work plane see of outdoors.
type ViewOutResult struct {
	Level    verdict.ViewLevel
	AngleDeg []float64 // horizontal sight angle beyond the level's distance, by sensor
	Layers   []int
	Share    verdict.Bracket // of the points that have the view
}

// judgeViewsOut looks out from above every sensor.
func (r *Result) judgeViewsOut(ctx context.Context, in *Input, opt Options) error {
	l, ok := verdict.ViewByName(r.Project.Criteria.ViewOut)
	if !ok {
		return nil
	}
	opt.Progress = func(Stage, int, int) {}
	for i := range r.Planes {
		p := &r.Planes[i]
		n := len(p.Plane.Sensors)
		v := &ViewOutResult{Level: l, AngleDeg: make([]float64, n), Layers: make([]int, n)}
		outcomes := make([]verdict.Outcome, n)
		err := each(ctx, opt, StageSensors, n, func(s int) error {
			eye := r3.Add(p.Plane.Sensors[s].Position, r3.Vec{Z: r.Project.Criteria.ViewAbovePlaneM})
			out := outlook.Look(in.World, eye)
			angle, bound := out.AngleRad(l.DistanceM)
			layers, landscape := out.Layers()
			v.AngleDeg[s], v.Layers[s] = angle*180/math.Pi, layers
			outcomes[s] = l.Holds(v.AngleDeg[s], bound*180/math.Pi, layers, landscape)
			return nil
		})
		if err != nil {
			return err
		}
		var met, open float64
		for _, o := range outcomes {
			switch o {
			case verdict.Met:
				met++
			case verdict.Undecided:
				open++
			}
		}
		all := float64(n)
		v.Share = verdict.Bracket{Surely: met / all, Estimate: met / all, Possibly: (met + open) / all}
		p.ViewOut = v
		r.further(verdict.ViewOut(p.Plane.Name, l, v.Share))
	}
	return nil
}

// judgeAutonomy counts the viewpoints of spatial glare autonomy.
func (r *Result) judgeAutonomy() {
	a := verdict.DefaultAutonomy
	var hours []verdict.GlareHours
	for i := range r.Views {
		hours = append(hours, r.glareHours(&r.Views[i], a.DGP, r.Settings.ZViews))
	}
	r.GlareAutonomy = a.SpatialAutonomy(hours)
	if limit := r.Project.Criteria.GlareAutonomyAtLeast; limit != nil {
		r.further(verdict.GlareAutonomy(r.allViews(), a, r.GlareAutonomy, *limit))
	}
}

func (r *Result) allViews() string { return count(len(r.Views), "viewpoint") }

// judgeLimits holds the series against the project's own limits.
func (r *Result) judgeLimits() {
	for i := range r.Project.Limits {
		l := &r.Project.Limits[i]
		v := verdict.Limit{Name: l.Name, Metric: l.Metric, Low: math.Inf(-1), High: math.Inf(1), TimeShare: l.TimeShare, PlaceShare: l.PlaceShare}
		if l.AtLeast != nil {
			v.Low = *l.AtLeast
		}
		if l.AtMost != nil {
			v.High = *l.AtMost
		}
		hours, words := r.hoursOf(l.Hours, r.Occupied)
		v.Hours = words
		switch l.Metric {
		case project.LimitDGP, project.LimitEye:
			v.Places = "viewpoints"
			s := daylight.Plane{Z: r.Settings.ZViews}
			var each []daylight.Hours
			for k := range r.Views {
				w := &r.Views[k]
				e, se := w.DGP, w.StdErr
				if l.Metric == project.LimitEye {
					e, se, v.Unit = w.Ev, w.EvErr, " lx"
				}
				if l.Metric == project.LimitDGP { // the pixels' error too, as for the levels
					se = w.widened(s.Z)
				}
				s.E, s.SE = append(s.E, e), append(s.SE, se)
				hours, _ := r.hoursOf(l.Hours, r.UseOf(w.Viewpoint.Room).Hours)
				each = append(each, hours)
			}
			r.further(v.JudgeEach(r.allViews(), s, each))
		case project.LimitSunlit:
			v.Places = "openings"
			r.further(v.Judge(count(len(r.Openings), "opening"), r.sunlitSeries(), hours))
		default:
			v.Places = "sensors"
			for k := range r.Planes {
				p := &r.Planes[k]
				s := daylight.Plane{E: p.E, SE: p.StdErr, Z: r.Settings.ZSensors}
				hours, _ := r.hoursOf(l.Hours, r.UseOf(p.Plane.Room).Hours)
				switch l.Metric {
				case project.LimitIlluminance:
					v.Unit = " lx"
				case project.LimitSun:
					v.Unit, s.E, s.SE = " lx", p.Direct, nil
				case project.LimitDaylightFactor:
					s = daylight.FactorPlane(p.Factor, p.FactorError, r.Settings.ZSensors)
					hours, v.Hours = daylight.Hours{0}, ""
				}
				r.further(v.Judge(p.Plane.Name, s, hours))
			}
		}
	}
}

// sunlitSeries are the sunlit shares with how well they are known; 0 where the
// sun is down or behind.
func (r *Result) sunlitSeries() daylight.Plane {
	s := daylight.Plane{Z: 1}
	for k := range r.Openings {
		e := make([]float32, len(r.Openings[k].Sunlit))
		bound := make([]float32, len(e))
		for h, x := range r.Openings[k].Sunlit {
			if x == x {
				e[h], bound[h] = x, 1.0/sunlitPoints
			}
		}
		s.E, s.SE = append(s.E, e), append(s.SE, bound)
	}
	return s
}

// hoursOf are the hours that a limit names, and what they are called; used are
// those in use.
func (r *Result) hoursOf(name string, used daylight.Hours) (daylight.Hours, string) {
	switch name {
	case project.HoursClock:
		return r.Clock, "the hours from 8 to 18"
	case project.HoursDaylight:
		return r.Daylight, "the daylight hours"
	case project.HoursAll:
		all := make(daylight.Hours, r.Calendar.Steps())
		for h := range all {
			all[h] = h
		}
		return all, "all hours of the year"
	}
	return used, "the hours in use"
}

// equinox is the day of the check under a clear sky, and its hours of the clock:
// as in rating schemes, from memory.
var (
	equinox       = project.MonthDay{Month: 3, Day: 21}
	equinoxClockH = [2]int{9, 15}
)

// clearMoments are the moments of the check under a clear sky.
func clearMoments(p *project.Project, c *scene.Climate, k daylight.Calendar) ([]*scene.Moment, error) {
	if p.Criteria.EquinoxAtLeast == nil {
		return nil, nil
	}
	day, _ := daylight.MonthDay(equinox).YearDay()
	var out []*scene.Moment
	for _, h := range equinoxClockH {
		m, err := c.ClearMoment(p, equinox, float64(h)-k.ClockShiftH(day))
		if err != nil {
			return nil, err
		}
		if m == nil {
			return nil, fmt.Errorf("%s: criteria.equinox_at_least: the sun is down at %d h on 21 March; check the site's longitude and utc_offset_h", p.File, h)
		}
		out = append(out, m)
	}
	return out, nil
}

// runClear computes the moments under a clear sky that standing k has: the one
// in which what moves stands at that hour of the year, else the first.
func (y *year) runClear(ctx context.Context, in *Input, e *engine, k int) error {
	if len(e.rec.Sensors) == 0 {
		return nil
	}
	for i, m := range in.Clear {
		if in.standingAt(m.Step) != k {
			continue
		}
		d, err := annual.Run(ctx, e.t, e.rec, []*scene.Moment{m}, e.cfg, nil, nil)
		if err != nil {
			return err
		}
		if y.clear == nil {
			y.clear = annual.NewDaylight(len(e.rec.Sensors), len(in.Clear))
		}
		for s := range d.E {
			y.clear.E[s][i], y.clear.StdErr[s][i] = d.E[s][0], d.StdErr[s][0]
		}
	}
	return nil
}

// standingAt is the standing that holds a step, the first where none does.
func (in *Input) standingAt(step int) int {
	for k := range in.Standings {
		for _, m := range in.Standings[k].Moments {
			if m.Step == step {
				return k
			}
		}
	}
	return 0
}
