package project

import (
	"math"
	"slices"
)

// Control is a rule by which systems that move are put into their states;
// package control says what each rule does.
type Control struct {
	Name string
	// Systems are those that it operates; or all at Openings.
	Systems, Openings []string
	Rule              string
	Order             []string // states used, most open first; none: Movable.OpenToClosed
	// State is that of rule always. Open and Closed are "" for the first and the
	// last state of each system.
	State, Open, Closed string
	Timetable           []ControlPeriod
	FacadeWm2           float64
	ReopenWm2           *float64 // nil: FacadeWm2
	ReopenDelayMin      float64
	DirectLx            float64
	SensorShare         float64
	User                string // ActiveUser or PassiveUser
	DeskWm2             float64
	Room                string // with rule manual: of its users; "" for all
	// GlareLed is whether glare closes the systems further; the next four are
	// of no effect otherwise.
	GlareLed   bool
	DGPLimit   float64
	Viewpoints []string // none: all
	Reopen     string   // ReopenByHysteresis or ReopenNextMorning
	Hysteresis float64
	Line       int
}

// ControlPeriod is a line of a timetable.
type ControlPeriod struct {
	State             string
	FromH, ToH        float64 // clock time; ToH below FromH: over midnight
	Days              [7]bool // Monday first
	FirstDay, LastDay *MonthDay
}

// OpenToClosed are the states from the most open to the most closed: raised,
// then those that the file names in its order, or those of a law by how far
// they are tilted.
func (m Movable) OpenToClosed() []string {
	if m.Follow == nil {
		return m.States
	}
	tilts := map[string]float64{}
	for _, s := range m.Follow.States() {
		tilts[s.Name] = math.Abs(s.TiltRad)
	}
	list := slices.Clone(m.States)
	slices.SortStableFunc(list[m.FollowFrom:], func(a, b string) int {
		switch {
		case tilts[a] < tilts[b]:
			return -1
		case tilts[a] > tilts[b]:
			return 1
		}
		return 0
	})
	return list
}

const periodWords = `a list of tables such as { from = "20:00", to = "06:00", state = "drawn" }`

// periods reads a timetable.
func (r *reader) periods(n *node, key string, wrong func() string, dst *[]ControlPeriod) string {
	return tables(r, n, key, wrong, "{ state = \"drawn\" }", periodKeys, func(item *node, c ControlPeriod) {
		if item.good("from", "to") && c.FromH == c.ToH {
			item.bad = true
			r.add(item.lineOf("to"), key+".to", "got the time of from, %s; want another one", hourMinute(c.ToH))
		}
		*dst = append(*dst, c)
	})
}

// tables reads a list of inline tables; example is one.
func tables[T any](r *reader, n *node, key string, wrong func() string, example string, keys []key[T], each func(*node, T)) string {
	if n.list == nil {
		return wrong()
	}
	for i, item := range n.list {
		if item.table == nil {
			return "item " + decimal(float64(i+1)) + ": got " + item.got() + ", want a table such as " + example
		}
		var t T
		decode(r, item, key, keys, &t)
		r.unknown(item, key, names(keys))
		each(item, t)
		n.bad = n.bad || item.bad
	}
	return ""
}

// nameList reads a list of names, and the things they refer to.
func (r *reader) nameList(n *node, key string, s *spec, wrong func() string, dst *[]string) string {
	if n.list == nil {
		return wrong()
	}
	if len(n.list) == 0 {
		return "got no names, want at least one"
	}
	for i, item := range n.list {
		text, ok := item.value.(string)
		if !ok {
			return "item " + decimal(float64(i+1)) + ": got " + item.got() + ", want a name in quotes"
		}
		var name string
		if why := r.text(item, key, s, text, &name); why != "" {
			return "item " + decimal(float64(i+1)) + ": " + why
		}
		*dst = append(*dst, name)
	}
	return ""
}
