package soundness

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/trace"
)

// Receivers reports, one error each, viewpoints and work planes that stand
// inside a wall or another solid, or outside the building. A point is inside a
// solid where most rays meet the back of an opaque surface first, and outside
// where most rays upwards meet nothing. A mesh whose normals all point the
// wrong way is seen as such when every receiver in it is surrounded by backs:
// one error then names the mesh's normals instead, as a note.
func Receivers(w *trace.World) (errs []error, notes []string) {
	file := w.Scene.Project.File
	insideOut := 0
	for _, v := range w.Scene.Viewpoints {
		switch place(w, v.Position) {
		case inSolid:
			errs = append(errs, fmt.Errorf("%s:%d: viewpoint %q: [%.2f, %.2f, %.2f] is inside a wall or another solid; move it into the room", file, v.Line, v.Name, v.Position.X, v.Position.Y, v.Position.Z))
		case outdoors:
			errs = append(errs, fmt.Errorf("%s:%d: viewpoint %q: [%.2f, %.2f, %.2f] is outside the building, under the open sky; move it into the room, or check unit, up and translate_m of the mesh", file, v.Line, v.Name, v.Position.X, v.Position.Y, v.Position.Z))
		case thinShell:
			insideOut++
		}
	}
	for _, p := range w.Scene.WorkPlanes {
		solid, out := 0, 0
		for _, s := range p.Sensors {
			switch place(w, s.Position) {
			case inSolid:
				solid++
			case outdoors:
				out++
			case thinShell:
				insideOut++
			}
		}
		if out*2 > len(p.Sensors) {
			errs = append(errs, fmt.Errorf("%s:%d: work_plane %q: %d of %d sensors are outside the building, under the open sky; check polygon_m and height_m", file, p.Line, p.Name, out, len(p.Sensors)))
		} else if solid*2 > len(p.Sensors) {
			errs = append(errs, fmt.Errorf("%s:%d: work_plane %q: %d of %d sensors are inside a wall or another solid; check polygon_m and height_m", file, p.Line, p.Name, solid, len(p.Sensors)))
		} else if solid+out > 0 {
			notes = append(notes, fmt.Sprintf("work plane %q: %d of %d sensors lie inside solids or out of doors (columns, furniture): they count as dark or bright as they are.", p.Name, solid+out, len(p.Sensors)))
		}
	}
	if insideOut > 0 {
		notes = append(notes, "the room is modelled without wall thickness or with its normals outwards: a receiver inside a solid cannot be told from one in the room.")
	}
	return errs, notes
}

type where int

const (
	inRoom where = iota
	inSolid
	outdoors
	thinShell // surrounded by backs as far as a room goes
)

// place looks around from p in a fixed set of directions.
func place(w *trace.World, p r3.Vec) where {
	const n = 64
	var backs, open, up, near int
	for i := range n {
		u, v := sampling.OwenSobol2(uint32(i), 1)
		d := sampling.UniformSphere(u, v)
		h, ok := w.Closest(p, d)
		if d.Z > 0 {
			up++
			if !ok {
				open++
			}
		}
		if !ok || passes(w, &h) {
			continue
		}
		if h.Side == materials.Back && w.Scene.Parts[h.Part].Kind != scene.GroundPlane {
			backs++
			if h.T < wallM {
				near++
			}
		}
	}
	switch {
	case open*4 > up*3:
		return outdoors
	case backs*4 > n*3 && near*2 > n:
		return inSolid
	case backs*4 > n*3:
		return thinShell
	}
	return inRoom
}

// wallM is the thickness up to which a closed solid is taken for a wall or a
// piece of furniture rather than a room modelled inside out. Common practice,
// no published source.
const wallM = 1.0

// passes reports whether the surface lets light straight through: a pane has
// no inside.
func passes(w *trace.World, h *trace.Hit) bool {
	_, through := h.BSDF.Delta(h.Side, math.Max(h.Cos, 0.5))
	return through > 0
}
