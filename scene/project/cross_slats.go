package project

import (
	"errors"
	"math"

	"squint/scene/system"
)

// checkSlats builds blinds and louvres in every state, and looks for what is
// in their way. rects are the openings known from the file.
func (r *reader) checkSlats(p *Project, rects map[string]system.Rect) {
	nodes := map[string][]*node{"roller": r.rollers, "blind": r.blinds, "louvres": r.louvres}
	seen := map[string]int{}
	at := map[string][]*node{} // of what hangs at an opening, as HungAt lists it
	each := func(table string, i int, name, opening string) *node {
		n := nodes[table][i]
		if seen[name]++; seen[name] == 2 && name != "" && n.good("name") && !r.again(p, name) {
			r.reject(n, table, "name", "got %s again, want a name that no other roller, blind or louvres has", quote(name))
		}
		at[opening] = append(at[opening], n)
		return n
	}
	for i, ro := range p.Rollers {
		each("roller", i, ro.Name, ro.Opening)
	}
	for i, b := range p.Blinds {
		n := each("blind", i, b.Name, b.Opening)
		r.checkSlatSides(n, "blind", b.Slats, p)
		o := p.opening(b.Opening)
		if b.Position == system.Between && o.Name != "" && o.InnerGlazing == "" && n.good("opening", "position") {
			r.reject(n, "blind", "position", "got %q, but opening %s has no inner_glazing; want that there, and cavity_m", system.Between, quote(o.Name))
		}
		if rect, ok := rects[b.Opening]; ok && !n.bad {
			r.buildSlats(n, "blind", b.Slats, rect, func(s Slats) system.Slats {
				b.Slats, b.Raised = s, false
				return b.System(rect.HeightM, o.CavityM)
			})
		}
	}
	for i, l := range p.Louvres {
		n := each("louvres", i, l.Name, l.Opening)
		r.checkSlatSides(n, "louvres", l.Slats, p)
		if rect, ok := rects[l.Opening]; ok && !n.bad {
			r.buildSlats(n, "louvres", l.Slats, rect, func(s Slats) system.Slats {
				l.Slats = s
				return l.System(rect.HeightM, p.opening(l.Opening).CavityM)
			})
		}
	}
	for i := range p.Openings {
		o := &p.Openings[i]
		rect, ok := rects[o.Name]
		if !ok {
			continue
		}
		hung := p.HungAt(o, rect.HeightM)
		for k, h := range hung {
			n := at[o.Name][k]
			for j := range k {
				if n.bad || at[o.Name][j].bad {
					continue
				}
				if err := system.Clash(h.System, hung[j].System, rect); err != nil {
					r.dimension(n, h.Table, err)
				}
			}
			slats, ok := h.System.(system.Slats)
			for j, s := range p.LightShelves {
				if !ok || n.bad || s.Opening != o.Name || r.shelves[j].bad {
					continue
				}
				if err := slats.Meets(s.SystemAt(o), rect); err != nil {
					r.dimension(n, h.Table, err)
				}
			}
		}
	}
}

// again is whether two things of one table have that name, which was told.
func (r *reader) again(p *Project, name string) bool {
	var rollers, blinds, louvres int
	for _, x := range p.Rollers {
		if x.Name == name {
			rollers++
		}
	}
	for _, x := range p.Blinds {
		if x.Name == name {
			blinds++
		}
	}
	for _, x := range p.Louvres {
		if x.Name == name {
			louvres++
		}
	}
	return rollers > 1 || blinds > 1 || louvres > 1
}

// buildSlats tries every position.
func (r *reader) buildSlats(n *node, table string, s Slats, rect system.Rect, at func(Slats) system.Slats) {
	positions := s.positions()
	if len(positions) == 0 {
		positions = []SlatState{{TiltDeg: s.TiltDeg}}
	}
	for _, st := range positions {
		s.TiltDeg = st.TiltDeg
		x := at(s)
		x.FacetRad = system.MatteFacetRad // the dimensions do not depend on it
		_, err := x.Build(rect)
		if err == nil {
			continue
		}
		var d *system.DimensionError
		if n.has("states") && errors.As(err, &d) && d.Dimension == "tilt" {
			r.reject(n, table, "states", "%s: %s", quote(st.Name), d.Message)
		} else {
			r.dimension(n, table, err)
		}
		return
	}
}

// checkSlatSides wants two sides that let the same light through.
func (r *reader) checkSlatSides(n *node, table string, s Slats, p *Project) {
	find := func(name string) (f *Finish, whole bool) {
		for i := range p.Finishes {
			if p.Finishes[i].Name == name {
				return &p.Finishes[i], !r.finishes[i].bad
			}
		}
		return nil, name == ""
	}
	upper, ok1 := find(s.Upper)
	lower, ok2 := find(s.lower())
	if upper == nil || lower == nil || !ok1 || !ok2 || !n.good("upper", "lower") {
		return
	}
	const holed = "perforated"
	solid := math.Round(s.ThicknessMM*1e6) >= 2e6
	switch {
	case (upper.Type == holed || lower.Type == holed) && solid && n.good("thickness_mm"):
		r.reject(n, table, "thickness_mm", "got %g with a perforated finish; want less than 2, as perforated slats are sheets", s.ThicknessMM)
	case upper.Type != lower.Type && (upper.Type == holed || lower.Type == holed):
		r.reject(n, table, "lower", "got %s of type %q under %s of type %q; want both perforated, or neither", quote(lower.Name), lower.Type, quote(upper.Name), upper.Type)
	case upper.Type == holed:
		base1, ok1 := find(upper.Base)
		base2, ok2 := find(lower.Base)
		if !ok1 || !ok2 {
			return
		}
		if what := differing(passages(upper, base1), passages(lower, base2)); what != "" {
			r.reject(n, table, "lower", "got %s, which lets other light through: %s; want both sides to let the same through", quote(lower.Name), what)
		}
	}
}
