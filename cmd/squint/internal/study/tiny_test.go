package study

import (
	"context"
	"fmt"
	"io/fs"
	"strings"
	"testing"
	"testing/fstest"

	"squint/cmd/squint/demo"
	"squint/scene/project"
)

// tinyProject is a room of 4 by 4 m with one window to the south, a pair of
// eyes that look along it and four sensors, in use for one hour a week.
const tinyProject = `title = "Tiny room"
invented = true

[weather]
file = "site.epw"

[ground]
level_m = -0.5

[occupancy]
days = ["wed"]
from = "11:00"
to = "12:00"

[[mesh]]
file = "room.obj"
unit = "m"
up = "z"
finish = "white"

[[finish]]
name = "white"
type = "matte"
reflectance = 0.6

[[finish]]
name = "glass"
type = "glazing"
transmittance = 0.78

[[opening]]
name = "window"
corners_m = [[0.5, -0.15, 1], [3.5, -0.15, 1], [3.5, -0.15, 2.5], [0.5, -0.15, 2.5]]
glazing = "glass"

[[viewpoint]]
name = "desk"
position_m = [2, 2, 1.2]
azimuth_deg = 90

[[work_plane]]
name = "desks"
polygon_m = [[0, 0], [4, 0], [4, 4], [0, 4]]
spacing_m = 1.5

[criteria]
glare = "medium"

[simulation]
fisheye_pixels = 16
samples_per_pixel = 8
sensor_samples = 64
texel_samples = 8
photons = 64
texel_m = %g
`

// box is one by its lowest and its highest corner, metres.
type box [6]float64

// tinyRoom is its model: 0.3 m of floor, ceiling and walls around the room, with
// a hole for the window, and further boxes.
func tinyRoom(more ...box) string {
	var b strings.Builder
	n := 0
	add := func(x0, y0, z0, x1, y1, z1 float64) {
		for i := range 8 {
			p := [3]float64{x0, y0, z0}
			for k, hi := range [3]float64{x1, y1, z1} {
				if i>>k&1 == 1 {
					p[k] = hi
				}
			}
			fmt.Fprintf(&b, "v %g %g %g\n", p[0], p[1], p[2])
		}
		// Corner numbers count x by 1, y by 2, z by 4; fronts outwards.
		for _, f := range [6][4]int{{0, 2, 3, 1}, {4, 5, 7, 6}, {0, 1, 5, 4}, {2, 6, 7, 3}, {0, 4, 6, 2}, {1, 3, 7, 5}} {
			fmt.Fprintf(&b, "f %d %d %d %d\n", n+f[0]+1, n+f[1]+1, n+f[2]+1, n+f[3]+1)
		}
		n += 8
	}
	b.WriteString("g floor\n")
	add(-0.3, -0.3, -0.3, 4.3, 4.3, 0)
	b.WriteString("g ceiling\n")
	add(-0.3, -0.3, 3, 4.3, 4.3, 3.3)
	b.WriteString("g walls\n")
	add(-0.3, 4, 0, 4.3, 4.3, 3)
	add(-0.3, 0, 0, 0, 4, 3)
	add(4, 0, 0, 4.3, 4, 3)
	add(-0.3, -0.3, 0, 4.3, 0, 1)
	add(-0.3, -0.3, 2.5, 4.3, 0, 3)
	add(-0.3, -0.3, 1, 0.5, 0, 2.5)
	add(3.5, -0.3, 1, 4.3, 0, 2.5)
	for _, x := range more {
		add(x[0], x[1], x[2], x[3], x[4], x[5])
	}
	return b.String()
}

// tinyYear is the starting project's year with light on one day of a month.
func tinyYear(t testing.TB) []byte {
	t.Helper()
	data, err := fs.ReadFile(demo.Starter(), "site.epw")
	if err != nil {
		t.Fatal(err)
	}
	lines := strings.SplitAfter(string(data), "\n")
	for i, l := range lines {
		f := strings.Split(l, ",")
		if i < 8 || len(f) < 20 || f[2] == "11" {
			continue
		}
		for k := 13; k < 20; k++ {
			f[k] = "0"
		}
		lines[i] = strings.Join(f, ",")
	}
	return []byte(strings.Join(lines, ""))
}

// tiny prepares the room, with texels of some size in some memory.
func tiny(t testing.TB, texelM float64, memoryMiB int) *Input {
	t.Helper()
	fsys := fstest.MapFS{
		"project.toml": {Data: fmt.Appendf(nil, tinyProject, texelM)},
		"room.obj":     {Data: []byte(tinyRoom())},
		"site.epw":     {Data: tinyYear(t)},
	}
	in, err := prepareFile(fsys, "project.toml", "", 1)
	if err != nil {
		t.Fatal(err)
	}
	in.Project.Simulation.MemoryMiB = memoryMiB
	return in
}

func study(t testing.TB, in *Input, workers int) *Result {
	t.Helper()
	r, err := Run(context.Background(), in, Options{Workers: workers})
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// prepareFile prepares one design of a project file.
func prepareFile(fsys fs.FS, name, alternative string, workers int) (*Input, error) {
	all, err := project.LoadAll(fsys, name)
	if err != nil {
		return nil, err
	}
	for _, p := range all {
		if p.Alternative == alternative {
			return Prepare(fsys, p, workers)
		}
	}
	return nil, fmt.Errorf("%s: there is no alternative %q", name, alternative)
}
