// Package export writes a built scene as files that CAD programs and viewers
// read: OBJ with MTL, binary STL and binary glTF.
//
// Lengths are metres. OBJ and STL keep the model's frame, z up; glTF is y up,
// as its standard demands: (x, y, z) becomes (x, z, -y). Vertex order is kept:
// the front of a triangle is the side from which its corners run
// counter-clockwise. OBJ holds coordinates in full; STL and glTF round them to
// single precision.
//
// A finish becomes a grey to look at, and how much shows through it: see
// Shade. No format here can carry a finish whole, so what is written is not
// meant to be computed with; OBJ names every part and finish so that a project
// can give them again.
//
// The same scene gives the same bytes.
package export
