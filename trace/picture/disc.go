package picture

import (
	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/view"
	"squint/trace/annual"
)

// Discs are the sun's disc and its images in mirrors that a view shows, which
// are not in the pixels of its picture.
func (l *Light) Discs(v view.View) []annual.Disc {
	sees := func(dir r3.Vec) bool { _, _, ok := v.Project(dir); return ok }
	out, _ := annual.Discs(l.stage.t, v.Position, sees, l.world.MirrorsFrom(v.Position), l.moment.Sun, &l.sun[0], nil, nil)
	return out
}
