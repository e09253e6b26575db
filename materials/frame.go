package materials

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// Frame is a right-handed orthonormal frame whose N is the geometric normal.
type Frame struct {
	T, B, N r3.Vec
}

// NewFrame returns a frame about the unit vector n. T and B are arbitrary but
// always the same for the same n.
// Source: Duff, Burgess, Christensen, Hery, Kensler, Liani, Villemin, 2017,
// "Building an orthonormal basis, revisited", JCGT 6(1), listing 3.
func NewFrame(n r3.Vec) Frame {
	sign := math.Copysign(1, n.Z)
	a := -1 / (sign + n.Z)
	b := n.X * n.Y * a
	return Frame{
		T: r3.Vec{X: 1 + sign*n.X*n.X*a, Y: sign * b, Z: -sign * n.X},
		B: r3.Vec{X: b, Y: sign + n.Y*n.Y*a, Z: -n.Y},
		N: n,
	}
}

// ToLocal returns the world direction w in the frame.
func (f *Frame) ToLocal(w r3.Vec) r3.Vec {
	return r3.Vec{X: r3.Dot(w, f.T), Y: r3.Dot(w, f.B), Z: r3.Dot(w, f.N)}
}

// ToWorld returns the local direction w in the world.
func (f *Frame) ToWorld(w r3.Vec) r3.Vec {
	return r3.Vec{
		X: w.X*f.T.X + w.Y*f.B.X + w.Z*f.N.X,
		Y: w.X*f.T.Y + w.Y*f.B.Y + w.Z*f.N.Y,
		Z: w.X*f.T.Z + w.Y*f.B.Z + w.Z*f.N.Z,
	}
}
