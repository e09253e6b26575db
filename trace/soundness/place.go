package soundness

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"squint/materials"
	"squint/materials/sampling"
	"squint/scene"
	"squint/trace"
)

type where int

const (
	inRoom where = iota
	inSolid
	outdoors
	underground
	// thinShell is surrounded by the backs of surfaces that lie as far apart
	// as walls of a room.
	thinShell
)

// Bounds that tell the places apart. Common practice, no published source.
const (
	// wallM is the thickness up to which a closed solid is taken for a wall or
	// a piece of furniture rather than a room modelled inside out.
	wallM = 1.0
	// zenithRad is a cone about the zenith of which close before a high wall
	// half is sky, and 0.2 m from the open front of a room 1.6 m above the eye
	// 0.29: its section with a plane, a disc of radius tan 20 degrees, cut
	// at 0.2/1.6. zenithShare lies between.
	zenithRad   = 20 * math.Pi / 180
	zenithShare = 0.375
	// openShare of the upper hemisphere is more than a hole in a roof shows,
	// and less than a wall leaves.
	openShare = 0.25
	// backShare of the surfaces seen are backs within a solid. The rest are
	// fronts of another solid in the same place, where the two touch.
	backShare = 0.75
	// thinShare of the chords within a wall are shorter than wallM: of a slab
	// 0.67 m thick, h/cos(theta) < 1 m holds for 1 - h = 0.33 of all
	// directions. Near a corner of a room inside out far fewer are.
	thinShare = 0.33
	// seenShare of all directions must end at a surface to judge by its side.
	seenShare = 0.25
)

// maxLayers ends a look through more panes than any building has.
const maxLayers = 32

// sight is what a look in one direction ends at.
type sight struct {
	sky    bool // nothing opaque
	glazed bool // a pane or cloth was passed on the way
	hit    trace.Hit
	distM  float64
}

// look follows a ray through panes up to the first opaque surface.
func look(w *trace.World, p, d r3.Vec) sight {
	s := sight{}
	for range maxLayers {
		h, ok := w.Closest(p, d)
		if !ok {
			s.sky = true
			return s
		}
		s.distM += h.T
		if !passes(&h) {
			s.hit = h
			return s
		}
		s.glazed = true
		p = w.Offset(h.Point, d)
	}
	s.sky = true
	return s
}

// place looks around from p in a fixed set of directions. What is seen through
// a pane is seen from indoors: under a glass roof there is no open sky.
func place(w *trace.World, p r3.Vec) where {
	var v survey
	const pairs = 32
	for i := range pairs {
		a, b := sampling.OwenSobol2(uint32(i), 1)
		v.pair(w, p, sampling.UniformSphere(a, b))
	}
	for _, d := range []r3.Vec{{X: 1}, {Y: 1}, {Z: 1}} {
		v.pair(w, p, d)
	}
	switch {
	case v.soil*2 > v.up:
		return underground
	case float64(v.open) > openShare*float64(v.up) && skyAbove(w, p):
		return outdoors
	case float64(v.seen) < seenShare*float64(v.looks) || float64(v.backs) < backShare*float64(v.seen):
		return inRoom
	case float64(v.thin) >= thinShare*float64(v.chords) || v.strange*2 > v.backs:
		return inSolid
	}
	return thinShell
}

// survey sums up what is seen from a point.
type survey struct {
	looks, up  int
	open, soil int // upwards: open sky, the ground from below
	seen       int // opaque surfaces other than the ground
	backs      int // of them, from behind
	strange    int // of the backs, surroundings
	chords     int // pairs of opposite looks that both end at a back
	thin       int // of them, shorter than wallM from one to the other
}

// pair looks along d and against it: between two backs lies the inside of a
// solid.
func (v *survey) pair(w *trace.World, p, d r3.Vec) {
	chord, backs := 0.0, 0
	for _, d := range [2]r3.Vec{d, r3.Scale(-1, d)} {
		s := look(w, p, d)
		v.looks++
		if d.Z > 0 {
			v.up++
		}
		if s.sky {
			if d.Z > 0 && !s.glazed {
				v.open++
			}
			continue
		}
		kind, back := w.Scene.Parts[s.hit.Part].Kind, s.hit.Side == materials.Back
		if kind == scene.GroundPlane {
			if back && d.Z > 0 && !s.glazed {
				v.soil++
			}
			continue
		}
		v.seen++
		if !back {
			continue
		}
		v.backs++
		if kind == scene.Surroundings {
			v.strange++
		}
		chord, backs = chord+s.distM, backs+1
	}
	if backs == 2 {
		v.chords++
		if chord < wallM {
			v.thin++
		}
	}
}

// skyAbove reports whether the open sky fills its share of a cone about the
// zenith.
func skyAbove(w *trace.World, p r3.Vec) bool {
	const n = 32
	open := 0
	for i := range n {
		a, b := sampling.OwenSobol2(uint32(i), 2)
		if s := look(w, p, sampling.Cone(a, b, zenithRad)); s.sky && !s.glazed {
			open++
		}
	}
	return float64(open) > zenithShare*n
}

// passes reports whether the surface lets light straight through: a pane has
// no inside.
func passes(h *trace.Hit) bool {
	_, through := h.BSDF.Delta(h.Side, math.Max(h.Cos, 0.5))
	return through > 0
}
