// Package trace follows light through a built scene: closest hits with their
// finish and side, the share of light that passes straight along a segment,
// and a plain path tracer that serves as the oracle of everything faster.
//
// Units and frame are those of package scene: metres, model frame, z up.
// Luminance in cd/m2, illuminance in lx. Geometry is held in float32, sums
// run in float64. A direct sun is a disc of photometry.SunDiameterRad and is
// never found by chance: it is sampled wherever a diffuse surface is met.
package trace
