package sunpath

import (
	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
)

// Point is where the sun is looked for.
type Point struct {
	Name     string
	Position r3.Vec // m
	// Ahead is the line of sight, or the outward normal of an opening; unit.
	Ahead r3.Vec
	// Opening: only the half space that Ahead points to counts, since what
	// reaches the glass from indoors does not come in.
	Opening bool
}

// outsideM sets a point before the glass. Own choice: clear of rounding,
// behind whatever hangs outdoors.
const outsideM = 0.01

// AtViewpoint is a viewpoint's eye.
func AtViewpoint(v scene.Viewpoint) Point {
	return Point{Name: v.Name, Position: v.Position, Ahead: r3.Unit(v.Direction)}
}

// AtOpening is the middle of an opening's glass, on its outdoor face.
func AtOpening(o scene.Opening) Point {
	r := o.Rect
	return Point{Name: o.Name, Position: r.Point(r.WidthM/2, r.HeightM/2, outsideM), Ahead: r.Outward, Opening: true}
}

// sees reports whether light from dir counts.
func (p Point) sees(dir r3.Vec) bool { return !p.Opening || r3.Dot(dir, p.Ahead) > 0 }

// level is the horizontal direction nearest to d; +y for the vertical.
func level(d r3.Vec) r3.Vec {
	flat := r3.Vec{X: d.X, Y: d.Y}
	if r3.Norm(flat) < 1e-9 {
		return r3.Vec{Y: 1}
	}
	return r3.Unit(flat)
}
