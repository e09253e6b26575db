package project

import (
	"errors"
	"slices"

	"squint/scene/system"
)

// resolveReferences reports the names that no table defines.
func (r *reader) resolveReferences(p *Project) {
	types := map[string]string{}
	named := map[string][]string{} // by what they name
	note := func(noun, name string) bool {
		if name == "" || slices.Contains(named[noun], name) {
			return false
		}
		named[noun] = append(named[noun], name)
		return true
	}
	for _, f := range p.Finishes {
		if note("finish", f.Name) {
			types[f.Name] = f.Type
		}
	}
	for _, o := range p.Openings {
		note("opening", o.Name)
	}
	for _, v := range p.Viewpoints {
		note("viewpoint", v.Name)
	}
	for _, o := range p.Rooms {
		note(roomTable, o.Name)
	}
	for _, m := range Movables(p) {
		note(moving, m.Name)
	}
	for _, ref := range r.refs {
		known := named[ref.noun]
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
	mouths := r.mouths(p)
	for i, o := range p.Openings {
		n := r.openings[i]
		if o.MeshGroup != "" {
			if first, ok := glass[o.MeshGroup]; ok {
				r.reject(n, "opening", "mesh_group", "got %s, which is opening %s already", quote(o.MeshGroup), quote(first))
			}
			glass[o.MeshGroup] = o.Name
		}
		if o.HasCorners && o.MeshGroup == "" && !n.has("glazing") && !n.has("inner_glazing") && !mouths[o.Name] {
			r.reject(n, "opening", "glazing", "missing; want a finish's name in quotes")
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
			if _, err := s.SystemAt(p.opening(s.Opening)).Build(rect); err != nil {
				r.dimension(n, "light_shelf", err)
			}
		}
	}
	for i, s := range p.Sills {
		rect, ok := rects[s.Opening]
		if n := r.sills[i]; ok && !n.bad {
			if _, err := s.System().Build(rect); err != nil {
				r.dimension(n, "sill", err)
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
			cloth := ro.System("")
			cloth.CavityM = p.opening(ro.Opening).CavityM
			if err := cloth.Meets(s.SystemAt(p.opening(s.Opening)), rect); err != nil {
				r.dimension(n, "roller", err)
			}
		}
	}
	r.checkSlats(p, rects)
	r.checkAnidolic(p, rects)
}

// dimensionKeys are our keys of the dimensions that package system names.
var dimensionKeys = map[string]string{
	"height": "height_m", "outside depth": "outside_depth_m", "inside depth": "inside_depth_m",
	"outside tilt": "outside_tilt_deg", "inside tilt": "inside_tilt_deg", "thickness": "thickness_m",
	"extension": "extend_m", "gap": "gap_m", "drop": "drop", "opening": "opening",
	"stack": "stack", "spacing": "stack_spacing_m",
	"outside profile": "outside_profile", "outside sagitta": "outside_sagitta_m", "outside focus": "outside_focus_m", "outside polyline": "outside_polyline_m",
	"inside profile": "inside_profile", "inside sagitta": "inside_sagitta_m", "inside focus": "inside_focus_m", "inside polyline": "inside_polyline_m",
}

// dimensionKeysOf are those of one table where they differ.
var dimensionKeysOf = map[string]map[string]string{
	"sill":    {"outside depth": "depth_m", "outside tilt": "tilt_deg"},
	"blind":   {"low": "drop", "high": "drop"},
	"louvres": {"low": "bottom_m", "high": "top_m"},
}

// slatDimensionKeys are those of blinds and louvres.
var slatDimensionKeys = map[string]string{
	"position": "position", "width": "slat_width_mm", "pitch": "pitch_mm", "thickness": "thickness_mm", "sagitta": "sagitta_mm",
	"tilt": "tilt_deg", "cavity": "position", "gap": "gap_m", "side": "side_gap_m", "opening": "opening",
}

func (r *reader) dimension(n *node, section string, err error) {
	var d *system.DimensionError
	if errors.As(err, &d) {
		key, ok := dimensionKeysOf[section][d.Dimension]
		if !ok && (section == "blind" || section == "louvres") {
			key, ok = slatDimensionKeys[d.Dimension]
		}
		if !ok {
			key = dimensionKeys[d.Dimension]
		}
		r.reject(n, section, key, "%s", d.Message)
		return
	}
	r.reject(n, section, "", "%v", err)
}
