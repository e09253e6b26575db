package project

import "fmt"

// checkSides reports the backs and bases that make no surface: finishes whose
// own back would never be seen, two sides that let different light through,
// and dirt that would count twice.
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
		r.checkBaseSoiling(n, f, base, find)
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

// checkBaseSoiling wants dirt on a perforated sheet or on its base, which stands
// for the same sheet, not on both.
func (r *reader) checkBaseSoiling(n *node, f, base *Finish, find map[string]*Finish) {
	if base == nil || !(f.LossPerMonth > 0) || !n.good("base", "loss_per_month") {
		return
	}
	for _, under := range []*Finish{base, find[base.Back]} {
		if under != nil && under.LossPerMonth > 0 {
			r.reject(n, "finish", "loss_per_month", "got %g, but the base's finish %s has a loss_per_month too, and both would count; leave one of the two out", f.LossPerMonth, quote(under.Name))
			return
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
	list := soilPassages(f, "")
	switch f.Type {
	case "diffuser":
		return append(list, passage{"diffuse_transmittance", f.DiffuseTransmittance})
	case "cloth":
		return append(list, passage{"openness", f.Openness}, passage{"diffuse_transmittance", f.DiffuseTransmittance}, passage{"cut_off_deg", f.CutOffDeg})
	case "glazing":
		list = append(list, passage{"transmittance", f.Transmittance}, passage{"panes", float64(f.Panes)}, passage{"number of rows", float64(len(f.Table))})
		for i, row := range f.Table {
			list = append(list, passage{fmt.Sprintf("angle in row %d", i+1), row[0]}, passage{fmt.Sprintf("transmittance in row %d", i+1), row[1]})
		}
		return list
	case "perforated":
		list = append(list, passage{"open_share", f.OpenShare}, passage{"hole_diameter_mm", f.HoleDiameterMM}, passage{"thickness_mm", f.ThicknessMM})
		if base == nil {
			return list
		}
		list = append(list, passage{"openness of the base", base.Openness},
			passage{"diffuse_transmittance of the base", base.DiffuseTransmittance}, passage{"cut_off_deg of the base", base.CutOffDeg})
		if base.Openness+base.DiffuseTransmittance > 0 {
			list = append(list, soilPassages(base, " of the base")...)
		}
		return list
	}
	return nil
}

// soilPassages: dirt takes from what passes, too. Without a loss the interval
// does not matter.
func soilPassages(f *Finish, of string) []passage {
	months := f.CleaningMonths
	if f.LossPerMonth == 0 {
		months = 0
	}
	return []passage{{"loss_per_month" + of, f.LossPerMonth}, {"cleaning_months" + of, float64(months)}}
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
