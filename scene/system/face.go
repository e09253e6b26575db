package system

import "gonum.org/v1/gonum/spatial/r3"

// Face is one triangle of a system, in metres. Its front is the side from
// which V runs counter-clockwise.
type Face struct {
	V      [3]r3.Vec
	Finish string
	// Part is "pane", "shelf/top", "shelf/underside", "shelf/edge",
	// "roller/cloth", "slats", "slats/rail", or one of those that
	// AnidolicCeiling.Build names.
	Part string
	// Back is the finish of a sheet's back; "": Finish, with its own back.
	Back string
}

// Normal is the unit vector to the front; NaN for a triangle without area.
func (f Face) Normal() r3.Vec {
	return r3.Unit(r3.Cross(r3.Sub(f.V[1], f.V[0]), r3.Sub(f.V[2], f.V[0])))
}

// AreaM2 is the area of the triangle.
func (f Face) AreaM2() float64 {
	return r3.Norm(r3.Cross(r3.Sub(f.V[1], f.V[0]), r3.Sub(f.V[2], f.V[0]))) / 2
}

// Pane is the glass of an opening: two faces whose front is outdoors.
func Pane(r Rect, finish string) []Face {
	return quad(r.Point(0, 0, 0), r.Point(0, r.HeightM, 0),
		r.Point(r.WidthM, r.HeightM, 0), r.Point(r.WidthM, 0, 0), finish, "pane")
}

// quad splits a, b, c, d, counter-clockwise seen from the front.
func quad(a, b, c, d r3.Vec, finish, part string) []Face {
	return []Face{
		{V: [3]r3.Vec{a, b, c}, Finish: finish, Part: part},
		{V: [3]r3.Vec{a, c, d}, Finish: finish, Part: part},
	}
}
