package sunpath

import (
	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/scene"
	"squint/trace"
)

// kind is what a line of sight ends at.
type kind int

// The kinds; light comes straight from the first three.
const (
	skyStraight kind = iota
	skyGlass
	skyCloth
	surroundings
	ground
	room
	shading
	kinds
)

// free reports that the line of sight reaches the sky.
func (k kind) free() bool { return k <= skyCloth }

// sight is the end of a straight line of sight. tau is the share of luminance
// that panes and cloths leave; part is what was met first of that kind, -1 for
// none, and normal its facing normal.
type sight struct {
	kind   kind
	tau    float64
	part   int32
	normal r3.Vec
}

// passes bounds the panes and cloths on one line of sight.
const passes = 64

// look follows the line of sight from p along unit dir through whatever light
// passes straight. A surface that passes light and scatters it is a cloth or a
// perforated sheet, one that only passes it is a pane.
func look(w *trace.World, p, dir r3.Vec) sight {
	s := sight{tau: 1, part: -1}
	cloth := false
	for range passes {
		h, ok := w.Closest(p, dir)
		if !ok {
			return s.beyond(w.Scene, dir)
		}
		_, through := h.BSDF.Delta(h.Side, h.Cos)
		if through <= 0 {
			if !cloth {
				s.part, s.normal = h.Part, h.Facing()
				s.kind = kindOf(w.Scene.Parts[h.Part].Kind)
				return s
			}
			s.kind = shading
			return s
		}
		if scatters(h.BSDF) && !cloth {
			cloth = true
			s.kind, s.part, s.normal = skyCloth, h.Part, h.Facing()
		} else if s.kind == skyStraight {
			s.kind, s.part = skyGlass, h.Part
		}
		s.tau *= through
		p = w.Offset(h.Point, r3.Scale(-1, h.Facing()))
	}
	s.kind = shading
	return s
}

// beyond ends a line of sight that met nothing more.
func (s sight) beyond(sc *scene.Scene, dir r3.Vec) sight {
	switch {
	case s.kind == skyCloth && (dir.Z <= 0 || hidden(sc, dir)):
		s.kind = shading
	case dir.Z <= 0:
		s.kind, s.part = ground, -1
	case hidden(sc, dir):
		s.kind, s.part = surroundings, -1
	}
	return s
}

// hidden tells directions without sky.
func hidden(sc *scene.Scene, dir r3.Vec) bool {
	return dir.Z <= 0 || sc.HasHorizon && sc.Horizon.Hides(dir)
}

func scatters(b materials.BSDF) bool {
	for _, side := range [2]materials.Side{materials.Front, materials.Back} {
		if rho, tau := b.Lambert(side); rho > 0 || tau > 0 {
			return true
		}
	}
	return false
}

func kindOf(k scene.Kind) kind {
	switch k {
	case scene.Surroundings:
		return surroundings
	case scene.GroundPlane:
		return ground
	case scene.Room:
		return room
	}
	return shading
}
