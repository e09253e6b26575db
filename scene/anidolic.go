package scene

import (
	"fmt"
	"strings"

	"squint/scene/project"
	"squint/scene/system"
)

// addAnidolicCeilings builds the anidolic ceilings. The pane of an opening
// that is a mouth is made anew, as large as the mouth; every outlet becomes an
// opening, so that rays are aimed at it.
func (b *builder) addAnidolicCeilings() {
	for i := range b.p.AnidolicCeilings {
		def := &b.p.AnidolicCeilings[i]
		k, ok := b.opening(def.Opening)
		if !ok {
			continue // the project's own check has said so
		}
		r := b.s.Openings[k].Rect
		c := def.System(b.glazing(def.Opening))
		c.FacetErrorRad = b.facetRad(def.Reflector)
		faces, err := c.Build(r)
		if err != nil {
			b.failf(def.Line, "anidolic_ceiling %q: %v", def.Name, err)
			continue
		}
		outlet, err := c.Outlet(r)
		if err != nil {
			b.failf(def.Line, "anidolic_ceiling %q: %v", def.Name, err)
			continue
		}
		pane := b.dropPane(k)
		parts := map[string]int32{}
		b.addFaces(faces, func(name string) int32 {
			if name == "pane" && pane >= 0 {
				return pane
			}
			id, ok := parts[name]
			if !ok {
				id = b.part(Part{Name: def.Name + strings.TrimPrefix(name, "anidolic"), Kind: System, Opening: k, TexelM: b.p.Simulation.TexelM})
				parts[name] = id
			}
			return id
		})
		b.noteOutlet(def, outlet)
		b.s.Openings = append(b.s.Openings, Opening{Name: def.Name + " outlet", Group: b.s.Openings[k].Group, Rect: outlet})
	}
}

// glazing is the finish of an opening's pane, "" for none.
func (b *builder) glazing(opening string) string {
	for i := range b.p.Openings {
		if b.p.Openings[i].Name == opening {
			return b.p.Openings[i].Glazing
		}
	}
	return ""
}

// dropPane takes the pane of opening k out of the scene and returns its part,
// -1 where there was none.
func (b *builder) dropPane(k int) int32 {
	part := int32(-1)
	kept := b.s.Triangles[:0]
	for _, t := range b.s.Triangles {
		if p := &b.s.Parts[t.Part]; p.Kind == Pane && p.Opening == k {
			part = t.Part
			continue
		}
		kept = append(kept, t)
	}
	b.s.Triangles = kept
	return part
}

// noteOutlet tells of an outlet whose middle is not over the rooms' meshes, as
// of a duct that is longer than the room is deep.
func (b *builder) noteOutlet(def *project.AnidolicCeiling, outlet system.Rect) {
	var room []Triangle
	for _, t := range b.s.Triangles {
		if b.s.Parts[t.Part].Kind == Room {
			room = append(room, t)
		}
	}
	if len(room) == 0 {
		return
	}
	box := bounds(room)
	m := outlet.Point(outlet.WidthM/2, outlet.HeightM/2, 0)
	if m.X < box.Min.X || m.X > box.Max.X || m.Y < box.Min.Y || m.Y > box.Max.Y || m.Z < box.Min.Z || m.Z > box.Max.Z {
		b.notef("anidolic_ceiling %q: the middle of its outlet, %s, lies outside the room meshes; shorten duct_length_m if that is wrong.", def.Name, fmt.Sprintf("[%.4g, %.4g, %.4g]", m.X, m.Y, m.Z))
	}
}
