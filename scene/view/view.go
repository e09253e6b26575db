package view

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// ErrInvalid is wrapped by every error of New and Validate.
var ErrInvalid = errors.New("invalid view")

// MaxPixels is the largest width or height accepted, so that the number of
// pixels fits in 31 bits with room to spare. Own choice.
const MaxPixels = 32768

// View is a camera. Direction and Up need not be unit vectors or at right
// angles to each other; the part of Up along Direction is ignored.
type View struct {
	Position  r3.Vec // eye point, m
	Direction r3.Vec // line of sight
	Up        r3.Vec // upwards in the image

	Projection Projection
	FOVRad     float64 // full angle; see the package comment

	Width, Height int // pixels

	Placement Placement // of a photograph's image on its pixels
}

// Placement says how the image of a camera lies on its pixels. The zero value
// is that of computed images: upright, and a fisheye's circle inscribed.
type Placement struct {
	// X, Y and RadiusPx are a fisheye's image circle in continuous pixel
	// coordinates, at least 1 pixel in radius; it may reach beyond the image.
	// RadiusPx 0 means the inscribed circle.
	X, Y, RadiusPx float64
	// RollRad is how far the camera was turned about its line of sight,
	// clockwise for who stands behind it. The view frame does not turn with
	// the camera: its z stays up.
	RollRad float64
}

// level turns coordinates of the image plane, right and up, into those of an
// upright camera.
func (p Placement) level(right, up float64) (float64, float64) {
	if p.RollRad == 0 {
		return right, up
	}
	sin, cos := math.Sincos(p.RollRad)
	return right*cos + up*sin, up*cos - right*sin
}

// rolled is the inverse of level.
func (p Placement) rolled(right, up float64) (float64, float64) {
	p.RollRad = -p.RollRad
	return p.level(right, up)
}

// New returns a valid view with unit, mutually perpendicular Direction and
// Up, or an error that wraps ErrInvalid.
func New(position, direction, up r3.Vec, p Projection, fovRad float64, width, height int) (View, error) {
	v := View{
		Position: position, Direction: direction, Up: up,
		Projection: p, FOVRad: fovRad, Width: width, Height: height,
	}
	if err := v.Validate(); err != nil {
		return View{}, err
	}
	v.Direction, _, v.Up = v.Frame()
	return v, nil
}

// Validate reports the first thing that makes the view unusable, or nil.
func (v View) Validate() error {
	if !finite(v.Position) {
		return fmt.Errorf("%w: position: got %v, want finite coordinates in metres", ErrInvalid, v.Position)
	}
	if !finite(v.Direction) || r3.Norm(v.Direction) < 1e-9 {
		return fmt.Errorf("%w: direction: got %v, want a finite vector longer than 1e-9", ErrInvalid, v.Direction)
	}
	if !finite(v.Up) || r3.Norm(v.Up) < 1e-9 {
		return fmt.Errorf("%w: up: got %v, want a finite vector longer than 1e-9", ErrInvalid, v.Up)
	}
	// 1e-6 rad: nearer than that the roll of the image is rounding noise.
	if r3.Norm(r3.Cross(r3.Unit(v.Direction), r3.Unit(v.Up))) < 1e-6 {
		return fmt.Errorf("%w: up: got %v, parallel to direction %v; choose another up vector", ErrInvalid, v.Up, v.Direction)
	}
	if v.Projection < 0 || int(v.Projection) >= len(projections) {
		return fmt.Errorf("%w: projection: got %d, want 0 to %d", ErrInvalid, int(v.Projection), len(projections)-1)
	}
	p := projections[v.Projection]
	if !(v.FOVRad > 0) || v.FOVRad > p.maxFOV || (p.open && v.FOVRad >= p.maxFOV) {
		end := "up to"
		if p.open {
			end = "below"
		}
		return fmt.Errorf("%w: field of view: got %g degrees, want more than 0 and %s %g for the %s projection",
			ErrInvalid, v.FOVRad*180/math.Pi, end, p.maxFOV*180/math.Pi, p.name)
	}
	if v.Width < 1 || v.Width > MaxPixels || v.Height < 1 || v.Height > MaxPixels {
		return fmt.Errorf("%w: size: got %d x %d pixels, want 1 to %d each way", ErrInvalid, v.Width, v.Height, MaxPixels)
	}
	return v.validatePlacement()
}

func (v View) validatePlacement() error {
	p := v.Placement
	if !(math.Abs(p.RollRad) <= 2*math.Pi) {
		return fmt.Errorf("%w: roll: got %g degrees, want -360 to 360", ErrInvalid, p.RollRad*180/math.Pi)
	}
	if p.RadiusPx == 0 {
		return nil
	}
	if !v.Projection.Fisheye() {
		return fmt.Errorf("%w: image circle: got one for the %s projection, want it for fisheyes only", ErrInvalid, v.Projection)
	}
	// Far more than MaxPixels: a circle of which the image shows a corner.
	const far = 1e6
	if !(p.RadiusPx >= 1 && p.RadiusPx <= far && math.Abs(p.X) <= far && math.Abs(p.Y) <= far) {
		return fmt.Errorf("%w: image circle: got centre (%g, %g), radius %g pixels, want a radius from 1 and all within %g", ErrInvalid, p.X, p.Y, p.RadiusPx, far)
	}
	return nil
}

// Frame returns the unit axes of the view frame in world coordinates.
func (v View) Frame() (forward, left, up r3.Vec) {
	forward = r3.Unit(v.Direction)
	left = r3.Unit(r3.Cross(v.Up, forward))
	return forward, left, r3.Cross(forward, left)
}

// Local turns a world direction into the view frame. Length is kept.
func (v View) Local(dir r3.Vec) r3.Vec {
	f, l, u := v.Frame()
	return r3.Vec{X: r3.Dot(dir, f), Y: r3.Dot(dir, l), Z: r3.Dot(dir, u)}
}

// World turns a direction of the view frame into world coordinates. Length is
// kept.
func (v View) World(local r3.Vec) r3.Vec {
	f, l, u := v.Frame()
	return r3.Add(r3.Add(r3.Scale(local.X, f), r3.Scale(local.Y, l)), r3.Scale(local.Z, u))
}

// Ray returns the unit world direction seen at the continuous pixel
// coordinates (px, py). ok is false outside of the image, outside of the
// image circle of a fisheye, and beyond the poles of an equirectangular
// image.
func (v View) Ray(px, py float64) (dir r3.Vec, ok bool) {
	local, ok := v.LocalRay(px, py)
	if !ok {
		return r3.Vec{}, false
	}
	return v.World(local), true
}

// PixelRay returns a unit world direction that stands for pixel (ix, iy): its
// centre or, where the centre of a pixel cut by the image circle or by a pole
// lies outside, a point of its inside part. ok is false for pixels with no inside
// part.
func (v View) PixelRay(ix, iy int) (dir r3.Vec, ok bool) {
	local, ok := v.LocalPixelRay(ix, iy)
	if !ok {
		return r3.Vec{}, false
	}
	return v.World(local), true
}

// LocalPixelRay is PixelRay in the view frame.
func (v View) LocalPixelRay(ix, iy int) (dir r3.Vec, ok bool) {
	if ix < 0 || iy < 0 || ix >= v.Width || iy >= v.Height {
		return r3.Vec{}, false
	}
	px, py := float64(ix)+0.5, float64(iy)+0.5
	if dir, ok := v.LocalRay(px, py); ok {
		return dir, true
	}
	if v.Projection == Equirectangular { // cut by a pole
		pole := math.Pi / 2 / v.perPixel()
		mid := float64(v.Height) / 2
		y0, y1 := nearest(float64(iy), mid-pole, mid+pole), nearest(float64(iy)+1, mid-pole, mid+pole)
		if y0 < y1 {
			return v.LocalRay(px, (y0+y1)/2)
		}
	}
	if !v.Projection.Fisheye() {
		return r3.Vec{}, false
	}
	// The centre is outside of the circle: take the middle between the
	// corner nearest to the middle of the image and the circle, on the ray
	// from the middle through that corner.
	cx, cy, radius := v.Circle()
	nx := nearest(cx, float64(ix), float64(ix)+1) - cx
	ny := nearest(cy, float64(iy), float64(iy)+1) - cy
	r := math.Hypot(nx, ny)
	if r >= radius {
		return r3.Vec{}, false
	}
	s := 0.5 * (r + radius) / r // r > 0: the centre of the circle is inside
	return v.LocalRay(cx+nx*s, cy+ny*s)
}

// Project returns the continuous pixel coordinates at which the world
// direction dir is seen; dir need not be a unit vector. ok is false where it
// is not seen.
func (v View) Project(dir r3.Vec) (px, py float64, ok bool) {
	return v.LocalProject(v.Local(dir))
}

// Size is the image's size in pixels.
func (v View) Size() (width, height int) { return v.Width, v.Height }

// Through is Ray with the place where it begins: the eye.
func (v View) Through(px, py float64) (org, dir r3.Vec, ok bool) {
	dir, ok = v.Ray(px, py)
	return v.Position, dir, ok
}

// Pixel is PixelRay with the eye; ok is false for pixels that have no solid
// angle within the image.
func (v View) Pixel(ix, iy int) (org, dir r3.Vec, ok bool) {
	if v.SolidAngle(ix, iy) <= 0 {
		return v.Position, r3.Vec{}, false
	}
	dir, ok = v.PixelRay(ix, iy)
	return v.Position, dir, ok
}

func finite(a r3.Vec) bool {
	s := a.X + a.Y + a.Z
	return !math.IsNaN(s) && !math.IsInf(a.X, 0) && !math.IsInf(a.Y, 0) && !math.IsInf(a.Z, 0)
}

// nearest is the number of lo..hi nearest to x.
func nearest(x, lo, hi float64) float64 { return math.Min(math.Max(x, lo), hi) }
