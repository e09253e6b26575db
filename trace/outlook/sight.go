package outlook

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/scene"
	"squint/trace"
)

// layer is what a line of sight ends at.
type layer int

const (
	building layer = iota // the room, its systems, its own facade: no view
	sky
	landscape
	ground
)

// farM is how far the ground must be to count as landscape, own choice: from
// there on a plain shows what stands on it rather than its surface. It is the
// distance that EN 17037:2018 asks of the highest level of view out.
const farM = 50

// minTau is the share of light that must come straight for a line of sight to
// count as a view, own choice: glass lets it pass, a dense cloth does not.
const minTau = 0.1

// maxPanes ends lines of sight through pane after pane.
const maxPanes = 64

// look follows the line of sight from eye along unit dir through panes,
// perforations and cloth, tau being the share that comes straight. blockedM is
// the distance of the neighbouring object at which it ends; infinite for the
// sky, the skyline and the ground.
func look(w *trace.World, eye, dir r3.Vec) (seen layer, blockedM, tau float64) {
	tau = 1
	org, travelled := eye, 0.0
	for range maxPanes {
		h, ok := w.Closest(org, dir)
		if !ok {
			break
		}
		travelled += h.T
		if _, through := h.BSDF.Delta(h.Side, h.Cos); through > 0 {
			tau *= through
			org = w.Offset(h.Point, r3.Scale(-1, h.Facing()))
			continue
		}
		switch w.Scene.Parts[h.Part].Kind {
		case scene.Surroundings:
			return landscape, travelled, tau
		case scene.GroundPlane:
			return groundAt(travelled, dir), math.Inf(1), tau
		}
		return building, travelled, 0
	}
	switch {
	case w.Scene.HasHorizon && w.Scene.Horizon.Hides(dir):
		return landscape, math.Inf(1), tau
	case dir.Z >= 0:
		return sky, math.Inf(1), tau
	}
	return groundAt((w.Scene.GroundLevelM-eye.Z)/dir.Z, dir), math.Inf(1), tau
}

// groundAt is the layer of the ground that is met at a distance along dir.
func groundAt(distanceM float64, dir r3.Vec) layer {
	if distanceM*math.Hypot(dir.X, dir.Y) >= farM {
		return landscape
	}
	return ground
}
