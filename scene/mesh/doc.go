// Package mesh reads triangles from STL and OBJ files.
//
// A mesh file carries neither a unit nor an up axis, so both must be stated
// (Options); what comes back is in metres with z up. Vertex order is kept:
// seen from the side its front faces, a triangle runs counter-clockwise.
// Normals, texture coordinates and colours in the file are not used.
//
// STL, binary and ASCII (3D Systems, "StereoLithography Interface
// Specification", 1989; from memory). Every solid of an ASCII file is a group
// of its own; unnamed solids and binary files are named after the file,
// without its extension. A second solid of the same name becomes "name 2".
//
// OBJ and MTL (Wavefront Technologies, "Advanced Visualizer Manual",
// appendix B1, Object Files; from memory). The group of a face is the last g
// since the last o; without one, the object o; without either, the file's base
// name. "g a b" puts faces in one group called "a b", since exporters also
// write names with blanks that way. Polygons are cut into triangles by ear
// clipping in their best-fit plane. Of an MTL file only the names of its
// materials are read: what a surface is made of is said in the project.
//
// Names that are not valid UTF-8 are read as Latin-1 (ISO 8859-1), the usual
// reason, and control characters become U+FFFD.
//
// What the user should know but what does not stop the work goes to
// Mesh.Notes; everything else wrong with a file is an error, mostly a
// *ParseError with file and line.
package mesh
