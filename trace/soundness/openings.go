package soundness

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/scene/system"
	"squint/trace"
)

const (
	// revealM is how deep a wall may be about its glass. Common practice, no
	// published source.
	revealM = 0.5
	// coplanarM is how far off its plane a look starts, to meet what lies in it.
	coplanarM = 0.02
	// glassRows squared points of an opening are looked through.
	glassRows = 4
)

// Openings tells, in notes, of openings most of whose area is closed by an
// opaque face of a mesh within half a metre of the glass, as where the wall has
// no hole, and of those where the mesh has glass of its own besides the pane.
func Openings(w *trace.World) (notes []string) {
	for i, o := range w.Scene.Openings {
		walled, doubled := 0, 0
		const n = glassRows * glassRows
		for k := range n {
			x := (float64(k%glassRows) + 0.5) / glassRows * o.Rect.WidthM
			y := (float64(k/glassRows) + 0.5) / glassRows * o.Rect.HeightM
			wall, glass := through(w, i, o.Rect, x, y)
			if wall {
				walled++
			}
			if glass {
				doubled++
			}
		}
		if walled*4 > n*3 {
			notes = append(notes, fmt.Sprintf("opening %q: a mesh closes %d %% of it with something opaque less than %g m from the glass: leave a hole in the wall, or name the faces that are the glass as mesh_group.", o.Name, 100*walled/n, revealM))
		} else if doubled*4 > n*3 {
			notes = append(notes, fmt.Sprintf("opening %q: a mesh has glass of its own where the pane is, so that light passes twice: name that glass as mesh_group instead of corners_m, or take it out of the mesh.", o.Name))
		}
	}
	return notes
}

// through looks along the normal, indoors and outdoors, from a point of the
// glass.
func through(w *trace.World, opening int, r system.Rect, x, y float64) (wall, glass bool) {
	for _, side := range []float64{1, -1} {
		p, d := r.Point(x, y, -side*coplanarM), r3.Scale(side, r.Outward)
		for left := revealM; left > 0; {
			h, ok := w.Closest(p, d)
			if !ok || h.T > left {
				break
			}
			part := &w.Scene.Parts[h.Part]
			own := part.Kind == scene.System || part.Kind == scene.Pane && part.Opening == opening
			clear := passes(&h)
			if !own && !clear && part.Kind != scene.GroundPlane {
				wall = true
			}
			glass = glass || !own && clear
			if !clear && !own {
				break
			}
			left -= math.Max(h.T, w.Epsilon())
			p = w.Offset(h.Point, d)
		}
	}
	return wall, glass
}
