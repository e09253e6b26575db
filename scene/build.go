package scene

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io/fs"
	"math"
	"strings"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene/mesh"
	"squint/scene/project"
	"squint/scene/system"
)

// Texel edges by kind of part, metres. The room's own is the project's.
const (
	surroundingsTexelM = 1.0
	groundTexelM       = 2.0
	systemTexelM       = 0.1
	// groundReachM is how far around the project the ground is shaded by it.
	groundReachM = 30.0
	// groundGapM keeps the ground under a floor at the same level.
	groundGapM = 0.01
	// maxTexelsOfSurroundings coarsens large neighbourhoods.
	maxTexelsOfSurroundings = 20000
)

// Build reads the project's meshes and makes the scene. Every problem found
// is reported, joined.
func Build(fsys fs.FS, p *project.Project) (*Scene, error) {
	b := &builder{fsys: fsys, p: p, s: &Scene{Project: p}, finish: map[string]int32{}}
	b.s.GroundLevelM = p.Ground.LevelM
	b.s.GroundReflectance = p.Ground.Reflectance
	for i := range p.Finishes {
		b.addFinish(&p.Finishes[i])
	}
	if len(b.errs) > 0 {
		return nil, errors.Join(b.errs...)
	}
	b.noteSoiling()
	meshes := b.readMeshes()
	if len(b.errs) > 0 {
		return nil, errors.Join(b.errs...)
	}
	b.addOpenings(meshes)
	b.addSystems()
	b.addAnidolicCeilings()
	b.s.Bounds = bounds(b.s.Triangles)
	b.addGround()
	b.addReceivers()
	h, has, err := turnedHorizon(p)
	b.s.Horizon, b.s.HasHorizon = h, has
	b.fail(err)
	if len(b.errs) > 0 {
		return nil, errors.Join(b.errs...)
	}
	return b.s, nil
}

type builder struct {
	fsys   fs.FS
	p      *project.Project
	s      *Scene
	finish map[string]int32
	errs   []error
}

func (b *builder) fail(err error) {
	if err != nil {
		b.errs = append(b.errs, err)
	}
}

func (b *builder) failf(line int, format string, args ...any) {
	b.errs = append(b.errs, fmt.Errorf("%s:%d: %s", b.p.File, line, fmt.Sprintf(format, args...)))
}

func (b *builder) addFinish(f *project.Finish) {
	m, err := buildFinish(b.p, f)
	if err != nil {
		b.fail(err)
		return
	}
	b.finish[f.Name] = b.intern(f.Name, m)
}

func (b *builder) intern(name string, m materials.BSDF) int32 {
	b.s.Finishes = append(b.s.Finishes, Finish{Name: name, BSDF: m})
	return int32(len(b.s.Finishes) - 1)
}

func (b *builder) part(p Part) int32 {
	b.s.Parts = append(b.s.Parts, p)
	return int32(len(b.s.Parts) - 1)
}

// placed is a mesh with its position in the model applied.
type placed struct {
	m    *mesh.Mesh
	def  *project.Mesh
	skip map[int32]bool // groups replaced by an opening's glazing
}

func (b *builder) readMeshes() []*placed {
	var out []*placed
	for i := range b.p.Meshes {
		def := &b.p.Meshes[i]
		m, err := b.readMesh(def)
		if err != nil {
			b.fail(err)
			continue
		}
		out = append(out, &placed{m: m, def: def, skip: map[int32]bool{}})
	}
	for _, pm := range out {
		for k := range b.p.Openings {
			o := &b.p.Openings[k]
			if g := pm.m.GroupIndex(o.MeshGroup); o.MeshGroup != "" && g >= 0 && o.Glazing != "" {
				pm.skip[g] = true
			}
		}
		b.addMesh(pm)
	}
	return out
}

func (b *builder) readMesh(def *project.Mesh) (*mesh.Mesh, error) {
	unit, err := mesh.ParseUnit(def.Unit)
	if err != nil {
		return nil, fmt.Errorf("%s:%d: mesh: %w", b.p.File, def.Line, err)
	}
	up, err := mesh.ParseAxis(def.Up)
	if err != nil {
		return nil, fmt.Errorf("%s:%d: mesh: %w", b.p.File, def.Line, err)
	}
	m, err := mesh.Read(b.fsys, def.File, mesh.Options{Unit: unit, Up: up})
	if errors.Is(err, fs.ErrNotExist) {
		return nil, fmt.Errorf("%s:%d: mesh.file: %s is not there; paths count from the project file's folder", b.p.File, def.Line, def.File)
	}
	if err != nil {
		return nil, err
	}
	if def.Role == "room" {
		err = m.SizeProblem()
	} else {
		err = m.SizeProblemWithin(0.1, 20000, 1000)
	}
	if err != nil {
		return nil, fmt.Errorf("%s:%d: mesh: %w", b.p.File, def.Line, err)
	}
	turn := -def.RotateDeg * math.Pi / 180 // clockwise seen from above
	s, c := math.Sincos(turn)
	move := r3.Vec{X: def.TranslateM[0], Y: def.TranslateM[1], Z: def.TranslateM[2]}
	for i := range m.Triangles {
		for k, v := range m.Triangles[i].V {
			m.Triangles[i].V[k] = r3.Add(move, r3.Vec{X: c*v.X - s*v.Y, Y: s*v.X + c*v.Y, Z: v.Z})
		}
	}
	sum := MeshSummary{File: def.File, Role: def.Role, Triangles: len(m.Triangles), Degenerate: m.Degenerate, Bounds: m.Bounds()}
	if data, err := fs.ReadFile(b.fsys, def.File); err == nil {
		h := sha256.Sum256(data)
		sum.SHA256 = hex.EncodeToString(h[:])
	}
	b.s.Meshes = append(b.s.Meshes, sum)
	b.s.Notes = append(b.s.Notes, m.Notes...)
	return m, nil
}

// addMesh gives every group its finish and files its triangles.
func (b *builder) addMesh(pm *placed) {
	m, def := pm.m, pm.def
	byName := map[string]string{}
	meant := map[string]bool{} // what a mistyped name probably stands for
	for _, a := range def.Finishes {
		if m.GroupIndex(a.Name) < 0 && m.MaterialIndex(a.Name) < 0 {
			known := append(append([]string{}, m.Groups...), m.Materials...)
			hint := didYouMean(a.Name, known)
			meant[project.Suggest(a.Name, known)] = true
			missing := ""
			if m.MissingMTL != "" {
				missing = fmt.Sprintf("; the material library %s that the mesh names is not there", m.MissingMTL)
			}
			b.failf(a.Line, "mesh.finishes: %s has no group or material %q%s; it has groups %s and materials %s%s",
				def.File, a.Name, hint, list(m.Groups), list(m.Materials), missing)
			continue
		}
		byName[a.Name] = a.Finish
	}
	kind, texel := Room, b.p.Simulation.TexelM
	if def.Role == "surroundings" {
		kind = Surroundings
		texel = surroundingsTexelM
		var area float64
		for i := range m.Triangles {
			area += m.Triangles[i].Area()
		}
		texel = math.Max(texel, math.Sqrt(area/maxTexelsOfSurroundings))
	}
	partOf := map[[2]int32]int32{}
	bare := map[string]bool{}
	for i := range m.Triangles {
		t := &m.Triangles[i]
		if pm.skip[t.Group] {
			continue
		}
		group, material := m.Groups[t.Group], ""
		if t.Material >= 0 {
			material = m.Materials[t.Material]
		}
		// The group decides before the material, the mesh's own finish last.
		name, ok := byName[group]
		if !ok {
			name, ok = byName[material]
		}
		if !ok {
			name, ok = def.Finish, def.Finish != ""
		}
		if !ok && (meant[group] || (material != "" && meant[material])) {
			continue // one message for one slip
		}
		if !ok {
			label := group
			if material != "" {
				label += " (material " + material + ")"
			}
			bare[label] = true
			continue
		}
		f, ok := b.finish[name]
		if !ok {
			continue // the project's own check has said so
		}
		key := [2]int32{t.Group, f}
		part, ok := partOf[key]
		if !ok {
			part = b.part(Part{Name: group, Kind: kind, Opening: -1, TexelM: texel})
			partOf[key] = part
		}
		b.s.Triangles = append(b.s.Triangles, Triangle{V: t.V, Finish: f, Part: part})
	}
	if len(bare) > 0 {
		names := sortedKeys(bare)
		missing := ""
		if m.MissingMTL != "" {
			missing = fmt.Sprintf("; the material library %s that the mesh names is not there, so only names count", m.MissingMTL)
		}
		b.failf(def.Line, "mesh.finishes: %s: no finish for %s%s; name these groups or materials under [mesh.finishes], or give the mesh one finish; the project has finishes %s",
			def.File, strings.Join(names, ", "), missing, list(b.finishNames()))
	}
}

func (b *builder) finishNames() []string {
	var out []string
	for _, f := range b.p.Finishes {
		out = append(out, f.Name)
	}
	return out
}

func (b *builder) addOpenings(meshes []*placed) {
	for i := range b.p.Openings {
		o := &b.p.Openings[i]
		r, err := b.faceOpening(meshes, o)
		if err != nil {
			b.failf(o.Line, "opening %q: %v", o.Name, err)
			continue
		}
		b.s.Openings = append(b.s.Openings, Opening{Name: o.Name, Group: o.Group, Rect: r})
		if o.Glazing != "" {
			part := b.part(Part{Name: o.Name, Kind: Pane, Opening: len(b.s.Openings) - 1, TexelM: systemTexelM})
			unit, joined := b.joinedPanes(o)
			b.addFaces(system.Pane(r, unit), func(string) int32 { return part })
			if joined {
				continue
			}
		} else {
			b.ownGlass(o, len(b.s.Openings)-1)
		}
		b.addInnerPane(o, len(b.s.Openings)-1)
	}
}

// ownGlass makes the mesh's own glass of a group the pane of opening k.
func (b *builder) ownGlass(o *project.Opening, k int) {
	for i := range b.s.Triangles {
		t := &b.s.Triangles[i]
		part, f := &b.s.Parts[t.Part], &b.s.Finishes[t.Finish]
		if part.Name != o.MeshGroup || part.Kind == System {
			continue
		}
		_, scattered := f.BSDF.Lambert(materials.Front)
		if _, through := f.BSDF.Delta(materials.Front, 1); through <= 0 && scattered <= 0 {
			b.failf(o.Line, "opening %q: mesh_group: the mesh gives group %q the finish %q, which lets no light through; want a finish of type glazing there, or give glazing here", o.Name, o.MeshGroup, f.Name)
			return
		}
		part.Kind, part.Opening = Pane, k
	}
}

func (b *builder) addFaces(faces []system.Face, partOf func(string) int32) {
	for _, f := range faces {
		id, ok := b.sheet(&f)
		if !ok {
			continue // the project's own check has said so
		}
		b.s.Triangles = append(b.s.Triangles, Triangle{V: f.V, Finish: id, Part: partOf(f.Part)})
	}
}

func (b *builder) opening(name string) (int, bool) {
	for i := range b.s.Openings {
		if b.s.Openings[i].Name == name {
			return i, true
		}
	}
	return 0, false
}

func (b *builder) addGround() {
	s := b.s
	if len(s.Triangles) == 0 {
		b.fail(fmt.Errorf("%s: got no geometry, want at least one mesh with triangles", b.p.File))
		return
	}
	finish := b.intern("ground", groundFinish())
	part := b.part(Part{Name: "ground", Kind: GroundPlane, Opening: -1, TexelM: groundTexelM})
	room := s.Bounds
	lo := r3.Vec{X: room.Min.X - groundReachM, Y: room.Min.Y - groundReachM}
	hi := r3.Vec{X: room.Max.X + groundReachM, Y: room.Max.Y + groundReachM}
	// A wide neighbourhood is not carpeted whole: 300 m about its middle is
	// beyond what shades the ground that a window sees.
	const maxReach = 150.0
	mid := r3.Scale(0.5, r3.Add(lo, hi))
	lo.X, lo.Y = math.Max(lo.X, mid.X-maxReach), math.Max(lo.Y, mid.Y-maxReach)
	hi.X, hi.Y = math.Min(hi.X, mid.X+maxReach), math.Min(hi.Y, mid.Y+maxReach)
	z := s.GroundLevelM - groundGapM
	a, c := r3.Vec{X: lo.X, Y: lo.Y, Z: z}, r3.Vec{X: hi.X, Y: hi.Y, Z: z}
	d, e := r3.Vec{X: hi.X, Y: lo.Y, Z: z}, r3.Vec{X: lo.X, Y: hi.Y, Z: z}
	s.Triangles = append(s.Triangles,
		Triangle{V: [3]r3.Vec{a, d, c}, Finish: finish, Part: part},
		Triangle{V: [3]r3.Vec{a, c, e}, Finish: finish, Part: part})
}

func bounds(ts []Triangle) r3.Box {
	if len(ts) == 0 {
		return r3.Box{}
	}
	b := r3.Box{Min: ts[0].V[0], Max: ts[0].V[0]}
	for i := range ts {
		for _, v := range ts[i].V {
			b.Min = r3.Vec{X: math.Min(b.Min.X, v.X), Y: math.Min(b.Min.Y, v.Y), Z: math.Min(b.Min.Z, v.Z)}
			b.Max = r3.Vec{X: math.Max(b.Max.X, v.X), Y: math.Max(b.Max.Y, v.Y), Z: math.Max(b.Max.Z, v.Z)}
		}
	}
	return b
}
