package soundness

import (
	"fmt"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/scene/system"
	"squint/trace"
)

const (
	// revealM is how deep a wall may be about its glass. Common practice, no
	// published source.
	revealM = 0.5
	// glassRows squared points of an opening are looked through.
	glassRows = 4
)

// Openings tells, in notes, of openings most of whose area is closed by an
// opaque face of a mesh within half a metre of the glass, as where the wall has
// no hole, and of those where the mesh has glass of its own besides the pane.
func Openings(w *trace.World) (notes []string) {
	for i, o := range w.Scene.Openings {
		const n = glassRows * glassRows
		switch wall, glass := inTheWay(w.Scene, i); {
		case wall*4 > n*3:
			notes = append(notes, fmt.Sprintf("opening %q: a mesh closes %d %% of it with something opaque less than %g m from the glass: leave a hole in the wall, or name the faces that are the glass as mesh_group.", o.Name, 100*wall/n, revealM))
		case glass*4 > n*3:
			notes = append(notes, fmt.Sprintf("opening %q: a mesh has glass of its own where the pane is, so that light passes twice: name that glass as mesh_group instead of corners_m, or take it out of the mesh.", o.Name))
		}
	}
	return notes
}

// inTheWay counts the points of an opening that have something opaque, and
// other glass, squarely before or behind them. It compares coordinates instead
// of following rays, since a wall may lie in the very plane of the glass.
func inTheWay(s *scene.Scene, opening int) (wall, glass int) {
	r := s.Openings[opening].Rect
	var walled, doubled [glassRows * glassRows]bool
	for i := range s.Triangles {
		t := &s.Triangles[i]
		part := &s.Parts[t.Part]
		if part.Kind == scene.System || part.Kind == scene.GroundPlane || part.Kind == scene.Pane && part.Opening == opening {
			continue
		}
		var local [3]r3.Vec
		for k, v := range t.V {
			local[k] = r.Local(v)
		}
		if r.Beside(local) {
			continue
		}
		_, through := s.Finishes[t.Finish].BSDF.Delta(materials.Front, 1)
		for k := range walled {
			x := (float64(k%glassRows) + 0.5) / glassRows * r.WidthM
			y := (float64(k/glassRows) + 0.5) / glassRows * r.HeightM
			if out, ok := system.DepthAt(local, x, y); ok && out > -revealM && out < revealM {
				walled[k] = walled[k] || through <= 0
				doubled[k] = doubled[k] || through > 0
			}
		}
	}
	for k := range walled {
		if walled[k] {
			wall++
		} else if doubled[k] {
			glass++
		}
	}
	return wall, glass
}
