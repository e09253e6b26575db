package project

import (
	"strings"
	"testing"
)

const roomTables = `[occupancy]
days = ["mon", "tue"]
from = "08:30"
holidays = ["12-25"]
daylight_saving_from = "03-27"
daylight_saving_to = "10-30"

[[room]]
name = "hall"
from = "10:00"

[[room]]
name = "lab"
days = ["sat"]
to = "12:15"
holidays = []

[[viewpoint]]
name = "in the hall"
room = "hall"
position_m = [1, 1, 1.2]
azimuth_deg = 0
`

// TestRooms: what a room leaves out is as in [occupancy].
func TestRooms(t *testing.T) {
	p, err := load(t, minimal+roomTables+gridTable+"room = \"lab\"\n")
	if err != nil {
		t.Fatal(err)
	}
	hall, lab := p.Rooms[0].Occupancy, p.Rooms[1].Occupancy
	if hall.Days != p.Occupancy.Days || hall.FromH != 10 || hall.ToH != 18 || len(hall.Holidays) != 1 || hall.DaylightSavingFrom == nil {
		t.Errorf("hall: got %+v", hall)
	}
	if lab.Days != [7]bool{5: true} || lab.FromH != 8.5 || lab.ToH != 12.25 || len(lab.Holidays) != 0 || lab.DaylightSavingTo == nil {
		t.Errorf("lab: got %+v", lab)
	}
	for _, v := range p.Viewpoints {
		if want := map[bool]string{true: "lab", false: "hall"}[v.Grid != ""]; v.Name != "v" && v.Room != want {
			t.Errorf("%s: got the room %q, want %q", v.Name, v.Room, want)
		}
	}
	for _, c := range []struct{ old, new, want string }{
		{`room = "hall"`, `room = "hell"`, `viewpoint.room: got "hell", want the name of a room; did you mean "hall"?`},
		{`room = "hall"`, ``, `room.name: got "hall", in which no viewpoint, view_grid or work_plane is`},
		{`to = "12:15"`, `to = "08:15"`, `room.to: got use from 08:30 to 08:15, want an end after the start`},
		{`name = "lab"`, `name = "hall"`, `room.name: got "hall" again`},
		{`to = "12:15"`, `daylight_saving_from = "01-01"`, `room.daylight_saving_from: unknown key`},
	} {
		_, err := load(t, minimal+strings.Replace(roomTables, c.old, c.new, 1)+gridTable+"room = \"lab\"\n")
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %s", c.new, err, c.want)
		}
	}
}
