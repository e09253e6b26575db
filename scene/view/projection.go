package view

import (
	"fmt"
	"math"
	"strings"

	"gonum.org/v1/gonum/spatial/r3"
)

// Projection says how directions are laid out in the image. With theta the
// angle from the line of sight and r the distance from the middle of the
// image, the fisheyes are
//
//	Equidistant    r ~ theta
//	Equisolid      r ~ sin(theta/2)   equal pixels have equal solid angles
//	Orthographic   r ~ sin(theta)     equal pixels have equal projected solid angles
//	Stereographic  r ~ tan(theta/2)   circles stay circles
//
// Source: K. Miyamoto, Fish eye lens, J. Opt. Soc. Am. 54 (1964) 1060-1061
// (from memory). With az the azimuth and el the elevation in the view frame,
// the others are
//
//	Perspective      x ~ tan(az), y ~ tan(el)/cos(az)
//	Cylindrical      x ~ az, y ~ tan(el)
//	Equirectangular  x ~ az, y ~ el
type Projection int

// The projections.
const (
	Equidistant Projection = iota
	Equisolid
	Orthographic
	Stereographic
	Perspective
	Cylindrical
	Equirectangular
)

// projections holds name and largest field of view by Projection; open means
// that the largest itself is excluded, because it is seen at infinity.
var projections = [...]struct {
	name   string
	maxFOV float64
	open   bool
}{
	Equidistant:     {"equidistant", 2 * math.Pi, false},
	Equisolid:       {"equisolid", 2 * math.Pi, false},
	Orthographic:    {"orthographic", math.Pi, false},
	Stereographic:   {"stereographic", 2 * math.Pi, true},
	Perspective:     {"perspective", math.Pi, true},
	Cylindrical:     {"cylindrical", 2 * math.Pi, false},
	Equirectangular: {"equirectangular", 2 * math.Pi, false},
}

// String returns the lower-case name of the projection.
func (p Projection) String() string {
	if p < 0 || int(p) >= len(projections) {
		return fmt.Sprintf("projection(%d)", int(p))
	}
	return projections[p].name
}

// ParseProjection is the inverse of Projection.String.
func ParseProjection(name string) (Projection, error) {
	names := make([]string, len(projections))
	for i, p := range projections {
		if p.name == name {
			return Projection(i), nil
		}
		names[i] = p.name
	}
	return 0, fmt.Errorf("%w: projection: got %q, want one of %s", ErrInvalid, name, strings.Join(names, ", "))
}

// Fisheye tells whether the projection fills a circle.
func (p Projection) Fisheye() bool { return p >= Equidistant && p <= Stereographic }

// radius is the distance r of the angle theta (rad) from the middle, in the
// fisheye's own scale: r = theta, sin(theta/2), sin(theta) or tan(theta/2).
func (p Projection) radius(theta float64) float64 {
	switch p {
	case Equisolid:
		return math.Sin(theta / 2)
	case Orthographic:
		return math.Sin(theta)
	case Stereographic:
		return math.Tan(theta / 2)
	}
	return theta
}

// theta is the inverse of radius.
func (p Projection) theta(r float64) float64 {
	switch p {
	case Equisolid:
		return 2 * math.Asin(math.Min(r, 1))
	case Orthographic:
		return math.Asin(math.Min(r, 1))
	case Stereographic:
		return 2 * math.Atan(r)
	}
	return r
}

// Circle is the image circle of a fisheye, in pixels. Of other projections only
// the centre has a meaning: where the line of sight is seen.
func (v View) Circle() (cx, cy, radius float64) {
	if p := v.Placement; p.RadiusPx > 0 {
		return p.X, p.Y, p.RadiusPx
	}
	return float64(v.Width) / 2, float64(v.Height) / 2, float64(min(v.Width, v.Height)) / 2
}

// perPixel is the scale in the middle of the image: own units of the
// projection per pixel.
func (v View) perPixel() float64 {
	switch {
	case v.Projection.Fisheye():
		_, _, radius := v.Circle()
		return v.Projection.radius(v.FOVRad/2) / radius
	case v.Projection == Perspective:
		return 2 * math.Tan(v.FOVRad/2) / float64(v.Width)
	}
	return v.FOVRad / float64(v.Width)
}

// rim is the relative rounding allowed at the edge of the image, so that what
// Ray accepts Project accepts too; about 1e4 times the machine epsilon.
const rim = 1e-12

// LocalRay is Ray in the view frame.
func (v View) LocalRay(px, py float64) (dir r3.Vec, ok bool) {
	w, h := float64(v.Width), float64(v.Height)
	if !(px >= 0 && px <= w && py >= 0 && py <= h) {
		return r3.Vec{}, false
	}
	s := v.perPixel()
	cx, cy, _ := v.Circle()
	right, up := v.Placement.level((px-cx)*s, (cy-py)*s)
	switch v.Projection {
	case Perspective:
		return r3.Unit(r3.Vec{X: 1, Y: -right, Z: up}), true
	case Cylindrical:
		sin, cos := math.Sincos(-right)
		return r3.Unit(r3.Vec{X: cos, Y: sin, Z: up}), true
	case Equirectangular:
		if math.Abs(up) > math.Pi/2*(1+rim) {
			return r3.Vec{}, false
		}
		sinAz, cosAz := math.Sincos(-right)
		sinEl, cosEl := math.Sincos(up)
		return r3.Vec{X: cosEl * cosAz, Y: cosEl * sinAz, Z: sinEl}, true
	}
	r := math.Hypot(right, up)
	if r > v.Projection.radius(v.FOVRad/2)*(1+rim) {
		return r3.Vec{}, false
	}
	if r == 0 {
		return r3.Vec{X: 1}, true
	}
	sin, cos := math.Sincos(v.Projection.theta(r))
	return r3.Vec{X: cos, Y: -right / r * sin, Z: up / r * sin}, true
}

// LocalProject is Project in the view frame.
func (v View) LocalProject(dir r3.Vec) (px, py float64, ok bool) {
	if !finite(dir) || dir == (r3.Vec{}) {
		return 0, 0, false
	}
	var right, up float64
	flat := math.Hypot(dir.X, dir.Y)
	switch v.Projection {
	case Perspective:
		if dir.X <= 0 {
			return 0, 0, false
		}
		right, up = -dir.Y/dir.X, dir.Z/dir.X
	case Cylindrical:
		right, up = -math.Atan2(dir.Y, dir.X), dir.Z/flat // infinite at the poles: not seen
	case Equirectangular:
		right, up = -math.Atan2(dir.Y, dir.X), math.Atan2(dir.Z, flat)
	default:
		off := math.Hypot(dir.Y, dir.Z)
		theta := math.Atan2(off, dir.X)
		if theta > v.FOVRad/2*(1+rim) {
			return 0, 0, false
		}
		if off > 0 {
			r := v.Projection.radius(math.Min(theta, v.FOVRad/2))
			right, up = -dir.Y/off*r, dir.Z/off*r
		} else if dir.X < 0 {
			right = v.Projection.radius(math.Min(theta, v.FOVRad/2)) // straight behind: any point of the rim
		}
	}
	s := v.perPixel()
	right, up = v.Placement.rolled(right, up)
	cx, cy, _ := v.Circle()
	px, okX := onto(cx+right/s, float64(v.Width))
	py, okY := onto(cy-up/s, float64(v.Height))
	return px, py, okX && okY
}

// onto tells whether x lies in 0..size, and clears rounding at its ends.
func onto(x, size float64) (float64, bool) {
	if !(x >= -size*rim && x <= size*(1+rim)) {
		return x, false
	}
	return nearest(x, 0, size), true
}
