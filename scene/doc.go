// Package scene turns a project into what the tracer works on: triangles with
// finishes and named parts, openings, receivers (viewpoints and sensors), and
// the year as a list of moments, each with its sun and sky.
//
// Frame: the model's own, in metres, z up. The model's +y axis points to the
// compass azimuth Project.Site.NorthDeg; suns, skies and the horizon are
// turned into the model frame here, once, so that nothing downstream knows
// about north. Angles are radians.
package scene
