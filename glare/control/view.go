package control

import (
	"math"

	"squint/scene"
	"squint/scene/project"
)

// ViewLeft is Losses.View from the dimensions of the systems: the share of the
// opening through which a look square to the glass passes straight. A drawn
// cloth leaves its openness, slats what they do not cover, where they hang;
// slats count as flat and closed. The duct of an anidolic ceiling has no view.
// By geometry, with no published source.
func ViewLeft(s *scene.Scene, units []Unit) func(unit, state int) float64 {
	heights := map[string]float64{}
	for _, o := range s.Openings {
		heights[o.Name] = o.Rect.HeightM
	}
	table := make([][]float64, len(units))
	for k, u := range units {
		for _, state := range u.States {
			p := project.WithStates(s.Project, map[string]string{u.Name: state})
			table[k] = append(table[k], viewLeft(p, u.Name, heights[u.Opening]))
		}
	}
	return func(unit, state int) float64 { return table[unit][state] }
}

func viewLeft(p *project.Project, name string, heightM float64) float64 {
	for _, ro := range p.Rollers {
		if ro.Name == name && ro.Drawn {
			return 1 - ro.Drop*(1-openness(p, ro))
		}
		if ro.Name == name {
			return 1
		}
	}
	for _, b := range p.Blinds {
		if b.Name == name && b.Raised {
			return 1
		}
		if b.Name == name {
			return 1 - b.Drop*covered(b.Slats)
		}
	}
	for _, l := range p.Louvres {
		if l.Name != name {
			continue
		}
		top := heightM
		if l.TopM != nil {
			top = *l.TopM
		}
		return 1 - (top-l.BottomM)/heightM*covered(l.Slats)
	}
	return 0
}

// covered is the share of a strip that its slats hide from a look square to the
// glass.
func covered(s project.Slats) float64 {
	sin, cos := math.Sincos(s.TiltDeg * math.Pi / 180)
	return math.Min(1, (s.SlatWidthMM*math.Abs(sin)+s.ThicknessMM*cos)/s.PitchMM)
}

// openness is the share of straight passage of a roller's cloth.
func openness(p *project.Project, ro project.Roller) float64 {
	if ro.Cloth == "" {
		return ro.Openness
	}
	for _, f := range p.Finishes {
		if f.Name == ro.Cloth {
			return f.Openness + f.OpenShare // of a cloth, or of a perforated sheet
		}
	}
	return 0
}
