package control

import (
	"fmt"
	"strings"

	"squint/glare/daylight"
	"squint/scene"
)

// Unit is one system that moves.
type Unit struct {
	Name    string
	Opening string   // at which it hangs
	Group   string   // of openings: units of one group are reported together
	Room    string   // whose users operate it; "": those of all
	States  []string // from the most open to the most closed, at least one
	Law     Law
	// Glare closes the unit further than its law does; nil for never.
	Glare *Glare
}

// index of a state; false for one that the unit does not have.
func (u *Unit) index(state string) (int, bool) {
	for i, s := range u.States {
		if s == state {
			return i, true
		}
	}
	return 0, false
}

// Step is a part of the year.
type Step struct {
	At       int     // of the year, from 0, see scene.Moment.Step
	Day      int     // of the clock, counted from 1 January, 0 to 364
	Weekday  int     // 0 Monday to 6 Sunday
	ClockH   float64 // clock time of its middle, 0 to 24
	Share    float64 // of an hour, above 0 to 1
	Occupied bool    // any room is in use
}

// Steps are those of the moments, in their order, which must be that of time.
func Steps(moments []*scene.Moment, c daylight.Calendar) []Step {
	list := make([]Step, len(moments))
	for i, m := range moments {
		day, clock := c.ClockAt(m.Step)
		weekday, _ := c.OnDay(day)
		list[i] = Step{At: m.Step, Day: day, Weekday: weekday, ClockH: clock, Share: m.Share, Occupied: m.Occupied}
	}
	return list
}

// Facts tell a unit's law about a step what is known without looking at any
// combination of states. A law asks only for its own; the others may be nil.
type Facts struct {
	// FacadeWm2 is the irradiance, in W/m2, of the plane of the unit's opening
	// outdoors: sun, sky and ground.
	FacadeWm2 func(step int) float64
	// DirectLx is the sun, in lx, on each sensor of the work planes through
	// the openings of the unit's group alone, with everything that moves open.
	DirectLx func(step int) []float32
	// DeskWm2 is the sun, in W/m2, on the level plane at each place of work, as
	// DirectLx is.
	DeskWm2 func(step int) []float64
	// InUse is whether somebody is there whom the unit serves; nil:
	// Step.Occupied.
	InUse func(step int) bool
	// Following is the name of the state that suits the sun, of systems that
	// follow it.
	Following func(step int) string
}

// inUse is InUse for all steps.
func (f Facts) inUse(steps []Step) []bool {
	list := make([]bool, len(steps))
	for i, s := range steps {
		list[i] = s.Occupied && (f.InUse == nil || f.InUse(i))
	}
	return list
}

// Law chooses a state of the unit for every step of the year, in order of time,
// as an index among Unit.States.
type Law interface {
	Choose(u *Unit, steps []Step, f Facts) ([]int, error)
}

// Combination is the state of every unit, by index, one byte a unit; it can be
// compared and is a map's key.
type Combination string

// State of that unit.
func (c Combination) State(unit int) int { return int(c[unit]) }

func combination(states []int) Combination {
	b := make([]byte, len(states))
	for i, s := range states {
		b[i] = byte(s)
	}
	return Combination(b)
}

// Label names the states of those units, as Words does; all of them for no
// units.
func (c Combination) Label(units []Unit, only ...int) string {
	var names, states []string
	add := func(i int) { names, states = append(names, units[i].Name), append(states, units[i].States[c.State(i)]) }
	for _, i := range only {
		add(i)
	}
	if len(only) == 0 {
		for i := range units {
			add(i)
		}
	}
	return Words(names, states)
}

// mostNamed is how many units of one state are named; of more the first is.
const mostNamed = 3

// Words says how systems stand, those of one state together, in order of the
// first: "blind 1 and 11 more: tilt -32.1, roller: drawn". It is for reading:
// combinations that differ may read alike.
func Words(names, states []string) string {
	of := map[string][]string{}
	var order []string
	for i, s := range states {
		if of[s] == nil {
			order = append(order, s)
		}
		of[s] = append(of[s], names[i])
	}
	var words []string
	for _, s := range order {
		list := strings.Join(of[s], ", ")
		if n := len(of[s]); n > mostNamed {
			list = fmt.Sprintf("%s and %d more", of[s][0], n-1)
		}
		words = append(words, list+": "+s)
	}
	return strings.Join(words, ", ")
}

// lacking is the error of a law whose facts were not given.
func lacking(u *Unit, fact string) error {
	return fmt.Errorf("control: %q: its law asks for %s, got none", u.Name, fact)
}
