// Package project reads the project file and says everything that is wrong
// with it.
//
// The file is TOML. Its tables and keys, their units, ranges, defaults and
// the sources of the defaults stand in one place, the key tables in
// keys.go and keys_*.go; validation, Defaults and the JSON Schema are all
// made from these. Keys carry their unit (depth_m, tilt_deg); lengths are in
// metres, those of perforated sheet in millimetres, angles in degrees,
// azimuths clockwise from north, z is up, and model +y is north unless
// north_deg says otherwise.
//
// Load reports every problem at once as Problems, ordered by line. It does
// not open the mesh and weather files that the project names.
package project
