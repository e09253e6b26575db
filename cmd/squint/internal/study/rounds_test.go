package study

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"
	"testing/fstest"
)

// operatedRoom is the tiny room with a roller, in use all day on all days, its
// eyes to the window.
func operatedRoom(more string) fstest.MapFS {
	text := fmt.Sprintf(tinyProject, 0.8)
	text = replaceOnce(text, "azimuth_deg = 90", "azimuth_deg = 180")
	text = replaceOnce(text, `days = ["wed"]`, `days = ["mon", "tue", "wed", "thu", "fri", "sat", "sun"]`)
	text = replaceOnce(text, "from = \"11:00\"\nto = \"12:00\"", "from = \"09:00\"\nto = \"17:00\"")
	return fstest.MapFS{"project.toml": {Data: []byte(text + more)}, "room.obj": {Data: []byte(tinyRoom())}}
}

const operatedRoller = `
[[roller]]
name = "roller"
opening = "window"
openness = 0.03
diffuse_transmittance = 0.05
reflectance = 0.5
drawn = false
`

// TestOperatedYear: a roller that closes for glare gives, hour by hour, either
// the value of the room with it raised, where that is below the limit, or the
// value with it drawn; light on the desks goes with it. Both are computed as
// projects of their own.
func TestOperatedYear(t *testing.T) {
	for _, stepMin := range []int{60, 15} {
		if stepMin < 60 && testing.Short() {
			continue
		}
		t.Run(fmt.Sprint(stepMin), func(t *testing.T) { testOperatedYear(t, stepMin) })
	}
}

func testOperatedYear(t *testing.T, stepMin int) {
	run := func(more string) *Result {
		fsys := operatedRoom(more)
		fsys["project.toml"].Data = []byte(replaceOnce(string(fsys["project.toml"].Data), "[simulation]", fmt.Sprintf("[simulation]\nstep_min = %d", stepMin)))
		fsys["site.epw"] = &fstest.MapFile{Data: tinyYear(t)}
		in, err := prepareFile(fsys, "project.toml", "", 2)
		if err != nil {
			t.Fatal(err)
		}
		in.Project.Criteria.Glare = "none" // no closer looks
		r, err := Run(t.Context(), in, Options{Workers: 2})
		if err != nil {
			t.Fatal(err)
		}
		return r
	}
	const limit = 0.4
	open := run(operatedRoller)
	drawn := run(replaceOnce(operatedRoller, "drawn = false", "drawn = true"))
	led := run(operatedRoller + "[[control]]\nname = \"by glare\"\nsystems = [\"roller\"]\nrule = \"glare\"\ndgp_limit = 0.4\nhysteresis = 0\n")
	closed, hours := 0, 0
	var light, all float64
	worst := float32(0)
	for _, m := range open.Climate.Moments {
		h := m.Step
		want, state := open, "roller: raised"
		if m.Occupied && open.Views[0].DGP[h] > limit {
			want, state = drawn, "roller: drawn"
			closed++
		}
		if m.Occupied {
			hours++
			for k := range want.Planes[0].E {
				light += float64(want.Planes[0].E[k][h])
				all += float64(open.Planes[0].E[k][h])
			}
			worst = max(worst, want.Views[0].DGP[h])
			if got := led.Views[0].DGP[h]; got != want.Views[0].DGP[h] {
				t.Errorf("hour %d, %s: DGP %g, want %g", h, state, got, want.Views[0].DGP[h])
			}
		}
		if got := led.Planes[0].E[0][h]; m.Occupied && got != want.Planes[0].E[0][h] {
			t.Errorf("hour %d, %s: %g lx, want %g", h, state, got, want.Planes[0].E[0][h])
		}
		if got := led.Standings[led.Standing[h]]; m.Occupied && got != state {
			t.Errorf("hour %d: stands %q, want %q", h, got, state)
		}
	}
	if closed == 0 || closed == hours {
		t.Fatalf("closed in %d of %d hours: the test sees nothing", closed, hours)
	}
	// Hours of use in the dark count as shaded by no one.
	g := led.Operation.Groups[0]
	if len(led.Operation.Groups) != 1 || len(g.States) != 2 || g.States[1].InUseH != open.Calendar.InHours(closed) {
		t.Errorf("group: got %+v, want %g hours drawn", g, open.Calendar.InHours(closed))
	}
	if want := float64(closed) / float64(hours) * (1 - 0.03); math.Abs(g.ViewLost-want) > 1e-9 {
		t.Errorf("view lost: got %g, want %g", g.ViewLost, want)
	}
	if want := 1 - light/all; math.Abs(led.Operation.LightLost-want) > 1e-6 || want <= 0 {
		t.Errorf("light lost: got %g, want %g", led.Operation.LightLost, want)
	}
	if w := led.Views[0].Worst; w == nil || float32(w.DGP) != worst || led.Views[0].DGP[w.Moment.Step] != worst {
		t.Errorf("worst hour: got %+v, want DGP %g", w, worst)
	}
}

// replaceOnce edits a project's text, in which the old words stand once.
func replaceOnce(text, from, to string) string {
	if n := strings.Count(text, from); n != 1 {
		panic(fmt.Sprintf("the project has %q %d times, want once", from, n))
	}
	return strings.Replace(text, from, to, 1)
}

// TestOpenFactors: daylight factors are those of the most open position that
// occurs, whatever its name: "drawn" comes before "raised". What follows the open
// one does not change them. ASE is that without what is operated, but for sensors
// that an edge of the sun's patch crosses, where it goes by the sun's middle.
func TestOpenFactors(t *testing.T) {
	of := func(more string) *PlaneResult {
		in := prepared(t, operatedRoom(operatedRoller+more))
		in.Project.Criteria.Glare = "none"
		return &study(t, in, 2).Planes[0]
	}
	open := of("")
	operated := of("[[control]]\nname = \"noon\"\nsystems = [\"roller\"]\nrule = \"timetable\"\ntimetable = [{ from = \"09:00\", to = \"15:00\", state = \"drawn\" }]\n")
	shut := of("[[control]]\nname = \"always\"\nsystems = [\"roller\"]\nrule = \"timetable\"\ntimetable = [{ state = \"drawn\" }]\n")
	// Another cloth that is always down is no reason to take the roller for drawn.
	const voile = "[[roller]]\nname = \"voile\"\nopening = \"window\"\nposition = \"outside\"\nopenness = 0.3\ndiffuse_transmittance = 0.4\nreflectance = 0.3\ndrawn = true\n"
	veiled, both := of(voile), of(voile+"[[control]]\nname = \"noon\"\nsystems = [\"roller\"]\nrule = \"timetable\"\ntimetable = [{ from = \"09:00\", to = \"15:00\", state = \"drawn\" }]\n")
	sunny := 0.0
	for i := range open.Factor {
		if both.Factor[i] != veiled.Factor[i] {
			t.Errorf("sensor %d: got %g behind a fixed cloth, want %g as with the roller up", i, both.Factor[i], veiled.Factor[i])
		}
		if operated.Factor[i] != open.Factor[i] {
			t.Errorf("sensor %d: got %g, want %g as with the roller up", i, operated.Factor[i], open.Factor[i])
		}
		if shut.Factor[i] > open.Factor[i]/2 {
			t.Errorf("sensor %d: %g with the roller always down and %g with it up: the test sees nothing", i, shut.Factor[i], open.Factor[i])
		}
		sunny += open.ASE.SensorHours[i]
		for _, p := range []*PlaneResult{operated, shut} {
			if off := math.Abs(p.ASE.SensorHours[i] - open.ASE.SensorHours[i]); off > 2 {
				t.Errorf("sensor %d: ASE counts %g hours with a roller that is operated, want %g as without", i, p.ASE.SensorHours[i], open.ASE.SensorHours[i])
			}
		}
	}
	most := float32(0)
	for _, e := range shut.Direct {
		most = max(most, slices.Max(e))
	}
	if sunny < 20 || most > 5000 {
		t.Errorf("%g hours of sun in all, %g lx behind the roller: the test sees nothing", sunny, most)
	}
}
