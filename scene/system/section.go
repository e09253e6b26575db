package system

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// Local is a point of the model in the rectangle's own frame: X along Across
// and Y along Up from the lower left corner, Z outdoors of the glass, metres.
func (r Rect) Local(p r3.Vec) r3.Vec {
	d := r3.Sub(p, r.Origin)
	return r3.Vec{X: r3.Dot(d, r.Across), Y: r3.Dot(d, r.Up), Z: r3.Dot(d, r.Outward)}
}

// Beside reports whether a triangle, in the rectangle's own frame, surely lies
// nowhere straight before or behind the glass.
func (r Rect) Beside(local [3]r3.Vec) bool {
	a, b, c := local[0], local[1], local[2]
	return max(a.X, b.X, c.X) < 0 || min(a.X, b.X, c.X) > r.WidthM ||
		max(a.Y, b.Y, c.Y) < 0 || min(a.Y, b.Y, c.Y) > r.HeightM
}

// DepthAt is how far outdoors of the glass (negative: indoors) a triangle, in
// the rectangle's own frame, stands square to the point acrossM, upM of the
// glass; false where it does not, or is seen edge on.
func DepthAt(local [3]r3.Vec, acrossM, upM float64) (outM float64, ok bool) {
	a, b, c := local[0], local[1], local[2]
	area := (b.X-a.X)*(c.Y-a.Y) - (c.X-a.X)*(b.Y-a.Y)
	if math.Abs(area) < 1e-12 {
		return 0, false
	}
	for k := range 3 {
		p, q := local[(k+1)%3], local[(k+2)%3]
		weight := ((p.X-acrossM)*(q.Y-upM) - (q.X-acrossM)*(p.Y-upM)) / area
		if weight < 0 {
			return 0, false
		}
		outM += weight * local[k].Z
	}
	return outM, true
}
