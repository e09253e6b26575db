package project

import (
	"slices"
	"strings"
)

// The rules by which systems are operated.
const (
	RuleAlways       = "always"
	RuleTimetable    = "timetable"
	RuleFacadeSun    = "facade sun"
	RuleWorkPlaneSun = "work plane sun"
	RuleGlare        = "glare"
	RuleFollow       = "follow"
	RuleManual       = "manual"
)

// The ways in which what glare has closed opens again.
const (
	ReopenByHysteresis = "hysteresis"
	ReopenNextMorning  = "next morning"
)

// What Control.User may be.
const (
	ActiveUser  = "active"
	PassiveUser = "passive"
)

const (
	controlTable = "control"
	moving       = "system that moves"
)

var controlRules = []string{RuleAlways, RuleTimetable, RuleFacadeSun, RuleWorkPlaneSun, RuleGlare, RuleFollow, RuleManual}

const (
	lm83     = "IES LM-83-12, from memory"
	reinhart = "Reinhart 2004, Lightswitch-2002, Solar Energy 77(1), from memory"
)

// irradiances on a facade or a desk, W/m2: up to the solar constant.
var irradiances = within{lo: 0, hi: 1400}

var controlKeys = []key[Control]{
	{spec{name: "name", about: "shown in results", required: true, form: itemName}, func(c *Control) any { return &c.Name }},
	{spec{name: "systems", about: "rollers, blinds, louvres and anidolic ceilings that it operates", refers: moving}, func(c *Control) any { return &c.Systems }},
	{spec{name: "openings", about: "instead of systems: all that moves at these openings", refers: "opening"}, func(c *Control) any { return &c.Openings }},
	{spec{name: "rule", about: "what decides", required: true, choices: controlRules}, func(c *Control) any { return &c.Rule }},
	{spec{name: "order", about: "states used, from the most open to the most closed; else those of the system: raised first, then as the file names them, or by growing tilt"}, func(c *Control) any { return &c.Order }},
	{spec{name: "state", about: "with rule always: the state"}, func(c *Control) any { return &c.State }},
	{spec{name: "open", about: "state while the rule asks for nothing; else the first one"}, func(c *Control) any { return &c.Open }},
	{spec{name: "closed", about: "state while the rule acts; else the last one"}, func(c *Control) any { return &c.Closed }},
	{spec{name: "timetable", about: "with rule timetable: periods, of which the first one that holds counts"}, func(c *Control) any { return &c.Timetable }},
	{spec{name: "facade_wm2", about: "with rule facade sun: closed above this irradiance of the opening's plane, W/m2", in: irradiances, def: "300", source: "ISO 13790:2008, clause 11.4.3, from memory"}, func(c *Control) any { return &c.FacadeWm2 }},
	{spec{name: "reopen_wm2", about: "with rule facade sun: open again at this irradiance; else at facade_wm2", in: irradiances}, func(c *Control) any { return &c.ReopenWm2 }},
	{spec{name: "reopen_delay_min", about: "with rule facade sun: open again when the irradiance has been low for so long, minutes", in: within{lo: 0, hi: 720}, def: "0", source: own}, func(c *Control) any { return &c.ReopenDelayMin }},
	{spec{name: "direct_lx", about: "with rule work plane sun: direct sun that counts, lx", in: within{lo: 1, hi: 150000}, def: "1000", source: lm83}, func(c *Control) any { return &c.DirectLx }},
	{spec{name: "sensor_share", about: "with rule work plane sun: closed when more than this share of the sensors has it", in: share, def: "0.02", source: lm83}, func(c *Control) any { return &c.SensorShare }},
	{spec{name: "user", about: "with rule manual: one who opens every morning and closes when the sun falls on a desk, or one who keeps it closed", choices: []string{ActiveUser, PassiveUser}, def: `"active"`, source: own}, func(c *Control) any { return &c.User }},
	{spec{name: "desk_wm2", about: "with rule manual: direct sun on the level plane at a viewpoint's desk that the active user does not bear, W/m2", in: irradiances, def: "50", source: reinhart}, func(c *Control) any { return &c.DeskWm2 }},
	{spec{name: roomTable, about: "with rule manual: whose users operate it; else those of all rooms", refers: roomTable}, func(c *Control) any { return &c.Room }},
	{spec{name: "dgp_limit", about: "with rule glare, or with another rule where it is written: closes further while a viewpoint in use is above it", in: within{lo: 0.1, hi: 1}, def: "0.4", source: "where glare begins to disturb, Wienold 2009, Proc. Building Simulation, from memory"}, func(c *Control) any { return &c.DGPLimit }},
	{spec{name: "viewpoints", about: "with a dgp_limit: those that count; else all", refers: "viewpoint"}, func(c *Control) any { return &c.Viewpoints }},
	{spec{name: "reopen", about: "with a dgp_limit: open again in the first step in which the open state is below the limit less the hysteresis, or not before the next morning", choices: []string{ReopenByHysteresis, ReopenNextMorning}, def: `"hysteresis"`, source: own}, func(c *Control) any { return &c.Reopen }},
	{spec{name: "hysteresis", about: "with reopen hysteresis, in DGP", in: within{hi: 0.09}, def: "0.05", source: "own choice, one class of EN 17037:2018, from memory"}, func(c *Control) any { return &c.Hysteresis }},
}

// ruleKeys are the keys that belong to some rules only.
var ruleKeys = map[string][]string{
	"state":      {RuleAlways},
	"open":       {RuleTimetable, RuleFacadeSun, RuleWorkPlaneSun, RuleGlare, RuleManual},
	"closed":     {RuleFacadeSun, RuleWorkPlaneSun, RuleManual},
	"order":      {RuleAlways, RuleTimetable, RuleFacadeSun, RuleWorkPlaneSun, RuleGlare, RuleManual},
	"timetable":  {RuleTimetable},
	"facade_wm2": {RuleFacadeSun}, "reopen_wm2": {RuleFacadeSun}, "reopen_delay_min": {RuleFacadeSun},
	"direct_lx": {RuleWorkPlaneSun}, "sensor_share": {RuleWorkPlaneSun},
	"user": {RuleManual}, "desk_wm2": {RuleManual}, roomTable: {RuleManual},
}

var periodKeys = []key[ControlPeriod]{
	{spec{name: "state", about: "while it holds", required: true}, func(c *ControlPeriod) any { return &c.State }},
	{spec{name: "from", about: "start, clock time", form: clock, def: `"00:00"`, source: own}, func(c *ControlPeriod) any { return &c.FromH }},
	{spec{name: "to", about: "end, clock time; before the start for a period over midnight", form: clock, def: `"24:00"`, source: own}, func(c *ControlPeriod) any { return &c.ToH }},
	{spec{name: "days", about: "of the week", def: `["mon", "tue", "wed", "thu", "fri", "sat", "sun"]`, source: own}, func(c *ControlPeriod) any { return &c.Days }},
	{spec{name: "first_day", about: "of the year, month-day", def: `"01-01"`, source: own}, func(c *ControlPeriod) any { return &c.FirstDay }},
	{spec{name: "last_day", about: "of the year, included; before the first for a period over the new year", def: `"12-31"`, source: own}, func(c *ControlPeriod) any { return &c.LastDay }},
}

func checkControl(r *reader, n *node, c *Control) {
	const name = controlTable
	c.Line = n.line
	c.GlareLed = c.Rule == RuleGlare || n.has("dgp_limit")
	r.controls = append(r.controls, n)
	switch {
	case n.has("systems") && n.has("openings"):
		r.reject(n, name, "openings", "got systems too; want one of the two")
	case !n.has("systems") && !n.has("openings"):
		r.reject(n, name, "systems", "missing; want a list of names in quotes, or openings")
	}
	if !n.good("rule") || c.Rule == "" {
		return
	}
	for _, k := range n.keys {
		if rules := ruleKeys[k]; rules != nil && !slices.Contains(rules, c.Rule) {
			r.reject(n, name, k, "got the rule %q; want %s, or no %s", c.Rule, oneOf(rules), k)
		}
	}
	for _, k := range []string{"viewpoints", "reopen", "hysteresis"} {
		if n.has(k) && !c.GlareLed {
			r.reject(n, name, k, "got no dgp_limit; want it, or no %s", k)
		}
	}
	switch {
	case n.has("hysteresis") && c.Reopen == ReopenNextMorning && n.good("reopen"):
		r.reject(n, name, "hysteresis", "got reopen = %q, which has none; leave it out", ReopenNextMorning)
	case c.ReopenWm2 != nil && n.good("facade_wm2", "reopen_wm2") && *c.ReopenWm2 > c.FacadeWm2:
		r.reject(n, name, "reopen_wm2", "got %g, want at most facade_wm2, %g", *c.ReopenWm2, c.FacadeWm2)
	case c.Rule == RuleTimetable && len(c.Timetable) == 0 && n.good("timetable"):
		r.reject(n, name, "timetable", "missing; want %s", periodWords)
	case c.Rule == RuleAlways && !n.has("state"):
		r.reject(n, name, "state", "missing; want the name of a state in quotes")
	case c.Rule == RuleManual && c.User == PassiveUser && n.has("desk_wm2"):
		r.reject(n, name, "desk_wm2", "got user = %q, who bears no sun at all; leave it out", PassiveUser)
	}
}

// Operates is whether the control operates that system.
func (c *Control) Operates(m Movable) bool {
	return slices.Contains(c.Systems, m.Name) || slices.Contains(c.Openings, m.Opening)
}

// StatesOf are the states of the system that the control uses, from the most
// open to the most closed.
func (c *Control) StatesOf(m Movable) []string {
	if len(c.Order) > 0 {
		return c.Order
	}
	return m.OpenToClosed()
}

// checkControls looks for systems that two controls operate and for states that
// their systems do not have.
func (r *reader) checkControls(p *Project) {
	const name = controlTable
	operated := map[string]string{}
	for i := range p.Controls {
		c, n := &p.Controls[i], r.controls[i]
		if !n.good("systems", "openings") {
			continue
		}
		found := map[string]bool{} // openings
		for _, m := range Movables(p) {
			if !c.Operates(m) {
				continue
			}
			found[m.Opening] = true
			key := "systems"
			if !n.has(key) {
				key = "openings"
			}
			if other := operated[m.Name]; other != "" && n.good(key) {
				r.reject(n, name, key, "got %s, which %s operates already; want one control for each", quote(m.Name), quote(other))
			}
			operated[m.Name] = c.Name
			if c.Rule == RuleFollow && m.Follow == nil && n.good("rule") {
				r.reject(n, name, "rule", "got %q, but %s follows nothing; want follow there, or roller_follow", RuleFollow, quote(m.Name))
			}
			r.checkStates(n, c, m)
		}
		for _, o := range c.Openings {
			if !found[o] && p.opening(o).Name != "" && n.good("openings") {
				r.reject(n, name, "openings", "got %s, where nothing moves; leave it out", quote(o))
			}
		}
	}
}

// checkStates wants each state that the control names to be one of the system's.
func (r *reader) checkStates(n *node, c *Control, m Movable) {
	check := func(key, state string, known []string) {
		if state != "" && n.good("order", key) && !slices.Contains(known, state) {
			r.reject(n, controlTable, key, "got %s, want a state of %s: %s", quote(state), quote(m.Name), quoted(known))
		}
	}
	for i, s := range c.Order {
		check("order", s, m.States)
		if slices.Contains(c.Order[:i], s) && n.good("order") {
			r.reject(n, controlTable, "order", "got %s twice", quote(s))
		}
	}
	known := c.StatesOf(m)
	check("state", c.State, known)
	check("open", c.Open, known)
	check("closed", c.Closed, known)
	for _, t := range c.Timetable {
		check("timetable", t.State, known)
	}
	open, closed := slices.Index(known, c.Open), slices.Index(known, c.Closed)
	if open >= 0 && closed >= 0 && open > closed && n.good("open", "closed") {
		r.reject(n, controlTable, "closed", "got %s, which is more open than %s; want one further down in %s, or another order", quote(c.Closed), quote(c.Open), quoted(known))
	}
}

func quoted(names []string) string {
	list := make([]string, len(names))
	for i, s := range names {
		list[i] = quote(s)
	}
	return strings.Join(list, ", ")
}
