package control

import (
	"math"
	"slices"
	"testing"
)

// TestReportByGroup: two systems of one group are reported together, a third
// one of another group by itself, and steps count by their share.
func TestReportByGroup(t *testing.T) {
	strip := roller
	strip.Name, strip.Group = "strip", "above"
	units := []Unit{blind, roller, strip}
	steps := []Step{
		{At: 8, ClockH: 8.25, Share: 0.5, Occupied: true},
		{At: 8, ClockH: 8.75, Share: 0.5, Occupied: true},
		{At: 9, ClockH: 9.5, Share: 1, Occupied: true},
		{At: 20, ClockH: 20.5, Share: 1},
	}
	every := [7]bool{true, true, true, true, true, true, true}
	at := func(from, to float64, state int) Law {
		return Timetable{Periods: []Period{{Days: every, FromH: from, ToH: to, LastDay: 364, State: state}}}
	}
	units[0].Law, units[1].Law, units[2].Law = at(8.5, 21, 2), at(9, 10, 1), at(20, 21, 1)
	p := plan(t, units, steps)
	r := p.Report(Losses{
		View:  func(unit, state int) float64 { return []float64{0.9, 0.5, 0.1}[state] },
		Light: func(i int, c Combination) float64 { return 1000 - 100*float64(c.State(0)) },
	})
	want := []Lasting{
		{"blind, roller: raised", 0.5, 0.5},
		{"blind: shut, roller: raised", 1.5, 0.5},
		{"blind: shut, roller: drawn", 1, 1},
	}
	if g := r.Groups[0]; len(r.Groups) != 2 || g.Group != "south" || !slices.Equal(g.States, want) {
		t.Errorf("got %+v, want %+v", r.Groups, want)
	} else {
		// Of 2 hours in use: 0.5 with 0.81 of the view, 0.5 with 0.09, 1 with
		// 0.05, of 0.81.
		if want := 1 - (0.5*0.81+0.5*0.09+0.05)/(2*0.81); math.Abs(g.ViewLost-want) > 1e-12 || g.ShadedShare != 0.75 {
			t.Errorf("got view lost %g, shaded %g, want %g, 0.75", g.ViewLost, g.ShadedShare, want)
		}
	}
	if g := r.Groups[1]; g.Group != "above" || g.ShadedShare != 0 || g.ViewLost != 0 || !slices.Equal(g.States, []Lasting{{"strip: raised", 2, 2}, {"strip: drawn", 1, 0}}) {
		t.Errorf("got %+v, want the strip raised for 2 hours in use, drawn for one out of use", g)
	}
	if want := 1 - (0.5*1000+0.5*800+800)/2000; math.Abs(r.LightLost-want) > 1e-12 {
		t.Errorf("light lost: got %g, want %g", r.LightLost, want)
	}
	if r := plan(t, units, steps[3:]).Report(Losses{}); !math.IsNaN(r.LightLost) || !math.IsNaN(r.Groups[0].ShadedShare) || !math.IsNaN(r.Groups[0].ViewLost) {
		t.Errorf("nothing in use and no losses: got %+v, want NaN", r)
	}
}

// TestViewOfTwoOpenings: two openings of a group count alike.
func TestViewOfTwoOpenings(t *testing.T) {
	left, right := roller, roller
	left.Opening, right.Opening = "left", "right"
	left.Law = Always{1}
	p := plan(t, []Unit{left, right}, hourly(1, 0))
	r := p.Report(Losses{View: func(_, state int) float64 { return 1 - 0.9*float64(state) }})
	if got := r.Groups[0].ViewLost; math.Abs(got-0.45) > 1e-12 {
		t.Errorf("one of two openings with a tenth of its view: got %g lost, want 0.45", got)
	}
}

func TestWords(t *testing.T) {
	for _, c := range []struct {
		names, states []string
		want          string
	}{
		{[]string{"a"}, []string{"up"}, "a: up"},
		{[]string{"a", "b", "c"}, []string{"up", "down", "up"}, "a, c: up, b: down"},
		{[]string{"a", "b", "c", "d", "e"}, []string{"up", "up", "down", "up", "up"}, "a and 3 more: up, c: down"},
	} {
		if got := Words(c.names, c.states); got != c.want {
			t.Errorf("got %q, want %q", got, c.want)
		}
	}
}
