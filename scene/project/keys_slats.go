package project

import "squint/scene/system"

// tilts of slats from square to the glass.
var tilts = within{lo: -90, hi: 90}

// slatKeys are the keys of blinds and louvres; thickness is a default in
// millimetres.
func slatKeys[T any](of func(*T) *Slats, what string, positions []string, position, thickness, thicknessSource string) []key[T] {
	on := func(s spec, field func(*Slats) any) key[T] {
		return key[T]{s, func(t *T) any { return field(of(t)) }}
	}
	return []key[T]{
		on(spec{name: "name", about: "shown in results", required: true, form: itemName}, func(s *Slats) any { return &s.Name }),
		on(spec{name: "opening", about: "at which the " + what, required: true, refers: "opening"}, func(s *Slats) any { return &s.Opening }),
		on(spec{name: "position", about: "side of the glass", choices: positions, def: position, source: usual}, func(s *Slats) any { return &s.Position }),
		on(spec{name: "slat_width_mm", about: "of a slat, from edge to edge, in millimetres", required: true, in: within{lo: 3, hi: 1000}}, func(s *Slats) any { return &s.SlatWidthMM }),
		on(spec{name: "pitch_mm", about: "from slat to slat, in millimetres", required: true, in: within{lo: 1, hi: 5000}}, func(s *Slats) any { return &s.PitchMM }),
		on(spec{name: "thickness_mm", about: "of a slat, in millimetres; below 2 it is a sheet, from there on a closed body", in: within{lo: 0.01, hi: 200}, def: thickness, source: thicknessSource}, func(s *Slats) any { return &s.ThicknessMM }),
		on(spec{name: "sagitta_mm", about: "of a curved slat: by how much its middle lies above the line between its edges, in millimetres; negative for a hollow", in: within{lo: -300, hi: 300}, def: "0", source: own}, func(s *Slats) any { return &s.SagittaMM }),
		on(spec{name: "tilt_deg", about: "from square to the glass, which is level at upright glass; positive lifts the outer edge", in: tilts, def: "0", source: own}, func(s *Slats) any { return &s.TiltDeg }),
		on(spec{name: "gap_m", about: "between the glass and slats that stand square to it", in: within{lo: 0.001, hi: 5}, def: "0.02", source: usual}, func(s *Slats) any { return &s.GapM }),
		on(spec{name: "side_gap_m", about: "between the slats' ends and either side of the opening", in: within{hi: 5}, def: "0.005", source: usual}, func(s *Slats) any { return &s.SideGapM }),
		on(spec{name: "upper", about: "finish of the upper side", required: true, refers: "finish", types: board}, func(s *Slats) any { return &s.Upper }),
		on(spec{name: "lower", about: "finish of the lower side; else that of upper, with its back", refers: "finish", types: board}, func(s *Slats) any { return &s.Lower }),
		on(spec{name: "states", about: "the positions that the slats take, of which the first one stands"}, func(s *Slats) any { return &s.States }),
		on(spec{name: "follow", about: "instead of states: the slats follow the sun, so that none passes straight between them, or so that mirrored ones throw it onto the ceiling", choices: []string{system.CutOff, system.Redirect}}, func(s *Slats) any { return &s.Follow }),
		on(spec{name: "redirect_depth_m", about: "with follow redirect: from the glass to the far end of the ceiling", in: within{lo: 0.1, hi: 100}}, func(s *Slats) any { return &s.RedirectDepthM }),
		on(spec{name: "redirect_rise_m", about: "with follow redirect: height of the ceiling above the middle of the slats", in: within{lo: 0.01, hi: 50}}, func(s *Slats) any { return &s.RedirectRiseM }),
		on(spec{name: "steps", about: "with follow: number of tilts into which the sun's course is grouped", in: within{lo: 2, hi: 40}, def: "8", source: own}, func(s *Slats) any { return &s.Steps }),
	}
}

var slatStateKeys = []key[SlatState]{
	{spec{name: "name", about: "shown in results", required: true, form: itemName}, func(s *SlatState) any { return &s.Name }},
	{spec{name: "tilt_deg", about: "as of the slats", required: true, in: tilts}, func(s *SlatState) any { return &s.TiltDeg }},
}

var blindKeys = append(slatKeys(func(b *Blind) *Slats { return &b.Slats }, "blind is",
	[]string{system.Inside, system.Outside, system.Between}, `"inside"`, "0.2", usual),
	key[Blind]{spec{name: "drop", about: "share of the opening's height that is covered, from the top", in: share, def: "1", source: own}, func(b *Blind) any { return &b.Drop }},
	key[Blind]{spec{name: "raised", about: "whether the blind is drawn up", def: "false", source: own}, func(b *Blind) any { return &b.Raised }},
)

var louvresKeys = append(slatKeys(func(l *Louvres) *Slats { return &l.Slats }, "louvres are",
	[]string{system.Inside, system.Outside}, `"outside"`, "2", usual),
	key[Louvres]{spec{name: "bottom_m", about: "lower end of the louvres, above the opening's lower edge", in: within{hi: 20}, def: "0", source: own}, func(l *Louvres) any { return &l.BottomM }},
	key[Louvres]{spec{name: "top_m", about: "upper end; else the opening's top", in: within{hi: 20}}, func(l *Louvres) any { return &l.TopM }},
)

func checkBlind(r *reader, n *node, b *Blind) {
	checkSlatKeys(r, n, "blind", &b.Slats)
	r.blinds = append(r.blinds, n)
}

func checkLouvres(r *reader, n *node, l *Louvres) {
	checkSlatKeys(r, n, "louvres", &l.Slats)
	r.louvres = append(r.louvres, n)
	if l.TopM != nil && n.good("bottom_m", "top_m") && *l.TopM <= l.BottomM {
		r.reject(n, "louvres", "top_m", "got %g, want more than bottom_m, %g", *l.TopM, l.BottomM)
	}
}

func checkSlatKeys(r *reader, n *node, name string, s *Slats) {
	s.Line = n.line
	redirects := []string{"redirect_depth_m", "redirect_rise_m"}
	switch {
	case n.has("states") && n.has("follow"):
		r.reject(n, name, "follow", "got states too; want one of the two")
	case n.has("states") && n.has("tilt_deg"):
		r.reject(n, name, "tilt_deg", "got states too, which have their tilts; leave it out")
	case n.has("states") && len(s.States) == 0 && n.good("states"):
		r.reject(n, name, "states", "got none, want at least one")
	case n.has("steps") && !n.has("follow"):
		r.reject(n, name, "steps", "got no follow; want it, or no steps")
	}
	for _, k := range redirects {
		switch {
		case s.Follow == system.Redirect && !n.has(k):
			r.reject(n, name, k, "missing; follow = %q needs it", system.Redirect)
		case n.has(k) && s.Follow != system.Redirect && n.good("follow"):
			r.reject(n, name, k, "got no follow = %q; want that, or leave %s out", system.Redirect, k)
		}
	}
	for i, st := range s.States {
		if st.Name == RaisedState {
			r.reject(n, name, "states", "got the name %s, which is that of a blind drawn up; want another one", quote(st.Name))
		}
		for _, other := range s.States[:i] {
			if st.Name == other.Name && st.Name != "" {
				r.reject(n, name, "states", "got the name %s twice", quote(st.Name))
			}
		}
	}
	if len(s.States) > 0 {
		s.TiltDeg = s.States[0].TiltDeg
	}
}

// slatStates reads the list of states.
func (r *reader) slatStates(n *node, key string, wrong func() string, dst *[]SlatState) string {
	return tables(r, n, key, wrong, "{ name = \"open\", tilt_deg = 0 }", slatStateKeys, func(_ *node, st SlatState) { *dst = append(*dst, st) })
}
