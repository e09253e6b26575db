package control

import (
	"slices"

	"squint/glare/daylight"
	"squint/scene/project"
)

// Units are the systems of a project that move, each with the law of its
// control. A system without one follows the sun where it has a law of its own,
// and is not raised; else it stands as the project says.
func Units(p *project.Project) []Unit {
	groups := map[string]string{}
	for _, o := range p.Openings {
		groups[o.Name] = o.Group
	}
	var list []Unit
	for _, m := range project.Movables(p) {
		u := Unit{Name: m.Name, Opening: m.Opening, Group: groups[m.Opening], States: m.OpenToClosed()}
		i := slices.IndexFunc(p.Controls, func(c project.Control) bool { return c.Operates(m) })
		switch {
		case i >= 0:
			operate(&u, &p.Controls[i], m, p.Viewpoints)
		case m.Follow != nil && m.Standing != project.RaisedState:
			u.Law = Follow{}
		default:
			u.Law = Always{u.at(m.Standing, 0)}
		}
		list = append(list, u)
	}
	return list
}

// at is the index of a state; otherwise for "", which project.Load has made sure
// is the only one that the unit does not have.
func (u *Unit) at(state string, otherwise int) int {
	if k, ok := u.index(state); ok {
		return k
	}
	return otherwise
}

func operate(u *Unit, c *project.Control, m project.Movable, views []project.Viewpoint) {
	u.States = c.StatesOf(m)
	open, closed := u.at(c.Open, 0), u.at(c.Closed, len(u.States)-1)
	switch c.Rule {
	case project.RuleTimetable:
		u.Law = timetable(u, c, open)
	case project.RuleFacadeSun:
		l := FacadeSun{CloseWm2: c.FacadeWm2, ReopenWm2: c.FacadeWm2, DelayH: c.ReopenDelayMin / 60, Open: open, Closed: closed}
		if c.ReopenWm2 != nil {
			l.ReopenWm2 = *c.ReopenWm2
		}
		u.Law = l
	case project.RuleWorkPlaneSun:
		u.Law = WorkPlaneSun{Rule: daylight.BlindRule{ThresholdLx: c.DirectLx, SensorShare: c.SensorShare}, Open: open, Closed: closed}
	case project.RuleFollow:
		u.Law = Follow{}
	case project.RuleManual:
		u.Room = c.Room
		u.Law = Active{CloseWm2: c.DeskWm2, Open: open, Closed: closed}
		if c.User == project.PassiveUser {
			u.Law = Always{closed}
		}
	case project.RuleGlare:
		u.Law = Always{open}
	default:
		u.Law = Always{u.at(c.State, 0)}
	}
	if !c.GlareLed {
		return
	}
	g := &Glare{Limit: c.DGPLimit, Hysteresis: c.Hysteresis}
	if c.Reopen == project.ReopenNextMorning {
		g.Reopen, g.Hysteresis = NextMorning, 0
	}
	for i, v := range views {
		if slices.Contains(c.Viewpoints, v.Name) {
			g.Viewpoints = append(g.Viewpoints, i)
		}
	}
	u.Glare = g
}

func timetable(u *Unit, c *project.Control, open int) Timetable {
	t := Timetable{State: open}
	for _, p := range c.Timetable {
		t.Periods = append(t.Periods, Period{
			Days: p.Days, FromH: p.FromH, ToH: p.ToH, State: u.at(p.State, open),
			FirstDay: yearDay(p.FirstDay), LastDay: yearDay(p.LastDay),
		})
	}
	return t
}

// yearDay counts from 1 January; 29 February, which the year does not have, is
// taken as the day before.
func yearDay(d *project.MonthDay) int {
	day := *d
	if day.Month == 2 && day.Day == 29 {
		day.Day = 28
	}
	n, _ := daylight.MonthDay(day).YearDay()
	return n
}
