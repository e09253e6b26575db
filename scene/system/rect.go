package system

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// How far a rectangle may be off. Common practice, no published source:
// coordinates rounded to a centimetre skew the corner of a 1 m edge by up to
// 0.6 degrees and lift it off the plane by as much as 0.5 cm.
const (
	maxSkewRad  = math.Pi / 180 // of a corner from 90 degrees
	maxOffPlane = 0.005         // share of the diagonal
	minSideM    = 0.01          // of an opening
	maxCoordM   = 1e5           // further out single precision loses centimetres
)

// Openings that lie flat, whose outward side is up whatever azimuth they are
// given, are within 5 degrees of level.
const (
	flatCos = 0.99619 // cosine of 5 degrees
	flatSin = 0.08716 // sine of 5 degrees
)

// minSide is the cosine between the glass's normal and a hint under which
// the hint does not tell the sides apart: it runs along the glass within 0.6
// degrees, less than the skew that a corner may have.
const minSide = 0.01

// levelRise is the rise per length under which an edge counts as level:
// the rounding of coordinates to a tenth of a millimetre on a 1 m edge.
const levelRise = 1e-4

// Rect is the plane of an opening's glass. Across, Up and Outward are unit
// vectors at right angles, Across x Up = -Outward: seen from indoors, looking
// out, Origin is the lower left corner, Across points right and Up up.
// Of a sloping opening Up follows the slope.
type Rect struct {
	Origin, Across, Up, Outward r3.Vec
	WidthM, HeightM             float64 // along Across and Up
}

// Point is the point at acrossM and upM from the lower left corner, outM
// outdoors of the plane of the glass (negative: indoors).
func (r Rect) Point(acrossM, upM, outM float64) r3.Vec {
	p := r3.Add(r.Origin, r3.Scale(acrossM, r.Across))
	p = r3.Add(p, r3.Scale(upM, r.Up))
	return r3.Add(p, r3.Scale(outM, r.Outward))
}

// Corners run counter-clockwise seen from outdoors and start lower right seen
// from indoors, which is lower left seen from outdoors.
func (r Rect) Corners() [4]r3.Vec {
	w, h := r.WidthM, r.HeightM
	return [4]r3.Vec{r.Point(w, 0, 0), r.Point(0, 0, 0), r.Point(0, h, 0), r.Point(w, h, 0)}
}

// LeanRad is how far the opening is tilted back from upright: 0 for a wall,
// pi/2 for a roof light, negative where the top leans outdoors.
func (r Rect) LeanRad() float64 { return math.Atan2(r.Outward.Z, r.Up.Z) }

// RectFromCorners makes a Rect of four corners in order around the
// rectangle. Outward is the side to which the hint points; a zero hint means
// that the corners run counter-clockwise seen from outdoors. The outward side
// of an opening within 5 degrees of flat is up whenever the hint lies within
// 5 degrees of its plane.
//
// Up is the edge direction that rises most. Where neither rises, the first
// two corners make the lower edge, Across runs along it.
//
// Corners may be 1 degree off a right angle and 0.5 % of the diagonal off
// the plane; the result is the rectangle of mean sides about their middle.
func RectFromCorners(corners [4]r3.Vec, outward r3.Vec) (Rect, error) {
	for i, c := range corners {
		if !usable(c) {
			return Rect{}, fmt.Errorf("corner %d: got %s, want coordinates within %g m of the origin", i+1, point(c), maxCoordM)
		}
	}
	for i, c := range corners {
		for k := range i {
			if d := r3.Norm(r3.Sub(c, corners[k])); d < minSideM {
				return Rect{}, fmt.Errorf("corner %d: lies %.4g m from corner %d, want at least %g m; give four different corners", i+1, d, k+1, minSideM)
			}
		}
	}
	d1, d2 := r3.Sub(corners[2], corners[0]), r3.Sub(corners[3], corners[1])
	cross := r3.Cross(d1, d2)
	diagonal := max(r3.Norm(d1), r3.Norm(d2))
	if r3.Norm(cross) < 1e-9*diagonal*diagonal {
		return Rect{}, errors.New("corners: lie on one line or are not in order; give the corners of a rectangle in order around it")
	}
	normal := r3.Unit(cross)
	mid := r3.Scale(0.25, r3.Add(r3.Add(corners[0], corners[1]), r3.Add(corners[2], corners[3])))
	for i := range corners {
		if off := math.Abs(r3.Dot(r3.Sub(corners[i], mid), normal)); off > maxOffPlane*diagonal {
			return Rect{}, fmt.Errorf("corner %d: lies %.4g m off the plane of the others, want at most %.4g m; split a twisted or curved opening into plane ones", i+1, off, maxOffPlane*diagonal)
		}
	}
	for i := range corners {
		a := r3.Unit(r3.Sub(corners[(i+1)%4], corners[i]))
		b := r3.Unit(r3.Sub(corners[(i+3)%4], corners[i]))
		angle := math.Acos(min(1, max(-1, r3.Dot(a, b))))
		if math.Abs(angle-math.Pi/2) > maxSkewRad {
			return Rect{}, fmt.Errorf("corner %d: the angle is %.2f degrees, want 90 within 1; give the corners of a rectangle in order around it", i+1, angle*180/math.Pi)
		}
	}
	e1 := r3.Scale(0.5, r3.Add(r3.Sub(corners[1], corners[0]), r3.Sub(corners[2], corners[3])))
	e2 := r3.Scale(0.5, r3.Add(r3.Sub(corners[3], corners[0]), r3.Sub(corners[2], corners[1])))
	return orient(mid, e1, e2, outward, normal)
}

// orient builds the Rect about mid with edges e1 and e2, at right angles but
// for rounding. Of a zero hint the outward side is normal.
func orient(mid, e1, e2, hint, normal r3.Vec) (Rect, error) {
	out, err := outwardSide(normal, hint)
	if err != nil {
		return Rect{}, err
	}
	across, up := e1, e2
	rise1, rise2 := math.Abs(r3.Unit(e1).Z), math.Abs(r3.Unit(e2).Z)
	level := max(rise1, rise2) < levelRise
	if rise1 > rise2*(1+1e-9) && !level {
		across, up = e2, e1
	}
	w, h := r3.Norm(across), r3.Norm(up)
	if !level && up.Z < 0 {
		up = r3.Scale(-1, up)
	}
	// Of two edges that are not quite at right angles neither is preferred:
	// the bisector of across and of the normal to up is kept.
	a := r3.Unit(r3.Cross(out, up))
	a = r3.Unit(r3.Add(a, r3.Scale(sign(r3.Dot(a, across))/w, across)))
	a = r3.Unit(r3.Sub(a, r3.Scale(r3.Dot(a, out), out)))
	r := Rect{Across: a, Up: r3.Cross(a, out), Outward: out, WidthM: w, HeightM: h}
	r.Origin = r3.Sub(mid, r3.Add(r3.Scale(w/2, r.Across), r3.Scale(h/2, r.Up)))
	return r, nil
}

// outwardSide returns normal or its opposite.
func outwardSide(normal, hint r3.Vec) (r3.Vec, error) {
	if !usable(hint) {
		return r3.Vec{}, errors.New("outward: not a direction")
	}
	if hint == (r3.Vec{}) {
		return normal, nil
	}
	side := r3.Dot(normal, r3.Unit(hint))
	if math.Abs(normal.Z) > flatCos && math.Abs(side) < flatSin {
		side = normal.Z
	}
	if math.Abs(side) < minSide {
		return r3.Vec{}, errors.New("outward: cannot tell which side is outdoors, the direction given runs along the glass; give the azimuth to which the opening faces")
	}
	return r3.Scale(sign(side), normal), nil
}

func sign(x float64) float64 { return math.Copysign(1, x) }

// usable also refuses NaN.
func usable(v r3.Vec) bool {
	return math.Abs(v.X) <= maxCoordM && math.Abs(v.Y) <= maxCoordM && math.Abs(v.Z) <= maxCoordM
}

func point(v r3.Vec) string { return fmt.Sprintf("[%g, %g, %g]", v.X, v.Y, v.Z) }
