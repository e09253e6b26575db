package annual_test

import (
	"encoding/csv"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/mesh"
	"squint/scene/sky"
	"squint/trace"
)

// roomWorld reads a room by the mesh reader and gives it its finishes.
func roomWorld(t *testing.T, dir, file string, texelM float64) *trace.World {
	me, err := mesh.Read(os.DirFS(dir), file, mesh.Options{Unit: mesh.Metre, Up: mesh.Z})
	if err != nil {
		t.Fatal(err)
	}
	m := newModel(t, texelM)
	finish := map[string]int32{"floor": m.matte(.2), "wall": m.matte(.5), "ceiling": m.matte(.7), "shelf_diffuse": m.matte(.5)}
	mirror, err := materials.NewMirror(.85, 0)
	if err != nil {
		t.Fatal(err)
	}
	finish["shelf_mirror"] = m.finish(mirror)
	parts := map[int32]int32{}
	for _, tri := range me.Triangles {
		p, ok := parts[tri.Group]
		if !ok {
			p = m.part(me.Groups[tri.Group], scene.Room)
			if strings.HasPrefix(me.Groups[tri.Group], "shelf") {
				m.s.Parts[p].Kind = scene.System
			}
			parts[tri.Group] = p
		}
		f, ok := finish[me.Materials[tri.Material]]
		if !ok {
			t.Fatalf("no finish for material %s", me.Materials[tri.Material])
		}
		m.tri(p, f, tri.V[0], tri.V[1], tri.V[2])
	}
	m.opening(r3.Vec{Y: -1}, r3.Vec{X: .2, Z: .9}, r3.Vec{X: 3.4, Z: .9}, r3.Vec{X: 3.4, Z: 2.6}, r3.Vec{X: .2, Z: 2.6})
	return m.world()
}

// TestRoomsWithAnswers holds both engines against rooms whose values are
// derived, not published: two estimators apart from this code that agree
// within their errors of 0.2 % or less. They are the overcast room, and of the mirrored-sun room the
// light that meets the sky or a diffuse surface first.
func TestRoomsWithAnswers(t *testing.T) {
	dir := sharedRooms(t)
	f, err := os.Open(filepath.Join(dir, "values.csv"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	rows = rows[1:]
	dome, err := sky.NewOvercastTraditional(sky.ByZenithLuminance(1))
	if err != nil {
		t.Fatal(err)
	}
	var sensors []scene.Sensor
	for _, r := range rows {
		if r[0] == "Ev" {
			sensors = append(sensors, scene.Sensor{Position: r3.Vec{X: 1.8, Y: 4, Z: 1.2}, Normal: r3.Vec{Y: -1}})
			continue
		}
		sensors = append(sensors, up(1.8, number(t, r[0][1:]), .8))
	}
	skyOnly := skyMoment(1, dome)
	sun := sunMoment(t, 2, deg(40), 0, 50)
	set := effort{batches: 32, texelSamples: 512, sensorSamples: 8192, texels: fineTexels, seed: 180}
	samples := 20000
	if testing.Short() {
		set.texelSamples, samples = 128, 4000
	}
	for _, c := range []struct {
		name, file string
		column     int
		moment     *scene.Moment
		texelM     float64
	}{
		{"overcast room", "overcast-room.obj", 1, skyOnly, .2},
		{"mirrored-sun room, sky", "mirrored-sun-room.obj", 7, skyOnly, .2},
		{"mirrored-sun room, sun on diffuse surfaces", "mirrored-sun-room.obj", 5, sun, .2},
	} {
		if testing.Short() && c.column != 1 {
			continue
		}
		oracle := parity{group: c.name + " (derived), path tracer"}
		engine := parity{group: c.name + " (derived), annual engine"}
		w := roomWorld(t, dir, c.file, c.texelM)
		moments := []*scene.Moment{c.moment}
		set := set
		p := plain(w, sensors, moments, samples, set.seed)
		y := year(t, w, sensors, moments, set)
		set.coarsen = 2
		coarse := year(t, w, sensors, moments, set)
		for i, r := range rows {
			want, se := number(t, r[c.column]), number(t, r[c.column+1])
			oracle.add(outcome{r[0], want, p[i][0].mean, p[i][0].stdErr, 4 * se, p[i][0].dof})
			// 577 patches for the sensors under the overcast sky, below 0.1 %
			// (sky.Patches.Average), and fineTexels for the texels, 0.3 %.
			engine.add(outcome{r[0], want, y[i][0].mean, y[i][0].stdErr,
				4*se + want*(.004+sweepBound(.5)) + texelBound(y[i][0].mean, coarse[i][0].mean), y[i][0].dof})
		}
		oracle.judge(t, .3)
		engine.judge(t, .05)
	}
}
