package project

import (
	"errors"
	"slices"

	"squint/scene/system"
)

// resolveReferences reports the names that no table defines.
func (r *reader) resolveReferences(p *Project) {
	types := map[string]string{}
	var finishes, openings []string
	for _, f := range p.Finishes {
		if _, again := types[f.Name]; again || f.Name == "" {
			continue
		}
		finishes = append(finishes, f.Name)
		types[f.Name] = f.Type
	}
	for _, o := range p.Openings {
		if o.Name == "" || slices.Contains(openings, o.Name) {
			continue
		}
		openings = append(openings, o.Name)
	}
	for _, ref := range r.refs {
		known := finishes
		if ref.noun == "opening" {
			known = openings
		}
		if ref.at != nil && ref.at.bad {
			continue
		}
		switch {
		case ref.name == "" || !slices.Contains(known, ref.name):
			ref.mark()
			r.add(ref.line, ref.key, "got %s, want the name of %s; %s", quote(ref.name), article(ref.noun), DidYouMean(ref.name, known))
		case ref.noun != "finish":
		case ref.types != nil && types[ref.name] != "" && !slices.Contains(ref.types, types[ref.name]):
			ref.mark()
			r.add(ref.line, ref.key, "got %s, which is of type %q, want a finish of type %s", quote(ref.name), types[ref.name], oneOf(ref.types))
		}
	}
}

func (ref reference) mark() {
	if ref.at != nil {
		ref.at.bad = true
	}
}

// checkSystems builds what can be built from the file alone, so that
// impossible dimensions are told with their line.
func (r *reader) checkSystems(p *Project) {
	rects := map[string]system.Rect{}
	glass := map[string]string{}
	for i, o := range p.Openings {
		n := r.openings[i]
		if o.MeshGroup != "" {
			if first, ok := glass[o.MeshGroup]; ok {
				r.reject(n, "opening", "mesh_group", "got %s, which is opening %s already", quote(o.MeshGroup), quote(first))
			}
			glass[o.MeshGroup] = o.Name
		}
		if !o.HasCorners || !n.good("corners_m", "outward_deg") {
			continue
		}
		rect, err := o.Rect(p.Site.NorthDeg)
		if err != nil {
			r.reject(n, "opening", "corners_m", "%v", err)
			continue
		}
		rects[o.Name] = rect
	}
	for i, s := range p.LightShelves {
		rect, ok := rects[s.Opening]
		if n := r.shelves[i]; ok && !n.bad {
			if _, err := s.System().Build(rect); err != nil {
				r.dimension(n, "light_shelf", err)
			}
		}
	}
	for i, ro := range p.Rollers {
		n := r.rollers[i]
		for _, other := range p.Rollers[:i] {
			if ro.Opening == other.Opening && ro.Position == other.Position && n.good("opening", "position") {
				r.reject(n, "roller", "opening", "got a second roller %s of opening %s; want one on each side at most", ro.Position, quote(ro.Opening))
				break
			}
		}
		rect, ok := rects[ro.Opening]
		if !ok || n.bad {
			continue
		}
		for k, s := range p.LightShelves {
			if s.Opening != ro.Opening || r.shelves[k].bad {
				continue
			}
			if err := ro.System("").Meets(s.System(), rect); err != nil {
				r.dimension(n, "roller", err)
			}
		}
	}
}

// dimensionKeys are our keys of the dimensions that package system names.
var dimensionKeys = map[string]string{
	"height": "height_m", "outside depth": "outside_depth_m", "inside depth": "inside_depth_m",
	"outside tilt": "outside_tilt_deg", "inside tilt": "inside_tilt_deg", "thickness": "thickness_m",
	"extension": "extend_m", "gap": "gap_m", "drop": "drop", "opening": "opening",
}

func (r *reader) dimension(n *node, section string, err error) {
	var d *system.DimensionError
	if errors.As(err, &d) {
		r.reject(n, section, dimensionKeys[d.Dimension], "%s", d.Message)
		return
	}
	r.reject(n, section, "", "%v", err)
}
