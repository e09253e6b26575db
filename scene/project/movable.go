package project

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/system"
)

// States that rollers and blinds have whatever the project names.
const (
	RaisedState = "raised"
	DrawnState  = "drawn"
)

// Movable is a system that stands in one of several states. Names of movables
// are unique in a project.
type Movable struct {
	Name, Opening string
	Kind          string // "roller", "blind", "louvres" or "anidolic_ceiling", whose roller moves
	// States, at least two: of rollers raised and drawn; of blinds raised,
	// then the named ones, those of Follow, or drawn; of louvres the named ones
	// or those of Follow; of anidolic ceilings raised and drawn.
	States   []string
	Standing string // the state in which the project has it; "" for none of them
	// Follow chooses among States[FollowFrom:]; nil where the system follows
	// no law.
	Follow     Chooser
	FollowFrom int
}

// Chooser is a law that slats or a roller follow.
type Chooser interface {
	States() []system.State
	// Choose returns the index of the state, among States, that suits the sun
	// at that opening.
	Choose(sun r3.Vec, r system.Rect) int
}

// Movables are the systems of the project that move: rollers, blinds, louvres
// and the rollers of anidolic ceilings, in that order, each in the file's. Louvres with a single tilt are
// fixed.
func Movables(p *Project) []Movable {
	var list []Movable
	for _, ro := range p.Rollers {
		m := Movable{Name: ro.Name, Opening: ro.Opening, Kind: "roller", States: []string{RaisedState, DrawnState}, Standing: RaisedState}
		if ro.Drawn {
			m.Standing = DrawnState
		}
		list = append(list, m)
	}
	for _, b := range p.Blinds {
		m := Movable{Name: b.Name, Opening: b.Opening, Kind: "blind", States: []string{RaisedState}, FollowFrom: 1}
		b.Slats.moves(&m)
		if len(m.States) == 1 {
			m.States, m.Standing = append(m.States, DrawnState), DrawnState
		}
		if b.Raised {
			m.Standing = RaisedState
		}
		list = append(list, m)
	}
	for _, l := range p.Louvres {
		m := Movable{Name: l.Name, Opening: l.Opening, Kind: "louvres"}
		if l.Slats.moves(&m); len(m.States) > 1 {
			list = append(list, m)
		}
	}
	for _, c := range p.AnidolicCeilings {
		if m, ok := c.moves(); ok {
			list = append(list, m)
		}
	}
	return list
}

// moves adds the states of the slats.
func (s Slats) moves(m *Movable) {
	for _, st := range s.positions() {
		m.States = append(m.States, st.Name)
		if st.TiltDeg == s.TiltDeg && m.Standing == "" {
			m.Standing = st.Name
		}
	}
	if f, ok := s.Follower(); ok {
		m.Follow = &f
	}
}

// positions are the named tilts, of the law that the slats follow too.
func (s Slats) positions() []SlatState {
	f, ok := s.Follower()
	if !ok {
		return s.States
	}
	var list []SlatState
	for _, st := range f.States() {
		list = append(list, SlatState{st.Name, st.TiltRad * 180 / math.Pi})
	}
	return list
}

// WithStates returns a copy of the project in which each movable that choice
// names stands in the state chosen; the others stand as they did. The project
// itself is not changed. It panics for a name or a state that is not among
// Movables(p), as the caller has taken both from there.
func WithStates(p *Project, choice map[string]string) *Project {
	q := *p
	q.Rollers, q.Blinds, q.Louvres = slices.Clone(p.Rollers), slices.Clone(p.Blinds), slices.Clone(p.Louvres)
	q.AnidolicCeilings = slices.Clone(p.AnidolicCeilings)
	left := len(choice)
	for i := range q.Rollers {
		ro := &q.Rollers[i]
		state, ok := choice[ro.Name]
		if !ok {
			continue
		}
		left--
		if state != RaisedState && state != DrawnState {
			panic(fmt.Sprintf("project: roller %q has no state %q", ro.Name, state))
		}
		ro.Drawn = state == DrawnState
	}
	for i := range q.Blinds {
		b := &q.Blinds[i]
		state, ok := choice[b.Name]
		if !ok {
			continue
		}
		left--
		b.Raised = state == RaisedState
		if !b.Raised && !(state == DrawnState && len(b.positions()) == 0) {
			b.stand(state)
		}
	}
	for i := range q.Louvres {
		l := &q.Louvres[i]
		if state, ok := choice[l.Name]; ok {
			left--
			l.stand(state)
		}
	}
	for i := range q.AnidolicCeilings {
		c := &q.AnidolicCeilings[i]
		state, ok := choice[c.Name]
		if !ok || c.Roller == "" {
			continue
		}
		left--
		if state != RaisedState && state != DrawnState {
			panic(fmt.Sprintf("project: anidolic ceiling %q has no state %q", c.Name, state))
		}
		c.RollerDrawn = state == DrawnState
	}
	if left != 0 {
		panic(fmt.Sprintf("project: got states of %d systems that do not move", left))
	}
	return &q
}

// HoldStates is WithStates, and what follows the sun stays in the state chosen.
func HoldStates(p *Project, choice map[string]string) *Project {
	q := WithStates(p, choice)
	held := func(name string) bool { _, ok := choice[name]; return ok }
	for i := range q.Blinds {
		if held(q.Blinds[i].Name) {
			q.Blinds[i].Follow = ""
		}
	}
	for i := range q.Louvres {
		if held(q.Louvres[i].Name) {
			q.Louvres[i].Follow = ""
		}
	}
	for i := range q.AnidolicCeilings {
		if held(q.AnidolicCeilings[i].Name) {
			q.AnidolicCeilings[i].RollerFollow = ""
		}
	}
	return q
}

func (s *Slats) stand(state string) {
	for _, st := range s.positions() {
		if st.Name == state {
			s.TiltDeg = st.TiltDeg
			return
		}
	}
	panic(fmt.Sprintf("project: slats %q have no state %q", s.Name, state))
}
