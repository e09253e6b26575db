// Package coeff traces the receivers: the pixels of a viewpoint's fisheye and
// the sensors of a work plane. What a receiver's paths meet does not depend on
// the hour, so it is traced once: directions to the sky with their throughput
// (part A), points on the first diffuse surface for the sun (part B) and the
// texels whose light the surface solution knows (part D). An hour is then a
// weighted sum.
//
// Samples are made in the batches of the surface solution; batch b of a
// receiver reads batch b of the surfaces.
//
// Units: weights are luminance per luminance for pixels and sr (illuminance
// per luminance) for sensors.
package coeff
