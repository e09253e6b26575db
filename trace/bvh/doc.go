// Package bvh finds the first triangle that a ray meets, or whether it meets
// any, in a fixed set of triangles.
//
// # Conventions
//
// Coordinates are float32 in one common unit of length (metres elsewhere in
// squint). Triangles are two-sided. A ray is the set of points org + T*dir with
// tmin <= T <= tmax; dir need not be of unit length and T counts in units of
// dir. Coordinates up to 1e18 with details down to 1e-18 stay within float32's
// range; beyond it triangles may be missed, but nothing panics.
//
// Edges and vertices belong to the triangles: a ray through the common edge of
// two triangles with bit-equal vertices meets at least one of them. So no ray
// leaves a closed surface whose triangles share their vertices, if it starts
// inside. For a ray that starts on a triangle T is zero but for rounding, and
// the triangle is met or not.
//
// Of triangles at the same T the one with the lowest index is reported. The
// answer is the one that testing every triangle in turn gives, in every bit.
// The exceptions are triangles without area or seen so nearly edge-on that
// rounding puts their T outside their own box: about one ray in a million on
// sets made to provoke it.
//
// # Method
//
// A binary tree by binned surface area heuristic (Wald 2007) is made into a
// tree with eight children to a node and up to eight triangles to a leaf by
// dynamic programming (Ylitie, Karras and Laine 2017). Closest visits the
// children from near to far in an order that is stored for each of the eight
// octants of directions; Occluded visits leaves first, then the largest boxes.
// Triangles are tested by the watertight method of Woop, Benthin and Wald
// (2013).
//
// On amd64 with AVX2 the loops are assembly, eight children or triangles at a
// time; elsewhere, and with the build tag purego, they are Go. Both give the
// same bits, for neither fuses multiplications with additions: edge functions
// must only change their sign when two triangles share an edge. So FMA is
// neither used nor asked for.
package bvh
