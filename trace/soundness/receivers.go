package soundness

import (
	"fmt"
	"strings"

	"squint/scene"
	"squint/trace"
)

// Receivers reports, one error each, viewpoints and work planes that stand
// inside a wall or another solid, below the ground, or outside the building: a
// work plane where more than half of its sensors do. Notes tell of fewer, and
// of rooms whose surfaces turn their backs to the receivers, in which the two
// cannot be told apart. A terrace under glass or under a roof counts as a room.
func Receivers(w *trace.World) (errs []error, notes []string) {
	file := w.Scene.Project.File
	behind := 0
	for _, v := range w.Scene.Viewpoints {
		at := place(w, v.Position)
		if at == thinShell {
			behind++
		}
		if why := trouble(at); why != "" {
			errs = append(errs, fmt.Errorf("%s:%d: viewpoint %q: [%.2f, %.2f, %.2f] is %s", file, v.Line, v.Name, v.Position.X, v.Position.Y, v.Position.Z, why))
		}
	}
	for i := range w.Scene.WorkPlanes {
		p := &w.Scene.WorkPlanes[i]
		count := tally(w, p)
		behind += count[thinShell]
		wrong := 0
		most := inSolid
		for _, at := range []where{inSolid, outdoors, underground} {
			wrong += count[at]
			if count[at] > count[most] {
				most = at
			}
		}
		switch n := len(p.Sensors); {
		case wrong*2 > n:
			errs = append(errs, fmt.Errorf("%s:%d: work_plane %q: %d of %d sensors do not lie in a room, most of them %s", file, p.Line, p.Name, wrong, n, planeTrouble(most)))
		case wrong > 0:
			notes = append(notes, fmt.Sprintf("work plane %q: %d of %d sensors lie inside solids such as columns and furniture, or out of doors: they count as dark or bright as they are.", p.Name, wrong, n))
		}
	}
	if behind > 0 {
		notes = append(notes, fmt.Sprintf("%d viewpoints and sensors see surfaces from behind only: the room is modelled as single sheets with their normals outwards, or inside out. Light is reflected by either side, but a receiver inside a solid cannot be told from one in the room.", behind))
	}
	return errs, notes
}

// OfGrids are the viewpoints of view grids that do not lie in a room, by index,
// with a note for each grid that has such. A grid of which nothing is left is an
// error.
func OfGrids(w *trace.World) (out []int, notes []string, errs []error) {
	file := w.Scene.Project.File
	views := w.Scene.Viewpoints
	for _, g := range w.Scene.Project.ViewGrids {
		var count [thinShell + 1]int // positions
		all, at := 0, inRoom
		for i, v := range views {
			if v.Grid != g.Name {
				continue
			}
			if i == 0 || views[i-1].Grid != g.Name || views[i-1].Position != v.Position {
				at = place(w, v.Position)
				count[at]++
				all++
			}
			if trouble(at) != "" {
				out = append(out, i)
			}
		}
		wrong := count[inSolid] + count[outdoors] + count[underground]
		switch {
		case wrong == 0:
		case wrong == all:
			errs = append(errs, fmt.Errorf("%s:%d: view_grid %q: none of %d positions lies in a room; check polygon_m and height_m, the mesh's unit, up and translate_m, and whether it has a roof", file, g.Line, g.Name, all))
		default:
			notes = append(notes, fmt.Sprintf("view grid %q leaves out %d of %d positions: %s.", g.Name, wrong, all, whereWords(count)))
		}
	}
	return out, notes, errs
}

func whereWords(count [thinShell + 1]int) string {
	var parts []string
	for _, k := range []struct {
		at    where
		words string
	}{{inSolid, "inside walls, furniture or other solids"}, {outdoors, "outside the building"}, {underground, "below the ground"}} {
		if n := count[k.at]; n > 0 {
			parts = append(parts, fmt.Sprintf("%d %s", n, k.words))
		}
	}
	return strings.Join(parts, ", ")
}

func tally(w *trace.World, p *scene.WorkPlane) (count [thinShell + 1]int) {
	for _, s := range p.Sensors {
		count[place(w, s.Position)]++
	}
	return count
}

func trouble(at where) string {
	switch at {
	case inSolid:
		return "inside a wall or another solid; move it into the room"
	case outdoors:
		return "outside the building, under the open sky; move it into the room, check unit, up and translate_m of the mesh, and whether the mesh has a roof"
	case underground:
		return "below the ground; check its height, and level_m of the ground"
	}
	return ""
}

func planeTrouble(at where) string {
	switch at {
	case outdoors:
		return "outside the building, under the open sky; check polygon_m, the mesh's unit, up and translate_m, and whether it has a roof"
	case underground:
		return "below the ground; check height_m, and level_m of the ground"
	}
	return "inside a wall or another solid; check polygon_m and height_m"
}
