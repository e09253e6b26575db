package project

import "slices"

const roomTable = "room"

var roomKeys = []key[Room]{
	{spec{name: "name", about: "by which viewpoints, view grids, work planes and controls call it, shown in results", required: true, form: itemName}, func(o *Room) any { return &o.Name }},
	{spec{name: "days", about: "days of the week in use; else those of [occupancy], and so on"}, func(o *Room) any { return &o.Occupancy.Days }},
	{spec{name: "from", about: "start of use, clock time", form: clock}, func(o *Room) any { return &o.Occupancy.FromH }},
	{spec{name: "to", about: "end of use, clock time", form: clock}, func(o *Room) any { return &o.Occupancy.ToH }},
	{spec{name: "holidays", about: "days out of use, month-day"}, func(o *Room) any { return &o.Occupancy.Holidays }},
}

// inRoom is the key of what lies in a room.
func inRoom[T any](field func(*T) *string) key[T] {
	return key[T]{spec{name: roomTable, about: "whose hours of use count; else those of [occupancy]", refers: roomTable}, func(x *T) any { return field(x) }}
}

func checkRoom(r *reader, n *node, o *Room) {
	o.Line = n.line
	r.rooms = append(r.rooms, n)
}

// completeRooms fills in what rooms leave out, and looks for rooms without
// anything in them, which may be called by a name that is none.
func (r *reader) completeRooms(p *Project) {
	known := func(name string) bool {
		return slices.ContainsFunc(p.Rooms, func(o Room) bool { return o.Name == name })
	}
	misnamed := slices.ContainsFunc(r.refs, func(ref reference) bool { return ref.noun == roomTable && !known(ref.name) })
	for i := range p.Rooms {
		o, n, all := &p.Rooms[i], r.rooms[i], &p.Occupancy
		own := o.Occupancy
		o.Occupancy = *all
		if n.has("days") {
			o.Occupancy.Days = own.Days
		}
		if n.has("from") {
			o.Occupancy.FromH = own.FromH
		}
		if n.has("to") {
			o.Occupancy.ToH = own.ToH
		}
		if n.has("holidays") {
			o.Occupancy.Holidays = own.Holidays
		}
		if n.has("from") || n.has("to") {
			r.checkHours(n, roomTable, &o.Occupancy)
		}
		used := slices.ContainsFunc(p.Viewpoints, func(v Viewpoint) bool { return v.Room == o.Name }) ||
			slices.ContainsFunc(p.ViewGrids, func(g ViewGrid) bool { return g.Room == o.Name }) ||
			slices.ContainsFunc(p.WorkPlanes, func(w WorkPlane) bool { return w.Room == o.Name })
		if !used && !misnamed && n.good("name") && o.Name != "" {
			r.reject(n, roomTable, "name", "got %s, in which no viewpoint, view_grid or work_plane is; give one room = %[1]s, or leave the room out", quote(o.Name))
		}
	}
}
