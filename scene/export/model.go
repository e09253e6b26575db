package export

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
)

// ErrEmpty says that nothing of the scene is asked for.
var ErrEmpty = errors.New("export: no triangles to write")

// ErrTooLarge says that a coordinate does not fit.
var ErrTooLarge = errors.New("export: a coordinate is not finite or beyond single precision")

// Options choose among the scene's parts. The zero value takes all but the
// ground.
type Options struct {
	Ground      bool // also the ground around the model, which is endless in the scene
	SystemsOnly bool // nothing but the systems; Ground does not matter then
}

// Triangle has its corners in metres, z up, and the index of its finish in
// Model.Shades.
type Triangle struct {
	V     [3]r3.Vec
	Shade int
}

// Piece is a part of the scene under a name of its own. Parts of one name, kind
// and opening are one piece, such as a mesh group of two finishes; other parts
// of the same name are numbered: "wall", "wall 2". Its triangles are sorted by
// finish.
type Piece struct {
	Name      string
	Kind      scene.Kind
	Triangles []Triangle
}

// Model is what is written. Every piece has triangles and every shade is used.
type Model struct {
	Title    string  // of the project, one line
	NorthDeg float64 // azimuth of +y
	Pieces   []Piece // in the scene's order of parts
	Shades   []Shade // in the scene's order of finishes
	// RoundingM is the furthest that single precision moves a coordinate.
	RoundingM float64
	// Flat counts the triangles without any area in single precision, which STL
	// and glTF leave out.
	Flat int
}

// New collects the parts that options ask for. Errors: ErrEmpty, ErrTooLarge.
func New(s *scene.Scene, o Options) (*Model, error) {
	m := &Model{}
	if s.Project != nil {
		m.Title = oneLine(s.Project.Title)
		m.NorthDeg = s.Project.Site.NorthDeg
	}
	pieceOf := m.choose(s, o)
	used := make([]bool, len(s.Finishes))
	for i := range s.Triangles {
		t := &s.Triangles[i]
		p := pieceOf[t.Part]
		if p < 0 {
			continue
		}
		for _, v := range t.V {
			if !(math.Abs(v.X) <= math.MaxFloat32 && math.Abs(v.Y) <= math.MaxFloat32 && math.Abs(v.Z) <= math.MaxFloat32) {
				return nil, fmt.Errorf("%w: part %q: got (%g, %g, %g)", ErrTooLarge, s.Parts[t.Part].Name, v.X, v.Y, v.Z)
			}
		}
		used[t.Finish] = true
		m.Pieces[p].Triangles = append(m.Pieces[p].Triangles, Triangle{V: t.V, Shade: int(t.Finish)})
	}
	m.Pieces = slices.DeleteFunc(m.Pieces, func(p Piece) bool { return len(p.Triangles) == 0 })
	if len(m.Pieces) == 0 {
		return nil, ErrEmpty
	}
	m.shade(s, used)
	names := make([]string, len(m.Pieces))
	for i := range m.Pieces {
		names[i] = m.Pieces[i].Name
	}
	for i, n := range distinct(names, " ") {
		m.Pieces[i].Name = n
	}
	m.measure()
	return m, nil
}

// choose makes the pieces, still without triangles, and returns each part's
// piece, -1 for parts that are not asked for.
func (m *Model) choose(s *scene.Scene, o Options) []int {
	type key struct {
		name    string
		kind    scene.Kind
		opening int
	}
	known := map[key]int{}
	pieceOf := make([]int, len(s.Parts))
	for i := range s.Parts {
		p := &s.Parts[i]
		pieceOf[i] = -1
		if o.SystemsOnly && p.Kind != scene.System || p.Kind == scene.GroundPlane && !o.Ground {
			continue
		}
		k := key{p.Name, p.Kind, p.Opening}
		at, ok := known[k]
		if !ok {
			at = len(m.Pieces)
			known[k] = at
			m.Pieces = append(m.Pieces, Piece{Name: p.Name, Kind: p.Kind})
		}
		pieceOf[i] = at
	}
	return pieceOf
}

// shade turns the triangles' finishes into shades and sorts by them.
func (m *Model) shade(s *scene.Scene, used []bool) {
	shadeOf := make([]int, len(used))
	var names []string
	for i, u := range used {
		if !u {
			continue
		}
		shadeOf[i] = len(m.Shades)
		m.Shades = append(m.Shades, newShade(s.Finishes[i]))
		names = append(names, s.Finishes[i].Name)
	}
	for i, n := range distinct(names, " ") {
		m.Shades[i].Name = n
	}
	ground := map[int]bool{}
	for i := range m.Pieces {
		ts := m.Pieces[i].Triangles
		for k := range ts {
			ts[k].Shade = shadeOf[ts[k].Shade]
			if m.Pieces[i].Kind == scene.GroundPlane {
				ground[ts[k].Shade] = true
			}
		}
		slices.SortStableFunc(ts, func(a, b Triangle) int { return a.Shade - b.Shade })
	}
	// The scene keeps the ground white and its reflectance by month.
	var mean float64
	for _, r := range s.GroundReflectance {
		mean += r / 12
	}
	for i := range m.Shades {
		if ground[i] {
			m.Shades[i].scale(mean)
		}
	}
}

// measure finds what single precision does.
func (m *Model) measure() {
	for i := range m.Pieces {
		for _, t := range m.Pieces[i].Triangles {
			for _, v := range t.V {
				for _, x := range [3]float64{v.X, v.Y, v.Z} {
					m.RoundingM = math.Max(m.RoundingM, math.Abs(float64(float32(x))-x))
				}
			}
			if _, ok := single(t.V); !ok {
				m.Flat++
			}
		}
	}
}

// Triangles is their number, those that are flat in single precision counted.
func (m *Model) Triangles() int {
	n := 0
	for i := range m.Pieces {
		n += len(m.Pieces[i].Triangles)
	}
	return n
}

// single rounds the corners; ok is false where they then have no area.
func single(v [3]r3.Vec) (out [3][3]float32, ok bool) {
	var w [3]r3.Vec
	for i := range v {
		// Adding 0 makes minus zero plain zero.
		out[i] = [3]float32{float32(v[i].X) + 0, float32(v[i].Y) + 0, float32(v[i].Z) + 0}
		w[i] = r3.Vec{X: float64(out[i][0]), Y: float64(out[i][1]), Z: float64(out[i][2])}
	}
	// Differences of single numbers are exact in double precision.
	return out, r3.Norm(r3.Cross(r3.Sub(w[1], w[0]), r3.Sub(w[2], w[0]))) > 0
}

// oneLine joins what lies on several lines.
func oneLine(s string) string { return strings.Join(strings.Fields(s), " ") }
