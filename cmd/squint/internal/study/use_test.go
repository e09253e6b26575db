package study

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"
	"testing/fstest"
)

// twoRooms edits the tiny room with its two viewpoints: the desk is in use from
// 9 to 12 h, the couch in another room from 13 to 16 h.
func twoRooms(more ...string) []string {
	return append([]string{noRefine, `glare = "none"`,
		`days = ["wed"]`, `days = ["mon", "tue", "wed", "thu", "fri", "sat", "sun"]`,
		"from = \"11:00\"\nto = \"12:00\"", "from = \"09:00\"\nto = \"12:00\"\n[[room]]\nname = \"lounge\"\nfrom = \"13:00\"\nto = \"16:00\"",
		"azimuth_deg = 90", "azimuth_deg = 135", // the morning's sun
		"name = \"couch\"", "name = \"couch\"\nroom = \"lounge\""}, more...)
}

// TestRooms: each viewpoint has values in its own room's hours alone, those of a
// check in which all is in use, and its worst hour and verdict go by them.
func TestRooms(t *testing.T) {
	got := check(t, memory{}, Options{}, twoRooms()...)
	all := check(t, memory{}, Options{}, twoRooms(`to = "12:00"`, `to = "16:00"`, "from = \"13:00\"", "from = \"09:00\"")...)
	if n := len(got.r.Occupied); n != 365*6 {
		t.Errorf("got %d hours in which any room is in use, want 365 times 6", n)
	}
	for i, hours := range [][2]float64{{9, 12}, {13, 16}} {
		v, w := &got.r.Views[i], &all.r.Views[i]
		if v.Hours[0].Total != 365*3 || w.Hours[0].Total != 365*7 {
			t.Errorf("%s: judged over %g h and %g h, want 365 times 3 and 7", v.Viewpoint.Name, v.Hours[0].Total, w.Hours[0].Total)
		}
		most := float32(0)
		for h, d := range v.DGP {
			_, clock := got.r.Calendar.ClockAt(h)
			used := clock > hours[0] && clock < hours[1]
			if used && d != w.DGP[h] || !used && d == d {
				t.Fatalf("%s, hour %d: got a DGP of %g, want %g where in use (%v)", v.Viewpoint.Name, h, d, w.DGP[h], used)
			}
			if used {
				most = max(most, d)
			}
		}
		if float32(v.Worst.DGP) != most || v.DGP[v.Worst.Moment.Step] != most {
			t.Errorf("%s: worst hour %d of %g, want %g", v.Viewpoint.Name, v.Worst.Moment.Step, v.Worst.DGP, most)
		}
	}
	if a, b := got.r.Planes[0].DA, all.r.Planes[0].DA; slices.Equal(a, b) {
		t.Error("the desks' autonomy does not know their hours")
	}

	// Without a store the same comes out, within the rounding of sums over other
	// blocks of moments.
	bare := check(t, nil, Options{}, twoRooms()...)
	for i, v := range bare.r.Views {
		for h, d := range v.DGP {
			if x := got.r.Views[i].DGP[h]; (x == x) != (d == d) || math.Abs(float64(x-d)) > 1e-4 {
				t.Fatalf("view %d, hour %d: got a DGP of %g with a store and %g without", i, h, x, d)
			}
		}
	}
}

// TestRoomsReuse: fewer hours of one room need no computing and give what a
// check of their own gives.
func TestRoomsReuse(t *testing.T) {
	store := memory{}
	check(t, store, Options{}, twoRooms("from = \"13:00\"", "from = \"10:00\"")...)
	again, own := check(t, store, Options{}, twoRooms()...), check(t, memory{}, Options{}, twoRooms()...)
	if again.engine() || again.r.Reused == "" {
		t.Errorf("traced %v, want all taken over", again.ran)
	}
	for i := range own.r.Views {
		a, b := &again.r.Views[i], &own.r.Views[i]
		if digest(a.DGP, a.StdErr, a.Ev, a.Cause, a.Worst.Moment.Step, a.Worst.Lum) != digest(b.DGP, b.StdErr, b.Ev, b.Cause, b.Worst.Moment.Step, b.Worst.Lum) {
			t.Errorf("view %d differs from that of a check of its own", i)
		}
	}
}

// TestRoomsControl: a roller that watches the couch stands by the lounge's hours,
// one that watches all by those of both rooms; where nobody is whom it serves it
// neither closes nor opens.
func TestRoomsControl(t *testing.T) {
	control := func(viewpoints string) *Result {
		text := fmt.Sprintf(tinyProject, 0.8) + secondView + operatedRoller + "[[control]]\nname = \"c\"\nsystems = [\"roller\"]\nrule = \"glare\"\nhysteresis = 0\n" + viewpoints
		for e := twoRooms(); len(e) > 0; e = e[2:] {
			text = replaceOnce(text, e[0], e[1])
		}
		return study(t, prepared(t, fstest.MapFS{"project.toml": {Data: []byte(text)}, "room.obj": {Data: []byte(tinyRoom())}}), 2)
	}
	drawn := func(r *Result) (morning, afternoon int) {
		for _, m := range r.Climate.Moments {
			_, clock := r.Calendar.ClockAt(m.Step)
			if !strings.Contains(r.Standings[r.Standing[m.Step]], "drawn") {
				continue
			}
			if clock < 12 {
				morning++
			} else if clock > 13 && clock < 16 {
				afternoon++
			}
		}
		return morning, afternoon
	}
	lounge := control("viewpoints = [\"couch\"]\n")
	if a, b := drawn(lounge); a != 0 || b == 0 {
		t.Errorf("watching the couch: drawn in %d hours of the morning and %d of the afternoon, want none and some", a, b)
	}
	if g := lounge.Operation.Groups[0]; len(g.States) != 2 || math.Abs(g.States[0].InUseH+g.States[1].InUseH-36) > 12 {
		t.Errorf("watching the couch: got %+v, want about three hours of use on twelve days", g)
	}
	everybody := control("")
	if a, b := drawn(everybody); a == 0 || b == 0 {
		t.Errorf("watching all: drawn in %d hours of the morning and %d of the afternoon, want some and some", a, b)
	}
}
