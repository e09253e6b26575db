package main

import (
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"squint/cmd/squint/demo"
)

// smallProject is the least that can be checked: a room of 4 by 4 m with one
// window, one viewpoint, four sensors, few samples and one hour of use a week.
const smallProject = `title = "Small room"
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

[simulation]
fisheye_pixels = 16
samples_per_pixel = 8
sensor_samples = 64
texel_m = 2
texel_samples = 8
`

// smallRoom is its model: walls, floor and ceiling of 0.3 m around a room from
// the origin to (4, 4, 3), a hole for the window in the southern wall.
func smallRoom() string {
	var b strings.Builder
	n := 0
	box := func(x0, y0, z0, x1, y1, z1 float64) {
		for i := range 8 {
			p := [3]float64{x0, y0, z0}
			for k, hi := range [3]float64{x1, y1, z1} {
				if i>>k&1 == 1 {
					p[k] = hi
				}
			}
			fmt.Fprintf(&b, "v %g %g %g\n", p[0], p[1], p[2])
		}
		// Corner numbers count x by 1, y by 2, z by 4; outwards.
		for _, f := range [6][4]int{{0, 2, 3, 1}, {4, 5, 7, 6}, {0, 1, 5, 4}, {2, 6, 7, 3}, {0, 4, 6, 2}, {1, 3, 7, 5}} {
			fmt.Fprintf(&b, "f %d %d %d %d\n", n+f[0]+1, n+f[1]+1, n+f[2]+1, n+f[3]+1)
		}
		n += 8
	}
	b.WriteString("g floor\n")
	box(-0.3, -0.3, -0.3, 4.3, 4.3, 0)
	b.WriteString("g ceiling\n")
	box(-0.3, -0.3, 3, 4.3, 4.3, 3.3)
	b.WriteString("g walls\n")
	box(-0.3, 4, 0, 4.3, 4.3, 3)
	box(-0.3, 0, 0, 0, 4, 3)
	box(4, 0, 0, 4.3, 4, 3)
	box(-0.3, -0.3, 0, 4.3, 0, 1)
	box(-0.3, -0.3, 2.5, 4.3, 0, 3)
	box(-0.3, -0.3, 1, 0.5, 0, 2.5)
	box(3.5, -0.3, 1, 4.3, 0, 2.5)
	return b.String()
}

// thinYear is the starting project's year with light on every tenth day only,
// so that a check takes a second.
func thinYear() (string, error) {
	data, err := fs.ReadFile(demo.Starter(), "site.epw")
	if err != nil {
		return "", err
	}
	lines := strings.SplitAfter(string(data), "\n")
	for i, l := range lines {
		f := strings.Split(l, ",")
		if i < 8 || len(f) < 20 || f[2] == "1" || f[2] == "11" || f[2] == "21" {
			continue
		}
		for k := 13; k < 20; k++ {
			f[k] = "0"
		}
		lines[i] = strings.Join(f, ",")
	}
	return strings.Join(lines, ""), nil
}

// writeSmall writes the small project as project.toml into a folder.
func writeSmall(dir string) error {
	year, err := thinYear()
	if err != nil {
		return err
	}
	for name, text := range map[string]string{"project.toml": smallProject, "room.obj": smallRoom(), "site.epw": year} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o666); err != nil {
			return err
		}
	}
	return nil
}
