package sunpath

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/view"
)

// Form says how the point looks.
type Form int

const (
	// Ahead looks along the line of sight or out of the opening.
	Ahead Form = iota
	// Up looks to the zenith and is drawn as on a plan: north at the top, east to
	// the right.
	Up
)

// fisheye maps directions to the unit disc: an equidistant fisheye of 180
// degrees. Source: K. Miyamoto, Fish eye lens, J. Opt. Soc. Am. 54 (1964)
// 1060-1061, by way of scene/view.
type fisheye struct {
	view view.View
	plan bool
}

func newFisheye(p Point, form Form, northRad float64) (fisheye, error) {
	forward, up := p.Ahead, r3.Vec{Z: 1}
	if form == Up {
		// North is at -northRad in the model.
		s, c := math.Sincos(northRad)
		forward, up = r3.Vec{Z: 1}, r3.Vec{X: -s, Y: c}
	} else if math.Abs(p.Ahead.Z) > 0.9999 {
		up = r3.Vec{Y: 1} // a roof light looks straight up: the model's +y is at the top
	}
	v, err := view.New(p.Position, forward, up, view.Equidistant, math.Pi, 2, 2)
	return fisheye{v, form == Up}, err
}

// project is where a direction is seen: x to the right, y downwards, both -1 to
// 1; false behind.
func (f fisheye) project(dir r3.Vec) (x, y float64, ok bool) {
	px, py, ok := f.view.Project(dir)
	x, y = px-1, py-1
	if f.plan {
		x = -x
	}
	return x, y, ok
}

// ray is the direction seen at a place of the disc.
func (f fisheye) ray(x, y float64) (dir r3.Vec, ok bool) {
	if f.plan {
		x = -x
	}
	return f.view.Ray(x+1, y+1)
}
