package project

var meshKeys = []key[Mesh]{
	{spec{name: "file", about: "STL or OBJ file, relative to this file's folder", required: true, form: filePath}, func(m *Mesh) any { return &m.File }},
	{spec{name: "unit", about: "length unit of the file, which does not say it", required: true, choices: []string{"m", "cm", "mm", "ft", "in"}}, func(m *Mesh) any { return &m.Unit }},
	{spec{name: "up", about: "the file's upward axis", required: true, choices: []string{"y", "z"}}, func(m *Mesh) any { return &m.Up }},
	{spec{name: "role", about: "what the mesh is", choices: []string{"room", "surroundings"}, def: `"room"`, source: own}, func(m *Mesh) any { return &m.Role }},
	{spec{name: "rotate_deg", about: "rotation about z, clockwise seen from above, before the move", in: anyAngle, def: "0", source: own}, func(m *Mesh) any { return &m.RotateDeg }},
	{spec{name: "translate_m", about: "move, after the rotation", in: coordinate, def: "[0, 0, 0]", source: own}, func(m *Mesh) any { return &m.TranslateM }},
	{spec{name: "finish", about: "of every group that finishes does not name", refers: "finish"}, func(m *Mesh) any { return &m.Finish }},
	{spec{name: "finishes", about: "finish of each group or material"}, func(m *Mesh) any { return &m.Finishes }},
}

func checkMesh(r *reader, n *node, m *Mesh) {
	m.Line = n.line
	if !n.has("finish") && !n.has("finishes") {
		r.reject(n, "mesh", "finish", "missing; want a finish for all of the mesh, or a [mesh.finishes] table")
	}
}
