package scene

import (
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
)

// window has the corners of the room's hole, counter-clockwise seen from the
// south.
const window = "\n[[opening]]\nname = \"window\"\ncorners_m = [[1, 0, 0.9], [3, 0, 0.9], [3, 0, 2.4], [1, 0, 2.4]]\nglazing = \"clear\"\n"

const wrongWindow = "\n[[opening]]\nname = \"window\"\ncorners_m = [[1, 0, 0.9], [1, 0, 2.4], [3, 0, 2.4], [3, 0, 0.9]]\nglazing = \"clear\"\n"

func panes(s *Scene) (areaM2 float64, normal r3.Vec) {
	for _, t := range s.Triangles {
		if s.Parts[t.Part].Kind == Pane {
			areaM2 += area(t)
			normal = r3.Unit(r3.Cross(r3.Sub(t.V[1], t.V[0]), r3.Sub(t.V[2], t.V[0])))
		}
	}
	return areaM2, normal
}

func TestOpeningByCorners(t *testing.T) {
	s := mustBuild(t, roomMesh+window, room().files())
	o := s.Openings[0]
	if o.Name != "window" || o.Group != "window" || apart(o.Rect.Outward, r3.Vec{Y: -1}) > near || math.Abs(o.Rect.WidthM-2) > near || math.Abs(o.Rect.HeightM-1.5) > near {
		t.Errorf("got %+v, want 2 m by 1.5 m facing -y", o)
	}
	if a, n := panes(s); math.Abs(a-3) > near || apart(n, r3.Vec{Y: -1}) > near {
		t.Errorf("pane: got %g m2 facing %v, want 3 m2 facing outdoors", a, n)
	}
	for _, p := range s.Parts {
		if (p.Kind == Pane) != (p.Opening == 0) {
			t.Errorf("part %+v", p)
		}
	}
	if len(s.Notes) != 0 {
		t.Errorf("notes: %q", s.Notes)
	}
}

// TestCornersWrongWay: an opening that would face into the room, in walls
// without and with thickness, under an overhang, and flat in a roof.
func TestCornersWrongWay(t *testing.T) {
	thick := func() *obj { // another skin 0.2 m outdoors, another 0.2 m indoors of the glass
		o := room()
		o.line("g skins")
		for _, y := range []float64{-0.2, 0.2} {
			for _, w := range [][4]float64{{0, 1, 0, 2.8}, {3, 4, 0, 2.8}} {
				o.quad([3]float64{w[0], y, w[2]}, [3]float64{w[1], y, w[2]}, [3]float64{w[1], y, w[3]}, [3]float64{w[0], y, w[3]})
			}
		}
		return o
	}
	overhang := func() *obj {
		return room().line("g overhang").quad([3]float64{0, -1.5, 2.8}, [3]float64{4, -1.5, 2.8}, [3]float64{4, 0, 2.8}, [3]float64{0, 0, 2.8})
	}
	for _, c := range []struct {
		name string
		o    *obj
	}{{"sheets", room()}, {"thick walls", thick()}, {"overhang", overhang()}} {
		mustBuild(t, roomMesh+window, c.o.files())
		_, err := build(t, roomMesh+wrongWindow, c.o.files())
		const want = `opening "window": corners_m: run the wrong way round: the opening would face azimuth 0, into the room; want them counter-clockwise seen from outdoors: swap corners 2 and 4, or give outward_deg`
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: got %v, want %q", c.name, err, want)
		}
		// What the message says helps.
		s := mustBuild(t, roomMesh+strings.Replace(wrongWindow, "[1, 0, 2.4], [3, 0, 2.4], [3, 0, 0.9]", "[3, 0, 0.9], [3, 0, 2.4], [1, 0, 2.4]", 1), c.o.files())
		if apart(s.Openings[0].Rect.Outward, r3.Vec{Y: -1}) > near {
			t.Errorf("%s: swapped: faces %v", c.name, s.Openings[0].Rect.Outward)
		}
		s = mustBuild(t, roomMesh+wrongWindow+"outward_deg = 180\n", c.o.files())
		if apart(s.Openings[0].Rect.Outward, r3.Vec{Y: -1}) > near || len(s.Notes) > 0 {
			t.Errorf("%s: with outward_deg: faces %v, notes %q", c.name, s.Openings[0].Rect.Outward, s.Notes)
		}
		// The wrong outward_deg is believed, with a note.
		s = mustBuild(t, roomMesh+wrongWindow+"outward_deg = 0\n", c.o.files())
		if len(s.Notes) != 1 || !strings.Contains(s.Notes[0], "outward_deg is 0, but the room seems to lie on that side") {
			t.Errorf("%s: notes %q", c.name, s.Notes)
		}
	}
	// The model's +y points to azimuth 30, so that the wrong side, +y, does.
	if _, err := build(t, "[site]\nnorth_deg = 30\n\n"+roomMesh+wrongWindow, room().files()); err == nil || !strings.Contains(err.Error(), "would face azimuth 30,") {
		t.Errorf("north_deg 30: got %v", err)
	}
	const rooflight = "\n[[opening]]\nname = \"r\"\ncorners_m = [[1, 1, 2.8], [1, 2, 2.8], [2, 2, 2.8], [2, 1, 2.8]]\nglazing = \"clear\"\n"
	if _, err := build(t, roomMesh+rooflight, room().files()); err == nil || !strings.Contains(err.Error(), "would face down,") {
		t.Errorf("roof light: got %v", err)
	}
}

// TestCornersOfCourts: windows that look at another part of the building, or
// through it, are right as they are.
func TestCornersOfCourts(t *testing.T) {
	wing := func() *obj { // the room, and another building 10 m to the south
		return room().line("g wing").quad([3]float64{0, -10, 0}, [3]float64{0, -10, 9}, [3]float64{4, -10, 9}, [3]float64{4, -10, 0}).
			quad([3]float64{0, -30, 0}, [3]float64{0, -30, 9}, [3]float64{4, -30, 9}, [3]float64{4, -30, 0})
	}
	through := func() *obj { // only floor and ceiling: nothing squarely behind the glass
		return (&obj{}).line("g slabs").quad([3]float64{0, 0, 0}, [3]float64{4, 0, 0}, [3]float64{4, 6, 0}, [3]float64{0, 6, 0}).
			quad([3]float64{0, 0, 2.8}, [3]float64{0, 6, 2.8}, [3]float64{4, 6, 2.8}, [3]float64{4, 0, 2.8})
	}
	// Wound the wrong way, only how far the slabs reach tells it.
	if _, err := build(t, roomMesh+wrongWindow, through().files()); err == nil || !strings.Contains(err.Error(), "run the wrong way round") {
		t.Errorf("through, the wrong way round: got %v", err)
	}
	for name, o := range map[string]*obj{"court": wing(), "through": through()} {
		if _, err := build(t, roomMesh+window, o.files()); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
}

// TestMeshGroup: the group is replaced by a pane where a glazing is given, and
// is the pane itself where not.
func TestMeshGroup(t *testing.T) {
	const glass = "\n[[opening]]\nname = \"window\"\nmesh_group = \"glass\"\n"
	files := roomWithGlass().files()
	for _, c := range []struct{ name, tables string }{
		{"replaced", roomMesh + glass + "glazing = \"clear\"\n"},
		{"kept", roomMesh + "[mesh.finishes]\nglass = \"clear\"\n" + glass},
		{"with outward_deg", roomMesh + glass + "glazing = \"clear\"\noutward_deg = 180\n"},
	} {
		s := mustBuild(t, c.tables, files)
		o := s.Openings[0]
		if apart(o.Rect.Outward, r3.Vec{Y: -1}) > near || math.Abs(o.Rect.WidthM*o.Rect.HeightM-3) > near {
			t.Errorf("%s: got %+v, want 3 m2 facing -y", c.name, o.Rect)
		}
		total := 0.0
		for _, tri := range s.Triangles {
			if _, through := s.Finishes[tri.Finish].BSDF.Delta(materials.Front, 1); through > 0 {
				total += area(tri)
				if p := s.Parts[tri.Part]; p.Kind != Pane || p.Opening != 0 {
					t.Errorf("%s: glass in part %+v", c.name, p)
				}
			}
		}
		if math.Abs(total-3) > near {
			t.Errorf("%s: %g m2 of glass, want 3 once", c.name, total)
		}
		for _, tri := range s.Triangles {
			if p := s.Parts[tri.Part]; p.Kind == Room && p.Name == "glass" {
				t.Errorf("%s: the mesh's own faces are left as %+v", c.name, p)
				break
			}
		}
		noted := len(s.Notes) == 1 && strings.Contains(s.Notes[0], `opening "window": outward_deg is not given; taken to face azimuth 180`)
		if noted == strings.Contains(c.tables, "outward_deg") {
			t.Errorf("%s: notes %q", c.name, s.Notes)
		}
	}
	// A terrace of 40 m to the south moves the middle of the meshes outdoors;
	// the room behind the glass still tells.
	terrace := roomWithGlass().line("g terrace").quad([3]float64{0, -40, -0.1}, [3]float64{4, -40, -0.1}, [3]float64{4, 0, -0.1}, [3]float64{0, 0, -0.1})
	s := mustBuild(t, roomMesh+glass+"glazing = \"clear\"\n", terrace.files())
	if apart(s.Openings[0].Rect.Outward, r3.Vec{Y: -1}) > near {
		t.Errorf("terrace: faces %v, want -y", s.Openings[0].Rect.Outward)
	}
	// Flat in the roof it faces up without a guess.
	roof := room().line("g glass").quad([3]float64{1, 1, 2.9}, [3]float64{1, 2, 2.9}, [3]float64{2, 2, 2.9}, [3]float64{2, 1, 2.9})
	s = mustBuild(t, roomMesh+glass+"glazing = \"clear\"\n", roof.files())
	if s.Openings[0].Rect.Outward.Z < 1-near || len(s.Notes) > 0 {
		t.Errorf("roof: faces %v, notes %q", s.Openings[0].Rect.Outward, s.Notes)
	}
	// A partition of glass through the middle of the room has no such side.
	inner := room().line("g glass").quad([3]float64{0, 3, 0}, [3]float64{4, 3, 0}, [3]float64{4, 3, 2.8}, [3]float64{0, 3, 2.8})
	if _, err := build(t, roomMesh+glass+"glazing = \"clear\"\n", inner.files()); err == nil || !strings.Contains(err.Error(), "give the azimuth to which the opening faces") {
		t.Errorf("partition: got %v", err)
	}
}

func TestSystems(t *testing.T) {
	const shelf = "\n[[light_shelf]]\nname = \"south shelf\"\nopening = \"window\"\noutside_depth_m = 0.6\ninside_depth_m = 0.2\ntop = \"grey\"\nunderside = \"white\"\n"
	const roller = "\n[[roller]]\nname = \"screen\"\nopening = \"window\"\nopenness = 0.05\ndiffuse_transmittance = 0.1\nreflectance = 0.5\n"
	s := mustBuild(t, roomMesh+window+shelf+roller, room().files())
	count := map[string]int{}
	for _, tri := range s.Triangles {
		p := s.Parts[tri.Part]
		if p.Kind != System {
			continue
		}
		count[p.Name]++
		if p.Opening != 0 {
			t.Errorf("part %+v, want opening 0", p)
		}
		switch want := 0.05; p.Name { // the inside depth of 0.2 m in four
		case "screen":
			if p.TexelM != systemTexelM {
				t.Errorf("roller's texels %g m", p.TexelM)
			}
		default:
			if p.TexelM != want {
				t.Errorf("%s: texels of %g m, want %g", p.Name, p.TexelM, want)
			}
		}
	}
	// Two parts of six quads each, one of them top and one underside.
	want := map[string]int{"south shelf/top": 4, "south shelf/underside": 4, "south shelf/edge": 16, "screen": 2}
	for name, n := range want {
		if count[name] != n {
			t.Errorf("triangles of parts: got %v, want %v", count, want)
			break
		}
	}
	sameAreas(t, "top", finishOf(s, "south shelf/top"), map[string]float64{"grey": 2 * (0.59 + 0.19)}) // 2 m wide, 0.01 m off the glass
	// On the transom by default: top at the opening's lower edge.
	if _, hi := box(s, "south shelf/top"); math.Abs(hi.Z-0.9) > near {
		t.Errorf("top at %g m, want 0.9", hi.Z)
	}
	// Indoors of the glass, which lies at y = 0, and as high as the opening.
	if lo, hi := box(s, "screen"); apart(lo, r3.Vec{X: 1, Y: 0.05, Z: 0.9}) > near || apart(hi, r3.Vec{X: 3, Y: 0.05, Z: 2.4}) > near {
		t.Errorf("cloth from %v to %v", lo, hi)
	}
	for _, tri := range s.Triangles {
		if s.Parts[tri.Part].Name != "screen" {
			continue
		}
		cloth := s.Finishes[tri.Finish].BSDF
		rho, tau := cloth.Lambert(materials.Front)
		_, through := cloth.Delta(materials.Front, 1)
		if rho != 0.5 || tau != 0.1 || through != 0.05 { // as in the project
			t.Errorf("cloth: reflects %g, scatters %g, passes %g", rho, tau, through)
		}
	}
	raised := mustBuild(t, roomMesh+window+roller+"drawn = false\n", room().files())
	outside := mustBuild(t, roomMesh+window+roller+"position = \"outside\"\n", room().files())
	if a := finishOf(raised, "screen"); len(a) != 0 {
		t.Errorf("raised: got %v", a)
	}
	if lo, hi := box(outside, "screen"); math.Abs(lo.Y+0.05) > near || math.Abs(hi.Y+0.05) > near {
		t.Errorf("outside: y from %g to %g, want -0.05", lo.Y, hi.Y)
	}

	// Of an opening found in a mesh, what does not fit shows here first.
	const group = "\n[[opening]]\nname = \"window\"\nmesh_group = \"glass\"\nglazing = \"clear\"\noutward_deg = 180\n"
	for _, c := range []struct{ tables, want string }{
		{strings.Replace(shelf, "outside_depth", "height_m = 1.6\noutside_depth", 1), `p.toml:31: light_shelf "south shelf": height: got 1.6 m`},
		{strings.Replace(shelf, "outside_depth", "height_m = 0.5\noutside_depth", 1) + roller, `p.toml:40: roller "screen": drop: got 1, which reaches the shelf`},
	} {
		if _, err := build(t, roomMesh+group+c.tables, roomWithGlass().files()); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("got %v, want %q", err, c.want)
		}
	}
}
