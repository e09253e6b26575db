package study

import (
	"context"
	"math"
	"slices"
	"strings"
	"testing"

	"squint/glare/daylight"
	"squint/scene"
	"squint/scene/project"
)

// asking is a limit of the project's own on illuminance in use: reached in a
// twentieth of the hours, which the 36 lit ones of evenRoom are more than.
func asking(lx, placeShare float64) project.Limit {
	return project.Limit{Metric: project.LimitIlluminance, Hours: project.HoursInUse, AtLeast: &lx, TimeShare: 0.05, PlaceShare: placeShare}
}

// TestCloserReplaces: of the sensors and hours that leave a limit undecided the
// further look replaces the values; all others stay bit by bit. A limit that is
// decided is left alone, however uncertain a sensor.
func TestCloserReplaces(t *testing.T) {
	in := evenRoom(t, 5000)
	in.Scene.Viewpoints = nil
	r := &Result{Project: in.Project, Scene: in.Scene, Climate: in.Climate, Calendar: in.Calendar, Occupied: in.Occupied}
	opt := Options{Workers: 1, Progress: func(Stage, int, int) {}}
	y, err := computeYear(context.Background(), in, opt, r)
	if err != nil {
		t.Fatal(err)
	}
	truth := y.light.E[1][0]
	limit := 3 * truth
	for s := range y.light.E {
		for k := range y.light.E[s] {
			y.light.E[s][k], y.light.StdErr[s][k] = 10*limit, 1
		}
	}
	for k := range 30 { // but six hours far above, too few to matter
		y.light.E[1][k], y.light.StdErr[1][k] = limit, 0.1*limit
	}
	for _, c := range []struct {
		placeShare float64
		looks      int
	}{{0.75, 0}, {1, 1}} { // three of the four sensors reach it surely
		in.Project.Limits = []project.Limit{asking(float64(limit), c.placeShare)}
		r.Notes = nil
		if err := r.lookCloser(context.Background(), in, opt, y); err != nil {
			t.Fatal(err)
		}
		if !slices.Equal(y.looks, []int{c.looks}) {
			t.Fatalf("%g of the sensors asked: got %v further looks, want %d", c.placeShare, y.looks, c.looks)
		}
		if c.looks == 0 && y.light.E[1][0] != limit {
			t.Error("a decided limit was looked at again")
		}
	}
	for s := range y.light.E {
		for k, got := range y.light.E[s] {
			se := y.light.StdErr[s][k]
			if open := s == 1 && k < 30; !open && (got != 10*limit || se != 1) {
				t.Errorf("sensor %d, hour %d: got %g +- %g lx, want it untouched", s, k, got, se)
			} else if open && !(math.Abs(float64(got/truth-1)) < 0.1 && se < 0.05*truth && se > 0) {
				t.Errorf("sensor %d, hour %d: got %g +- %g lx, want the computed %g within a tenth", s, k, got, se, truth)
			} else if open && got == truth {
				t.Errorf("sensor %d, hour %d: got the first look's own bits, want random numbers of its own", s, k)
			}
		}
	}
	if n := strings.Join(r.Notes, "\n"); !strings.Contains(n, "look 2: 30 hours of 1 sensor lay too near a limit and were computed again with 4 times the rays and ") {
		t.Errorf("notes: got %q", n)
	}
}

// TestCloserFactors: daylight factors and moments under a clear sky that leave a
// criterion undecided are looked at again too, with less error.
func TestCloserFactors(t *testing.T) {
	first := furtherInput(t)
	first.Project.Limits = nil
	first.Project.Criteria = project.Criteria{Glare: "none", EquinoxAtLeast: first.Project.Criteria.EquinoxAtLeast, EquinoxHighLx: 1e6}
	r := study(t, first, 2)
	p := &r.Planes[0]
	if p.Refined != 0 {
		t.Fatalf("got %d further looks with nothing near a limit", p.Refined)
	}
	// The darkest sensor of each decides.
	dark, s, k := 0, 0, 0
	for i := range p.Factor {
		if p.Factor[i] < p.Factor[dark] {
			dark = i
		}
		for n := range p.Clear.E[i] {
			if p.Clear.E[i][n] < p.Clear.E[s][k] {
				s, k = i, n
			}
		}
	}
	again := furtherInput(t)
	again.Project.Criteria = first.Project.Criteria
	again.Project.Criteria.EquinoxLowLx = float64(p.Clear.E[s][k])
	again.Project.Criteria.EquinoxAtLeast = new(float64)
	*again.Project.Criteria.EquinoxAtLeast = 1
	again.Project.Limits = []project.Limit{{Metric: project.LimitDaylightFactor, AtLeast: &p.Factor[dark], TimeShare: 1, PlaceShare: 1}}
	q := study(t, again, 2).Planes[0]
	if q.Refined == 0 {
		t.Fatal("got no further look with sensors on their limits")
	}
	if !(q.FactorError[dark] < 0.75*p.FactorError[dark]) || q.Factor[dark] == p.Factor[dark] {
		t.Errorf("daylight factor: got %g +- %g, before %g +- %g", q.Factor[dark], q.FactorError[dark], p.Factor[dark], p.FactorError[dark])
	}
	if !(q.Clear.SE[s][k] < 0.75*p.Clear.SE[s][k]) || q.Clear.E[s][k] == p.Clear.E[s][k] {
		t.Errorf("clear sky: got %g +- %g lx, before %g +- %g", q.Clear.E[s][k], q.Clear.SE[s][k], p.Clear.E[s][k], p.Clear.SE[s][k])
	}
	for i := range p.E {
		if !slices.Equal(p.E[i], q.E[i]) {
			t.Errorf("sensor %d: the year changed, which nothing asks about", i)
		}
	}
}

// TestSensorsIn: sensors are picked by their number among all planes, and
// planes without any are left out.
func TestSensorsIn(t *testing.T) {
	s := &scene.Scene{Viewpoints: make([]scene.Viewpoint, 2)}
	for p, n := range []int{3, 2, 4} {
		w := scene.WorkPlane{Name: string(rune('a' + p)), Sensors: make([]scene.Sensor, n)}
		for k := range w.Sensors {
			w.Sensors[k].Position.X = float64(10*p + k)
		}
		s.WorkPlanes = append(s.WorkPlanes, w)
	}
	few := sensorsIn(s, []int{0, 2, 5, 8})
	var got []float64
	var names string
	for _, w := range few.WorkPlanes {
		names += w.Name
		for _, x := range w.Sensors {
			got = append(got, x.Position.X)
		}
	}
	if want := []float64{0, 2, 20, 23}; !slices.Equal(got, want) || names != "ac" || len(few.Viewpoints) != 0 {
		t.Errorf("got sensors %v of planes %q with %d viewpoints, want %v of \"ac\" with none", got, names, len(few.Viewpoints), want)
	}
	if len(s.WorkPlanes[0].Sensors) != 3 {
		t.Error("the scene was changed")
	}
}

// TestCloserOperated: where a roller moves, hours are looked at again in the
// combination in which it stood, daylight factors in the open one: nothing moves
// by more than the noise, and drawn cloth takes nine tenths of the light. One
// thread and two say the same.
func TestCloserOperated(t *testing.T) {
	if testing.Short() {
		t.Skip("three years of a room")
	}
	run := func(workers int, limits ...project.Limit) *Result {
		fsys := operatedRoom(operatedRoller + "[[control]]\nname = \"by glare\"\nsystems = [\"roller\"]\nrule = \"glare\"\ndgp_limit = 0.4\nhysteresis = 0\n")
		in := prepared(t, fsys)
		in.Project.Criteria = project.Criteria{Glare: "none"}
		in.Project.Limits = limits
		return study(t, in, workers)
	}
	first := run(2)
	p := &first.Planes[0]
	plane := daylight.Plane{E: p.E, SE: p.StdErr}
	lx := plane.Reached(0, first.Occupied, 0.02).Estimate // of 3 % with light
	limits := []project.Limit{
		{Metric: project.LimitIlluminance, Hours: project.HoursInUse, AtLeast: &lx, TimeShare: 0.02, PlaceShare: 0.25},
		{Metric: project.LimitIlluminance, Hours: project.HoursInUse, AtLeast: &lx, TimeShare: 0.02, PlaceShare: 1},
		{Metric: project.LimitDaylightFactor, AtLeast: &p.Factor[0], TimeShare: 1, PlaceShare: 0.25},
		{Metric: project.LimitDaylightFactor, AtLeast: &p.Factor[0], TimeShare: 1, PlaceShare: 1},
	}
	again := run(2, limits...)
	q := &again.Planes[0]
	if q.Refined == 0 || q.Factor[0] == p.Factor[0] {
		t.Fatalf("got %d further looks and a daylight factor of %g as before: the test sees nothing", q.Refined, q.Factor[0])
	}
	if math.Abs(q.Factor[0]/p.Factor[0]-1) > 0.4 {
		t.Errorf("daylight factor: got %g, before %g", q.Factor[0], p.Factor[0])
	}
	changed := map[string]int{}
	for s := range p.E {
		for h := range p.E[s] {
			a, b := float64(p.E[s][h]), float64(q.E[s][h])
			if a != b {
				changed[first.Standings[first.Standing[h]]]++
			}
			if a > 50 && math.Abs(b/a-1) > 0.6 {
				t.Errorf("sensor %d, hour %d: got %g lx, before %g", s, h, b, a)
			}
		}
	}
	if len(changed) == 0 {
		t.Error("no hour was looked at again")
	}
	t.Logf("%d further looks, hours changed by position: %v", q.Refined, changed)
	one := run(1, limits...)
	for s := range q.E {
		if !slices.Equal(one.Planes[0].E[s], q.E[s]) || !slices.Equal(one.Planes[0].StdErr[s], q.StdErr[s]) {
			t.Errorf("sensor %d differs with one thread", s)
		}
	}
}
