package surface

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// clipToGrid cuts a convex polygon along the planes of a grid of the given cell
// edges along the axes (shifted by gridShift) into convex polygons that lie in
// one cell each. Source: Sutherland & Hodgman 1974, Reentrant Polygon Clipping,
// CACM 17(1), applied plane by plane.
func clipToGrid(poly []r3.Vec, cell [3]float64) [][]r3.Vec {
	out := [][]r3.Vec{poly}
	for axis := 0; axis < 3; axis++ {
		var next [][]r3.Vec
		for _, p := range out {
			next = slice(next, p, axis, cell[axis])
		}
		out = next
	}
	return out
}

func coord(v r3.Vec, axis int) float64 {
	switch axis {
	case 0:
		return v.X
	case 1:
		return v.Y
	}
	return v.Z
}

// slice appends the parts of p between consecutive grid planes of one axis.
func slice(out [][]r3.Vec, p []r3.Vec, axis int, cell float64) [][]r3.Vec {
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, v := range p {
		lo, hi = math.Min(lo, coord(v, axis)), math.Max(hi, coord(v, axis))
	}
	first := math.Floor(lo/cell-gridShift) + 1
	for k := first; ; k++ {
		plane := (k + gridShift) * cell
		if plane >= hi {
			break
		}
		below, above := split(p, axis, plane)
		if len(below) >= 3 {
			out = append(out, below)
		}
		if len(above) < 3 {
			return out
		}
		p = above
	}
	return append(out, p)
}

func split(p []r3.Vec, axis int, plane float64) (below, above []r3.Vec) {
	for i, a := range p {
		b := p[(i+1)%len(p)]
		da, db := coord(a, axis)-plane, coord(b, axis)-plane
		if da <= 0 {
			below = append(below, a)
		}
		if da >= 0 {
			above = append(above, a)
		}
		if (da < 0 && db > 0) || (da > 0 && db < 0) {
			m := r3.Add(a, r3.Scale(da/(da-db), r3.Sub(b, a)))
			below, above = append(below, m), append(above, m)
		}
	}
	return below, above
}
