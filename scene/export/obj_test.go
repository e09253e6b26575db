package export

import (
	"bytes"
	"errors"
	"math"
	"slices"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
)

func notGround(p scene.Part) bool { return p.Kind != scene.GroundPlane }

// blanks undoes what the office's names lose in OBJ: none has an underscore.
func blanks(s string) string { return strings.ReplaceAll(s, "_", " ") }

// objTriangles reads what the model writes.
func objTriangles(t *testing.T, m *Model) map[string]int {
	got := readOBJ(t, m)
	out := map[string]int{}
	for _, tri := range got.Triangles {
		out[corners(blanks(got.Groups[tri.Group]), blanks(got.Materials[tri.Material]), tri.V)]++
	}
	return out
}

// OBJ gives back every triangle with its part and finish, to the last bit.
func TestOBJRoundTrip(t *testing.T) {
	s := built(t)
	for _, c := range []struct {
		o    Options
		keep func(scene.Part) bool
		n    int // by hand, from the office
	}{
		// Room 12, pane 2, two shelf parts of 12, cloth 2.
		{Options{}, notGround, 40},
		{Options{Ground: true}, func(scene.Part) bool { return true }, 42},
		{Options{SystemsOnly: true}, func(p scene.Part) bool { return p.Kind == scene.System }, 26},
		{Options{SystemsOnly: true, Ground: true}, func(p scene.Part) bool { return p.Kind == scene.System }, 26},
	} {
		m := model(t, s, c.o)
		got, want := objTriangles(t, m), wanted(s, c.keep)
		if n, first := differences(got, want); n > 0 {
			t.Errorf("%+v: %d of %d triangles differ, such as %s", c.o, n, len(want), first)
		}
		if m.Triangles() != c.n || len(want) != c.n {
			t.Errorf("%+v: %d triangles, the scene %d, want %d", c.o, m.Triangles(), len(want), c.n)
		}
	}
	// Twin: one corner off by a bit is seen.
	m := model(t, s, Options{})
	v := &m.Pieces[1].Triangles[0].V[2].Y
	*v = math.Nextafter(*v, 10)
	if n, _ := differences(objTriangles(t, m), wanted(s, notGround)); n != 2 {
		t.Errorf("a corner off by a bit: %d differences, want 2", n)
	}
}

// partAreas sums the scene's own triangles by part name.
func partAreas(s *scene.Scene) map[string]float64 {
	out := map[string]float64{}
	for _, t := range s.Triangles {
		if p := s.Parts[t.Part]; notGround(p) {
			out[p.Name] += r3.Norm(r3.Cross(r3.Sub(t.V[1], t.V[0]), r3.Sub(t.V[2], t.V[0]))) / 2
		}
	}
	return out
}

func TestOBJAreas(t *testing.T) {
	s := built(t)
	got := readOBJ(t, model(t, s, Options{}))
	want := partAreas(s)
	// Order and factors of the sums differ.
	const rounding = 1e-12
	for i, a := range got.GroupAreas() {
		name := blanks(got.Groups[i])
		if math.Abs(a-want[name]) > rounding*want[name] {
			t.Errorf("%s: %g m2, the scene's part %g", name, a, want[name])
		}
		delete(want, name)
	}
	if len(want) > 0 {
		t.Errorf("no groups for %v", want)
	}
	// By hand, independent of the scene: floor 4 x 5, walls 2 x (4 + 5) x 2.8,
	// pane 2 x 1.5; turned and moved, so a few rounding errors of 2^-52 x 10 m.
	for name, m2 := range map[string]float64{"the floor": 20, "walls": 50.4, "ceiling": 20, "window": 3} {
		if a := partAreas(s)[name]; math.Abs(a-m2) > 1e-12*m2 {
			t.Errorf("%s: %g m2, want %g", name, a, m2)
		}
	}
}

// solid is the surface of the groups whose names start with prefix: open counts
// directed edges without exactly one opposite, volume is by the divergence
// theorem.
func solid(t *testing.T, m *Model, prefix string) (triangles, open int, volumeM3 float64) {
	got := readOBJ(t, m)
	edges := map[[2]r3.Vec]int{}
	for _, tri := range got.Triangles {
		if !strings.HasPrefix(got.Groups[tri.Group], prefix) {
			continue
		}
		triangles++
		for i := range 3 {
			edges[[2]r3.Vec{tri.V[i], tri.V[(i+1)%3]}]++
		}
		volumeM3 += r3.Dot(tri.V[0], r3.Cross(tri.V[1], tri.V[2])) / 6
	}
	for e, n := range edges {
		if n != 1 || edges[[2]r3.Vec{e[1], e[0]}] != 1 {
			open++
		}
	}
	return triangles, open, volumeM3
}

// The shelf comes back as closed solids, fronts outwards. Its volume by hand:
// each part is an extrusion over 2 + 2 x 0.1 m of a section between parallel
// lines 0.03 m apart, cut parallel to the glass at the near end and squarely at
// the far end. Along the top it is depth - gap/cos long, along the underside
// longer by 0.03 tan(rise), where rise is the slope away from the glass.
func TestShelfIsClosed(t *testing.T) {
	var want float64
	for _, p := range []struct{ depth, rise float64 }{{0.7, 11}, {0.5, 7}} {
		sin, cos := math.Sincos(p.rise * math.Pi / 180)
		top := p.depth - 0.02/cos
		want += 2.2 * 0.03 * (top + 0.03*sin/cos/2)
	}
	m := model(t, built(t), Options{})
	n, open, volume := solid(t, m, "shelf/")
	if n != 24 || open > 0 {
		t.Errorf("%d triangles with %d open edges, want 24 and none", n, open)
	}
	if math.Abs(volume-want) > 1e-12 {
		t.Errorf("%.15g m3, want %.15g", volume, want)
	}
	// Twins: a face turned round, a face missing, a corner moved.
	for name, plant := range map[string]func(p *Piece){
		"turned":  func(p *Piece) { v := &p.Triangles[0].V; v[0], v[1] = v[1], v[0] },
		"missing": func(p *Piece) { p.Triangles = p.Triangles[1:] },
		"moved":   func(p *Piece) { p.Triangles[0].V[1].Z += 1e-9 },
	} {
		m := model(t, built(t), Options{})
		for i := range m.Pieces {
			if m.Pieces[i].Name == "shelf/top" {
				plant(&m.Pieces[i])
			}
		}
		if _, open, _ := solid(t, m, "shelf/"); open == 0 {
			t.Errorf("%s: planted defect not seen", name)
		}
	}
}

// Names that collide stay apart, and every triangle keeps its own part and
// finish.
func TestStrangeNames(t *testing.T) {
	s := strange(t)
	m := model(t, s, Options{})
	var names []string
	for _, p := range m.Pieces {
		names = append(names, p.Name)
	}
	// "wall" the system keeps apart from "wall" the room, whose two parts are one.
	want := []string{"wall", "wall 3", "wall 2", "a\tb", "a b", ""}
	if strings.Join(names, "|") != strings.Join(want, "|") {
		t.Errorf("pieces %q, want %q", names, want)
	}
	for _, p := range m.Pieces {
		if !slices.IsSortedFunc(p.Triangles, func(a, b Triangle) int { return a.Shade - b.Shade }) {
			t.Errorf("piece %q is not sorted by finish", p.Name)
		}
	}
	if got, want := strings.Join(m.objPieces(), "|"), "wall|wall_3|wall_2|a_b|a_b_2|_"; got != want {
		t.Errorf("groups %q, want %q", got, want)
	}
	if got, want := strings.Join(m.objShades(), "|"), "a_b|a_b_3|a_b_2|a_b_2_2|_c_|_"; got != want {
		t.Errorf("materials %q, want %q", got, want)
	}
	got := readOBJ(t, m)
	if len(got.Triangles) != 14 || len(got.Groups) != 6 || len(got.Materials) != 6 {
		t.Errorf("%d triangles, groups %q, materials %q; want 14, 6, 6", len(got.Triangles), got.Groups, got.Materials)
	}
	// In the order of the model: same corners, group and material, one by one.
	i := 0
	for p := range m.Pieces {
		for _, tri := range m.Pieces[p].Triangles {
			r := got.Triangles[i]
			i++
			if corners("", "", r.V) != corners("", "", tri.V) || got.Groups[r.Group] != m.objPieces()[p] || got.Materials[r.Material] != m.objShades()[tri.Shade] {
				t.Errorf("triangle %d: got %+v of %q, %q", i, r.V, got.Groups[r.Group], got.Materials[r.Material])
			}
		}
	}
}

func TestNewRefuses(t *testing.T) {
	if _, err := New(&scene.Scene{}, Options{}); !errors.Is(err, ErrEmpty) {
		t.Errorf("no triangles: got %v, want ErrEmpty", err)
	}
	s := built(t)
	s.Triangles = s.Triangles[:1]
	if _, err := New(s, Options{SystemsOnly: true}); !errors.Is(err, ErrEmpty) {
		t.Errorf("no systems: got %v, want ErrEmpty", err)
	}
	for _, bad := range []float64{math.NaN(), math.Inf(1), -1e39} {
		s := built(t)
		s.Triangles[3].V[1].Z = bad
		if _, err := New(s, Options{}); !errors.Is(err, ErrTooLarge) || !strings.Contains(err.Error(), `part "walls"`) {
			t.Errorf("%g: got %v, want ErrTooLarge naming the part", bad, err)
		}
	}
}

// The comments say unit, axis and north.
func TestOBJSaysItsFrame(t *testing.T) {
	var b bytes.Buffer
	if err := model(t, built(t), Options{}).WriteOBJ(&b, ""); err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"# Project: Export office\n", "# Unit: metre. Up: z. The azimuth of +y is 15 degrees"} {
		if !strings.Contains(b.String(), want) {
			t.Errorf("no %q", want)
		}
	}
	if strings.Contains(b.String(), "mtllib") {
		t.Error("names a library although none is given")
	}
}

// failing fails after some bytes, as a full disk does.
type failing struct{ room int }

var errFull = errors.New("full")

func (f *failing) Write(p []byte) (int, error) {
	if len(p) > f.room {
		return f.room, errFull
	}
	f.room -= len(p)
	return len(p), nil
}

func TestWritersReportErrors(t *testing.T) {
	m := model(t, built(t), Options{})
	for name, write := range writers(m) {
		for _, room := range []int{0, 100, 500} {
			if err := write(&failing{room}); !errors.Is(err, errFull) {
				t.Errorf("%s, %d bytes: got %v, want the disk's error", name, room, err)
			}
		}
	}
}
