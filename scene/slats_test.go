package scene

import (
	"math"
	"strings"
	"testing"
	"testing/fstest"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene/project"
	"squint/scene/system"
)

const aBlind = `
[[blind]]
name = "venetian"
opening = "window"
slat_width_mm = 80
pitch_mm = 72
sagitta_mm = 6
upper = "white"
`

const silver = `
[[finish]]
name = "silver"
type = "mirror"
specular_reflectance = 0.9
`

// partOf collects the triangles of a part.
func partOf(s *Scene, name string) (all []Triangle, part Part) {
	for _, t := range s.Triangles {
		if s.Parts[t.Part].Name == name {
			all = append(all, t)
			part = s.Parts[t.Part]
		}
	}
	return all, part
}

// TestBlind: the slats' number, place, facets and sides. By hand: the opening
// is 1.5 m high, (1.5 - 0.08)/0.072 = 19.7, so 20 slats.
func TestBlind(t *testing.T) {
	for _, c := range []struct {
		name, finishes   string
		front, back      float64 // diffuse reflectances, -1 for a mirror's
		facets, finishID int
	}{
		{"matte", "", 0.8, 0.8, 9, 0}, // 4 atan(0.15) is 34.1 degrees, in facets of 4
		{"grey below", "lower = \"grey\"\n", 0.8, 0.3, 9, 0},
		{"mirror below", "lower = \"silver\"\n" + silver, 0.8, -1, 171, 0}, // in facets of 0.2
	} {
		s := mustBuild(t, roomMesh+window+aBlind+c.finishes, room().files())
		slats, part := partOf(s, "venetian")
		if part.Kind != System || part.Opening != 0 || part.TexelM < 0.01-near || part.TexelM > 0.0101 {
			t.Errorf("%s: %+v, want a system at the window with 8 texels across", c.name, part)
		}
		if len(slats) != 20*2*c.facets {
			t.Errorf("%s: got %d triangles, want 20 slats of %d facets", c.name, len(slats), c.facets)
		}
		for _, x := range slats {
			f := s.Finishes[x.Finish].BSDF
			for side, want := range []float64{c.front, c.back} {
				rho, _ := f.Lambert(materials.Side(side))
				mirror, _ := f.Delta(materials.Side(side), 1)
				if want < 0 && (rho != 0 || mirror != 0.9) || want >= 0 && (rho != want || mirror != 0) {
					t.Fatalf("%s: side %d: diffuse %g, mirror %g, want %g", c.name, side, rho, mirror, want)
				}
			}
			if n := r3.Cross(r3.Sub(x.V[1], x.V[0]), r3.Sub(x.V[2], x.V[0])); n.Z <= 0 {
				t.Fatalf("%s: a slat's front looks down", c.name)
			}
			for _, v := range x.V { // the window is at y = 0 and faces -y
				if v.Y < 0.02-near || v.Y > 0.1+near || v.X < 1.005-near || v.X > 2.995+near || v.Z < 0.9 || v.Z > 2.4 {
					t.Fatalf("%s: corner %v", c.name, v)
				}
			}
		}
		if rail, _ := partOf(s, "venetian/rail"); len(rail) != 2 {
			t.Errorf("%s: got a rail of %d triangles", c.name, len(rail))
		}
	}
}

// TestStatesAreBuilt: a scene for each state of a blind.
func TestStatesAreBuilt(t *testing.T) {
	p := load(t, roomMesh+window+aBlind+"states = [{ name = \"open\", tilt_deg = 0 }, { name = \"shut\", tilt_deg = -60 }]\n")
	fsys := fstest.MapFS{}
	for name, text := range room().files() {
		fsys[name] = &fstest.MapFile{Data: []byte(text)}
	}
	for _, c := range []struct {
		state string
		deep  float64 // of a slat
	}{{"raised", 0}, {"open", 0.08}, {"shut", 0.0452}} { // 0.08 cos 60, and the camber's 6 mm sin 60
		s, err := Build(fsys, project.WithStates(p, map[string]string{"venetian": c.state}))
		if err != nil {
			t.Fatal(err)
		}
		slats, _ := partOf(s, "venetian")
		lo, hi := math.Inf(1), math.Inf(-1)
		for _, x := range slats {
			for _, v := range x.V {
				lo, hi = min(lo, v.Y), max(hi, v.Y)
			}
		}
		if got := max(0, hi-lo); got < c.deep-0.0053 || got > c.deep+near {
			t.Errorf("%s: slats are %g m deep, want %g less the camber's share", c.state, got, c.deep)
		}
	}
}

// TestInnerPane stands indoors of the outer one, the slats between them.
func TestInnerPane(t *testing.T) {
	s := mustBuild(t, roomMesh+window+"inner_glazing = \"clear\"\ncavity_m = 0.12\n"+strings.Replace(aBlind, "sagitta_mm = 6", "position = \"between\"", 1), room().files())
	inner, part := partOf(s, "window/inner pane")
	if len(inner) != 2 || part.Kind != Pane || part.Opening != 0 {
		t.Fatalf("got %d triangles of %+v", len(inner), part)
	}
	for _, x := range inner {
		for _, v := range x.V {
			if math.Abs(v.Y-0.12) > near {
				t.Errorf("corner %v, want y = 0.12", v)
			}
		}
	}
	slats, _ := partOf(s, "venetian")
	for _, x := range slats {
		for _, v := range x.V {
			if v.Y < 0.02-near || v.Y > 0.1+near { // 0.06 and 0.04 to either side
				t.Fatalf("corner %v, want y from 0.02 to 0.1", v)
			}
		}
	}
	if len(slats) == 0 {
		t.Error("no slats")
	}
}

// TestHollowShelfFacets: mirrored tops are meshed finely, matte ones are not.
func TestHollowShelfFacets(t *testing.T) {
	const shelf = "\n[[light_shelf]]\nname = \"shelf\"\nopening = \"window\"\nheight_m = 1\noutside_depth_m = 0.8\noutside_profile = \"arc\"\noutside_sagitta_m = 0.05\nunderside = \"white\"\n"
	for _, c := range []struct {
		finish string
		want   int // facets of 28.5 degrees, 4 atan(0.125); of 143 the first, 5.6 mm wide, lies in the gap
	}{{"top = \"white\"\n", 8}, {"top = \"silver\"\n" + silver, 142}, {"top = \"gloss\"\n[[finish]]\nname = \"gloss\"\ntype = \"glossy\"\ntotal_reflectance = 0.8\nspecular_share = 0.8\nspread_deg = 5\n", 142},
		{"top = \"holed\"\n" + silver + "[[finish]]\nname = \"holed\"\ntype = \"perforated\"\nopen_share = 0.1\nhole_diameter_mm = 1\nthickness_mm = 0\nbase = \"silver\"\n", 142}} {
		s := mustBuild(t, roomMesh+window+shelf+c.finish, room().files())
		if top, _ := partOf(s, "shelf/top"); len(top) != 2*c.want {
			t.Errorf("%s: got %d triangles, want %d facets", c.finish, len(top), c.want)
		}
	}
}

// TestSill slopes down and outward below the window.
func TestSill(t *testing.T) {
	s := mustBuild(t, roomMesh+window+"\n[[sill]]\nname = \"ledge\"\nopening = \"window\"\ndepth_m = 0.3\nfinish = \"grey\"\n", room().files())
	top, part := partOf(s, "ledge/top")
	if len(top) != 2 || part.Kind != System {
		t.Fatalf("got %d triangles of %+v", len(top), part)
	}
	for _, x := range top {
		for _, v := range x.V { // 5 degrees, from the window's lower edge at 0.9 m
			if want := 0.9 + v.Y*math.Tan(5*degree); math.Abs(v.Z-want) > near || v.Y > -0.01+near {
				t.Errorf("corner %v, want z = %g", v, want)
			}
		}
	}
}

// TestSlatsInTheWay of a shelf, where the opening is known only from the mesh.
func TestSlatsInTheWay(t *testing.T) {
	const glass = "\n[[opening]]\nname = \"window\"\nmesh_group = \"glass\"\nglazing = \"clear\"\n"
	const shelf = "\n[[light_shelf]]\nname = \"shelf\"\nopening = \"window\"\nheight_m = 1\ninside_depth_m = 0.5\ntop = \"white\"\nunderside = \"white\"\n"
	for _, c := range []struct{ name, tables, want string }{
		{"shelf", shelf + aBlind, `blind "venetian": low: the slats reach down to 0 m above the opening's lower edge, into the shelf, whose top is at 1 m`},
		{"roller", aBlind + "\n[[roller]]\nname = \"r\"\nopening = \"window\"\nopenness = 0\ndiffuse_transmittance = 0\nreflectance = 0\n", `blind "venetian": gap: reaches from 0.02 to 0.1 m`},
		{"closed", aBlind + "tilt_deg = -90\n", `blind "venetian": tilt: got -90 degrees`},
	} {
		_, err := build(t, roomMesh+glass+c.tables, roomWithGlass().files())
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v, want %q", c.name, err, c.want)
		}
	}
	if _, err := build(t, roomMesh+glass+shelf+aBlind+"drop = 0.3\n", roomWithGlass().files()); err != nil { // from 1.05 m up
		t.Errorf("above the shelf: %v", err)
	}
	if system.MatteFacetRad <= system.MirrorFacetRad {
		t.Error("matte surfaces are meshed finer than mirrors")
	}
}
