package study

import (
	"fmt"
	"io/fs"
	"math"
	"strings"
	"testing"
	"testing/fstest"

	"squint/cmd/squint/demo"
)

// floor is an invented office floor of 60 by 25 m for measuring what size costs:
// windows along both long sides, a core, columns, shelves, and in either half two
// rows of desks with chairs. The chairs are round and made of as many triangles
// as are wanted, so that the room stays the same whatever their number.
type floor struct {
	triangles  int     // in the model, at least
	viewM      float64 // between eyes, 3 for 80 positions in four directions each
	sensorM    float64 // between sensors, 0.6 for 2,970
	blinds     bool    // behind all windows: raised, level and closed by a timetable
	days       int     // every so many days of the year are kept
	looks      bool    // hours near the limit are looked at again, as in a check
	simulation string  // keys, "" for the defaults
}

// The floor's sizes, metres.
const (
	floorLong, floorDeep, floorHigh = 60.0, 25.0, 3.0
	floorWall                       = 0.3
	floorWindows                    = 10 // a side
	floorBay                        = floorLong / floorWindows
	floorSill, floorLintel          = 0.9, 2.7
	floorPier                       = 1.0 // between windows
	floorDesks                      = 20  // a row
)

// solids writes boxes and round things as OBJ.
type solids struct {
	strings.Builder
	corners, triangles int
}

func (s *solids) vertex(x, y, z float64) {
	fmt.Fprintf(s, "v %.5f %.5f %.5f\n", x, y, z)
	s.corners++
}

func (s *solids) box(b box) {
	n := s.corners
	for i := range 8 {
		s.vertex(b[3*(i&1)], b[1+3*(i>>1&1)], b[2+3*(i>>2)])
	}
	// Corner numbers count x by 1, y by 2, z by 4; fronts outwards.
	for _, f := range [6][4]int{{0, 2, 3, 1}, {4, 5, 7, 6}, {0, 1, 5, 4}, {2, 6, 7, 3}, {0, 4, 6, 2}, {1, 3, 7, 5}} {
		fmt.Fprintf(s, "f %d %d %d %d\n", n+f[0]+1, n+f[1]+1, n+f[2]+1, n+f[3]+1)
	}
	s.triangles += 12
}

// round is the ellipsoid within a box, of 4 n (n - 1) triangles.
func (s *solids) round(b box, n int) {
	first := s.corners
	at := func(k int, unit float64) float64 { return (b[k]+b[k+3])/2 + (b[k+3]-b[k])/2*unit }
	for ring := 1; ring < n; ring++ {
		sin, cos := math.Sincos(math.Pi * float64(ring) / float64(n))
		for i := range 2 * n {
			y, x := math.Sincos(math.Pi * float64(i) / float64(n))
			s.vertex(at(0, sin*x), at(1, sin*y), at(2, -cos))
		}
	}
	s.vertex(at(0, 0), at(1, 0), at(2, -1))
	s.vertex(at(0, 0), at(1, 0), at(2, 1))
	low := s.corners - 1
	v := func(ring, i int) int { return first + ring*2*n + i%(2*n) + 1 }
	for i := range 2 * n {
		fmt.Fprintf(s, "f %d %d %d\nf %d %d %d\n", low, v(0, i+1), v(0, i), low+1, v(n-2, i), v(n-2, i+1))
		for ring := range n - 2 {
			fmt.Fprintf(s, "f %d %d %d %d\n", v(ring, i), v(ring, i+1), v(ring+1, i+1), v(ring+1, i))
		}
	}
	s.triangles += 4 * n * (n - 1)
}

// model is the floor as OBJ.
func (f floor) model() string {
	const l, d, h, w = floorLong, floorDeep, floorHigh, floorWall
	var s solids
	s.WriteString("g floor\n")
	s.box(box{-w, -w, -w, l + w, d + w, 0})
	s.WriteString("g ceiling\n")
	s.box(box{-w, -w, h, l + w, d + w, h + w})
	s.WriteString("g walls\n")
	s.box(box{-w, 0, 0, 0, d, h})
	s.box(box{l, 0, 0, l + w, d, h})
	for _, y := range [2]float64{-w, d} {
		s.box(box{-w, y, 0, l + w, y + w, floorSill})
		s.box(box{-w, y, floorLintel, l + w, y + w, h})
		for i := range floorWindows + 1 {
			x := floorBay * float64(i)
			s.box(box{max(-w, x-floorPier/2), y, floorSill, min(l+w, x+floorPier/2), y + w, floorLintel})
		}
	}
	s.box(box{22, 10.5, 0, 38, 14.5, h}) // the core
	for i := range 7 {
		for _, y := range [2]float64{9.7, 14.9} {
			x := 7.5*float64(i+1) - .2
			s.box(box{x, y, 0, x + .4, y + .4, h})
		}
	}
	s.WriteString("g furniture\n")
	for i := range 16 {
		for _, y := range [2]float64{11.2, 13.4} {
			x := 2 + 1.2*float64(i)
			if i >= 8 {
				x += 38 - 2 - 1.2*8 + .8 // beyond the core
			}
			s.shelf(x, y)
		}
	}
	rows := [4]float64{1.6, 4.8, 19.4, 22.6}
	var chairs []box
	for _, y := range rows {
		for i := range floorDesks {
			x := (float64(i) + .25) * floorLong / floorDesks
			s.box(box{x, y, .72, x + 1.6, y + .8, .75})
			for k := range 4 {
				lx, ly := x+.04+1.46*float64(k&1), y+.04+.66*float64(k>>1)
				s.box(box{lx, ly, 0, lx + .06, ly + .06, .72})
			}
			chairs = append(chairs, box{x + .55, y + .95, .42, x + 1.05, y + 1.45, .5}, box{x + .58, y + 1.4, .5, x + 1.02, y + 1.48, .95})
		}
	}
	n := 2
	for more := f.triangles - s.triangles; 4*n*(n-1)*len(chairs) < more; {
		n++
	}
	for _, c := range chairs {
		s.round(c, n)
	}
	return s.String()
}

// shelf is one of five boards between two sides, 1.2 m high.
func (s *solids) shelf(x, y float64) {
	s.box(box{x, y, 0, x + .02, y + .35, 1.2})
	s.box(box{x + .98, y, 0, x + 1, y + .35, 1.2})
	for i := range 5 {
		z := .05 + .28*float64(i)
		s.box(box{x + .02, y, z, x + .98, y + .35, z + .02})
	}
}

// project is the floor's project file.
func (f floor) project() string {
	var b strings.Builder
	b.WriteString(`title = "Office floor, 60 by 25 m"
invented = true

[weather]
file = "site.epw"

[ground]
level_m = -12

[[mesh]]
file = "floor.obj"
unit = "m"
up = "z"

[mesh.finishes]
floor = "carpet"
ceiling = "white"
walls = "pale"
furniture = "wood"

[[finish]]
name = "white"
type = "matte"
reflectance = 0.8

[[finish]]
name = "pale"
type = "matte"
reflectance = 0.6

[[finish]]
name = "carpet"
type = "matte"
reflectance = 0.25

[[finish]]
name = "wood"
type = "matte"
reflectance = 0.4

[[finish]]
name = "glass"
type = "glazing"
transmittance = 0.7
panes = 2
`)
	var blinds []string
	for side, y := range [2]float64{-.15, floorDeep + .15} {
		for i := range floorWindows {
			a, z := floorBay*float64(i)+floorPier/2, floorBay*float64(i+1)-floorPier/2
			if side == 1 {
				a, z = z, a
			}
			name := fmt.Sprintf("%s %d", [2]string{"south", "north"}[side], i+1)
			fmt.Fprintf(&b, "\n[[opening]]\nname = %q\ncorners_m = [[%g, %g, %g], [%g, %g, %g], [%g, %g, %g], [%g, %g, %g]]\nglazing = \"glass\"\n",
				name, a, y, floorSill, z, y, floorSill, z, y, floorLintel, a, y, floorLintel)
			if f.blinds {
				fmt.Fprintf(&b, "\n[[blind]]\nname = \"blind %s\"\nopening = %q\nslat_width_mm = 80\npitch_mm = 72\nupper = \"white\"\n"+
					"states = [{ name = \"level\", tilt_deg = 0 }, { name = \"closed\", tilt_deg = -60 }]\n", name, name)
				blinds = append(blinds, fmt.Sprintf("%q", "blind "+name))
			}
		}
	}
	if f.blinds {
		fmt.Fprintf(&b, "\n[[control]]\nname = \"blinds\"\nsystems = [%s]\nrule = \"timetable\"\ntimetable = [{ from = \"09:00\", to = \"12:00\", state = \"closed\" }, { from = \"12:00\", to = \"15:00\", state = \"level\" }]\n", strings.Join(blinds, ", "))
	}
	for k, y := range [2][4]float64{{1.5, 7.5, 0, 10}, {17.5, 23.5, 15, 25}} {
		half := [2]string{"south", "north"}[k]
		if f.viewM > 0 {
			fmt.Fprintf(&b, "\n[[view_grid]]\nname = \"eyes %s\"\npolygon_m = [[0, %[2]g], [60, %[2]g], [60, %[3]g], [0, %[3]g]]\nperimeter_m = 0\nspacing_m = %[4]g\n", half, y[0], y[1], f.viewM)
		}
		if f.sensorM > 0 {
			fmt.Fprintf(&b, "\n[[work_plane]]\nname = \"desks %s\"\npolygon_m = [[0, %[2]g], [60, %[2]g], [60, %[3]g], [0, %[3]g]]\nspacing_m = %[4]g\n", half, y[2], y[3], f.sensorM)
		}
	}
	b.WriteString("\n[criteria]\nglare = \"medium\"\n\n[simulation]\n" + f.simulation)
	return b.String()
}

// files are the floor's project, model and year.
func (f floor) files(t testing.TB) fstest.MapFS {
	t.Helper()
	year, err := fs.ReadFile(demo.Starter(), "site.epw")
	if err != nil {
		t.Fatal(err)
	}
	return fstest.MapFS{
		"project.toml": {Data: []byte(f.project())},
		"floor.obj":    {Data: []byte(f.model())},
		"site.epw":     {Data: everyDay(year, f.days)},
	}
}

// everyDay leaves the light of one in n days of an hourly year.
func everyDay(epw []byte, n int) []byte {
	lines := strings.SplitAfter(string(epw), "\n")
	for i, l := range lines {
		f := strings.Split(l, ",")
		if i < 8 || len(f) < 20 || (i-8)/24%max(n, 1) == 0 {
			continue
		}
		for k := 13; k < 20; k++ {
			f[k] = "0"
		}
		lines[i] = strings.Join(f, ",")
	}
	return []byte(strings.Join(lines, ""))
}
