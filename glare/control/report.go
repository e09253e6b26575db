package control

import (
	"math"
	"slices"
	"sort"
)

// Lasting is how long a group of openings stands in one state of its units.
type Lasting struct {
	State     string  // Combination.Label of the group's units
	DaylightH float64 // hours of all steps
	InUseH    float64 // hours of those in which the group's units serve somebody
}

// GroupReport is the year of one group of openings. Shares are of the hours in
// use, 0 to 1; NaN without any.
type GroupReport struct {
	Group string
	// States are those that occur, the most open one first.
	States []Lasting
	// ShadedShare is how long any unit is not in its most open state.
	ShadedShare float64
	// ViewLost is the share of the view out through the openings that is
	// lost, of that with all units in their most open states. NaN without
	// Losses.View.
	ViewLost float64
}

// Report is the year of all groups.
type Report struct {
	Groups []GroupReport
	// LightLost is the share of the daylight of the hours in use that is lost
	// to units that are not in their most open state; negative where they
	// redirect more than they take. NaN without Losses.Light.
	LightLost float64
}

// Losses tell what each combination lets through. Either may be nil.
type Losses struct {
	// Light is the daylight at a step, such as the mean illuminance of the
	// work planes in lx. It is asked for the chosen combination and for the
	// open one, of steps in use.
	Light func(step int, c Combination) float64
	// View is the share of its opening's view that a unit in that state leaves,
	// 0 to 1, such as ViewLeft. What hangs behind each other at one opening is
	// multiplied, which holds for cloths without pattern; the openings of a
	// group count alike.
	View func(unit, state int) float64
}

// Report adds up the year as chosen.
func (p *Plan) Report(l Losses) Report {
	chosen := p.Chosen()
	r := Report{LightLost: math.NaN()}
	for _, u := range p.units {
		if !slices.ContainsFunc(r.Groups, func(g GroupReport) bool { return g.Group == u.Group }) {
			r.Groups = append(r.Groups, p.group(u.Group, chosen, l.View))
		}
	}
	if l.Light == nil {
		return r
	}
	var got, open float64
	for i, s := range p.steps {
		if s.Occupied {
			got += s.Share * l.Light(i, chosen[i])
			open += s.Share * l.Light(i, p.Open())
		}
	}
	r.LightLost = 1 - got/open // NaN in the dark
	return r
}

func (p *Plan) group(name string, chosen []Combination, view func(unit, state int) float64) GroupReport {
	nothing := combination(make([]int, len(p.units))) // in the way, not even what always hangs
	g := GroupReport{Group: name}
	var members []int
	for k, u := range p.units {
		if u.Group == name {
			members = append(members, k)
		}
	}
	lasting := map[Combination]*Lasting{} // by the states of the members
	var order []Combination
	var inUse, shaded, seen, whole float64
	for i, s := range p.steps {
		own := make([]int, len(members))
		closed := false
		for j, k := range members {
			own[j] = chosen[i].State(k)
			closed = closed || own[j] > 0
		}
		key := combination(own)
		if lasting[key] == nil {
			lasting[key] = &Lasting{State: chosen[i].Label(p.units, members...)}
			order = append(order, key)
		}
		lasting[key].DaylightH += s.Share
		if !slices.ContainsFunc(members, func(k int) bool { return p.used[k][i] }) {
			continue
		}
		lasting[key].InUseH += s.Share
		inUse += s.Share
		if view != nil {
			seen += s.Share * p.view(members, chosen[i], view)
			whole += s.Share * p.view(members, nothing, view)
		}
		if closed {
			shaded += s.Share
		}
	}
	sort.Slice(order, func(a, b int) bool { return order[a] < order[b] })
	for _, key := range order {
		g.States = append(g.States, *lasting[key])
	}
	g.ShadedShare, g.ViewLost = shaded/inUse, math.NaN()
	if view != nil {
		g.ViewLost = 1 - seen/whole
	}
	return g
}

// view adds up the shares of view that the openings of those units have.
func (p *Plan) view(members []int, c Combination, view func(unit, state int) float64) float64 {
	left := map[string]float64{}
	var order []string
	for _, k := range members {
		o := p.units[k].Opening
		if _, ok := left[o]; !ok {
			left[o], order = 1, append(order, o)
		}
		left[o] *= view(k, c.State(k))
	}
	sum := 0.0
	for _, o := range order {
		sum += left[o]
	}
	return sum
}
