package control

import (
	"fmt"
	"math"
	"slices"
)

// Reopening says when a unit that glare has closed opens again.
type Reopening int

// The ways of opening again.
const (
	// ByHysteresis: in the next step in which, with the unit further open, the
	// viewpoints are not above the limit less the hysteresis.
	ByHysteresis Reopening = iota
	// NextMorning: not before the next day.
	NextMorning
)

// Glare closes a unit, state by state, while in use a viewpoint that it watches
// is above Limit.
type Glare struct {
	Limit      float64 // DGP
	Hysteresis float64 // DGP, 0 to below Limit
	Reopen     Reopening
	Viewpoints []int // that are watched; none: all
}

// above is whether the DGP at a viewpoint asks for more closing, from a state
// that is further open than the one that glare asked for last, or not.
func (g *Glare) above(dgp float64, reopening bool) bool {
	limit := g.Limit
	if reopening {
		limit -= g.Hysteresis
	}
	return dgp > limit
}

func (g *Glare) watches(viewpoint int) bool {
	return len(g.Viewpoints) == 0 || slices.Contains(g.Viewpoints, viewpoint)
}

// Observed is what the viewpoints see in one combination at one step.
type Observed struct {
	DGP []float64 // by viewpoint
	// Through lists for each viewpoint the groups of openings in which its
	// sources of glare are seen: only their units close, as long as one of them
	// can. Nil, or none for a viewpoint: all units close.
	Through [][]string
}

func (o Observed) check() error {
	if o.Through != nil && len(o.Through) != len(o.DGP) {
		return fmt.Errorf("control: got groups of %d viewpoints and DGP of %d, want the same number", len(o.Through), len(o.DGP))
	}
	for v, d := range o.DGP {
		if math.IsNaN(d) || math.IsInf(d, 0) {
			return fmt.Errorf("control: viewpoint %d: got a DGP of %g, want a number", v+1, d)
		}
	}
	return nil
}

// through is whether the sources of a viewpoint are seen in that group.
func (o Observed) through(viewpoint int, group string) bool {
	return o.Through == nil || len(o.Through[viewpoint]) == 0 || slices.Contains(o.Through[viewpoint], group)
}
