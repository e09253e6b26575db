// Package bvh finds the first triangle that a ray meets, or whether it meets
// any, in a fixed set of triangles.
//
// Coordinates are float32 in one common unit of length (metres elsewhere in
// squint). Triangles are two-sided. A ray is the set of points
// org + T*dir for tmin <= T <= tmax; dir need not be of unit length and T is
// counted in units of dir.
//
// Edges and vertices are closed: a ray through the common edge of two
// triangles with bit-equal vertices meets at least one of them.
package bvh
