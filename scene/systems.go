package scene

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene/project"
	"squint/scene/system"
)

// addSystems builds the light shelves and rollers at their openings.
func (b *builder) addSystems() {
	shelves := map[string]system.LightShelf{}
	for i := range b.p.LightShelves {
		def := &b.p.LightShelves[i]
		k, ok := b.opening(def.Opening)
		if !ok {
			continue // the project's own check has said so
		}
		s := shelf(def)
		faces, err := s.Build(b.s.Openings[k].Rect)
		if err != nil {
			b.failf(def.Line, "light_shelf %q: %v", def.Name, err)
			continue
		}
		shelves[def.Opening] = s
		parts := map[string]int32{}
		b.addFaces(faces, func(name string) int32 {
			id, ok := parts[name]
			if !ok {
				id = b.part(Part{
					Name: def.Name + strings.TrimPrefix(name, "shelf"),
					Kind: System, Opening: k, TexelM: shelfTexel(def),
				})
				parts[name] = id
			}
			return id
		})
	}
	for i := range b.p.Rollers {
		def := &b.p.Rollers[i]
		k, ok := b.opening(def.Opening)
		if !ok || !def.Drawn {
			continue
		}
		cloth, err := materials.NewCloth(materials.Cloth{
			Openness:             def.Openness,
			DiffuseTransmittance: def.DiffuseTransmittance,
			ReflectanceFront:     def.Reflectance,
			ReflectanceBack:      def.Reflectance,
		})
		if err != nil {
			b.failf(def.Line, "roller %q: %v", def.Name, err)
			continue
		}
		name := "roller " + def.Name
		b.finish[name] = b.intern(name, cloth)
		ro := system.Roller{Outside: def.Position == "outside", Drop: def.Drop, GapM: def.GapM, Cloth: name}
		r := b.s.Openings[k].Rect
		faces, err := ro.Build(r)
		if err == nil {
			if s, ok := shelves[def.Opening]; ok {
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
}

func shelf(d *project.LightShelf) system.LightShelf {
	return system.LightShelf{
		HeightM:        d.HeightM,
		OutsideDepthM:  d.OutsideDepthM,
		InsideDepthM:   d.InsideDepthM,
		ThicknessM:     d.ThicknessM,
		OutsideTiltRad: d.OutsideTiltDeg * math.Pi / 180,
		InsideTiltRad:  d.InsideTiltDeg * math.Pi / 180,
		ExtendM:        d.ExtendM,
		GapM:           d.GapM,
		Top:            d.Top,
		Underside:      d.Underside,
	}
}

// shelfTexel puts at least 4 texels across the shallower part of a shelf.
func shelfTexel(d *project.LightShelf) float64 {
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
			dir = compass(*v.AzimuthDeg, b.p.Site.NorthDeg)
			s, c := math.Sincos(v.PitchDeg * math.Pi / 180)
			dir = r3.Vec{X: dir.X * c, Y: dir.Y * c, Z: s}
		}
		b.s.Viewpoints = append(b.s.Viewpoints, Viewpoint{Name: v.Name, Position: pos, Direction: dir, Line: v.Line})
	}
	for i := range b.p.WorkPlanes {
		w := sensorGrid(&b.p.WorkPlanes[i])
		if len(w.Sensors) == 0 {
			b.failf(w.Line, "work_plane %q: no sensor fits between the perimeter band of %g m and the outline with %.2g m spacing; want a larger outline, or smaller perimeter_m or spacing_m",
				w.Name, b.p.WorkPlanes[i].PerimeterM, w.SpacingM)
			continue
		}
		b.s.WorkPlanes = append(b.s.WorkPlanes, w)
	}
}

// compass is the level model direction of a compass azimuth in degrees.
func compass(azimuthDeg, northDeg float64) r3.Vec {
	s, c := math.Sincos((azimuthDeg - northDeg) * math.Pi / 180)
	return r3.Vec{X: s, Y: c}
}

func vec(a [3]float64) r3.Vec { return r3.Vec{X: a[0], Y: a[1], Z: a[2]} }

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
