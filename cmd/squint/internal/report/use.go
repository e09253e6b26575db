package report

import (
	"fmt"

	"charm.land/lipgloss/v2"

	sheet "squint/cmd/squint/internal/page"
	"squint/cmd/squint/internal/study"
	"squint/scene/project"
)

// occupancyText is when a room is in use, daylight saving apart.
func occupancyText(o project.Occupancy) string {
	s := fmt.Sprintf("%s, %s to %s h", daysText(o.Days), decimals(o.FromH, 2), decimals(o.ToH, 2))
	if n := len(o.Holidays); n > 0 {
		s += ", " + count(n, "holiday", "holidays")
	}
	return s
}

// occupancyOf are the hours of use of a room; "" is the project's own.
func occupancyOf(p *project.Project, room string) project.Occupancy {
	for _, o := range p.Rooms {
		if o.Name == room {
			return o.Occupancy
		}
	}
	return p.Occupancy
}

// ownHours stands for the hours of use of what lies in no room.
const ownHours = "elsewhere"

func roomWords(u study.Use) string {
	if u.Room == "" {
		return ownHours
	}
	return plain(u.Room)
}

// placesIn names the viewpoints and work planes of a room.
func placesIn(r *study.Result, room string) (views, planes []string) {
	grids := map[string]bool{}
	for i := range r.Views {
		switch v := &r.Views[i].Viewpoint; {
		case v.Room != room || v.Grid != "" && grids[v.Grid]:
		case v.Grid != "":
			grids[v.Grid] = true
			views = append(views, v.Grid)
		default:
			views = append(views, v.Name)
		}
	}
	for i := range r.Planes {
		if p := &r.Planes[i].Plane; p.Room == room {
			planes = append(planes, p.Name)
		}
	}
	return views, planes
}

// someOf joins names, of many the first.
func someOf(names []string) string {
	if len(names) > mostNamed {
		names = append(names[:mostNamed-1:mostNamed-1], count(len(names)-mostNamed+1, "more", "more"))
	}
	return list(names)
}

// useSection says over which hours what was judged, where that is not the same.
func useSection(p *page, r *study.Result) {
	if len(r.Uses) < 2 {
		return
	}
	p.gap()
	p.head("Hours of use")
	for _, u := range r.Uses {
		views, planes := placesIn(r, u.Room)
		p.item(2, "", lipgloss.NewStyle(), 2, fmt.Sprintf("%s: %s, %s, for %s.", roomWords(u), occupancyText(occupancyOf(r.Project, u.Room)),
			hoursText(u.Calendar.InHours(len(u.Hours))), someOf(append(views, planes...))))
	}
}

func useTable(r *study.Result) sheet.Table {
	t := sheet.Table{Title: "Hours of use", Head: []string{"Room", "In use", "Hours", "Judged over them"}, Numbers: []bool{false, false, true, false}}
	if len(r.Uses) < 2 {
		return t
	}
	for _, u := range r.Uses {
		views, planes := placesIn(r, u.Room)
		t.Rows = append(t.Rows, []string{roomWords(u), occupancyText(occupancyOf(r.Project, u.Room)), hours(u.Calendar.InHours(len(u.Hours))), plain(list(append(views, planes...)))})
	}
	return t
}

// roomJSON is a room with hours of use of its own, or what lies in none, "".
type roomJSON struct {
	Room string `json:"room"`
	useJSON
	Hours      number   `json:"hours"`
	Viewpoints []string `json:"viewpoints"` // names, of a view grid its own
	WorkPlanes []string `json:"work_planes"`
}

func rooms(r *study.Result) []roomJSON {
	var out []roomJSON
	for _, u := range r.Uses {
		views, planes := placesIn(r, u.Room)
		out = append(out, roomJSON{u.Room, use(occupancyOf(r.Project, u.Room)), number(u.Calendar.InHours(len(u.Hours))), append([]string{}, views...), append([]string{}, planes...)})
	}
	return out
}

func use(o project.Occupancy) useJSON {
	return useJSON{daysText(o.Days), number(o.FromH), number(o.ToH), len(o.Holidays), o.DaylightSavingFrom != nil && o.DaylightSavingTo != nil}
}
