// Package soundness checks a built scene for what would make its results
// meaningless: viewpoints and sensors inside solids or out of doors, and
// openings that a wall or a second glass of the mesh stands in.
//
// Everything is found by looking along rays, with no knowledge of rooms: a
// mesh need not be closed, and its normals may point either way. Distances are
// metres in the model's frame.
package soundness
