package study

import (
	"squint/glare/control"
	"squint/glare/daylight"
	"squint/scene/project"
)

// shading is how what moves of a project stands over its year.
func shading(p *project.Project) daylight.Shading {
	var byRule, other, closed bool
	for _, u := range control.Units(p) {
		switch l := u.Law.(type) {
		case control.Always:
			closed = closed || l.State > 0
			other = other || u.Glare != nil
		case control.WorkPlaneSun:
			own := l.Rule == daylight.DefaultBlindRule && u.Glare == nil && l.Open == 0 && l.Closed == len(u.States)-1
			byRule, other = byRule || own, other || !own
		default:
			other = true
		}
	}
	switch {
	case other || byRule && closed:
		return daylight.AsOperated
	case byRule:
		return daylight.ByBlindRule
	case closed:
		return daylight.AsStanding
	}
	return daylight.Unshaded
}
