package study

import (
	"math"

	"squint/glare/daylight"
	"squint/glare/verdict"
	"squint/scene/project"
)

// condition asks for values of a work plane from low to high in timeShare of
// the hours at placeShare of the sensors.
type condition struct {
	of                    series
	hours                 daylight.Hours // of the year, or of the moments of the series
	low, high             float64
	timeShare, placeShare float64
}

// series says of what values a condition speaks.
type series int

const (
	ofYear   series = iota // illuminance by record, lx
	ofClear                // illuminance by moment under a clear sky, lx
	ofFactor               // daylight factor, of the one hour 0
)

// asked are the criteria on the light of a work plane in a room that random
// samples can leave undecided, each as conditions that must all hold.
func (r *Result) asked(room string) [][]condition {
	c := &r.Project.Criteria
	var list [][]condition
	above := func(of series, hours daylight.Hours, low, timeShare, placeShare float64) condition {
		return condition{of, hours, low, math.Inf(1), timeShare, placeShare}
	}
	for _, l := range provisionLevels(r.Project) {
		if l.Name == c.Provision {
			list = append(list, []condition{
				above(ofYear, r.Daylight, l.TargetLx, l.TimeShare, l.TargetShare),
				above(ofYear, r.Daylight, l.MinimumLx, l.TimeShare, l.MinimumShare),
			})
		}
		if l.Name == c.ProvisionFactor {
			median := r.medianDiffuse()
			list = append(list, []condition{
				above(ofFactor, daylight.Hours{0}, daylight.FactorAsked(l.TargetLx, median), 1, l.TargetShare),
				above(ofFactor, daylight.Hours{0}, daylight.FactorAsked(l.MinimumLx, median), 1, l.MinimumShare),
			})
		}
	}
	if c.SDAAtLeast != nil {
		s := daylight.DefaultSpatial
		list = append(list, []condition{above(ofYear, r.Clock, s.ThresholdLx, s.TimeShare, *c.SDAAtLeast)})
	}
	if c.EquinoxAtLeast != nil {
		var all []condition
		for k := range r.ClearNames {
			all = append(all, condition{ofClear, daylight.Hours{k}, c.EquinoxLowLx, c.EquinoxHighLx, 1, *c.EquinoxAtLeast})
		}
		list = append(list, all)
	}
	for i := range r.Project.Limits {
		l := &r.Project.Limits[i]
		a := condition{low: math.Inf(-1), high: math.Inf(1), timeShare: l.TimeShare, placeShare: l.PlaceShare}
		if l.AtLeast != nil {
			a.low = *l.AtLeast
		}
		if l.AtMost != nil {
			a.high = *l.AtMost
		}
		switch l.Metric {
		case project.LimitIlluminance:
			a.hours, _ = r.hoursOf(l.Hours, r.UseOf(room).Hours)
		case project.LimitDaylightFactor:
			a.of, a.hours = ofFactor, daylight.Hours{0}
		default:
			continue // of views, or without noise
		}
		list = append(list, []condition{a})
	}
	return list
}

// openOf are the conditions of one criterion that keep it undecided on a plane;
// none where it is decided.
func openOf(all []condition, planes map[series]daylight.Plane) []condition {
	var open []condition
	var outcomes []verdict.Outcome
	for _, c := range all {
		if len(planes[c.of].E) == 0 {
			continue // not computed
		}
		o := verdict.AtLeast(planes[c.of].SensorsWithin(c.hours, c.low, c.high, c.timeShare), c.placeShare)
		outcomes = append(outcomes, o)
		if o == verdict.Undecided {
			open = append(open, c)
		}
	}
	if verdict.Both(outcomes...) != verdict.Undecided {
		return nil
	}
	return open
}

// openHours are the hours in which a sensor may lie on either side of a
// condition, where they leave its share of the hours open.
func (c *condition) openHours(p daylight.Plane, sensor int) []int {
	b := p.TimeWithin(sensor, c.hours, c.low, c.high)
	if b.Surely >= c.timeShare || b.Possibly < c.timeShare {
		return nil
	}
	var open []int
	for _, h := range c.hours {
		one := p.TimeWithin(sensor, daylight.Hours{h}, c.low, c.high)
		if one.Surely != one.Possibly {
			open = append(open, h)
		}
	}
	return open
}
