package picture

import (
	"context"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene/view"
	"squint/trace/parallel"
)

// leaveCuts takes pixels of a plan out of the picture where the cut goes through
// a solid: all around and above, the first surface is met from behind. Where that
// is so for more than half of the plan the fronts are those of a room seen from
// within, turned round, and tell nothing.
func (l *Light) leaveCuts(ctx context.Context, f *film) error {
	plan, ok := f.camera.(view.Plan)
	if !ok {
		return nil
	}
	solid := make([]bool, len(f.pixel))
	err := parallel.Each(ctx, l.stage.cfg.Workers, f.height, func(y int) {
		for x := range f.width {
			org, _, _ := plan.Pixel(x, y)
			solid[y*f.width+x] = l.inSolid(org)
		}
	})
	if err != nil {
		return err
	}
	n := 0
	for _, s := range solid {
		if s {
			n++
		}
	}
	if 2*n > len(solid) {
		return nil
	}
	for i, s := range solid {
		if s {
			f.pixel[i] = reference{}
		}
	}
	return nil
}

func (l *Light) inSolid(p r3.Vec) bool {
	for _, dir := range [...]r3.Vec{{Z: 1}, {X: 1}, {X: -1}, {Y: 1}, {Y: -1}} {
		if h, ok := l.world.Closest(p, dir); !ok || h.Side != materials.Back {
			return false
		}
	}
	return true
}
