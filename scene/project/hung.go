package project

import "squint/scene/system"

// Hung is a roller, a blind or louvres as they hang at an opening.
type Hung struct {
	Table, Name string
	Line        int
	System      system.Hung
}

// HungAt lists what hangs at an opening of that height: rollers, blinds,
// louvres.
func (p *Project) HungAt(o *Opening, heightM float64) []Hung {
	var list []Hung
	for _, ro := range p.Rollers {
		if ro.Opening == o.Name {
			s := ro.System("")
			s.CavityM = o.CavityM
			list = append(list, Hung{"roller", ro.Name, ro.Line, s})
		}
	}
	for _, b := range p.Blinds {
		if b.Opening == o.Name {
			list = append(list, Hung{"blind", b.Name, b.Line, b.System(heightM, o.CavityM)})
		}
	}
	for _, l := range p.Louvres {
		if l.Opening == o.Name {
			list = append(list, Hung{"louvres", l.Name, l.Line, l.System(heightM, o.CavityM)})
		}
	}
	return list
}
