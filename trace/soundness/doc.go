// Package soundness checks a built scene for what would make its results
// meaningless: viewpoints and sensors inside solids or out of doors.
package soundness
