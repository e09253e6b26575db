package scene

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/project"
	"squint/scene/system"
)

// What tells the two sides of an opening apart. Common practice, no published
// source.
const (
	// glassGapM around the plane of the glass is its own geometry.
	glassGapM = 0.05
	// shallowM: less than this behind the glass is the wall, not a room.
	shallowM = 1.0
	// rowsOnGlass squared points on the glass look to either side.
	rowsOnGlass = 3
)

// wrongWay reports whether the room meshes lie on the outward side of an
// opening and not behind it: they reach less than a metre behind it and
// further in front, or nothing stands squarely behind the glass and something
// does in front of most of it. Both sides of a court count as behind.
func (b *builder) wrongWay(r system.Rect) bool {
	var in, out float64
	var behind, before [rowsOnGlass * rowsOnGlass]bool
	for i := range b.s.Triangles {
		t := &b.s.Triangles[i]
		if b.s.Parts[t.Part].Kind != Room {
			continue
		}
		var local [3]r3.Vec
		for k, v := range t.V {
			local[k] = r.Local(v)
			in, out = math.Max(in, -local[k].Z), math.Max(out, local[k].Z)
		}
		if r.Beside(local) {
			continue
		}
		for k := range behind {
			x := (float64(k%rowsOnGlass) + 0.5) / rowsOnGlass * r.WidthM
			y := (float64(k/rowsOnGlass) + 0.5) / rowsOnGlass * r.HeightM
			depth, ok := system.DepthAt(local, x, y)
			behind[k] = behind[k] || ok && depth < -glassGapM
			before[k] = before[k] || ok && depth > glassGapM
		}
	}
	if in < shallowM && in < out/2 {
		return true
	}
	n := 0
	for k := range before {
		if behind[k] {
			return false
		}
		if before[k] {
			n++
		}
	}
	return n > len(before)/2
}

// faceOpening finds the rectangle of an opening and sees to it that its
// outward side is outdoors: an outward_deg that is given is believed, with a
// note where the geometry speaks against it; corners the wrong way round are
// an error; the side of a mesh group is guessed.
func (b *builder) faceOpening(meshes []*placed, o *project.Opening) (system.Rect, error) {
	hint := o.OutwardHint(b.p.Site.NorthDeg)
	if o.MeshGroup != "" {
		tris, err := groupTriangles(meshes, o.MeshGroup)
		if err != nil {
			return system.Rect{}, err
		}
		r, err := system.RectFromTriangles(tris, hint)
		if err != nil && o.OutwardDeg == nil {
			return b.guessOutward(meshes, o, tris, err)
		}
		if err == nil {
			b.noteFacing(o, r)
		}
		return r, err
	}
	var c [4]r3.Vec
	for k, v := range o.CornersM {
		c[k] = vec(v)
	}
	r, err := system.RectFromCorners(c, hint)
	if err != nil {
		return r, err
	}
	if o.OutwardDeg == nil && b.wrongWay(r) {
		return r, fmt.Errorf("corners_m: run the wrong way round: the opening would face %s, into the room; want them counter-clockwise seen from outdoors: swap corners 2 and 4, or give outward_deg", b.faces(r))
	}
	b.noteFacing(o, r)
	return r, nil
}

func (b *builder) noteFacing(o *project.Opening, r system.Rect) {
	if o.OutwardDeg != nil && b.wrongWay(r) {
		b.notef("opening %q: outward_deg is %g, but the room seems to lie on that side of the glass.", o.Name, *o.OutwardDeg)
	}
}

// guessOutward takes the side away from the middle of the room meshes, the
// other one where the room would then be outdoors. cause is returned where
// that does not tell the sides apart.
func (b *builder) guessOutward(meshes []*placed, o *project.Opening, tris [][3]r3.Vec, cause error) (system.Rect, error) {
	var room, glass []r3.Vec
	for _, pm := range meshes {
		if pm.def.Role == "room" {
			box := pm.m.Bounds()
			room = append(room, box.Min, box.Max)
		}
	}
	for _, t := range tris {
		glass = append(glass, t[:]...)
	}
	away := r3.Sub(middle(glass), middle(room))
	if r3.Norm(away) < glassGapM {
		return system.Rect{}, cause
	}
	r, err := system.RectFromTriangles(tris, away)
	if err != nil {
		return r, cause
	}
	if b.wrongWay(r) {
		if r, err = system.RectFromTriangles(tris, r3.Scale(-1, away)); err != nil {
			return r, cause
		}
	}
	b.notef("opening %q: outward_deg is not given; taken to face %s, away from the room; give outward_deg if that is wrong.", o.Name, b.faces(r))
	return r, nil
}

// faces says where an opening faces.
func (b *builder) faces(r system.Rect) string {
	const steep = 0.9
	switch {
	case r.Outward.Z > steep:
		return "up"
	case r.Outward.Z < -steep:
		return "down"
	}
	azimuth := math.Atan2(r.Outward.X, r.Outward.Y)*180/math.Pi + b.p.Site.NorthDeg
	// Whole degrees before the turn: 359.6 is 0, not 360.
	return fmt.Sprintf("azimuth %g", math.Mod(math.Mod(math.Round(azimuth), 360)+360, 360))
}

func (b *builder) notef(format string, args ...any) {
	b.s.Notes = append(b.s.Notes, fmt.Sprintf(format, args...))
}

// middle of the box around points.
func middle(points []r3.Vec) r3.Vec {
	lo, hi := points[0], points[0]
	for _, v := range points {
		lo = r3.Vec{X: math.Min(lo.X, v.X), Y: math.Min(lo.Y, v.Y), Z: math.Min(lo.Z, v.Z)}
		hi = r3.Vec{X: math.Max(hi.X, v.X), Y: math.Max(hi.Y, v.Y), Z: math.Max(hi.Z, v.Z)}
	}
	return r3.Scale(0.5, r3.Add(lo, hi))
}

func groupTriangles(meshes []*placed, name string) ([][3]r3.Vec, error) {
	var tris [][3]r3.Vec
	var groups []string
	for _, pm := range meshes {
		groups = append(groups, pm.m.Groups...)
		if g := pm.m.GroupIndex(name); g >= 0 {
			tris = append(tris, pm.m.GroupTriangles(g)...)
		}
	}
	if len(tris) == 0 {
		return nil, fmt.Errorf("mesh_group: no mesh has a group %q%s; there are %s", name, didYouMean(name, groups), list(groups))
	}
	return tris, nil
}
