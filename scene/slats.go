package scene

import (
	"math"
	"strings"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene/project"
	"squint/scene/system"
)

const (
	// texelsAcross a slat resolve the strip that the sun lights.
	texelsAcross = 8
	// maxTexelsOfSlats coarsens fine blinds, whose slats then share texels.
	maxTexelsOfSlats = 40000
)

// joinedPanes is the finish of an opening's glass. Two equal panes with
// nothing between them are one unit, since light keeps its polarisation from
// the one to the other; that is joined. Elsewhere it is the outer pane's own.
func (b *builder) joinedPanes(o *project.Opening) (finish string, joined bool) {
	for _, bl := range b.p.Blinds {
		if bl.Opening == o.Name && bl.Position == system.Between && !bl.Raised {
			return o.Glazing, false
		}
	}
	outer, ok1 := b.finish[o.Glazing]
	inner, ok2 := b.finish[o.InnerGlazing]
	if o.InnerGlazing == "" || !ok1 || !ok2 {
		return o.Glazing, false
	}
	first, ok1 := b.s.Finishes[outer].BSDF.(*materials.Glazing)
	second, ok2 := b.s.Finishes[inner].BSDF.(*materials.Glazing)
	if !ok1 || !ok2 {
		return o.Glazing, false
	}
	unit, ok := materials.Joined(first, second)
	if !ok {
		return o.Glazing, false
	}
	// No finish of the project has a line break in its name.
	name := o.Glazing + "\n" + o.InnerGlazing
	if _, ok := b.finish[name]; !ok {
		b.finish[name] = b.intern(o.Glazing+" and "+o.InnerGlazing+" as one unit", unit)
	}
	return name, true
}

// addInnerPane adds the second pane of opening k.
func (b *builder) addInnerPane(o *project.Opening, k int) {
	if o.InnerGlazing == "" {
		return
	}
	r := b.s.Openings[k].Rect
	r.Origin = r.Point(0, 0, -o.CavityM)
	part := b.part(Part{Name: o.Name + "/inner pane", Kind: Pane, Opening: k, TexelM: systemTexelM})
	b.addFaces(system.Pane(r, o.InnerGlazing), func(string) int32 { return part })
}

// addShelf builds a light shelf or a sill and returns false where it cannot.
func (b *builder) addShelf(table, name string, line, k int, s system.LightShelf) bool {
	s.FacetRad = b.facetRad(s.Top, s.Underside)
	faces, err := s.Build(b.s.Openings[k].Rect)
	if err != nil {
		b.failf(line, "%s %q: %v", table, name, err)
		return false
	}
	parts := map[string]int32{}
	b.addFaces(faces, func(part string) int32 {
		id, ok := parts[part]
		if !ok {
			id = b.part(Part{
				Name: name + strings.TrimPrefix(part, "shelf"),
				Kind: System, Opening: k, TexelM: shelfTexel(s),
			})
			parts[part] = id
		}
		return id
	})
	return true
}

// addSlats builds blinds and louvres, clear of shelves and of each other.
func (b *builder) addSlats(shelves map[string][]system.LightShelf) {
	for i := range b.p.Openings {
		o := &b.p.Openings[i]
		k, ok := b.opening(o.Name)
		if !ok {
			continue
		}
		r := b.s.Openings[k].Rect
		hung := b.p.HungAt(o, r.HeightM)
		for j, h := range hung {
			slats, ok := h.System.(system.Slats)
			if !ok {
				continue
			}
			slats.FacetRad = b.facetRad(slats.Upper, slats.Lower)
			faces, err := slats.Build(r)
			for _, other := range hung[:j] {
				if err == nil {
					err = system.Clash(slats, other.System, r)
				}
			}
			for _, s := range shelves[o.Name] {
				if err == nil {
					err = slats.Meets(s, r)
				}
			}
			if err != nil {
				b.failf(h.Line, "%s %q: %v", h.Table, h.Name, err)
				continue
			}
			if len(faces) == 0 {
				continue
			}
			area := 0.0
			for _, f := range faces {
				area += f.AreaM2()
			}
			// Long along the slats, whose light changes across them.
			across := slats.WidthM / texelsAcross
			along := math.Max(b.p.Simulation.TexelM, area/(across*maxTexelsOfSlats))
			part := b.part(Part{Name: h.Name, Kind: System, Opening: k, TexelM: across,
				Grid: &Grid{Axes: [3]r3.Vec{r.Across, r.Up, r.Outward}, EdgeM: [3]float64{along, across, across}}})
			rail := int32(-1)
			b.addFaces(faces, func(name string) int32 {
				if name == "slats" {
					return part
				}
				if rail < 0 {
					rail = b.part(Part{Name: h.Name + "/rail", Kind: System, Opening: k, TexelM: systemTexelM})
				}
				return rail
			})
		}
	}
}

// facetRad is how far facets of these finishes may be off a curve.
func (b *builder) facetRad(names ...string) float64 {
	for _, name := range names {
		for i := range b.p.Finishes {
			f := &b.p.Finishes[i]
			if f.Name == name && (f.Type == "mirror" || f.Type == "glossy" || b.facetRad(f.Base, f.Back) < system.MatteFacetRad) {
				return system.MirrorFacetRad
			}
		}
	}
	return system.MatteFacetRad
}

// sheet is the finish of a face, of both its sides.
func (b *builder) sheet(f *system.Face) (int32, bool) {
	front, ok := b.finish[f.Finish]
	if !ok || f.Back == "" {
		return front, ok
	}
	back, ok := b.finish[f.Back]
	if !ok {
		return 0, false
	}
	// No finish of the project has a line break in its name.
	name := f.Finish + "\n" + f.Back
	if id, ok := b.finish[name]; ok {
		return id, true
	}
	both, err := materials.NewTwoSided(b.s.Finishes[front].BSDF, b.s.Finishes[back].BSDF)
	if err != nil {
		b.failf(0, "finishes %q and %q of one sheet: %v", f.Finish, f.Back, err)
		return 0, false
	}
	id := b.intern(f.Finish+" and "+f.Back, both)
	b.finish[name] = id
	return id, true
}
