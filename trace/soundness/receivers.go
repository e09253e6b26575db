package soundness

import (
	"fmt"

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
