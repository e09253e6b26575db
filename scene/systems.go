package scene

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene/project"
	"squint/scene/system"
)

// addSystems builds light shelves, sills, rollers, blinds and louvres at their
// openings.
func (b *builder) addSystems() {
	shelves := map[string][]system.LightShelf{}
	for i := range b.p.LightShelves {
		def := &b.p.LightShelves[i]
		k, ok := b.opening(def.Opening)
		if !ok {
			continue // the project's own check has said so
		}
		s := def.System()
		s.CavityM = b.cavityM(def.Opening)
		if b.addShelf("light_shelf", def.Name, def.Line, k, s) {
			shelves[def.Opening] = append(shelves[def.Opening], s)
		}
	}
	for i := range b.p.Sills {
		def := &b.p.Sills[i]
		if k, ok := b.opening(def.Opening); ok {
			b.addShelf("sill", def.Name, def.Line, k, def.System())
		}
	}
	for i := range b.p.Rollers {
		def := &b.p.Rollers[i]
		k, ok := b.opening(def.Opening)
		if !ok || !def.Drawn {
			continue
		}
		name := def.Cloth
		if name == "" {
			cloth, err := newCloth(def.Openness, def.DiffuseTransmittance, def.Reflectance, def.BackReflectance, def.CutOffDeg)
			if err != nil {
				b.failf(def.Line, "roller %q: %v", def.Name, err)
				continue
			}
			// No finish of the project has a line break in its name.
			name = "roller\n" + def.Name
			b.finish[name] = b.intern("roller "+def.Name, cloth)
		}
		ro := def.System(name)
		ro.CavityM = b.cavityM(def.Opening)
		r := b.s.Openings[k].Rect
		faces, err := ro.Build(r)
		for _, s := range shelves[def.Opening] {
			if err == nil {
				err = ro.Meets(s, r)
			}
		}
		if err != nil {
			b.failf(def.Line, "roller %q: %v", def.Name, err)
			continue
		}
		part := b.part(Part{Name: def.Name, Kind: System, Opening: k, TexelM: systemTexelM})
		b.addFaces(faces, func(string) int32 { return part })
	}
	b.addSlats(shelves)
}

// cavityM is the distance between the two panes of an opening, 0 for one.
func (b *builder) cavityM(opening string) float64 {
	for i := range b.p.Openings {
		if b.p.Openings[i].Name == opening {
			return b.p.Openings[i].CavityM
		}
	}
	return 0
}

// shelfTexel puts at least 4 texels across the shallower part of a shelf.
func shelfTexel(d system.LightShelf) float64 {
	least := math.Inf(1)
	for _, x := range []float64{d.OutsideDepthM, d.InsideDepthM} {
		if x > 0 {
			least = math.Min(least, x/4)
		}
	}
	return math.Min(systemTexelM, least)
}

// addReceivers places viewpoints and fills work planes with sensors.
func (b *builder) addReceivers() {
	for i := range b.p.Viewpoints {
		v := &b.p.Viewpoints[i]
		pos := vec(v.PositionM)
		var dir r3.Vec
		if v.TowardM != nil {
			dir = r3.Sub(vec(*v.TowardM), pos)
			if r3.Norm(dir) < 1e-6 {
				b.failf(v.Line, "viewpoint %q: toward_m is the position itself; want a point to look at", v.Name)
				continue
			}
			dir = r3.Unit(dir)
		} else if v.AzimuthDeg != nil {
			dir = project.Direction(*v.AzimuthDeg, v.PitchDeg, b.p.Site.NorthDeg)
		}
		b.s.Viewpoints = append(b.s.Viewpoints, Viewpoint{Name: v.Name, Position: pos, Direction: dir, Grid: v.Grid, Room: v.Room, Line: v.Line})
	}
	for i := range b.p.WorkPlanes {
		w, err := sensorGrid(&b.p.WorkPlanes[i])
		if err != nil {
			b.failf(w.Line, "work_plane %q: %v", w.Name, err)
			continue
		}
		b.s.WorkPlanes = append(b.s.WorkPlanes, w)
	}
}

func vec(a [3]float64) r3.Vec { return r3.Vec{X: a[0], Y: a[1], Z: a[2]} }

// didYouMean goes after an unknown name in a message that lists the known
// names itself.
func didYouMean(unknown string, known []string) string {
	if s := project.Suggest(unknown, known); s != "" {
		return fmt.Sprintf(" (did you mean %q?)", s)
	}
	return ""
}

func list(names []string) string {
	const most = 12
	if len(names) == 0 {
		return "(none)"
	}
	q := make([]string, 0, most)
	for i, n := range names {
		if i == most {
			q = append(q, fmt.Sprintf("and %d more", len(names)-most))
			break
		}
		q = append(q, fmt.Sprintf("%q", n))
	}
	return strings.Join(q, ", ")
}

func sortedKeys(m map[string]bool) []string {
	out := make([]string, 0, len(m))
	for k := range m {
		out = append(out, k)
	}
	sort.Strings(out)
	return out
}
