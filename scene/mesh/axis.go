package mesh

import (
	"fmt"

	"gonum.org/v1/gonum/spatial/r3"
)

// Axis is the axis of a mesh file that points up. The zero value states none,
// which Read refuses.
type Axis int

// The axes that may point up.
const (
	NoAxis Axis = iota
	Y
	Z
)

// ParseAxis returns the axis called "y" or "z".
func ParseAxis(s string) (Axis, error) {
	switch s {
	case "y":
		return Y, nil
	case "z":
		return Z, nil
	}
	return NoAxis, fmt.Errorf("up: got %q, want \"y\" or \"z\"", s)
}

// String returns the name that ParseAxis reads, "" for no axis.
func (a Axis) String() string {
	switch a {
	case Y:
		return "y"
	case Z:
		return "z"
	}
	return ""
}

// turn brings a point of the file to z up. With y up, (x, y, z) becomes
// (x, -z, y): a rotation, so vertex order keeps its meaning.
func (a Axis) turn(p r3.Vec) r3.Vec {
	if a == Y {
		return r3.Vec{X: p.X, Y: 0 - p.Z, Z: p.Y} // 0 - z, not -z: no minus zero
	}
	return p
}
