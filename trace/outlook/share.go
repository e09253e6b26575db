package outlook

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/system"
	"squint/trace"
)

// ViewShare is what is left of the view through an opening with a system
// against without it: the opening's solid angle as seen from the eye, each
// direction weighted by the light that comes straight from outdoors, in the
// scene with the system over the scene without. Neighbouring buildings and the
// ground are view too; the room and what belongs to it are not.
//
// n by n lines of sight (n at least 1) aim at the middles of equal cells of the
// opening: an edge that runs along the cells is found to within half a cell.
// NaN where nothing is seen without the system: the eye stands behind the
// glass, or a wall in between.
func ViewShare(with, without *trace.World, eye r3.Vec, opening system.Rect, n int) float64 {
	var left, whole float64
	for i := range n {
		for j := range n {
			q := opening.Point((float64(i)+0.5)/float64(n)*opening.WidthM, (float64(j)+0.5)/float64(n)*opening.HeightM, 0)
			d := r3.Sub(q, eye)
			dir := r3.Unit(d)
			sr := r3.Dot(dir, opening.Outward) / r3.Norm2(d) // times the cell's area
			if sr <= 0 {
				continue
			}
			_, _, tau := look(without, eye, dir)
			whole += sr * tau
			_, _, tau = look(with, eye, dir)
			left += sr * tau
		}
	}
	if whole == 0 {
		return math.NaN()
	}
	return left / whole
}
