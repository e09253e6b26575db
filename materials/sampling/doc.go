// Package sampling draws the random numbers of the light transport: seeded
// streams, Owen-scrambled Sobol points, and the warps that carry points of the
// unit square to directions, discs and triangles.
//
// Nothing here keeps state outside its values: a number depends on the keys it
// was asked for and on nothing else, so that a run gives the same bytes with
// one worker or sixteen.
//
// Conventions: directions are unit vectors in a local frame whose z axis is
// the surface normal or the axis of the cone; uniform numbers lie in [0, 1),
// and the warps also accept 1. Densities are per steradian (directions), per
// square metre (triangle) or per unit area (unit disc). Angles are in radians.
package sampling
