package study

import (
	"fmt"
	"slices"

	"squint/glare/daylight"
	"squint/scene"
	"squint/scene/project"
)

// Use is when a room is used.
type Use struct {
	Room     string // "" for the project's own hours
	Calendar daylight.Calendar
	Hours    daylight.Hours
	mask     []bool // by step
}

func newUse(room string, c daylight.Calendar) Use {
	u := Use{Room: room, Calendar: c, Hours: c.Occupied()}
	u.mask = u.Hours.Mask(c.Steps())
	return u
}

// uses are those of the rooms that viewpoints and work planes lie in, that of
// the project's own hours first; none of a project without rooms.
func uses(p *project.Project, c *scene.Climate, s *scene.Scene) ([]Use, error) {
	if len(p.Rooms) == 0 {
		return nil, nil
	}
	has := map[string]bool{}
	for _, v := range s.Viewpoints {
		has[v.Room] = true
	}
	for _, w := range s.WorkPlanes {
		has[w.Room] = true
	}
	rooms := append([]project.Room{{Occupancy: p.Occupancy}}, p.Rooms...)
	var list []Use
	for _, o := range rooms {
		if !has[o.Name] {
			continue
		}
		u := newUse(o.Name, calendarOf(&o.Occupancy, c))
		if len(u.Hours) == 0 && o.Name != "" {
			return nil, fmt.Errorf("%s:%d: room %q: got no hour of use, want at least one; check days, from, to and holidays", p.File, o.Line, o.Name)
		}
		if len(u.Hours) == 0 {
			return nil, noUse(p)
		}
		list = append(list, u)
	}
	return list, nil
}

func noUse(p *project.Project) error {
	return fmt.Errorf("%s: occupancy: got no hour of use, want at least one; check days, from, to and holidays", p.File)
}

// anyOf are the steps in which any room is in use.
func anyOf(list []Use) daylight.Hours {
	var all daylight.Hours
	for _, u := range list {
		all = append(all, u.Hours...)
	}
	slices.Sort(all)
	return slices.Compact(all)
}

// allUses are Uses, or the one of all receivers.
func (in *Input) allUses() []Use {
	if len(in.Uses) == 0 {
		return []Use{in.UseOf("")}
	}
	return in.Uses
}

// UseOf is when a room is used.
func (in *Input) UseOf(room string) Use { return useOf(in.Uses, room, in.Calendar, in.Occupied) }

// UseOf is when a room is used.
func (r *Result) UseOf(room string) Use { return useOf(r.Uses, room, r.Calendar, r.Occupied) }

// useOf finds a room's use; without rooms it is that of all.
func useOf(list []Use, room string, c daylight.Calendar, all daylight.Hours) Use {
	for _, u := range list {
		if u.Room == room {
			return u
		}
	}
	return Use{Room: room, Calendar: c, Hours: all, mask: all.Mask(c.Steps())}
}
