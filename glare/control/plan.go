package control

import (
	"fmt"
	"slices"
)

// Plan finds the states of all units at all steps, in rounds.
type Plan struct {
	units []Unit
	steps []Step
	base  [][]int  // of the laws, [unit][step]
	used  [][]bool // somebody is there whom the unit serves, [unit][step]
	days  [][2]int
	known map[Need]Observed
}

// Need is a combination that is to be looked at in a step.
type Need struct {
	Step   int // index among the steps
	States Combination
}

// maxStates is what a byte of a Combination holds.
const maxStates = 256

// New settles what the laws of the units choose by themselves. facts returns
// those of a unit. Steps are in order of time.
func New(units []Unit, steps []Step, facts func(unit int) Facts) (*Plan, error) {
	p := &Plan{units: units, steps: steps, known: map[Need]Observed{}}
	for i := range units {
		u := &units[i]
		if len(u.States) == 0 || len(u.States) > maxStates {
			return nil, fmt.Errorf("control: %q: got %d states, want 1 to %d", u.Name, len(u.States), maxStates)
		}
		if g := u.Glare; g != nil && !(g.Limit > 0 && g.Hysteresis >= 0 && g.Hysteresis < g.Limit) {
			return nil, fmt.Errorf("control: %q: got a DGP limit of %g with a hysteresis of %g, want a limit above 0 and a hysteresis from 0 to below it", u.Name, g.Limit, g.Hysteresis)
		}
		f := facts(i)
		list, err := u.Law.Choose(u, steps, f)
		if err != nil {
			return nil, err
		}
		for _, s := range list {
			if s < 0 || s >= len(u.States) {
				return nil, fmt.Errorf("control: %q: its law chose state %d, want 0 to %d", u.Name, s, len(u.States)-1)
			}
		}
		p.base, p.used = append(p.base, list), append(p.used, f.inUse(steps))
	}
	for i, s := range steps {
		if !(s.Share > 0 && s.Share <= 1) {
			return nil, fmt.Errorf("control: step %d: got a share of %g of an hour, want above 0 to 1", i, s.Share)
		}
		if i == 0 || s.Day != steps[i-1].Day {
			p.days = append(p.days, [2]int{i, i})
		}
		p.days[len(p.days)-1][1] = i + 1
	}
	return p, nil
}

// Needs lists, in order of time, what must be looked at next; none when every
// step is settled. Where a step hangs on an earlier one of its day that is
// open still, what it will most likely need is listed too, so that days take
// few rounds.
func (p *Plan) Needs() []Need {
	var list []Need
	for _, d := range p.days {
		_, needs := p.day(d)
		list = append(list, needs...)
	}
	return list
}

// Learn takes what was seen in a combination at a step.
func (p *Plan) Learn(n Need, o Observed) error {
	if n.Step < 0 || n.Step >= len(p.steps) || len(n.States) != len(p.units) {
		return fmt.Errorf("control: got step %d and states of %d units, want 0 to %d and %d", n.Step, len(n.States), len(p.steps)-1, len(p.units))
	}
	if err := o.check(); err != nil {
		return err
	}
	for i, u := range p.units {
		if g := u.Glare; g != nil && len(g.Viewpoints) > 0 && slices.Max(g.Viewpoints) >= len(o.DGP) {
			return fmt.Errorf("control: %q: watches viewpoint %d, got DGP of %d", p.units[i].Name, slices.Max(g.Viewpoints)+1, len(o.DGP))
		}
	}
	p.known[n] = o
	return nil
}

// Chosen is the combination of every step; of steps that are not settled, as
// far as is known.
func (p *Plan) Chosen() []Combination {
	list := make([]Combination, len(p.steps))
	for _, d := range p.days {
		states, _ := p.day(d)
		copy(list[d[0]:d[1]], states)
	}
	return list
}

// day walks through the steps of a day by what is known.
func (p *Plan) day(d [2]int) ([]Combination, []Need) {
	var chosen []Combination
	var needs []Need
	held := make([]int, len(p.units)) // what glare asked for last
	for i := d[0]; i < d[1]; i++ {
		states, need := p.step(i, held)
		chosen = append(chosen, combination(states))
		if need {
			needs = append(needs, Need{i, combination(states)})
		}
		for k, s := range states {
			if s <= p.base[k][i] { // the law alone has it there: what glare asked for before holds up to it
				s = min(s, held[k])
			}
			held[k] = s
		}
	}
	return chosen, needs
}

// step closes units from where they start until no glare is left or nothing
// more can close; need is that the last combination must be looked at first.
func (p *Plan) step(i int, held []int) (states []int, need bool) {
	states = make([]int, len(p.units))
	for k := range p.units {
		states[k] = p.base[k][i]
		if g := p.units[k].Glare; g != nil && (g.Reopen == NextMorning || !p.used[k][i]) {
			states[k] = max(states[k], held[k]) // nobody opens it now
		}
	}
	for p.canClose(i, states) {
		o, ok := p.known[Need{i, combination(states)}]
		if !ok {
			return states, true
		}
		if !p.close(i, states, held, o) {
			break
		}
	}
	return states, false
}

func (p *Plan) canClose(step int, states []int) bool {
	for k := range states {
		if p.closes(k, step, states) {
			return true
		}
	}
	return false
}

// closes is whether glare can close unit k further at a step.
func (p *Plan) closes(k, step int, states []int) bool {
	return p.units[k].Glare != nil && p.used[k][step] && states[k] < len(p.units[k].States)-1
}

// close closes by one state each unit that a viewpoint with glare asks; false
// where none does.
func (p *Plan) close(step int, states, held []int, o Observed) bool {
	asked := make([]bool, len(states))
	for v, dgp := range o.DGP {
		var able, seen []int // units that react to this viewpoint
		for k := range states {
			g := p.units[k].Glare
			if !p.closes(k, step, states) || !g.watches(v) || !g.above(dgp, states[k] < held[k]) {
				continue
			}
			able = append(able, k)
			if o.through(v, p.units[k].Group) {
				seen = append(seen, k)
			}
		}
		if len(seen) == 0 {
			seen = able // behind those that are closed
		}
		for _, k := range seen {
			asked[k] = true
		}
	}
	moved := false
	for k, yes := range asked {
		if yes {
			states[k]++
			moved = true
		}
	}
	return moved
}

// Open is the most open combination, see Open.
func (p *Plan) Open() Combination { return Open(p.units) }

// Open is the most open combination that units can stand in: each in its first
// state, but for those that always stand in another.
func Open(units []Unit) Combination {
	states := make([]int, len(units))
	for i, u := range units {
		if a, ok := u.Law.(Always); ok && u.Glare == nil {
			states[i] = a.State
		}
	}
	return combination(states)
}
