package luminance

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/view"
)

// SetView copies a view to the attributes. Sizes are the image's own.
func (a *Attributes) SetView(v view.View) {
	a.Projection = v.Projection.String()
	a.FOVDeg = v.FOVRad * 180 / math.Pi
	a.Position = [3]float64{v.Position.X, v.Position.Y, v.Position.Z}
	a.Direction = [3]float64{v.Direction.X, v.Direction.Y, v.Direction.Z}
	a.Up = [3]float64{v.Up.X, v.Up.Y, v.Up.Z}
}

// View returns the view of the image. Where the image does not know its pose,
// the view is at the origin, looking north (+y) and level: glare needs only
// projection and field of view, and without those View is an error.
func (im *Image) View() (view.View, error) {
	a := &im.Attr
	if a.Projection == "" {
		return view.View{}, fmt.Errorf("%w: projection: the image does not say it; state it, for example equidistant", ErrInvalid)
	}
	p, err := view.ParseProjection(a.Projection)
	if err != nil {
		return view.View{}, err
	}
	if a.FOVDeg == 0 {
		return view.View{}, fmt.Errorf("%w: field of view: the image does not say it; state it, for example 180 degrees", ErrInvalid)
	}
	position := r3.Vec{X: a.Position[0], Y: a.Position[1], Z: a.Position[2]}
	direction := r3.Vec{X: a.Direction[0], Y: a.Direction[1], Z: a.Direction[2]}
	up := r3.Vec{X: a.Up[0], Y: a.Up[1], Z: a.Up[2]}
	if direction == (r3.Vec{}) {
		direction, up = r3.Vec{Y: 1}, r3.Vec{Z: 1}
	} else if up == (r3.Vec{}) {
		up = r3.Vec{Z: 1}
	}
	return view.New(position, direction, up, p, a.FOVDeg*math.Pi/180, im.Width, im.Height)
}
