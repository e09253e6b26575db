package control

import (
	"math"
	"slices"
	"testing"
)

// TestInUse: a unit that serves one room of two acts while somebody is in that
// room; while only the other is in use nobody closes it or opens it again.
func TestInUse(t *testing.T) {
	// Clock hours 8 to 12; the unit's room is in use from 9 to 11 h.
	var steps []Step
	for h := 8; h < 12; h++ {
		steps = append(steps, Step{At: h, ClockH: float64(h) + 0.5, Share: 1, Occupied: true})
	}
	own := func(i int) bool { return i == 1 || i == 2 }
	units := []Unit{
		{Name: "own", Group: "a", States: []string{"open", "shut"}, Law: Always{}, Glare: &Glare{Limit: .4}},
		{Name: "all", Group: "b", States: []string{"open", "shut"}, Law: Always{}, Glare: &Glare{Limit: .4}},
	}
	p, err := New(units, steps, func(k int) Facts {
		if k == 0 {
			return Facts{InUse: own}
		}
		return Facts{}
	})
	if err != nil {
		t.Fatal(err)
	}
	// It glares through both at 8 and at 9 h, never with both shut, and from 10 h on no more.
	run(t, p, func(i int, c Combination) Observed {
		dgp := 0.2
		if i < 2 && (c.State(0) == 0 || c.State(1) == 0) {
			dgp = 0.6
		}
		return Observed{DGP: []float64{dgp}}
	})
	if a, b := statesOf(p, 0, 0, 4), statesOf(p, 1, 0, 4); !slices.Equal(a, []int{0, 1, 0, 0}) || !slices.Equal(b, []int{1, 1, 0, 0}) {
		t.Errorf("got %v and %v, want [0 1 0 0] and [1 1 0 0]", a, b)
	}
	r := p.Report(Losses{})
	if g := r.Groups[0]; g.ShadedShare != 0.5 || g.States[0].InUseH+g.States[1].InUseH != 2 || g.States[0].DaylightH+g.States[1].DaylightH != 4 {
		t.Errorf("own: got %+v, want 2 h of use, one of them shaded", g)
	}
	if g := r.Groups[1]; g.ShadedShare != 0.5 || g.States[0].InUseH+g.States[1].InUseH != 4 {
		t.Errorf("all: got %+v, want 4 h of use, two of them shaded", g)
	}

	// Glare at 10 h: shut from then on, since nobody is there to open it at 11 h.
	p, err = New(units[:1], steps, func(int) Facts { return Facts{InUse: own} })
	if err != nil {
		t.Fatal(err)
	}
	run(t, p, func(i int, c Combination) Observed {
		if i == 2 && c.State(0) == 0 {
			return Observed{DGP: []float64{0.6}}
		}
		return Observed{DGP: []float64{0.2}}
	})
	if got := statesOf(p, 0, 0, 4); !slices.Equal(got, []int{0, 0, 1, 1}) {
		t.Errorf("got %v, want [0 0 1 1]", got)
	}
	if g := p.Report(Losses{}).Groups[0]; math.Abs(g.ShadedShare-0.5) > 1e-12 {
		t.Errorf("got %+v, want one of two hours of use shaded", g)
	}

	// By hand: sun on the desk all morning is borne until its user is there.
	sun := Facts{InUse: own, DeskWm2: func(int) []float64 { return []float64{100} }}
	if got, err := (Active{CloseWm2: 50, Closed: 1}).Choose(&units[0], steps, sun); err != nil || !slices.Equal(got, []int{0, 1, 1, 1}) {
		t.Errorf("by hand: got %v, %v, want [0 1 1 1]", got, err)
	}
}
