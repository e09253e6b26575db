package project

import "fmt"

// checkSides reports the backs and bases that make no surface: finishes whose
// own back would never be seen, and two sides that let different light
// through.
func (r *reader) checkSides(p *Project) {
	find := map[string]*Finish{}
	broken := map[string]bool{}
	for i := range p.Finishes {
		f := &p.Finishes[i]
		if f.Name != "" && find[f.Name] == nil {
			find[f.Name] = f
			broken[f.Name] = r.finishes[i].bad
		}
	}
	for i := range p.Finishes {
		f, n := &p.Finishes[i], r.finishes[i]
		back, base := find[f.Back], find[f.Base]
		if back == nil || !n.good("back", "base") {
			continue
		}
		backBase := find[back.Base]
		switch {
		case back.Back != "":
			r.reject(n, "finish", "back", "got %s, which has a back of its own; want a finish without", quote(f.Back))
		case backBase != nil && backBase.Back != "":
			r.reject(n, "finish", "back", "got %s, whose base %s has a back of its own; want a base without", quote(f.Back), quote(back.Base))
		case base != nil && base.Back != "":
			r.reject(n, "finish", "back", "got %s, but the base %s has a back too; leave one of the two out", quote(f.Back), quote(f.Base))
		case n.bad || broken[f.Back] || broken[f.Base] || broken[back.Base]:
			// What they let through is not known.
		default:
			if what := differing(passages(f, base), passages(back, backBase)); what != "" {
				r.reject(n, "finish", "back", "got %s, which lets other light through: %s; want both sides to let the same through", quote(f.Back), what)
			}
		}
	}
}

// passage is a value that decides what a finish lets through.
type passage struct {
	what  string
	value float64
}

// passages lists them, for finishes of one type in one order; none where the
// finish is opaque.
func passages(f, base *Finish) []passage {
	switch f.Type {
	case "diffuser":
		return []passage{{"diffuse_transmittance", f.DiffuseTransmittance}}
	case "cloth":
		return []passage{{"openness", f.Openness}, {"diffuse_transmittance", f.DiffuseTransmittance}, {"cut_off_deg", f.CutOffDeg}}
	case "glazing":
		list := []passage{{"transmittance", f.Transmittance}, {"panes", float64(f.Panes)}, {"number of rows", float64(len(f.Table))}}
		for i, row := range f.Table {
			list = append(list, passage{fmt.Sprintf("angle in row %d", i+1), row[0]}, passage{fmt.Sprintf("transmittance in row %d", i+1), row[1]})
		}
		return list
	case "perforated":
		list := []passage{{"open_share", f.OpenShare}, {"hole_diameter_mm", f.HoleDiameterMM}, {"thickness_mm", f.ThicknessMM}}
		if base == nil {
			return list
		}
		return append(list, passage{"openness of the base", base.Openness},
			passage{"diffuse_transmittance of the base", base.DiffuseTransmittance}, passage{"cut_off_deg of the base", base.CutOffDeg})
	}
	return nil
}

// differing says which value of the front is another one on the back; "" for
// none. Decimals written alike are equal.
func differing(front, back []passage) string {
	for i := range min(len(front), len(back)) {
		if front[i].value != back[i].value {
			return fmt.Sprintf("%s %g, here %g", front[i].what, back[i].value, front[i].value)
		}
	}
	return ""
}
