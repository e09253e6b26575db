// Package picture makes luminance pictures of one moment, and plans of
// illuminance, finer than a year's fisheyes are.
//
// A Stage holds the exchange between the surfaces that a set of cameras may
// need; a Light is its solution for one moment; Render walks samples pixel by
// pixel, pass after pass. A sample follows mirrors and glass to the first
// diffuse surface and adds
//
//   - the sky in the direction in which the path leaves, continuous;
//   - the sun on that surface, by one shadow ray to a point of its disc;
//   - the sun that mirrors, glossy surfaces and panes throw there, from photons
//     shot anew in every pass, by their density within a radius that shrinks
//     from pass to pass (photon.go);
//   - all other light, by one ray gathered over the hemisphere, which reads the
//     solution only at the second surface, so that no texel shows, and goes on
//     where that surface is nearer than a texel's edge (gather.go). Gathered
//     light is averaged with that of pixels that see the same flat surface
//     nearby (filter.go).
//
// Passes come in eight batches; batch b reads batch b of the solution, so that
// the spread over batches holds the noise of samples, photons and texels. The
// sun's disc and its images in mirrors are not in the pixels: see annual.Discs.
//
// Every random stream is a hash of (seed, pixel or photon, pass); sums run in
// index order: the number of workers changes nothing.
//
// Units: cd/m2 and lx, metres, model frame.
package picture
