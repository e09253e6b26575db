package project

var siteKeys = []key[Site]{
	{spec{name: "north_deg", about: "azimuth of the model's +y axis, clockwise from north", in: anyAngle, def: "0", source: "drawings are laid with north up: " + usual}, func(s *Site) any { return &s.NorthDeg }},
	{spec{name: "latitude_deg", about: "north positive; overrides the weather file's header", in: within{lo: -90, hi: 90}}, func(s *Site) any { return &s.LatitudeDeg }},
	{spec{name: "longitude_deg", about: "east positive; overrides the weather file's header", in: within{lo: -180, hi: 180}}, func(s *Site) any { return &s.LongitudeDeg }},
	{spec{name: "utc_offset_h", about: "standard time minus UTC; overrides the weather file's header", in: within{lo: -12, hi: 14}}, func(s *Site) any { return &s.UTCOffsetH }},
	{spec{name: "elevation_m", about: "above sea level; overrides the weather file's header", in: within{lo: -500, hi: 9000}}, func(s *Site) any { return &s.ElevationM }},
}

var weatherKeys = []key[Weather]{
	{spec{name: "file", about: "EPW or TMY3 file, relative to this file's folder", required: true, form: filePath}, func(w *Weather) any { return &w.File }},
	{spec{name: "moment_offset_h", about: "hours from a record's time stamp to the moment it stands for; instead of the fitted offset", in: within{lo: -3, hi: 3}}, func(w *Weather) any { return &w.MomentOffsetH }},
}

var groundKeys = []key[Ground]{
	{spec{name: "level_m", about: "z of the ground in the model", in: coordinate, def: "0", source: own}, func(g *Ground) any { return &g.LevelM }},
	{spec{name: "reflectance", about: "diffuse, all the year", in: share, form: everyMonth, def: "0.2", source: "general ground, CIBSE/SLL Code (from memory)"}, func(g *Ground) any { return &g.Reflectance }},
	{spec{name: "reflectance_by_month", about: "instead of reflectance: twelve, January first", in: share}, func(g *Ground) any { return &g.Reflectance }},
}

func checkGround(r *reader, n *node, g *Ground) {
	if n.has("reflectance") && n.has("reflectance_by_month") {
		r.reject(n, "ground", "reflectance_by_month", "got reflectance too; want one of the two")
	}
}

var horizonKeys = []key[[]HorizonPoint]{
	{spec{name: "line", about: "points [azimuth, altitude] in degrees, by rising azimuth"}, func(h *[]HorizonPoint) any { return h }},
}

func checkHorizon(r *reader, n *node, h *[]HorizonPoint) {
	azimuths, altitudes := within{lo: 0, hi: 360}, within{lo: 0, hi: 89}
	for i, p := range *h {
		switch {
		case !azimuths.holds(p.AzimuthDeg):
			r.reject(n, "horizon", "line", "row %d: azimuth: got %g, want %s", i+1, p.AzimuthDeg, azimuths)
		case !altitudes.holds(p.AltitudeDeg):
			r.reject(n, "horizon", "line", "row %d: altitude: got %g, want %s", i+1, p.AltitudeDeg, altitudes)
		case i > 0 && p.AzimuthDeg <= (*h)[i-1].AzimuthDeg:
			r.reject(n, "horizon", "line", "row %d: azimuth: got %g after %g, want rising azimuths", i+1, p.AzimuthDeg, (*h)[i-1].AzimuthDeg)
		}
	}
	if len(*h) == 1 && n.good("line") {
		r.reject(n, "horizon", "line", "got 1 point, want at least 2; for the same altitude all around give it at 0 and 180")
	}
	if k := len(*h); k > 1 && (*h)[0].AzimuthDeg == 0 && (*h)[k-1].AzimuthDeg == 360 && (*h)[0].AltitudeDeg != (*h)[k-1].AltitudeDeg {
		r.reject(n, "horizon", "line", "row %d: altitude: got %g at azimuth 360 and %g at 0, which are one; leave one of the two out", k, (*h)[k-1].AltitudeDeg, (*h)[0].AltitudeDeg)
	}
}

var occupancyKeys = []key[Occupancy]{
	{spec{name: "days", about: "days of the week in use", def: `["mon", "tue", "wed", "thu", "fri"]`, source: usual}, func(o *Occupancy) any { return &o.Days }},
	{spec{name: "from", about: "start of use, clock time", form: clock, def: `"08:00"`, source: usual}, func(o *Occupancy) any { return &o.FromH }},
	{spec{name: "to", about: "end of use, clock time", form: clock, def: `"18:00"`, source: usual}, func(o *Occupancy) any { return &o.ToH }},
	{spec{name: "holidays", about: "days out of use, month-day"}, func(o *Occupancy) any { return &o.Holidays }},
	{spec{name: "daylight_saving_from", about: "first day on which the clock is one hour ahead"}, func(o *Occupancy) any { return &o.DaylightSavingFrom }},
	{spec{name: "daylight_saving_to", about: "first day on which it no longer is"}, func(o *Occupancy) any { return &o.DaylightSavingTo }},
}

func checkOccupancy(r *reader, n *node, o *Occupancy) {
	r.checkHours(n, "occupancy", o)
	for _, pair := range [][2]string{{"daylight_saving_from", "daylight_saving_to"}, {"daylight_saving_to", "daylight_saving_from"}} {
		if n.has(pair[0]) && !n.has(pair[1]) {
			r.reject(n, "occupancy", pair[0], "got no %s; want both or neither", pair[1])
		}
	}
	if from, to := o.DaylightSavingFrom, o.DaylightSavingTo; from != nil && to != nil && *from == *to {
		r.reject(n, "occupancy", "daylight_saving_to", "got the day of daylight_saving_from; want another one")
	}
}

func (r *reader) checkHours(n *node, table string, o *Occupancy) {
	if n.good("from", "to") && o.FromH >= o.ToH {
		key := "to"
		if !n.has(key) {
			key = "from"
		}
		r.reject(n, table, key, "got use from %s to %s, want an end after the start, on the same day", hourMinute(o.FromH), hourMinute(o.ToH))
	}
}

func hourMinute(h float64) string {
	minutes := int(h*60 + 0.5)
	return string([]byte{'0' + byte(minutes/600), '0' + byte(minutes/60%10), ':', '0' + byte(minutes%60/10), '0' + byte(minutes%10)})
}
