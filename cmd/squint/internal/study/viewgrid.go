package study

import (
	"errors"
	"fmt"
	"slices"

	"squint/scene"
	"squint/scene/project"
	"squint/trace/soundness"
)

// leaveOut takes the viewpoints of grids that do not lie in a room out of the
// project and of the scene built from it, which are numbered alike.
func (in *Input) leaveOut() error {
	out, notes, errs := soundness.OfGrids(in.World)
	gone := map[string]bool{}
	for _, i := range out {
		gone[in.Scene.Viewpoints[i].Name] = true
	}
	for _, c := range in.Project.Controls {
		for _, name := range c.Viewpoints {
			if gone[name] {
				errs = append(errs, fmt.Errorf("%s:%d: control.viewpoints: %q is left out of its view grid, as it does not lie in a room; want one that does", in.Project.File, c.Line, name))
			}
		}
	}
	if len(errs) > 0 {
		return errors.Join(errs...)
	}
	in.Notes = append(in.Notes, notes...)
	if len(gone) == 0 {
		return nil
	}
	p := *in.Project
	p.Viewpoints = slices.DeleteFunc(slices.Clone(p.Viewpoints), func(v project.Viewpoint) bool { return gone[v.Name] })
	in.Scene.Viewpoints = slices.DeleteFunc(in.Scene.Viewpoints, func(v scene.Viewpoint) bool { return gone[v.Name] })
	in.Project, in.Scene.Project = &p, &p
	return nil
}
