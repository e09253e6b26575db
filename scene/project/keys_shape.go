package project

import "squint/scene/system"

// shapeKeys are the keys of the shape of one part of a light shelf.
func shapeKeys(part string, of func(*LightShelf) *ShelfShape) []key[LightShelf] {
	return []key[LightShelf]{
		{spec{name: part + "_profile", about: "shape of the top " + part + " seen along the opening; all but flat are hollows below the line from the glass to the far edge, whose tilt is " + part + "_tilt_deg", choices: []string{system.Flat, system.Arc, system.Parabola, system.Polyline}, def: `"flat"`, source: usual}, func(s *LightShelf) any { return &of(s).Profile }},
		{spec{name: part + "_sagitta_m", about: "of an arc or a parabola: depth of the hollow below that line", in: within{lo: 0.0001, hi: 2}}, func(s *LightShelf) any { return &of(s).SagittaM }},
		{spec{name: part + "_focus_m", about: "of a parabola, instead of the sagitta: focal length, the axis square on the middle of the line", in: within{lo: 0.01, hi: 1000}}, func(s *LightShelf) any { return &of(s).FocusM }},
		{spec{name: part + "_polyline_m", about: "of a polyline: points [distance from the plane of the glass along that line, height above it], from distance 0 to the depth, with rising slopes", in: within{lo: -5, hi: 5}}, func(s *LightShelf) any { return &of(s).PolylineM }},
	}
}

func checkShape(r *reader, n *node, part string, depthM float64, s ShelfShape) {
	const name = "light_shelf"
	profile, sagitta, focus, polyline := part+"_profile", part+"_sagitta_m", part+"_focus_m", part+"_polyline_m"
	if !n.good(profile, sagitta, focus, polyline) {
		return
	}
	needs := map[string][]string{system.Arc: {sagitta}, system.Parabola: {sagitta, focus}, system.Polyline: {polyline}}[s.Profile]
	given := 0
	for _, k := range []string{sagitta, focus, polyline} {
		if !n.has(k) {
			continue
		}
		fits := false
		for _, want := range needs {
			fits = fits || want == k
		}
		if !fits {
			r.reject(n, name, k, "got the %s %q; leave %s out, or give a profile that has it", profile, s.Profile, k)
			return
		}
		given++
	}
	switch {
	case len(needs) > 0 && given == 0:
		r.reject(n, name, needs[0], "missing; %s = %q needs it", profile, s.Profile)
	case given > 1:
		r.reject(n, name, focus, "got %s too; want one of the two", sagitta)
	case s.Profile != system.Flat && depthM == 0 && n.good(part+"_depth_m"):
		r.reject(n, name, profile, "got no %s_depth_m above 0; want that, or leave %s out", part, profile)
	}
}

func (s ShelfShape) system() system.Profile {
	return system.Profile{Shape: s.Profile, SagittaM: s.SagittaM, FocusM: s.FocusM, Points: s.PolylineM}
}
