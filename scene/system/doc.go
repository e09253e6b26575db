// Package system turns the dimensions of a daylighting system into
// triangles with finishes.
//
// Everything hangs on a Rect, the plane of an opening's glass. Lengths are in
// metres, angles in radians, z is up. A positive tilt lifts the outer edge,
// the edge toward outdoors, on either side of the glass. The front of a face
// is the side from which its corners run counter-clockwise.
package system
