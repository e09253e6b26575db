package project

// wantedKeys are the criteria that are judged only where they are asked for.
// Those without a choice of levels are shares that the user writes down.
var wantedKeys = []key[Criteria]{
	{spec{name: "provision_openings", about: "which of the standard's shares of the plane hold: of windows, or of roof lights", choices: []string{"vertical", "horizontal"}, def: `"vertical"`, source: own, quiet: true}, func(c *Criteria) any { return &c.ProvisionOpenings }},
	{spec{name: "provision_factor", about: "level of daylight provision by the daylight factor, EN 17037", choices: levels, def: `"none"`, source: own, quiet: true}, func(c *Criteria) any { return &c.ProvisionFactor }},
	{spec{name: "median_diffuse_lx", about: "for provision_factor: the site's median horizontal illuminance of the sky; else that of the weather file", in: within{lo: 1000, hi: 60000}}, func(c *Criteria) any { return &c.MedianDiffuseLx }},
	{spec{name: "view_out", about: "level of the view out, EN 17037", choices: levels, def: `"none"`, source: own, quiet: true}, func(c *Criteria) any { return &c.ViewOut }},
	{spec{name: "view_above_plane_m", about: "for view_out: height of the eyes above the work plane", in: within{lo: -2, hi: 3}, def: "0.35", source: "seated eyes, 1.2 m above the floor where the plane lies at 0.85 m, " + en17037, quiet: true}, func(c *Criteria) any { return &c.ViewAbovePlaneM }},
	{spec{name: "sunlight", about: "level of exposure to sunlight, EN 17037", choices: levels, def: `"none"`, source: own, quiet: true}, func(c *Criteria) any { return &c.Sunlight }},
	{spec{name: "sunlight_day", about: "for sunlight: a day from 1 February to 21 March", def: `"03-21"`, source: "last day that " + en17037 + " allows; own choice", quiet: true}, func(c *Criteria) any { return &c.SunlightDay }},
	{spec{name: "sunlight_altitude_deg", about: "for sunlight: least altitude of the sun that counts, from the standard's table for the site", in: within{lo: 0, hi: 60}}, func(c *Criteria) any { return &c.SunlightAltitudeDeg }},
	{spec{name: "sunlight_height_m", about: "for sunlight: least z of the reference point, 1.2 m above the floor", in: coordinate, def: "1.2", source: "floor at z = 0; " + en17037, quiet: true}, func(c *Criteria) any { return &c.SunlightHeightM }},
	{spec{name: "cloth_class", about: "class of glare control, EN 14501, asked of the roller of every opening, 1 to 4; 0 asks nothing", in: within{lo: 0, hi: 4}, def: "0", source: own, quiet: true}, func(c *Criteria) any { return &c.ClothClass }},
	{spec{name: "sda_at_least", about: "sDA, IES LM-83: share of the plane with 300 lx in half of the hours from 8 to 18", in: share}, func(c *Criteria) any { return &c.SDAAtLeast }},
	{spec{name: "ase_at_most", about: "ASE, IES LM-83: share of the plane with over 1000 lx of sun in more than 250 of these hours", in: share}, func(c *Criteria) any { return &c.ASEAtMost }},
	{spec{name: "glare_autonomy_at_least", about: "share of the viewpoints with DGP up to 0.40 in 95 % of the hours in use", in: share}, func(c *Criteria) any { return &c.GlareAutonomyAtLeast }},
	{spec{name: "equinox_at_least", about: "share of the plane between the two illuminances below on a clear 21 March, at 9 and at 15 h clock time", in: share}, func(c *Criteria) any { return &c.EquinoxAtLeast }},
	{spec{name: "equinox_low_lx", about: "for equinox_at_least: the lower illuminance", in: within{lo: 0, hi: 100000}, def: "300", source: "rating schemes, from memory", quiet: true}, func(c *Criteria) any { return &c.EquinoxLowLx }},
	{spec{name: "equinox_high_lx", about: "for equinox_at_least: the upper illuminance", in: within{lo: 0, hi: 200000}, def: "3000", source: "rating schemes, from memory", quiet: true}, func(c *Criteria) any { return &c.EquinoxHighLx }},
}

func checkCriteria(r *reader, n *node, c *Criteria) {
	const name = "criteria"
	if c.Sunlight != "none" && n.good("sunlight") && !n.has("sunlight_altitude_deg") {
		r.reject(n, name, "sunlight", "got no sunlight_altitude_deg; want the least altitude of the sun in degrees, from the table of EN 17037 for the site")
	}
	if d := c.SunlightDay; d != nil && n.good("sunlight_day") && (d.Month < 2 || d.Month > 3 || d.Month == 3 && d.Day > 21) {
		r.reject(n, name, "sunlight_day", "got a day outside 02-01 to 03-21, want one within")
	}
	if n.good("equinox_low_lx", "equinox_high_lx") && c.EquinoxLowLx >= c.EquinoxHighLx {
		key := "equinox_high_lx"
		if !n.has(key) {
			key = "equinox_low_lx"
		}
		r.reject(n, name, key, "got %g to %g lx, want a lower and a higher illuminance", c.EquinoxLowLx, c.EquinoxHighLx)
	}
}

// Metrics of a limit, as the file calls them.
const (
	LimitIlluminance    = "illuminance"
	LimitSun            = "direct sun"
	LimitDaylightFactor = "daylight factor"
	LimitDGP            = "DGP"
	LimitEye            = "eye illuminance"
	LimitSunlit         = "sunlit share"
)

// Hours of a limit, as the file calls them.
const (
	HoursInUse    = "in use"
	HoursClock    = "8 to 18"
	HoursDaylight = "daylight"
	HoursAll      = "all"
)

var (
	limitMetrics = []string{LimitIlluminance, LimitSun, LimitDaylightFactor, LimitDGP, LimitEye, LimitSunlit}
	limitHours   = []string{HoursInUse, HoursClock, HoursDaylight, HoursAll}
)

var limitKeys = []key[Limit]{
	{spec{name: "name", about: "shown in results", form: itemName}, func(l *Limit) any { return &l.Name }},
	{spec{name: "metric", about: "illuminance or direct sun (lx) or daylight factor (a share) at the sensors; DGP or eye illuminance (lx) at the viewpoints; sunlit share of the openings", required: true, choices: limitMetrics}, func(l *Limit) any { return &l.Metric }},
	{spec{name: "at_least", about: "least value that is in order"}, func(l *Limit) any { return &l.AtLeast }},
	{spec{name: "at_most", about: "largest value that is in order"}, func(l *Limit) any { return &l.AtMost }},
	{spec{name: "hours", about: "hours that count: in use; 8 to 18 clock time on every day; the 4380 with the sun highest; all of the year", choices: limitHours, def: `"in use"`, source: own}, func(l *Limit) any { return &l.Hours }},
	{spec{name: "time_share", about: "share of these hours in which the value must be in order", in: share, def: "1", source: own}, func(l *Limit) any { return &l.TimeShare }},
	{spec{name: "place_share", about: "share of the sensors, viewpoints or openings at which that must be so", in: share, def: "1", source: own}, func(l *Limit) any { return &l.PlaceShare }},
}

func checkLimit(r *reader, n *node, l *Limit) {
	const name = "limit"
	l.Line = n.line
	r.limits = append(r.limits, n)
	switch {
	case !n.has("at_least") && !n.has("at_most"):
		r.reject(n, name, "at_least", "missing; want at_least, at_most or both")
	case l.AtLeast != nil && l.AtMost != nil && *l.AtLeast > *l.AtMost:
		r.reject(n, name, "at_most", "got %g, below at_least = %g; want it above", *l.AtMost, *l.AtLeast)
	}
	if !n.good("metric") {
		return
	}
	atEyes := l.Metric == LimitDGP || l.Metric == LimitEye
	if atEyes && n.good("hours") && l.Hours != HoursInUse {
		r.reject(n, name, "hours", "got %s, want %s: viewpoints are looked at while the room is in use", quote(l.Hours), quote(HoursInUse))
	}
	for _, key := range []string{"hours", "time_share"} {
		if l.Metric == LimitDaylightFactor && n.has(key) {
			r.reject(n, name, key, "got it with the daylight factor, which has no hours; leave it out")
		}
	}
}

// checkAsked rejects criteria on what the file does not have: nothing is met
// because nothing was looked at.
func (r *reader) checkAsked(root *node, p *Project) {
	c := &p.Criteria
	lacks := func(n *node, section, key, table string, missing bool) {
		if missing && n != nil && !n.bad {
			r.reject(n, section, key, "got no [[%s]] to judge, want at least one", table)
		}
	}
	planes, eyes, openings := len(p.WorkPlanes) == 0, len(p.Viewpoints)+len(p.ViewGrids) == 0, len(p.Openings) == 0
	n := root.table["criteria"]
	for _, a := range []struct {
		key, table string
		missing    bool
	}{
		{"provision_factor", "work_plane", planes && asked(c.ProvisionFactor)},
		{"view_out", "work_plane", planes && asked(c.ViewOut)},
		{"sda_at_least", "work_plane", planes && c.SDAAtLeast != nil},
		{"ase_at_most", "work_plane", planes && c.ASEAtMost != nil},
		{"equinox_at_least", "work_plane", planes && c.EquinoxAtLeast != nil},
		{"glare_autonomy_at_least", "viewpoint", eyes && c.GlareAutonomyAtLeast != nil},
		{"sunlight", "opening", openings && asked(c.Sunlight)},
		{"cloth_class", "opening", openings && c.ClothClass > 0},
	} {
		lacks(n, "criteria", a.key, a.table, a.missing)
	}
	for i, l := range p.Limits {
		table, missing := "work_plane", planes
		switch l.Metric {
		case LimitDGP, LimitEye:
			table, missing = "viewpoint", eyes
		case LimitSunlit:
			table, missing = "opening", openings
		}
		lacks(r.limits[i], "limit", "metric", table, missing)
	}
}

func asked(level string) bool { return level != "" && level != "none" }
