// Package materials describes how surfaces send light back and through: matte
// paint, mirrors, glazing, cloth, perforated sheet, diffusing panels, glossy
// metal.
//
// # Conventions
//
// All directions are unit vectors in the local frame of a surface, whose z
// axis is the geometric normal. wo points to the viewer, wi to the light, both
// away from the surface. Eval returns the BSDF per steradian and omits the
// cosine of wi; PDF is per steradian. Front is the side the geometric normal
// points to. A surface is thin: it has two sides, and light that passes goes
// straight on or is scattered on the other side, without an offset.
//
// Every finish is the sum of a Lambertian part (Lambert), parts that keep to a
// single direction (Delta: the mirror direction, and straight through) and, for
// some, a glossy lobe (Gloss). A transport method may so keep the Lambertian
// part in stored coefficients and follow the others by paths; Eval, PDF and
// Sample serve those that need the sum.
//
// Reflectances and transmittances are shares of the arriving luminous flux,
// photopic, 0 to 1. Angles are in radians. Values are checked by the New
// functions, which return *RangeError or an error that wraps one; a value made
// without them is not checked.
//
// All finishes are immutable after construction and safe for concurrent use.
package materials
